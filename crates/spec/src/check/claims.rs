//! Claims.

use super::check_terms;
use super::names::Names;
use super::scope::{RangeOf, Scope, Where};
use crate::claim::{Claim, Target, Yield};
use crate::collect::Collector;
use crate::expression::{Condition, Expr, ExprKind, Relation};
use crate::family::Pattern;
use crate::index::{Environment, MAX_INSTANCES, index_value};
use crate::read::shorten;
use crate::source::{Diagnostic, Span};

/// Notes every mistake in a claim; `words` stand for its indices where these could not be read.
///
/// True if nothing is wrong apart from the target, so that the sweeps can be tried out.
pub(crate) fn check(
    names: &Names,
    claim: &Claim,
    words: &[String],
    errors: &mut Collector,
) -> bool {
    let before = errors.count();
    let place = match claim.target {
        Target::Data { .. } => Where::Data,
        Target::Value(_) | Target::Derivative(_) => Where::Ring,
    };
    let mut scope = Scope::new(names, place);
    scope.assumed = words;
    for (number, sweep) in claim.sweeps.iter().enumerate() {
        scope.later = &claim.sweeps[number..];
        scope.sweep(sweep, RangeOf::Listing, errors);
    }
    scope.later = &[];
    check_length(claim, errors);
    for condition in &claim.conditions {
        if let Some((name, name_span)) = value_of_unbound(&scope, condition) {
            errors.push(
                Diagnostic::new("this is not a range", condition.span).help(format!(
                    "a range is written `{} = 1..n`; one value is the range `3..3`",
                    shorten(name)
                )),
            );
            scope.indices.push((name.to_owned(), name_span));
            continue;
        }
        scope.condition(condition, errors);
    }
    check_terms(&mut scope, &claim.terms, errors);
    for yielded in &claim.yields {
        check_yield(names, claim, words, yielded, errors);
    }
    let right = errors.count() == before;
    match &claim.target {
        Target::Value(expr) | Target::Derivative(expr) => {
            scope.value(expr, errors);
        }
        Target::Data { .. } => {}
    }
    right
}

/// The variable in a condition `j = 3` when no range binds it.
fn value_of_unbound<'a>(scope: &Scope<'_>, condition: &'a Condition) -> Option<(&'a str, Span)> {
    match (&condition.operands[..], &condition.relations[..]) {
        (
            [
                Expr {
                    kind: ExprKind::Name { base, primes: 0 },
                    span,
                },
                _,
            ],
            [Relation::Equal],
        ) if !scope.binds(base) => Some((base, *span)),
        _ => None,
    }
}

/// Refuses a sweep whose literal ranges alone are far too long.
fn check_length(claim: &Claim, errors: &mut Collector) {
    let empty = Environment::new();
    let mut combinations = 1usize;
    for sweep in &claim.sweeps {
        let Some(end) = &sweep.end else { continue };
        if let (Ok(from), Ok(to)) = (index_value(&sweep.start, &empty), index_value(end, &empty))
            && from <= to
        {
            let width = usize::try_from(to.abs_diff(from)).unwrap_or(usize::MAX);
            combinations = combinations.saturating_mul(width.saturating_add(1));
        }
    }
    // Conditions may leave fewer; what they are tried on is bounded too, by `Claim::instances`.
    let most = if claim.conditions.is_empty() {
        MAX_INSTANCES
    } else {
        4 * MAX_INSTANCES
    };
    if combinations > most {
        errors.push(
            Diagnostic::new(
                format!(
                    "the sweep of claim `{}` has more than {MAX_INSTANCES} instances",
                    shorten(&claim.name)
                ),
                claim.sweep_span(),
            )
            .help("shorten the ranges, or split the claim"),
        );
    }
}

fn check_yield(
    names: &Names,
    claim: &Claim,
    words: &[String],
    yielded: &Yield,
    errors: &mut Collector,
) {
    if matches!(claim.target, Target::Data { .. }) {
        errors.push(
            Diagnostic::new("a claim about numbers yields nothing", yielded.span)
                .help("only coefficients that are proved or checked in the ring define elements"),
        );
        return;
    }
    let mut scope = Scope::new(names, Where::Ring);
    scope.assumed = words;
    for sweep in &claim.sweeps {
        scope
            .indices
            .push((sweep.variable.clone(), sweep.variable_span));
    }
    let mut unknown = false;
    for (pattern, span) in yielded.pattern.iter().zip(&yielded.pattern_spans) {
        if let Pattern::Variable(name) = pattern
            && !scope.binds(name)
        {
            unknown = true;
            let known = claim.sweeps.iter().map(|sweep| sweep.variable.as_str());
            names.note_unknown(
                "index variable",
                name,
                *span,
                known.collect(),
                "the indices on the left are numbers and index variables of the claim",
                errors,
            );
        }
    }
    for sweep in &claim.sweeps {
        let used = yielded
            .pattern
            .iter()
            .any(|pattern| matches!(pattern, Pattern::Variable(name) if *name == sweep.variable));
        if !used && !unknown {
            errors.push(
                Diagnostic::new(
                    format!(
                        "every value of `{}` yields the same element",
                        shorten(&sweep.variable)
                    ),
                    yielded.span,
                )
                .also(sweep.variable_span, "this index")
                .help("let all indices of the claim occur on the left"),
            );
        }
    }
    check_terms(&mut scope, &yielded.terms, errors);
}
