//! The derivation of a ring.

use crate::layout::Layout;
use crate::meter::Meter;
use crate::polynomial::Term;
use crate::product::{collect_accumulators, product};
use crate::sum::merge;
use crate::{Monomial, Polynomial, Ring};
use linform_scalar::{Control, Integer, Stop};
use std::collections::BinaryHeap;
use std::collections::binary_heap::PeekMut;

/// The most shifted copies of an element that are merged; beyond, products are formed.
const MOST_SHIFTS: usize = 64;
/// The largest array of accumulators.
const MOST_ACCUMULATORS: u64 = 1 << 22;

/// A term of the derivation: `factor · number · ∂/∂symbol`.
struct Shift<'a> {
    symbol: usize,
    factor: &'a Monomial,
    number: Integer,
}

impl Ring {
    /// The derivative of an element, `Σ_g ∂p/∂g · g′ + ∂p/∂t`.
    ///
    /// # Errors
    ///
    /// [`Stop::SizeLimit`] if an exponent or the number of terms would exceed its bound; what `control` says.
    ///
    /// # Complexity
    ///
    /// One coefficient product for each term of the element and each term of the derivatives, if those are few;
    /// otherwise one product of polynomials for each generator.
    pub fn derive(&self, element: &Polynomial, control: &dyn Control) -> Result<Polynomial, Stop> {
        control.proceed()?;
        let degrees = element.degrees();
        let one = Monomial::one();
        let occurring: Vec<usize> = (0..self.symbols().generators())
            .filter(|&generator| degrees.exponent(generator) > 0)
            .collect();
        let denominator = occurring.iter().fold(Integer::ONE, |common, &generator| {
            common.lcm(self.derivative_of(generator).denominator())
        });
        let mut shifts = Vec::new();
        for &generator in &occurring {
            let derivative = self.derivative_of(generator);
            let scale = denominator.div_exact(derivative.denominator());
            shifts.extend(derivative.iter().map(|(factor, coefficient)| Shift {
                symbol: generator,
                factor,
                number: coefficient * &scale,
            }));
        }
        if let Some(variable) = self.symbols().variable()
            && degrees.exponent(variable) > 0
        {
            shifts.push(Shift {
                symbol: variable,
                factor: &one,
                number: denominator.clone(),
            });
        }
        let terms = match box_of(&degrees, &shifts) {
            Some(layout) if shifts.len() <= MOST_SHIFTS => {
                derive_shifted(&layout, element.terms(), &shifts, control)?
            }
            _ => self.derive_by_products(element, &denominator, control)?,
        };
        Ok(Polynomial::normalised(
            terms,
            element.denominator() * &denominator,
        ))
    }

    fn derive_by_products(
        &self,
        element: &Polynomial,
        denominator: &Integer,
        control: &dyn Control,
    ) -> Result<Vec<Term>, Stop> {
        let mut sum = match self.symbols().variable() {
            Some(variable) => partial(element.terms(), variable),
            None => Vec::new(),
        };
        sum.iter_mut()
            .for_each(|(_, coefficient)| *coefficient *= denominator);
        for generator in 0..self.symbols().generators() {
            let derivative = self.derivative_of(generator);
            let part = partial(element.terms(), generator);
            if part.is_empty() || derivative.is_zero() {
                continue;
            }
            let summand = product(None, &part, derivative.terms(), control)?;
            let scale = denominator.div_exact(derivative.denominator());
            sum = merge(&sum, &Integer::ONE, &summand, &scale);
        }
        Ok(sum)
    }
}

/// The partial derivative.
fn partial(terms: &[Term], symbol: usize) -> Vec<Term> {
    let unit = Monomial::power(symbol, 1).unwrap_or_default();
    let lowered = |(monomial, coefficient): &Term| {
        let exponent = Integer::from(u32::from(monomial.exponent(symbol)));
        Some((monomial.div(&unit)?, coefficient * &exponent))
    };
    terms.iter().filter_map(lowered).collect()
}

/// A box for the element and its derivative, or nothing if it is too large or an exponent might be.
fn box_of(degrees: &Monomial, shifts: &[Shift<'_>]) -> Option<Layout> {
    let mut top = degrees.clone();
    for shift in shifts {
        let lowered = degrees.div(&Monomial::power(shift.symbol, 1)?)?;
        top = top.lcm(&lowered.checked_mul(shift.factor)?);
    }
    Layout::new(&top)
}

/// The sum of the shifted copies of the element, each of which is in order already.
fn derive_shifted(
    layout: &Layout,
    terms: &[Term],
    shifts: &[Shift<'_>],
    control: &dyn Control,
) -> Result<Vec<Term>, Stop> {
    let mut meter = Meter::new(control);
    let numbers = layout.numbers(terms);
    // A shift may lower the number; adding modulo 2^64 subtracts.
    let steps: Vec<u64> = shifts
        .iter()
        .map(|shift| {
            let unit = Monomial::power(shift.symbol, 1).unwrap_or_default();
            layout
                .number(shift.factor)
                .wrapping_sub(layout.number(&unit))
        })
        .collect();
    let pairs = (terms.len() * shifts.len()) as u64;
    let length = terms.iter().map(|(_, c)| c.bits()).max().unwrap_or(0);
    let length_of_factors = shifts.iter().map(|shift| shift.number.bits()).max();
    let length_of_factors = length_of_factors.unwrap_or(0);
    if layout.size() > MOST_ACCUMULATORS || layout.size() > pairs.saturating_mul(8) {
        return merged(layout, terms, &numbers, shifts, &steps, &mut meter);
    }
    // An exponent has 15 bits, a sum of at most 64 shifted copies six more, and there is the sign.
    if length + length_of_factors + 22 < 128 {
        let mut sums = vec![0i128; layout.size() as usize];
        for (shift, step) in shifts.iter().zip(&steps) {
            let number = word_of(&shift.number);
            meter.work(terms.len())?;
            for ((monomial, coefficient), place) in terms.iter().zip(&numbers) {
                let exponent = monomial.exponent(shift.symbol);
                if exponent > 0 {
                    let factor = number * i128::from(exponent);
                    sums[place.wrapping_add(*step) as usize] += word_of(coefficient) * factor;
                }
            }
        }
        collect_accumulators(layout, sums, |&sum| sum == 0, Integer::from, &mut meter)
    } else {
        let mut sums = vec![Integer::ZERO; layout.size() as usize];
        for (shift, step) in shifts.iter().zip(&steps) {
            for ((monomial, coefficient), place) in terms.iter().zip(&numbers) {
                let exponent = monomial.exponent(shift.symbol);
                if exponent > 0 {
                    meter.work(8)?;
                    let factor = &shift.number * &Integer::from(u32::from(exponent));
                    sums[place.wrapping_add(*step) as usize].add_product(coefficient, &factor);
                }
            }
        }
        collect_accumulators(layout, sums, Integer::is_zero, |sum| sum, &mut meter)
    }
}

fn word_of(value: &Integer) -> i128 {
    value.to_i128().expect("the lengths were looked at")
}

/// The same by merging the copies, for elements that are sparse in their box.
fn merged(
    layout: &Layout,
    terms: &[Term],
    numbers: &[u64],
    shifts: &[Shift<'_>],
    steps: &[u64],
    meter: &mut Meter<'_>,
) -> Result<Vec<Term>, Stop> {
    // The first term from `start` on that holds the symbol of a shift: its place in the result and its index.
    let next = |which: usize, start: usize| {
        let rest = terms[start..].iter();
        let holds = |(monomial, _): &Term| monomial.exponent(shifts[which].symbol) > 0;
        let index = start + rest.clone().position(holds)?;
        Some((numbers[index].wrapping_add(steps[which]), index))
    };
    let mut heap: BinaryHeap<(u64, usize, usize)> = (0..shifts.len())
        .filter_map(|which| next(which, 0).map(|(place, index)| (place, which, index)))
        .collect();
    let mut result: Vec<Term> = Vec::new();
    while let Some(&(place, ..)) = heap.peek() {
        let mut sum = Integer::ZERO;
        while let Some(mut entry) = heap.peek_mut()
            && entry.0 == place
        {
            meter.work(4)?;
            let (_, which, index) = *entry;
            let (monomial, coefficient) = &terms[index];
            let exponent = u32::from(monomial.exponent(shifts[which].symbol));
            let factor = &shifts[which].number * &Integer::from(exponent);
            sum.add_product(coefficient, &factor);
            match next(which, index + 1) {
                Some((place, index)) => *entry = (place, which, index),
                None => {
                    PeekMut::pop(entry);
                }
            }
        }
        if !sum.is_zero() {
            meter.term(&sum)?;
            result.push((layout.monomial(place), sum));
        }
    }
    Ok(result)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::Symbols;
    use linform_scalar::{Rational, Unlimited};
    use proptest::prelude::*;

    fn ring() -> Ring {
        let names = |list: &[&str]| list.iter().map(|s| s.to_string()).collect::<Vec<_>>();
        let symbols = Symbols::new(names(&["u", "v"]), Some("t".into()), names(&["c"]));
        let rules = ["1/2*v^2 - c*t + 3", "1/3*u*v - t^2*v^3 + 5*u"];
        let rules = rules
            .iter()
            .map(|rule| symbols.parse(rule).unwrap())
            .collect();
        Ring::new(symbols, rules).unwrap()
    }

    fn elements() -> impl Strategy<Value = Polynomial> {
        let exponent = prop_oneof![4 => 0u16..4, 1 => 0u16..300];
        let coefficient = prop_oneof![(-3i128..4), Just(i128::from(i64::MIN)), any::<i128>()];
        let term = (
            proptest::collection::vec(exponent, 0..5),
            coefficient,
            1i64..5,
        );
        proptest::collection::vec(term, 0..12).prop_map(|terms| {
            Polynomial::from_terms(terms.into_iter().map(|(exponents, n, d)| {
                let monomial =
                    Monomial::from_exponents(&exponents[..exponents.len().min(4)]).unwrap();
                (monomial, Rational::new(n, d).unwrap())
            }))
        })
    }

    proptest! {
        #![proptest_config(crate::testing::cases(96))]

        #[test]
        fn every_way_gives_the_derivative(element in elements()) {
            let ring = ring();
            let derivative = ring.derive(&element, &Unlimited).unwrap();
            prop_assert!(derivative.is_canonical());
            let six = Integer::from(6);
            let by_products = ring.derive_by_products(&element, &six, &Unlimited).unwrap();
            let denominator = element.denominator() * &six;
            prop_assert_eq!(Polynomial::normalised(by_products, denominator), derivative.clone());
            // The sparse way on an element that takes the dense one by itself, and the other way round.
            let degrees = element.degrees();
            let one = Monomial::one();
            let mut shifts = vec![Shift { symbol: 2, factor: &one, number: six.clone() }];
            for generator in 0..2 {
                let rule = ring.derivative_of(generator);
                let scale = six.div_exact(rule.denominator());
                shifts.extend(rule.iter().map(|(factor, c)| Shift { symbol: generator, factor, number: c * &scale }));
            }
            shifts.retain(|shift| degrees.exponent(shift.symbol) > 0);
            let layout = box_of(&degrees, &shifts).unwrap();
            let numbers = layout.numbers(element.terms());
            let steps: Vec<u64> = shifts.iter().map(|shift| {
                layout.number(shift.factor).wrapping_sub(layout.number(&Monomial::power(shift.symbol, 1).unwrap()))
            }).collect();
            let terms = merged(&layout, element.terms(), &numbers, &shifts, &steps, &mut Meter::new(&Unlimited)).unwrap();
            prop_assert_eq!(Polynomial::normalised(terms, element.denominator() * &six), derivative);
        }
    }

    #[test]
    fn an_exponent_that_outgrows_its_field_is_a_size_limit() {
        let ring = ring();
        let high = Polynomial::monomial(Monomial::from_exponents(&[0, 32767]).unwrap(), 1.into());
        assert_eq!(ring.derive(&high, &Unlimited), Err(Stop::SizeLimit));
        let constant = Polynomial::monomial(
            Monomial::from_exponents(&[0, 0, 0, 32767]).unwrap(),
            1.into(),
        );
        assert_eq!(ring.derive(&constant, &Unlimited), Ok(Polynomial::zero()));
    }
}
