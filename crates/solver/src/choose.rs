//! The choice of method.

use crate::cost::Cost;
use crate::decide::{Strategy, decide};
use crate::modular::dense_sizes;
use crate::square::Square;
use crate::{Solved, System};
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
///
/// All this is for numbers of a few words; see [`within_reason`] for long ones.
fn recommended(square: &Square<'_>, control: &dyn Control) -> Result<Strategy, Stop> {
    let degrees = square.degrees();
    let symbols = (0..degrees.width())
        .filter(|&symbol| degrees.exponent(symbol) > 0)
        .count();
    let degree = degrees.total_degree();
    if symbols <= 1 {
        let longest = square.entries.iter().map(|(_, _, p)| p.len()).max();
        if degree > SPARSE * longest.unwrap_or(0) as u64 {
            return Ok(Strategy::FractionFree);
        }
        let minors = degree.saturating_mul(square.size as u64);
        return Ok(within_reason(&Cost::new(square, (degree + 1, minors + 1))));
    }
    let Some((solution, determinant)) = dense_sizes(square, control)? else {
        return Ok(Strategy::Modular);
    };
    let size = square.size as u64;
    let entries = square
        .entries
        .iter()
        .filter(|(_, column, _)| *column < square.size)
        .count() as u64;
    let images = solution.saturating_mul(size * size);
    if images > determinant.saturating_mul(entries * entries) {
        return Ok(Strategy::FractionFree);
    }
    Ok(within_reason(&Cost::new(square, (solution, determinant))))
}

/// The modular method as long as its primes cost less than elimination.
///
/// How many are needed shows only at the end. The right sides give a lower bound, and where that is low, as for a
/// quotient of determinants, the primes themselves tell: when they have cost several times what elimination
/// is expected to cost, it takes their place.
fn within_reason(cost: &Cost) -> Strategy {
    let most = cost
        .fraction_free()
        .saturating_mul(MARGIN)
        .saturating_add(TRIFLE);
    let primes = cost.primes_within(most);
    if primes <= cost.least_primes() {
        Strategy::FractionFree
    } else {
        Strategy::ModularWithin(primes)
    }
}

/// The ratio of degree and terms from which on polynomials in one symbol count as sparse.
const SPARSE: u64 = 100;
/// How many times the estimate for elimination the primes may cost.
const MARGIN: u64 = 2;
/// Nanoseconds below which no choice matters.
const TRIFLE: u64 = 5_000_000;
