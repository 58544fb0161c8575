//! The choice of method.

use crate::decide::decide;
use crate::square::Square;
use crate::{Method, Solved, System};
use linform_scalar::{Control, Stop};

/// Decides the system by the method that its shape recommends.
///
/// The choice changes the time and nothing else: both methods give the same outcome.
///
/// # Errors
///
/// The reason for which the control or the size of a polynomial ended the work.
pub fn solve(system: &System, control: &dyn Control) -> Result<Solved, Stop> {
    decide(system, &recommended, control)
}

fn recommended(square: &Square<'_>) -> Method {
    if square.size <= 2 {
        Method::FractionFree
    } else {
        Method::Modular
    }
}
