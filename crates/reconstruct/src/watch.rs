//! Early termination of Chinese remaindering.

use crate::rational_of_maximal_quotient;
use linform_scalar::{ChineseRemainder, PrimeField, Rational, SplitMix};

/// When a [`Watch`] is content.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Patience {
    /// By how many binary digits the fraction must fall short of the modulus
    /// (see [`rational_of_maximal_quotient`]).
    pub margin_bits: u64,
    /// How many further primes must agree with the fraction after it was found.
    pub confirmations: u32,
}

impl Default for Patience {
    /// A fraction that falls short by 32 digits, with no further prime: right for callers whose exact check
    /// of the candidate costs about as much as one more prime.
    fn default() -> Self {
        Patience {
            margin_bits: 32,
            confirmations: 0,
        }
    }
}

/// What a [`Watch`] has seen.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Progress {
    /// More primes are needed.
    Searching,
    /// The random combination has become the same fraction at all primes. Its denominator is, but for
    /// chance cancellation, the least common denominator of the whole vector.
    Stable(Rational),
}

/// Tells when the residues of a vector of rationals, taken prime by prime, determine it.
///
/// Reconstructing every entry at every prime would cost more than the primes. So one combination
/// `Σ w_i·x_i` with random weights of 31 bits is reconstructed instead: it is at least as large as the entries
/// (but for chance), and its denominator collects theirs.
///
/// Stability is a sign, not a proof: the candidate must be checked by the caller.
///
/// # Examples
///
/// ```
/// use linform_reconstruct::{Patience, Progress, Watch};
/// use linform_scalar::{PrimeField, Rational, primes_below};
///
/// let vector = [Rational::new(1, 2).unwrap(), Rational::new(-7, 3).unwrap()];
/// let mut watch = Watch::new(2, 1, Patience::default());
/// for prime in primes_below(1 << 62) {
///     let field = PrimeField::new(prime).unwrap();
///     let residues: Vec<u64> = vector.iter().filter_map(|x| x.residue(&field)).collect();
///     if let Progress::Stable(combination) = watch.add(&field, &residues) {
///         assert!(combination.denominator() == &6.into());
///         break;
///     }
/// }
/// assert_eq!(watch.primes(), 2);
/// ```
#[derive(Clone, Debug)]
pub struct Watch {
    weights: Vec<u64>,
    combination: ChineseRemainder,
    patience: Patience,
    candidate: Option<Rational>,
    confirmed: u32,
    primes: usize,
}

impl Watch {
    /// A watch over vectors of the given length. The seed fixes the weights.
    pub fn new(length: usize, seed: u64, patience: Patience) -> Watch {
        let mut random = SplitMix::new(seed);
        Watch {
            weights: (0..length)
                .map(|_| (random.next_word() >> 33) | 1)
                .collect(),
            combination: ChineseRemainder::new(1),
            patience,
            candidate: None,
            confirmed: 0,
            primes: 0,
        }
    }

    /// How many primes were added.
    pub fn primes(&self) -> usize {
        self.primes
    }

    /// Adds the residues (plain, in `0..p`) of the vector modulo one more prime.
    ///
    /// # Panics
    ///
    /// If the number of residues differs from the length, or the prime was added before.
    pub fn add(&mut self, field: &PrimeField, residues: &[u64]) -> Progress {
        assert_eq!(
            residues.len(),
            self.weights.len(),
            "one residue for each entry"
        );
        let sum = self
            .weights
            .iter()
            .zip(residues)
            .fold(0, |sum, (weight, residue)| {
                field.add(
                    sum,
                    field.mul(field.element(*weight), field.element(*residue)),
                )
            });
        let sum = field.value(sum);
        self.combination.add(field, &[sum]);
        self.primes += 1;
        let agrees = self
            .candidate
            .as_ref()
            .is_some_and(|candidate| candidate.residue(field) == Some(sum));
        if agrees {
            self.confirmed += 1;
        } else {
            self.confirmed = 0;
            self.candidate = rational_of_maximal_quotient(
                &self.combination.images()[0],
                self.combination.modulus(),
                self.patience.margin_bits,
            );
        }
        match &self.candidate {
            Some(candidate) if self.confirmed >= self.patience.confirmations => {
                Progress::Stable(candidate.clone())
            }
            _ => Progress::Searching,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use linform_scalar::{Integer, primes_below};

    fn primes_until_stable(vector: &[Rational], patience: Patience) -> Option<(usize, Rational)> {
        let mut watch = Watch::new(vector.len(), 7, patience);
        for prime in primes_below(1 << 62).take(20) {
            let field = PrimeField::new(prime).unwrap();
            let residues: Vec<u64> = vector.iter().map(|x| x.residue(&field).unwrap()).collect();
            if let Progress::Stable(value) = watch.add(&field, &residues) {
                return Some((watch.primes(), value));
            }
        }
        None
    }

    #[test]
    fn the_number_of_primes_follows_the_size_of_the_entries() {
        let large = Rational::new(Integer::from(3).pow(200), Integer::from(5).pow(60)).unwrap();
        let vector = [Rational::new(1, 3).unwrap(), large, Rational::ZERO];
        // 317 + 140 bits, a weight of 31, the factor 3 and the margin: nine primes.
        let (primes, combination) = primes_until_stable(&vector, Patience::default()).unwrap();
        assert_eq!(primes, 9);
        assert_eq!(
            combination.denominator(),
            &(Integer::from(3) * Integer::from(5).pow(60))
        );
    }

    #[test]
    fn confirmations_ask_for_further_primes() {
        let vector = [Rational::new(-5, 7).unwrap()];
        let mut patience = Patience {
            margin_bits: 8,
            confirmations: 0,
        };
        assert_eq!(primes_until_stable(&vector, patience).unwrap().0, 1);
        patience.confirmations = 2;
        assert_eq!(primes_until_stable(&vector, patience).unwrap().0, 3);
    }

    #[test]
    fn an_empty_vector_is_stable_at_once() {
        assert_eq!(
            primes_until_stable(&[], Patience::default()),
            Some((1, Rational::ZERO))
        );
    }

    #[test]
    fn residues_without_a_common_source_do_not_settle() {
        let mut watch = Watch::new(1, 3, Patience::default());
        let mut random = SplitMix::new(99);
        for prime in primes_below(1 << 62).take(12) {
            let noise = random.next_word() % prime;
            let progress = watch.add(&PrimeField::new(prime).unwrap(), &[noise]);
            assert_eq!(progress, Progress::Searching);
        }
    }
}
