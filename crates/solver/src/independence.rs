//! Witnesses of rank.

use crate::System;
use crate::profile::Profile;
use linform_ring::Polynomial;
use linform_scalar::PrimeField;

/// A square submatrix that is not singular modulo a prime at a point, and so not singular.
///
/// It shows that the rank is at least the number of its rows. With that many columns in the whole system it
/// shows that a solution is unique; with more, together with a kernel of as many vectors as are missing, that the
/// kernel is complete.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Independence {
    /// The rows of the submatrix, ascending.
    pub rows: Vec<usize>,
    /// The columns of the submatrix, ascending; as many as rows.
    pub columns: Vec<usize>,
    /// An odd prime below `2^62`.
    pub prime: u64,
    /// The residue, in `0..prime`, for every symbol that occurs in the system, by ascending index.
    pub point: Vec<(usize, u64)>,
}

impl Independence {
    pub(crate) fn of_profile(profile: &Profile) -> Independence {
        let mut point: Vec<(usize, u64)> = profile
            .point
            .iter()
            .map(|&(symbol, element)| (symbol, profile.field.value(element)))
            .collect();
        point.sort_unstable();
        Independence {
            rows: profile.rows.clone(),
            columns: profile.columns.clone(),
            prime: profile.field.prime(),
            point,
        }
    }
}

/// Is the submatrix what the witness says? Recomputed from the system; shares no code with how it was found.
///
/// `false` also for a witness that is not well formed: rows or columns repeated or out of range, a number that
/// is no odd prime below `2^62`, a symbol without a value.
///
/// # Complexity
///
/// One evaluation of every entry of the submatrix, and `rank³/3` products modulo the prime.
pub fn check_independence(system: &System, witness: &Independence) -> bool {
    let size = witness.rows.len();
    let ascending = |list: &[usize]| list.windows(2).all(|pair| pair[0] < pair[1]);
    let (Some(field), true) = (
        PrimeField::new(witness.prime),
        witness.columns.len() == size && ascending(&witness.rows) && ascending(&witness.columns),
    ) else {
        return false;
    };
    let mut matrix: Vec<Vec<u64>> = Vec::with_capacity(size);
    for &row in &witness.rows {
        let Some(row) = system.rows().get(row) else {
            return false;
        };
        let value = |&column: &usize| match row.entry(column) {
            Some(entry) => evaluate(entry, &field, &witness.point),
            None => (column < system.columns()).then_some(0),
        };
        match witness.columns.iter().map(value).collect() {
            Some(values) => matrix.push(values),
            None => return false,
        }
    }
    is_regular(&field, matrix)
}

/// The value of an integral polynomial, or nothing if a symbol has no value.
fn evaluate(polynomial: &Polynomial, field: &PrimeField, point: &[(usize, u64)]) -> Option<u64> {
    let mut sum = 0;
    for (monomial, coefficient) in polynomial.iter() {
        let mut term = field.element_of(coefficient);
        for symbol in 0..monomial.width() {
            let exponent = monomial.exponent(symbol);
            if exponent > 0 {
                let (_, value) = point.iter().find(|(of, _)| *of == symbol)?;
                term = field.mul(term, field.pow(field.element(*value), u64::from(exponent)));
            }
        }
        sum = field.add(sum, term);
    }
    Some(sum)
}

fn is_regular(field: &PrimeField, mut matrix: Vec<Vec<u64>>) -> bool {
    let size = matrix.len();
    for column in 0..size {
        let Some(pivot) = (column..size).find(|&row| matrix[row][column] != 0) else {
            return false;
        };
        matrix.swap(column, pivot);
        let (above, below) = matrix.split_at_mut(column + 1);
        let pivot = &above[column];
        let Some(inverse) = field.inverse(pivot[column]) else {
            return false;
        };
        for row in below {
            let factor = field.mul(row[column], inverse);
            for (value, &other) in row[column..].iter_mut().zip(&pivot[column..]) {
                *value = field.sub_product(*value, factor, other);
            }
        }
    }
    true
}
