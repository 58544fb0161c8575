//! The choice of method.

use crate::decide::decide;
use crate::modular::dense_sizes;
use crate::square::Square;
use crate::{Method, Solved, System};
use linform_scalar::{Control, Stop};

/// Decides the system by the method that promises to be faster.
///
/// The choice changes the time and nothing else: both methods give the same outcome.
///
/// # Errors
///
/// The reason for which the control or the size of a polynomial ended the work.
///
/// # Complexity
///
/// That of the method, and for systems in several symbols the images along one line for each symbol.
///
/// # Examples
///
/// ```
/// use linform_ring::Symbols;
/// use linform_scalar::Unlimited;
/// use linform_solver::{Outcome, Row, System, check_independence, solve, verify};
///
/// let symbols = Symbols::new(vec![], Some("t".into()), vec![]);
/// let read = |text: &str| symbols.parse(text).unwrap();
/// // x + t·y = 2t², t·x = t³, x − y = t² − t
/// let mut system = System::new(2);
/// for (x, y, right) in [("1", "t", "2*t^2"), ("t", "0", "t^3"), ("1", "-1", "t^2 - t")] {
///     let entries = vec![(0, read(x)), (1, read(y))];
///     system.push(Row { entries, right: read(right) });
/// }
/// let solved = solve(&system, &Unlimited)?;
/// assert_eq!(solved.outcome, Outcome::Unique(vec![read("t^2").into(), read("t").into()]));
/// assert_eq!(verify(&system, &solved.outcome, &Unlimited)?, Ok(()));
/// assert!(check_independence(&system, &solved.independence.unwrap()));
/// # Ok::<(), linform_scalar::Stop>(())
/// ```
pub fn solve(system: &System, control: &dyn Control) -> Result<Solved, Stop> {
    decide(system, &recommended, control)
}

/// With at most one symbol images win or draw level, unless the polynomials are so sparse that almost all
/// coefficients between their terms are 0.
///
/// With several symbols the modular method takes a time proportional to the number of unknowns and of their
/// coefficients, also of those that are 0; elimination takes one that grows with the number of terms of the
/// determinant and the square of the number of entries, `terms·entries²/size`. Measured on 100 planted systems of
/// size 3 to 12 in two to four symbols, with two or six entries in a row and sparse solutions of degree 2 to 30, this
/// comparison names the quicker method except where the two are within a factor of 5.
fn recommended(square: &Square<'_>, control: &dyn Control) -> Result<Method, Stop> {
    let degrees = square.degrees();
    let symbols = (0..degrees.width())
        .filter(|&symbol| degrees.exponent(symbol) > 0)
        .count();
    if symbols <= 1 {
        let longest = square.entries.iter().map(|(_, _, p)| p.len()).max();
        let sparse = degrees.total_degree() > SPARSE * longest.unwrap_or(0) as u64;
        return Ok(if sparse {
            Method::FractionFree
        } else {
            Method::Modular
        });
    }
    let Some((solution, determinant)) = dense_sizes(square, control)? else {
        return Ok(Method::Modular);
    };
    let size = square.size as u64;
    let entries = square
        .entries
        .iter()
        .filter(|(_, column, _)| *column < square.size)
        .count() as u64;
    let images = solution.saturating_mul(size * size);
    Ok(if images > determinant.saturating_mul(entries * entries) {
        Method::FractionFree
    } else {
        Method::Modular
    })
}

/// The ratio of degree and terms from which on polynomials in one symbol count as sparse.
const SPARSE: u64 = 100;
