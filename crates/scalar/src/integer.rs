//! Arbitrary-precision integers.

use rug::integer::IntegerExt64;
use std::cmp::Ordering;
use std::fmt;
use std::hash::{Hash, Hasher};
use std::str::FromStr;

/// An integer of any size.
///
/// *Invariant*: values that fit into an `i64` are stored inline (no allocation), all others in GMP. The
/// representation is therefore unique and equality is structural. Most coefficients of the polynomials in
/// this program are small, which is why the inline form pays.
#[derive(Clone, PartialEq, Eq)]
pub struct Integer(pub(crate) Repr);

#[derive(Clone, PartialEq, Eq)]
pub(crate) enum Repr {
    Small(i64),
    Large(rug::Integer),
}

/// A text is not a number in the form that the program reads.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ParseNumberError;

impl fmt::Display for ParseNumberError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("not a number: expected decimal digits with an optional sign")
    }
}

impl std::error::Error for ParseNumberError {}

impl Integer {
    /// The integer 0.
    pub const ZERO: Integer = Integer(Repr::Small(0));
    /// The integer 1.
    pub const ONE: Integer = Integer(Repr::Small(1));

    pub(crate) fn from_big(value: rug::Integer) -> Self {
        match value.to_i64() {
            Some(small) => Integer(Repr::Small(small)),
            None => Integer(Repr::Large(value)),
        }
    }

    pub(crate) fn to_big(&self) -> rug::Integer {
        match &self.0 {
            Repr::Small(v) => rug::Integer::from(*v),
            Repr::Large(v) => v.clone(),
        }
    }

    /// Is this 0?
    pub fn is_zero(&self) -> bool {
        matches!(self.0, Repr::Small(0))
    }

    /// Is this 1?
    pub fn is_one(&self) -> bool {
        matches!(self.0, Repr::Small(1))
    }

    /// The sign, as a comparison with 0.
    pub fn sign(&self) -> Ordering {
        match &self.0 {
            Repr::Small(v) => v.cmp(&0),
            Repr::Large(v) => v.cmp0(),
        }
    }

    /// Is this below 0?
    pub fn is_negative(&self) -> bool {
        self.sign() == Ordering::Less
    }

    /// Is this odd?
    pub fn is_odd(&self) -> bool {
        match &self.0 {
            Repr::Small(v) => v & 1 == 1,
            Repr::Large(v) => v.is_odd(),
        }
    }

    /// The absolute value.
    pub fn abs(&self) -> Integer {
        if self.is_negative() {
            -self
        } else {
            self.clone()
        }
    }

    /// The number of binary digits of the absolute value; 0 for 0.
    pub fn bits(&self) -> u64 {
        match &self.0 {
            Repr::Small(v) => u64::from(64 - v.unsigned_abs().leading_zeros()),
            Repr::Large(v) => u64::from(v.significant_bits()),
        }
    }

    /// The value as a word, if it fits.
    pub fn to_i64(&self) -> Option<i64> {
        match self.0 {
            Repr::Small(v) => Some(v),
            Repr::Large(_) => None,
        }
    }

    /// The value as two words, if it fits.
    pub fn to_i128(&self) -> Option<i128> {
        match &self.0 {
            Repr::Small(v) => Some(i128::from(*v)),
            Repr::Large(v) => v.to_i128(),
        }
    }

    /// The residue in `0..modulus`.
    ///
    /// # Panics
    ///
    /// If `modulus` is 0.
    pub fn residue(&self, modulus: u64) -> u64 {
        match &self.0 {
            Repr::Small(v) => {
                let magnitude = v.unsigned_abs() % modulus;
                if *v < 0 && magnitude != 0 {
                    modulus - magnitude
                } else {
                    magnitude
                }
            }
            Repr::Large(v) => {
                // GMP's word division takes the whole word here; the sign of the remainder follows the rounding.
                v.mod_u64(modulus)
            }
        }
    }

    /// The greatest common divisor, never negative; `gcd(0, 0) = 0`.
    pub fn gcd(&self, other: &Integer) -> Integer {
        if let (Repr::Small(a), Repr::Small(b)) = (&self.0, &other.0) {
            return Integer::from(gcd_word(a.unsigned_abs(), b.unsigned_abs()));
        }
        if self.is_zero() {
            return other.abs();
        }
        if other.is_zero() {
            return self.abs();
        }
        match (&self.0, &other.0) {
            (Repr::Small(a), Repr::Large(b)) | (Repr::Large(b), Repr::Small(a)) => {
                let a = a.unsigned_abs();
                Integer::from(gcd_word(b.mod_u64(a), a))
            }
            (Repr::Large(a), Repr::Large(b)) => Integer::from_big(rug::Integer::from(a.gcd_ref(b))),
            (Repr::Small(_), Repr::Small(_)) => unreachable!("two words were handled above"),
        }
    }

    /// The least common multiple, never negative.
    pub fn lcm(&self, other: &Integer) -> Integer {
        if self.is_zero() || other.is_zero() {
            return Integer::ZERO;
        }
        (&self.div_exact(&self.gcd(other)) * other).abs()
    }

    /// The quotient of a division known to leave no remainder.
    ///
    /// # Panics
    ///
    /// If `divisor` is 0. A division that does leave a remainder gives an unspecified integer.
    pub fn div_exact(&self, divisor: &Integer) -> Integer {
        match (&self.0, &divisor.0) {
            (_, Repr::Small(1)) => self.clone(),
            (Repr::Small(a), Repr::Small(b)) if !(*a == i64::MIN && *b == -1) => {
                Integer(Repr::Small(a / b))
            }
            _ => {
                let mut quotient = self.to_big();
                quotient.div_exact_mut(&divisor.to_big());
                Integer::from_big(quotient)
            }
        }
    }

    /// Quotient and remainder, `self = quotient · divisor + remainder` with `0 ≤ remainder < |divisor|`.
    ///
    /// # Panics
    ///
    /// If `divisor` is 0.
    pub fn div_rem_euclid(&self, divisor: &Integer) -> (Integer, Integer) {
        if let (Repr::Small(a), Repr::Small(b)) = (&self.0, &divisor.0)
            && let (Some(quotient), Some(remainder)) =
                (a.checked_div_euclid(*b), a.checked_rem_euclid(*b))
        {
            return (quotient.into(), remainder.into());
        }
        let (quotient, remainder) = self.to_big().div_rem_euc(divisor.to_big());
        (Integer::from_big(quotient), Integer::from_big(remainder))
    }

    /// Does `self` divide `other`?
    pub fn divides(&self, other: &Integer) -> bool {
        if self.is_zero() {
            other.is_zero()
        } else {
            other.div_rem_euclid(self).1.is_zero()
        }
    }

    /// The power with a word exponent.
    pub fn pow(&self, exponent: u32) -> Integer {
        if let Repr::Small(v) = self.0
            && let Some(power) = v.checked_pow(exponent)
        {
            return power.into();
        }
        Integer::from_big(rug::ops::Pow::pow(self.to_big(), exponent))
    }

    /// The integer part of the square root of a value that is not negative.
    ///
    /// # Panics
    ///
    /// If the value is negative.
    pub fn sqrt_floor(&self) -> Integer {
        Integer::from_big(self.to_big().sqrt())
    }

    /// Adds `a · b` in place.
    pub fn add_product(&mut self, a: &Integer, b: &Integer) {
        if let (Repr::Small(s), Repr::Small(x), Repr::Small(y)) = (&self.0, &a.0, &b.0) {
            let sum = i128::from(*s) + i128::from(*x) * i128::from(*y);
            *self = Integer::from(sum);
            return;
        }
        if let (Repr::Large(s), Repr::Large(x), Repr::Large(y)) = (&mut self.0, &a.0, &b.0) {
            *s += x * y;
            self.normalise();
            return;
        }
        *self += &(a * b);
    }

    /// Subtracts `a · b` in place.
    pub fn sub_product(&mut self, a: &Integer, b: &Integer) {
        if let (Repr::Large(s), Repr::Large(x), Repr::Large(y)) = (&mut self.0, &a.0, &b.0) {
            *s -= x * y;
            self.normalise();
            return;
        }
        self.add_product(&-a, b);
    }

    /// Restores the invariant after an operation in place on the large form.
    pub(crate) fn normalise(&mut self) {
        if let Repr::Large(v) = &self.0
            && let Some(small) = v.to_i64()
        {
            self.0 = Repr::Small(small);
        }
    }

    /// The value from the words of its magnitude, least significant first, and its sign.
    pub fn from_words(negative: bool, words: &[u64]) -> Integer {
        let magnitude = rug::Integer::from_digits(words, rug::integer::Order::Lsf);
        Integer::from_big(if negative { -magnitude } else { magnitude })
    }

    /// The words of the magnitude, least significant first (none for 0).
    pub fn magnitude_words(&self) -> Vec<u64> {
        match &self.0 {
            Repr::Small(0) => Vec::new(),
            Repr::Small(v) => vec![v.unsigned_abs()],
            Repr::Large(v) => v.to_digits(rug::integer::Order::Lsf),
        }
    }

    /// Puts the words of the magnitude, least significant first, in place of what a buffer holds: for loops in
    /// which [`Integer::magnitude_words`] would allocate.
    pub fn write_magnitude_words(&self, buffer: &mut Vec<u64>) {
        buffer.clear();
        match &self.0 {
            Repr::Small(0) => {}
            Repr::Small(v) => buffer.push(v.unsigned_abs()),
            Repr::Large(v) => {
                buffer.resize(v.significant_digits::<u64>(), 0);
                v.write_digits(buffer, rug::integer::Order::Lsf);
            }
        }
    }
}

/// Binary algorithm on words (J. Stein, J. Comput. Phys. 1 (1967) 397–405).
fn gcd_word(mut a: u64, mut b: u64) -> u64 {
    if a == 0 || b == 0 {
        return a | b;
    }
    let shift = (a | b).trailing_zeros();
    a >>= a.trailing_zeros();
    while b != 0 {
        b >>= b.trailing_zeros();
        if a > b {
            std::mem::swap(&mut a, &mut b);
        }
        b -= a;
    }
    a << shift
}

impl Default for Integer {
    fn default() -> Self {
        Integer::ZERO
    }
}

impl Hash for Integer {
    fn hash<H: Hasher>(&self, state: &mut H) {
        match &self.0 {
            Repr::Small(v) => v.hash(state),
            Repr::Large(v) => v.hash(state),
        }
    }
}

impl PartialOrd for Integer {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Integer {
    fn cmp(&self, other: &Self) -> Ordering {
        match (&self.0, &other.0) {
            (Repr::Small(a), Repr::Small(b)) => a.cmp(b),
            (Repr::Large(a), Repr::Large(b)) => a.cmp(b),
            // A large value lies outside the words, so its sign decides.
            (Repr::Small(_), Repr::Large(b)) => b.cmp0().reverse(),
            (Repr::Large(a), Repr::Small(_)) => a.cmp0(),
        }
    }
}

macro_rules! from_word {
    ($($word:ty),*) => { $(
        impl From<$word> for Integer {
            fn from(value: $word) -> Self {
                match i64::try_from(value) {
                    Ok(small) => Integer(Repr::Small(small)),
                    Err(_) => Integer(Repr::Large(rug::Integer::from(value))),
                }
            }
        }
    )* };
}
from_word!(i32, i64, i128, u32, u64, u128, usize);

impl fmt::Display for Integer {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match &self.0 {
            Repr::Small(v) => fmt::Display::fmt(v, f),
            Repr::Large(v) => fmt::Display::fmt(v, f),
        }
    }
}

impl fmt::Debug for Integer {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        fmt::Display::fmt(self, f)
    }
}

impl FromStr for Integer {
    type Err = ParseNumberError;

    /// Reads decimal digits with an optional sign; no spaces, no separators.
    fn from_str(text: &str) -> Result<Self, ParseNumberError> {
        let digits = text.strip_prefix(['+', '-']).unwrap_or(text);
        if digits.is_empty() || !digits.bytes().all(|b| b.is_ascii_digit()) {
            return Err(ParseNumberError);
        }
        match text.parse::<i64>() {
            Ok(small) => Ok(small.into()),
            Err(_) => text
                .parse::<rug::Integer>()
                .map(Integer::from_big)
                .map_err(|_| ParseNumberError),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn integers() -> impl Strategy<Value = Integer> {
        prop_oneof![
            (-4i64..4).prop_map(Integer::from),
            any::<i64>().prop_map(Integer::from),
            prop_oneof![Just(i64::MIN), Just(i64::MAX), Just(i64::MIN + 1)].prop_map(Integer::from),
            any::<i128>().prop_map(Integer::from),
            (any::<i128>(), any::<i128>()).prop_map(|(a, b)| Integer::from(a) * Integer::from(b)),
        ]
    }

    proptest! {
        #[test]
        fn operations_agree_with_the_backend(a in integers(), b in integers(), c in integers()) {
            let (x, y, z) = (a.to_big(), b.to_big(), c.to_big());
            prop_assert_eq!((&a + &b).to_big(), rug::Integer::from(&x + &y));
            prop_assert_eq!((&a - &b).to_big(), rug::Integer::from(&x - &y));
            prop_assert_eq!((&a * &b).to_big(), rug::Integer::from(&x * &y));
            prop_assert_eq!(a.gcd(&b).to_big(), x.clone().gcd(&y));
            prop_assert_eq!(a.cmp(&b), x.cmp(&y));
            let mut s = a.clone();
            s.add_product(&b, &c);
            prop_assert_eq!(s.to_big(), rug::Integer::from(&y * &z) + &x);
            s.sub_product(&b, &c);
            prop_assert_eq!(&s, &a);
            prop_assert_eq!(&(&a + &b) - &b, a.clone());
            if !b.is_zero() {
                prop_assert_eq!((&a * &b).div_exact(&b), a.clone());
                let (q, r) = a.div_rem_euclid(&b);
                prop_assert!(!r.is_negative() && r < b.abs());
                prop_assert_eq!(&(&q * &b) + &r, a.clone());
            }
            prop_assert_eq!(a.to_i64(), x.to_i64());
            prop_assert_eq!(a.to_i128(), x.to_i128());
            prop_assert_eq!(a.residue(1_000_003), x.mod_u64(1_000_003));
            prop_assert_eq!(a.residue(u64::MAX - 58), x.mod_u64(u64::MAX - 58));
            prop_assert_eq!(a.to_string().parse::<Integer>().unwrap(), a.clone());
            let mut words = vec![7; 3];
            a.write_magnitude_words(&mut words);
            prop_assert_eq!(&words, &a.magnitude_words());
            prop_assert_eq!(Integer::from_words(a.is_negative(), &words), a);
        }
    }
}
