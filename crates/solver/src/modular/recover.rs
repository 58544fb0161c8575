//! The solution modulo one prime, interpolated one variable after another.

use super::elimination::eliminate;
use super::univariate::{Interpolation, Shape};
use crate::plan::{Images, Plan};
use crate::random::random_element;
use crate::square::Square;
use linform_scalar::{Control, PrimeField, SplitMix, Stop};

/// How a vector of numbers became a vector of coefficients when one variable was interpolated: its entries are
/// fractions over one denominator, which is monic.
///
/// The coefficients are listed as those of the denominator below its leading one, then those of the numerators
/// in order; each is a number at the next variable's point, and so an entry of the vector that is
/// interpolated in that variable.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Stage {
    /// The degree of the common denominator.
    pub(super) denominator: usize,
    /// The number of coefficients of every numerator.
    pub(super) lengths: Vec<usize>,
}

impl Stage {
    /// The number of coefficients of the longest numerator.
    fn length(&self) -> usize {
        self.lengths.iter().copied().max().unwrap_or(0)
    }
}

/// One column of the solution as a vector of coefficients: rational functions over one denominator whose
/// coefficient of the highest monomial (the last variable most significant) is 1. That makes it unique, so the
/// vectors modulo different primes are residues of the same rationals.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Image {
    /// One for each variable, variable 0 first.
    pub(super) stages: Vec<Stage>,
    pub(super) coefficients: Vec<u64>,
}

/// The sizes of a solution in one variable.
pub(super) struct Lengths {
    /// Coefficients of numerator and denominator of the solution, without the denominator's leading 1.
    pub(super) solution: usize,
    /// Coefficients of the determinant.
    pub(super) determinant: usize,
}

/// More failures than this at one place are no accident: the prime divides the determinant, or the stages
/// that are expected came from an unlucky point.
const MOST_FAILURES: usize = 3;

/// Computes images of the solution modulo one prime after another.
pub(super) struct Recovery<'a> {
    plan: &'a Plan<'a>,
    size: usize,
    rights: usize,
    /// Where the plan's polynomials stand in the matrix `[S | B]`.
    places: &'a [usize],
    matrix: Vec<u64>,
    random: SplitMix,
    /// For every number of variables the stages that the first image had, by right side. Later ones need no
    /// point to spare, and must have the same.
    expected: Vec<Option<Vec<Vec<Stage>>>>,
}

/// The state of one prime.
struct Prime<'a> {
    field: PrimeField,
    images: Images<'a>,
}

/// One right side during the interpolation in one variable.
struct Column {
    interpolation: Interpolation,
    /// The vector at every point.
    samples: Vec<Vec<u64>>,
    inner: Vec<Stage>,
    weights: Vec<u64>,
    /// The number of points at which a fraction is looked for next.
    next_trial: usize,
    done: Option<Image>,
}

impl<'a> Recovery<'a> {
    pub(super) fn new(square: &Square<'_>, plan: &'a Plan<'a>, places: &'a [usize]) -> Self {
        Recovery {
            plan,
            size: square.size,
            rights: square.rights,
            places,
            matrix: vec![0; square.size * (square.size + square.rights)],
            random: SplitMix::new(0x50_1BED),
            expected: vec![None; plan.symbols().len() + 1],
        }
    }

    /// Forgets what images are expected to look like.
    pub(super) fn forget(&mut self) {
        self.expected.fill(None);
    }

    /// The number of coefficients that the solution and the determinant have in one variable, numerator and
    /// denominator together, when the others are numbers; nothing if the prime is unlucky.
    pub(super) fn lengths_along(
        &mut self,
        field: PrimeField,
        variable: usize,
        control: &dyn Control,
    ) -> Result<Option<Lengths>, Stop> {
        let mut prime = Prime {
            field,
            images: self.plan.images(field),
        };
        let variables = self.plan.symbols().len();
        let others: Vec<u64> = (0..variables)
            .map(|_| random_element(&mut self.random, &field))
            .collect();
        for k in (variable + 1..variables).rev() {
            prime.images.substitute(k, others[k]);
        }
        let mut columns: Vec<Column> = (0..self.rights).map(|_| Column::new(&field)).collect();
        let mut determinant = Interpolation::new(&field);
        let mut determinant_is_known = false;
        let mut failures = 0;
        while !determinant_is_known || columns.iter().any(|column| column.done.is_none()) {
            control.proceed()?;
            let point = random_element(&mut self.random, &field);
            if determinant.points().contains(&point) {
                continue;
            }
            prime.images.substitute(variable, point);
            for k in (0..variable).rev() {
                prime.images.substitute(k, others[k]);
            }
            let Some(value) = self.eliminate_at_point(&prime) else {
                failures += 1;
                if failures > MOST_FAILURES {
                    return Ok(None);
                }
                continue;
            };
            determinant_is_known |= determinant.add(&field, point, value);
            for (column, image) in columns.iter_mut().zip(self.solution()) {
                column.add(&field, point, image, None, &mut self.random);
            }
        }
        let solution = columns
            .iter()
            .filter_map(|column| column.done.as_ref()?.stages.last())
            .map(|stage| stage.denominator + stage.length())
            .max();
        Ok(Some(Lengths {
            solution: solution.unwrap_or(0).max(1),
            determinant: determinant.length(),
        }))
    }

    /// The images of all columns of the solution; nothing if the prime is unlucky.
    pub(super) fn images_modulo(
        &mut self,
        field: PrimeField,
        control: &dyn Control,
    ) -> Result<Option<Vec<Image>>, Stop> {
        let mut prime = Prime {
            field,
            images: self.plan.images(field),
        };
        self.images(&mut prime, self.plan.symbols().len(), control)
    }

    /// The images in the first `variables` variables, at the point where the others stand.
    fn images(
        &mut self,
        prime: &mut Prime<'_>,
        variables: usize,
        control: &dyn Control,
    ) -> Result<Option<Vec<Image>>, Stop> {
        if variables == 0 {
            control.proceed()?;
            let regular = self.eliminate_at_point(prime).is_some();
            return Ok(regular.then(|| self.solution()));
        }
        let field = prime.field;
        let expected = self.expected[variables].clone();
        let mut columns: Vec<Column> = (0..self.rights).map(|_| Column::new(&field)).collect();
        let mut failures = 0;
        while columns.iter().any(|column| column.done.is_none()) {
            let point = random_element(&mut self.random, &field);
            if columns
                .iter()
                .any(|c| c.interpolation.points().contains(&point))
            {
                continue;
            }
            prime.images.substitute(variables - 1, point);
            let Some(inner) = self.images(prime, variables - 1, control)? else {
                failures += 1;
                if failures > MOST_FAILURES {
                    return Ok(None);
                }
                continue;
            };
            for (index, (column, image)) in columns.iter_mut().zip(inner).enumerate() {
                let stage = expected.as_ref().map(|all| &all[index][variables - 1]);
                column.add(&field, point, image, stage, &mut self.random);
                let size = column.samples.len() * column.weights.len();
                if size > control.term_limit() {
                    return Err(Stop::SizeLimit);
                }
            }
        }
        let images: Vec<Image> = columns.into_iter().filter_map(|c| c.done).collect();
        let stages = || images.iter().map(|image| image.stages.clone()).collect();
        match expected {
            None => self.expected[variables] = Some(stages()),
            Some(expected) if expected == stages() => {}
            Some(_) => return Ok(None),
        }
        Ok(Some(images))
    }

    /// Solves the system at the point where all variables stand; the determinant, if it is not 0.
    fn eliminate_at_point(&mut self, prime: &Prime<'_>) -> Option<u64> {
        self.matrix.fill(0);
        for (&place, &value) in self.places.iter().zip(prime.images.values()) {
            self.matrix[place] = value;
        }
        eliminate(&prime.field, &mut self.matrix, self.size, self.rights)
    }

    /// The columns of the solution that were found last.
    fn solution(&self) -> Vec<Image> {
        let width = self.size + self.rights;
        let column = |right: usize| Image {
            stages: Vec::new(),
            coefficients: (0..self.size)
                .map(|row| self.matrix[row * width + self.size + right])
                .collect(),
        };
        (0..self.rights).map(column).collect()
    }
}

impl Column {
    fn new(field: &PrimeField) -> Column {
        Column {
            interpolation: Interpolation::new(field),
            samples: Vec::new(),
            inner: Vec::new(),
            weights: Vec::new(),
            next_trial: 4,
            done: None,
        }
    }

    /// Adds the vector at a point, and finishes if the points suffice: those that the expected stage needs, or
    /// else so many that one of them is to spare.
    fn add(
        &mut self,
        field: &PrimeField,
        point: u64,
        image: Image,
        expected: Option<&Stage>,
        random: &mut SplitMix,
    ) {
        if self.done.is_some() {
            return;
        }
        if self.samples.is_empty() {
            self.inner = image.stages;
            self.weights = image
                .coefficients
                .iter()
                .map(|_| random_element(random, field))
                .collect();
        }
        let n = self.samples.len() + 1;
        let shape = match expected {
            // Polynomials of known length need no Euclidean algorithm.
            Some(stage) if stage.denominator == 0 => {
                self.interpolation.add_point(field, point);
                (n >= stage.length().max(1)).then(|| Shape {
                    denominator: vec![field.one()],
                    numerator_length: stage.length(),
                })
            }
            Some(stage) => {
                self.add_combination(field, point, &image.coefficients);
                let enough = n >= stage.length() + stage.denominator;
                let fraction = || self.interpolation.fraction_of_length(field, stage.length());
                enough.then(fraction).flatten()
            }
            None => {
                let predicted = self.add_combination(field, point, &image.coefficients);
                if predicted && n >= 2 || n >= self.next_trial {
                    self.next_trial = n + 1 + n / 8;
                    self.interpolation.fraction(field)
                } else {
                    None
                }
            }
        };
        self.samples.push(image.coefficients);
        if let Some(shape) = shape {
            self.done = self.finish(field, &shape);
        }
    }

    /// Adds one random combination, which stands for the whole vector: its denominator is the common one. Was
    /// it predicted?
    fn add_combination(&mut self, field: &PrimeField, point: u64, vector: &[u64]) -> bool {
        let combination = self
            .weights
            .iter()
            .zip(vector)
            .fold(0, |sum, (&w, &c)| field.add(sum, field.mul(w, c)));
        self.interpolation.add(field, point, combination)
    }

    /// The coefficients of the whole vector over the denominator of the combination; nothing if they do not
    /// fit it, because the combination was a coincidence.
    fn finish(&self, field: &PrimeField, shape: &Shape) -> Option<Image> {
        let mut numerators =
            self.interpolation
                .numerators(field, &shape.denominator, &self.samples);
        let excess = numerators.split_off(shape.numerator_length.min(numerators.len()));
        if excess.iter().flatten().any(|&coefficient| coefficient != 0) {
            return None;
        }
        let size = self.weights.len();
        let degree = shape.denominator.len() - 1;
        let mut coefficients = shape.denominator[..degree].to_vec();
        let mut lengths = Vec::with_capacity(size);
        for i in 0..size {
            let length = numerators
                .iter()
                .rposition(|numerator| numerator[i] != 0)
                .map_or(0, |degree| degree + 1);
            coefficients.extend(numerators[..length].iter().map(|numerator| numerator[i]));
            lengths.push(length);
        }
        let mut stages = self.inner.clone();
        stages.push(Stage {
            denominator: degree,
            lengths,
        });
        Some(Image {
            stages,
            coefficients,
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::random::prime_field;

    #[test]
    fn a_combination_that_hides_a_numerator_is_noticed() {
        // The entries x² and −x² with equal weights add up to 0.
        let field = prime_field(0);
        let mut column = Column::new(&field);
        column.weights = vec![field.one(); 2];
        for point in [2, 3, 4, 5].map(|value| field.element(value)) {
            let square = field.mul(point, point);
            let vector = vec![square, field.neg(square)];
            column.add_combination(&field, point, &vector);
            column.samples.push(vector);
        }
        let hidden = column.interpolation.fraction(&field).unwrap();
        assert_eq!(hidden.numerator_length, 0);
        assert_eq!(column.finish(&field, &hidden), None);
        let shape = Shape {
            numerator_length: 3,
            ..hidden
        };
        let image = column.finish(&field, &shape).unwrap();
        let minus = field.neg(field.one());
        assert_eq!(image.coefficients, [0, 0, field.one(), 0, 0, minus]);
    }
}
