//! All methods against the product written out.

use super::*;
use crate::polynomial::collect_terms;
use linform_scalar::{Rational, Unlimited};
use proptest::prelude::*;

/// Polynomials in a few symbols, dense or sparse, with short or long coefficients.
fn polynomials() -> impl Strategy<Value = Polynomial> {
    let exponent = prop_oneof![4 => 0u16..4, 1 => 0u16..60];
    let coefficient = prop_oneof![
        (-3i64..4).prop_map(Integer::from),
        prop_oneof![Just(i64::MIN), Just(i64::MAX), Just(-1)].prop_map(Integer::from),
        (any::<i128>(), any::<i128>()).prop_map(|(a, b)| Integer::from(a) * Integer::from(b)),
    ];
    let term = (proptest::collection::vec(exponent, 0..3), coefficient);
    (proptest::collection::vec(term, 0..12), 1i64..7).prop_map(|(terms, denominator)| {
        Polynomial::from_terms(terms.into_iter().map(|(exponents, coefficient)| {
            let monomial = Monomial::from_exponents(&exponents).unwrap();
            (monomial, Rational::new(coefficient, denominator).unwrap())
        }))
    })
}

fn written_out(a: &Polynomial, b: &Polynomial) -> Polynomial {
    let mut terms = Vec::new();
    for (m, c) in a.iter() {
        terms.extend(b.iter().map(|(n, d)| (m.checked_mul(n).unwrap(), c * d)));
    }
    Polynomial::normalised(collect_terms(terms), a.denominator() * b.denominator())
}

proptest! {
    #![proptest_config(crate::testing::cases(96))]

    #[test]
    fn every_method_gives_the_product(a in polynomials(), b in polynomials()) {
        let expected = written_out(&a, &b);
        prop_assert!(expected.is_canonical());
        prop_assert_eq!(&a.mul(&b, &Unlimited).unwrap(), &expected);
        for method in [ProductMethod::Heap, ProductMethod::Dense, ProductMethod::Kronecker] {
            prop_assert_eq!(&a.mul_with(method, &b, &Unlimited).unwrap(), &expected, "{:?}", method);
        }
    }

    #[test]
    fn squares_agree_with_products(a in polynomials()) {
        prop_assert_eq!(a.mul_with(ProductMethod::Kronecker, &a, &Unlimited).unwrap(), written_out(&a, &a));
    }
}

#[test]
fn products_in_a_box_beyond_a_word_are_formed_by_the_heap() {
    let a = Polynomial::from_terms((0..40).map(|i| {
        let exponents: Vec<u16> = (0..40).map(|j| ((i * j) % 7) as u16).collect();
        (
            Monomial::from_exponents(&exponents).unwrap(),
            Rational::from(i - 20),
        )
    }));
    assert_eq!(a.mul(&a, &Unlimited).unwrap(), written_out(&a, &a));
}

#[test]
fn long_dense_products_are_halved() {
    // 700 coefficients of 2000 bits make integers beyond the longest uninterrupted product.
    let big = Integer::from(3).pow(1260);
    let a = Polynomial::from_terms((0..700u16).map(|i| {
        (
            Monomial::power(0, i).unwrap(),
            Rational::from(&big + &Integer::from(u32::from(i))),
        )
    }));
    let square = a.mul(&a, &Unlimited).unwrap();
    let point = Integer::from(-1);
    let value = |p: &Polynomial| -> Integer {
        p.iter()
            .map(|(m, c)| c * &point.pow(u32::from(m.exponent(0))))
            .sum()
    };
    assert_eq!(value(&square), &value(&a) * &value(&a));
    assert_eq!(square.len(), 1399);
}

#[test]
fn powers_are_repeated_products_or_refused_at_once() {
    let x = |i, e| Polynomial::monomial(Monomial::power(i, e).unwrap(), 1.into());
    let trinomial = &(&Polynomial::one() + &x(0, 1)) + &x(1, 1);
    let mut expected = Polynomial::one();
    for exponent in 0..7 {
        assert_eq!(trinomial.pow(exponent, &Unlimited).unwrap(), expected);
        expected = written_out(&expected, &trinomial);
    }
    for (base, exponent) in [
        (trinomial, 5000),
        (x(0, 1), 32768),
        (Polynomial::constant(Rational::new(1, 3).unwrap()), u32::MAX),
        (Polynomial::constant(2.into()), u32::MAX),
    ] {
        assert_eq!(
            base.pow(exponent, &Unlimited),
            Err(Stop::SizeLimit),
            "{base:?}"
        );
    }
    assert_eq!(
        Polynomial::zero().pow(u32::MAX, &Unlimited),
        Ok(Polynomial::zero())
    );
    let minus = Polynomial::constant(Rational::from(-1));
    assert_eq!(minus.pow(u32::MAX, &Unlimited), Ok(minus));
}

#[test]
fn exponents_beyond_the_bound_are_a_size_limit() {
    let x = |e| Polynomial::monomial(Monomial::power(2, e).unwrap(), 1.into());
    let sum = &x(20000) + &Polynomial::one();
    assert_eq!(sum.mul(&sum, &Unlimited), Err(Stop::SizeLimit));
    assert_eq!(x(20000).mul(&x(12768), &Unlimited), Err(Stop::SizeLimit));
    assert!(x(20000).mul(&x(12767), &Unlimited).is_ok());
}

#[test]
fn too_many_terms_are_a_size_limit() {
    struct Few;
    impl Control for Few {
        fn proceed(&self) -> Result<(), Stop> {
            Ok(())
        }
        fn term_limit(&self) -> usize {
            100
        }
    }
    let x = |i, e| Polynomial::monomial(Monomial::power(i, e).unwrap(), 1.into());
    let line = |i| (0..20).fold(Polynomial::zero(), |sum, e| &sum + &x(i, e));
    let (a, b) = (line(0), line(1));
    for method in [
        ProductMethod::Heap,
        ProductMethod::Dense,
        ProductMethod::Kronecker,
    ] {
        assert_eq!(a.mul_with(method, &b, &Few), Err(Stop::SizeLimit));
        assert_eq!(a.mul_with(method, &a, &Few).unwrap().len(), 39);
    }
}

proptest! {
    #![proptest_config(crate::testing::cases(48))]

    #[test]
    fn powers_by_recurrence_and_by_squaring_are_repeated_products(a in polynomials(), exponent in 0u32..7) {
        let expected = (0..exponent).fold(Polynomial::one(), |power, _| power.mul(&a, &Unlimited).unwrap());
        for method in [PowerMethod::Recurrence, PowerMethod::Squaring] {
            let power = a.pow_with(method, exponent, &Unlimited).unwrap();
            prop_assert!(power.is_canonical());
            prop_assert_eq!(&power, &expected, "{:?}", method);
        }
        prop_assert_eq!(&a.pow(exponent, &Unlimited).unwrap(), &expected);
    }
}

#[test]
fn a_high_power_of_a_binomial_has_the_binomial_coefficients() {
    let x = |i, e| Polynomial::monomial(Monomial::power(i, e).unwrap(), 1.into());
    let power = (&x(0, 1) - &x(1, 2)).pow(1000, &Unlimited).unwrap();
    assert!(power.is_canonical());
    assert_eq!(power.len(), 1001);
    let mut binomial = Integer::ONE;
    for (k, (monomial, coefficient)) in power.iter().enumerate() {
        let k = k as u16;
        assert_eq!(monomial.exponents(2), [1000 - k, 2 * k]);
        let sign = Integer::from(if k.is_multiple_of(2) { 1 } else { -1 });
        assert_eq!(coefficient, &(&binomial * &sign));
        binomial = (binomial * Integer::from(u32::from(1000 - k)))
            .div_exact(&Integer::from(u32::from(k + 1)));
    }
}

#[test]
fn a_power_may_lose_coefficients_to_cancellation() {
    // (1 + 2x − 2x²)² has no x².
    let x = |e| Polynomial::monomial(Monomial::power(0, e).unwrap(), 2.into());
    let base = &(&Polynomial::one() + &x(1)) - &x(2);
    for method in [PowerMethod::Recurrence, PowerMethod::Squaring] {
        let power = base.pow_with(method, 2, &Unlimited).unwrap();
        assert_eq!(power.len(), 4, "{method:?}");
        assert_eq!(power, written_out(&base, &base));
    }
}

#[test]
fn a_long_power_asks_the_control() {
    struct Impatient;
    impl Control for Impatient {
        fn proceed(&self) -> Result<(), Stop> {
            Err(Stop::TimeLimit)
        }
    }
    let x = Polynomial::monomial(Monomial::power(0, 1).unwrap(), 1.into());
    let base = &x + &Polynomial::one();
    assert_eq!(base.pow(2000, &Impatient), Err(Stop::TimeLimit));
}

#[test]
fn nested_powers_end_where_the_degree_does() {
    let symbols = crate::Symbols::new(vec!["q".into()], Some("t".into()), vec![]);
    assert_eq!(symbols.parse("(1+t)^9999").unwrap().len(), 10_000);
    let error = symbols.parse("((((q+t)^30)^40)^100)^100").unwrap_err();
    assert!(error.to_string().contains("too large"), "{error}");
}
