//! Greatest common divisors.

mod heuristic;
mod remainders;
#[cfg(test)]
mod tests;

use crate::polynomial::{Term, collect_terms};
use crate::{Monomial, Polynomial};
use linform_scalar::{Control, Stop};

impl Polynomial {
    /// The greatest common divisor: integral, primitive, with positive leading coefficient; `gcd(0, 0) = 0`.
    ///
    /// # Errors
    ///
    /// [`Stop::SizeLimit`] if an intermediate polynomial has too many terms; what `control` says.
    ///
    /// # Complexity
    ///
    /// Mostly that of one gcd of integers that hold all coefficients of the box of the operands, and of two exact
    /// divisions. Where such integers would be too long: that of a subresultant remainder sequence.
    pub fn gcd(&self, other: &Polynomial, control: &dyn Control) -> Result<Polynomial, Stop> {
        if self.is_zero() {
            return Ok(other.primitive_part());
        }
        if other.is_zero() {
            return Ok(self.primitive_part());
        }
        primitive_gcd(self.primitive_part(), other.primitive_part(), control)
    }
}

/// The gcd of two primitive polynomials.
fn primitive_gcd(a: Polynomial, b: Polynomial, control: &dyn Control) -> Result<Polynomial, Stop> {
    control.proceed()?;
    if a == b {
        return Ok(a);
    }
    let (monomial_a, monomial_b) = (common_monomial(&a), common_monomial(&b));
    let common = monomial_a.gcd(&monomial_b);
    let (a, b) = (without(&a, &monomial_a), without(&b, &monomial_b));
    let rest = if a.degrees().is_one() || b.degrees().is_one() {
        Polynomial::one()
    } else if let Some(result) = without_foreign_symbols(&a, &b, control)? {
        result
    } else if let Some(result) = heuristic::gcd(&a, &b, control)? {
        result
    } else {
        remainders::gcd(&a, &b, control)?
    };
    let multiplied = |(m, c): &Term| Some((m.checked_mul(&common)?, c.clone()));
    let terms: Option<Vec<Term>> = rest.terms().iter().map(multiplied).collect();
    Ok(Polynomial::integral(terms.ok_or(Stop::SizeLimit)?))
}

/// The gcd where one operand holds a symbol that the other does not: a common divisor is free of it, so it
/// divides every coefficient with respect to it. Nothing if both hold the same symbols.
fn without_foreign_symbols(
    a: &Polynomial,
    b: &Polynomial,
    control: &dyn Control,
) -> Result<Option<Polynomial>, Stop> {
    let (degrees_a, degrees_b) = (a.degrees(), b.degrees());
    let width = degrees_a.width().max(degrees_b.width());
    let occurs = |degrees: &Monomial, symbol: usize| degrees.exponent(symbol) > 0;
    let shared: Vec<bool> = (0..width)
        .map(|symbol| occurs(&degrees_a, symbol) && occurs(&degrees_b, symbol))
        .collect();
    if (0..width).all(|s| shared[s] || !occurs(&degrees_a, s) && !occurs(&degrees_b, s)) {
        return Ok(None);
    }
    let mut parts = coefficients(a, &shared);
    parts.extend(coefficients(b, &shared));
    parts.sort_by_key(Polynomial::len);
    gcd_of_all(&parts, control).map(Some)
}

/// The coefficients with respect to the symbols that are not marked.
fn coefficients(p: &Polynomial, kept: &[bool]) -> Vec<Polynomial> {
    let mut parts: Vec<(Monomial, Term)> = p
        .terms()
        .iter()
        .map(|(monomial, c)| {
            let exponents = |keep: bool| {
                let chosen = (0..kept.len()).filter(move |&s| kept[s] == keep);
                Monomial::from_fields(chosen.map(|s| (s, monomial.exponent(s))))
            };
            (exponents(false), (exponents(true), c.clone()))
        })
        .collect();
    parts.sort_by(|x, y| x.0.cmp(&y.0));
    parts
        .chunk_by(|x, y| x.0 == y.0)
        .map(|part| Polynomial::integral(collect_terms(part.iter().map(|x| x.1.clone()).collect())))
        .collect()
}

/// The gcd of a list.
fn gcd_of_all(parts: &[Polynomial], control: &dyn Control) -> Result<Polynomial, Stop> {
    let mut common = Polynomial::zero();
    for part in parts {
        common = common.gcd(part, control)?;
        if common.is_one() {
            break;
        }
    }
    Ok(common)
}

/// The largest monomial that divides every term.
fn common_monomial(p: &Polynomial) -> Monomial {
    let mut monomials = p.terms().iter().map(|(m, _)| m);
    let first = monomials.next().cloned().unwrap_or_default();
    monomials.fold(first, |common, m| common.gcd(m))
}

fn without(p: &Polynomial, divisor: &Monomial) -> Polynomial {
    let divided = |(m, c): &Term| Some((m.div(divisor)?, c.clone()));
    Polynomial::integral(p.terms().iter().filter_map(divided).collect())
}
