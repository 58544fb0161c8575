//! From the square system to the outcome.

use crate::profile::{Profile, profile};
use crate::residual::Vector;
use crate::square::{Quotients, Square};
use crate::{Fraction, Independence, Method, Outcome, Solved, System};
use crate::{bareiss, certificate, modular, verify};
use linform_ring::{Monomial, Polynomial};
use linform_scalar::{Control, Stop};

/// Decides the system by fraction-free elimination of its independent rows and columns.
///
/// # Errors
///
/// The reason for which the control or the size of a polynomial ended the work.
///
/// # Complexity
///
/// With rank `r`, `r³/3` updates of minors, whose degrees and lengths grow to `r` times those of the entries.
///
/// # References
///
/// E. H. Bareiss, Math. Comp. 22 (1968) 565–578.
pub fn solve_fraction_free(system: &System, control: &dyn Control) -> Result<Solved, Stop> {
    decide(system, &|_, _| Ok(Strategy::FractionFree), control)
}

/// Decides the system by images modulo primes at points, for its independent rows and columns.
///
/// # Errors
///
/// The reason for which the control or the size of a polynomial ended the work.
///
/// # Complexity
///
/// Grows with the solution, not with the determinants: for every prime (the solution's bits over 62) and every
/// point (for each variable, the degrees of numerator and denominator together) one elimination of `r³/3` word
/// operations.
pub fn solve_modular(system: &System, control: &dyn Control) -> Result<Solved, Stop> {
    decide(system, &|_, _| Ok(Strategy::Modular), control)
}

/// What to do with a square system.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Strategy {
    FractionFree,
    Modular,
    /// Images modulo at most so many primes, and elimination if they do not suffice.
    ModularWithin(u64),
}

/// Names the strategy for a square system.
pub(crate) type Choice = dyn Fn(&Square<'_>, &dyn Control) -> Result<Strategy, Stop>;

/// Decides the system; `choose` names the strategy for a square system.
pub(crate) fn decide(
    system: &System,
    choose: &Choice,
    control: &dyn Control,
) -> Result<Solved, Stop> {
    let mut attempt = 0;
    // An attempt fails only if the rank dropped at a random point, which each has a chance of about the
    // rank's degree over 2^62 to do.
    loop {
        control.proceed()?;
        let profile = profile(system, attempt, control)?;
        let solved = match profile.contradiction {
            Some(_) => refute(system, &profile, choose, control)?,
            None => solve_profile(system, &profile, choose, control)?,
        };
        if let Some(solved) = solved {
            return Ok(solved);
        }
        attempt += 1;
    }
}

/// The solution, and the method that found it.
fn solve_square(
    square: &Square<'_>,
    strategy: Strategy,
    control: &dyn Control,
) -> Result<(Vec<Quotients>, Method), Stop> {
    let most_primes = match strategy {
        Strategy::FractionFree => 0,
        Strategy::Modular => u64::MAX,
        Strategy::ModularWithin(primes) => primes,
    };
    if most_primes > 0
        && let Some(solution) = modular::solve_square(square, most_primes, control)?
    {
        return Ok((solution, Method::Modular));
    }
    Ok((
        bareiss::solve_square(square, control)?,
        Method::FractionFree,
    ))
}

/// The certificate of the profile's contradiction, if it holds in all columns.
fn refute(
    system: &System,
    profile: &Profile,
    choose: &Choice,
    control: &dyn Control,
) -> Result<Option<Solved>, Stop> {
    let Some(contradiction) = &profile.contradiction else {
        return Ok(None);
    };
    let square = Square::of_contradiction(system, contradiction);
    let strategy = choose(&square, control)?;
    let (mut solutions, method) = solve_square(&square, strategy, control)?;
    let Some(weights) = solutions.pop() else {
        return Ok(None);
    };
    let found = certificate::of_weights(system, contradiction, weights, control)?;
    if verify::verify_certificate(system, &found, control)?.is_err() {
        return Ok(None);
    }
    Ok(Some(Solved {
        outcome: Outcome::Inconsistent(found),
        method,
        independence: None,
    }))
}

/// The solutions of the square system, if they satisfy all other rows.
fn solve_profile(
    system: &System,
    profile: &Profile,
    choose: &Choice,
    control: &dyn Control,
) -> Result<Option<Solved>, Stop> {
    let free: Vec<usize> = (0..system.columns())
        .filter(|column| profile.columns.binary_search(column).is_err())
        .collect();
    let square = Square::of_profile(system, profile, &free);
    let strategy = choose(&square, control)?;
    let (solutions, method) = solve_square(&square, strategy, control)?;
    let mut solutions = solutions.into_iter();
    let Some(particular) = solutions.next() else {
        return Ok(None);
    };
    let outside = Outside {
        system,
        profile,
        degrees: system.degrees(),
    };
    let particular = spread(system, profile, particular);
    if !outside.satisfied_by(&particular, true, control)? {
        return Ok(None);
    }
    let mut kernel = Vec::with_capacity(free.len());
    for (&column, solution) in free.iter().zip(solutions) {
        let mut vector = spread(system, profile, solution);
        // S·x = a says that column a depends on those of S: x − e is in the kernel.
        for numerator in &mut vector.numerators {
            *numerator = -&*numerator;
        }
        vector.numerators[column] = vector.denominator.clone();
        let vector = Quotients {
            denominator: Polynomial::one(),
            ..vector
        };
        if !outside.satisfied_by(&vector, false, control)? {
            return Ok(None);
        }
        kernel.push(vector.numerators.into_iter().map(Fraction::from).collect());
    }
    let particular = particular.fractions(control)?;
    let outcome = if kernel.is_empty() {
        Outcome::Unique(particular)
    } else {
        Outcome::Family { particular, kernel }
    };
    Ok(Some(Solved {
        outcome,
        method,
        independence: Some(Independence::of_profile(profile)),
    }))
}

/// Puts the unknowns of the square system into their columns, and 0 into the others.
fn spread(system: &System, profile: &Profile, solution: Quotients) -> Quotients {
    let solution = solution.without_content();
    let mut numerators = vec![Polynomial::zero(); system.columns()];
    for (&column, numerator) in profile.columns.iter().zip(solution.numerators) {
        numerators[column] = numerator;
    }
    Quotients {
        denominator: solution.denominator,
        numerators,
    }
}

/// The rows that did not lead to the solution.
struct Outside<'a> {
    system: &'a System,
    profile: &'a Profile,
    degrees: Monomial,
}

impl Outside<'_> {
    /// Do the quotients satisfy these rows, with the system's right sides or with 0?
    fn satisfied_by(
        &self,
        candidate: &Quotients,
        with_right: bool,
        control: &dyn Control,
    ) -> Result<bool, Stop> {
        let mut polynomials = candidate.numerators.clone();
        polynomials.push(-&candidate.denominator);
        let mut vector = Vector::new(&polynomials, &self.degrees);
        for (index, row) in self.system.rows().iter().enumerate() {
            if self.profile.rows.binary_search(&index).is_ok() {
                continue;
            }
            let entries = row.entries.iter().map(|(column, entry)| (*column, entry));
            let right = with_right.then_some((self.system.columns(), &row.right));
            if !vector.is_orthogonal_to(entries.chain(right), control)? {
                return Ok(false);
            }
        }
        Ok(true)
    }
}
