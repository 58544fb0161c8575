//! What a program can be evaluated in.

use crate::program::{PrimitiveElement, YieldedElement};
use linform_scalar::Rational;

/// An arithmetic in which the definitions of a spec are evaluated.
///
/// Laws that every implementation keeps, as far as its elements can be compared: `add`, `sub`, `scale` and `mul` are those
/// of a commutative ℚ-algebra; `derive` is additive and follows Leibniz's rule; `rational` and `symbol` are the images of
/// the ring's elements. Code that evaluates a program relies on nothing else.
pub trait Arithmetic {
    /// The elements.
    type Element: Clone;
    /// Why an evaluation ends early.
    type Error;

    /// A rational constant.
    fn rational(&mut self, value: &Rational) -> Result<Self::Element, Self::Error>;
    /// The symbol with this index in the ring.
    fn symbol(&mut self, index: usize) -> Result<Self::Element, Self::Error>;
    /// The sum.
    fn add(&mut self, a: &Self::Element, b: &Self::Element) -> Result<Self::Element, Self::Error>;
    /// The difference.
    fn sub(&mut self, a: &Self::Element, b: &Self::Element) -> Result<Self::Element, Self::Error>;
    /// The product.
    fn mul(&mut self, a: &Self::Element, b: &Self::Element) -> Result<Self::Element, Self::Error>;
    /// A rational multiple.
    fn scale(&mut self, factor: &Rational, a: &Self::Element)
    -> Result<Self::Element, Self::Error>;
    /// The derivative.
    fn derive(&mut self, a: &Self::Element) -> Result<Self::Element, Self::Error>;

    /// The primitive of `derivative` in the span of `terms`; `index` counts the primitives of the program.
    fn primitive(
        &mut self,
        index: usize,
        element: &PrimitiveElement,
        derivative: &Self::Element,
        terms: &[&Self::Element],
    ) -> Result<Self::Element, Self::Error>;

    /// The form in `terms` whose coefficients an earlier claim has found.
    fn yielded(
        &mut self,
        element: &YieldedElement,
        terms: &[&Self::Element],
    ) -> Result<Self::Element, Self::Error>;

    /// The power with an exponent of at least 1, by repeated squaring.
    fn pow(&mut self, a: &Self::Element, exponent: u32) -> Result<Self::Element, Self::Error> {
        let (mut square, mut rest) = (a.clone(), exponent);
        let mut result: Option<Self::Element> = None;
        loop {
            if rest & 1 == 1 {
                result = Some(match result {
                    None => square.clone(),
                    Some(product) => self.mul(&product, &square)?,
                });
            }
            rest >>= 1;
            match result {
                Some(product) if rest == 0 => return Ok(product),
                _ if rest == 0 => return self.rational(&Rational::ONE),
                _ => square = self.mul(&square, &square)?,
            }
        }
    }

    /// `F^(n)/F` from `V₁` and `Vₙ₋₁`: `Vₙ = Vₙ₋₁′ + V₁ Vₙ₋₁`.
    fn ratio(
        &mut self,
        _law: usize,
        _order: u32,
        logarithmic: &Self::Element,
        previous: Option<&Self::Element>,
    ) -> Result<Self::Element, Self::Error> {
        match previous {
            None => Ok(logarithmic.clone()),
            Some(previous) => {
                let derivative = self.derive(previous)?;
                let product = self.mul(logarithmic, previous)?;
                self.add(&derivative, &product)
            }
        }
    }

    /// The determinant of a square matrix given row by row, by expansion along the rows with every minor of the last rows
    /// computed once: `size · 2^(size−1)` products and no division.
    fn determinant(
        &mut self,
        size: usize,
        entries: &[&Self::Element],
    ) -> Result<Self::Element, Self::Error> {
        // minors[set] is the determinant of the last |set| rows on the columns of the set.
        let mut minors: Vec<Option<Self::Element>> = vec![None; 1 << size];
        minors[0] = Some(self.rational(&Rational::ONE)?);
        for set in 1usize..1 << size {
            let row = size - set.count_ones() as usize;
            let mut sum: Option<Self::Element> = None;
            let mut negative = false;
            for column in (0..size).filter(|column| set >> column & 1 == 1) {
                let Some(minor) = &minors[set & !(1 << column)] else {
                    continue;
                };
                let product = self.mul(entries[row * size + column], minor)?;
                sum = Some(match (sum, negative) {
                    (None, false) => product,
                    (None, true) => self.scale(&-Rational::ONE, &product)?,
                    (Some(sum), false) => self.add(&sum, &product)?,
                    (Some(sum), true) => self.sub(&sum, &product)?,
                });
                negative = !negative;
            }
            minors[set] = sum;
        }
        match minors.pop().flatten() {
            Some(determinant) => Ok(determinant),
            None => self.rational(&Rational::ONE),
        }
    }
}
