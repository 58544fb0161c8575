//! From images modulo primes to the solution.

use super::recover::{Image, Recovery, Stage};
use crate::plan::Plan;
use crate::random::prime_field;
use crate::square::{Quotients, Square};
use linform_reconstruct::{Patience, Progress, Watch, rationals_over_common_denominator};
use linform_ring::{Monomial, Polynomial};
use linform_scalar::{ChineseRemainder, Control, Integer, Rational, Stop};

/// By how many binary digits numbers must fall short of the product of the primes. A wrong one passes once in
/// `2^32`, and then costs one exact check.
const PATIENCE: Patience = Patience {
    margin_bits: 32,
    confirmations: 0,
};

/// So many unlucky primes in a row mean that the stages that are expected are wrong.
const MOST_UNLUCKY: usize = 3;

/// Solves a square system by images modulo primes, the number of which may be limited; nothing if more are needed.
///
/// The result is multiplied out in every row of the square system before it is returned. No prime is used
/// twice, and only finitely many are unlucky, so the search ends.
pub(crate) fn solve_square(
    square: &Square<'_>,
    limit: u64,
    control: &dyn Control,
) -> Result<Option<Vec<Quotients>>, Stop> {
    let polynomials: Vec<&Polynomial> = square.entries.iter().map(|entry| entry.2).collect();
    let places = square.places();
    let plan = Plan::new(&polynomials);
    let mut recovery = Recovery::new(square, &plan, &places);
    let most_primes = most_primes(square);
    let mut next_prime = 0;
    // A round fails only if its first prime was unlucky in a way that did not show.
    loop {
        recovery.forget();
        let mut unlucky = 0;
        let mut lift: Option<Lift> = None;
        while unlucky <= MOST_UNLUCKY {
            if next_prime as u64 >= limit {
                return Ok(None);
            }
            let field = prime_field(next_prime);
            next_prime += 1;
            let Some(images) = recovery.images_modulo(field, control)? else {
                unlucky += 1;
                continue;
            };
            let lift = lift.get_or_insert_with(|| Lift::new(&images));
            if lift.remainders.modulus().bits() > 62 * most_primes {
                break;
            }
            let residues: Vec<u64> = images
                .iter()
                .flat_map(|image| &image.coefficients)
                .map(|&element| field.value(element))
                .collect();
            lift.remainders.add(&field, &residues);
            let Progress::Stable(combination) = lift.watch.add(&field, &residues) else {
                continue;
            };
            let candidate = lift.candidate(combination.denominator(), plan.symbols())?;
            if let Some(candidate) = candidate
                && solves(square, &candidate, control)?
            {
                return Ok(Some(candidate));
            }
        }
    }
}

/// The number of coefficients of the solution, numerator and denominator together, and of the determinant, if
/// all of them occurred up to the degree in each variable; nothing if the first prime is unlucky.
///
/// # Complexity
///
/// For each variable as many eliminations as there are coefficients in that variable.
pub(crate) fn dense_sizes(
    square: &Square<'_>,
    control: &dyn Control,
) -> Result<Option<(u64, u64)>, Stop> {
    let polynomials: Vec<&Polynomial> = square.entries.iter().map(|entry| entry.2).collect();
    let places = square.places();
    let plan = Plan::new(&polynomials);
    let mut recovery = Recovery::new(square, &plan, &places);
    let (mut solution, mut determinant) = (1u64, 1u64);
    for variable in 0..plan.symbols().len() {
        let lengths = recovery.lengths_along(prime_field(0), variable, control)?;
        let Some(lengths) = lengths else {
            return Ok(None);
        };
        solution = solution.saturating_mul(lengths.solution as u64);
        determinant = determinant.saturating_mul(lengths.determinant as u64);
    }
    Ok(Some((solution, determinant)))
}

fn solves(
    square: &Square<'_>,
    candidate: &[Quotients],
    control: &dyn Control,
) -> Result<bool, Stop> {
    for (right, quotients) in candidate.iter().enumerate() {
        if !square.is_solved_by(right, quotients, control)? {
            return Ok(false);
        }
    }
    Ok(true)
}

/// More primes than a solution can need. Its numerators and denominators divide minors, whose coefficients are
/// at most the product of the rows' sums of absolute values; a divisor's coefficients exceed them by a factor
/// of 2 for each degree at most (A. O. Gelfond); and both enter a rational.
fn most_primes(square: &Square<'_>) -> u64 {
    let mut rows = vec![(0, 0, 0); square.size];
    for &(i, _, entry) in &square.entries {
        let (bits, terms, degree) = &mut rows[i];
        *bits = entry.bits().max(*bits);
        *terms += entry.len() as u64;
        *degree = entry.degrees().total_degree().max(*degree);
    }
    let height: u64 = rows
        .iter()
        .map(|(bits, terms, degree)| bits + u64::from(terms.max(&1).ilog2()) + 1 + degree)
        .sum();
    8 + 2 * (1 + square.rights as u64) * height / 61
}

/// The residues of all columns, and what they have grown to.
struct Lift {
    stages: Vec<Vec<Stage>>,
    lengths: Vec<usize>,
    remainders: ChineseRemainder,
    watch: Watch,
}

impl Lift {
    fn new(images: &[Image]) -> Lift {
        let lengths: Vec<usize> = images
            .iter()
            .map(|image| image.coefficients.len())
            .collect();
        let total = lengths.iter().sum();
        Lift {
            stages: images.iter().map(|image| image.stages.clone()).collect(),
            lengths,
            remainders: ChineseRemainder::new(total),
            watch: Watch::new(total, 0x1F_7ED, PATIENCE),
        }
    }

    /// The columns that have these residues, if their numbers stand out.
    fn candidate(&self, hint: &Integer, symbols: &[usize]) -> Result<Option<Vec<Quotients>>, Stop> {
        let found = rationals_over_common_denominator(
            self.remainders.images(),
            self.remainders.modulus(),
            hint,
            PATIENCE.margin_bits / 2,
        );
        let Some(found) = found else {
            return Ok(None);
        };
        let mut columns = Vec::with_capacity(self.lengths.len());
        let mut rest = found.numerators();
        for (stages, &length) in self.stages.iter().zip(&self.lengths) {
            let (own, others) = rest.split_at(length);
            rest = others;
            columns.push(assemble(symbols, stages, found.denominator(), own)?);
        }
        Ok(Some(columns))
    }
}

type Terms = Vec<(Monomial, Integer)>;

/// Undoes the stages: the quotients of polynomials with these coefficients.
///
/// With the last variable's denominator as a common factor, the coefficients of the variable before it become
/// polynomials, and so on down to variable 0.
fn assemble(
    symbols: &[usize],
    stages: &[Stage],
    denominator: &Integer,
    numerators: &[Integer],
) -> Result<Quotients, Stop> {
    let number = |value: &Integer| match value.is_zero() {
        true => Terms::new(),
        false => vec![(Monomial::one(), value.clone())],
    };
    let mut unit = number(denominator);
    let mut values: Vec<Terms> = numerators.iter().map(number).collect();
    for (stage, &symbol) in stages.iter().zip(symbols).rev() {
        let mut rest = values.into_iter();
        let mut polynomial = |length: usize| -> Result<Terms, Stop> {
            let mut terms = Terms::new();
            for (degree, coefficient) in rest.by_ref().take(length).enumerate() {
                append(&mut terms, coefficient, symbol, degree)?;
            }
            Ok(terms)
        };
        let mut common = polynomial(stage.denominator)?;
        append(&mut common, unit, symbol, stage.denominator)?;
        values = stage
            .lengths
            .iter()
            .map(|&length| polynomial(length))
            .collect::<Result<_, _>>()?;
        unit = common;
    }
    let polynomial = |terms: Terms| {
        Polynomial::from_terms(terms.into_iter().map(|(m, c)| (m, Rational::from(c))))
    };
    let quotients = Quotients {
        denominator: polynomial(unit),
        numerators: values.into_iter().map(polynomial).collect(),
    };
    Ok(quotients.without_content())
}

/// Appends `coefficient · symbol^degree`.
fn append(terms: &mut Terms, coefficient: Terms, symbol: usize, degree: usize) -> Result<(), Stop> {
    let power = u16::try_from(degree)
        .ok()
        .and_then(|degree| Monomial::power(symbol, degree))
        .ok_or(Stop::SizeLimit)?;
    for (monomial, number) in coefficient {
        terms.push((monomial.checked_mul(&power).ok_or(Stop::SizeLimit)?, number));
    }
    Ok(())
}
