//! Random systems: planted, deficient and contradictory, both methods against each other and against minors.

mod common;

use common::{apply, decide_by_all, push, random_polynomial, rank_by_minors};
use linform_ring::Polynomial;
use linform_scalar::SplitMix;
use linform_solver::{Outcome, System};
use proptest::prelude::*;

#[derive(Clone, Copy, Debug)]
struct Shape {
    seed: u64,
    symbols: usize,
    rows: usize,
    columns: usize,
}

fn shapes(rows: usize, columns: usize) -> impl Strategy<Value = Shape> {
    (any::<u64>(), 0usize..=3, 0..=rows, 0..=columns).prop_map(|(seed, symbols, rows, columns)| {
        Shape {
            seed,
            symbols,
            rows,
            columns,
        }
    })
}

/// Rows of which some are combinations of others.
fn random_matrix(shape: Shape, random: &mut SplitMix) -> Vec<Vec<Polynomial>> {
    let mut matrix: Vec<Vec<Polynomial>> = Vec::new();
    for _ in 0..shape.rows {
        let row = if !matrix.is_empty() && random.next_word().is_multiple_of(3) {
            let factor = random_polynomial(random, shape.symbols, 1, 3);
            let place = random.next_word() as usize % matrix.len();
            let (one, other) = (&matrix[place], &matrix[matrix.len() - 1]);
            one.iter()
                .zip(other)
                .map(|(a, b)| a + &common::product(b, &factor))
                .collect()
        } else {
            (0..shape.columns)
                .map(|_| random_polynomial(random, shape.symbols, 2, 5))
                .collect()
        };
        matrix.push(row);
    }
    matrix
}

fn system_of(matrix: &[Vec<Polynomial>], rights: &[Polynomial], columns: usize) -> System {
    let mut system = System::new(columns);
    for (row, right) in matrix.iter().zip(rights) {
        push(&mut system, row, right.clone());
    }
    system
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(24))]

    #[test]
    fn verdicts_are_those_of_the_minors(shape in shapes(4, 3), right_kind in 0u64..3) {
        let mut random = SplitMix::new(shape.seed);
        let matrix = random_matrix(shape, &mut random);
        let planted: Vec<Polynomial> =
            (0..shape.columns).map(|_| random_polynomial(&mut random, shape.symbols, 2, 4)).collect();
        let rights: Vec<Polynomial> = matrix
            .iter()
            .map(|row| match right_kind {
                0 => Polynomial::zero(),
                1 => apply(row, &planted),
                _ => random_polynomial(&mut random, shape.symbols, 2, 4),
            })
            .collect();
        let outcome = decide_by_all(&system_of(&matrix, &rights, shape.columns));
        let rank = rank_by_minors(&matrix, shape.columns);
        let augmented: Vec<Vec<Polynomial>> = matrix
            .iter()
            .zip(&rights)
            .map(|(row, right)| row.iter().chain([right]).cloned().collect())
            .collect();
        let consistent = rank_by_minors(&augmented, shape.columns + 1) == rank;
        match outcome {
            Outcome::Unique(_) => prop_assert!(consistent && rank == shape.columns),
            Outcome::Family { kernel, .. } => {
                prop_assert!(consistent);
                prop_assert_eq!(kernel.len(), shape.columns - rank);
            }
            Outcome::Inconsistent(_) => prop_assert!(!consistent),
        }
    }

    #[test]
    fn planted_solutions_come_back(shape in shapes(12, 4)) {
        let mut random = SplitMix::new(shape.seed);
        let matrix = random_matrix(shape, &mut random);
        let planted: Vec<Polynomial> =
            (0..shape.columns).map(|_| random_polynomial(&mut random, shape.symbols, 4, 40)).collect();
        let rights: Vec<Polynomial> = matrix.iter().map(|row| apply(row, &planted)).collect();
        match decide_by_all(&system_of(&matrix, &rights, shape.columns)) {
            Outcome::Unique(solution) => {
                let solution: Vec<Polynomial> =
                    solution.iter().filter_map(|x| x.is_polynomial()).collect();
                prop_assert_eq!(solution, planted);
            }
            Outcome::Family { .. } => {}
            Outcome::Inconsistent(_) => prop_assert!(false, "a planted solution was lost"),
        }
    }

    #[test]
    fn one_changed_right_side_is_noticed(shape in shapes(9, 3), place: usize) {
        let mut random = SplitMix::new(shape.seed);
        let matrix = random_matrix(shape, &mut random);
        let planted: Vec<Polynomial> =
            (0..shape.columns).map(|_| random_polynomial(&mut random, shape.symbols, 2, 9)).collect();
        let mut rights: Vec<Polynomial> = matrix.iter().map(|row| apply(row, &planted)).collect();
        if rights.is_empty() {
            return Ok(());
        }
        let place = place % rights.len();
        rights[place] = &rights[place] + &Polynomial::one();
        let others: Vec<Vec<Polynomial>> =
            matrix.iter().enumerate().filter(|(i, _)| *i != place).map(|(_, row)| row.clone()).collect();
        let outcome = decide_by_all(&system_of(&matrix, &rights, shape.columns));
        // The change shows exactly if the row depends on the others.
        if shape.rows <= 4 {
            let dependent =
                rank_by_minors(&others, shape.columns) == rank_by_minors(&matrix, shape.columns);
            prop_assert_eq!(matches!(outcome, Outcome::Inconsistent(_)), dependent);
        }
        if let Outcome::Inconsistent(certificate) = outcome {
            prop_assert!(certificate.multipliers.iter().any(|(row, _)| *row == place));
        }
    }
}
