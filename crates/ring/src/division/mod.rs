//! Exact division.

mod dense;
mod heap;
mod packed;
#[cfg(test)]
mod tests;

use crate::layout::Layout;
use crate::meter::Meter;
use crate::polynomial::Term;
use crate::{Monomial, Polynomial};
use linform_scalar::{Control, Integer, Rational, Stop};

/// The longest integers, in words, that are divided without a question to the control: some 20 ms.
const MOST_WORDS: u64 = 1 << 14;
/// The largest array of accumulators.
const MOST_ACCUMULATORS: u64 = 1 << 22;

impl Polynomial {
    /// The quotient, or nothing if `divisor` does not divide this (0 divides nothing, not even 0).
    ///
    /// # Errors
    ///
    /// [`Stop::SizeLimit`] if the quotient would have too many terms; what `control` says.
    ///
    /// # Complexity
    ///
    /// At most one coefficient product for each pair of a term of the divisor and one of the quotient, or one
    /// division of long integers for dense operands.
    pub fn div_exact(
        &self,
        divisor: &Polynomial,
        control: &dyn Control,
    ) -> Result<Option<Polynomial>, Stop> {
        let Some((_, lead)) = divisor.leading() else {
            return Ok(None);
        };
        if self.is_zero() {
            return Ok(Some(Polynomial::zero()));
        }
        // By Gauss' lemma a primitive divisor divides over ℚ only if it does over ℤ, so that every step of the
        // division may insist on integers. The units of the scale are collected here.
        let mut common = divisor.content();
        if lead.is_negative() {
            common = -common;
        }
        let primitive = divisor.primitive_part();
        let Some(terms) = quotient(self.terms(), primitive.terms(), control)? else {
            return Ok(None);
        };
        let quotient = Polynomial::integral(terms);
        let denominator = self.denominator() * &common;
        if denominator == *divisor.denominator() {
            return Ok(Some(quotient));
        }
        let factor = Rational::new(divisor.denominator().clone(), denominator);
        Ok(factor.map(|factor| quotient.scale(&factor)))
    }
}

/// The quotient of two lists of terms, neither of them empty, the divisor primitive.
pub(crate) fn quotient(
    dividend: &[Term],
    divisor: &[Term],
    control: &dyn Control,
) -> Result<Option<Vec<Term>>, Stop> {
    control.proceed()?;
    let degrees = |terms: &[Term]| {
        let start = Monomial::one();
        terms.iter().fold(start, |degrees, (m, _)| degrees.lcm(m))
    };
    let top = degrees(dividend);
    // Degrees add up, so those of a quotient are known beforehand.
    let Some(most) = top.div(&degrees(divisor)) else {
        return Ok(None);
    };
    let mut meter = Meter::new(control);
    if let [(monomial, coefficient)] = divisor {
        return by_term(dividend, monomial, coefficient, &mut meter);
    }
    let Some(layout) = Layout::new(&top) else {
        return heap::quotient(dividend, divisor, &mut meter);
    };
    match choose(&layout, &most, dividend, divisor) {
        Method::Packed => packed::quotient(&layout, &most, dividend, divisor, &mut meter),
        Method::Dense => dense::quotient(&layout, &most, dividend, divisor, &mut meter),
        Method::Heap => heap::numbered_quotient(&layout, &most, dividend, divisor, &mut meter),
    }
}

enum Method {
    Packed,
    Dense,
    Heap,
}

/// The cheapest method by estimated nanoseconds; the constants were fitted to the benches of this crate.
fn choose(layout: &Layout, most: &Monomial, dividend: &[Term], divisor: &[Term]) -> Method {
    let room = Layout::new(most).map_or(u64::MAX, |room| room.size());
    // The quotient mostly has fewer terms than the dividend.
    let terms = room.min(dividend.len() as u64);
    let pairs = terms.saturating_mul(divisor.len() as u64);
    let bits = packed::slot_bits(dividend, divisor);
    let length = bits / 64 + 1;
    let words = layout.size().saturating_mul(bits) / 64 + 1;
    let packed = if words > MOST_WORDS {
        u64::MAX
    } else {
        words * (6 * words.isqrt()).clamp(8, 600) + layout.size() * 20
    };
    let dense = if layout.size() > MOST_ACCUMULATORS {
        u64::MAX
    } else {
        let each = if length == 1 { 3 } else { 30 + length * length };
        pairs.saturating_mul(each) + layout.size() * 5
    };
    let heap = pairs.saturating_mul(80 + length * length);
    if packed < dense && packed < heap {
        Method::Packed
    } else if dense < heap {
        Method::Dense
    } else {
        Method::Heap
    }
}

fn by_term(
    dividend: &[Term],
    monomial: &Monomial,
    coefficient: &Integer,
    meter: &mut Meter<'_>,
) -> Result<Option<Vec<Term>>, Stop> {
    let mut result = Vec::with_capacity(dividend.len());
    for (m, c) in dividend {
        meter.work(1)?;
        let Some(quotient) = m.div(monomial) else {
            return Ok(None);
        };
        if !coefficient.divides(c) {
            return Ok(None);
        }
        result.push((quotient, c.div_exact(coefficient)));
    }
    Ok(Some(result))
}
