//! Dense polynomials in one symbol over a prime field.

use linform_scalar::PrimeField;

/// Coefficients from the constant one upward, in Montgomery form.
///
/// *Invariant*: the last coefficient is not 0; the polynomial 0 has none.
pub(super) type Univariate = Vec<u64>;

fn trim(p: &mut Univariate) {
    while p.last() == Some(&0) {
        p.pop();
    }
}

/// The value at a point, by Horner's rule.
pub(super) fn value(field: &PrimeField, p: &[u64], point: u64) -> u64 {
    p.iter()
        .rev()
        .fold(0, |sum, &c| field.add(field.mul(sum, point), c))
}

/// Leaves the remainder in `dividend` and gives the quotient; the divisor is not 0.
fn divide(field: &PrimeField, dividend: &mut Univariate, divisor: &[u64]) -> Univariate {
    let length = divisor.len();
    let inverse = divisor.last().and_then(|&lead| field.inverse(lead));
    let inverse = inverse.expect("the leading coefficient is not 0");
    let mut quotient = vec![0; (dividend.len() + 1).saturating_sub(length)];
    while dividend.len() >= length {
        let shift = dividend.len() - length;
        let factor = field.mul(dividend[dividend.len() - 1], inverse);
        quotient[shift] = factor;
        for (entry, &c) in dividend[shift..].iter_mut().zip(divisor) {
            *entry = field.sub_product(*entry, factor, c);
        }
        trim(dividend);
    }
    quotient
}

/// The quotient of an exact division.
pub(super) fn quotient(
    field: &PrimeField,
    mut dividend: Univariate,
    divisor: &[u64],
) -> Univariate {
    divide(field, &mut dividend, divisor)
}

/// The product.
pub(super) fn product(field: &PrimeField, a: &[u64], b: &[u64]) -> Univariate {
    if a.is_empty() || b.is_empty() {
        return Vec::new();
    }
    let mut result = vec![0; a.len() + b.len() - 1];
    for (i, &x) in a.iter().enumerate() {
        for (j, &y) in b.iter().enumerate() {
            result[i + j] = field.add(result[i + j], field.mul(x, y));
        }
    }
    result
}

/// The monic gcd, by Euclid's algorithm; 0 only for two zeros.
pub(super) fn gcd(field: &PrimeField, mut a: Univariate, mut b: Univariate) -> Univariate {
    while !b.is_empty() {
        divide(field, &mut a, &b);
        std::mem::swap(&mut a, &mut b);
    }
    if let Some(inverse) = a.last().and_then(|&lead| field.inverse(lead)) {
        a.iter_mut().for_each(|c| *c = field.mul(*c, inverse));
    }
    a
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        #![proptest_config(crate::testing::cases(64))]

        #[test]
        fn planted_gcds_are_found(a in proptest::collection::vec(0u64..7, 0..6), b in proptest::collection::vec(0u64..7, 0..6), c in proptest::collection::vec(0u64..7, 1..5)) {
            let field = PrimeField::new(7).unwrap();
            let p = |list: &[u64]| {
                let mut p: Univariate = list.iter().map(|&x| field.element(x)).collect();
                trim(&mut p);
                p
            };
            let (a, b, c) = (p(&a), p(&b), p(&c));
            let (x, y) = (product(&field, &a, &c), product(&field, &b, &c));
            let common = gcd(&field, x.clone(), y.clone());
            if common.is_empty() {
                prop_assert!(x.is_empty() && y.is_empty());
                return Ok(());
            }
            let cofactors = [&x, &y].map(|z| quotient(&field, z.clone(), &common));
            prop_assert_eq!(product(&field, &cofactors[0], &common), x);
            prop_assert_eq!(product(&field, &cofactors[1], &common), y);
            prop_assert_eq!(gcd(&field, cofactors[0].clone(), cofactors[1].clone()), [field.one()]);
        }
    }
}
