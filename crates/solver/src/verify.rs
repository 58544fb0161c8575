//! Verification of outcomes by plain multiplication.

use crate::residual::{Vector, sum_of_products};
use crate::{Certificate, Fraction, Outcome, System};
use linform_ring::Polynomial;
use linform_scalar::{Control, Integer, Rational, Stop};
use std::fmt;

/// Where an outcome contradicts its system.
#[derive(Clone, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum Mismatch {
    /// A solution, particular solution or kernel vector has the wrong length, or a certificate names a row
    /// that does not exist, or names one twice.
    Shape,
    /// The solution does not satisfy this equation.
    Row(usize),
    /// A kernel vector does not satisfy this equation with right side 0.
    Kernel {
        /// Which kernel vector.
        vector: usize,
        /// Which equation.
        row: usize,
    },
    /// The certificate's combination of the rows is not 0 in this column.
    Column(usize),
    /// The certificate's combination of the right sides is 0, or not the value it states.
    Value,
}

impl fmt::Display for Mismatch {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Mismatch::Shape => f.write_str("the outcome does not fit the shape of the system"),
            Mismatch::Row(row) => write!(f, "the solution fails in equation {row}"),
            Mismatch::Kernel { vector, row } => {
                write!(f, "kernel vector {vector} fails in equation {row}")
            }
            Mismatch::Column(column) => {
                write!(
                    f,
                    "the certificate's combination is not 0 in column {column}"
                )
            }
            Mismatch::Value => {
                f.write_str("the certificate's right sides do not add up to its value")
            }
        }
    }
}

impl std::error::Error for Mismatch {}

/// Does the outcome hold? Every row is multiplied out, whichever rows led to the outcome.
///
/// Uniqueness of a solution and completeness of a kernel are the business of
/// [`crate::check_independence`]; everything else that an outcome says is checked here.
///
/// # Errors
///
/// Outside: the reason for which the control or the size of a polynomial ended the work. Inside: the first
/// place where the outcome contradicts the system.
pub fn verify(
    system: &System,
    outcome: &Outcome,
    control: &dyn Control,
) -> Result<Result<(), Mismatch>, Stop> {
    match outcome {
        Outcome::Unique(solution) => verify_solution(system, solution, control),
        Outcome::Family { particular, kernel } => {
            if let Err(mismatch) = verify_solution(system, particular, control)? {
                return Ok(Err(mismatch));
            }
            for (vector, solution) in kernel.iter().enumerate() {
                match failing_row(system, solution, false, control)? {
                    None => {}
                    Some(Mismatch::Row(row)) => return Ok(Err(Mismatch::Kernel { vector, row })),
                    Some(mismatch) => return Ok(Err(mismatch)),
                }
            }
            Ok(Ok(()))
        }
        Outcome::Inconsistent(certificate) => verify_certificate(system, certificate, control),
    }
}

fn verify_solution(
    system: &System,
    solution: &[Fraction],
    control: &dyn Control,
) -> Result<Result<(), Mismatch>, Stop> {
    Ok(match failing_row(system, solution, true, control)? {
        None => Ok(()),
        Some(mismatch) => Err(mismatch),
    })
}

/// The first equation that the fractions do not satisfy, with the system's right sides or with 0.
fn failing_row(
    system: &System,
    solution: &[Fraction],
    with_right: bool,
    control: &dyn Control,
) -> Result<Option<Mismatch>, Stop> {
    if solution.len() != system.columns() {
        return Ok(Some(Mismatch::Shape));
    }
    let (denominator, mut polynomials) = over_common_denominator(solution, control)?;
    polynomials.push(-&denominator);
    let mut vector = Vector::new(&polynomials, &system.degrees());
    for (index, row) in system.rows().iter().enumerate() {
        let entries = row.entries.iter().map(|(column, entry)| (*column, entry));
        let right = with_right.then_some((system.columns(), &row.right));
        if !vector.is_orthogonal_to(entries.chain(right), control)? {
            return Ok(Some(Mismatch::Row(index)));
        }
    }
    Ok(None)
}

/// An integral multiple of all denominators, and the numerators over it, integral as well.
fn over_common_denominator(
    solution: &[Fraction],
    control: &dyn Control,
) -> Result<(Polynomial, Vec<Polynomial>), Stop> {
    let mut common = Polynomial::one();
    for fraction in solution {
        let own = fraction.denominator();
        if common.div_exact(own, control)?.is_none() {
            let shared = common.gcd(own, control)?;
            let rest = own.div_exact(&shared, control)?;
            common = common.mul(rest.as_ref().unwrap_or(own), control)?;
        }
    }
    let mut numerators = Vec::with_capacity(solution.len());
    for fraction in solution {
        let factor = common.div_exact(fraction.denominator(), control)?;
        numerators.push(match factor {
            Some(factor) => fraction.numerator().mul(&factor, control)?,
            None => unreachable!("every denominator divides the common one"),
        });
    }
    let numbers = numerators
        .iter()
        .fold(Integer::ONE, |lcm, p| lcm.lcm(p.denominator()));
    let factor = Rational::from(numbers);
    let numerators = numerators.iter().map(|p| p.scale(&factor)).collect();
    Ok((common.scale(&factor), numerators))
}

pub(crate) fn verify_certificate(
    system: &System,
    certificate: &Certificate,
    control: &dyn Control,
) -> Result<Result<(), Mismatch>, Stop> {
    let multipliers = &certificate.multipliers;
    let ascending = multipliers.windows(2).all(|pair| pair[0].0 < pair[1].0);
    if !ascending
        || multipliers
            .iter()
            .any(|(row, _)| *row >= system.rows().len())
    {
        return Ok(Err(Mismatch::Shape));
    }
    for column in 0..system.columns() {
        let products: Vec<(&Polynomial, &Polynomial)> = multipliers
            .iter()
            .filter_map(|(row, multiplier)| Some((system.rows()[*row].entry(column)?, multiplier)))
            .collect();
        if !sum_of_products(&products, control)?.is_zero() {
            return Ok(Err(Mismatch::Column(column)));
        }
    }
    let rights: Vec<(&Polynomial, &Polynomial)> = multipliers
        .iter()
        .map(|(row, multiplier)| (&system.rows()[*row].right, multiplier))
        .collect();
    let value = sum_of_products(&rights, control)?;
    if value.is_zero() || value != certificate.value {
        return Ok(Err(Mismatch::Value));
    }
    Ok(Ok(()))
}
