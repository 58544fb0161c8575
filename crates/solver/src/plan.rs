//! Evaluation of many polynomials at one point after another.

use linform_ring::{Monomial, Polynomial};
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
        let variables = symbols.len();
        let count = polynomials.iter().map(|p| p.len()).sum();
        let mut coefficients: Vec<&'a Integer> = Vec::with_capacity(count);
        // The exponents of all terms, `variables` numbers for each, and the polynomial that it belongs to.
        let mut exponents: Vec<u16> = Vec::with_capacity(count * variables);
        let mut owners: Vec<u32> = Vec::with_capacity(count);
        let mut terms: Vec<(&'a Monomial, &'a Integer)> = Vec::new();
        let in_order = symbols.is_sorted();
        for (owner, polynomial) in polynomials.iter().enumerate() {
            debug_assert!(!polynomial.is_zero() && polynomial.denominator().is_one());
            terms.clear();
            terms.extend(polynomial.iter().rev());
            if !in_order {
                let key = |monomial: &'a Monomial| symbols.iter().map(|&s| monomial.exponent(s));
                terms.sort_by(|a, b| key(a.0).cmp(key(b.0)));
            }
            for &(monomial, coefficient) in &terms {
                exponents.extend(symbols.iter().map(|&s| monomial.exponent(s)));
                owners.push(owner as u32);
                coefficients.push(coefficient);
            }
        }
        let mut levels = Vec::with_capacity(variables);
        // The terms that are left when all variables from `k + 1` on are numbers.
        let mut left: Vec<usize> = (0..count).collect();
        for k in (0..variables).rev() {
            let head_of = |term: usize| &exponents[term * variables..][..k];
            let mut starts = Vec::new();
            let mut heads: Vec<usize> = Vec::new();
            for (place, &term) in left.iter().enumerate() {
                let joins = heads.last().is_some_and(|&head| {
                    owners[head] == owners[term] && head_of(head) == head_of(term)
                });
                if !joins {
                    heads.push(term);
                    starts.push(place as u32);
                }
            }
            starts.push(left.len() as u32);
            let own: Vec<u16> = left
                .iter()
                .map(|&term| exponents[term * variables + k])
                .collect();
            let degree = own.iter().copied().max().unwrap_or(0);
            levels.push(Level {
                exponents: own,
                starts,
                degree,
            });
            left = heads;
        }
        levels.reverse();
        Plan {
            symbols,
            coefficients,
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
        .fold(Monomial::one(), |all, p| all.lcm(&p.degrees()));
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
