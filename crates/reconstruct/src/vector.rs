//! Vectors of rationals over one denominator.

use crate::rational_of_maximal_quotient;
use linform_scalar::{Integer, Rational};

/// Rationals `numerators[i] / denominator`.
///
/// *Invariant*: the denominator is positive, and coprime to the gcd of the numerators.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct CommonDenominator {
    denominator: Integer,
    numerators: Vec<Integer>,
}

impl CommonDenominator {
    /// The least common denominator.
    pub fn denominator(&self) -> &Integer {
        &self.denominator
    }

    /// The numerators over it.
    pub fn numerators(&self) -> &[Integer] {
        &self.numerators
    }

    /// Denominator and numerators.
    pub fn into_parts(self) -> (Integer, Vec<Integer>) {
        (self.denominator, self.numerators)
    }
}

/// The vector of rationals with the given residues, over one running denominator.
///
/// The entries of a solution vector mostly share their denominators. So each residue is first multiplied by
/// the denominator known so far: if the balanced result falls short of `m` by `margin_bits`, it is the
/// numerator, and no Euclidean algorithm is run; otherwise the remaining denominator is found
/// by [`rational_of_maximal_quotient`]. `hint` is a denominator to start from (1 if nothing is known).
///
/// `None` means that for some entry no fraction stands out by the margin, or that the numerators over the
/// common denominator do not stay below half the modulus: more primes are needed.
///
/// # Complexity
///
/// One product and one division modulo `m` an entry, and a Euclidean algorithm for each entry that enlarges
/// the denominator.
///
/// # Examples
///
/// ```
/// use linform_reconstruct::rationals_over_common_denominator;
/// use linform_scalar::Integer;
///
/// // 1/2, 1/3 and 5/6 modulo 1009.
/// let residues = [505, 673, 169].map(Integer::from);
/// let found = rationals_over_common_denominator(&residues, &Integer::from(1009), &Integer::ONE, 4).unwrap();
/// assert_eq!(found.denominator(), &Integer::from(6));
/// assert_eq!(found.numerators(), [3, 2, 5].map(Integer::from));
/// ```
pub fn rationals_over_common_denominator(
    residues: &[Integer],
    modulus: &Integer,
    hint: &Integer,
    margin_bits: u64,
) -> Option<CommonDenominator> {
    let mut denominator = hint.abs();
    if denominator.is_zero() || !denominator.gcd(modulus).is_one() {
        denominator = Integer::ONE;
    }
    let half = modulus.div_rem_euclid(&Integer::from(2)).0;
    let balanced = |value: &Integer| {
        let rest = value.div_rem_euclid(modulus).1;
        if rest > half { rest - modulus } else { rest }
    };
    // Numerators found early are multiplied up afterwards, by what the denominator has grown since.
    let mut found: Vec<(Integer, Integer)> = Vec::with_capacity(residues.len());
    for residue in residues {
        let scaled = balanced(&(residue * &denominator));
        if scaled.bits() + margin_bits < modulus.bits() {
            found.push((scaled, denominator.clone()));
            continue;
        }
        let (numerator, rest) =
            rational_of_maximal_quotient(&scaled, modulus, margin_bits)?.into_parts();
        denominator *= &rest;
        if denominator.bits() >= modulus.bits() {
            return None;
        }
        found.push((numerator, denominator.clone()));
    }
    let mut common = denominator.clone();
    let mut numerators = Vec::with_capacity(found.len());
    for (numerator, over) in found {
        let numerator = numerator * denominator.div_exact(&over);
        if numerator.bits() + 1 >= modulus.bits() {
            return None;
        }
        common = common.gcd(&numerator);
        numerators.push(numerator);
    }
    if !common.is_one() {
        for numerator in &mut numerators {
            *numerator = numerator.div_exact(&common);
        }
        denominator = denominator.div_exact(&common);
    }
    Some(CommonDenominator {
        denominator,
        numerators,
    })
}

impl From<CommonDenominator> for Vec<Rational> {
    fn from(vector: CommonDenominator) -> Vec<Rational> {
        vector
            .numerators
            .into_iter()
            .filter_map(|numerator| Rational::new(numerator, vector.denominator.clone()))
            .collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use linform_scalar::{ChineseRemainder, PrimeField, primes_below};
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn planted_vectors_come_back(
            entries in proptest::collection::vec((any::<i64>(), 1i64..2000), 0..8),
            hint in 0i64..40,
        ) {
            let values: Vec<Rational> =
                entries.iter().map(|(r, s)| Rational::new(*r, *s).unwrap()).collect();
            let mut images = ChineseRemainder::new(values.len());
            for prime in primes_below(1 << 62).take(6) {
                let field = PrimeField::new(prime).unwrap();
                let residues: Vec<u64> = values.iter().map(|value| value.residue(&field).unwrap()).collect();
                images.add(&field, &residues);
            }
            let found = rationals_over_common_denominator(
                images.images(), images.modulus(), &Integer::from(hint), 40,
            ).unwrap();
            let least = values.iter().fold(Integer::ONE, |lcm, value| lcm.lcm(value.denominator()));
            prop_assert_eq!(found.denominator(), &least);
            prop_assert_eq!(Vec::<Rational>::from(found), values);
        }
    }

    #[test]
    fn residues_of_large_fractions_are_not_forced_into_small_ones() {
        // (m + 1)/2 would be 1/2, but 137 modulo 1009 has no fraction with |r|·s below 1009/16.
        let modulus = Integer::from(1009);
        let residues = [505, 137].map(Integer::from);
        assert_eq!(
            rationals_over_common_denominator(&residues, &modulus, &Integer::ONE, 4),
            None
        );
    }
}
