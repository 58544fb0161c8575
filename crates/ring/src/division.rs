//! Exact division.

use crate::polynomial::Term;
use crate::{Monomial, Polynomial};
use linform_scalar::{Control, Integer, Rational, Stop};
use std::collections::BinaryHeap;

/// Coefficient operations between two questions to the control.
const STEP: usize = 1 << 13;

impl Polynomial {
    /// The quotient, or nothing if `divisor` does not divide this (0 divides nothing but 0: also nothing).
    ///
    /// # Errors
    ///
    /// [`Stop::SizeLimit`] if the quotient would have too many terms; what `control` says.
    pub fn div_exact(
        &self,
        divisor: &Polynomial,
        control: &dyn Control,
    ) -> Result<Option<Polynomial>, Stop> {
        if divisor.is_zero() {
            return Ok(None);
        }
        // By Gauss' lemma a primitive divisor divides over ℚ only if it does over ℤ, so that every step of the
        // division may insist on integers.
        let primitive = divisor.primitive_part();
        let Some(terms) = divide_heap(self.terms(), primitive.terms(), control)? else {
            return Ok(None);
        };
        let (Some((_, scaled)), Some((_, unit))) = (divisor.leading(), primitive.leading()) else {
            return Ok(None);
        };
        let factor = Rational::new(divisor.denominator() * unit, self.denominator() * scaled);
        Ok(factor.map(|factor| Polynomial::integral(terms).scale(&factor)))
    }
}

/// Division with a heap of the pending products quotient term × divisor term (M. Monagan & R. Pearce,
/// *Sparse polynomial division using a heap*, J. Symbolic Comput. 46 (2011) 807–822).
fn divide_heap(
    dividend: &[Term],
    divisor: &[Term],
    control: &dyn Control,
) -> Result<Option<Vec<Term>>, Stop> {
    let (lead, lead_coefficient) = &divisor[0];
    let mut quotient: Vec<Term> = Vec::new();
    // Each entry stands for quotient[i]·divisor[j]; the products of one quotient term follow one another.
    let mut heap: BinaryHeap<(Monomial, usize, usize)> = BinaryHeap::new();
    let (mut next, mut work) = (0, 0);
    loop {
        let monomial = match (dividend.get(next), heap.peek()) {
            (None, None) => return Ok(Some(quotient)),
            (Some((m, _)), None) => m.clone(),
            (None, Some((m, ..))) => m.clone(),
            (Some((m, _)), Some((n, ..))) => m.max(n).clone(),
        };
        let mut coefficient = Integer::ZERO;
        if let Some((m, c)) = dividend.get(next)
            && *m == monomial
        {
            coefficient = c.clone();
            next += 1;
        }
        while let Some((m, ..)) = heap.peek()
            && *m == monomial
            && let Some((_, i, j)) = heap.pop()
        {
            coefficient.sub_product(&quotient[i].1, &divisor[j].1);
            if let Some((factor, _)) = divisor.get(j + 1) {
                let product = quotient[i].0.checked_mul(factor).ok_or(Stop::SizeLimit)?;
                heap.push((product, i, j + 1));
            }
            work += 1;
            if work % STEP == 0 {
                control.proceed()?;
            }
        }
        if coefficient.is_zero() {
            continue;
        }
        let Some(monomial) = monomial.div(lead) else {
            return Ok(None);
        };
        let (value, remainder) = coefficient.div_rem_euclid(lead_coefficient);
        if !remainder.is_zero() {
            return Ok(None);
        }
        if let Some((factor, _)) = divisor.get(1) {
            let product = monomial.checked_mul(factor).ok_or(Stop::SizeLimit)?;
            heap.push((product, quotient.len(), 1));
        }
        quotient.push((monomial, value));
        if quotient.len() > control.term_limit() {
            return Err(Stop::SizeLimit);
        }
    }
}
