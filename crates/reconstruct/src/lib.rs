//! Rational numbers from their residues.
//!
//! A computation modulo primes ends with residues of rational numbers; this crate finds the numbers:
//!
//! * [`rational_from_residue`] inside given bounds, where it is unique;
//! * [`rational_of_maximal_quotient`] without bounds, where its encoding stands out against chance;
//! * [`rationals_over_common_denominator`] for whole vectors;
//! * [`Watch`] says at which prime a vector of residues has become stable.
//!
//! What comes out is a candidate: only the caller can know whether it solves the problem that the residues
//! came from, and must check it there.
//!
//! *Invariant*: no floating point, no input or output, no clock.

mod maximal_quotient;
mod residue;
mod vector;
mod watch;

pub use maximal_quotient::rational_of_maximal_quotient;
pub use residue::{Bounds, rational_from_residue};
pub use vector::{CommonDenominator, rationals_over_common_denominator};
pub use watch::{Patience, Progress, Watch};
