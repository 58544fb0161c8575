//! Overdetermined linear systems over polynomial rings, decided exactly.
//!
//! A [`System`] is `A·x = b` with polynomial entries and unknowns in the field of fractions. [`solve`] decides
//! it: one solution, a family of them, or none, and then with a certificate. Two methods lead there and are
//! tested against each other: fraction-free elimination ([`solve_fraction_free`]) and images modulo primes
//! at points ([`solve_modular`]).
//!
//! Both begin alike. The rank, independent rows and independent columns are found modulo a prime at a random
//! point; only the square system on those rows and columns is solved; and its solution is multiplied out in
//! *every* row before it leaves this crate. So an unlucky prime or point costs time and never a wrong answer.
//!
//! *Invariant*: no floating point, no input or output, no clock. Results depend on the system alone.

mod bareiss;
mod certificate;
mod choose;
mod cost;
mod decide;
mod fraction;
mod independence;
mod modular;
mod outcome;
mod plan;
mod profile;
mod random;
mod residual;
mod square;
mod system;
mod verify;

pub use choose::solve;
pub use decide::{solve_fraction_free, solve_modular};
pub use fraction::Fraction;
pub use independence::{Independence, check_independence};
pub use outcome::{Certificate, Method, Outcome, Solved};
pub use system::{Row, System};
pub use verify::{Mismatch, verify};
