//! Runs a checked spec: definitions, claims, strategy, evidence.
//!
//! [`prepare`] unfolds a model into one straight-line [`Program`]; [`solve`] evaluates it in the ring and decides the
//! claims; [`verify`] re-checks a record in an arithmetic that shares no code with the one that found it.

mod arithmetic;
mod matching;
mod polynomials;
mod prepare;
mod program;
mod publish;
pub mod published;
pub mod record;
mod solve;
mod source;
mod strategy;
mod verify;

pub use arithmetic::Arithmetic;
pub use prepare::{
    Instance, PrepareError, PrepareLimits, Prepared, TermList, prepare, prepare_within, title,
};
pub use program::{NodeId, Operation, PrimitiveElement, Program, YieldedElement};
pub use solve::{Observer, Options, Silent, solve};
pub use source::{base_names, hash_of, model_of};
pub use strategy::{Method, Solver};
pub use verify::{CheckOutcome, ClaimCheck, Verification, verify};
