//! The rational with a given residue, inside bounds that make it unique.

use linform_scalar::{Integer, Rational};

/// How large numerator and denominator of a rational known modulo `m` may be.
///
/// *Invariant*: `N ≥ 0`, `D ≥ 1` and `2·N·D < m`. Two different fractions inside the bounds then have
/// different residues, because `r·s′ − r′·s` is at most `2·N·D` in absolute value.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Bounds {
    modulus: Integer,
    numerator: Integer,
    denominator: Integer,
}

impl Bounds {
    /// The bounds `|r| ≤ numerator`, `0 < s ≤ denominator` for fractions `r/s` modulo `modulus`, or nothing
    /// unless they make the fraction unique (`2·N·D < m`).
    pub fn new(modulus: Integer, numerator: Integer, denominator: Integer) -> Option<Bounds> {
        let sensible = !numerator.is_negative() && denominator >= Integer::ONE;
        let unique = Integer::from(2) * &numerator * &denominator < modulus;
        (sensible && unique).then_some(Bounds {
            modulus,
            numerator,
            denominator,
        })
    }

    /// The same bound `⌊√((m − 1)/2)⌋` for numerator and denominator, or nothing if `m < 3`.
    pub fn symmetric(modulus: Integer) -> Option<Bounds> {
        if modulus < Integer::from(3) {
            return None;
        }
        let half = (&modulus - &Integer::ONE)
            .div_rem_euclid(&Integer::from(2))
            .0;
        let bound = half.sqrt_floor();
        Bounds::new(modulus, bound.clone(), bound)
    }

    /// The modulus `m`.
    pub fn modulus(&self) -> &Integer {
        &self.modulus
    }

    /// The largest absolute value `N` of a numerator.
    pub fn numerator(&self) -> &Integer {
        &self.numerator
    }

    /// The largest denominator `D`.
    pub fn denominator(&self) -> &Integer {
        &self.denominator
    }
}

/// The only fraction `r/s` with `r ≡ u·s (mod m)`, `|r| ≤ N`, `0 < s ≤ D` and `gcd(s, m) = 1`.
///
/// `None` means that no fraction inside the bounds has this residue.
///
/// # Complexity
///
/// Half of the extended Euclidean algorithm on `m` and `u`: `O(log² m)` word operations.
///
/// # Examples
///
/// ```
/// use linform_reconstruct::{Bounds, rational_from_residue};
/// use linform_scalar::{Integer, Rational};
///
/// let bounds = Bounds::symmetric(Integer::from(101)).unwrap();
/// let third = rational_from_residue(&Integer::from(34), &bounds);
/// assert_eq!(third, Rational::new(1, 3));
/// ```
///
/// # References
///
/// P. S. Wang, SYMSAC 1981, 212–217; P. S. Wang, M. J. T. Guy & J. H. Davenport, SIGSAM Bull. 16 (1982) no. 2, 2–3.
pub fn rational_from_residue(residue: &Integer, bounds: &Bounds) -> Option<Rational> {
    let mut remainders = (
        bounds.modulus.clone(),
        residue.div_rem_euclid(&bounds.modulus).1,
    );
    let mut cofactors = (Integer::ZERO, Integer::ONE);
    // Each pair satisfies remainder ≡ cofactor·u (mod m); the first remainder inside the bound is the
    // only possible numerator.
    while remainders.1 > bounds.numerator {
        let (quotient, rest) = remainders.0.div_rem_euclid(&remainders.1);
        remainders = (remainders.1, rest);
        let mut next = cofactors.0;
        next.sub_product(&quotient, &cofactors.1);
        cofactors = (cofactors.1, next);
    }
    let (numerator, denominator) = (remainders.1, cofactors.1);
    // A common factor of the denominator and the modulus would divide the numerator, too.
    if denominator.abs() > bounds.denominator || !numerator.gcd(&denominator).is_one() {
        return None;
    }
    Rational::new(numerator, denominator)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn symmetric(residue: i64, modulus: i64) -> Option<Rational> {
        let bounds = Bounds::symmetric(Integer::from(modulus)).unwrap();
        rational_from_residue(&Integer::from(residue), &bounds)
    }

    /// The residue of a fraction, when its denominator is a unit.
    fn residue_of(value: &Rational, modulus: i64) -> Option<i64> {
        let (r, s) = (
            value.numerator().to_i64().unwrap(),
            value.denominator().to_i64().unwrap(),
        );
        (0..modulus)
            .find(|u| (i128::from(*u) * i128::from(s) - i128::from(r)) % i128::from(modulus) == 0)
    }

    #[test]
    fn residues_modulo_101_are_the_fractions_up_to_sevenths() {
        // Worked values in the convention of Wang, Guy & Davenport 1982.
        for (residue, r, s) in [
            (34, 1, 3),
            (51, 1, 2),
            (25, -1, 4),
            (67, -1, 3),
            (40, -2, 5),
            (84, -1, 6),
            (57, -5, 7),
        ] {
            assert_eq!(symmetric(residue, 101), Rational::new(r, s), "{residue}");
        }
        let failures: Vec<i64> = (0..101).filter(|u| symmetric(*u, 101).is_none()).collect();
        let expected = [
            8, 9, 10, 11, 12, 13, 22, 23, 30, 31, 37, 38, 42, 45, 46, 55, 56, 59, 63, 64, 70, 71,
            78, 79, 88, 89, 90, 91, 92, 93,
        ];
        assert_eq!(failures, expected);
    }

    #[test]
    fn as_many_residues_succeed_as_there_are_reduced_fractions() {
        for (modulus, count) in [(101, 71), (1009, 599), (10007, 5975)] {
            let bounds = Bounds::symmetric(Integer::from(modulus)).unwrap();
            let found = (0..modulus)
                .filter(|u| rational_from_residue(&Integer::from(*u), &bounds).is_some())
                .count();
            assert_eq!(found, count, "modulo {modulus}");
        }
    }

    #[test]
    fn known_fractions_modulo_large_primes_come_back() {
        let mersenne_31 = (1 << 31) - 1;
        let mersenne_61 = (1 << 61) - 1;
        for (residue, modulus, r, s) in [
            (142_857_147, 1_000_000_007, 22, 7),
            (1_577_355_242, mersenne_31, -355, 113),
            (179_676_818_047_759_129, mersenne_61, -41, 283_500),
            (2_014_940_783_225_909_197, mersenne_61, 5137, 15750),
            (1_152_122_643_872_945_009, mersenne_61, -1, 1_296_000),
            (1_381_761_681_329_668_711, mersenne_61, 281, 4_536_000),
        ] {
            assert_eq!(symmetric(residue, modulus), Rational::new(r, s));
        }
    }

    #[test]
    fn bounds_that_leave_two_fractions_are_refused() {
        // Modulo 101, 1/10 and −10 are the same residue.
        let ten = Integer::from(10);
        assert_eq!(Bounds::new(Integer::from(101), ten.clone(), ten), None);
        assert_eq!(Bounds::symmetric(Integer::from(2)), None);
        assert_eq!(
            Bounds::new(Integer::from(7), Integer::from(-1), Integer::ONE),
            None
        );
        assert_eq!(
            Bounds::new(Integer::from(7), Integer::ZERO, Integer::ZERO),
            None
        );
    }

    #[test]
    fn a_fraction_whose_denominator_is_no_unit_is_never_returned() {
        // Brute force over a composite modulus and lopsided bounds.
        let modulus = 180;
        let bounds =
            Bounds::new(Integer::from(modulus), Integer::from(4), Integer::from(20)).unwrap();
        for u in 0..modulus {
            let expected = (1..=20i64)
                .flat_map(|s| (-4..=4i64).map(move |r| (r, s)))
                .filter(|(r, s)| {
                    Integer::from(*s).gcd(&Integer::from(modulus)).is_one()
                        && (u * s - r) % modulus == 0
                })
                .map(|(r, s)| Rational::new(r, s).unwrap())
                .next();
            assert_eq!(
                rational_from_residue(&Integer::from(u), &bounds),
                expected,
                "{u}"
            );
        }
    }

    proptest! {
        #[test]
        fn every_fraction_inside_the_bounds_comes_back(r in -22i64..=22, s in 1i64..=22) {
            let value = Rational::new(r, s).unwrap();
            let residue = residue_of(&value, 1009).unwrap();
            prop_assert_eq!(symmetric(residue, 1009), Some(value));
        }
    }
}
