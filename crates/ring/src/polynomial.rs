//! Polynomials over ℚ and their normal form.

use crate::{Monomial, Symbols};
use linform_scalar::{Integer, Rational};
use std::cmp::Ordering;

/// One term of the numerator.
pub(crate) type Term = (Monomial, Integer);

/// A polynomial over ℚ in any number of symbols.
///
/// *Invariant*: the monomials fall strictly; no coefficient is 0; the denominator is positive and coprime to
/// the gcd of the coefficients (1 for the polynomial 0). So the value has one representation, and equality
/// is structural.
#[derive(Clone, PartialEq, Eq, Hash)]
pub struct Polynomial {
    terms: Vec<Term>,
    denominator: Integer,
}

impl Default for Polynomial {
    fn default() -> Self {
        Polynomial::zero()
    }
}

impl Polynomial {
    /// The polynomial 0.
    pub fn zero() -> Polynomial {
        Polynomial::integral(Vec::new())
    }

    /// The polynomial 1.
    pub fn one() -> Polynomial {
        Polynomial::integral(vec![(Monomial::one(), Integer::ONE)])
    }

    /// A number as a polynomial.
    pub fn constant(value: Rational) -> Polynomial {
        Polynomial::monomial(Monomial::one(), value)
    }

    /// One symbol.
    ///
    /// # Panics
    ///
    /// If there is no symbol with this index.
    pub fn symbol(symbols: &Symbols, index: usize) -> Polynomial {
        assert!(index < symbols.len(), "symbol {index} of {}", symbols.len());
        let monomial = Monomial::power(index, 1).expect("1 is a small exponent");
        Polynomial::integral(vec![(monomial, Integer::ONE)])
    }

    /// One term.
    pub fn monomial(monomial: Monomial, coefficient: Rational) -> Polynomial {
        if coefficient.is_zero() {
            return Polynomial::zero();
        }
        let (numerator, denominator) = coefficient.into_parts();
        Polynomial {
            terms: vec![(monomial, numerator)],
            denominator,
        }
    }

    /// The sum of terms in any order, with repetitions.
    ///
    /// # Complexity
    ///
    /// One sort, and one multiplication of every coefficient by its cofactor in the common denominator.
    pub fn from_terms(terms: impl IntoIterator<Item = (Monomial, Rational)>) -> Polynomial {
        let terms: Vec<_> = terms.into_iter().collect();
        let denominator = terms.iter().fold(Integer::ONE, |common, (_, value)| {
            common.lcm(value.denominator())
        });
        let terms = terms
            .into_iter()
            .map(|(monomial, value)| {
                let (numerator, own) = value.into_parts();
                if own == denominator {
                    (monomial, numerator)
                } else {
                    (monomial, numerator * denominator.div_exact(&own))
                }
            })
            .collect();
        Polynomial::normalised(collect_terms(terms), denominator)
    }

    /// The polynomial with these terms, which obey the invariant, over 1.
    pub(crate) fn integral(terms: Vec<Term>) -> Polynomial {
        Polynomial {
            terms,
            denominator: Integer::ONE,
        }
    }

    /// The polynomial with these terms, which obey the invariant, over a positive denominator that may share
    /// factors with them.
    pub(crate) fn normalised(mut terms: Vec<Term>, denominator: Integer) -> Polynomial {
        if denominator.is_one() || terms.is_empty() {
            return Polynomial::integral(terms);
        }
        let common = gcd_of(denominator.clone(), &terms);
        if common.is_one() {
            return Polynomial { terms, denominator };
        }
        for (_, coefficient) in &mut terms {
            *coefficient = coefficient.div_exact(&common);
        }
        Polynomial {
            terms,
            denominator: denominator.div_exact(&common),
        }
    }

    /// The polynomial with these terms over this denominator, which obey the invariant together.
    pub(crate) fn normalised_parts(terms: Vec<Term>, denominator: Integer) -> Polynomial {
        Polynomial { terms, denominator }
    }

    /// Does the value obey the type's invariant? For assertions in tests.
    pub fn is_canonical(&self) -> bool {
        self.terms.windows(2).all(|pair| pair[0].0 > pair[1].0)
            && self.terms.iter().all(|(_, c)| !c.is_zero())
            && self.denominator.sign() == Ordering::Greater
            && gcd_of(self.denominator.clone(), &self.terms).is_one()
    }

    /// The terms of the numerator.
    pub(crate) fn terms(&self) -> &[Term] {
        &self.terms
    }

    /// The terms of the numerator and the denominator.
    pub(crate) fn into_parts(self) -> (Vec<Term>, Integer) {
        (self.terms, self.denominator)
    }

    /// Is this 0?
    pub fn is_zero(&self) -> bool {
        self.terms.is_empty()
    }

    /// Is this 1?
    pub fn is_one(&self) -> bool {
        self.denominator.is_one() && matches!(&self.terms[..], [(m, c)] if m.is_one() && c.is_one())
    }

    /// The value, if no symbol occurs.
    pub fn as_constant(&self) -> Option<Rational> {
        match &self.terms[..] {
            [] => Some(Rational::ZERO),
            [(monomial, coefficient)] if monomial.is_one() => {
                Rational::new(coefficient.clone(), self.denominator.clone())
            }
            _ => None,
        }
    }

    /// The number of terms.
    pub fn len(&self) -> usize {
        self.terms.len()
    }

    /// Are there no terms? The same as [`Polynomial::is_zero`].
    pub fn is_empty(&self) -> bool {
        self.is_zero()
    }

    /// The terms of the numerator, highest monomial first; [`Polynomial::denominator`] is common to all.
    pub fn iter(
        &self,
    ) -> impl DoubleEndedIterator<Item = (&Monomial, &Integer)> + ExactSizeIterator {
        self.terms
            .iter()
            .map(|(monomial, coefficient)| (monomial, coefficient))
    }

    /// The common denominator of all coefficients, positive and as small as possible.
    pub fn denominator(&self) -> &Integer {
        &self.denominator
    }

    /// The coefficient of a monomial.
    pub fn coefficient(&self, monomial: &Monomial) -> Rational {
        let place = self
            .terms
            .binary_search_by(|(candidate, _)| monomial.cmp(candidate));
        match place {
            Ok(index) => Rational::new(self.terms[index].1.clone(), self.denominator.clone())
                .unwrap_or_default(),
            Err(_) => Rational::ZERO,
        }
    }

    /// The highest monomial and its coefficient in the numerator; nothing for 0.
    pub fn leading(&self) -> Option<(&Monomial, &Integer)> {
        self.terms.first().map(|(m, c)| (m, c))
    }

    /// The polynomial times its denominator.
    pub fn numerator(&self) -> Polynomial {
        Polynomial::integral(self.terms.clone())
    }

    /// The gcd of the coefficients of the numerator, never negative; 0 for 0.
    pub fn content(&self) -> Integer {
        gcd_of(Integer::ZERO, &self.terms)
    }

    /// The gcd of a number and the coefficients of the numerator.
    pub(crate) fn content_with(&self, number: &Integer) -> Integer {
        gcd_of(number.clone(), &self.terms)
    }

    /// The integral multiple with content 1 and positive leading coefficient; 0 for 0.
    pub fn primitive_part(&self) -> Polynomial {
        let mut common = self.content();
        if self.terms.first().is_some_and(|(_, c)| c.is_negative()) {
            common = -common;
        }
        if common.is_one() {
            return self.numerator();
        }
        Polynomial::integral(
            self.terms
                .iter()
                .map(|(m, c)| (m.clone(), c.div_exact(&common)))
                .collect(),
        )
    }

    /// The least common multiple of all monomials, which holds the degree in every symbol; 1 for 0.
    pub fn degrees(&self) -> Monomial {
        self.terms
            .iter()
            .fold(Monomial::one(), |all, (monomial, _)| all.lcm(monomial))
    }

    /// The degree in one symbol; nothing for 0.
    pub fn degree_in(&self, index: usize) -> Option<u16> {
        self.terms.iter().map(|(m, _)| m.exponent(index)).max()
    }

    /// Does the symbol occur?
    pub fn involves(&self, index: usize) -> bool {
        self.terms.iter().any(|(m, _)| m.exponent(index) > 0)
    }

    /// The number of binary digits of the largest coefficient of the numerator; 0 for 0.
    pub fn bits(&self) -> u64 {
        self.terms.iter().map(|(_, c)| c.bits()).max().unwrap_or(0)
    }
}

impl std::fmt::Debug for Polynomial {
    /// Writes the terms with lists of exponents, for messages of tests; see `Symbols::format` for text.
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        if self.terms.is_empty() {
            return f.write_str("0");
        }
        for (index, (monomial, coefficient)) in self.terms.iter().enumerate() {
            let separator = if index == 0 { "" } else { " + " };
            write!(f, "{separator}{coefficient}·x^{monomial:?}")?;
        }
        if !self.denominator.is_one() {
            write!(f, " over {}", self.denominator)?;
        }
        Ok(())
    }
}

/// The gcd of `start` and all coefficients.
fn gcd_of(start: Integer, terms: &[Term]) -> Integer {
    let mut common = start;
    for (_, coefficient) in terms {
        if common.is_one() {
            break;
        }
        common = common.gcd(coefficient);
    }
    common
}

/// The largest monomial that divides every term.
pub(crate) fn common_monomial(terms: &[Term]) -> Monomial {
    // The last monomial is the lowest; often it is 1.
    let mut common = terms.last().map(|(m, _)| m.clone()).unwrap_or_default();
    for (monomial, _) in terms {
        if common.is_one() {
            break;
        }
        common = common.gcd(monomial);
    }
    common
}

/// Sorts terms, adds those with equal monomials and leaves out zeros.
pub(crate) fn collect_terms(mut terms: Vec<Term>) -> Vec<Term> {
    terms.sort_by(|(a, _), (b, _)| b.cmp(a));
    let mut result: Vec<Term> = Vec::with_capacity(terms.len());
    for (monomial, coefficient) in terms {
        match result.last_mut() {
            Some((last, sum)) if *last == monomial => *sum += coefficient,
            _ => {
                if result.last().is_some_and(|(_, sum)| sum.is_zero()) {
                    result.pop();
                }
                result.push((monomial, coefficient));
            }
        }
    }
    if result.last().is_some_and(|(_, sum)| sum.is_zero()) {
        result.pop();
    }
    result
}
