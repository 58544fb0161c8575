//! Deciding a claim by comparing the coefficients of monomials.
//!
//! A claim `X = Σ pₙ bₙ` compares, for every monomial in the generators, polynomials in the base symbols (variable and
//! constants): an overdetermined linear system over ℚ[base]. If only `X′` is known, `X′ = Σ (rₙ bₙ + pₙ bₙ′)` is compared
//! and `rₙ = pₙ′` is demanded of the solution.

mod dependent;
mod equations;
mod fractions;
mod outcome;

pub(crate) use outcome::{Match, Solved, Witness};

use crate::polynomials::combine;
use crate::record::CoefficientKind;
use crate::strategy::Solver;
use dependent::match_dependent;
use equations::Equations;
use fractions::derive_fraction;
use linform_ring::{Polynomial, Ring};
use linform_scalar::{Control, Stop};
use linform_solver::{Fraction, Outcome};

/// How many leading symbols make up the monomials that are compared.
fn split_of(ring: &Ring, kind: CoefficientKind) -> usize {
    let symbols = ring.symbols();
    match kind {
        CoefficientKind::Constant => symbols.constants().start,
        CoefficientKind::Polynomial | CoefficientKind::Rational => symbols.generators(),
    }
}

fn admitted(coefficients: &[Fraction], kind: CoefficientKind) -> bool {
    kind == CoefficientKind::Rational || coefficients.iter().all(|c| c.is_polynomial().is_some())
}

/// Decides `target = Σ pₙ termₙ`.
///
/// # Errors
///
/// A limit.
pub(crate) fn match_value(
    ring: &Ring,
    target: &Polynomial,
    terms: &[&Polynomial],
    kind: CoefficientKind,
    solver: Solver,
    control: &dyn Control,
) -> Result<Solved, Stop> {
    let equations = Equations::new(terms, target, split_of(ring, kind));
    let solved = equations.solve(solver, control)?;
    let matched = match solved.outcome {
        Outcome::Unique(solution) => {
            let coefficients = equations.unscale(&solution, false);
            if admitted(&coefficients, kind) {
                Match::Holds(coefficients)
            } else {
                Match::OtherCoefficients {
                    coefficients,
                    independence: equations.witness(solved.independence),
                }
            }
        }
        Outcome::Family { particular, kernel } => Match::Family {
            particular: equations.unscale(&particular, false),
            kernel: kernel
                .iter()
                .map(|vector| equations.unscale(vector, true))
                .collect(),
            shift: None,
        },
        Outcome::Inconsistent(certificate) => equations.contradiction(&certificate),
    };
    Ok(equations.solved(solved.method, matched))
}

/// Decides `target = Σ pₙ termₙ` for a target of which only the derivative is known.
///
/// # Errors
///
/// A limit.
pub(crate) fn match_derivative(
    ring: &Ring,
    derivative: &Polynomial,
    terms: &[&Polynomial],
    kind: CoefficientKind,
    solver: Solver,
    control: &dyn Control,
) -> Result<Solved, Stop> {
    let derived = terms
        .iter()
        .map(|term| ring.derive(term, control))
        .collect::<Result<Vec<_>, _>>()?;
    if ring.symbols().variable().is_none() || kind == CoefficientKind::Constant {
        // The coefficients are constants: the derivative of the form has the same coefficients.
        let derived: Vec<&Polynomial> = derived.iter().collect();
        return match_value(ring, derivative, &derived, kind, solver, control);
    }
    let columns: Vec<&Polynomial> = terms
        .iter()
        .copied()
        .zip(&derived)
        .flat_map(|(b, b1)| [b1, b])
        .collect();
    let equations = Equations::new(&columns, derivative, split_of(ring, kind));
    let solved = equations.solve(solver, control)?;
    let matched = match solved.outcome {
        Outcome::Inconsistent(certificate) => equations.contradiction(&certificate),
        Outcome::Family { .. } => match_dependent(ring, derivative, terms, kind, solver, control)?,
        Outcome::Unique(solution) => {
            let unknowns = equations.unscale(&solution, false);
            let (coefficients, derivatives): (Vec<_>, Vec<_>) = unknowns
                .chunks_exact(2)
                .map(|pair| (pair[0].clone(), pair[1].clone()))
                .unzip();
            let independence = equations.witness(solved.independence);
            let mut is_primitive = true;
            for (p, r) in coefficients.iter().zip(&derivatives) {
                is_primitive &= derive_fraction(ring, p, control)? == *r;
            }
            match (is_primitive, admitted(&coefficients, kind)) {
                (true, true) => Match::Holds(coefficients),
                (true, false) => Match::OtherCoefficients {
                    coefficients,
                    independence,
                },
                (false, _) => Match::NotAPrimitive {
                    coefficients,
                    derivatives,
                    independence,
                },
            }
        }
    };
    Ok(equations.solved(solved.method, matched))
}

/// Proves a form by exact substitution: `Σ pₙ bₙ − X = 0` in the ring, or the same for the derivatives.
///
/// # Errors
///
/// A limit.
pub(crate) fn substitution_holds(
    ring: &Ring,
    target: &Polynomial,
    by_derivative: bool,
    coefficients: &[Fraction],
    terms: &[&Polynomial],
    control: &dyn Control,
) -> Result<bool, Stop> {
    let mut common = Polynomial::one();
    for value in coefficients {
        let shared = common.gcd(value.denominator(), control)?;
        let factor = value
            .denominator()
            .div_exact(&shared, control)?
            .unwrap_or_default();
        common = common.mul(&factor, control)?;
    }
    let mut numerators = Vec::with_capacity(coefficients.len());
    for value in coefficients {
        let cofactor = common
            .div_exact(value.denominator(), control)?
            .unwrap_or_default();
        numerators.push(value.numerator().mul(&cofactor, control)?);
    }
    // The form is `numerator / common`.
    let numerator = combine(numerators.iter(), terms, control)?;
    let difference = if by_derivative {
        let (n1, d1) = (
            ring.derive(&numerator, control)?,
            ring.derive(&common, control)?,
        );
        let left = &n1.mul(&common, control)? - &numerator.mul(&d1, control)?;
        &left - &target.mul(&common, control)?.mul(&common, control)?
    } else {
        &numerator - &target.mul(&common, control)?
    };
    Ok(difference.is_zero())
}
