//! Elimination of words.

use linform_scalar::PrimeField;

/// Solves `S·X = B` over a prime field in place: `matrix` holds `[S | B]` row by row, and afterwards `X` in the
/// place of `B`. The determinant; nothing if it is 0.
///
/// A row is multiplied by the pivot instead of divided by it: with a single reduction the two products cost
/// little more than one, and all divisions are left to one inversion at the end, which costs more than
/// the whole elimination of a small matrix.
pub(crate) fn eliminate(
    field: &PrimeField,
    matrix: &mut [u64],
    size: usize,
    rights: usize,
) -> Option<u64> {
    let width = size + rights;
    // The pivots, and the factor that the determinant has taken on.
    let mut divisors = Vec::with_capacity(size + 1);
    let mut determinant = field.one();
    let mut excess = field.one();
    for column in 0..size {
        let pivot_place = (column..size).find(|&row| matrix[row * width + column] != 0)?;
        let (above, below) = matrix.split_at_mut((column + 1) * width);
        let pivot_row = &mut above[column * width..];
        if pivot_place > column {
            let other = &mut below[(pivot_place - column - 1) * width..][..width];
            pivot_row[column..].swap_with_slice(&mut other[column..]);
            determinant = field.neg(determinant);
        }
        let pivot = pivot_row[column];
        determinant = field.mul(determinant, pivot);
        divisors.push(pivot);
        for row in below.chunks_exact_mut(width) {
            let head = row[column];
            if head == 0 {
                continue;
            }
            excess = field.mul(excess, pivot);
            let rest = row[column + 1..].iter_mut().zip(&pivot_row[column + 1..]);
            for (value, &other) in rest {
                *value = field.cross(*value, pivot, head, other);
            }
        }
    }
    divisors.push(excess);
    if !field.invert_all(&mut divisors) {
        return None;
    }
    for row in (0..size).rev() {
        let (above, below) = matrix.split_at_mut((row + 1) * width);
        let (factors, target) = above[row * width..].split_at_mut(size);
        for (&factor, other) in factors[row + 1..].iter().zip(below.chunks_exact(width)) {
            if factor == 0 {
                continue;
            }
            for (value, &other) in target.iter_mut().zip(&other[size..]) {
                *value = field.sub_product(*value, factor, other);
            }
        }
        for value in target {
            *value = field.mul(*value, divisors[row]);
        }
    }
    Some(field.mul(determinant, divisors[size]))
}

#[cfg(test)]
mod tests {
    use super::*;
    use linform_scalar::SplitMix;

    #[test]
    fn the_solution_multiplies_out_and_singular_matrices_are_told() {
        let field = PrimeField::new(101).unwrap();
        let mut random = SplitMix::new(5);
        let mut singular = 0;
        for size in 0..7 {
            for _ in 0..20 {
                let rights = 2;
                let width = size + rights;
                // Many zeros, so that rows are exchanged.
                let start: Vec<u64> = (0..size * width)
                    .map(|_| (random.next_word() % 101) * (random.next_word() % 2))
                    .collect();
                let mut work = start.clone();
                if eliminate(&field, &mut work, size, rights).is_none() {
                    singular += 1;
                    continue;
                }
                for i in 0..size {
                    for right in size..width {
                        let sum = (0..size).fold(0, |sum, j| {
                            field.add(
                                sum,
                                field.mul(start[i * width + j], work[j * width + right]),
                            )
                        });
                        assert_eq!(sum, start[i * width + right]);
                    }
                }
            }
        }
        assert!(singular > 5);
        let dependent = &mut [1, 2, 3, 0, 2, 4, 6, 0, 0, 1, 1, 0].map(|v| field.element(v));
        assert_eq!(eliminate(&field, dependent, 3, 1), None);
        let exchanged = &mut [0, 2, 1, 3, 0, 1].map(|v| field.element(v));
        // Rows (0, 2) and (3, 0): the determinant is −6.
        let determinant = eliminate(&field, exchanged, 2, 1).map(|d| field.value(d));
        assert_eq!(determinant, Some(95));
    }
}
