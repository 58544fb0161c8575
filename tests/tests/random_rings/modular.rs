//! Polynomials modulo a large prime and ranks of their coefficients, written plainly: the tests' own arithmetic.

use std::collections::BTreeMap;

/// The largest prime below 2⁶²: not the one by which the program checks ranks.
pub(crate) const PRIME: u64 = 4_611_686_018_427_387_847;

pub(crate) fn product(a: u64, b: u64) -> u64 {
    (u128::from(a) * u128::from(b) % u128::from(PRIME)) as u64
}

pub(crate) fn sum(a: u64, b: u64) -> u64 {
    (a + b) % PRIME
}

pub(crate) fn negative(a: u64) -> u64 {
    (PRIME - a) % PRIME
}

pub(crate) fn power(base: u64, exponent: u64) -> u64 {
    (0..64).rev().fold(1, |result, bit| {
        let square = product(result, result);
        if exponent >> bit & 1 == 1 {
            product(square, base)
        } else {
            square
        }
    })
}

pub(crate) fn inverse(a: u64) -> u64 {
    power(a, PRIME - 2)
}

pub(crate) fn integer(value: i64) -> u64 {
    value.rem_euclid(PRIME as i64) as u64
}

/// A polynomial: exponents of all symbols to coefficients that are not 0.
#[derive(Clone, Debug, Default, PartialEq)]
pub(crate) struct Poly(pub BTreeMap<Vec<u32>, u64>);

impl Poly {
    pub(crate) fn constant(symbols: usize, value: u64) -> Poly {
        let mut result = Poly::default();
        result.add_term(vec![0; symbols], value);
        result
    }

    pub(crate) fn symbol(symbols: usize, index: usize) -> Poly {
        let mut exponents = vec![0; symbols];
        exponents[index] = 1;
        Poly([(exponents, 1)].into())
    }

    pub(crate) fn add_term(&mut self, exponents: Vec<u32>, value: u64) {
        let total = sum(self.0.get(&exponents).copied().unwrap_or(0), value);
        if total == 0 {
            self.0.remove(&exponents);
        } else {
            self.0.insert(exponents, total);
        }
    }

    pub(crate) fn plus(&self, other: &Poly) -> Poly {
        let mut result = self.clone();
        for (exponents, value) in &other.0 {
            result.add_term(exponents.clone(), *value);
        }
        result
    }

    pub(crate) fn scaled(&self, factor: u64) -> Poly {
        let mut result = Poly::default();
        for (exponents, value) in &self.0 {
            result.add_term(exponents.clone(), product(*value, factor));
        }
        result
    }

    pub(crate) fn times(&self, other: &Poly) -> Poly {
        let mut result = Poly::default();
        for (left, a) in &self.0 {
            for (right, b) in &other.0 {
                let exponents = left.iter().zip(right).map(|(x, y)| x + y).collect();
                result.add_term(exponents, product(*a, *b));
            }
        }
        result
    }

    pub(crate) fn is_zero(&self) -> bool {
        self.0.is_empty()
    }

    /// The derivative, from the derivatives of the symbols.
    pub(crate) fn derived(&self, derivatives: &[Poly]) -> Poly {
        let mut result = Poly::default();
        for (exponents, value) in &self.0 {
            for (index, derivative) in derivatives.iter().enumerate() {
                if exponents[index] == 0 {
                    continue;
                }
                let mut lower = exponents.clone();
                lower[index] -= 1;
                let factor = product(*value, u64::from(exponents[index]));
                result = result.plus(&derivative.times(&Poly([(lower, factor)].into())));
            }
        }
        result
    }

    /// The values at a point of the last symbols, by monomials in the first `split`.
    pub(crate) fn rows(&self, split: usize, point: &[u64]) -> BTreeMap<Vec<u32>, u64> {
        let mut rows = BTreeMap::new();
        for (exponents, value) in &self.0 {
            let factor = (split..exponents.len()).fold(*value, |product_so_far, index| {
                product(
                    product_so_far,
                    power(point[index], u64::from(exponents[index])),
                )
            });
            let entry = rows.entry(exponents[..split].to_vec()).or_insert(0);
            *entry = sum(*entry, factor);
        }
        rows
    }
}

/// The rank of vectors given by their entries.
pub(crate) fn rank(vectors: &[BTreeMap<Vec<u32>, u64>]) -> usize {
    let mut places: Vec<&Vec<u32>> = vectors.iter().flat_map(BTreeMap::keys).collect();
    places.sort();
    places.dedup();
    let dense = vectors.iter().map(|vector| {
        let entry = |place: &&Vec<u32>| vector.get(*place).copied().unwrap_or(0);
        places.iter().map(entry).collect()
    });
    dense_rank(dense.collect())
}

pub(crate) fn dense_rank(mut rows: Vec<Vec<u64>>) -> usize {
    let width = rows.first().map_or(0, Vec::len);
    let mut rank = 0;
    for column in 0..width {
        let Some(pivot) = (rank..rows.len()).find(|&row| rows[row][column] != 0) else {
            continue;
        };
        rows.swap(rank, pivot);
        let inverse = inverse(rows[rank][column]);
        let pivot = rows[rank].clone();
        for row in &mut rows[rank + 1..] {
            let factor = negative(product(row[column], inverse));
            for (entry, value) in row.iter_mut().zip(&pivot) {
                *entry = sum(*entry, product(factor, *value));
            }
        }
        rank += 1;
    }
    rank
}
