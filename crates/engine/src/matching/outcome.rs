//! What the matching of a claim gives.

use super::admitted;
use crate::record::CoefficientKind;
use linform_ring::{Monomial, Polynomial};
use linform_solver::Fraction;

/// A system that was solved, and the answer.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Solved {
    /// Number of equations.
    pub(crate) rows: usize,
    /// Number of unknowns.
    pub(crate) columns: usize,
    /// The algorithm that was used.
    pub(crate) solver: &'static str,
    /// The answer.
    pub(crate) matched: Match,
}

impl Solved {
    /// The outcome for a claim that admits other coefficients: a unique rational solution is right where those are admitted.
    pub(crate) fn for_kind(&self, kind: CoefficientKind) -> Solved {
        let matched = match &self.matched {
            Match::OtherCoefficients { coefficients, .. } if admitted(coefficients, kind) => {
                Match::Holds(coefficients.clone())
            }
            other => other.clone(),
        };
        Solved {
            matched,
            ..self.clone()
        }
    }
}

/// The answer of the matching.
#[derive(Clone, Debug, PartialEq)]
pub(crate) enum Match {
    /// The only solution, of the admitted kind: one coefficient for each term.
    Holds(Vec<Fraction>),
    /// The only solution, not of the admitted kind.
    OtherCoefficients {
        /// The solution.
        coefficients: Vec<Fraction>,
        /// Why it is the only one.
        independence: Witness,
    },
    /// The only coefficients for which the derivative matches are not those of a primitive.
    NotAPrimitive {
        /// The coefficients `p`.
        coefficients: Vec<Fraction>,
        /// The coefficients `r ≠ p′`.
        derivatives: Vec<Fraction>,
        /// Why they are the only ones.
        independence: Witness,
    },
    /// Many solutions.
    Family {
        /// One of them.
        particular: Vec<Fraction>,
        /// A basis of the forms that vanish.
        kernel: Vec<Vec<Fraction>>,
        /// A form equal to 1, if the target is known by its derivative and the terms span one.
        shift: Option<Vec<Fraction>>,
    },
    /// No solution: equations, by their monomials, with multipliers, and the sum of the right sides.
    Contradiction {
        /// The equations and multipliers.
        rows: Vec<(Monomial, Polynomial)>,
        /// The sum of the right sides, not 0; that of the left sides is 0.
        value: Polynomial,
    },
    /// A form has the derivative, and so have others: the terms span an element with derivative 0 that is no constant of the base.
    FirstIntegral,
    /// The terms and their derivatives are dependent, and no primitive was found with coefficients up to this degree.
    DegreeLimit {
        /// The largest degree that was tried.
        degree: usize,
    },
}

/// A witness that the columns of a system are independent.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) struct Witness {
    /// The monomials of a regular square block.
    pub(crate) rows: Vec<Monomial>,
    /// The prime.
    pub(crate) prime: u64,
    /// Values of the base symbols, by index.
    pub(crate) point: Vec<(usize, u64)>,
}
