//! Products of powers of symbols.

use smallvec::SmallVec;
use std::fmt;

/// Fields of one word.
const FIELDS: usize = 4;
/// The guard bit of every field.
const GUARDS: u64 = 0x8000_8000_8000_8000;

/// A product of powers of symbols; symbols are numbered from 0.
///
/// *Invariant*: exponents are packed into 16-bit fields, four to a word, the first symbol in the top bits of
/// the first word; the top bit of every field is 0; the last word is not 0. So the order of the word
/// sequences is the lexicographic order with the first symbol most significant, and the representation is
/// unique whatever the number of symbols (packed exponents: M. Monagan & R. Pearce, CASC 2007, 295–315).
#[derive(Clone, PartialEq, Eq, PartialOrd, Ord, Hash, Default)]
pub struct Monomial(SmallVec<[u64; 2]>);

fn place(index: usize) -> (usize, usize) {
    (index / FIELDS, 16 * (FIELDS - 1 - index % FIELDS))
}

/// All bits below the guard bit, in those fields whose guard bit is set in `guards`.
fn mask_of(guards: u64) -> u64 {
    guards - (guards >> 15)
}

impl Monomial {
    /// The largest exponent.
    pub const MAX_EXPONENT: u16 = 0x7fff;

    /// The empty product.
    pub fn one() -> Monomial {
        Monomial::default()
    }

    /// One symbol to a power, or nothing if the exponent exceeds [`Monomial::MAX_EXPONENT`].
    pub fn power(symbol: usize, exponent: u16) -> Option<Monomial> {
        if exponent > Monomial::MAX_EXPONENT {
            return None;
        }
        let mut result = Monomial::one();
        if exponent > 0 {
            let (word, shift) = place(symbol);
            result.0.resize(word + 1, 0);
            result.0[word] = u64::from(exponent) << shift;
        }
        Some(result)
    }

    /// The product of the powers with the given exponents, or nothing if one exceeds
    /// [`Monomial::MAX_EXPONENT`].
    pub fn from_exponents(exponents: &[u16]) -> Option<Monomial> {
        let mut result = Monomial::one();
        result.0.resize(exponents.len().div_ceil(FIELDS), 0);
        for (index, &exponent) in exponents.iter().enumerate() {
            if exponent > Monomial::MAX_EXPONENT {
                return None;
            }
            let (word, shift) = place(index);
            result.0[word] |= u64::from(exponent) << shift;
        }
        result.trim();
        Some(result)
    }

    /// The product of powers of different symbols, given in rising order.
    pub(crate) fn from_fields(fields: impl Iterator<Item = (usize, u16)>) -> Monomial {
        let mut result = Monomial::one();
        for (symbol, exponent) in fields {
            if exponent > 0 {
                let (word, shift) = place(symbol);
                while result.0.len() <= word {
                    result.0.push(0);
                }
                result.0[word] |= u64::from(exponent) << shift;
            }
        }
        result
    }

    fn trim(&mut self) {
        while self.0.last() == Some(&0) {
            self.0.pop();
        }
    }

    /// Is this the empty product?
    pub fn is_one(&self) -> bool {
        self.0.is_empty()
    }

    /// The exponent of one symbol.
    pub fn exponent(&self, index: usize) -> u16 {
        let (word, shift) = place(index);
        self.0.get(word).map_or(0, |w| (w >> shift) as u16)
    }

    /// The exponents of the first `count` symbols.
    pub fn exponents(&self, count: usize) -> Vec<u16> {
        (0..count).map(|index| self.exponent(index)).collect()
    }

    /// One more than the index of the last symbol that occurs; 0 for the empty product.
    pub fn width(&self) -> usize {
        match self.0.last() {
            None => 0,
            Some(word) => FIELDS * self.0.len() - word.trailing_zeros() as usize / 16,
        }
    }

    /// The sum of all exponents.
    pub fn total_degree(&self) -> u64 {
        (0..self.width())
            .map(|index| u64::from(self.exponent(index)))
            .sum()
    }

    /// The product, or nothing if an exponent exceeds [`Monomial::MAX_EXPONENT`].
    pub fn checked_mul(&self, other: &Monomial) -> Option<Monomial> {
        let (long, short) = if self.0.len() >= other.0.len() {
            (self, other)
        } else {
            (other, self)
        };
        let mut product = long.clone();
        let mut seen = 0;
        // Two fields below 2^15 never carry into the next field; the guard bit shows the overflow.
        for (word, summand) in product.0.iter_mut().zip(&short.0) {
            *word += summand;
            seen |= *word;
        }
        (seen & GUARDS == 0).then_some(product)
    }

    /// Does this divide `other`?
    pub fn divides(&self, other: &Monomial) -> bool {
        self.0.len() <= other.0.len()
            && self
                .0
                .iter()
                .zip(&other.0)
                .all(|(a, b)| ((b | GUARDS) - a) & GUARDS == GUARDS)
    }

    /// The quotient, or nothing if `divisor` does not divide this.
    pub fn div(&self, divisor: &Monomial) -> Option<Monomial> {
        if !divisor.divides(self) {
            return None;
        }
        let mut quotient = self.clone();
        for (word, subtrahend) in quotient.0.iter_mut().zip(&divisor.0) {
            *word -= subtrahend;
        }
        quotient.trim();
        Some(quotient)
    }

    /// The greatest common divisor: the smaller exponent of every symbol.
    pub fn gcd(&self, other: &Monomial) -> Monomial {
        let mut result = Monomial(
            self.0
                .iter()
                .zip(&other.0)
                .map(|(&a, &b)| {
                    let mask = mask_of(((a | GUARDS) - b) & GUARDS);
                    (b & mask) | (a & !mask)
                })
                .collect(),
        );
        result.trim();
        result
    }

    /// The least common multiple: the larger exponent of every symbol.
    pub fn lcm(&self, other: &Monomial) -> Monomial {
        let (long, short) = if self.0.len() >= other.0.len() {
            (self, other)
        } else {
            (other, self)
        };
        let mut result = long.clone();
        for (a, &b) in result.0.iter_mut().zip(&short.0) {
            let mask = mask_of(((*a | GUARDS) - b) & GUARDS);
            *a = (*a & mask) | (b & !mask);
        }
        result
    }

    /// The part in the first `count` symbols and the part in the rest; their product is this monomial.
    pub fn split_at(&self, count: usize) -> (Monomial, Monomial) {
        let (word, shift) = place(count);
        if word >= self.0.len() {
            return (self.clone(), Monomial::one());
        }
        // `shift + 16` is the lowest bit that belongs to the head; 64 when the whole word is tail.
        let tail_mask = u64::MAX >> (48 - shift);
        let mut head = Monomial(SmallVec::from_slice(&self.0[..=word]));
        head.0[word] &= !tail_mask;
        head.trim();
        let mut tail = self.clone();
        tail.0[..word].fill(0);
        tail.0[word] &= tail_mask;
        tail.trim();
        (head, tail)
    }
}

impl fmt::Debug for Monomial {
    /// Writes the list of exponents.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.debug_list()
            .entries(self.exponents(self.width()))
            .finish()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn exponents() -> impl Strategy<Value = Vec<u16>> {
        let exponent = prop_oneof![
            Just(0u16),
            0u16..5,
            Just(0x7fff),
            Just(0x4000),
            0u16..0x8000
        ];
        (0usize..11).prop_flat_map(move |n| proptest::collection::vec(exponent.clone(), n))
    }

    fn padded(mut exponents: Vec<u16>) -> Vec<u16> {
        exponents.resize(11, 0);
        exponents
    }

    proptest! {
        #![proptest_config(crate::testing::cases(256))]

        #[test]
        fn packed_operations_agree_with_lists_of_exponents(a in exponents(), b in exponents(), k in 0usize..12) {
            let (x, y) = (Monomial::from_exponents(&a).unwrap(), Monomial::from_exponents(&b).unwrap());
            let (a, b) = (padded(a), padded(b));
            prop_assert_eq!(x.exponents(11), a.clone());
            prop_assert_eq!(x.cmp(&y), a.cmp(&b));
            prop_assert_eq!(x == y, a == b);
            prop_assert_eq!(x.width(), a.iter().rposition(|&e| e > 0).map_or(0, |i| i + 1));
            let sum: Vec<u16> = a.iter().zip(&b).map(|(a, b)| a + b).collect();
            match x.checked_mul(&y) {
                None => prop_assert!(sum.iter().any(|&e| e > 0x7fff)),
                Some(product) => {
                    prop_assert_eq!(product.exponents(11), sum);
                    prop_assert_eq!(product.div(&y), Some(x.clone()));
                }
            }
            prop_assert_eq!(x.divides(&y), a.iter().zip(&b).all(|(a, b)| a <= b));
            prop_assert_eq!(x.div(&y).is_some(), y.divides(&x));
            let pick = |choose: fn(u16, u16) -> u16| -> Vec<u16> { a.iter().zip(&b).map(|(&a, &b)| choose(a, b)).collect() };
            prop_assert_eq!(x.gcd(&y).exponents(11), pick(u16::min));
            prop_assert_eq!(x.lcm(&y).exponents(11), pick(u16::max));
            prop_assert_eq!(x.gcd(&y), Monomial::from_exponents(&pick(u16::min)).unwrap());
            let (head, tail) = x.split_at(k);
            prop_assert!(head.width() <= k && tail.exponents(k).iter().all(|&e| e == 0));
            prop_assert_eq!(head.checked_mul(&tail), Some(x));
        }
    }

    #[test]
    fn exponents_beyond_fifteen_bits_are_refused() {
        assert_eq!(Monomial::power(3, 0x8000), None);
        assert_eq!(Monomial::from_exponents(&[0, 0xffff]), None);
        assert_eq!(Monomial::power(7, 0), Some(Monomial::one()));
    }
}
