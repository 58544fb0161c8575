//! Products and powers.

use crate::Polynomial;
use crate::polynomial::{Term, collect_terms};
use linform_scalar::{Control, Integer, Stop};

impl Polynomial {
    /// The product.
    ///
    /// # Errors
    ///
    /// [`Stop::SizeLimit`] if an exponent or the number of terms would exceed its bound; what `control` says.
    pub fn mul(&self, other: &Polynomial, control: &dyn Control) -> Result<Polynomial, Stop> {
        let mut terms: Vec<Term> = Vec::new();
        for (m, c) in self.terms() {
            control.proceed()?;
            for (n, d) in other.terms() {
                terms.push((m.checked_mul(n).ok_or(Stop::SizeLimit)?, c * d));
            }
            if terms.len() > control.term_limit() {
                terms = collect_terms(terms);
                if terms.len() > control.term_limit() {
                    return Err(Stop::SizeLimit);
                }
            }
        }
        let denominator: Integer = self.denominator() * other.denominator();
        Ok(Polynomial::normalised(collect_terms(terms), denominator))
    }

    /// The power.
    ///
    /// # Errors
    ///
    /// As for [`Polynomial::mul`].
    pub fn pow(&self, exponent: u32, control: &dyn Control) -> Result<Polynomial, Stop> {
        let mut result = Polynomial::one();
        for bit in (0..32 - exponent.leading_zeros()).rev() {
            result = result.mul(&result, control)?;
            if exponent >> bit & 1 == 1 {
                result = result.mul(self, control)?;
            }
        }
        Ok(result)
    }
}
