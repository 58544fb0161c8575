//! Fraction-free elimination.

use crate::fraction::quotient;
use crate::square::{Quotients, Square};
use linform_ring::Polynomial;
use linform_scalar::{Control, Stop};

/// Solves a square system by fraction-free elimination with exact division.
///
/// After `k` steps every entry is a minor of order `k + 1`, and the division by the pivot of the step before is
/// exact. A row without an entry in the pivot's column would only be multiplied by quotients of pivots; these
/// factors are put off until the row is used, which leaves sparse rows alone: with `p_s` the pivot of the step
/// at which the row was last computed, its entries at step `k` are `p_k/p_s` times those that are stored.
///
/// Pivots are chosen by size: fewest terms first, then the least fill-in (H. M. Markowitz, Management Sci. 3
/// (1957) 255–269), then the shortest coefficients.
///
/// # Complexity
///
/// At most `size²·(size + 3·rights)/3` updates of two products and one division each, on minors whose
/// degrees and lengths grow linearly with their order.
///
/// # References
///
/// E. H. Bareiss, Math. Comp. 22 (1968) 565–578.
pub(crate) fn solve_square(
    square: &Square<'_>,
    control: &dyn Control,
) -> Result<Vec<Quotients>, Stop> {
    let mut rows = dense_rows(square);
    let pivots = eliminate(&mut rows, square.size, smallest_pivot, control)?
        .expect("the matrix of a square system is not singular");
    back_substitute(&rows, &pivots, square, control)
}

/// A row at the step for which it was last computed.
struct PartialRow {
    entries: Vec<Polynomial>,
    /// The pivot of that step, by which the next update divides.
    divisor: Polynomial,
}

fn dense_rows(square: &Square<'_>) -> Vec<PartialRow> {
    let width = square.size + square.rights;
    let mut rows: Vec<PartialRow> = (0..square.size)
        .map(|_| PartialRow {
            entries: vec![Polynomial::zero(); width],
            divisor: Polynomial::one(),
        })
        .collect();
    for &(i, j, entry) in &square.entries {
        rows[i].entries[j] = entry.clone();
    }
    rows
}

/// The pivots' rows and columns in the order of their steps; nothing if the matrix is singular.
fn eliminate(
    rows: &mut [PartialRow],
    size: usize,
    choose: impl Fn(&[PartialRow], &[usize], &[usize]) -> Option<(usize, usize)>,
    control: &dyn Control,
) -> Result<Option<Vec<(usize, usize)>>, Stop> {
    let mut pivots: Vec<(usize, usize)> = Vec::with_capacity(size);
    let mut last_pivot = Polynomial::one();
    let mut open_rows: Vec<usize> = (0..size).collect();
    let mut open_columns: Vec<usize> = (0..size).collect();
    while !open_rows.is_empty() {
        let Some((row, column)) = choose(rows, &open_rows, &open_columns) else {
            return Ok(None);
        };
        bring_up(&mut rows[row], &last_pivot, control)?;
        open_rows.retain(|&other| other != row);
        open_columns.retain(|&other| other != column);
        pivots.push((row, column));
        let pivot_row = std::mem::take(&mut rows[row].entries);
        let pivot = &pivot_row[column];
        let live: Vec<usize> = (0..pivot_row.len())
            .filter(|j| *j >= size || open_columns.contains(j))
            .collect();
        for &other in &open_rows {
            let PartialRow { entries, divisor } = &mut rows[other];
            let head = std::mem::take(&mut entries[column]);
            if head.is_zero() {
                continue;
            }
            for &j in &live {
                control.proceed()?;
                let minor = match (entries[j].is_zero(), pivot_row[j].is_zero()) {
                    (true, true) => continue,
                    (false, true) => pivot.mul(&entries[j], control)?,
                    (true, false) => -&head.mul(&pivot_row[j], control)?,
                    (false, false) => {
                        &pivot.mul(&entries[j], control)? - &head.mul(&pivot_row[j], control)?
                    }
                };
                entries[j] = quotient(&minor, divisor, control)?;
            }
            *divisor = pivot.clone();
        }
        last_pivot = pivot.clone();
        rows[row].entries = pivot_row;
    }
    Ok(Some(pivots))
}

/// Brings a row to the step of the last pivot.
fn bring_up(
    row: &mut PartialRow,
    last_pivot: &Polynomial,
    control: &dyn Control,
) -> Result<(), Stop> {
    if row.divisor == *last_pivot {
        return Ok(());
    }
    for entry in &mut row.entries {
        if !entry.is_zero() {
            *entry = quotient(&entry.mul(last_pivot, control)?, &row.divisor, control)?;
        }
    }
    row.divisor = last_pivot.clone();
    Ok(())
}

/// Among the open rows and columns.
fn smallest_pivot(
    rows: &[PartialRow],
    open_rows: &[usize],
    open_columns: &[usize],
) -> Option<(usize, usize)> {
    let filled = |i: usize, j: usize| !rows[i].entries[j].is_zero();
    let in_column: Vec<usize> = open_columns
        .iter()
        .map(|&j| open_rows.iter().filter(|&&i| filled(i, j)).count())
        .collect();
    let mut best = None;
    for &i in open_rows {
        let in_row = open_columns.iter().filter(|&&j| filled(i, j)).count();
        for (&j, &in_column) in open_columns.iter().zip(&in_column) {
            let entry = &rows[i].entries[j];
            if entry.is_zero() {
                continue;
            }
            let fill = (in_row - 1) * (in_column - 1);
            let cost = (entry.len(), fill, entry.bits());
            if best.is_none_or(|(least, _, _)| cost < least) {
                best = Some((cost, i, j));
            }
        }
    }
    best.map(|(_, i, j)| (i, j))
}

/// Solves the triangular system. With `D` the last pivot, all `D·x` are polynomials by Cramer's rule.
fn back_substitute(
    rows: &[PartialRow],
    pivots: &[(usize, usize)],
    square: &Square<'_>,
    control: &dyn Control,
) -> Result<Vec<Quotients>, Stop> {
    let denominator = match pivots.last() {
        Some(&(row, column)) => rows[row].entries[column].clone(),
        None => Polynomial::one(),
    };
    let mut solutions = Vec::with_capacity(square.rights);
    for right in 0..square.rights {
        let mut numerators = vec![Polynomial::zero(); square.size];
        for (step, &(row, column)) in pivots.iter().enumerate().rev() {
            let entries = &rows[row].entries;
            let mut sum = denominator.mul(&entries[square.size + right], control)?;
            for &(_, later) in &pivots[step + 1..] {
                control.proceed()?;
                if !entries[later].is_zero() && !numerators[later].is_zero() {
                    sum = &sum - &entries[later].mul(&numerators[later], control)?;
                }
            }
            numerators[column] = quotient(&sum, &entries[column], control)?;
        }
        let quotients = Quotients {
            denominator: denominator.clone(),
            numerators,
        };
        solutions.push(in_lowest_terms(quotients, control)?);
    }
    Ok(solutions)
}

/// Divides by what denominator and all numerators share.
fn in_lowest_terms(quotients: Quotients, control: &dyn Control) -> Result<Quotients, Stop> {
    let mut common = quotients.denominator.primitive_part();
    for numerator in &quotients.numerators {
        if common.is_one() {
            break;
        }
        common = common.gcd(numerator, control)?;
    }
    let mut numerators = Vec::with_capacity(quotients.numerators.len());
    for numerator in &quotients.numerators {
        numerators.push(quotient(numerator, &common, control)?);
    }
    let denominator = quotient(&quotients.denominator, &common, control)?;
    Ok(Quotients {
        denominator,
        numerators,
    }
    .without_content())
}

#[cfg(test)]
mod tests {
    use super::*;
    use linform_scalar::{Rational, Unlimited};

    fn number(value: i64) -> Polynomial {
        Polynomial::constant(Rational::from(value))
    }

    /// The pivots when they are taken along the diagonal in order: the leading principal minors.
    fn leading_minors(matrix: &[&[i64]]) -> Vec<Polynomial> {
        let values: Vec<Vec<Polynomial>> = matrix
            .iter()
            .map(|row| row.iter().map(|&value| number(value)).collect())
            .collect();
        let size = values.len();
        let all = (0..size).flat_map(|i| (0..size).map(move |j| (i, j)));
        let entries = all
            .map(|(i, j)| (i, j, &values[i][j]))
            .filter(|(_, _, entry)| !entry.is_zero())
            .collect();
        let mut rows = dense_rows(&Square {
            size,
            rights: 0,
            entries,
        });
        let in_order = |_: &[PartialRow], rows: &[usize], columns: &[usize]| {
            Some((*rows.first()?, *columns.first()?))
        };
        let pivots = eliminate(&mut rows, size, in_order, &Unlimited)
            .unwrap()
            .unwrap();
        pivots
            .into_iter()
            .map(|(i, j)| rows[i].entries[j].clone())
            .collect()
    }

    #[test]
    fn pivots_are_the_leading_minors() {
        // E. H. Bareiss 1968: the pivots of fraction-free elimination are the leading principal minors.
        let matrix: [&[i64]; 4] = [&[2, 1, 3, 4], &[1, 5, 2, 2], &[3, 2, 7, 1], &[4, 2, 1, 8]];
        assert_eq!(leading_minors(&matrix), [2, 9, 22, -225].map(number));
        // The inverse of the Hilbert matrix of order 4 (M.-D. Choi, Amer. Math. Monthly 90 (1983) 301–312).
        let inverse: [&[i64]; 4] = [
            &[16, -120, 240, -140],
            &[-120, 1200, -2700, 1680],
            &[240, -2700, 6480, -4200],
            &[-140, 1680, -4200, 2800],
        ];
        let minors = [16, 4800, 864_000, 6_048_000].map(number);
        assert_eq!(leading_minors(&inverse), minors);
    }

    #[test]
    fn known_determinants_come_out_as_last_pivots() {
        let build = |size: usize, entry: &dyn Fn(usize, usize) -> i64| -> Polynomial {
            let rows: Vec<Vec<i64>> = (0..size)
                .map(|i| (0..size).map(|j| entry(i, j)).collect())
                .collect();
            let rows: Vec<&[i64]> = rows.iter().map(Vec::as_slice).collect();
            leading_minors(&rows).pop().unwrap()
        };
        let gcd = |mut a: usize, mut b: usize| {
            while b != 0 {
                (a, b) = (b, a % b);
            }
            a as i64
        };
        // Smith's determinant of gcd(i, j) is the product of Euler's function (OEIS A001088).
        let smith = [1, 1, 2, 4, 16, 32, 192, 768, 4608, 18432];
        // Hankel determinants of the Bell numbers are superfactorials (OEIS A000178); those of the Catalan
        // numbers are 1.
        let bell = [
            1, 1, 2, 5, 15, 52, 203, 877, 4140, 21147, 115_975, 678_570, 4_213_597,
        ];
        let superfactorials = [1, 1, 2, 12, 288, 34560, 24_883_200];
        let catalan = [
            1, 1, 2, 5, 14, 42, 132, 429, 1430, 4862, 16796, 58786, 208_012,
        ];
        for size in 1..=10 {
            let matrix = |i: usize, j: usize| gcd(i + 1, j + 1);
            assert_eq!(build(size, &matrix), number(smith[size - 1]));
            assert_eq!(build(size, &|i, j| i.min(j) as i64 + 1), number(1));
        }
        for size in 1..=7 {
            let matrix = |i: usize, j: usize| bell[i + j];
            assert_eq!(build(size, &matrix), number(superfactorials[size - 1]));
            assert_eq!(build(size, &|i, j| catalan[i + j]), number(1));
        }
    }
}
