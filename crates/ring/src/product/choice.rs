//! Which way to multiply.

use super::admit_bits;
use crate::lattice::Lattice;
use crate::layout::Layout;
use crate::polynomial::Term;
use crate::{Monomial, Polynomial};
use linform_scalar::{Control, Integer, Stop};

/// The ways to multiply two polynomials; [`Polynomial::mul`] chooses.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ProductMethod {
    /// Terms in order from a heap of pending products: for few terms in a large box.
    Heap,
    /// One accumulator for each monomial of the box: for many terms with short coefficients.
    Dense,
    /// One product of long integers: for dense polynomials with long coefficients.
    Kronecker,
}

/// The largest array of accumulators.
const MOST_ACCUMULATORS: u64 = 1 << 22;
/// The longest integers, in words, that are multiplied without a question to the control: some 20 ms.
const MOST_WORDS: u64 = 1 << 15;
/// The most memory that a power may foreseeably take, in bytes.
const MOST_BYTES: u128 = 1 << 31;

/// What the choice depends on.
pub(super) struct Operands {
    /// The monomial with all degrees of the product.
    pub(super) top: Monomial,
    /// The numbers of terms, the smaller one first.
    terms: (u64, u64),
    /// The lengths of the longest coefficients, in the same order.
    bits: (u64, u64),
    /// The monomials with all degrees of the operands, in the same order.
    degrees: (Monomial, Monomial),
}

/// A method with what it needs.
pub(super) enum Plan {
    Words(Layout),
    Integers(Layout),
    Kronecker(Layout),
    Heap(Option<Layout>),
    /// Too long for one uninterrupted step: halve the longer operand.
    Halves,
}

fn measure(terms: &[Term]) -> (Monomial, u64) {
    let start = (Monomial::one(), 0);
    terms.iter().fold(start, |(degrees, bits), (m, c)| {
        (degrees.lcm(m), bits.max(c.bits()))
    })
}

impl Operands {
    /// Measures two lists of terms, the shorter one first; nothing if one is empty.
    ///
    /// # Errors
    ///
    /// If exponents or coefficients of the product exceed their bounds. Over ℤ degrees add up exactly, so this
    /// is the only place where exponents have to be checked.
    pub(super) fn measure(short: &[Term], long: &[Term]) -> Result<Option<Operands>, Stop> {
        if short.is_empty() {
            return Ok(None);
        }
        let ((degrees_a, bits_a), (degrees_b, bits_b)) = (measure(short), measure(long));
        admit_bits(bits_a + bits_b)?;
        Ok(Some(Operands {
            top: degrees_a.checked_mul(&degrees_b).ok_or(Stop::SizeLimit)?,
            terms: (short.len() as u64, long.len() as u64),
            bits: (bits_a, bits_b),
            degrees: (degrees_a, degrees_b),
        }))
    }

    /// The bits in which every coefficient of the product fits with its sign.
    pub(super) fn slot_bits(&self) -> u64 {
        self.bits.0 + self.bits.1 + u64::from(self.terms.0.ilog2()) + 2
    }

    /// The cheapest plan by estimated nanoseconds; the constants were fitted to the benches of this crate.
    pub(super) fn choose(&self, method: Option<ProductMethod>, layout: Option<Layout>) -> Plan {
        let Some(layout) = layout else {
            return Plan::Heap(None);
        };
        let pairs = self.terms.0.saturating_mul(self.terms.1);
        let (words_a, words_b) = (self.bits.0 / 64 + 1, self.bits.1 / 64 + 1);
        let size = layout.size();
        let in_words = self.bits.0 < 64 && self.bits.1 < 64 && self.slot_bits() <= 127;
        let dense = if size > MOST_ACCUMULATORS {
            u64::MAX
        } else if in_words {
            pairs.saturating_mul(2) + size * 2
        } else {
            pairs.saturating_mul(30 + 2 * words_a * words_b) + size * 10
        };
        let heap =
            pairs.saturating_mul(20 + 10 * u64::from(self.terms.0.ilog2()) + 2 * words_a * words_b);
        // The last monomial of each operand has at most this number, so this bounds the packed lengths.
        let packed = |degrees: &Monomial| {
            (layout.number(degrees) + 1).saturating_mul(self.slot_bits()) / 64 + 1
        };
        let (packed_a, packed_b) = (packed(&self.degrees.0), packed(&self.degrees.1));
        let (low, high) = (packed_a.min(packed_b), packed_a.max(packed_b));
        let kronecker = high
            .saturating_mul((4 * low.isqrt()).clamp(8, 450))
            .saturating_add(size.saturating_mul(20))
            .saturating_add((packed_a + packed_b) * 4);
        let method = method.unwrap_or(if kronecker < dense && kronecker < heap {
            ProductMethod::Kronecker
        } else if dense <= heap {
            ProductMethod::Dense
        } else {
            ProductMethod::Heap
        });
        match method {
            ProductMethod::Kronecker if high <= MOST_WORDS => Plan::Kronecker(layout),
            ProductMethod::Kronecker if self.terms.1 > 16 => Plan::Halves,
            ProductMethod::Dense if size <= MOST_ACCUMULATORS && in_words => Plan::Words(layout),
            ProductMethod::Dense if size <= MOST_ACCUMULATORS => Plan::Integers(layout),
            _ => Plan::Heap(Some(layout)),
        }
    }
}

/// Refuses a power whose size can be foreseen to exceed the bounds.
///
/// A polynomial whose monomials span an affine space of dimension `d` has, cancellation aside, at least
/// `binomial(e + d, d)` terms in its power `e`, for it contains the corners of a simplex; their coefficients have
/// on average some `e·(b + log₂(terms)/2)` bits, where `b` is the average for the base.
pub(super) fn admit_power(
    base: &Polynomial,
    exponent: u32,
    control: &dyn Control,
) -> Result<(), Stop> {
    let e = u64::from(exponent);
    let top = base.degrees();
    for symbol in 0..top.width() {
        if u64::from(top.exponent(symbol)).saturating_mul(e) > u64::from(Monomial::MAX_EXPONENT) {
            return Err(Stop::SizeLimit);
        }
    }
    admit_bits(base.bits().saturating_sub(1).saturating_mul(e))?;
    admit_bits(
        base.denominator()
            .bits()
            .saturating_sub(1)
            .saturating_mul(e),
    )?;
    let mut span = Lattice::new();
    let mut monomials = base.iter().map(|(monomial, _)| monomial);
    let first = monomials.next().cloned().unwrap_or_default();
    // A few terms give the dimension; a smaller one would only admit more.
    for monomial in monomials.take(200) {
        let difference = |i| i32::from(monomial.exponent(i)) - i32::from(first.exponent(i));
        span.insert(
            (0..top.width())
                .map(|i| Integer::from(difference(i)))
                .collect(),
        );
    }
    let mut terms = 1u128;
    for i in 1..=span.basis().len() as u128 {
        terms = terms * (u128::from(e) + i) / i;
        if terms > control.term_limit() as u128 {
            return Err(Stop::SizeLimit);
        }
    }
    // A sum of sets of integers has at least as many elements as both together less one.
    terms = terms.max(u128::from(e) * (base.len() as u128 - 1) + 1);
    let bits: u64 = base.iter().map(|(_, c)| c.bits() - 1).sum();
    let twice = 2 * bits / base.len() as u64 + u64::from(base.len().ilog2());
    if terms.saturating_mul(u128::from(twice.saturating_mul(e) / 16)) > MOST_BYTES {
        return Err(Stop::SizeLimit);
    }
    Ok(())
}
