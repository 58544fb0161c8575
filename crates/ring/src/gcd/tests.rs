//! Planted common divisors.

use super::*;
use linform_scalar::{Integer, Rational, Unlimited};
use proptest::prelude::*;

fn polynomials(terms: usize, symbols: usize) -> impl Strategy<Value = Polynomial> {
    let coefficient = prop_oneof![4 => -5i128..6, 1 => any::<i128>()];
    let term = (proptest::collection::vec(0u16..4, symbols), coefficient);
    proptest::collection::vec(term, 0..terms).prop_map(|terms| {
        Polynomial::from_terms(terms.into_iter().map(|(exponents, coefficient)| {
            (
                Monomial::from_exponents(&exponents).unwrap(),
                Rational::from(coefficient),
            )
        }))
    })
}

fn divides(a: &Polynomial, b: &Polynomial) -> bool {
    b.is_zero() || b.div_exact(a, &Unlimited).unwrap().is_some()
}

proptest! {
    #![proptest_config(crate::testing::cases(64))]

    #[test]
    fn a_planted_common_divisor_divides_the_gcd(a in polynomials(6, 3), b in polynomials(6, 3), common in polynomials(5, 3)) {
        let (x, y) = (a.mul(&common, &Unlimited).unwrap(), b.mul(&common, &Unlimited).unwrap());
        let gcd = x.gcd(&y, &Unlimited).unwrap();
        prop_assert_eq!(&gcd, &y.gcd(&x, &Unlimited).unwrap());
        if x.is_zero() && y.is_zero() {
            prop_assert!(gcd.is_zero());
            return Ok(());
        }
        prop_assert!(gcd.is_canonical() && gcd.content().is_one() && !gcd.leading().unwrap().1.is_negative());
        prop_assert!(divides(&gcd, &x) && divides(&gcd, &y) && divides(&common, &gcd));
        // Greatest: the cofactors have no common divisor left.
        let cofactor = |p: &Polynomial| p.div_exact(&gcd, &Unlimited).unwrap().unwrap();
        prop_assert!(cofactor(&x).gcd(&cofactor(&y), &Unlimited).unwrap().is_one());
    }

    #[test]
    fn integers_images_and_remainder_sequences_find_the_same_gcd(a in polynomials(4, 2), b in polynomials(4, 2), common in polynomials(4, 2)) {
        let product = |p: &Polynomial| p.mul(&common, &Unlimited).unwrap().primitive_part();
        let (x, y) = (product(&a), product(&b));
        if x.is_zero() || y.is_zero() {
            return Ok(());
        }
        let by_remainders = remainders::gcd(&x, &y, &Unlimited).unwrap();
        prop_assert_eq!(modular::gcd(&x, &y, &Unlimited).unwrap(), Some(by_remainders.clone()));
        if let Some(by_integers) = heuristic::gcd(&x, &y, &x.degrees().gcd(&y.degrees()), &Unlimited).unwrap() {
            prop_assert_eq!(by_integers, by_remainders.clone());
        }
        prop_assert_eq!(x.gcd(&y, &Unlimited).unwrap(), by_remainders);
    }
}

#[test]
fn long_univariate_gcds_are_found() {
    let p = |start: i64, count: u16| {
        let coefficient = |i: u16| Integer::from(start + i64::from(i)).pow(40 + u32::from(i) % 7);
        Polynomial::from_terms((0..count).map(|i| {
            (
                Monomial::power(0, i).unwrap(),
                Rational::from(coefficient(i)),
            )
        }))
    };
    let (a, b, common) = (p(3, 30), p(-50, 29), p(1000, 21).primitive_part());
    let (x, y) = (
        a.mul(&common, &Unlimited).unwrap(),
        b.mul(&common, &Unlimited).unwrap(),
    );
    assert_eq!(x.gcd(&y, &Unlimited).unwrap(), common);
}

#[test]
fn gcds_in_a_box_too_large_for_integers_are_found_by_images() {
    let x = |i, e| Polynomial::monomial(Monomial::power(i, e).unwrap(), 1.into());
    let sum = |parts: &[Polynomial]| parts.iter().fold(Polynomial::one(), |s, p| &s + p);
    let common = sum(&[x(0, 1), x(1, 3000)]);
    let a = sum(&[x(0, 2), x(1, 1), x(2, 900)])
        .mul(&common, &Unlimited)
        .unwrap();
    let b = sum(&[x(0, 1), x(1, 5), x(2, 901)])
        .mul(&common, &Unlimited)
        .unwrap();
    assert_eq!(
        heuristic::gcd(&a, &b, &common.degrees(), &Unlimited),
        Ok(None)
    );
    assert_eq!(a.gcd(&b, &Unlimited).unwrap(), common);
}

#[test]
fn gcds_in_a_box_beyond_a_word_are_found_by_remainders() {
    let x = |i, e| Polynomial::monomial(Monomial::power(i, e).unwrap(), 1.into());
    let sum = |e| (0..31).fold(Polynomial::one(), |s, i| &s + &x(i, e));
    let common = &sum(1) + &x(0, 1);
    let a = (&x(0, 1) + &sum(3)).mul(&common, &Unlimited).unwrap();
    let b = (&x(0, 1) - &sum(3)).mul(&common, &Unlimited).unwrap();
    assert_eq!(
        heuristic::gcd(&a, &b, &common.degrees(), &Unlimited),
        Ok(None)
    );
    assert_eq!(modular::gcd(&a, &b, &Unlimited), Ok(None));
    assert_eq!(a.gcd(&b, &Unlimited).unwrap(), common);
}

#[test]
fn gcd_with_zero_is_the_primitive_part() {
    let zero = Polynomial::zero();
    let x = Polynomial::monomial(
        Monomial::power(0, 1).unwrap(),
        Rational::new(-4, 3).unwrap(),
    );
    assert_eq!(zero.gcd(&zero, &Unlimited), Ok(zero.clone()));
    assert_eq!(zero.gcd(&x, &Unlimited), Ok(x.primitive_part()));
    assert_eq!(x.gcd(&zero, &Unlimited), Ok(x.primitive_part()));
    let six = Polynomial::constant(6.into());
    assert_eq!(
        six.gcd(&Polynomial::constant(4.into()), &Unlimited),
        Ok(Polynomial::one())
    );
}
