//! Division of long integers in place of polynomials.

use crate::Monomial;
use crate::layout::Layout;
use crate::meter::{Meter, longest};
use crate::polynomial::Term;
use crate::product::kronecker::{pack, unpack};
use linform_scalar::Stop;

/// The bits with which a first attempt is made: enough whenever the coefficients of the quotient are as much
/// shorter than the dividend's as those of the divisor are long.
pub(super) fn slot_bits(dividend: &[Term], divisor: &[Term]) -> u64 {
    let sums = u64::from(divisor.len().min(dividend.len()).ilog2());
    longest(dividend).max(longest(divisor)) + sums + 4
}

/// The quotient by one exact division of integers.
///
/// If the divisor divides the dividend, so do their values at `2^bits`; a remainder there settles that it does
/// not. If the values divide and the product of the unpacked quotient with the divisor stays within the slots,
/// dividend and product have the same value and are hence the same polynomial. If it does not stay within, the
/// attempt is repeated with the slots that this quotient asks for.
pub(super) fn quotient(
    layout: &Layout,
    most: &Monomial,
    dividend: &[Term],
    divisor: &[Term],
    meter: &mut Meter<'_>,
) -> Result<Option<Vec<Term>>, Stop> {
    let mut bits = slot_bits(dividend, divisor);
    for _ in 0..3 {
        let words = layout.size().saturating_mul(bits) / 64;
        meter.work(words.saturating_mul(words.isqrt().min(100)) as usize)?;
        let (a, b) = (pack(layout, bits, dividend), pack(layout, bits, divisor));
        let (value, remainder) = a.div_rem_euclid(&b);
        if !remainder.is_zero() {
            return Ok(None);
        }
        let terms = unpack(layout, bits, &value, meter)?;
        let sums = u64::from(divisor.len().min(terms.len().max(1)).ilog2());
        let needed = longest(&terms) + longest(divisor) + sums + 2;
        if terms.iter().all(|(monomial, _)| monomial.divides(most)) && needed <= bits {
            return Ok(Some(terms));
        }
        bits = needed.max(bits + bits / 2);
    }
    super::heap::numbered_quotient(layout, most, dividend, divisor, meter)
}
