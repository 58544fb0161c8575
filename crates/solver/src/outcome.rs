//! What a system turned out to be.

use crate::{Fraction, Independence};
use linform_ring::Polynomial;

/// The solutions of a system.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Outcome {
    /// Exactly one solution.
    Unique(Vec<Fraction>),
    /// Infinitely many solutions: `particular + Σ c_i · kernel[i]` with any fractions `c_i`, each solution once.
    Family {
        /// One solution. It is 0 in the free columns, and those are as far to the right as possible, so it
        /// uses the earliest columns.
        particular: Vec<Fraction>,
        /// A basis of the solutions of `A·x = 0`, one for each free column: 0 in the other free columns, with
        /// polynomial entries of content 1, and positive leading coefficient in the own one.
        kernel: Vec<Vec<Fraction>>,
    },
    /// No solution.
    Inconsistent(Certificate),
}

/// A combination of equations that reads `0 = value`.
///
/// *Invariant* (checked by [`crate::verify`]): `Σ multiplier·(row of A) = 0` and `Σ multiplier·(entry of b) =
/// value ≠ 0`; no proper subset of the rows is contradictory.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Certificate {
    /// The rows that take part, ascending, with their multipliers: integral, together of content 1, the first
    /// with positive leading coefficient.
    pub multipliers: Vec<(usize, Polynomial)>,
    /// What the right sides add up to; not 0.
    pub value: Polynomial,
}

/// A way to the solution.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Method {
    /// Elimination over the polynomials, with exact divisions.
    FractionFree,
    /// Images modulo primes at points, interpolated and lifted.
    Modular,
}

/// A decided system.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Solved {
    /// The solutions, multiplied out in every row.
    pub outcome: Outcome,
    /// The way on which they were found.
    pub method: Method,
    /// A witness of the rank: of uniqueness, or of the kernel's being complete. None for an inconsistent system.
    pub independence: Option<Independence>,
}
