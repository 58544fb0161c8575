//! Coefficients in the published number types: what a result file holds, and what the independent check computes with.
//!
//! This module shares no code with crate `ring`: polynomials are maps from exponents to `num` rationals, multiplied
//! term by term.

use linform_scalar::published::{BigRational, One, Signed, Zero};
use std::collections::BTreeMap;
use std::fmt;

/// A polynomial in named symbols with published coefficients.
///
/// *Invariant*: no coefficient is 0. Exponents are counted in the order of a list of names that travels separately.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct PublishedPolynomial {
    terms: BTreeMap<Vec<u32>, BigRational>,
}

impl PublishedPolynomial {
    /// A constant, in any number of symbols.
    pub fn constant(symbols: usize, value: BigRational) -> Self {
        let mut result = Self::default();
        result.add_term(vec![0; symbols], value);
        result
    }

    /// A single symbol.
    pub fn symbol(symbols: usize, index: usize) -> Self {
        let mut exponents = vec![0; symbols];
        exponents[index] = 1;
        let mut result = Self::default();
        result.add_term(exponents, BigRational::one());
        result
    }

    /// Adds one term.
    pub fn add_term(&mut self, exponents: Vec<u32>, value: BigRational) {
        if value.is_zero() {
            return;
        }
        match self.terms.entry(exponents) {
            std::collections::btree_map::Entry::Vacant(place) => {
                place.insert(value);
            }
            std::collections::btree_map::Entry::Occupied(mut place) => {
                *place.get_mut() += value;
                if place.get().is_zero() {
                    place.remove();
                }
            }
        }
    }

    /// The terms, from the highest power (lexicographically) to the lowest.
    pub fn terms(&self) -> impl Iterator<Item = (&[u32], &BigRational)> {
        self.terms
            .iter()
            .rev()
            .map(|(exponents, value)| (exponents.as_slice(), value))
    }

    /// Number of terms.
    pub fn len(&self) -> usize {
        self.terms.len()
    }

    /// Is this 0?
    pub fn is_empty(&self) -> bool {
        self.terms.is_empty()
    }

    /// Is this 1?
    pub fn is_one(&self) -> bool {
        self.terms.len() == 1
            && self
                .terms
                .iter()
                .all(|(exponents, value)| value.is_one() && exponents.iter().all(|&e| e == 0))
    }

    /// The sum.
    pub fn plus(&self, other: &Self) -> Self {
        let mut sum = self.clone();
        other
            .terms
            .iter()
            .for_each(|(exponents, value)| sum.add_term(exponents.clone(), value.clone()));
        sum
    }

    /// The product, term by term.
    pub fn times(&self, other: &Self) -> Self {
        let mut product = Self::default();
        for (left, a) in &self.terms {
            for (right, b) in &other.terms {
                let exponents = left.iter().zip(right).map(|(e, f)| e + f).collect();
                product.add_term(exponents, a * b);
            }
        }
        product
    }

    /// A rational multiple.
    pub fn scaled(&self, factor: &BigRational) -> Self {
        if factor.is_zero() {
            return Self::default();
        }
        Self {
            terms: self
                .terms
                .iter()
                .map(|(exponents, value)| (exponents.clone(), value * factor))
                .collect(),
        }
    }

    /// The text with the given names: `3/10*t^2 - 1/5`.
    pub fn text(&self, names: &[String]) -> String {
        if self.is_empty() {
            return "0".to_owned();
        }
        let mut text = String::new();
        for (position, (exponents, value)) in self.terms().enumerate() {
            text.push_str(match (position, value.is_negative()) {
                (0, false) => "",
                (0, true) => "-",
                (_, false) => " + ",
                (_, true) => " - ",
            });
            let monomial = monomial_text(exponents, names);
            let size = value.abs();
            match (size.is_one(), monomial.is_empty()) {
                (_, true) => text.push_str(&size.to_string()),
                (true, false) => text.push_str(&monomial),
                (false, false) => text.push_str(&format!("{size}*{monomial}")),
            }
        }
        text
    }
}

/// The text of a monomial: `q^2*t`, empty for 1.
pub fn monomial_text(exponents: &[u32], names: &[String]) -> String {
    let factors = exponents
        .iter()
        .zip(names)
        .filter(|(exponent, _)| **exponent > 0);
    factors
        .map(|(exponent, name)| {
            if *exponent == 1 {
                name.clone()
            } else {
                format!("{name}^{exponent}")
            }
        })
        .collect::<Vec<_>>()
        .join("*")
}

/// A coefficient of a linear form: a quotient of polynomials in the variable and the constants.
///
/// *Invariant*: the quotient is in lowest terms as it was found; for a polynomial the denominator is 1.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Coefficient {
    /// The names of the symbols that exponents count.
    pub names: std::sync::Arc<[String]>,
    /// The numerator.
    pub numerator: PublishedPolynomial,
    /// The denominator.
    pub denominator: PublishedPolynomial,
}

impl Coefficient {
    /// Is the denominator 1?
    pub fn is_polynomial(&self) -> bool {
        self.denominator.is_one()
    }
}

impl fmt::Display for Coefficient {
    /// `1/3*t`, or `(t^2 + 1)/(2*t)` for a quotient.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let numerator = self.numerator.text(&self.names);
        if self.is_polynomial() {
            return f.write_str(&numerator);
        }
        let denominator = self.denominator.text(&self.names);
        let wrap = |text: String, simple: bool| if simple { text } else { format!("({text})") };
        let simple = self.denominator.len() == 1 && !denominator.contains(['*', '/']);
        write!(
            f,
            "{}/{}",
            wrap(numerator, self.numerator.len() <= 1),
            wrap(denominator, simple)
        )
    }
}
