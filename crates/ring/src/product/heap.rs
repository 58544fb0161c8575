//! Products term by term, in order.

use crate::Monomial;
use crate::layout::Layout;
use crate::meter::{Meter, effort, longest};
use crate::polynomial::Term;
use linform_scalar::{Integer, Stop};
use std::collections::BinaryHeap;
use std::collections::binary_heap::PeekMut;

/// The product with a heap that holds the highest pending product for each term of the shorter factor
/// (S. C. Johnson, SIGSAM Bull. 8 (1974) 63–71; M. Monagan & R. Pearce, CASC 2007).
pub(super) fn product(
    layout: Option<&Layout>,
    short: &[Term],
    long: &[Term],
    meter: &mut Meter<'_>,
) -> Result<Vec<Term>, Stop> {
    match layout {
        Some(layout) => {
            let (a, b) = (layout.numbers(short), layout.numbers(long));
            let keyed = keyed_product(short, &a, long, &b, |x, y| Some(x + y), meter)?;
            Ok(keyed
                .into_iter()
                .map(|(number, coefficient)| (layout.monomial(number), coefficient))
                .collect())
        }
        None => {
            let keys = |terms: &[Term]| terms.iter().map(|(m, _)| m.clone()).collect::<Vec<_>>();
            let (a, b) = (keys(short), keys(long));
            keyed_product(short, &a, long, &b, Monomial::checked_mul, meter)
        }
    }
}

fn keyed_product<K: Ord + Clone>(
    short: &[Term],
    short_keys: &[K],
    long: &[Term],
    long_keys: &[K],
    multiply: impl Fn(&K, &K) -> Option<K>,
    meter: &mut Meter<'_>,
) -> Result<Vec<(K, Integer)>, Stop> {
    let key = |i: usize, j: usize| multiply(&short_keys[i], &long_keys[j]).ok_or(Stop::SizeLimit);
    let effort = effort(longest(short), longest(long));
    let mut result = Vec::with_capacity(long.len());
    // For each term of the short factor, the next term of the long one.
    let mut next = vec![0usize; short.len()];
    let mut heap = BinaryHeap::with_capacity(short.len());
    heap.push((key(0, 0)?, 0usize));
    while let Some((top, _)) = heap.peek() {
        let top = top.clone();
        let mut sum = Integer::ZERO;
        loop {
            let Some(mut entry) = heap.peek_mut() else {
                break;
            };
            if entry.0 != top {
                break;
            }
            let i = entry.1;
            let j = next[i];
            meter.work(effort)?;
            sum.add_product(&short[i].1, &long[j].1);
            next[i] = j + 1;
            if j + 1 < long.len() {
                entry.0 = key(i, j + 1)?;
                drop(entry);
            } else {
                PeekMut::pop(entry);
            }
            // Row i + 1 starts below row i: it enters when the first product of row i leaves.
            if j == 0 && i + 1 < short.len() {
                heap.push((key(i + 1, 0)?, i + 1));
            }
        }
        if !sum.is_zero() {
            meter.term(&sum)?;
            result.push((top, sum));
        }
    }
    Ok(result)
}
