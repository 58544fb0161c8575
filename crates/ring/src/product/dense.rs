//! Products with one accumulator for each monomial of the box.

use crate::layout::Layout;
use crate::meter::{Meter, effort, longest};
use crate::polynomial::Term;
use linform_scalar::{Integer, Stop};

/// The accumulators that are not 0, as terms.
pub(crate) fn collect<T>(
    layout: &Layout,
    accumulators: Vec<T>,
    is_zero: impl Fn(&T) -> bool,
    value: impl Fn(T) -> Integer,
    meter: &mut Meter<'_>,
) -> Result<Vec<Term>, Stop> {
    let count = accumulators.iter().filter(|sum| !is_zero(sum)).count();
    let mut terms = Vec::with_capacity(count);
    for (number, sum) in accumulators.into_iter().enumerate().rev() {
        if !is_zero(&sum) {
            let coefficient = value(sum);
            meter.term(&coefficient)?;
            terms.push((layout.monomial(number as u64), coefficient));
        }
    }
    Ok(terms)
}

/// The coefficients as words, with their numbers; only for coefficients that are words.
pub(crate) fn words(layout: &Layout, terms: &[Term]) -> Vec<(usize, i64)> {
    terms
        .iter()
        .map(|(monomial, coefficient)| {
            let word = coefficient.to_i64();
            let word = word.expect("the choice looked at all lengths");
            (layout.number(monomial) as usize, word)
        })
        .collect()
}

/// For coefficients of one word whose sums of products fit into two.
pub(super) fn product_words(
    layout: &Layout,
    short: &[Term],
    long: &[Term],
    meter: &mut Meter<'_>,
) -> Result<Vec<Term>, Stop> {
    let square = short == long;
    let (short, long) = (words(layout, short), words(layout, long));
    let mut sums = vec![0i128; layout.size() as usize];
    for (index, &(start, a)) in short.iter().enumerate() {
        // The products of a square are formed once for each pair.
        let from = if square { index + 1 } else { 0 };
        for piece in long[from..].chunks(1 << 12) {
            meter.work(piece.len())?;
            for &(number, b) in piece {
                sums[start + number] += i128::from(a) * i128::from(b);
            }
        }
    }
    if square {
        sums.iter_mut().for_each(|sum| *sum *= 2);
        for &(number, a) in &short {
            sums[2 * number] += i128::from(a) * i128::from(a);
        }
    }
    collect(layout, sums, |&sum| sum == 0, Integer::from, meter)
}

/// For coefficients of any length.
pub(super) fn product_integers(
    layout: &Layout,
    short: &[Term],
    long: &[Term],
    meter: &mut Meter<'_>,
) -> Result<Vec<Term>, Stop> {
    let numbers = layout.numbers(long);
    let effort = effort(longest(short), longest(long));
    let mut accumulators = vec![Integer::ZERO; layout.size() as usize];
    for (monomial, a) in short {
        let start = layout.number(monomial);
        for ((_, b), number) in long.iter().zip(&numbers) {
            meter.work(effort)?;
            accumulators[(start + number) as usize].add_product(a, b);
        }
    }
    collect(layout, accumulators, Integer::is_zero, |sum| sum, meter)
}
