//! Views of a polynomial as one in fewer symbols.

use crate::polynomial::Term;
use crate::{Monomial, Polynomial};
use linform_scalar::PrimeField;

impl Polynomial {
    /// The parts by the monomial in the first `leading_symbols` symbols: `Σ head · cofactor`, with cofactors in
    /// the other symbols.
    ///
    /// The heads fall strictly and no cofactor is 0.
    ///
    /// # Complexity
    ///
    /// Linear: terms that share a head are neighbours in the lexicographic order.
    pub fn split(&self, leading_symbols: usize) -> Vec<(Monomial, Polynomial)> {
        let mut parts: Vec<(Monomial, Vec<Term>)> = Vec::new();
        for (monomial, coefficient) in self.terms() {
            let (head, tail) = monomial.split_at(leading_symbols);
            let term = (tail, coefficient.clone());
            match parts.last_mut() {
                Some((last, terms)) if *last == head => terms.push(term),
                _ => parts.push((head, vec![term])),
            }
        }
        parts
            .into_iter()
            .map(|(head, terms)| {
                (
                    head,
                    Polynomial::normalised(terms, self.denominator().clone()),
                )
            })
            .collect()
    }

    /// The value at a point of a prime field, or nothing if the prime divides the denominator.
    ///
    /// `values` holds one element (in Montgomery form) for each symbol.
    ///
    /// # Panics
    ///
    /// If a symbol occurs for which there is no value.
    ///
    /// # Complexity
    ///
    /// One product for each term and symbol that occurs in it, after a table of powers for each symbol.
    pub fn evaluate_mod(&self, field: &PrimeField, values: &[u64]) -> Option<u64> {
        let inverse = field.inverse(field.element_of(self.denominator()))?;
        let degrees = self.degrees();
        assert!(degrees.width() <= values.len(), "one value for each symbol");
        let tables: Vec<(usize, Vec<u64>)> = (0..degrees.width())
            .filter(|&symbol| degrees.exponent(symbol) > 0)
            .map(|symbol| {
                let mut power = field.one();
                let mut table = vec![power];
                for _ in 0..degrees.exponent(symbol) {
                    power = field.mul(power, values[symbol]);
                    table.push(power);
                }
                (symbol, table)
            })
            .collect();
        let mut sum = 0;
        for (monomial, coefficient) in self.terms() {
            let mut value = field.element_of(coefficient);
            for (symbol, table) in &tables {
                let exponent = monomial.exponent(*symbol);
                if exponent > 0 {
                    value = field.mul(value, table[usize::from(exponent)]);
                }
            }
            sum = field.add(sum, value);
        }
        Some(field.mul(sum, inverse))
    }
}
