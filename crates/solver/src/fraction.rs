//! Fractions of polynomials.

use linform_ring::Polynomial;
use linform_scalar::{Control, Rational, Stop};

/// An element of the field of fractions of the polynomials over ℚ.
///
/// *Invariant*: numerator and denominator are coprime; the denominator is integral and primitive with positive
/// leading coefficient. So equality is structural.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub struct Fraction {
    numerator: Polynomial,
    denominator: Polynomial,
}

impl Default for Fraction {
    fn default() -> Self {
        Fraction::zero()
    }
}

impl From<Polynomial> for Fraction {
    fn from(numerator: Polynomial) -> Self {
        Fraction {
            numerator,
            denominator: Polynomial::one(),
        }
    }
}

impl Fraction {
    /// The fraction 0.
    pub fn zero() -> Fraction {
        Polynomial::zero().into()
    }

    /// The fraction 1.
    pub fn one() -> Fraction {
        Polynomial::one().into()
    }

    /// `numerator / denominator` in lowest terms, or nothing if the denominator is 0.
    ///
    /// # Errors
    ///
    /// The reason for which the control or the size of a polynomial ended the work.
    ///
    /// # Complexity
    ///
    /// One gcd and two exact divisions of polynomials, none if the denominator is a number.
    pub fn new(
        numerator: Polynomial,
        denominator: Polynomial,
        control: &dyn Control,
    ) -> Result<Option<Fraction>, Stop> {
        if let Some(number) = denominator.as_constant() {
            let inverse = number.recip();
            return Ok(inverse.map(|inverse| numerator.scale(&inverse).into()));
        }
        if numerator.is_zero() {
            return Ok(Some(Fraction::zero()));
        }
        let common = numerator.gcd(&denominator, control)?;
        let (numerator, denominator) = if common.as_constant().is_some() {
            (numerator, denominator)
        } else {
            (
                quotient(&numerator, &common, control)?,
                quotient(&denominator, &common, control)?,
            )
        };
        let primitive = denominator.primitive_part();
        let factor = leading(&primitive).checked_div(&leading(&denominator));
        Ok(factor.map(|factor| Fraction {
            numerator: numerator.scale(&factor),
            denominator: primitive,
        }))
    }

    /// The numerator; it carries the fraction's denominators in ℚ.
    pub fn numerator(&self) -> &Polynomial {
        &self.numerator
    }

    /// The denominator; 1 exactly when the fraction is a polynomial over ℚ.
    pub fn denominator(&self) -> &Polynomial {
        &self.denominator
    }

    /// The value, if it is a polynomial over ℚ.
    pub fn is_polynomial(&self) -> Option<Polynomial> {
        self.as_polynomial().cloned()
    }

    /// The value by reference, if it is a polynomial over ℚ.
    pub fn as_polynomial(&self) -> Option<&Polynomial> {
        self.denominator.is_one().then_some(&self.numerator)
    }

    /// Is this 0?
    pub fn is_zero(&self) -> bool {
        self.numerator.is_zero()
    }

    /// A rational multiple.
    pub fn scale(&self, factor: &Rational) -> Fraction {
        if factor.is_zero() {
            return Fraction::zero();
        }
        // The factor goes to the numerator, which carries the denominators in ℚ: the invariant stays.
        Fraction {
            numerator: self.numerator.scale(factor),
            denominator: self.denominator.clone(),
        }
    }
}

/// The leading coefficient; 0 for 0.
fn leading(value: &Polynomial) -> Rational {
    value
        .leading()
        .and_then(|(_, coefficient)| {
            Rational::new(coefficient.clone(), value.denominator().clone())
        })
        .unwrap_or_default()
}

/// The quotient by a divisor known to divide.
///
/// # Panics
///
/// If it does not: then the caller's algebra is wrong.
pub(crate) fn quotient(
    value: &Polynomial,
    divisor: &Polynomial,
    control: &dyn Control,
) -> Result<Polynomial, Stop> {
    if divisor.is_one() {
        return Ok(value.clone());
    }
    let quotient = value.div_exact(divisor, control)?;
    Ok(quotient
        .expect("the divisor divides: it is a gcd, or a pivot of a fraction-free elimination"))
}

#[cfg(test)]
mod tests {
    use super::*;
    use linform_ring::Symbols;
    use linform_scalar::Unlimited;

    fn fraction(numerator: &str, denominator: &str) -> Option<Fraction> {
        let symbols = Symbols::new(vec![], Some("t".into()), vec!["b".into()]);
        let read = |text| symbols.parse(text).unwrap();
        Fraction::new(read(numerator), read(denominator), &Unlimited).unwrap()
    }

    #[test]
    fn equal_fractions_have_one_representation() {
        let expected = fraction("(t + b)/2", "t - 1").unwrap();
        assert_eq!(
            expected.denominator(),
            fraction("t - 1", "1").unwrap().numerator()
        );
        for (numerator, denominator) in [
            ("t + b", "2*t - 2"),
            ("-3*t - 3*b", "6 - 6*t"),
            ("(t + b)^2/5", "2/5*(t - 1)*(t + b)"),
        ] {
            assert_eq!(fraction(numerator, denominator).unwrap(), expected);
        }
        assert_eq!(fraction("0", "t^2 - 2"), Some(Fraction::zero()));
        assert_eq!(fraction("t", "t"), Some(Fraction::one()));
    }

    #[test]
    fn polynomials_are_told_from_other_fractions() {
        let symbols = Symbols::new(vec![], Some("t".into()), vec!["b".into()]);
        let polynomial = fraction("t^2 - b^2", "-3*t - 3*b").unwrap();
        assert_eq!(polynomial.is_polynomial(), symbols.parse("(b - t)/3").ok());
        assert_eq!(fraction("1", "t").unwrap().is_polynomial(), None);
        assert_eq!(fraction("t", "0"), None);
        assert_eq!(fraction("0", "0"), None);
    }
}
