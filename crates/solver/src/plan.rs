//! Evaluation of many polynomials at one point after another.

use linform_ring::Polynomial;
use linform_scalar::{Integer, PrimeField};

/// The terms of a list of polynomials, arranged for substituting numbers for their variables one by one.
///
/// Variables are the symbols that occur, renumbered: variable 0 is substituted last and so takes the most
/// values. *Invariant*: the terms of a polynomial ascend by the exponents of variable 0, then 1, and so on;
/// after substituting the last variable, those terms are added which agree in the exponents of all others,
/// and these stand together.
pub(crate) struct Plan<'a> {
    symbols: Vec<usize>,
    coefficients: Vec<&'a Integer>,
    /// `levels[k]` substitutes variable `k`.
    levels: Vec<Level>,
}

struct Level {
    /// The exponent of the variable in every term.
    exponents: Vec<u16>,
    /// Where the runs of terms that are added begin; one more for the end.
    starts: Vec<u32>,
    degree: u16,
}

impl<'a> Plan<'a> {
    /// The plan for integral polynomials, none of them 0.
    pub(crate) fn new(polynomials: &[&'a Polynomial]) -> Plan<'a> {
        let symbols = occurring(polynomials);
        let mut terms: Vec<(usize, Vec<u16>, &'a Integer)> = Vec::new();
        for (index, polynomial) in polynomials.iter().enumerate() {
            debug_assert!(!polynomial.is_zero() && polynomial.denominator().is_one());
            for (monomial, coefficient) in polynomial.iter() {
                let exponents = symbols.iter().map(|&s| monomial.exponent(s)).collect();
                terms.push((index, exponents, coefficient));
            }
        }
        terms.sort_by(|a, b| (a.0, &a.1).cmp(&(b.0, &b.1)));
        let mut levels = Vec::with_capacity(symbols.len());
        // The terms that are left when all variables from `k + 1` on are numbers.
        let mut left: Vec<usize> = (0..terms.len()).collect();
        for k in (0..symbols.len()).rev() {
            let mut starts = Vec::new();
            let mut heads: Vec<usize> = Vec::new();
            for (place, &term) in left.iter().enumerate() {
                let joins = heads.last().is_some_and(|&head| {
                    terms[head].0 == terms[term].0 && terms[head].1[..k] == terms[term].1[..k]
                });
                if !joins {
                    heads.push(term);
                    starts.push(place as u32);
                }
            }
            starts.push(left.len() as u32);
            let exponents: Vec<u16> = left.iter().map(|&term| terms[term].1[k]).collect();
            let degree = exponents.iter().copied().max().unwrap_or(0);
            levels.push(Level {
                exponents,
                starts,
                degree,
            });
            left = heads;
        }
        levels.reverse();
        Plan {
            symbols,
            coefficients: terms.into_iter().map(|(_, _, c)| c).collect(),
            levels,
        }
    }

    /// The symbols that occur: variable `k` is symbol `symbols()[k]`.
    pub(crate) fn symbols(&self) -> &[usize] {
        &self.symbols
    }

    /// The images of the polynomials modulo a prime.
    pub(crate) fn images(&self, field: PrimeField) -> Images<'_> {
        let variables = self.levels.len();
        let mut values: Vec<Vec<u64>> = self
            .levels
            .iter()
            .map(|level| vec![0; level.starts.len() - 1])
            .collect();
        values.push(
            self.coefficients
                .iter()
                .map(|c| field.element_of(c))
                .collect(),
        );
        debug_assert_eq!(values.len(), variables + 1);
        let longest = self.levels.iter().map(|level| level.degree).max();
        Images {
            levels: &self.levels,
            field,
            values,
            powers: vec![field.one(); usize::from(longest.unwrap_or(0)) + 1],
        }
    }
}

/// The symbols that occur, the one of highest degree first: it has the longest sums.
fn occurring(polynomials: &[&Polynomial]) -> Vec<usize> {
    let degrees = polynomials
        .iter()
        .fold(linform_ring::Monomial::one(), |all, p| {
            all.lcm(&p.degrees())
        });
    let mut symbols: Vec<usize> = (0..degrees.width())
        .filter(|&symbol| degrees.exponent(symbol) > 0)
        .collect();
    symbols.sort_by_key(|&symbol| (std::cmp::Reverse(degrees.exponent(symbol)), symbol));
    symbols
}

/// The polynomials of a [`Plan`] modulo a prime, with some of their variables substituted.
pub(crate) struct Images<'a> {
    levels: &'a [Level],
    field: PrimeField,
    /// `values[k]`: the coefficients that are left when the variables from `k` on are numbers.
    values: Vec<Vec<u64>>,
    powers: Vec<u64>,
}

impl Images<'_> {
    /// Substitutes an element for variable `k`. The variables after it must have been substituted before.
    pub(crate) fn substitute(&mut self, k: usize, element: u64) {
        let level = &self.levels[k];
        for exponent in 1..=usize::from(level.degree) {
            self.powers[exponent] = self.field.mul(self.powers[exponent - 1], element);
        }
        let (to, from) = self.values.split_at_mut(k + 1);
        for (value, run) in to[k].iter_mut().zip(level.starts.windows(2)) {
            let run = run[0] as usize..run[1] as usize;
            let terms = from[0][run.clone()].iter().zip(&level.exponents[run]);
            *value = terms.fold(0, |sum, (&coefficient, &exponent)| {
                let term = self
                    .field
                    .mul(coefficient, self.powers[usize::from(exponent)]);
                self.field.add(sum, term)
            });
        }
    }

    /// The values of the polynomials, once all variables are substituted.
    pub(crate) fn values(&self) -> &[u64] {
        &self.values[0]
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use linform_ring::Symbols;

    #[test]
    fn substitution_variable_by_variable_gives_the_values() {
        let symbols = Symbols::new(vec![], Some("t".into()), vec!["a".into(), "b".into()]);
        let texts = [
            "3",
            "t^2*b - 5*t + b^3 - 7",
            "b",
            "(t + 2*b)^4",
            "-t*b - t^3*b^2",
        ];
        let polynomials: Vec<Polynomial> =
            texts.iter().map(|s| symbols.parse(s).unwrap()).collect();
        let references: Vec<&Polynomial> = polynomials.iter().collect();
        let plan = Plan::new(&references);
        assert_eq!(plan.symbols(), [0, 2]);
        let field = PrimeField::new(1_000_003).unwrap();
        let mut images = plan.images(field);
        for b in [2u64, 77] {
            images.substitute(1, field.element(b));
            for t in [0u64, 1, 999] {
                images.substitute(0, field.element(t));
                let at = [field.element(t), field.element(5), field.element(b)];
                let expected: Vec<u64> = polynomials
                    .iter()
                    .map(|p| p.evaluate_mod(&field, &at).unwrap())
                    .collect();
                assert_eq!(images.values(), expected);
            }
        }
    }

    #[test]
    fn numbers_need_no_substitution() {
        let one = Polynomial::one();
        let plan = Plan::new(&[&one, &one]);
        let field = PrimeField::new(101).unwrap();
        assert_eq!(plan.images(field).values(), [field.one(); 2]);
        assert!(Plan::new(&[]).images(field).values().is_empty());
    }
}
