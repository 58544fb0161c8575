//! Runs a checked spec: definitions, claims, strategy, evidence.

mod arithmetic;
mod program;
pub mod published;
pub mod record;

pub use arithmetic::Arithmetic;
pub use program::{NodeId, Operation, PrimitiveElement, Program, YieldedElement};
