//! Both methods on planted systems. Every run asserts its result.

use divan::Bencher;
use linform_ring::{Monomial, Polynomial};
use linform_scalar::{Integer, Rational, SplitMix, Stop, Unlimited};
use linform_solver::{
    Fraction, Outcome, Row, Solved, System, solve, solve_fraction_free, solve_modular, verify,
};

fn main() {
    divan::main();
}

type Solve = fn(&System, &dyn linform_scalar::Control) -> Result<Solved, Stop>;

/// A dense polynomial of this degree in each of the first `symbols` symbols.
fn dense(random: &mut SplitMix, symbols: usize, degree: u16, bits: u32) -> Polynomial {
    let side = usize::from(degree) + 1;
    Polynomial::from_terms((0..side.pow(symbols as u32)).map(|mut place| {
        let exponents: Vec<u16> = (0..symbols)
            .map(|_| {
                let exponent = (place % side) as u16;
                place /= side;
                exponent
            })
            .collect();
        let coefficient = Rational::from((random.next_word() as i64) >> (64 - bits));
        (
            Monomial::from_exponents(&exponents).expect("small"),
            coefficient,
        )
    }))
}

struct Planted {
    rows: usize,
    columns: usize,
    symbols: usize,
    degree: u16,
    bits: u32,
    /// In so many of the columns a row has an entry.
    filled: usize,
    /// Degree of the solution in every symbol; none for a right side without structure in the first rows, so
    /// that the solution is a quotient of determinants.
    solution: Option<u16>,
}

fn planted(shape: &Planted) -> (System, Option<Vec<Fraction>>) {
    let mut random = SplitMix::new(2024);
    let &Planted {
        columns,
        symbols,
        degree,
        bits,
        ..
    } = shape;
    let solution: Option<Vec<Polynomial>> = shape.solution.map(|degree| {
        (0..columns)
            .map(|_| dense(&mut random, symbols, degree, bits))
            .collect()
    });
    let mut system = System::new(columns);
    let mut first: Vec<Row> = Vec::new();
    for index in 0..shape.rows {
        let mut row = Row::default();
        if solution.is_none() && index >= columns {
            // A combination of two of the first rows keeps the system consistent.
            let (i, j) = (
                random.next_word() as usize % columns,
                random.next_word() as usize % columns,
            );
            let factor = Rational::from(1 + (random.next_word() % 9) as i64);
            row.right = &first[i].right + &first[j].right.scale(&factor);
            row.entries.extend(first[i].entries.iter().cloned());
            let scaled = first[j].entries.iter();
            row.entries
                .extend(scaled.map(|(column, entry)| (*column, entry.scale(&factor))));
            system.push(row);
            continue;
        }
        let first_place = random.next_word() as usize % columns;
        for place in first_place..first_place + shape.filled {
            row.entries
                .push((place % columns, dense(&mut random, symbols, degree, bits)));
        }
        row.right = match &solution {
            None => dense(&mut random, symbols, degree, bits),
            Some(solution) => row
                .entries
                .iter()
                .map(|(column, entry)| {
                    entry
                        .mul(&solution[*column], &Unlimited)
                        .expect("unlimited")
                })
                .fold(Polynomial::zero(), |sum, term| &sum + &term),
        };
        first.push(row.clone());
        system.push(row);
    }
    (
        system,
        solution.map(|solution| solution.into_iter().map(Fraction::from).collect()),
    )
}

fn bench(bencher: Bencher<'_, '_>, method: Solve, shape: &Planted) {
    let (system, solution) = planted(shape);
    bencher.bench_local(|| {
        let outcome = method(&system, &Unlimited).expect("unlimited").outcome;
        match (&outcome, &solution) {
            (Outcome::Unique(found), Some(planted)) => assert_eq!(found, planted),
            (Outcome::Unique(_), None) => {}
            _ => panic!("the planted solution is the only one"),
        }
        outcome
    });
    let outcome = method(&system, &Unlimited).expect("unlimited").outcome;
    assert_eq!(verify(&system, &outcome, &Unlimited), Ok(Ok(())));
}

macro_rules! shape {
    ($name:ident, $shape:expr) => {
        #[divan::bench_group(sample_count = 5)]
        mod $name {
            use super::*;
            #[divan::bench]
            fn fraction_free(bencher: Bencher<'_, '_>) {
                bench(bencher, solve_fraction_free, &$shape);
            }
            #[divan::bench]
            fn modular(bencher: Bencher<'_, '_>) {
                bench(bencher, solve_modular, &$shape);
            }
            #[divan::bench]
            fn chosen(bencher: Bencher<'_, '_>) {
                bench(bencher, solve, &$shape);
            }
        }
    };
}

// Over ℤ[t], degree 8, 40-bit coefficients.
shape!(
    polynomial_125_by_12,
    Planted {
        rows: 125,
        columns: 12,
        symbols: 1,
        degree: 8,
        bits: 40,
        filled: 12,
        solution: Some(8)
    }
);
shape!(
    rational_125_by_12,
    Planted {
        rows: 125,
        columns: 12,
        symbols: 1,
        degree: 8,
        bits: 40,
        filled: 12,
        solution: None
    }
);
// As comparing coefficients gives them: many sparse rows with short entries.
shape!(
    sparse_1500_by_40,
    Planted {
        rows: 1500,
        columns: 40,
        symbols: 1,
        degree: 3,
        bits: 12,
        filled: 8,
        solution: Some(10)
    }
);
shape!(
    two_symbols_200_by_10,
    Planted {
        rows: 200,
        columns: 10,
        symbols: 2,
        degree: 2,
        bits: 10,
        filled: 5,
        solution: Some(3)
    }
);
shape!(
    numbers_100_by_30,
    Planted {
        rows: 100,
        columns: 30,
        symbols: 0,
        degree: 0,
        bits: 20,
        filled: 30,
        solution: None
    }
);
shape!(
    small_12_by_3,
    Planted {
        rows: 12,
        columns: 3,
        symbols: 1,
        degree: 2,
        bits: 5,
        filled: 3,
        solution: Some(2)
    }
);
shape!(
    single_6_by_1,
    Planted {
        rows: 6,
        columns: 1,
        symbols: 1,
        degree: 2,
        bits: 5,
        filled: 1,
        solution: Some(2)
    }
);

#[divan::bench_group(sample_count = 3)]
mod long_numbers {
    use super::*;

    const SIZES: [(usize, u32); 6] = [
        (1, 130_000),
        (2, 20_000),
        (3, 2000),
        (5, 10_000),
        (10, 1000),
        (20, 300),
    ];

    /// Numbers of so many bits, so that the solution is a quotient of determinants.
    fn quotients(bencher: Bencher<'_, '_>, method: Solve, &(size, bits): &(usize, u32)) {
        let mut random = SplitMix::new(2025);
        let mut number = || {
            let words: Vec<u64> = (0..bits.div_ceil(64)).map(|_| random.next_word()).collect();
            Polynomial::constant(Integer::from_words(false, &words).into())
        };
        let mut system = System::new(size);
        for _ in 0..size {
            let entries = (0..size).map(|column| (column, number())).collect();
            system.push(Row {
                entries,
                right: number(),
            });
        }
        bencher.bench_local(|| method(&system, &Unlimited).expect("unlimited"));
        let outcome = method(&system, &Unlimited).expect("unlimited").outcome;
        assert_eq!(verify(&system, &outcome, &Unlimited), Ok(Ok(())));
    }

    #[divan::bench(args = SIZES)]
    fn fraction_free(bencher: Bencher<'_, '_>, shape: &(usize, u32)) {
        quotients(bencher, solve_fraction_free, shape);
    }

    #[divan::bench(args = [(3, 2000)])]
    fn modular(bencher: Bencher<'_, '_>, shape: &(usize, u32)) {
        quotients(bencher, solve_modular, shape);
    }

    #[divan::bench(args = SIZES)]
    fn chosen(bencher: Bencher<'_, '_>, shape: &(usize, u32)) {
        quotients(bencher, solve, shape);
    }
}
