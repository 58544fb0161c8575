//! Determinants with known values, one leading minor after another, by the solver: Cramer's rule for the last unknown of
//! `A x = e_n` gives `det A_n = det A_{n−1} / x_n`.

use linform_ring::Polynomial;
use linform_scalar::{Integer, Rational, Unlimited};
use linform_solver::{Outcome, Row, System, solve_fraction_free, solve_modular};

/// The leading minors of an integer matrix, by both methods; none of them may be 0.
fn leading_minors(size: usize, entry: impl Fn(usize, usize) -> Rational) -> Vec<Rational> {
    let mut minors = Vec::new();
    let mut before = Rational::ONE;
    for order in 1..=size {
        let mut system = System::new(order);
        for i in 0..order {
            let entries = (0..order).map(|j| (j, Polynomial::constant(entry(i, j))));
            let right = if i + 1 == order {
                Polynomial::one()
            } else {
                Polynomial::zero()
            };
            system.push(Row {
                entries: entries.collect(),
                right,
            });
        }
        let last = |solve: fn(&System, &dyn linform_scalar::Control) -> _| {
            let solved: linform_solver::Solved = Result::unwrap(solve(&system, &Unlimited));
            match solved.outcome {
                Outcome::Unique(x) => x[order - 1].is_polynomial().unwrap().as_constant().unwrap(),
                other => panic!("order {order}: {other:?}"),
            }
        };
        let x = last(solve_fraction_free);
        assert_eq!(x, last(solve_modular));
        before = before.checked_div(&x).unwrap();
        minors.push(before.clone());
    }
    minors
}

fn integers(values: &[&str]) -> Vec<Rational> {
    values
        .iter()
        .map(|value| Rational::from(value.parse::<Integer>().unwrap()))
        .collect()
}

fn integer(value: u64) -> Rational {
    Rational::from(Integer::from(i64::try_from(value).unwrap()))
}

/// 1/det of the Hilbert matrix: sequence A005249 of the On-Line Encyclopedia of Integer Sequences.
#[test]
fn hilbert_determinants_are_those_of_the_encyclopedia() {
    let minors = leading_minors(10, |i, j| Rational::new(1, (i + j + 1) as i64).unwrap());
    let inverses: Vec<Rational> = minors.iter().map(|m| m.recip().unwrap()).collect();
    let expected = integers(&[
        "1",
        "12",
        "2160",
        "6048000",
        "266716800000",
        "186313420339200000",
        "2067909047925770649600000",
        "365356847125734485878112256000000",
        "1028781784378569697887052962909388800000000",
        "46206893947914691316295628839036278726983680000000000",
    ]);
    assert_eq!(inverses, expected);
}

/// The Hankel matrix of the Catalan numbers has determinant 1.
#[test]
fn hankel_determinants_of_catalan_numbers_are_one() {
    let mut catalan = vec![1u64];
    for n in 1..14 {
        catalan.push((0..n).map(|k| catalan[k] * catalan[n - 1 - k]).sum());
    }
    let minors = leading_minors(7, |i, j| integer(catalan[i + j]));
    assert_eq!(minors, integers(&["1"; 7]));
}

/// That of the Bell numbers has the superfactorials: sequence A000178.
#[test]
fn hankel_determinants_of_bell_numbers_are_superfactorials() {
    let mut row = vec![1u64];
    let mut bell = vec![1];
    for _ in 1..14 {
        let mut next = vec![*row.last().unwrap()];
        for value in &row {
            next.push(next.last().unwrap() + value);
        }
        bell.push(next[0]);
        row = next;
    }
    let minors = leading_minors(7, |i, j| integer(bell[i + j]));
    let expected = ["1", "1", "2", "12", "288", "34560", "24883200"];
    assert_eq!(minors, integers(&expected));
}

/// H. J. S. Smith (1876): det gcd(i,j) is the product of the totients; sequence A001088.
#[test]
fn determinants_of_greatest_common_divisors_are_products_of_totients() {
    fn gcd(a: u64, b: u64) -> u64 {
        if b == 0 { a } else { gcd(b, a % b) }
    }
    let minors = leading_minors(10, |i, j| integer(gcd(i as u64 + 1, j as u64 + 1)));
    let expected = [
        "1", "1", "2", "4", "16", "32", "192", "768", "4608", "18432",
    ];
    assert_eq!(minors, integers(&expected));
}

/// E. H. Bareiss, Math. Comp. 22 (1968) 565–578: the pivots of fraction-free elimination are these minors.
#[test]
fn leading_minors_of_small_matrices_are_the_pivots_of_bareiss() {
    let a = [[2, 1, 3, 4], [1, 5, 2, 2], [3, 2, 7, 1], [4, 2, 1, 8]];
    let b = [
        [16, -120, 240, -140],
        [-120, 1200, -2700, 1680],
        [240, -2700, 6480, -4200],
        [-140, 1680, -4200, 2800],
    ];
    let minors =
        |m: [[i64; 4]; 4]| leading_minors(4, |i, j| Rational::from(Integer::from(m[i][j])));
    assert_eq!(minors(a), integers(&["2", "9", "22", "-225"]));
    assert_eq!(minors(b), integers(&["16", "4800", "864000", "6048000"]));
}
