//! Small systems whose outcomes are known.

mod common;

use common::{decide_by_all, read, system};
use linform_ring::Polynomial;
use linform_scalar::{Integer, Rational, Unlimited};
use linform_solver::{Certificate, Fraction, Outcome, Row, System};

fn fraction(numerator: &str, denominator: &str) -> Fraction {
    Fraction::new(read(numerator), read(denominator), &Unlimited)
        .unwrap()
        .unwrap()
}

fn polynomials(texts: &[&str]) -> Vec<Fraction> {
    texts.iter().map(|text| read(text).into()).collect()
}

#[test]
fn inverses_of_hilbert_matrices_are_those_of_the_formula() {
    // M.-D. Choi, Amer. Math. Monthly 90 (1983) 301–312: (H_n^{-1})_ij =
    // (−1)^{i+j} (i+j−1) C(n+i−1, n−j) C(n+j−1, n−i) C(i+j−2, i−1)^2.
    fn binomial(n: i64, k: i64) -> Integer {
        (0..k).fold(Integer::ONE, |product, i| {
            (product * Integer::from(n - i)).div_exact(&Integer::from(i + 1))
        })
    }
    for n in 1..=8i64 {
        for j in 1..=n {
            let mut hilbert = System::new(n as usize);
            for i in 1..=n {
                hilbert.push(Row {
                    entries: (1..=n)
                        .map(|k| {
                            let entry = Rational::new(1, i + k - 1).unwrap();
                            (k as usize - 1, Polynomial::constant(entry))
                        })
                        .collect(),
                    right: Polynomial::constant(Rational::from(i64::from(i == j))),
                });
            }
            let expected: Vec<Fraction> = (1..=n)
                .map(|i| {
                    let sign = if (i + j) % 2 == 0 { 1 } else { -1 };
                    let value = Integer::from(sign * (i + j - 1))
                        * binomial(n + i - 1, n - j)
                        * binomial(n + j - 1, n - i)
                        * binomial(i + j - 2, i - 1).pow(2);
                    Polynomial::constant(value.into()).into()
                })
                .collect();
            assert_eq!(decide_by_all(&hilbert), Outcome::Unique(expected));
        }
    }
}

#[test]
fn the_largest_entry_of_the_inverse_hilbert_matrix_of_order_ten_is_the_published_one() {
    let mut hilbert = System::new(10);
    for i in 0..10 {
        hilbert.push(Row {
            entries: (0..10)
                .map(|j| {
                    (
                        j,
                        Polynomial::constant(Rational::new(1, (i + j + 1) as i64).unwrap()),
                    )
                })
                .collect(),
            right: Polynomial::constant(Rational::from(i64::from(i == 6))),
        });
    }
    let Outcome::Unique(column) = decide_by_all(&hilbert) else {
        panic!("Hilbert matrices are not singular");
    };
    let largest = column
        .iter()
        .map(|x| x.is_polynomial().unwrap().as_constant().unwrap().abs())
        .max();
    assert_eq!(largest, Some(Rational::from(3_480_673_996_800i64)));
}

#[test]
fn polynomial_and_rational_solutions_are_found() {
    let polynomial = system(2, &[&["1", "t", "t^3 + 1"], &["t", "-1", "0"]]);
    let expected = vec![
        fraction("t^3 + 1", "t^2 + 1"),
        fraction("t^4 + t", "t^2 + 1"),
    ];
    assert_eq!(decide_by_all(&polynomial), Outcome::Unique(expected));
    let several = system(
        2,
        &[
            &["t - a", "b", "t^2 - a^2 + b/3"],
            &["a*b", "3*t^2", "a*b*t + a^2*b + t^2"],
            &[
                "t - a + a*b",
                "b + 3*t^2",
                "t^2 - a^2 + b/3 + a*b*t + a^2*b + t^2",
            ],
        ],
    );
    let expected = polynomials(&["t + a", "1/3"]);
    assert_eq!(decide_by_all(&several), Outcome::Unique(expected));
    let cramer = system(
        3,
        &[
            &["a", "b", "t", "1"],
            &["t", "a", "b", "0"],
            &["b", "t", "a", "0"],
        ],
    );
    // A circulant: the determinant is a³ + b³ + t³ − 3abt.
    let denominator = "a^3 + b^3 + t^3 - 3*a*b*t";
    let expected = vec![
        fraction("a^2 - b*t", denominator),
        fraction("b^2 - a*t", denominator),
        fraction("t^2 - a*b", denominator),
    ];
    assert_eq!(decide_by_all(&cramer), Outcome::Unique(expected));
}

#[test]
fn a_family_uses_the_earliest_columns_and_has_a_primitive_kernel() {
    // Column 2 is t times column 1 plus half of column 0.
    let family = system(
        4,
        &[
            &["2", "a", "t*a + 1", "0", "4 + a"],
            &["2*t", "1", "2*t", "1", "4*t + 1"],
            &["0", "t", "t^2", "b", "t"],
            &["2", "a", "t*a + 1", "0", "4 + a"],
        ],
    );
    let expected = Outcome::Family {
        particular: polynomials(&["2", "1", "0", "0"]),
        kernel: vec![polynomials(&["-1", "-2*t", "2", "0"])],
    };
    assert_eq!(decide_by_all(&family), expected);
}

#[test]
fn an_inconsistent_system_carries_a_left_kernel_vector() {
    let contradictory = system(
        2,
        &[
            &["t", "1", "0"],
            &["t^2", "t", "0"],
            &["a", "b", "1"],
            &["2*t", "2", "3*b"],
        ],
    );
    let expected = Certificate {
        multipliers: vec![(0, read("2")), (3, read("-1"))],
        value: read("-3*b"),
    };
    assert_eq!(
        decide_by_all(&contradictory),
        Outcome::Inconsistent(expected)
    );
    let weights = system(
        2,
        &[&["t", "0", "1"], &["0", "t - 1", "1"], &["1", "1", "1"]],
    );
    let expected = Certificate {
        multipliers: vec![(0, read("t - 1")), (1, read("t")), (2, read("-t^2 + t"))],
        value: read("-t^2 + 3*t - 1"),
    };
    assert_eq!(decide_by_all(&weights), Outcome::Inconsistent(expected));
}

#[test]
fn systems_without_rows_columns_or_entries_are_decided() {
    let free = |n: usize| Outcome::Family {
        particular: vec![Fraction::zero(); n],
        kernel: (0..n)
            .map(|i| {
                let mut vector = vec![Fraction::zero(); n];
                vector[i] = Fraction::one();
                vector
            })
            .collect(),
    };
    assert_eq!(decide_by_all(&System::new(0)), Outcome::Unique(vec![]));
    assert_eq!(decide_by_all(&System::new(3)), free(3));
    let mut zero = System::new(2);
    zero.push(Row::default());
    zero.push(Row::default());
    assert_eq!(decide_by_all(&zero), free(2));
    let mut no_columns = System::new(0);
    no_columns.push(Row::default());
    assert_eq!(decide_by_all(&no_columns), Outcome::Unique(vec![]));
    no_columns.push(Row {
        entries: vec![],
        right: read("6*t"),
    });
    let certificate = Certificate {
        multipliers: vec![(1, Polynomial::one())],
        value: read("6*t"),
    };
    assert_eq!(
        decide_by_all(&no_columns),
        Outcome::Inconsistent(certificate)
    );
}

#[test]
fn a_right_side_of_zero_has_the_solution_zero() {
    let homogeneous = system(2, &[&["t", "1", "0"], &["1", "t", "0"], &["a", "a", "0"]]);
    assert_eq!(
        decide_by_all(&homogeneous),
        Outcome::Unique(vec![Fraction::zero(); 2])
    );
}

#[test]
fn columns_of_zeros_are_free() {
    let sparse = system(3, &[&["0", "t", "0", "t^2"], &["0", "a", "0", "a*t"]]);
    let expected = Outcome::Family {
        particular: polynomials(&["0", "t", "0"]),
        kernel: vec![polynomials(&["1", "0", "0"]), polynomials(&["0", "0", "1"])],
    };
    assert_eq!(decide_by_all(&sparse), expected);
}
