//! Division term by term, in order.

use crate::Monomial;
use crate::layout::Layout;
use crate::meter::{Meter, effort, longest};
use crate::polynomial::Term;
use linform_scalar::{Integer, Stop};
use std::collections::BinaryHeap;
use std::collections::binary_heap::PeekMut;

/// The division on the monomials themselves.
pub(super) fn quotient(
    dividend: &[Term],
    divisor: &[Term],
    meter: &mut Meter<'_>,
) -> Result<Option<Vec<Term>>, Stop> {
    let keys = |terms: &[Term]| terms.iter().map(|(m, _)| m.clone()).collect::<Vec<_>>();
    let (dividend_keys, divisor_keys) = (keys(dividend), keys(divisor));
    keyed_quotient(
        (dividend, &dividend_keys),
        (divisor, &divisor_keys),
        Monomial::checked_mul,
        Monomial::div,
        meter,
    )
}

/// The division on the numbers of the monomials in a box that holds the dividend; `most` bounds the degrees of
/// the quotient, so that no product leaves the box.
pub(super) fn numbered_quotient(
    layout: &Layout,
    most: &Monomial,
    dividend: &[Term],
    divisor: &[Term],
    meter: &mut Meter<'_>,
) -> Result<Option<Vec<Term>>, Stop> {
    let (dividend_keys, divisor_keys) = (layout.numbers(dividend), layout.numbers(divisor));
    let divide = |a: &u64, b: &u64| {
        let difference = a.checked_sub(*b)?;
        layout
            .monomial(difference)
            .divides(most)
            .then_some(difference)
    };
    let quotient = keyed_quotient(
        (dividend, &dividend_keys),
        (divisor, &divisor_keys),
        |a, b| Some(a + b),
        divide,
        meter,
    )?;
    Ok(quotient.map(|terms| {
        let named = |(number, c)| (layout.monomial(number), c);
        terms.into_iter().map(named).collect()
    }))
}

/// Division with a heap of pending products, one for each term of the quotient (M. Monagan & R. Pearce, *Sparse
/// polynomial division using a heap*, J. Symbolic Comput. 46 (2011) 807–822).
fn keyed_quotient<K: Ord + Clone>(
    (dividend, dividend_keys): (&[Term], &[K]),
    (divisor, divisor_keys): (&[Term], &[K]),
    multiply: impl Fn(&K, &K) -> Option<K>,
    divide: impl Fn(&K, &K) -> Option<K>,
    meter: &mut Meter<'_>,
) -> Result<Option<Vec<(K, Integer)>>, Stop> {
    let lead = &divisor[0].1;
    // Quotients are mostly no longer than their dividends.
    let effort = effort(longest(dividend), longest(divisor));
    let mut quotient: Vec<(K, Integer)> = Vec::new();
    // The entry (key, i) stands for quotient[i]·divisor[next[i]].
    let mut heap: BinaryHeap<(K, usize)> = BinaryHeap::new();
    let mut next: Vec<usize> = Vec::new();
    let mut position = 0;
    loop {
        let top = match (dividend_keys.get(position), heap.peek()) {
            (None, None) => return Ok(Some(quotient)),
            (Some(key), None) => key.clone(),
            (None, Some((key, _))) => key.clone(),
            (Some(a), Some((b, _))) => a.max(b).clone(),
        };
        let mut rest = Integer::ZERO;
        if dividend_keys.get(position) == Some(&top) {
            rest = dividend[position].1.clone();
            position += 1;
        }
        while let Some(mut entry) = heap.peek_mut()
            && entry.0 == top
        {
            let i = entry.1;
            let j = next[i];
            meter.work(effort)?;
            rest.sub_product(&quotient[i].1, &divisor[j].1);
            next[i] = j + 1;
            match divisor_keys.get(j + 1) {
                Some(key) => entry.0 = multiply(&quotient[i].0, key).ok_or(Stop::SizeLimit)?,
                None => {
                    PeekMut::pop(entry);
                }
            }
        }
        if rest.is_zero() {
            continue;
        }
        let Some(key) = divide(&top, &divisor_keys[0]) else {
            return Ok(None);
        };
        let (value, remainder) = rest.div_rem_euclid(lead);
        if !remainder.is_zero() {
            return Ok(None);
        }
        meter.term(&value)?;
        if let Some(second) = divisor_keys.get(1) {
            let product = multiply(&key, second).ok_or(Stop::SizeLimit)?;
            heap.push((product, quotient.len()));
        }
        next.push(1);
        quotient.push((key, value));
    }
}
