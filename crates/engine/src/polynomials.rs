//! Programs evaluated in the ring: the arithmetic of matching and of proofs.

use crate::arithmetic::Arithmetic;
use crate::matching::{self, Match, Solved};
use crate::prepare::Prepared;
use crate::program::{PrimitiveElement, YieldedElement};
use crate::record::CoefficientKind;
use crate::strategy::Solver;
use linform_ring::{Polynomial, Ring, Symbols};
use linform_scalar::{Control, Rational, Stop};
use std::sync::OnceLock;

/// Why an element of the ring was not computed.
#[derive(Clone, Debug, PartialEq)]
pub(crate) enum EvaluationError {
    /// A limit.
    Stop(Stop),
    /// An element known only through its derivative has no form in its terms, or more than one.
    Primitive {
        /// The element.
        element: String,
        /// What went wrong, in words.
        reason: String,
        /// The outcome of the system, for the claim about the element itself.
        solved: Box<Solved>,
    },
    /// An earlier claim whose coefficients define the element did not hold.
    Prerequisite {
        /// The element.
        element: String,
        /// The claim, with its index.
        claim: String,
    },
    /// The form found for this claim failed its proof; this cannot happen unless the program is wrong.
    Unproved(String),
}

impl From<Stop> for EvaluationError {
    fn from(stop: Stop) -> Self {
        EvaluationError::Stop(stop)
    }
}

/// The form of an element that is known through its derivative.
#[derive(Clone, Debug)]
pub(crate) struct PrimitiveSolution {
    pub(crate) element: String,
    pub(crate) terms: Vec<String>,
    pub(crate) solved: Solved,
}

/// The forms that were found and that other definitions rest on, each written once.
#[derive(Debug, Default)]
pub(crate) struct Forms {
    /// By the index of the primitive in the program.
    pub(crate) primitives: Vec<OnceLock<PrimitiveSolution>>,
    /// For each claim instance its coefficients, once it is known to hold.
    pub(crate) claims: Vec<OnceLock<Vec<Polynomial>>>,
    /// The names of the claim instances.
    pub(crate) titles: Vec<String>,
}

/// The arithmetic of the ring.
pub(crate) struct RingArithmetic<'a> {
    pub(crate) ring: &'a Ring,
    pub(crate) solver: Solver,
    pub(crate) control: &'a dyn Control,
    pub(crate) forms: &'a Forms,
}

impl Arithmetic for RingArithmetic<'_> {
    type Element = Polynomial;
    type Error = EvaluationError;

    fn rational(&mut self, value: &Rational) -> Result<Polynomial, EvaluationError> {
        Ok(Polynomial::constant(value.clone()))
    }

    fn symbol(&mut self, index: usize) -> Result<Polynomial, EvaluationError> {
        Ok(Polynomial::symbol(self.ring.symbols(), index))
    }

    fn add(&mut self, a: &Polynomial, b: &Polynomial) -> Result<Polynomial, EvaluationError> {
        Ok(a + b)
    }

    fn sub(&mut self, a: &Polynomial, b: &Polynomial) -> Result<Polynomial, EvaluationError> {
        Ok(a - b)
    }

    fn mul(&mut self, a: &Polynomial, b: &Polynomial) -> Result<Polynomial, EvaluationError> {
        Ok(a.mul(b, self.control)?)
    }

    fn scale(&mut self, factor: &Rational, a: &Polynomial) -> Result<Polynomial, EvaluationError> {
        Ok(a.scale(factor))
    }

    fn pow(&mut self, a: &Polynomial, exponent: u32) -> Result<Polynomial, EvaluationError> {
        Ok(a.pow(exponent, self.control)?)
    }

    fn derive(&mut self, a: &Polynomial) -> Result<Polynomial, EvaluationError> {
        Ok(self.ring.derive(a, self.control)?)
    }

    fn primitive(
        &mut self,
        index: usize,
        element: &PrimitiveElement,
        derivative: &Polynomial,
        terms: &[&Polynomial],
    ) -> Result<Polynomial, EvaluationError> {
        let kind = CoefficientKind::Polynomial;
        let solved = matching::match_derivative(
            self.ring,
            derivative,
            terms,
            kind,
            self.solver,
            self.control,
        )?;
        let failure = |reason: &str, solved: Solved| EvaluationError::Primitive {
            element: element.name.clone(),
            reason: reason.to_owned(),
            solved: Box::new(solved),
        };
        let value = match &solved.matched {
            Match::Holds(coefficients) => combine(
                coefficients.iter().map(linform_solver::Fraction::numerator),
                terms,
                self.control,
            )?,
            Match::Family { .. } => {
                return Err(failure("its primitive_terms are dependent", solved));
            }
            Match::DegreeLimit { .. } => {
                return Err(failure(
                    "the search for its form ended without an answer",
                    solved,
                ));
            }
            _ => {
                return Err(failure(
                    "its derivative has no primitive in the span of its primitive_terms",
                    solved,
                ));
            }
        };
        let (element, terms) = (element.name.clone(), element.terms.clone());
        if let Some(place) = self.forms.primitives.get(index) {
            let _ = place.set(PrimitiveSolution {
                element,
                terms,
                solved,
            });
        }
        Ok(value)
    }

    fn yielded(
        &mut self,
        element: &YieldedElement,
        terms: &[&Polynomial],
    ) -> Result<Polynomial, EvaluationError> {
        match self.forms.claims.get(element.claim).and_then(OnceLock::get) {
            Some(coefficients) => Ok(combine(coefficients.iter(), terms, self.control)?),
            None => Err(EvaluationError::Prerequisite {
                element: element.name.clone(),
                claim: self
                    .forms
                    .titles
                    .get(element.claim)
                    .cloned()
                    .unwrap_or_default(),
            }),
        }
    }
}

/// `Σ cᵢ bᵢ`.
pub(crate) fn combine<'p>(
    coefficients: impl Iterator<Item = &'p Polynomial>,
    terms: &[&Polynomial],
    control: &dyn Control,
) -> Result<Polynomial, Stop> {
    let mut sum = Polynomial::zero();
    for (coefficient, term) in coefficients.zip(terms) {
        if !coefficient.is_zero() {
            sum = &sum + &coefficient.mul(term, control)?;
        }
    }
    Ok(sum)
}

/// The ring of a prepared spec.
///
/// # Errors
///
/// A limit, or a derivation that is not polynomial in the symbols (a prepared spec has none such).
pub(crate) fn ring_of(prepared: &Prepared, control: &dyn Control) -> Result<Ring, EvaluationError> {
    let ring = &prepared.model.ring;
    let symbols = || {
        Symbols::new(
            ring.generators.clone(),
            ring.variable.clone(),
            ring.constants.clone(),
        )
    };
    // The reader of specs admits no derivatives in the derivation rules, so they are the same in a ring of constants.
    let constants = vec![Polynomial::zero(); ring.generators.len()];
    let constants = Ring::new(symbols(), constants).map_err(|_| Stop::SizeLimit)?;
    let mut arithmetic = RingArithmetic {
        ring: &constants,
        solver: Solver::Auto,
        control,
        forms: &Forms::default(),
    };
    let mut values = vec![None; prepared.program.len()];
    prepared
        .program
        .evaluate(&mut arithmetic, &prepared.derivatives, &mut values)?;
    let derivatives = prepared
        .derivatives
        .iter()
        .map(|node| values[node.position()].clone().unwrap_or_default())
        .collect();
    Ok(Ring::new(symbols(), derivatives).map_err(|_| Stop::SizeLimit)?)
}
