//! The sweeps of a spec, run through once: empty sweeps and empty forms are found before any algebra.

use crate::claim::Claim;
use crate::collect::Collector;
use crate::source::Diagnostic;

/// The most combinations of indices tried in one spec. What is not reached is checked when it is solved.
const BUDGET: usize = 20_000;

/// Notes claims without instances, and instances without terms.
pub(crate) fn rehearse(claims: &[&Claim], errors: &mut Collector) {
    let mut left = BUDGET;
    for claim in claims {
        if claim.is_open() || left == 0 || errors.is_full() {
            continue;
        }
        if let Err(error) = rehearse_claim(claim, &mut left) {
            errors.push(error);
        }
    }
}

fn rehearse_claim(claim: &Claim, left: &mut usize) -> Result<(), Diagnostic> {
    let Some(instances) = claim.instances_within(*left)? else {
        *left = 0;
        return Ok(());
    };
    *left = left.saturating_sub(instances.len());
    for env in &instances {
        // An open range is never empty: it takes its first value at least.
        let Some(length) = claim.terms.count(env, Some(1), *left)? else {
            *left = 0;
            return Ok(());
        };
        *left = left.saturating_sub(length);
        for yielded in &claim.yields {
            let Some(other) = yielded.terms.count(env, Some(1), *left)? else {
                *left = 0;
                return Ok(());
            };
            *left = left.saturating_sub(other);
            if other != length && !claim.terms.is_open() {
                return Err(Diagnostic::new(
                    format!(
                        "{other} terms for {length} coefficients{}",
                        crate::index::describe(env)
                    ),
                    yielded.terms.span,
                )
                .also(claim.terms.span, "the coefficients belong to these terms")
                .help("give as many terms as the claim has"));
            }
        }
    }
    Ok(())
}
