//! The arithmetic whose elements are names of a script: evaluating a program in it writes the program down.

use super::claim::Known;
use super::dialect::{Dialect, list, quoted, symbol};
use super::error::ScriptError;
use crate::sanitise::excerpt;
use linform_engine::published::{Coefficient, PublishedPolynomial};
use linform_engine::record::{Finding, FormTerm, ResultRecord};
use linform_engine::{Arithmetic, Prepared, PrimitiveElement, YieldedElement};
use linform_scalar::Rational;
use linform_scalar::published::{One, publish_rational};
use std::collections::HashMap;

pub(super) struct Emitter<'a> {
    pub(super) dialect: Dialect,
    pub(super) out: String,
    prepared: &'a Prepared,
    record: &'a ResultRecord,
    /// The symbols by name.
    symbols: HashMap<&'a str, usize>,
    steps: usize,
}

impl<'a> Emitter<'a> {
    pub(super) fn new(dialect: Dialect, prepared: &'a Prepared, record: &'a ResultRecord) -> Self {
        let symbols = prepared.symbols.iter().enumerate();
        Emitter {
            dialect,
            out: String::new(),
            prepared,
            record,
            symbols: symbols
                .map(|(index, name)| (name.as_str(), index))
                .collect(),
            steps: 0,
        }
    }

    pub(super) fn statement(&mut self, text: &str) {
        let statement = self.dialect.statement(text);
        self.out.push_str(&statement);
    }

    fn step(&mut self, value: &str) -> String {
        let name = format!("v{}", self.steps);
        self.steps += 1;
        self.statement(&format!("{name} = {value}"));
        name
    }

    /// The derivative of an element, in a step of its own.
    pub(super) fn derivative(&mut self, element: &str) -> String {
        self.step(&format!("D({element})"))
    }

    fn symbol_named(&self, name: &str) -> Result<usize, ScriptError> {
        let found = self.symbols.get(name).copied();
        found.ok_or_else(|| ScriptError::new(format!("{} is no symbol of the ring", excerpt(name))))
    }

    fn polynomial(
        &self,
        polynomial: &PublishedPolynomial,
        names: &[String],
    ) -> Result<String, ScriptError> {
        let mut terms = Vec::new();
        for (exponents, value) in polynomial.terms() {
            let mut factors = Vec::new();
            let powers = exponents.iter().zip(names);
            for (exponent, name) in powers.filter(|(exponent, _)| **exponent > 0) {
                let base = symbol(self.symbol_named(name)?);
                factors.push(self.dialect.power(&base, *exponent));
            }
            if factors.is_empty() || !value.is_one() {
                factors.insert(0, self.dialect.rational(value));
            }
            terms.push(factors.join("*"));
        }
        match terms.len() {
            0 => Ok("c(0)".to_owned()),
            1 => Ok(terms.swap_remove(0)),
            // A list, not a sum: a sum of thousands of terms is nested too deeply for a parser.
            _ => Ok(format!("add({})", list(terms))),
        }
    }

    /// Numerator and denominator.
    pub(super) fn coefficient(
        &self,
        coefficient: &Coefficient,
    ) -> Result<(String, String), ScriptError> {
        Ok((
            self.polynomial(&coefficient.numerator, &coefficient.names)?,
            self.polynomial(&coefficient.denominator, &coefficient.names)?,
        ))
    }

    /// The parts of a form: numerator, denominator, term.
    pub(super) fn form(
        &self,
        form: &[FormTerm],
        texts: &[String],
        terms: &[String],
    ) -> Result<String, ScriptError> {
        let places = places(form, texts, terms)?.into_iter().zip(form);
        let parts = places.map(|(place, part)| self.part(part, &terms[place]));
        Ok(list(parts.collect::<Result<Vec<_>, _>>()?))
    }

    /// The parts of a form, one for each term: those that the form leaves out are 0.
    pub(super) fn whole_form(
        &self,
        form: &[FormTerm],
        texts: &[String],
        terms: &[String],
    ) -> Result<String, ScriptError> {
        let mut parts: Vec<String> = terms
            .iter()
            .map(|term| format!("[c(0), c(1), {term}]"))
            .collect();
        for (place, part) in places(form, texts, terms)?.into_iter().zip(form) {
            parts[place] = self.part(part, &terms[place])?;
        }
        Ok(list(parts))
    }

    fn part(&self, part: &FormTerm, term: &str) -> Result<String, ScriptError> {
        let (above, below) = self.coefficient(&part.coefficient)?;
        Ok(format!("[{above}, {below}, {term}]"))
    }

    /// The exponents of a monomial in the first `split` symbols.
    pub(super) fn monomial(&self, text: &str, split: usize) -> Result<String, ScriptError> {
        let wrong = || ScriptError::new(format!("{} is no monomial of the system", excerpt(text)));
        let mut exponents = vec![0u32; split];
        for factor in text
            .split('*')
            .map(str::trim)
            .filter(|factor| *factor != "1")
        {
            let (name, exponent) = factor.split_once('^').unwrap_or((factor, "1"));
            let place = exponents
                .get_mut(self.symbol_named(name)?)
                .ok_or_else(wrong)?;
            *place = exponent.parse().map_err(|_| wrong())?;
        }
        Ok(list(exponents.iter().map(u32::to_string)))
    }
}

/// The place of each part of a form among the terms: a text that stands there twice is used from left to right.
fn places(
    form: &[FormTerm],
    texts: &[String],
    terms: &[String],
) -> Result<Vec<usize>, ScriptError> {
    let mut used = vec![false; texts.len().min(terms.len())];
    let places = form.iter().map(|part| {
        let place = (0..used.len()).find(|&place| texts[place] == part.term && !used[place]);
        let place = place.ok_or_else(|| {
            ScriptError::new(format!(
                "the term {} of a form is not among those offered",
                excerpt(&part.term)
            ))
        })?;
        used[place] = true;
        Ok(place)
    });
    places.collect()
}

impl Arithmetic for Emitter<'_> {
    type Element = String;
    type Error = ScriptError;

    fn rational(&mut self, value: &Rational) -> Result<String, ScriptError> {
        Ok(self.dialect.rational(&publish_rational(value)))
    }

    fn symbol(&mut self, index: usize) -> Result<String, ScriptError> {
        Ok(symbol(index))
    }

    fn add(&mut self, a: &String, b: &String) -> Result<String, ScriptError> {
        Ok(self.step(&format!("{a} + {b}")))
    }

    fn sub(&mut self, a: &String, b: &String) -> Result<String, ScriptError> {
        Ok(self.step(&format!("{a} - {b}")))
    }

    fn mul(&mut self, a: &String, b: &String) -> Result<String, ScriptError> {
        Ok(self.step(&format!("{a}*{b}")))
    }

    fn scale(&mut self, factor: &Rational, a: &String) -> Result<String, ScriptError> {
        let factor = self.rational(factor)?;
        Ok(self.step(&format!("{factor}*{a}")))
    }

    fn derive(&mut self, a: &String) -> Result<String, ScriptError> {
        Ok(self.derivative(a))
    }

    fn pow(&mut self, a: &String, exponent: u32) -> Result<String, ScriptError> {
        let power = self.dialect.power(a, exponent);
        Ok(self.step(&power))
    }

    fn primitive(
        &mut self,
        _index: usize,
        element: &PrimitiveElement,
        derivative: &String,
        terms: &[&String],
    ) -> Result<String, ScriptError> {
        let found = self
            .record
            .primitives
            .iter()
            .find(|found| found.element == element.name);
        let found = found.ok_or_else(|| {
            ScriptError::new(format!(
                "the result does not give the form of {}",
                excerpt(&element.name)
            ))
        })?;
        let terms: Vec<String> = terms.iter().map(|term| (*term).clone()).collect();
        let form = self.form(&found.form, &element.terms, &terms)?;
        let title = quoted(&format!("form of {}", element.name));
        let known = match self.prepared.variable() {
            Some(_) => Known::Derivative,
            None => Known::ConstantDerivative,
        };
        Ok(self.step(&format!(
            "primitive({title}, {derivative}, {}, {}, {}, {form})",
            list(terms),
            known as usize,
            self.prepared.generators(),
        )))
    }

    fn yielded(
        &mut self,
        element: &YieldedElement,
        terms: &[&String],
    ) -> Result<String, ScriptError> {
        let wrong = |what: &str| {
            ScriptError::new(format!(
                "{} is taken from a claim {what}",
                excerpt(&element.name)
            ))
        };
        let instance = self.prepared.instances.get(element.claim);
        let instance = instance.ok_or_else(|| wrong("that the spec does not have"))?;
        let claim = self
            .record
            .claims
            .iter()
            .find(|claim| claim.name == instance.name && claim.index == instance.index)
            .ok_or_else(|| wrong("that the result does not have"))?;
        let Finding::Holds { form } = &claim.finding else {
            return Err(wrong("that does not hold"));
        };
        let terms: Vec<String> = terms.iter().map(|term| (*term).clone()).collect();
        let form = self.form(form, &claim.terms, &terms)?;
        let pair = self.step(&format!("form({form})"));
        // The numerator is the first of the pair in the one language and has another number in the other.
        let first = match self.dialect {
            Dialect::Sympy => "[0]",
            Dialect::Gp => "[1]",
        };
        Ok(self.step(&format!("{pair}{first}")))
    }
}
