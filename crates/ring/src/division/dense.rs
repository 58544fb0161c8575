//! Division with one accumulator for each monomial of the box.

use crate::Monomial;
use crate::layout::Layout;
use crate::meter::{Meter, effort, longest};
use crate::polynomial::Term;
use linform_scalar::{Integer, Stop};

/// The quotient, in words as long as they suffice.
pub(super) fn quotient(
    layout: &Layout,
    most: &Monomial,
    dividend: &[Term],
    divisor: &[Term],
    meter: &mut Meter<'_>,
) -> Result<Option<Vec<Term>>, Stop> {
    match in_words(layout, most, dividend, divisor, meter)? {
        Attempt::Settled(quotient) => Ok(quotient),
        Attempt::Overflow => in_integers(layout, most, dividend, divisor, meter),
    }
}

enum Attempt {
    Settled(Option<Vec<Term>>),
    Overflow,
}

/// The monomial of the quotient that belongs to a place of the dividend, if there is one.
fn factor(layout: &Layout, most: &Monomial, number: u64, lead: u64) -> Option<(u64, Monomial)> {
    let difference = number.checked_sub(lead)?;
    let monomial = layout.monomial(difference);
    monomial.divides(most).then_some((difference, monomial))
}

fn in_words(
    layout: &Layout,
    most: &Monomial,
    dividend: &[Term],
    divisor: &[Term],
    meter: &mut Meter<'_>,
) -> Result<Attempt, Stop> {
    // Bits left for a coefficient of the quotient, if sums of as many products as the divisor has terms are to
    // stay within two words.
    let room = 124u64.saturating_sub(longest(divisor) + u64::from(divisor.len().ilog2()));
    if longest(divisor) > 63 || longest(dividend) > 124 || room == 0 {
        return Ok(Attempt::Overflow);
    }
    let bound = 1i128 << room.min(63);
    let divisor = crate::product::words(layout, divisor);
    let (lead, lead_coefficient) = (divisor[0].0 as u64, i128::from(divisor[0].1));
    let mut rest = vec![0i128; layout.size() as usize];
    for (monomial, coefficient) in dividend {
        let place = &mut rest[layout.number(monomial) as usize];
        *place = coefficient.to_i128().expect("the lengths were looked at");
    }
    let mut quotient = Vec::new();
    for number in (0..layout.size()).rev() {
        let value = rest[number as usize];
        if value == 0 {
            continue;
        }
        let Some((start, monomial)) = factor(layout, most, number, lead) else {
            return Ok(Attempt::Settled(None));
        };
        if value % lead_coefficient != 0 {
            return Ok(Attempt::Settled(None));
        }
        let value = value / lead_coefficient;
        if value.abs() >= bound {
            return Ok(Attempt::Overflow);
        }
        meter.work(divisor.len())?;
        let word = value as i64;
        for &(place, c) in &divisor {
            rest[start as usize + place] -= i128::from(word) * i128::from(c);
        }
        let value = Integer::from(word);
        meter.term(&value)?;
        quotient.push((monomial, value));
    }
    Ok(Attempt::Settled(Some(quotient)))
}

fn in_integers(
    layout: &Layout,
    most: &Monomial,
    dividend: &[Term],
    divisor: &[Term],
    meter: &mut Meter<'_>,
) -> Result<Option<Vec<Term>>, Stop> {
    let effort = effort(longest(dividend), longest(divisor));
    let numbers = layout.numbers(divisor);
    let (lead, lead_coefficient) = (numbers[0], &divisor[0].1);
    let mut rest = vec![Integer::ZERO; layout.size() as usize];
    for (monomial, coefficient) in dividend {
        rest[layout.number(monomial) as usize] = coefficient.clone();
    }
    let mut quotient = Vec::new();
    for number in (0..layout.size()).rev() {
        let value = std::mem::take(&mut rest[number as usize]);
        if value.is_zero() {
            continue;
        }
        let Some((start, monomial)) = factor(layout, most, number, lead) else {
            return Ok(None);
        };
        let (value, remainder) = value.div_rem_euclid(lead_coefficient);
        if !remainder.is_zero() {
            return Ok(None);
        }
        for ((_, c), place) in divisor.iter().zip(&numbers).skip(1) {
            meter.work(effort)?;
            rest[(start + place) as usize].sub_product(&value, c);
        }
        meter.term(&value)?;
        quotient.push((monomial, value));
    }
    Ok(Some(quotient))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::Polynomial;
    use linform_scalar::{Rational, Unlimited};

    /// `Σ c_e x^e`.
    fn polynomial(coefficients: &[i128]) -> Polynomial {
        Polynomial::from_terms(
            coefficients
                .iter()
                .zip(0u16..)
                .map(|(&c, e)| (Monomial::power(0, e).unwrap(), Rational::from(c))),
        )
    }

    #[test]
    fn words_give_way_to_integers_where_they_do_not_suffice() {
        let wide = i128::from(i64::MAX);
        for (a, b, fits) in [
            (vec![3, -5, 7], vec![-2, 1, 4], true),
            (vec![wide >> 1, 1, -(wide >> 1)], vec![wide >> 3, 1], true),
            (vec![wide << 1, 1], vec![5, 1], false),
            (vec![1, wide, wide], vec![wide, wide, wide - 1], false),
        ] {
            let (a, b) = (polynomial(&a), polynomial(&b));
            let product = a.mul(&b, &Unlimited).unwrap();
            let layout = Layout::new(&product.degrees()).unwrap();
            let meter = &mut Meter::new(&Unlimited);
            let most = a.degrees();
            let (dividend, divisor) = (product.terms(), b.terms());
            match in_words(&layout, &most, dividend, divisor, meter).unwrap() {
                Attempt::Settled(quotient) => {
                    assert!(fits);
                    assert_eq!(quotient.as_deref(), Some(a.terms()));
                }
                Attempt::Overflow => assert!(!fits, "{a:?} · {b:?}"),
            }
            let quotient = in_integers(&layout, &most, dividend, divisor, meter).unwrap();
            assert_eq!(quotient.as_deref(), Some(a.terms()));
        }
    }
}
