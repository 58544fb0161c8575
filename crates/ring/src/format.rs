//! Text of polynomials.

use crate::{Monomial, Polynomial, Symbols};
use linform_scalar::{Integer, Rational};
use std::fmt::Write;

impl Symbols {
    /// The canonical text, such as `3/10*t^2 - 1/5` or `q'^2 - q^2*t - q^4`.
    ///
    /// Terms stand in the lexicographic order, highest first; coefficients are in lowest terms; a coefficient 1
    /// and an exponent 1 are left out. [`Symbols::parse`] reads it back.
    ///
    /// # Panics
    ///
    /// If a symbol occurs that has no name here.
    pub fn format(&self, p: &Polynomial) -> String {
        if p.is_zero() {
            return "0".to_string();
        }
        let mut text = String::new();
        for (index, (monomial, coefficient)) in p.iter().enumerate() {
            text.push_str(match (index, coefficient.is_negative()) {
                (0, false) => "",
                (0, true) => "-",
                (_, false) => " + ",
                (_, true) => " - ",
            });
            self.push_term(&mut text, monomial, &coefficient.abs(), p.denominator());
        }
        text
    }

    fn push_term(
        &self,
        text: &mut String,
        monomial: &Monomial,
        magnitude: &Integer,
        denominator: &Integer,
    ) {
        let value = if denominator.is_one() {
            Rational::from(magnitude.clone())
        } else {
            Rational::new(magnitude.clone(), denominator.clone()).unwrap_or_default()
        };
        let mut separator = "";
        // Writing to a string cannot fail.
        if monomial.is_one() || !value.is_one() {
            let _ = write!(text, "{value}");
            separator = "*";
        }
        for index in 0..monomial.width() {
            let exponent = monomial.exponent(index);
            if exponent > 0 {
                let _ = write!(text, "{separator}{}", self.name(index));
                separator = "*";
            }
            if exponent > 1 {
                let _ = write!(text, "^{exponent}");
            }
        }
    }
}
