//! Sums, differences and multiples by numbers.

use crate::Polynomial;
use crate::polynomial::Term;
use linform_scalar::{Integer, Rational};
use std::cmp::Ordering;
use std::ops::{Add, Neg, Sub};

impl Polynomial {
    /// The product with a number.
    pub fn scale(&self, factor: &Rational) -> Polynomial {
        if factor.is_zero() {
            return Polynomial::zero();
        }
        if factor.is_one() {
            return self.clone();
        }
        // The numerator of the factor cancels against our denominator alone, its denominator against our
        // content alone: both pairs were coprime before.
        let common = factor.numerator().gcd(self.denominator());
        let multiplier = factor.numerator().div_exact(&common);
        let scaled = Polynomial::normalised(self.terms().to_vec(), factor.denominator().clone());
        let (mut terms, rest) = scaled.into_parts();
        if !multiplier.is_one() {
            for (_, coefficient) in &mut terms {
                *coefficient = &*coefficient * &multiplier;
            }
        }
        Polynomial::normalised_parts(terms, rest * self.denominator().div_exact(&common))
    }
}

/// `x·a + y·b` of sorted terms.
pub(crate) fn merge(a: &[Term], x: &Integer, b: &[Term], y: &Integer) -> Vec<Term> {
    let times = |term: &Term, factor: &Integer| {
        let coefficient = if factor.is_one() {
            term.1.clone()
        } else {
            &term.1 * factor
        };
        (term.0.clone(), coefficient)
    };
    let mut result = Vec::with_capacity(a.len() + b.len());
    let (mut i, mut j) = (0, 0);
    while i < a.len() && j < b.len() {
        match a[i].0.cmp(&b[j].0) {
            Ordering::Greater => {
                result.push(times(&a[i], x));
                i += 1;
            }
            Ordering::Less => {
                result.push(times(&b[j], y));
                j += 1;
            }
            Ordering::Equal => {
                let (monomial, mut sum) = times(&a[i], x);
                if y.is_one() {
                    sum += &b[j].1;
                } else {
                    sum.add_product(&b[j].1, y);
                }
                if !sum.is_zero() {
                    result.push((monomial, sum));
                }
                i += 1;
                j += 1;
            }
        }
    }
    result.extend(a[i..].iter().map(|term| times(term, x)));
    result.extend(b[j..].iter().map(|term| times(term, y)));
    result
}

fn combine(a: &Polynomial, b: &Polynomial, sign: Integer) -> Polynomial {
    let common = a.denominator().gcd(b.denominator());
    let x = b.denominator().div_exact(&common);
    let y = a.denominator().div_exact(&common);
    let denominator = a.denominator() * &x;
    let terms = merge(a.terms(), &x, b.terms(), &(y * sign));
    Polynomial::normalised(terms, denominator)
}

impl Add<&Polynomial> for &Polynomial {
    type Output = Polynomial;
    fn add(self, other: &Polynomial) -> Polynomial {
        combine(self, other, Integer::ONE)
    }
}

impl Sub<&Polynomial> for &Polynomial {
    type Output = Polynomial;
    fn sub(self, other: &Polynomial) -> Polynomial {
        combine(self, other, Integer::from(-1))
    }
}

impl Neg for &Polynomial {
    type Output = Polynomial;
    fn neg(self) -> Polynomial {
        let terms = self.terms().iter().map(|(m, c)| (m.clone(), -c)).collect();
        Polynomial::normalised_parts(terms, self.denominator().clone())
    }
}
