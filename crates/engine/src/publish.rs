//! From working types to the plain data of a record.

use crate::matching::{Match, Witness};
use crate::prepare::Prepared;
use crate::published::{Coefficient, PublishedPolynomial, monomial_text};
use crate::record::{
    CertificateRow, Finding, FormTerm, GradingRecord, IndependenceRecord, Refutation, StopKind,
    Unsettled,
};
use linform_ring::{Monomial, Polynomial, Ring};
use linform_scalar::Rational;
use linform_scalar::published::publish_rational;
use linform_solver::Fraction;
use std::sync::Arc;

/// Turns polynomials into published coefficients of the base symbols.
pub(crate) struct Publisher {
    symbols: Vec<String>,
    generators: usize,
    base: Arc<[String]>,
}

impl Publisher {
    pub(crate) fn new(prepared: &Prepared) -> Publisher {
        let generators = prepared.generators();
        let base = prepared.symbols[generators..].to_vec().into();
        Publisher {
            symbols: prepared.symbols.clone(),
            generators,
            base,
        }
    }

    fn polynomial(&self, value: &Polynomial) -> PublishedPolynomial {
        let mut published = PublishedPolynomial::default();
        for (monomial, numerator) in value.iter() {
            let exponents = monomial.exponents(self.symbols.len());
            let base = exponents[self.generators..]
                .iter()
                .map(|&exponent| u32::from(exponent))
                .collect();
            if let Some(coefficient) = Rational::new(numerator.clone(), value.denominator().clone())
            {
                published.add_term(base, publish_rational(&coefficient));
            }
        }
        published
    }

    fn whole(&self, value: &Polynomial) -> Coefficient {
        let denominator = self.polynomial(&Polynomial::one());
        Coefficient {
            names: self.base.clone(),
            numerator: self.polynomial(value),
            denominator,
        }
    }

    fn coefficient(&self, value: &Fraction) -> Coefficient {
        Coefficient {
            names: self.base.clone(),
            numerator: self.polynomial(value.numerator()),
            denominator: self.polynomial(value.denominator()),
        }
    }

    /// The terms of a form whose coefficients are not 0.
    pub(crate) fn form(&self, terms: &[String], coefficients: &[Fraction]) -> Vec<FormTerm> {
        let pairs = terms
            .iter()
            .zip(coefficients)
            .filter(|(_, coefficient)| !coefficient.is_zero());
        pairs
            .map(|(term, value)| FormTerm {
                term: term.clone(),
                coefficient: self.coefficient(value),
            })
            .collect()
    }

    /// As [`Publisher::form`], but where a term stands twice its zeros are kept: they tell which of the two is meant.
    fn kernel_form(&self, terms: &[String], coefficients: &[Fraction]) -> Vec<FormTerm> {
        let twice = |term: &String| terms.iter().filter(|other| *other == term).count() > 1;
        terms
            .iter()
            .zip(coefficients)
            .filter(|(term, coefficient)| !coefficient.is_zero() || twice(term))
            .map(|(term, value)| FormTerm {
                term: term.clone(),
                coefficient: self.coefficient(value),
            })
            .collect()
    }

    /// The text of a monomial of a row; `1` for the constant one.
    fn monomial(&self, monomial: &Monomial) -> String {
        let exponents: Vec<u32> = monomial
            .exponents(self.symbols.len())
            .iter()
            .map(|&exponent| u32::from(exponent))
            .collect();
        let text = monomial_text(&exponents, &self.symbols);
        if text.is_empty() {
            "1".to_owned()
        } else {
            text
        }
    }

    fn independence(&self, witness: &Witness) -> IndependenceRecord {
        IndependenceRecord {
            rows: witness
                .rows
                .iter()
                .map(|monomial| self.monomial(monomial))
                .collect(),
            prime: witness.prime,
            point: witness
                .point
                .iter()
                .map(|(symbol, value)| (self.symbols[*symbol].clone(), *value))
                .collect(),
        }
    }

    pub(crate) fn finding(&self, terms: &[String], matched: &Match) -> Finding {
        match matched {
            Match::Holds(coefficients) => Finding::Holds {
                form: self.form(terms, coefficients),
            },
            Match::OtherCoefficients {
                coefficients,
                independence,
            } => Finding::Refuted(Refutation::OtherCoefficients {
                form: self.form(terms, coefficients),
                independence: self.independence(independence),
            }),
            Match::NotAPrimitive {
                coefficients,
                derivatives,
                independence,
            } => Finding::Refuted(Refutation::NotAPrimitive {
                coefficients: self.form(terms, coefficients),
                derivatives: self.form(terms, derivatives),
                independence: self.independence(independence),
            }),
            Match::Family {
                particular,
                kernel,
                shift,
            } => Finding::Undetermined {
                particular: self.form(terms, particular),
                kernel: kernel
                    .iter()
                    .map(|vector| self.kernel_form(terms, vector))
                    .collect(),
                shift: shift.as_ref().map(|form| self.form(terms, form)),
            },
            Match::Contradiction { rows, value } => Finding::Refuted(Refutation::Contradiction {
                rows: rows
                    .iter()
                    .map(|(monomial, multiplier)| CertificateRow {
                        monomial: self.monomial(monomial),
                        multiplier: self.whole(multiplier),
                    })
                    .collect(),
                value: self.whole(value),
            }),
            Match::FirstIntegral => Finding::Unsettled(Unsettled {
                stop: StopKind::Degree,
                reason: "the terms span a first integral of the derivation, an element with derivative 0, so the derivative \
                         leaves more open than a constant; leave out a term, or state the claim about the target itself"
                    .to_owned(),
            }),
            Match::DegreeLimit { degree } => Finding::Unsettled(Unsettled {
                stop: StopKind::Degree,
                reason: format!(
                    "the terms and their derivatives are dependent, and no form with coefficients up to degree {degree} has \
                     the given derivative; leave out terms that depend on others, or state the claim about the target itself"
                ),
            }),
        }
    }

    /// All gradings for which the derivation and the laws are homogeneous.
    pub(crate) fn gradings(&self, ring: &Ring, laws: &[Polynomial]) -> Vec<GradingRecord> {
        ring.gradings(laws)
            .iter()
            .map(|grading| GradingRecord {
                modulus: grading.modulus.to_string(),
                derivation: grading.derivation.to_string(),
                weights: self
                    .symbols
                    .iter()
                    .cloned()
                    .zip(grading.weights.iter().map(ToString::to_string))
                    .collect(),
            })
            .collect()
    }
}
