//! Quotients of planted products, and refusals.

use super::*;
use linform_scalar::Unlimited;
use proptest::prelude::*;

fn polynomials() -> impl Strategy<Value = Polynomial> {
    let exponent = prop_oneof![4 => 0u16..4, 1 => 0u16..60];
    let coefficient = prop_oneof![
        (-3i64..4).prop_map(Integer::from),
        Just(Integer::from(i64::MIN)),
        (any::<i128>(), any::<i128>()).prop_map(|(a, b)| Integer::from(a) * Integer::from(b)),
    ];
    let term = (proptest::collection::vec(exponent, 0..3), coefficient);
    (proptest::collection::vec(term, 0..8), 1i64..7).prop_map(|(terms, denominator)| {
        Polynomial::from_terms(terms.into_iter().map(|(exponents, coefficient)| {
            let monomial = Monomial::from_exponents(&exponents).unwrap();
            (monomial, Rational::new(coefficient, denominator).unwrap())
        }))
    })
}

/// The quotient of primitive polynomials by each algorithm that applies.
fn all_quotients(a: &Polynomial, b: &Polynomial) -> Vec<Option<Vec<Term>>> {
    let meter = &mut Meter::new(&Unlimited);
    let mut results = vec![heap::quotient(a.terms(), b.terms(), meter).unwrap()];
    let top = a.degrees();
    if let (Some(layout), Some(most)) = (Layout::new(&top), top.div(&b.degrees())) {
        let result = heap::numbered_quotient(&layout, &most, a.terms(), b.terms(), meter);
        results.push(result.unwrap());
        let result = dense::quotient(&layout, &most, a.terms(), b.terms(), meter);
        results.push(result.unwrap());
        if layout.size() < 10_000 {
            let result = packed::quotient(&layout, &most, a.terms(), b.terms(), meter);
            results.push(result.unwrap());
        }
    }
    results
}

proptest! {
    #![proptest_config(crate::testing::cases(64))]

    #[test]
    fn a_product_divided_by_a_factor_is_the_other_factor(a in polynomials(), b in polynomials()) {
        let product = a.mul(&b, &Unlimited).unwrap();
        let expected = if b.is_zero() { None } else { Some(a.clone()) };
        prop_assert_eq!(product.div_exact(&b, &Unlimited).unwrap(), expected);
        let (a, b) = (a.primitive_part(), b.primitive_part());
        if !a.is_zero() && !b.is_zero() {
            let product = a.mul(&b, &Unlimited).unwrap();
            for quotient in all_quotients(&product, &b) {
                prop_assert_eq!(quotient.as_deref(), Some(a.terms()));
            }
        }
    }

    #[test]
    fn a_product_disturbed_in_one_term_is_not_divisible(a in polynomials(), b in polynomials(), place in 0usize..8, by in -2i64..3) {
        let (a, b) = (a.primitive_part(), b.primitive_part());
        let product = a.mul(&b, &Unlimited).unwrap();
        if b.len() < 2 || product.len() <= place || by == 0 {
            return Ok(());
        }
        // The difference of two multiples of b would be a single term, which b with its two terms does not divide.
        let (monomial, _) = product.iter().nth(place).unwrap();
        let disturbed = &product + &Polynomial::monomial(monomial.clone(), by.into());
        prop_assert_eq!(disturbed.div_exact(&b, &Unlimited).unwrap(), None);
        for quotient in all_quotients(&disturbed, &b) {
            prop_assert_eq!(quotient, None);
        }
    }
}

#[test]
fn quotients_with_coefficients_longer_than_the_dividends_are_found() {
    // ((1 − x^60) / (1 − x))^8 has far longer coefficients than (1 − x^60)^8.
    let x = |e| Polynomial::monomial(Monomial::power(0, e).unwrap(), 1.into());
    let one = Polynomial::one();
    let dividend = (&one - &x(60)).pow(8, &Unlimited).unwrap();
    let divisor = (&one - &x(1)).pow(8, &Unlimited).unwrap();
    let expected = (0..60).fold(Polynomial::zero(), |sum, e| &sum + &x(e));
    let expected = expected.pow(8, &Unlimited).unwrap();
    assert!(expected.bits() > dividend.bits() + 30);
    for quotient in all_quotients(&dividend.primitive_part(), &divisor.primitive_part()) {
        assert_eq!(quotient.as_deref(), Some(expected.terms()));
    }
}

#[test]
fn zero_is_divisible_and_divides_nothing() {
    let (zero, one) = (Polynomial::zero(), Polynomial::one());
    assert_eq!(zero.div_exact(&one, &Unlimited), Ok(Some(zero.clone())));
    assert_eq!(one.div_exact(&zero, &Unlimited), Ok(None));
    assert_eq!(zero.div_exact(&zero, &Unlimited), Ok(None));
    let third = Polynomial::constant(Rational::new(1, 3).unwrap());
    assert_eq!(
        one.div_exact(&third, &Unlimited),
        Ok(Some(Polynomial::constant(3.into())))
    );
}
