//! The arithmetic of the independent check: polynomials over published rationals, multiplied term by term.

use super::expansion::Expansion;
use crate::arithmetic::Arithmetic;
use crate::prepare::Prepared;
use crate::program::{PrimitiveElement, YieldedElement};
use crate::published::{Coefficient, PublishedPolynomial};
use crate::record::{Finding, FormTerm, ResultRecord};
use linform_scalar::published::{BigRational, One, publish_rational};
use linform_scalar::{Control, Rational, Stop};

/// Why a value was not computed.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum CheckError {
    /// A limit.
    Stop(Stop),
    /// The record is wrong or incomplete, in words.
    Wrong(String),
}

impl From<Stop> for CheckError {
    fn from(stop: Stop) -> Self {
        CheckError::Stop(stop)
    }
}

/// The checking arithmetic. Primitives are not sought: the form in the record is taken and its derivative compared.
pub(super) struct CheckArithmetic<'a> {
    pub(super) prepared: &'a Prepared,
    pub(super) record: &'a ResultRecord,
    pub(super) control: &'a dyn Control,
    /// The derivatives of the generators.
    pub(super) derivatives: Vec<Expansion>,
}

impl CheckArithmetic<'_> {
    fn symbols(&self) -> usize {
        self.prepared.symbols.len()
    }

    /// The derivative: variable′ = 1, constants′ = 0.
    pub(super) fn derivative(&self, value: &Expansion) -> Result<Expansion, Stop> {
        let one = self.one();
        let variable = self.prepared.variable();
        let of_symbol = |index| {
            if Some(index) == variable {
                Some(&one)
            } else {
                self.derivatives.get(index)
            }
        };
        value.derivative(of_symbol, &mut || self.control.proceed())
    }

    /// The product, asking for leave once for each term of the left factor.
    pub(super) fn product(&self, a: &Expansion, b: &Expansion) -> Result<Expansion, Stop> {
        a.times(b, &mut || self.control.proceed())
    }

    /// A polynomial in the base symbols as one in all symbols.
    pub(super) fn lift(&self, value: &PublishedPolynomial) -> Expansion {
        Expansion::lift(value, self.prepared.generators(), self.symbols())
    }

    pub(super) fn one(&self) -> Expansion {
        Expansion::constant(self.symbols(), &BigRational::one())
    }

    /// Numerator and denominator of `Σ coefficient · term` for the terms of a form, which are looked up by their texts.
    pub(super) fn form_value(
        &self,
        form: &[FormTerm],
        texts: &[String],
        terms: &[&Expansion],
    ) -> Result<(Expansion, Expansion), CheckError> {
        let mut used = vec![false; texts.len()];
        let mut numerator = Expansion::default();
        let mut denominator = self.one();
        for FormTerm { term, coefficient } in form {
            let place = texts
                .iter()
                .enumerate()
                .position(|(place, text)| text == term && !used[place]);
            let Some(place) = place else {
                return Err(CheckError::Wrong(format!(
                    "`{term}` is not among the terms of the claim, or stands twice"
                )));
            };
            used[place] = true;
            let Coefficient {
                numerator: n,
                denominator: d,
                ..
            } = coefficient;
            let product = self.product(&self.lift(n), terms[place])?;
            if d.is_one() {
                numerator = numerator.plus(&self.product(&product, &denominator)?);
            } else {
                let d = self.lift(d);
                let left = self.product(&numerator, &d)?;
                numerator = left.plus(&self.product(&product, &denominator)?);
                denominator = self.product(&denominator, &d)?;
            }
        }
        Ok((numerator, denominator))
    }

    /// Numerator and denominator of the derivative of a quotient.
    pub(super) fn quotient_derivative(
        &self,
        numerator: &Expansion,
        denominator: &Expansion,
    ) -> Result<(Expansion, Expansion), Stop> {
        let left = self.product(&self.derivative(numerator)?, denominator)?;
        let right = self.product(numerator, &self.derivative(denominator)?)?;
        Ok((left.minus(&right), self.product(denominator, denominator)?))
    }
}

impl Arithmetic for CheckArithmetic<'_> {
    type Element = Expansion;
    type Error = CheckError;

    fn rational(&mut self, value: &Rational) -> Result<Expansion, CheckError> {
        Ok(Expansion::constant(
            self.symbols(),
            &publish_rational(value),
        ))
    }

    fn symbol(&mut self, index: usize) -> Result<Expansion, CheckError> {
        Ok(Expansion::symbol(self.symbols(), index))
    }

    fn add(&mut self, a: &Expansion, b: &Expansion) -> Result<Expansion, CheckError> {
        Ok(a.plus(b))
    }

    fn sub(&mut self, a: &Expansion, b: &Expansion) -> Result<Expansion, CheckError> {
        Ok(a.minus(b))
    }

    fn mul(&mut self, a: &Expansion, b: &Expansion) -> Result<Expansion, CheckError> {
        Ok(self.product(a, b)?)
    }

    fn scale(&mut self, factor: &Rational, a: &Expansion) -> Result<Expansion, CheckError> {
        Ok(a.scaled(&publish_rational(factor)))
    }

    fn derive(&mut self, a: &Expansion) -> Result<Expansion, CheckError> {
        Ok(self.derivative(a)?)
    }

    fn primitive(
        &mut self,
        _index: usize,
        element: &PrimitiveElement,
        derivative: &Expansion,
        terms: &[&Expansion],
    ) -> Result<Expansion, CheckError> {
        let Some(found) = self
            .record
            .primitives
            .iter()
            .find(|primitive| primitive.element == element.name)
        else {
            return Err(CheckError::Wrong(format!(
                "the result does not give the form of `{}`",
                element.name
            )));
        };
        let (value, denominator) = self.form_value(&found.form, &element.terms, terms)?;
        if !denominator.is_one() {
            return Err(CheckError::Wrong(format!(
                "the form of `{}` has a denominator",
                element.name
            )));
        }
        if self.derivative(&value)? != *derivative {
            return Err(CheckError::Wrong(format!(
                "the form of `{}` does not have the derivative it must have",
                element.name
            )));
        }
        Ok(value)
    }

    fn yielded(
        &mut self,
        element: &YieldedElement,
        terms: &[&Expansion],
    ) -> Result<Expansion, CheckError> {
        let instance = &self.prepared.instances[element.claim];
        let wrong = |what: &str| {
            CheckError::Wrong(format!(
                "`{}` needs the coefficients of claim {}, {what}",
                element.name,
                instance.title()
            ))
        };
        let claim = self
            .record
            .claims
            .iter()
            .find(|claim| claim.name == instance.name && claim.index == instance.index);
        let Some(claim) = claim else {
            return Err(wrong("which is not in the result"));
        };
        let Finding::Holds { form } = &claim.finding else {
            return Err(wrong("which does not hold"));
        };
        let mut value = Expansion::default();
        let mut used = vec![false; claim.terms.len()];
        for FormTerm { term, coefficient } in form {
            let place =
                (0..claim.terms.len()).find(|&place| claim.terms[place] == *term && !used[place]);
            let Some((place, target)) =
                place.and_then(|place| terms.get(place).map(|target| (place, target)))
            else {
                return Err(wrong("whose form has other terms"));
            };
            used[place] = true;
            if !coefficient.is_polynomial() {
                return Err(wrong("whose coefficients are not polynomial"));
            }
            value = value.plus(&self.product(&self.lift(&coefficient.numerator), target)?);
        }
        Ok(value)
    }
}
