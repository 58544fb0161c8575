//! Integers, rationals, prime fields, Chinese remaindering and decimals.
//!
//! This is the only crate that names the big-number backends: GMP (through `rug`) does the work, and the
//! `num-*` family, which shares no code with it, serves to publish results and to check them
//! (module [`published`]). Every other crate uses the types defined here.
//!
//! *Invariant*: no floating point, no input or output, no clock.

mod control;
mod crt;
mod decimal;
mod integer;
mod integer_ops;
mod prime_field;
pub mod published;
mod random;
mod rational;

pub use control::{Control, Stop, Unlimited};
pub use crt::ChineseRemainder;
pub use decimal::{DecimalError, decimal_of_rational, rational_of_decimal};
pub use integer::{Integer, ParseNumberError};
pub use prime_field::{PrimeField, primes_below};
pub use random::SplitMix;
pub use rational::Rational;
