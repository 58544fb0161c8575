//! The primes and points that all parts of the crate draw on.

use linform_scalar::{PrimeField, SplitMix, primes_below};
use std::sync::Mutex;

/// Fields with primes just below `2^62`, the same in every run: the `index`-th in falling order.
pub(crate) fn prime_field(index: usize) -> PrimeField {
    // Testing a word for primality costs as much as solving a small system, so tests are not repeated.
    static KNOWN: Mutex<Vec<PrimeField>> = Mutex::new(Vec::new());
    let mut known = KNOWN
        .lock()
        .unwrap_or_else(std::sync::PoisonError::into_inner);
    while known.len() <= index {
        let bound = known.last().map_or(1 << 62, PrimeField::prime);
        known.extend(primes_below(bound).take(1).filter_map(PrimeField::new));
    }
    known[index]
}

/// A random element other than 0 and 1.
pub(crate) fn random_element(random: &mut SplitMix, field: &PrimeField) -> u64 {
    loop {
        let element = random.next_word() % field.prime();
        if element != 0 && element != field.one() {
            return element;
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn fields_are_numbered_by_falling_primes() {
        let expected: Vec<u64> = primes_below(1 << 62).take(4).collect();
        for index in [2, 0, 3, 1] {
            assert_eq!(prime_field(index).prime(), expected[index]);
        }
    }
}
