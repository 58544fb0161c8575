//! Numbering of the monomials in a box.

use crate::Monomial;
use crate::polynomial::Term;

/// The mixed-radix numbering of all monomials up to a given degree in every symbol.
///
/// *Invariant*: unless another symbol was asked for, the first one is the most significant place, so that the
/// order of the numbers is the order of the monomials; the number of a product is the sum of the numbers, as long as the product lies in the box;
/// the size of the box is below `2^62`.
#[derive(Debug)]
pub(crate) struct Layout {
    /// Symbol, radix and stride of every symbol that may occur, most significant first.
    places: Vec<(usize, u64, u64)>,
    size: u64,
}

impl Layout {
    /// The box of the monomials that divide `top`, or nothing if it is too large.
    pub(crate) fn new(top: &Monomial) -> Option<Layout> {
        Layout::in_order((0..top.width()).rev(), top)
    }

    /// The same with another symbol in the most significant place, so that the numbers have another order.
    pub(crate) fn led_by(first: usize, top: &Monomial) -> Option<Layout> {
        let others = (0..top.width()).rev().filter(|&symbol| symbol != first);
        Layout::in_order(others.chain([first]), top)
    }

    /// The symbols come least significant first.
    fn in_order(symbols: impl Iterator<Item = usize>, top: &Monomial) -> Option<Layout> {
        let mut places = Vec::new();
        let mut size = 1u64;
        for symbol in symbols {
            let exponent = top.exponent(symbol);
            if exponent > 0 {
                let radix = u64::from(exponent) + 1;
                places.push((symbol, radix, size));
                size = size.checked_mul(radix).filter(|&size| size < 1 << 62)?;
            }
        }
        places.reverse();
        Some(Layout { places, size })
    }

    /// The number of monomials in the box.
    pub(crate) fn size(&self) -> u64 {
        self.size
    }

    /// The radices of the symbols that may occur, most significant first.
    pub(crate) fn radices(&self) -> Vec<u64> {
        self.places.iter().map(|&(_, radix, _)| radix).collect()
    }

    /// The number of a monomial of the box.
    #[inline]
    pub(crate) fn number(&self, monomial: &Monomial) -> u64 {
        self.places
            .iter()
            .map(|&(symbol, _, stride)| u64::from(monomial.exponent(symbol)) * stride)
            .sum()
    }

    /// The numbers of a list of terms.
    pub(crate) fn numbers(&self, terms: &[Term]) -> Vec<u64> {
        terms
            .iter()
            .map(|(monomial, _)| self.number(monomial))
            .collect()
    }

    /// The monomial with a number below the size.
    pub(crate) fn monomial(&self, number: u64) -> Monomial {
        let mut rest = number;
        Monomial::from_fields(self.places.iter().map(|&(symbol, _, stride)| {
            let exponent = rest / stride;
            rest -= exponent * stride;
            (symbol, exponent as u16)
        }))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_run_through_the_box_in_the_order_of_the_monomials() {
        let layout = Layout::new(&Monomial::from_exponents(&[2, 0, 3, 0, 0, 1]).unwrap()).unwrap();
        assert_eq!(layout.size(), 24);
        let monomials: Vec<Monomial> = (0..24).map(|number| layout.monomial(number)).collect();
        assert!(monomials.windows(2).all(|pair| pair[0] < pair[1]));
        assert!((0..24).all(|number| layout.number(&monomials[number as usize]) == number));
    }

    #[test]
    fn a_box_beyond_a_word_has_no_layout() {
        assert!(Layout::new(&Monomial::from_exponents(&[0x7fff; 5]).unwrap()).is_none());
        assert!(Layout::new(&Monomial::from_exponents(&[1; 61]).unwrap()).is_some());
        assert!(Layout::new(&Monomial::from_exponents(&[1; 62]).unwrap()).is_none());
    }
}
