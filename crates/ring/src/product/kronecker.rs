//! Packing of polynomials into integers: `x ↦ 2^bits` for the last symbol, higher powers of 2 for the others.

use crate::layout::Layout;
use crate::meter::Meter;
use crate::polynomial::Term;
use linform_scalar::{Integer, Stop};

/// The product as one product of integers (L. Kronecker 1882; D. Harvey, J. Symbolic Comput. 44 (2009)
/// 1502–1510). Every coefficient must lie strictly between `±2^(bits − 1)`.
pub(super) fn product(
    layout: &Layout,
    bits: u64,
    a: &[Term],
    b: &[Term],
    meter: &mut Meter<'_>,
) -> Result<Vec<Term>, Stop> {
    let words = layout.size().saturating_mul(bits) / 64;
    meter.work(words.saturating_mul(words.isqrt().min(100)) as usize)?;
    let x = pack(layout, bits, a);
    // GMP squares faster than it multiplies, but only knows one operand by its address.
    let product = if a == b {
        &x * &x
    } else {
        &x * &pack(layout, bits, b)
    };
    unpack(layout, bits, &product, meter)
}

/// The value with slots of `bits` bits, slot number = number of the monomial.
pub(crate) fn pack(layout: &Layout, bits: u64, terms: &[Term]) -> Integer {
    let Some((top, _)) = terms.first() else {
        return Integer::ZERO;
    };
    let length = ((layout.number(top) + 1) * bits / 64 + 2) as usize;
    // Coefficients of either sign are gathered apart, where their bits do not overlap.
    let mut positive = vec![0u64; length];
    let mut negative = vec![0u64; length];
    let mut buffer = Vec::new();
    for (monomial, coefficient) in terms {
        let offset = layout.number(monomial) * bits;
        let target = if coefficient.is_negative() {
            &mut negative
        } else {
            &mut positive
        };
        coefficient.write_magnitude_words(&mut buffer);
        let (word, shift) = ((offset / 64) as usize, offset % 64);
        for (i, &magnitude) in buffer.iter().enumerate() {
            target[word + i] |= magnitude << shift;
            if shift > 0 && magnitude >> (64 - shift) != 0 {
                target[word + i + 1] |= magnitude >> (64 - shift);
            }
        }
    }
    Integer::from_words(false, &positive) - Integer::from_words(false, &negative)
}

/// The terms whose value is the given integer, with coefficients strictly between `±2^(bits − 1)`; there is one
/// such list at most. Slots beyond the layout's size are not looked at.
pub(crate) fn unpack(
    layout: &Layout,
    bits: u64,
    value: &Integer,
    meter: &mut Meter<'_>,
) -> Result<Vec<Term>, Stop> {
    let words = value.magnitude_words();
    let negative = value.is_negative();
    let slots = layout.size().min(words.len() as u64 * 64 / bits + 1);
    let mut terms = Vec::new();
    let mut digit = Vec::new();
    let mut carry = false;
    for slot in 0..slots {
        extract(&words, slot * bits, bits, &mut digit);
        meter.work(digit.len())?;
        // Digits from the upper half stand for themselves minus 2^bits, with a carry into the next slot.
        let overflow = carry && increment(&mut digit, bits);
        let upper = digit[((bits - 1) / 64) as usize] >> ((bits - 1) % 64) & 1 == 1;
        if upper {
            complement(&mut digit, bits);
        }
        carry = overflow || upper;
        if digit.iter().any(|&word| word != 0) {
            let coefficient = match digit[..] {
                [word] if word < 1 << 63 => {
                    let magnitude = Integer::from(word);
                    if negative != upper {
                        -magnitude
                    } else {
                        magnitude
                    }
                }
                _ => Integer::from_words(negative != upper, &digit),
            };
            meter.term(&coefficient)?;
            terms.push((layout.monomial(slot), coefficient));
        }
    }
    terms.reverse();
    Ok(terms)
}

/// The bits `offset .. offset + bits` as words.
fn extract(words: &[u64], offset: u64, bits: u64, digit: &mut Vec<u64>) {
    digit.clear();
    let (start, shift) = ((offset / 64) as usize, offset % 64);
    for i in start..start + bits.div_ceil(64) as usize {
        let low = words.get(i).copied().unwrap_or(0) >> shift;
        let high = match shift {
            0 => 0,
            _ => words.get(i + 1).copied().unwrap_or(0) << (64 - shift),
        };
        digit.push(low | high);
    }
    cut(digit, bits);
}

/// Clears what lies above `bits` bits.
fn cut(digit: &mut [u64], bits: u64) {
    if !bits.is_multiple_of(64)
        && let Some(last) = digit.last_mut()
    {
        *last &= (1 << (bits % 64)) - 1;
    }
}

/// Adds 1; whether the result was `2^bits`, of which 0 is left.
fn increment(digit: &mut [u64], bits: u64) -> bool {
    for word in digit.iter_mut() {
        *word = word.wrapping_add(1);
        if *word != 0 {
            break;
        }
    }
    cut(digit, bits);
    digit.iter().all(|&word| word == 0)
}

/// `2^bits − digit` for a digit that is not 0.
fn complement(digit: &mut [u64], bits: u64) {
    digit.iter_mut().for_each(|word| *word = !*word);
    increment(digit, bits);
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::Monomial;
    use linform_scalar::Unlimited;
    use proptest::prelude::*;

    proptest! {
        #![proptest_config(crate::testing::cases(96))]

        #[test]
        fn unpacking_inverts_packing(bits in 2u64..140, seeds in proptest::collection::vec((0u32..40, any::<i128>()), 0..8)) {
            let layout = Layout::new(&Monomial::from_exponents(&[39]).unwrap()).unwrap();
            let half = Integer::from(2).pow(bits as u32 - 1);
            let span = &(&half + &half) - &Integer::ONE;
            let terms: std::collections::BTreeMap<u32, Integer> = seeds.into_iter()
                .map(|(e, c)| (e, &(&Integer::from(c).div_rem_euclid(&span).1 - &half) + &Integer::ONE))
                .filter(|(_, c)| !c.is_zero())
                .collect();
            let terms: Vec<Term> = terms.into_iter().rev().map(|(e, c)| (Monomial::power(0, e as u16).unwrap(), c)).collect();
            let value = pack(&layout, bits, &terms);
            prop_assert_eq!(unpack(&layout, bits, &value, &mut Meter::new(&Unlimited)).unwrap(), terms);
        }
    }
}
