//! Solution of square systems by images modulo primes at points.
//!
//! At a point modulo a prime the solution is a vector of words. From points the rational functions modulo the
//! prime are interpolated, one variable after another ([`recover`]); from primes the rational numbers are lifted
//! ([`lift`]). The numbers of points and of primes are discovered, not bounded beforehand: they follow the size of
//! the solution. The result is multiplied out in every row of the square system.

mod elimination;
mod lift;
mod recover;
mod univariate;

pub(crate) use elimination::eliminate;
pub(crate) use lift::{dense_sizes, solve_square};
