//! Integer matrices: Hermite and Smith forms.

use linform_scalar::Integer;

/// A lattice of integer row vectors, kept as a basis in echelon form.
///
/// *Invariant*: pivots are positive, stand in strictly rising columns, and every entry above a pivot lies in
/// `0..pivot` (the Hermite normal form, which is unique: H. Cohen, *A Course in Computational Algebraic
/// Number Theory*, section 2.4).
#[derive(Clone, Debug)]
pub(crate) struct Lattice {
    basis: Vec<Vec<Integer>>,
}

fn pivot(row: &[Integer]) -> Option<usize> {
    row.iter().position(|entry| !entry.is_zero())
}

/// `row − factor·other`.
fn subtract(row: &mut [Integer], factor: &Integer, other: &[Integer]) {
    if factor.is_zero() {
        return;
    }
    for (entry, subtrahend) in row.iter_mut().zip(other) {
        entry.sub_product(factor, subtrahend);
    }
}

impl Lattice {
    pub(crate) fn new() -> Lattice {
        Lattice { basis: Vec::new() }
    }

    pub(crate) fn basis(&self) -> &[Vec<Integer>] {
        &self.basis
    }

    /// Adds one vector to the generators.
    pub(crate) fn insert(&mut self, mut row: Vec<Integer>) {
        let (mut place, mut changed) = (0, false);
        while let Some(column) = pivot(&row) {
            while self
                .basis
                .get(place)
                .is_some_and(|other| pivot(other) < Some(column))
            {
                place += 1;
            }
            match self.basis.get_mut(place) {
                Some(other) if pivot(other) == Some(column) => loop {
                    // Euclid's algorithm on the two pivots leaves the gcd in the basis and 0 in the row.
                    let quotient = row[column].div_rem_euclid(&other[column]).0;
                    subtract(&mut row, &quotient, other);
                    if row[column].is_zero() {
                        break;
                    }
                    std::mem::swap(other, &mut row);
                    changed = true;
                },
                _ => {
                    self.basis.insert(place, row);
                    changed = true;
                    break;
                }
            }
        }
        // Most vectors of a long list lie in the lattice already.
        if changed {
            self.reduce();
        }
    }

    /// Restores signs and sizes.
    fn reduce(&mut self) {
        for index in 0..self.basis.len() {
            let (above, rest) = self.basis.split_at_mut(index);
            let row = &mut rest[0];
            let Some(column) = pivot(row) else { continue };
            if row[column].is_negative() {
                for entry in row.iter_mut() {
                    *entry = -&*entry;
                }
            }
            for other in above {
                let quotient = other[column].div_rem_euclid(&row[column]).0;
                subtract(other, &quotient, row);
            }
        }
    }
}

/// The solutions of `A x ≡ 0`.
#[derive(Debug)]
pub(crate) struct Kernel {
    /// A basis of the integer vectors with `A x = 0`.
    pub(crate) free: Vec<Vec<Integer>>,
    /// Pairs `(m, x)` with `m > 1` and `A x ≡ 0 (mod m)`; with the free ones these generate the solutions for
    /// every modulus.
    pub(crate) torsion: Vec<(Integer, Vec<Integer>)>,
}

/// Kernel and torsion of a matrix with `columns` columns, from unimodular `U`, `V` with `U A V = diag(d)`:
/// column `i` of `V` solves the system modulo `d_i`, and exactly where `d_i = 0`.
///
/// Smith's form would also make each `d_i` divide the next; whoever splits the moduli into prime powers does
/// not need that (H. Cohen, loc. cit.).
pub(crate) fn kernel(rows: &[Vec<Integer>], columns: usize) -> Kernel {
    let mut matrix = rows.to_vec();
    // The columns of V, as rows.
    let mut basis: Vec<Vec<Integer>> = (0..columns)
        .map(|i| {
            (0..columns)
                .map(|j| Integer::from(i32::from(i == j)))
                .collect()
        })
        .collect();
    let mut diagonal = vec![Integer::ZERO; columns];
    let mut step = 0;
    while let Some((i, j)) = smallest(&matrix, step) {
        matrix.swap(step, i);
        for row in &mut matrix {
            row.swap(step, j);
        }
        basis.swap(step, j);
        if clear_column(&mut matrix, step) && clear_row(&mut matrix, &mut basis, step) {
            diagonal[step] = matrix[step][step].abs();
            step += 1;
        }
    }
    let mut result = Kernel {
        free: Vec::new(),
        torsion: Vec::new(),
    };
    for (modulus, vector) in diagonal.into_iter().zip(basis) {
        if modulus.is_zero() {
            result.free.push(vector);
        } else if !modulus.is_one() {
            result.torsion.push((modulus, vector));
        }
    }
    result
}

/// The place of an entry of least absolute value, beyond the first `step` rows and columns.
fn smallest(matrix: &[Vec<Integer>], step: usize) -> Option<(usize, usize)> {
    let places = (step..matrix.len()).flat_map(|i| (step..matrix[i].len()).map(move |j| (i, j)));
    places
        .filter(|&(i, j)| !matrix[i][j].is_zero())
        .min_by_key(|&(i, j)| matrix[i][j].abs())
}

/// Subtracts multiples of row `step` from the rows below; whether nothing is left in its column.
fn clear_column(matrix: &mut [Vec<Integer>], step: usize) -> bool {
    let (head, below) = matrix.split_at_mut(step + 1);
    let pivot_row = &head[step];
    let mut clear = true;
    for row in below {
        let quotient = row[step].div_rem_euclid(&pivot_row[step]).0;
        subtract(row, &quotient, pivot_row);
        clear &= row[step].is_zero();
    }
    clear
}

/// The same for columns, recorded in the basis.
fn clear_row(matrix: &mut [Vec<Integer>], basis: &mut [Vec<Integer>], step: usize) -> bool {
    let mut clear = true;
    for column in step + 1..basis.len() {
        let quotient = matrix[step][column].div_rem_euclid(&matrix[step][step]).0;
        if quotient.is_zero() && matrix[step][column].is_zero() {
            continue;
        }
        for row in matrix.iter_mut() {
            let subtrahend = &quotient * &row[step];
            row[column] -= subtrahend;
        }
        let source = basis[step].clone();
        subtract(&mut basis[column], &quotient, &source);
        clear &= matrix[step][column].is_zero();
    }
    clear
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn matrices() -> impl Strategy<Value = (usize, Vec<Vec<i32>>)> {
        (1usize..5).prop_flat_map(|columns| {
            let rows =
                proptest::collection::vec(proptest::collection::vec(-6i32..7, columns), 0..5);
            (Just(columns), rows)
        })
    }

    fn integers(rows: &[Vec<i32>]) -> Vec<Vec<Integer>> {
        rows.iter()
            .map(|row| row.iter().map(|&x| Integer::from(x)).collect())
            .collect()
    }

    fn dot(row: &[Integer], vector: &[Integer]) -> Integer {
        row.iter().zip(vector).map(|(a, b)| a * b).sum()
    }

    proptest! {
        #![proptest_config(crate::testing::cases(96))]

        #[test]
        fn kernel_vectors_solve_the_system((columns, rows) in matrices()) {
            let rows = integers(&rows);
            let kernel = kernel(&rows, columns);
            for vector in &kernel.free {
                prop_assert!(rows.iter().all(|row| dot(row, vector).is_zero()));
            }
            for (modulus, vector) in &kernel.torsion {
                prop_assert!(rows.iter().all(|row| modulus.divides(&dot(row, vector))));
            }
        }

        #[test]
        fn kernel_counts_the_solutions_modulo_small_numbers((columns, rows) in matrices(), modulus in 2i32..5) {
            let rows = integers(&rows);
            let kernel = kernel(&rows, columns);
            let m = Integer::from(modulus);
            // Hom(⊕ℤ/d ⊕ ℤ^r, ℤ/m) has m^r ∏ gcd(d, m) elements.
            let free = m.pow(kernel.free.len() as u32);
            let expected = kernel.torsion.iter().fold(free, |count, (d, _)| count * d.gcd(&m));
            let mut found = 0;
            for code in 0..modulus.pow(columns as u32) {
                let vector: Vec<Integer> = (0..columns as u32).map(|i| Integer::from(code / modulus.pow(i) % modulus)).collect();
                found += i32::from(rows.iter().all(|row| m.divides(&dot(row, &vector))));
            }
            prop_assert_eq!(Integer::from(found), expected);
        }

        #[test]
        fn hermite_basis_is_reduced_and_does_not_depend_on_the_order((_, rows) in matrices()) {
            let rows = integers(&rows);
            let (mut forward, mut backward) = (Lattice::new(), Lattice::new());
            rows.iter().for_each(|row| forward.insert(row.clone()));
            rows.iter().rev().for_each(|row| backward.insert(row.clone()));
            prop_assert_eq!(forward.basis(), backward.basis());
            let pivots: Vec<usize> = forward.basis().iter().map(|row| pivot(row).unwrap()).collect();
            prop_assert!(pivots.windows(2).all(|pair| pair[0] < pair[1]));
            // Every generator lies in the lattice: adding it again changes nothing.
            let before = forward.basis().to_vec();
            rows.iter().for_each(|row| forward.insert(row.clone()));
            prop_assert_eq!(forward.basis(), &before[..]);
        }
    }
}
