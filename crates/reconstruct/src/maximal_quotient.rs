//! The rational whose encoding modulo `m` stands out against chance.

use linform_scalar::{Integer, Rational};

/// The fraction `r/s` with residue `u` modulo `m` for which `|r|·s` is smallest, if it is smaller than `m`
/// by more than about `margin_bits` binary digits.
///
/// In the Euclidean algorithm on `m` and `u` the quotient that follows the pair `(r, s)` is about
/// `m / (|r|·s)`. A quotient above `2^margin_bits` occurs by chance with probability about
/// `2^(−margin_bits)·log m`, so a large one gives the fraction away, however its size is shared between
/// numerator and denominator. Needs fewer primes than symmetric bounds when the two are of unequal size.
///
/// `None` means that no fraction stands out: nothing is said about those that need the whole modulus.
/// The answer is unique for margins of two bits and more, because `2·|r|·s < m` then.
///
/// # Complexity
///
/// The extended Euclidean algorithm on `m` and `u`: `O(log² m)` word operations.
///
/// # Examples
///
/// ```
/// use linform_reconstruct::rational_of_maximal_quotient;
/// use linform_scalar::{Integer, Rational};
///
/// // 3^25/7 modulo 2^61 − 1: far beyond symmetric bounds, yet 18 binary digits short of the modulus.
/// let modulus = Integer::from((1u64 << 61) - 1);
/// let residue = Integer::from(1_317_624_697_734_769_321u64);
/// let expected = Rational::new(3u64.pow(25), 7);
/// assert_eq!(rational_of_maximal_quotient(&residue, &modulus, 15), expected);
/// assert_eq!(rational_of_maximal_quotient(&residue, &modulus, 25), None);
/// ```
///
/// # References
///
/// M. Monagan, ISSAC 2004, 243–249.
pub fn rational_of_maximal_quotient(
    residue: &Integer,
    modulus: &Integer,
    margin_bits: u64,
) -> Option<Rational> {
    if *modulus <= Integer::ONE {
        return None;
    }
    let residue = residue.div_rem_euclid(modulus).1;
    if residue.is_zero() {
        // 0/1 is followed by an infinite quotient; the modulus itself is the margin.
        return (modulus.bits() > margin_bits).then_some(Rational::ZERO);
    }
    let mut best: Option<(Integer, Integer)> = None;
    let mut largest = Integer::from(2).pow(u32::try_from(margin_bits).ok()?);
    let mut remainders = (modulus.clone(), residue);
    let mut cofactors = (Integer::ZERO, Integer::ONE);
    // Quotients are at most the dividend: once that is small, no larger quotient can follow.
    while !remainders.1.is_zero() && remainders.0 > largest {
        let (quotient, rest) = remainders.0.div_rem_euclid(&remainders.1);
        let mut next = cofactors.0;
        next.sub_product(&quotient, &cofactors.1);
        if quotient > largest {
            best = Some((remainders.1.clone(), cofactors.1.clone()));
            largest = quotient;
        }
        remainders = (remainders.1, rest);
        cofactors = (cofactors.1, next);
    }
    let (numerator, denominator) = best?;
    if !numerator.gcd(&denominator).is_one() {
        return None;
    }
    Rational::new(numerator, denominator)
}

#[cfg(test)]
mod tests {
    use super::*;
    use linform_scalar::PrimeField;
    use proptest::prelude::*;

    const MERSENNE_61: u64 = (1 << 61) - 1;

    proptest! {
        #[test]
        fn a_fraction_much_smaller_than_the_modulus_is_found(bits in 0u32..=36, r in any::<i64>(), s in any::<u64>()) {
            // Numerator and denominator share 36 of the 61 bits in any proportion.
            let value = Rational::new(r >> (63 - bits), ((s >> 28) >> bits) + 1).unwrap();
            let field = PrimeField::new(MERSENNE_61).unwrap();
            let residue = Integer::from(value.residue(&field).unwrap());
            prop_assert_eq!(rational_of_maximal_quotient(&residue, &Integer::from(MERSENNE_61), 20), Some(value));
        }

        #[test]
        fn what_is_found_has_the_residue_and_the_margin(residue in 0..MERSENNE_61) {
            let modulus = Integer::from(MERSENNE_61);
            if let Some(value) = rational_of_maximal_quotient(&Integer::from(residue), &modulus, 6) {
                let field = PrimeField::new(MERSENNE_61).unwrap();
                prop_assert_eq!(value.residue(&field), Some(residue));
                let size = &value.numerator().abs() * value.denominator();
                prop_assert!(&size * &Integer::from(1 << 6) < modulus);
            }
        }
    }

    #[test]
    fn degenerate_moduli_and_zero_are_handled() {
        let seven = Integer::from(7);
        assert_eq!(
            rational_of_maximal_quotient(&Integer::from(14), &seven, 2),
            Some(Rational::ZERO)
        );
        assert_eq!(
            rational_of_maximal_quotient(&Integer::from(14), &seven, 3),
            None
        );
        assert_eq!(
            rational_of_maximal_quotient(&Integer::ZERO, &Integer::ONE, 0),
            None
        );
    }
}
