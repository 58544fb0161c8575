//! Sparse multivariate polynomials over ℚ with a derivation.
//!
//! A [`Polynomial`] is plain data in one normal form; [`Symbols`] names its symbols, and a [`Ring`] adds the
//! derivation. Both are passed first and elements carry no pointer to them. A ring's gradings are found by
//! integer linear algebra ([`Ring::gradings`]).
//!
//! *Invariant*: no floating point, no input or output, no clock.

mod derivation;
mod division;
mod format;
mod gcd;
mod grading;
mod lattice;
mod layout;
mod meter;
mod monomial;
mod parse;
mod polynomial;
mod product;
mod ring;
mod split;
mod sum;
mod symbols;
#[cfg(test)]
mod testing;

pub use grading::Grading;
pub use monomial::Monomial;
pub use parse::ParseError;
pub use polynomial::Polynomial;
pub use product::{PowerMethod, ProductMethod};
pub use ring::{Ring, RingError};
pub use symbols::Symbols;
