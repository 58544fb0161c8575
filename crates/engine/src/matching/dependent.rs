//! Targets known by their derivatives, where the terms and their derivatives are dependent.

use super::equations::Equations;
use super::fractions::{collect_powers, difference, divided};
use super::{Match, admitted, match_derivative, split_of};
use crate::polynomials::combine;
use crate::record::CoefficientKind;
use crate::strategy::Solver;
use linform_ring::{Polynomial, Ring};
use linform_scalar::{Control, Rational, Stop};
use linform_solver::{Fraction, Outcome};

/// The derivative matches for many pairs `(p, r)`. Among them those with `r = p′` are sought with polynomial coefficients of
/// growing degree in the variable, which makes the system one over the constants.
pub(super) fn match_dependent(
    ring: &Ring,
    derivative: &Polynomial,
    terms: &[&Polynomial],
    kind: CoefficientKind,
    solver: Solver,
    control: &dyn Control,
) -> Result<Match, Stop> {
    let Some(variable) = ring.symbols().variable() else {
        return Ok(Match::DegreeLimit { degree: 0 });
    };
    let symbol = Polynomial::symbol(ring.symbols(), variable);
    let bound = usize::from(derivative.degree_in(variable).unwrap_or(0)) + 8;
    for degree in 0..=bound {
        let mut scaled = Vec::with_capacity(terms.len() * (degree + 1));
        for term in terms {
            let mut multiple = (*term).clone();
            for _ in 0..=degree {
                scaled.push(multiple.clone());
                multiple = multiple.mul(&symbol, control)?;
            }
        }
        let scaled: Vec<&Polynomial> = scaled.iter().collect();
        let solved = match_derivative(
            ring,
            derivative,
            &scaled,
            CoefficientKind::Constant,
            solver,
            control,
        )?;
        let collect = |values: &[Fraction]| -> Result<Vec<Fraction>, Stop> {
            values
                .chunks_exact(degree + 1)
                .map(|part| collect_powers(part, &symbol, control))
                .collect()
        };
        match solved.matched {
            Match::Holds(values)
            | Match::OtherCoefficients {
                coefficients: values,
                ..
            } => {
                if has_integral(ring, terms, degree + 2, solver, control)? {
                    return Ok(Match::FirstIntegral);
                }
                return unique_or_family(ring, collect(&values)?, terms, kind, solver, control);
            }
            Match::Family { particular, .. } => {
                let particular = collect(&particular)?;
                if has_integral(ring, terms, degree + 2, solver, control)? {
                    return Ok(Match::FirstIntegral);
                }
                return unique_or_family(ring, particular, terms, kind, solver, control);
            }
            _ => {}
        }
    }
    Ok(Match::DegreeLimit { degree: bound })
}

/// Does a form with coefficients up to this degree have derivative 0 without being a constant of the base? Then forms with
/// one derivative differ by more than the constant of integration.
fn has_integral(
    ring: &Ring,
    terms: &[&Polynomial],
    degree: usize,
    solver: Solver,
    control: &dyn Control,
) -> Result<bool, Stop> {
    let Some(variable) = ring.symbols().variable() else {
        return Ok(false);
    };
    let symbol = Polynomial::symbol(ring.symbols(), variable);
    let mut scaled = Vec::with_capacity(terms.len() * (degree + 1));
    for term in terms {
        let mut multiple = (*term).clone();
        for _ in 0..=degree {
            scaled.push(multiple.clone());
            multiple = multiple.mul(&symbol, control)?;
        }
    }
    let derived = scaled
        .iter()
        .map(|term| ring.derive(term, control))
        .collect::<Result<Vec<_>, _>>()?;
    let columns: Vec<&Polynomial> = derived.iter().collect();
    let split = split_of(ring, CoefficientKind::Constant);
    let equations = Equations::new(&columns, &Polynomial::zero(), split);
    let Outcome::Family { kernel, .. } = equations.solve(solver, control)?.outcome else {
        return Ok(false);
    };
    let scaled: Vec<&Polynomial> = scaled.iter().collect();
    for vector in &kernel {
        // The solver's kernel vectors have polynomial entries.
        let vector = equations.unscale(vector, true);
        let value = combine(vector.iter().map(Fraction::numerator), &scaled, control)?;
        if (0..split).any(|symbol| value.involves(symbol)) {
            return Ok(true);
        }
    }
    Ok(false)
}

/// A primitive was found. Two forms with the same derivative differ by a constant, so the other solutions are given by the
/// dependences of the terms and the constant 1 over the rational functions; without any, the form is the only one.
fn unique_or_family(
    ring: &Ring,
    coefficients: Vec<Fraction>,
    terms: &[&Polynomial],
    kind: CoefficientKind,
    solver: Solver,
    control: &dyn Control,
) -> Result<Match, Stop> {
    let one = Polynomial::one();
    let columns: Vec<&Polynomial> = std::iter::once(&one).chain(terms.iter().copied()).collect();
    let equations = Equations::new(&columns, &Polynomial::zero(), split_of(ring, kind));
    let dependence = equations.solve(solver, control)?;
    let Outcome::Family { kernel, .. } = dependence.outcome else {
        return Ok(if admitted(&coefficients, kind) {
            Match::Holds(coefficients)
        } else {
            Match::OtherCoefficients {
                coefficients,
                independence: equations.witness(dependence.independence),
            }
        });
    };
    let kernel: Vec<Vec<Fraction>> = kernel
        .iter()
        .map(|vector| equations.unscale(vector, true))
        .collect();
    // Among the dependences that use the 1, one is kept as the shift and subtracted from the others.
    let mut shift: Option<Vec<Fraction>> = None;
    let mut vanishing = Vec::with_capacity(kernel.len());
    for vector in kernel {
        let Some((first, rest)) = vector.split_first() else {
            continue;
        };
        if first.is_zero() {
            vanishing.push(rest.to_vec());
            continue;
        }
        // first·1 + Σ rest·b = 0, so −rest/first is a form equal to 1.
        let form = rest
            .iter()
            .map(|value| divided(&value.scale(&-Rational::ONE), first, control))
            .collect::<Result<Vec<_>, _>>()?;
        match &shift {
            None => shift = Some(form),
            Some(known) => {
                let pairs = form.iter().zip(known);
                vanishing.push(
                    pairs
                        .map(|(a, b)| difference(a, b, control))
                        .collect::<Result<_, _>>()?,
                );
            }
        }
    }
    Ok(Match::Family {
        particular: coefficients,
        kernel: vanishing,
        shift,
    })
}
