//! Elimination of words.

use linform_scalar::PrimeField;

/// Solves `S·X = B` over a prime field in place: `matrix` holds `[S | B]` row by row, and afterwards `X` in the
/// place of `B`. `false` if `S` is singular.
pub(crate) fn eliminate(
    field: &PrimeField,
    matrix: &mut [u64],
    size: usize,
    rights: usize,
) -> bool {
    let width = size + rights;
    for column in 0..size {
        let Some(pivot) = (column..size).find(|&row| matrix[row * width + column] != 0) else {
            return false;
        };
        let (above, below) = matrix.split_at_mut((column + 1) * width);
        let pivot_row = &mut above[column * width..];
        if pivot > column {
            let other = &mut below[(pivot - column - 1) * width..][..width];
            pivot_row[column..].swap_with_slice(&mut other[column..]);
        }
        let Some(inverse) = field.inverse(pivot_row[column]) else {
            return false;
        };
        for value in &mut pivot_row[column..] {
            *value = field.mul(*value, inverse);
        }
        for row in below.chunks_exact_mut(width) {
            let head = row[column];
            if head == 0 {
                continue;
            }
            for (value, &other) in row[column..].iter_mut().zip(&pivot_row[column..]) {
                *value = field.sub_product(*value, head, other);
            }
        }
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
    }
    true
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
                if !eliminate(&field, &mut work, size, rights) {
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
        assert!(!eliminate(&field, dependent, 3, 1));
    }
}
