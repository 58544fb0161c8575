//! Systems made against the primes that the solver draws on.

mod common;

use common::{decide_by_all, product, read, system};
use linform_ring::Polynomial;
use linform_scalar::{Integer, Rational, Unlimited, primes_below};
use linform_solver::{Fraction, Method, Outcome, Row, System, solve};

/// The product of the first primes below 2^62, which are the first that the solver takes.
fn primes(count: usize) -> Polynomial {
    let product: Integer = primes_below(1 << 62)
        .take(count)
        .map(Integer::from)
        .product();
    Polynomial::constant(product.into())
}

fn rows(columns: usize, rows: &[&[Polynomial]]) -> System {
    let mut system = System::new(columns);
    for row in rows {
        system.push(Row {
            entries: row[..columns].iter().cloned().enumerate().collect(),
            right: row[columns].clone(),
        });
    }
    system
}

#[test]
fn a_matrix_that_vanishes_modulo_the_first_primes_is_still_regular() {
    let p = primes(3);
    let t = read("t");
    let system = rows(
        2,
        &[
            &[product(&p, &t), p.clone(), product(&p, &read("t^2 + a"))],
            &[p.clone(), product(&p, &t), product(&p, &read("t + a*t"))],
        ],
    );
    let expected = vec![read("t").into(), read("a").into()];
    assert_eq!(decide_by_all(&system), Outcome::Unique(expected));
}

#[test]
fn a_determinant_divisible_by_the_first_primes_is_not_zero() {
    // Rows that agree modulo the primes.
    let p = primes(2);
    let system = rows(
        2,
        &[
            &[read("t"), read("1"), read("t + a")],
            &[&read("t") + &p, read("1"), &read("t + a") + &p],
        ],
    );
    let expected = vec![read("1").into(), read("a").into()];
    assert_eq!(decide_by_all(&system), Outcome::Unique(expected));
}

#[test]
fn coefficients_divisible_by_the_first_primes_are_found() {
    // Modulo the first prime the solution looks shorter than it is.
    let p = primes(1);
    let long = &read("t") + &product(&p, &read("t^5*a^2"));
    let system = rows(
        2,
        &[
            &[read("1"), read("t"), &long + &read("t*b")],
            &[
                read("t"),
                read("1"),
                &product(&read("t"), &long) + &read("b"),
            ],
            &[read("0"), read("a"), read("a*b")],
        ],
    );
    let expected = vec![long.into(), read("b").into()];
    assert_eq!(decide_by_all(&system), Outcome::Unique(expected));
}

#[test]
fn denominators_divisible_by_the_first_primes_are_found() {
    let p = primes(2);
    let denominator = &read("t") + &product(&p, &read("t^3"));
    let system = rows(
        1,
        &[
            &[denominator.clone(), read("a")],
            &[product(&denominator, &read("2*a")), read("2*a^2")],
        ],
    );
    let expected = Fraction::new(read("a"), denominator, &Unlimited)
        .unwrap()
        .unwrap();
    assert_eq!(decide_by_all(&system), Outcome::Unique(vec![expected]));
    let number = rows(1, &[&[p.clone(), read("1")]]);
    let expected = p.as_constant().and_then(|p| p.recip()).unwrap();
    let expected = Fraction::from(Polynomial::constant(expected));
    assert_eq!(decide_by_all(&number), Outcome::Unique(vec![expected]));
}

#[test]
fn a_contradiction_that_the_first_primes_do_not_show_is_found() {
    let p = primes(1);
    let system = rows(1, &[&[read("t"), read("t")], &[read("1"), &read("1") + &p]]);
    assert!(matches!(decide_by_all(&system), Outcome::Inconsistent(_)));
    let dependence = rows(
        2,
        &[
            &[read("t"), read("a"), read("1")],
            &[&read("t") + &p, read("a"), read("b")],
        ],
    );
    assert!(matches!(decide_by_all(&dependence), Outcome::Unique(_)));
}

#[test]
fn large_coefficients_take_as_many_primes_as_they_need() {
    let large = Rational::new(Integer::from(7).pow(300), Integer::from(3).pow(200)).unwrap();
    let solution = read("t^2 - 1/5").scale(&large);
    let system = rows(
        1,
        &[
            &[read("t + a"), product(&solution, &read("t + a"))],
            &[read("3"), product(&solution, &read("3"))],
        ],
    );
    assert_eq!(
        decide_by_all(&system),
        Outcome::Unique(vec![solution.into()])
    );
}

#[test]
fn sparse_solutions_in_several_symbols_are_left_to_elimination() {
    let sparse = system(
        2,
        &[
            &["1", "2", "t^12*a^10 + 2*b^12"],
            &["3", "1", "3*t^12*a^10 + b^12"],
        ],
    );
    let dense = system(
        3,
        &[
            &["t + a", "b^2 - t", "a*b", "t^2 + a*t + b^2 - t"],
            &["b^3 + t", "a^2 + 1", "t", "b^3*t + t^2 + a^2 + 1"],
            &["a", "t*b", "t + b + a", "a*t + b*t"],
        ],
    );
    for (system, method, expected) in [
        (sparse, Method::FractionFree, vec!["t^12*a^10", "b^12"]),
        (dense, Method::Modular, vec!["t", "1", "0"]),
    ] {
        assert_eq!(solve(&system, &Unlimited).unwrap().method, method);
        let expected = expected.iter().map(|text| read(text).into()).collect();
        assert_eq!(decide_by_all(&system), Outcome::Unique(expected));
    }
}

#[test]
fn columns_that_depend_only_modulo_the_first_primes_make_no_family() {
    let p = primes(2);
    let system = rows(
        2,
        &[
            &[read("t"), read("a"), read("0")],
            &[&read("t*b") + &p, read("a*b"), read("0")],
        ],
    );
    let zero = Outcome::Unique(vec![Fraction::zero(); 2]);
    assert_eq!(decide_by_all(&system), zero);
}
