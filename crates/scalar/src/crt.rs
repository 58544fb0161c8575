//! Chinese remaindering, one prime at a time.

use crate::{Integer, PrimeField};

/// A vector of integers known modulo a growing product of primes.
///
/// *Invariant*: every entry of `images` lies in `0..modulus`, and `modulus` is the product of the primes
/// added so far (1 at the start).
#[derive(Clone, Debug)]
pub struct ChineseRemainder {
    modulus: Integer,
    images: Vec<Integer>,
}

impl ChineseRemainder {
    /// A vector of `length` integers of which nothing is known yet.
    pub fn new(length: usize) -> Self {
        ChineseRemainder {
            modulus: Integer::ONE,
            images: vec![Integer::ZERO; length],
        }
    }

    /// The product of the primes added so far.
    pub fn modulus(&self) -> &Integer {
        &self.modulus
    }

    /// The entries in `0..modulus`.
    pub fn images(&self) -> &[Integer] {
        &self.images
    }

    /// Adds the residues (plain, in `0..p`) of all entries modulo one more prime.
    ///
    /// # Panics
    ///
    /// If the number of residues differs from the length, or the prime was added before.
    ///
    /// # Complexity
    ///
    /// One product of `modulus` by a word for each entry (Garner's mixed-radix step).
    pub fn add(&mut self, field: &PrimeField, residues: &[u64]) {
        assert_eq!(
            residues.len(),
            self.images.len(),
            "one residue for each entry"
        );
        let inverse = field
            .inverse(field.element_of(&self.modulus))
            .expect("a prime is added once");
        for (image, &residue) in self.images.iter_mut().zip(residues) {
            // The digit d with image + d·modulus ≡ residue (mod p).
            let difference = field.sub(field.element(residue), field.element_of(image));
            let digit = field.value(field.mul(difference, inverse));
            image.add_product(&self.modulus, &Integer::from(digit));
        }
        self.modulus *= Integer::from(field.prime());
    }

    /// The entries in the symmetric range `−modulus/2 < x ≤ modulus/2`.
    pub fn balanced(&self) -> Vec<Integer> {
        let half = self.modulus.div_rem_euclid(&Integer::from(2)).0;
        self.images
            .iter()
            .map(|image| {
                if *image > half {
                    image - &self.modulus
                } else {
                    image.clone()
                }
            })
            .collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::primes_below;
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn integers_come_back_from_their_residues(values in proptest::collection::vec(any::<i128>(), 1..6)) {
            let values: Vec<Integer> = values.into_iter().map(Integer::from).collect();
            let mut images = ChineseRemainder::new(values.len());
            for prime in primes_below(1 << 62).take(3) {
                let residues: Vec<u64> = values.iter().map(|value| value.residue(prime)).collect();
                images.add(&PrimeField::new(prime).unwrap(), &residues);
            }
            prop_assert_eq!(images.balanced(), values);
        }
    }
}
