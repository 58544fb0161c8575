//! Certificates of inconsistency.

use crate::Certificate;
use crate::System;
use crate::profile::Contradiction;
use crate::residual::sum_of_products;
use crate::square::Quotients;
use linform_ring::Polynomial;
use linform_scalar::{Control, Stop};

/// The certificate `y = D·e_i − Σ λ_r·e_r` of a row `i` that is the combination `Σ (λ_r/D)·(row r)` of its support.
///
/// Not yet checked: whether the combination holds in all columns is for the caller to find out.
pub(crate) fn of_weights(
    system: &System,
    contradiction: &Contradiction,
    weights: Quotients,
    control: &dyn Control,
) -> Result<Certificate, Stop> {
    let weights = weights.without_content();
    let mut multipliers: Vec<(usize, Polynomial)> = contradiction
        .support
        .iter()
        .zip(&weights.numerators)
        .filter(|(_, weight)| !weight.is_zero())
        .map(|(&row, weight)| (row, -weight))
        .chain([(contradiction.row, weights.denominator)])
        .collect();
    multipliers.sort_by_key(|(row, _)| *row);
    let negative = multipliers
        .first()
        .and_then(|(_, multiplier)| multiplier.leading())
        .is_some_and(|(_, coefficient)| coefficient.is_negative());
    if negative {
        for (_, multiplier) in &mut multipliers {
            *multiplier = -&*multiplier;
        }
    }
    let products: Vec<(&Polynomial, &Polynomial)> = multipliers
        .iter()
        .map(|(row, multiplier)| (&system.rows()[*row].right, multiplier))
        .collect();
    let value = sum_of_products(&products, control)?;
    Ok(Certificate { multipliers, value })
}
