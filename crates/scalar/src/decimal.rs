//! Decimal numbers as exact rationals, and back.

use crate::{Integer, Rational};
use std::fmt;

/// A text is not a decimal number that the program reads.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum DecimalError {
    /// Not of the form `[±]digits[.digits][e[±]digits]`.
    Form,
    /// The power of ten is beyond ±10 000, or the text has more than a million digits.
    Size,
}

impl fmt::Display for DecimalError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            DecimalError::Form => {
                "not a decimal number: expected digits, with an optional point and exponent"
            }
            DecimalError::Size => "a decimal number with more digits than the program takes",
        })
    }
}

impl std::error::Error for DecimalError {}

const MOST_DIGITS: usize = 1_000_000;
const MOST_EXPONENT: i64 = 10_000;

/// The exact value of a decimal such as `-0.295`, `12`, or `1.5e-7`.
///
/// # Errors
///
/// [`DecimalError::Form`] for any other text, [`DecimalError::Size`] beyond the limits stated there.
pub fn rational_of_decimal(text: &str) -> Result<Rational, DecimalError> {
    if text.len() > MOST_DIGITS {
        return Err(DecimalError::Size);
    }
    let (mantissa, exponent) = match text.split_once(['e', 'E']) {
        Some((mantissa, exponent)) => {
            let digits = exponent.strip_prefix(['+', '-']).unwrap_or(exponent);
            if digits.is_empty() || !digits.bytes().all(|b| b.is_ascii_digit()) {
                return Err(DecimalError::Form);
            }
            (
                mantissa,
                exponent.parse::<i64>().map_err(|_| DecimalError::Size)?,
            )
        }
        None => (text, 0),
    };
    if exponent.abs() > MOST_EXPONENT {
        return Err(DecimalError::Size);
    }
    let (whole, fraction) = mantissa.split_once('.').unwrap_or((mantissa, ""));
    let unsigned = whole.strip_prefix(['+', '-']).unwrap_or(whole);
    let all_digits = |text: &str| text.bytes().all(|b| b.is_ascii_digit());
    if !all_digits(unsigned) || !all_digits(fraction) || unsigned.is_empty() && fraction.is_empty()
    {
        return Err(DecimalError::Form);
    }
    let digits: Integer = format!("{unsigned}{fraction}")
        .parse()
        .map_err(|_| DecimalError::Form)?;
    let digits = if whole.starts_with('-') {
        -digits
    } else {
        digits
    };
    let power = exponent - fraction.len() as i64;
    let ten = Integer::from(10).pow(power.unsigned_abs() as u32);
    let value = if power >= 0 {
        Some((digits * ten).into())
    } else {
        Rational::new(digits, ten)
    };
    value.ok_or(DecimalError::Form)
}

/// The decimal with `places` digits after the point that is nearest to a rational (ties away from 0).
pub fn decimal_of_rational(value: &Rational, places: u32) -> String {
    let two = Integer::from(2);
    let scaled =
        &(&value.numerator().abs() * &Integer::from(10).pow(places)) * &two + value.denominator();
    let rounded = scaled.div_rem_euclid(&(value.denominator() * &two)).0;
    let sign = if value.is_negative() && !rounded.is_zero() {
        "-"
    } else {
        ""
    };
    let digits = format!(
        "{:0>width$}",
        rounded.to_string(),
        width = places as usize + 1
    );
    let (whole, fraction) = digits.split_at(digits.len() - places as usize);
    if fraction.is_empty() {
        format!("{sign}{whole}")
    } else {
        format!("{sign}{whole}.{fraction}")
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn decimals_are_read_exactly() {
        let half = Rational::new(1, 2).unwrap();
        for text in ["0.5", ".5", "5e-1", "+0.50", "50E-2"] {
            assert_eq!(rational_of_decimal(text).unwrap(), half, "{text}");
        }
        assert_eq!(
            rational_of_decimal("-12.25").unwrap(),
            Rational::new(-49, 4).unwrap()
        );
        assert_eq!(rational_of_decimal("-0.5").unwrap(), -&half);
        for text in [
            "", ".", "1.2.3", "0x10", "1e", "--1", "1,5", "∞", "e5", "1e+-5",
        ] {
            assert_eq!(rational_of_decimal(text), Err(DecimalError::Form), "{text}");
        }
        assert_eq!(
            rational_of_decimal("1e99999999999999999999"),
            Err(DecimalError::Size)
        );
    }

    #[test]
    fn decimals_are_written_to_the_nearest_place() {
        let third = Rational::new(-2, 3).unwrap();
        assert_eq!(decimal_of_rational(&third, 3), "-0.667");
        assert_eq!(decimal_of_rational(&third, 0), "-1");
        assert_eq!(
            decimal_of_rational(&Rational::new(-1, 1000).unwrap(), 1),
            "0.0"
        );
        assert_eq!(
            decimal_of_rational(&Rational::new(1, 8).unwrap(), 2),
            "0.13"
        );
    }
}
