//! Powers.

use super::choice;
use crate::layout::Layout;
use crate::meter::{Meter, effort};
use crate::polynomial::{Term, common_monomial};
use crate::{Monomial, Polynomial};
use linform_scalar::{Control, Integer, Stop};
use std::cmp::Reverse;
use std::collections::BinaryHeap;

/// The ways to form a power; [`Polynomial::pow`] chooses.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum PowerMethod {
    /// Repeated squaring.
    Squaring,
    /// The linear recurrence of the coefficients: for sparse bases and long coefficients.
    Recurrence,
}

impl Polynomial {
    /// The power.
    ///
    /// # Errors
    ///
    /// As for [`Polynomial::mul`]. A power that would, cancellation aside, exceed the bounds is refused before
    /// any work is done.
    ///
    /// # Complexity
    ///
    /// By recurrence one coefficient product for each term of the base and each of the power; otherwise that of the
    /// last squaring.
    pub fn pow(&self, exponent: u32, control: &dyn Control) -> Result<Polynomial, Stop> {
        self.pow_by(None, exponent, control)
    }

    /// The power by a given method, or by squaring if the given one does not apply.
    ///
    /// # Errors
    ///
    /// As for [`Polynomial::pow`].
    pub fn pow_with(
        &self,
        method: PowerMethod,
        exponent: u32,
        control: &dyn Control,
    ) -> Result<Polynomial, Stop> {
        self.pow_by(Some(method), exponent, control)
    }

    fn pow_by(
        &self,
        method: Option<PowerMethod>,
        exponent: u32,
        control: &dyn Control,
    ) -> Result<Polynomial, Stop> {
        if exponent == 0 {
            return Ok(Polynomial::one());
        }
        if self.is_zero() || exponent == 1 || self.is_one() {
            return Ok(self.clone());
        }
        choice::admit_power(self, exponent, control)?;
        let method = method.unwrap_or_else(|| choose(self, exponent));
        if method == PowerMethod::Recurrence
            && self.len() > 1
            && let Some(power) = by_recurrence(self, exponent, control)?
        {
            return Ok(power);
        }
        let mut result = self.clone();
        for bit in (0..31 - exponent.leading_zeros()).rev() {
            result = result.mul(&result, control)?;
            if exponent >> bit & 1 == 1 {
                result = result.mul(self, control)?;
            }
        }
        Ok(result)
    }
}

/// The recurrence wins where coefficients are long or the monomials sparse, by factors of up to 400 in the benches
/// of this crate; dense powers with short coefficients are half as fast by it as by squaring.
fn choose(base: &Polynomial, exponent: u32) -> PowerMethod {
    let bits = base.bits() + u64::from(base.len().ilog2());
    let long = bits.saturating_mul(exponent.into()) >= LONG;
    let degrees = base.degrees();
    let room = (0..degrees.width()).fold(1u64, |room, symbol| {
        room.saturating_mul(u64::from(degrees.exponent(symbol)) + 1)
    });
    let sparse = exponent > 3 && room / SPARSE > base.len() as u64;
    if long || sparse {
        PowerMethod::Recurrence
    } else {
        PowerMethod::Squaring
    }
}

/// From about so many bits the coefficients of a power are long.
const LONG: u64 = 500;
/// The ratio of monomials in the box of the base to its terms from which on it is sparse.
const SPARSE: u64 = 8;

/// The power with coefficients in rising order, each from those before it (L. Euler 1748; for sparse bases
/// M. Monagan & R. Pearce, CASC 2012, 239–251); nothing if the monomials of the power cannot be numbered.
///
/// The numbers of the monomials turn the base into `f = Σ f_j·y^{w_j}` with `w_0 = 0`, where a power of `y` has
/// been taken out. From `f·(fᵉ)′ = e·f′·fᵉ` the coefficients `c_k` of `fᵉ` satisfy
/// `k·f_0·c_k = Σ_{j>0} ((e + 1)·w_j − k)·f_j·c_{k − w_j}`.
fn by_recurrence(
    base: &Polynomial,
    exponent: u32,
    control: &dyn Control,
) -> Result<Option<Polynomial>, Stop> {
    let low = common_monomial(base.terms());
    let power_of = |monomial: &Monomial| -> Option<Monomial> {
        let exponents = (0..monomial.width()).map(|symbol| {
            let exponent = u32::from(monomial.exponent(symbol)).checked_mul(exponent)?;
            u16::try_from(exponent).ok()
        });
        Monomial::from_exponents(&exponents.collect::<Option<Vec<u16>>>()?)
    };
    let top = base.degrees().div(&low).ok_or(Stop::SizeLimit)?;
    let top = power_of(&top).ok_or(Stop::SizeLimit)?;
    let low_power = power_of(&low).ok_or(Stop::SizeLimit)?;
    let Some(layout) = Layout::new(&top) else {
        return Ok(None);
    };
    let mut numbers = Vec::with_capacity(base.len());
    for (monomial, _) in base.terms().iter().rev() {
        numbers.push(layout.number(&monomial.div(&low).ok_or(Stop::SizeLimit)?));
    }
    let coefficients: Vec<&Integer> = base.terms().iter().rev().map(|(_, c)| c).collect();
    // Where all monomials lie on a line, the gcd of the distances is the step along it.
    let first = numbers[0];
    let step = numbers.iter().fold(0, |step, n| gcd(step, n - first));
    let weights: Vec<u64> = numbers.iter().map(|n| (n - first) / step).collect();
    let mut meter = Meter::new(control);
    let powers = coefficients_of_power(&weights, &coefficients, exponent, &mut meter)?;
    let start = first * u64::from(exponent);
    let terms = powers.into_iter().rev().map(|(k, coefficient)| {
        let monomial = layout.monomial(start + k * step);
        Some((monomial.checked_mul(&low_power)?, coefficient))
    });
    let terms: Vec<Term> = terms.collect::<Option<_>>().ok_or(Stop::SizeLimit)?;
    // By Gauss' lemma the power of the content is prime to that of the denominator.
    let denominator = base.denominator().pow(exponent);
    Ok(Some(Polynomial::normalised_parts(terms, denominator)))
}

fn gcd(a: u64, b: u64) -> u64 {
    if b == 0 { a } else { gcd(b, a % b) }
}

/// The coefficients of `(Σ f_j·y^{w_j})^exponent` that are not 0, in rising order. The weights rise from 0.
fn coefficients_of_power(
    weights: &[u64],
    coefficients: &[&Integer],
    exponent: u32,
    meter: &mut Meter<'_>,
) -> Result<Vec<(u64, Integer)>, Stop> {
    let lowest = coefficients[0];
    let mut power = vec![(0, lowest.pow(exponent))];
    // The next product of each term of the base with a term of the power, by its place; those whose next term
    // of the power is not known yet wait for it.
    let mut next = vec![0usize; weights.len()];
    let mut heap: BinaryHeap<Reverse<(u64, usize)>> = (1..weights.len())
        .map(|j| Reverse((weights[j], j)))
        .collect();
    let mut waiting = Vec::new();
    while let Some(&Reverse((place, _))) = heap.peek() {
        let mut sum = Integer::ZERO;
        while let Some(&Reverse((other, j))) = heap.peek()
            && other == place
        {
            heap.pop();
            let (_, factor) = &power[next[j]];
            let multiple = i128::from(weights[j]) * (i128::from(exponent) + 1) - i128::from(place);
            let multiple = coefficients[j] * &Integer::from(multiple);
            meter.work(effort(multiple.bits(), factor.bits()))?;
            sum.add_product(&multiple, factor);
            next[j] += 1;
            match power.get(next[j]) {
                Some((start, _)) => heap.push(Reverse((start + weights[j], j))),
                None => waiting.push(j),
            }
        }
        if sum.is_zero() {
            continue;
        }
        let divisor = lowest * &Integer::from(place);
        meter.work(effort(sum.bits(), divisor.bits()))?;
        let coefficient = sum.div_exact(&divisor);
        meter.term(&coefficient)?;
        power.push((place, coefficient));
        for j in waiting.drain(..) {
            heap.push(Reverse((place + weights[j], j)));
        }
    }
    Ok(power)
}
