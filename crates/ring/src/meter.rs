//! Counting of work and of memory inside one operation.

use crate::polynomial::Term;
use linform_scalar::{Control, Integer, Stop};

/// Units of work between two questions to the control, about a millisecond.
const STEP: usize = 1 << 15;
/// The most memory that the coefficients of one result may take, in bytes.
const MOST_BYTES: u64 = 1 << 30;
/// The longest coefficient, in bits.
pub(crate) const MOST_BITS: u64 = 1 << 28;

/// Asks the control now and then, and keeps a result within its bounds.
pub(crate) struct Meter<'a> {
    control: &'a dyn Control,
    work: usize,
    terms: usize,
    bytes: u64,
}

impl<'a> Meter<'a> {
    pub(crate) fn new(control: &'a dyn Control) -> Meter<'a> {
        Meter {
            control,
            work: 0,
            terms: 0,
            bytes: 0,
        }
    }

    /// Notes some units of work: one for each product of two words.
    #[inline]
    pub(crate) fn work(&mut self, units: usize) -> Result<(), Stop> {
        self.work += units;
        while self.work >= STEP {
            self.work -= STEP;
            self.control.proceed()?;
        }
        Ok(())
    }

    /// Notes one more term of the result.
    #[inline]
    pub(crate) fn term(&mut self, coefficient: &Integer) -> Result<(), Stop> {
        self.terms += 1;
        self.bytes += coefficient.bits() / 8;
        if self.terms > self.control.term_limit() || self.bytes > MOST_BYTES {
            return Err(Stop::SizeLimit);
        }
        Ok(())
    }
}

/// The units of work in one product of coefficients of at most these lengths.
pub(crate) fn effort(bits_a: u64, bits_b: u64) -> usize {
    let words = |bits: u64| bits / 64 + 1;
    // Long products are faster than the schoolbook's, but for a bound that is of no matter.
    (4 + words(bits_a).saturating_mul(words(bits_b)) / 2) as usize
}

/// The length of the longest coefficient, in bits.
pub(crate) fn longest(terms: &[Term]) -> u64 {
    terms.iter().map(|(_, c)| c.bits()).max().unwrap_or(0)
}
