//! Systems from text and from random numbers, and determinants by definition.

#![allow(dead_code)]

use linform_ring::{Monomial, Polynomial, Symbols};
use linform_scalar::{Rational, SplitMix, Unlimited};
use linform_solver::{
    Method, Outcome, Row, Solved, System, check_independence, solve, solve_fraction_free,
    solve_modular, verify,
};

pub(crate) fn symbols() -> Symbols {
    Symbols::new(vec![], Some("t".into()), vec!["a".into(), "b".into()])
}

pub(crate) fn read(text: &str) -> Polynomial {
    symbols().parse(text).unwrap()
}

/// Rows of texts, the right side last.
pub(crate) fn system(columns: usize, rows: &[&[&str]]) -> System {
    let mut system = System::new(columns);
    for row in rows {
        assert_eq!(row.len(), columns + 1);
        system.push(Row {
            entries: row[..columns]
                .iter()
                .enumerate()
                .map(|(j, text)| (j, read(text)))
                .collect(),
            right: read(row[columns]),
        });
    }
    system
}

pub(crate) fn product(a: &Polynomial, b: &Polynomial) -> Polynomial {
    a.mul(b, &Unlimited).unwrap()
}

/// A polynomial in the first `symbols` symbols with small random exponents and coefficients.
pub(crate) fn random_polynomial(
    random: &mut SplitMix,
    symbols: usize,
    degree: u64,
    bits: u32,
) -> Polynomial {
    let terms = if symbols == 0 {
        1
    } else {
        random.next_word() % 4
    };
    Polynomial::from_terms((0..terms).map(|_| {
        let exponents: Vec<u16> = (0..symbols)
            .map(|_| (random.next_word() % (degree + 1)) as u16)
            .collect();
        let coefficient = (random.next_word() as i64) >> (64 - bits);
        (
            Monomial::from_exponents(&exponents).unwrap(),
            Rational::from(coefficient),
        )
    }))
}

/// `Σ row·solution` by plain multiplication.
pub(crate) fn apply(entries: &[Polynomial], solution: &[Polynomial]) -> Polynomial {
    entries
        .iter()
        .zip(solution)
        .fold(Polynomial::zero(), |sum, (a, x)| &sum + &product(a, x))
}

pub(crate) fn push(system: &mut System, entries: &[Polynomial], right: Polynomial) {
    system.push(Row {
        entries: entries.iter().cloned().enumerate().collect(),
        right,
    });
}

/// Decides by every method; what they give is checked, and is the same.
pub(crate) fn decide_by_all(system: &System) -> Outcome {
    let modular = solve_modular(system, &Unlimited).unwrap();
    let fraction_free = solve_fraction_free(system, &Unlimited).unwrap();
    assert_eq!(modular.method, Method::Modular);
    assert_eq!(fraction_free.method, Method::FractionFree);
    assert_eq!(modular.outcome, fraction_free.outcome);
    assert_eq!(modular.independence, fraction_free.independence);
    let chosen = solve(system, &Unlimited).unwrap();
    assert_eq!(chosen.outcome, modular.outcome);
    check(system, &modular);
    modular.outcome
}

pub(crate) fn check(system: &System, solved: &Solved) {
    assert_eq!(verify(system, &solved.outcome, &Unlimited).unwrap(), Ok(()));
    match (&solved.outcome, &solved.independence) {
        (Outcome::Inconsistent(_), None) => {}
        (Outcome::Unique(solution), Some(witness)) => {
            assert_eq!(solution.len(), system.columns());
            assert_eq!(witness.rows.len(), system.columns());
            assert!(check_independence(system, witness));
        }
        (Outcome::Family { particular, kernel }, Some(witness)) => {
            assert_eq!(particular.len(), system.columns());
            assert_eq!(witness.rows.len() + kernel.len(), system.columns());
            assert!(!kernel.is_empty());
            assert!(check_independence(system, witness));
        }
        _ => panic!("a consistent system has a witness of its rank, an inconsistent one has none"),
    }
}

/// The determinant by expansion along the first row.
pub(crate) fn determinant(matrix: &[Vec<Polynomial>]) -> Polynomial {
    let Some((first, rest)) = matrix.split_first() else {
        return Polynomial::one();
    };
    let mut sum = Polynomial::zero();
    for (column, entry) in first.iter().enumerate() {
        let minor: Vec<Vec<Polynomial>> = rest
            .iter()
            .map(|row| {
                let mut row = row.clone();
                row.remove(column);
                row
            })
            .collect();
        let term = product(entry, &determinant(&minor));
        sum = if column % 2 == 0 {
            &sum + &term
        } else {
            &sum - &term
        };
    }
    sum
}

/// The rank as the largest order of a minor that is not 0, and the first such minor's rows and columns.
pub(crate) fn rank_by_minors(matrix: &[Vec<Polynomial>], columns: usize) -> usize {
    let largest = columns.min(matrix.len());
    (1..=largest)
        .rev()
        .find(|&order| {
            subsets(matrix.len(), order).iter().any(|rows| {
                subsets(columns, order).iter().any(|columns| {
                    let minor: Vec<Vec<Polynomial>> = rows
                        .iter()
                        .map(|&i| columns.iter().map(|&j| matrix[i][j].clone()).collect())
                        .collect();
                    !determinant(&minor).is_zero()
                })
            })
        })
        .unwrap_or(0)
}

fn subsets(of: usize, size: usize) -> Vec<Vec<usize>> {
    (0..1usize << of)
        .filter(|bits| bits.count_ones() as usize == size)
        .map(|bits| (0..of).filter(|i| bits >> i & 1 == 1).collect())
        .collect()
}
