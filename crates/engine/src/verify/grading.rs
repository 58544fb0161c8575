//! The check of gradings.

use super::expansion::Expansion;
use crate::prepare::Prepared;
use crate::record::GradingRecord;
use linform_scalar::published::{BigInt, Zero};

/// Do the weights make every element homogeneous, and the derivation too?
pub(super) fn grading_is_right(
    grading: &GradingRecord,
    prepared: &Prepared,
    elements: &[(Expansion, Option<usize>)],
) -> bool {
    let Ok(modulus) = grading.modulus.parse::<BigInt>() else {
        return false;
    };
    let Ok(derivation) = grading.derivation.parse::<BigInt>() else {
        return false;
    };
    let weights: Option<Vec<BigInt>> = prepared
        .symbols
        .iter()
        .map(|name| {
            grading
                .weights
                .get(name)
                .and_then(|weight| weight.parse().ok())
        })
        .collect();
    let Some(weights) = weights else { return false };
    let vanishes = |value: BigInt| {
        if modulus.is_zero() {
            value.is_zero()
        } else {
            (value % &modulus).is_zero()
        }
    };
    let weight = |exponents: &[u32]| -> BigInt {
        exponents
            .iter()
            .zip(&weights)
            .map(|(e, w)| w * BigInt::from(*e))
            .sum()
    };
    // The variable has derivative 1, of weight 0.
    if prepared
        .variable()
        .is_some_and(|variable| !vanishes(&weights[variable] + &derivation))
    {
        return false;
    }
    elements.iter().all(|(element, generator)| {
        let mut terms = element.monomials().map(weight);
        match generator {
            Some(generator) => {
                let expected = &weights[*generator] + &derivation;
                terms.all(|found| vanishes(found - &expected))
            }
            None => match terms.next() {
                Some(first) => terms.all(|found| vanishes(found - &first)),
                None => true,
            },
        }
    })
}
