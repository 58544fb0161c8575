//! The polynomials of the independent check.

use crate::published::PublishedPolynomial;
use linform_scalar::published::{BigInt, BigRational, One, Zero, gcd, lcm};
use rustc_hash::FxHashMap;

/// A polynomial in all symbols: a map from exponents to integers, over one common denominator.
///
/// It shares no code with the polynomials that find answers: products are taken term by term into a hash map.
/// *Invariant*: no coefficient is 0; the denominator is positive and has no factor in common with all coefficients.
#[derive(Clone, Debug)]
pub(super) struct Expansion {
    terms: FxHashMap<Box<[u32]>, BigInt>,
    denominator: BigInt,
}

impl Default for Expansion {
    fn default() -> Self {
        Expansion {
            terms: FxHashMap::default(),
            denominator: BigInt::one(),
        }
    }
}

impl PartialEq for Expansion {
    fn eq(&self, other: &Self) -> bool {
        // Both are in lowest terms, so equal values have equal parts.
        self.denominator == other.denominator && self.terms == other.terms
    }
}

fn add_to(terms: &mut FxHashMap<Box<[u32]>, BigInt>, exponents: Box<[u32]>, value: BigInt) {
    if value.is_zero() {
        return;
    }
    match terms.entry(exponents) {
        std::collections::hash_map::Entry::Vacant(place) => {
            place.insert(value);
        }
        std::collections::hash_map::Entry::Occupied(mut place) => {
            *place.get_mut() += value;
            if place.get().is_zero() {
                place.remove();
            }
        }
    }
}

impl Expansion {
    /// A constant in a number of symbols.
    pub(super) fn constant(symbols: usize, value: &BigRational) -> Self {
        let mut result = Expansion {
            denominator: value.denom().clone(),
            ..Self::default()
        };
        add_to(
            &mut result.terms,
            vec![0; symbols].into(),
            value.numer().clone(),
        );
        result
    }

    /// A single symbol.
    pub(super) fn symbol(symbols: usize, index: usize) -> Self {
        let mut exponents = vec![0; symbols];
        exponents[index] = 1;
        let mut result = Self::default();
        add_to(&mut result.terms, exponents.into(), BigInt::one());
        result
    }

    /// A polynomial in the symbols from `first` on, as one in `symbols` symbols.
    pub(super) fn lift(value: &PublishedPolynomial, first: usize, symbols: usize) -> Self {
        let mut result = Self::default();
        for (_, coefficient) in value.terms() {
            result.denominator = lcm(result.denominator, coefficient.denom().clone());
        }
        for (exponents, coefficient) in value.terms() {
            let mut all = vec![0; first];
            all.extend_from_slice(exponents);
            all.resize(symbols, 0);
            let scaled = coefficient.numer() * (&result.denominator / coefficient.denom());
            add_to(&mut result.terms, all.into(), scaled);
        }
        result.reduced()
    }

    /// Is this 0?
    pub(super) fn is_empty(&self) -> bool {
        self.terms.is_empty()
    }

    /// Is this 1?
    pub(super) fn is_one(&self) -> bool {
        self.denominator.is_one()
            && self.terms.len() == 1
            && self
                .terms
                .iter()
                .all(|(exponents, value)| value.is_one() && exponents.iter().all(|&e| e == 0))
    }

    /// The exponents of all terms, in no order.
    pub(super) fn monomials(&self) -> impl Iterator<Item = &[u32]> {
        self.terms.keys().map(|exponents| &**exponents)
    }

    /// Divides out what the coefficients and the denominator have in common.
    fn reduced(mut self) -> Self {
        let mut common = self.denominator.clone();
        for value in self.terms.values() {
            if common.is_one() {
                return self;
            }
            common = gcd(common, value.clone());
        }
        if self.terms.is_empty() {
            return Self::default();
        }
        if !common.is_one() {
            self.denominator /= &common;
            self.terms.values_mut().for_each(|value| *value /= &common);
        }
        self
    }

    fn combine(&self, other: &Self, negative: bool) -> Self {
        let denominator = lcm(self.denominator.clone(), other.denominator.clone());
        let (left, right) = (
            &denominator / &self.denominator,
            &denominator / &other.denominator,
        );
        let right = if negative { -right } else { right };
        let mut terms = self.terms.clone();
        if !left.is_one() {
            terms.values_mut().for_each(|value| *value *= &left);
        }
        for (exponents, value) in &other.terms {
            add_to(&mut terms, exponents.clone(), value * &right);
        }
        Expansion { terms, denominator }.reduced()
    }

    /// The sum.
    pub(super) fn plus(&self, other: &Self) -> Self {
        self.combine(other, false)
    }

    /// The difference.
    pub(super) fn minus(&self, other: &Self) -> Self {
        self.combine(other, true)
    }

    /// A rational multiple.
    pub(super) fn scaled(&self, factor: &BigRational) -> Self {
        if factor.is_zero() {
            return Self::default();
        }
        let mut result = self.clone();
        result.denominator *= factor.denom();
        result
            .terms
            .values_mut()
            .for_each(|value| *value *= factor.numer());
        result.reduced()
    }

    /// The product, asking `proceed` before each row of terms.
    pub(super) fn times<E>(
        &self,
        other: &Self,
        proceed: &mut dyn FnMut() -> Result<(), E>,
    ) -> Result<Self, E> {
        let mut terms = FxHashMap::default();
        for (left, a) in &self.terms {
            proceed()?;
            for (right, b) in &other.terms {
                let exponents = left.iter().zip(right).map(|(e, f)| e + f).collect();
                add_to(&mut terms, exponents, a * b);
            }
        }
        let denominator = &self.denominator * &other.denominator;
        Ok(Expansion { terms, denominator }.reduced())
    }

    /// Does this divide another polynomial? Long division by the lexicographically leading term, as in handbooks; meant for
    /// the small denominators of coefficients.
    pub(super) fn divides(&self, other: &Self) -> bool {
        let leading = |value: &Expansion| value.terms.keys().max().cloned();
        let Some(own) = leading(self) else {
            return other.is_empty();
        };
        let mut rest = other.clone();
        while let Some(top) = leading(&rest) {
            let exponents: Option<Box<[u32]>> = top
                .iter()
                .zip(&own)
                .map(|(e, f)| e.checked_sub(*f))
                .collect();
            let Some(exponents) = exponents else {
                return false;
            };
            // The leading terms of `rest` and of the multiple subtracted are equal, so the loop comes to an end.
            let a = BigRational::new(rest.terms[&top].clone(), rest.denominator.clone());
            let b = BigRational::new(self.terms[&own].clone(), self.denominator.clone());
            let ratio = a / b;
            let mut factor = Expansion {
                denominator: ratio.denom().clone(),
                ..Self::default()
            };
            add_to(&mut factor.terms, exponents, ratio.numer().clone());
            let Ok(multiple) = self.times::<std::convert::Infallible>(&factor, &mut || Ok(()));
            rest = rest.minus(&multiple);
        }
        true
    }

    /// The derivative, given those of the symbols (nothing for a symbol whose derivative is 0).
    pub(super) fn derivative<'e, E>(
        &self,
        of_symbol: impl Fn(usize) -> Option<&'e Expansion>,
        proceed: &mut dyn FnMut() -> Result<(), E>,
    ) -> Result<Self, E> {
        let mut result = Self::default();
        for index in 0..self.monomials().next().map_or(0, <[u32]>::len) {
            let Some(inner) = of_symbol(index) else {
                continue;
            };
            let mut partial = Expansion {
                denominator: self.denominator.clone(),
                ..Self::default()
            };
            for (exponents, value) in self
                .terms
                .iter()
                .filter(|(exponents, _)| exponents[index] > 0)
            {
                let mut lowered = exponents.clone();
                lowered[index] -= 1;
                add_to(&mut partial.terms, lowered, value * exponents[index]);
            }
            result = result.plus(&partial.times(inner, proceed)?);
        }
        Ok(result)
    }

    /// Groups the terms by the part in the first symbols: that part with the cofactor in the rest.
    pub(super) fn split(&self, first: usize) -> FxHashMap<Box<[u32]>, Expansion> {
        let mut rows: FxHashMap<Box<[u32]>, Expansion> = FxHashMap::default();
        for (exponents, value) in &self.terms {
            let (mut leading, mut rest) = (exponents.clone(), exponents.clone());
            leading[first..].fill(0);
            rest[..first].fill(0);
            let row = rows.entry(leading).or_default();
            row.denominator.clone_from(&self.denominator);
            add_to(&mut row.terms, rest, value.clone());
        }
        rows.into_iter()
            .map(|(leading, row)| (leading, row.reduced()))
            .collect()
    }

    /// The value modulo a prime, with a word for each symbol; nothing if the prime divides the denominator.
    pub(super) fn residue(&self, prime: u64, point: &[u64]) -> Option<u64> {
        let modulus = u128::from(prime);
        let power = |mut base: u128, mut exponent: u128| {
            let mut result = 1 % modulus;
            base %= modulus;
            while exponent > 0 {
                if exponent & 1 == 1 {
                    result = result * base % modulus;
                }
                base = base * base % modulus;
                exponent >>= 1;
            }
            result
        };
        let big = BigInt::from(prime);
        let word = |value: &BigInt| -> u128 {
            let reduced = ((value % &big) + &big) % &big;
            reduced.iter_u64_digits().next().map_or(0, u128::from)
        };
        let denominator = word(&self.denominator);
        if denominator == 0 {
            return None;
        }
        let mut sum = 0;
        for (exponents, value) in &self.terms {
            let factors = exponents
                .iter()
                .zip(point)
                .filter(|(exponent, _)| **exponent > 0);
            let product = factors.fold(word(value), |product, (exponent, place)| {
                product * power(u128::from(*place), u128::from(*exponent)) % modulus
            });
            sum = (sum + product) % modulus;
        }
        Some((sum * power(denominator, modulus - 2) % modulus) as u64)
    }
}
