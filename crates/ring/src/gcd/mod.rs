//! Greatest common divisors.

mod heuristic;
mod modular;
mod probe;
mod remainders;
#[cfg(test)]
mod tests;
mod univariate;

use crate::polynomial::{Term, collect_terms, common_monomial};
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
    /// divisions. Where such integers would be too long: that of univariate gcds modulo primes, at as many points
    /// as the gcd has monomials in its box without the first symbol. Where the box is beyond a word: that of a
    /// subresultant remainder sequence.
    ///
    /// # Examples
    ///
    /// ```
    /// use linform_ring::Symbols;
    /// use linform_scalar::Unlimited;
    ///
    /// let symbols = Symbols::new(vec!["x".into(), "y".into()], None, vec![]);
    /// let a = symbols.parse("1/2*x^2 - 1/2*y^2")?;
    /// let b = symbols.parse("-3*x^2 - 6*x*y - 3*y^2")?;
    /// assert_eq!(symbols.format(&a.gcd(&b, &Unlimited)?), "x + y");
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
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
    let (monomial_a, monomial_b) = (common_monomial(a.terms()), common_monomial(b.terms()));
    let common = monomial_a.gcd(&monomial_b);
    let (a, b) = (without(&a, &monomial_a), without(&b, &monomial_b));
    let rest = gcd_of_general(a, b, control)?;
    let multiplied = |(m, c): &Term| Some((m.checked_mul(&common)?, c.clone()));
    let terms: Option<Vec<Term>> = rest.terms().iter().map(multiplied).collect();
    Ok(Polynomial::integral(terms.ok_or(Stop::SizeLimit)?))
}

/// The gcd of two primitive polynomials that no monomial divides.
fn gcd_of_general(a: Polynomial, b: Polynomial, control: &dyn Control) -> Result<Polynomial, Stop> {
    let bounds = probe::degree_bounds(&a, &b, control)?;
    if bounds.is_one() {
        return Ok(Polynomial::one());
    }
    let all = a.degrees().lcm(&b.degrees());
    let shared: Vec<bool> = (0..all.width()).map(|s| bounds.exponent(s) > 0).collect();
    if (0..all.width()).any(|s| !shared[s] && all.exponent(s) > 0) {
        // A common divisor that is free of a symbol divides every coefficient with respect to it.
        let mut parts = coefficients(&a, &shared);
        parts.extend(coefficients(&b, &shared));
        parts.sort_by_key(Polynomial::len);
        return gcd_of_all(&parts, control);
    }
    for (divisor, other) in [(&a, &b), (&b, &a)] {
        if divisor.degrees() == bounds && other.div_exact(divisor, control)?.is_some() {
            return Ok(divisor.primitive_part());
        }
    }
    if let Some(result) = heuristic::gcd(&a, &b, &bounds, control)? {
        return Ok(result);
    }
    if let Some(result) = modular::gcd(&a, &b, control)? {
        return Ok(result);
    }
    remainders::gcd(&a, &b, control)
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

fn without(p: &Polynomial, divisor: &Monomial) -> Polynomial {
    let divided = |(m, c): &Term| Some((m.div(divisor)?, c.clone()));
    Polynomial::integral(p.terms().iter().filter_map(divided).collect())
}
