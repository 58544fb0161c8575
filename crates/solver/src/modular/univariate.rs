//! Polynomials and rational functions of one variable over a prime field, from their values.

use linform_scalar::PrimeField;

/// The polynomial through a growing list of points. Coefficients ascend by degree.
///
/// *Invariant*: `product` is `Π (x − point)`, and `polynomial`, of length at most the number of points, has the
/// given values there.
pub(super) struct Interpolation {
    points: Vec<u64>,
    product: Vec<u64>,
    polynomial: Vec<u64>,
}

/// A fraction of polynomials in one variable, of which the numerator only matters by its length.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Shape {
    /// The denominator, monic; `[1]` for a polynomial.
    pub(super) denominator: Vec<u64>,
    /// One more than the degree of the numerator; 0 for the fraction 0.
    pub(super) numerator_length: usize,
}

impl Interpolation {
    pub(super) fn new(field: &PrimeField) -> Interpolation {
        Interpolation {
            points: Vec::new(),
            product: vec![field.one()],
            polynomial: Vec::new(),
        }
    }

    /// The points, in the order in which they came.
    pub(super) fn points(&self) -> &[u64] {
        &self.points
    }

    /// One more than the degree of the polynomial.
    pub(super) fn length(&self) -> usize {
        self.polynomial.len()
    }

    /// Adds a point that is not in the list. Did the polynomial have that value before?
    pub(super) fn add(&mut self, field: &PrimeField, point: u64, value: u64) -> bool {
        let difference = field.sub(value, evaluate(field, &self.polynomial, point));
        if difference != 0 {
            let inverse = field
                .inverse(evaluate(field, &self.product, point))
                .expect("the point is new, so the product does not vanish there");
            // In Newton's form: the next coefficient times the product so far.
            let factor = field.mul(difference, inverse);
            self.polynomial.resize(self.product.len(), 0);
            for (coefficient, &other) in self.polynomial.iter_mut().zip(&self.product) {
                *coefficient = field.add(*coefficient, field.mul(factor, other));
            }
        }
        self.add_point(field, point);
        difference == 0
    }

    /// Adds a point that is not in the list without a value: the polynomial is not to be used any more.
    pub(super) fn add_point(&mut self, field: &PrimeField, point: u64) {
        self.product.push(0);
        for i in (0..self.product.len()).rev() {
            let shifted = if i == 0 { 0 } else { self.product[i - 1] };
            self.product[i] = field.sub_product(shifted, point, self.product[i]);
        }
        self.points.push(point);
    }

    /// The fraction with these values whose degrees are the smallest, if one value at least is not needed to
    /// determine it.
    ///
    /// In the Euclidean algorithm on the product and the polynomial, a quotient's degree is by how much the
    /// degrees of numerator and denominator together fall short of the number of points. Quotients of degree 2
    /// or more do not occur by chance, except about once in `p/n` (the analogue of M. Monagan, ISSAC 2004).
    pub(super) fn fraction(&self, field: &PrimeField) -> Option<Shape> {
        self.euclid(field, |quotient_degree, _| quotient_degree >= 2)
    }

    /// The fraction with these values whose numerator has this length at most (P. S. Wang's bound for
    /// polynomials).
    pub(super) fn fraction_of_length(&self, field: &PrimeField, length: usize) -> Option<Shape> {
        self.euclid(field, |_, numerator| numerator <= length)
    }

    /// Runs the extended Euclidean algorithm to the first pair that `accepts`, told the degree of the
    /// quotient that follows and the length of the numerator.
    fn euclid(&self, field: &PrimeField, accepts: impl Fn(usize, usize) -> bool) -> Option<Shape> {
        let mut remainders = (self.product.clone(), trimmed(self.polynomial.clone()));
        let mut cofactors = (Vec::new(), vec![field.one()]);
        loop {
            let quotient_degree = remainders.0.len() - remainders.1.len();
            if accepts(quotient_degree, remainders.1.len()) {
                let inverse = field.inverse(*cofactors.1.last()?)?;
                let monic = cofactors.1.iter().map(|&c| field.mul(c, inverse));
                return Some(Shape {
                    denominator: monic.collect(),
                    numerator_length: remainders.1.len(),
                });
            }
            if remainders.1.is_empty() {
                return None;
            }
            let inverse = field.inverse(*remainders.1.last()?)?;
            let mut rest = remainders.0;
            let mut next = cofactors.0;
            next.resize(next.len().max(quotient_degree + cofactors.1.len()), 0);
            for shift in (0..=quotient_degree).rev() {
                let factor = field.mul(rest[shift + remainders.1.len() - 1], inverse);
                subtract_shifted(field, &mut rest, factor, shift, &remainders.1);
                subtract_shifted(field, &mut next, factor, shift, &cofactors.1);
            }
            remainders = (remainders.1, trimmed(rest));
            cofactors = (cofactors.1, trimmed(next));
        }
    }

    /// The coefficients of the numerators of a vector of fractions with this denominator, from the vectors at
    /// the points: entry `j` of the result holds the coefficients of `x^j`.
    pub(super) fn numerators(
        &self,
        field: &PrimeField,
        denominator: &[u64],
        samples: &[Vec<u64>],
    ) -> Vec<Vec<u64>> {
        let size = self.points.len();
        let width = samples.first().map_or(0, Vec::len);
        let mut numerators = vec![vec![0; width]; size];
        let mut quotient = vec![0; size];
        let mut scaled = vec![0; width];
        // Lagrange's basis polynomials are the product without one factor, divided by its value at that point,
        // which is the derivative of the product.
        let derivative: Vec<u64> = (1..=size)
            .map(|j| field.mul(field.element(j as u64), self.product[j]))
            .collect();
        let mut factors: Vec<u64> = self
            .points
            .iter()
            .map(|&point| evaluate(field, &derivative, point))
            .collect();
        let distinct = field.invert_all(&mut factors);
        debug_assert!(distinct, "the points are distinct");
        for ((&point, sample), &factor) in self.points.iter().zip(samples).zip(&factors) {
            let mut carry = 0;
            for j in (0..size).rev() {
                carry = field.add(self.product[j + 1], field.mul(carry, point));
                quotient[j] = carry;
            }
            let factor = field.mul(factor, evaluate(field, denominator, point));
            for (value, &own) in scaled.iter_mut().zip(sample) {
                *value = field.mul(factor, own);
            }
            for (coefficients, &factor) in numerators.iter_mut().zip(&quotient) {
                for (sum, &value) in coefficients.iter_mut().zip(&scaled) {
                    *sum = field.add(*sum, field.mul(factor, value));
                }
            }
        }
        numerators
    }
}

fn trimmed(mut polynomial: Vec<u64>) -> Vec<u64> {
    while polynomial.last() == Some(&0) {
        polynomial.pop();
    }
    polynomial
}

fn evaluate(field: &PrimeField, polynomial: &[u64], point: u64) -> u64 {
    polynomial.iter().rev().fold(0, |value, &coefficient| {
        field.add(field.mul(value, point), coefficient)
    })
}

/// Subtracts `factor · x^shift · other`.
fn subtract_shifted(
    field: &PrimeField,
    target: &mut [u64],
    factor: u64,
    shift: usize,
    other: &[u64],
) {
    for (value, &other) in target[shift..].iter_mut().zip(other) {
        *value = field.sub_product(*value, factor, other);
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::random::prime_field;
    use linform_scalar::SplitMix;

    fn random_polynomial(field: &PrimeField, random: &mut SplitMix, length: usize) -> Vec<u64> {
        (0..length)
            .map(|_| random.next_word() % field.prime())
            .collect()
    }

    #[test]
    fn planted_fractions_come_back_with_one_point_to_spare_and_not_before() {
        let field = prime_field(0);
        let mut random = SplitMix::new(11);
        for (length, degree) in [(0, 0), (1, 0), (4, 0), (1, 1), (3, 2), (2, 5), (7, 7)] {
            let numerator = random_polynomial(&field, &mut random, length);
            let mut denominator = random_polynomial(&field, &mut random, degree);
            denominator.push(field.one());
            let mut interpolation = Interpolation::new(&field);
            let mut values = Vec::new();
            let needed = (length + degree).max(1);
            for n in 1..=needed + 1 {
                let point = random.next_word() % field.prime();
                let inverse = field
                    .inverse(evaluate(&field, &denominator, point))
                    .unwrap();
                values.push(field.mul(evaluate(&field, &numerator, point), inverse));
                let predicted = interpolation.add(&field, point, values[n - 1]);
                let polynomial_is_known = degree == 0 && n > length;
                assert_eq!(predicted, polynomial_is_known);
                if n < length + degree {
                    assert_eq!(interpolation.fraction(&field), None);
                }
                if n == needed {
                    let shape = interpolation.fraction_of_length(&field, length).unwrap();
                    assert_eq!(shape.denominator, denominator);
                }
            }
            let shape = interpolation.fraction(&field).unwrap();
            assert_eq!(shape.denominator, denominator);
            assert_eq!(shape.numerator_length, length);
            let samples: Vec<Vec<u64>> = values.iter().map(|&value| vec![value]).collect();
            let mut coefficients: Vec<u64> = interpolation
                .numerators(&field, &denominator, &samples)
                .concat();
            assert!(coefficients.split_off(length).iter().all(|&c| c == 0));
            assert_eq!(coefficients, numerator);
        }
    }
}
