//! The number types of published results and of independent checks.
//!
//! They come from the pure-Rust `num` crates and share no code with the arithmetic that finds an answer:
//! a mistake there cannot hide itself when the answer is checked here.

use crate::{Integer, Rational};
pub use num_bigint::BigInt;
pub use num_integer::{gcd, lcm};
pub use num_rational::BigRational;
pub use num_traits::{One, Pow, Signed, Zero};

/// The published form of an integer, by way of its words.
pub fn publish_integer(value: &Integer) -> BigInt {
    let halves: Vec<u32> = value
        .magnitude_words()
        .iter()
        .flat_map(|word| [*word as u32, (word >> 32) as u32])
        .collect();
    let sign = if value.is_negative() {
        num_bigint::Sign::Minus
    } else {
        num_bigint::Sign::Plus
    };
    BigInt::from_slice(sign, &halves)
}

/// The published form of a rational.
pub fn publish_rational(value: &Rational) -> BigRational {
    // Both sides keep lowest terms with a positive denominator, so nothing has to be reduced again.
    BigRational::new_raw(
        publish_integer(value.numerator()),
        publish_integer(value.denominator()),
    )
}

/// The working form of a published integer.
pub fn integer_of(value: &BigInt) -> Integer {
    let (sign, words) = value.to_u64_digits();
    Integer::from_words(sign == num_bigint::Sign::Minus, &words)
}

/// The working form of a published rational.
pub fn rational_of(value: &BigRational) -> Option<Rational> {
    Rational::new(integer_of(value.numer()), integer_of(value.denom()))
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn publishing_keeps_the_value(a: i128, b: i128, c in 1i128..i128::MAX) {
            let value = Rational::new(Integer::from(a) * Integer::from(b), c).unwrap();
            let published = publish_rational(&value);
            prop_assert_eq!(published.to_string(), value.to_string());
            prop_assert_eq!(rational_of(&published).unwrap(), value);
        }
    }
}
