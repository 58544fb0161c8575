//! Products and powers.

mod choice;
mod dense;
mod heap;
pub(crate) mod kronecker;
mod power;
#[cfg(test)]
mod tests;

use crate::layout::Layout;
use crate::meter::{MOST_BITS, Meter};
use crate::polynomial::{Term, common_monomial};
use crate::sum::merge;
use crate::{Monomial, Polynomial};
pub use choice::ProductMethod;
pub(crate) use dense::{collect as collect_accumulators, words};
use linform_scalar::{Control, Integer, Stop};
pub use power::PowerMethod;
use std::borrow::Cow;

impl Polynomial {
    /// The product.
    ///
    /// # Errors
    ///
    /// [`Stop::SizeLimit`] if an exponent, a coefficient or the number of terms would exceed its bound; what
    /// `control` says.
    ///
    /// # Complexity
    ///
    /// At most one coefficient product for each pair of terms. Where most monomials of the box spanned by the
    /// degrees occur, one product of long integers instead (Kronecker substitution).
    pub fn mul(&self, other: &Polynomial, control: &dyn Control) -> Result<Polynomial, Stop> {
        self.mul_by(None, other, control)
    }

    /// The product by a given method, or by the one that [`Polynomial::mul`] would choose if the given one does
    /// not apply.
    ///
    /// # Errors
    ///
    /// As for [`Polynomial::mul`].
    pub fn mul_with(
        &self,
        method: ProductMethod,
        other: &Polynomial,
        control: &dyn Control,
    ) -> Result<Polynomial, Stop> {
        self.mul_by(Some(method), other, control)
    }

    fn mul_by(
        &self,
        method: Option<ProductMethod>,
        other: &Polynomial,
        control: &dyn Control,
    ) -> Result<Polynomial, Stop> {
        // By Gauss' lemma the content of a product is the product of the contents: cancelling crosswise keeps
        // the coefficients short and leaves nothing to cancel afterwards.
        let (a, da) = cancelled(self, other.denominator());
        let (b, db) = cancelled(other, self.denominator());
        let terms = product(method, &a, &b, control)?;
        let denominator = if terms.is_empty() {
            Integer::ONE
        } else {
            self.denominator().div_exact(&db) * other.denominator().div_exact(&da)
        };
        Ok(Polynomial::normalised_parts(terms, denominator))
    }
}

/// The terms of the numerator without the factor that their content shares with a number, and that factor.
fn cancelled<'a>(p: &'a Polynomial, number: &Integer) -> (Cow<'a, [Term]>, Integer) {
    if number.is_one() {
        return (Cow::Borrowed(p.terms()), Integer::ONE);
    }
    let common = p.content_with(number);
    if common.is_one() {
        return (Cow::Borrowed(p.terms()), common);
    }
    let divided = |(m, c): &Term| (m.clone(), c.div_exact(&common));
    (Cow::Owned(p.terms().iter().map(divided).collect()), common)
}

/// The product of two lists of terms.
pub(crate) fn product(
    method: Option<ProductMethod>,
    a: &[Term],
    b: &[Term],
    control: &dyn Control,
) -> Result<Vec<Term>, Stop> {
    let (short, long) = if a.len() <= b.len() { (a, b) } else { (b, a) };
    control.proceed()?;
    let operands = match choice::Operands::measure(short, long)? {
        None => return Ok(Vec::new()),
        Some(operands) => operands,
    };
    let mut meter = Meter::new(control);
    if let [(monomial, coefficient)] = short {
        return shifted(monomial, coefficient, long, &mut meter);
    }
    let (low_a, low_b) = (common_monomial(short), common_monomial(long));
    if !low_a.is_one() || !low_b.is_one() {
        // The box then begins at 1, which matters most for the upper halves of a divided operand.
        let terms = product(
            method,
            &lowered(short, &low_a),
            &lowered(long, &low_b),
            control,
        )?;
        let low = low_a.checked_mul(&low_b).ok_or(Stop::SizeLimit)?;
        let raised = |(m, c): Term| Some((m.checked_mul(&low)?, c));
        let terms: Option<Vec<Term>> = terms.into_iter().map(raised).collect();
        return terms.ok_or(Stop::SizeLimit);
    }
    let layout = Layout::new(&operands.top);
    match operands.choose(method, layout) {
        choice::Plan::Words(layout) => dense::product_words(&layout, short, long, &mut meter),
        choice::Plan::Integers(layout) => dense::product_integers(&layout, short, long, &mut meter),
        choice::Plan::Kronecker(layout) => {
            kronecker::product(&layout, operands.slot_bits(), short, long, &mut meter)
        }
        choice::Plan::Heap(layout) => heap::product(layout.as_ref(), short, long, &mut meter),
        choice::Plan::Halves => {
            let (head, tail) = long.split_at(long.len() / 2);
            let head = product(method, short, head, control)?;
            let tail = product(method, short, tail, control)?;
            Ok(merge(&head, &Integer::ONE, &tail, &Integer::ONE))
        }
    }
}

fn lowered(terms: &[Term], divisor: &Monomial) -> Vec<Term> {
    let divided = |(m, c): &Term| Some((m.div(divisor)?, c.clone()));
    terms.iter().filter_map(divided).collect()
}

fn shifted(
    monomial: &Monomial,
    coefficient: &Integer,
    terms: &[Term],
    meter: &mut Meter<'_>,
) -> Result<Vec<Term>, Stop> {
    let mut result = Vec::with_capacity(terms.len());
    for (m, c) in terms {
        let value = c * coefficient;
        meter.work(1)?;
        meter.term(&value)?;
        result.push((monomial.checked_mul(m).ok_or(Stop::SizeLimit)?, value));
    }
    Ok(result)
}

/// Is a coefficient of this length admitted?
pub(crate) fn admit_bits(bits: u64) -> Result<(), Stop> {
    if bits > MOST_BITS {
        Err(Stop::SizeLimit)
    } else {
        Ok(())
    }
}
