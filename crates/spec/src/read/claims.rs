//! `[[claim]]`

use super::draft::{Draft, placeholder};
use super::lost::Lost;
use super::section::{Entry, Section, shorten};
use super::{expression, terms};
use crate::claim::{Claim, Coefficients, Target, Verdict, Yield};
use crate::collect::Collector;
use crate::index::{MAX_EXPONENT, MAX_INSTANCES};
use crate::parser;
use crate::source::Diagnostic;
use crate::terms::Terms;

const KEYS: [&str; 15] = [
    "name",
    "for",
    "target",
    "derivative",
    "data",
    "at",
    "value",
    "error",
    "terms",
    "coefficients",
    "expect",
    "yields",
    "at_most",
    "degree",
    "weight",
];

/// The keys that belong to claims about numbers.
const DATA_KEYS: [&str; 5] = ["at", "value", "error", "degree", "weight"];

pub(crate) fn read(section: &Section<'_>, draft: &mut Draft, errors: &mut Collector) {
    let before = errors.count();
    section.allow(&KEYS, errors);
    let name = name(section, draft, errors);
    let owner = format!("claim `{}`", shorten(&name));
    let clauses = section.get("for").map(|entry| {
        let text = entry.text(errors)?;
        errors.take(parser::clauses(&text.value, &text.place))
    });
    if clauses == Some(None)
        && let Some(entry) = section.get("for")
    {
        let mut indices = Lost::default();
        indices.value(entry.value);
        let words = indices.into_names();
        draft.unreadable_claims.insert(draft.claims.len(), words);
    }
    let (sweeps, conditions) = clauses.flatten().unwrap_or_default();
    let target = target(section, errors);
    let terms = section
        .require("terms", "terms = \"ratio(F,n) for n = 1..4\"", errors)
        .and_then(|entry| terms(entry, owner.clone(), errors));
    let coefficients = section
        .get("coefficients")
        .and_then(|entry| entry.word(&Coefficients::ALL, errors))
        .unwrap_or_default();
    let expect = section
        .get("expect")
        .and_then(|entry| entry.word(&Verdict::ALL, errors))
        .unwrap_or_default();
    let most = i64::try_from(MAX_INSTANCES).unwrap_or(i64::MAX);
    let at_most = section
        .get("at_most")
        .and_then(|entry| entry.integer(1, most, errors));
    let degree = section
        .get("degree")
        .and_then(|entry| entry.integer(0, MAX_EXPONENT, errors));
    let weight = section
        .get("weight")
        .and_then(|entry| entry.integer(i64::MIN, i64::MAX, errors));
    let yields = section
        .get("yields")
        .and_then(|entry| entry.section("yields", errors))
        .map_or_else(Vec::new, |table| yields(&table, &owner, draft, errors));
    let claim = Claim {
        sweeps,
        conditions,
        target: target.unwrap_or_else(|| Target::Value(placeholder(section.span))),
        terms: terms.unwrap_or_else(|| Terms {
            items: Vec::new(),
            owner,
            span: section.span,
        }),
        coefficients,
        expect,
        yields,
        at_most,
        degree,
        weight,
        name,
        span: section.span,
    };
    check_open(section, &claim, errors);
    if errors.count() > before {
        draft.flawed_claims.insert(draft.claims.len());
    }
    draft.claims.push(claim);
}

fn name(section: &Section<'_>, draft: &mut Draft, errors: &mut Collector) -> String {
    let Some(text) = section
        .require("name", "name = \"…\"", errors)
        .and_then(|entry| entry.text(errors))
    else {
        return String::new();
    };
    if text.value.trim().is_empty() {
        errors.push(
            Diagnostic::new("the name of this claim is empty", text.span)
                .help("results are listed under the name"),
        );
    } else if text.value.chars().any(char::is_control) {
        errors.push(
            Diagnostic::new("the name of this claim does not fit on a line", text.span)
                .help("leave line breaks and control characters out"),
        );
    } else if let Some(first) = draft.claim_spans.get(&text.value) {
        errors.push(
            Diagnostic::new(
                format!("two claims are called `{}`", shorten(&text.value)),
                text.span,
            )
            .also(*first, "the first")
            .help("results are listed under the name: choose another"),
        );
    } else {
        draft.claim_spans.insert(text.value.clone(), text.span);
    }
    text.value
}

fn target(section: &Section<'_>, errors: &mut Collector) -> Option<Target> {
    let given: Vec<&Entry<'_>> = ["target", "derivative", "data"]
        .into_iter()
        .filter_map(|key| section.get(key))
        .collect();
    let entry = match given[..] {
        [entry] => entry,
        [] => {
            errors.push_absence(
                Diagnostic::new("[[claim]] has no `target`", section.span).help(
                    "add `target = \"…\"`, or `derivative = \"…\"`, or `data = \"file.csv\"`",
                ),
            );
            return None;
        }
        [first, second, ..] => {
            errors.push(
                Diagnostic::new(
                    format!(
                        "a claim has one target: both `{}` and `{}` are given",
                        first.key, second.key
                    ),
                    second.key_span,
                )
                .also(first.key_span, "given here too")
                .help("take one of them away"),
            );
            return None;
        }
    };
    let text = entry.text(errors);
    if entry.key == "data" {
        let at = column(section, "at", "at = \"t\"", errors);
        let value = column(section, "value", "value = \"G\"", errors);
        let error = section.get("error").and_then(|entry| filled(entry, errors));
        section.require("degree", "degree = 4", errors);
        // What is missing is noted; the claim is about numbers all the same.
        return Some(Target::Data {
            path_span: entry.value_span(),
            path: text.map(|text| text.value).unwrap_or_default(),
            at: at.unwrap_or_default(),
            value: value.unwrap_or_default(),
            error,
        });
    }
    for key in DATA_KEYS {
        if let Some(stray) = section.get(key) {
            errors.push(
                Diagnostic::new(
                    format!("`{key}` belongs to a claim about numbers"),
                    stray.key_span,
                )
                .also(entry.key_span, "this claim has an exact target")
                .help(format!(
                    "take `{key}` away, or give `data` in place of `{}`",
                    entry.key
                )),
            );
        }
    }
    let expr = expression(&text?, errors);
    Some(if entry.key == "derivative" {
        Target::Derivative(expr)
    } else {
        Target::Value(expr)
    })
}

/// The name of a column under a required key.
fn column(
    section: &Section<'_>,
    key: &str,
    example: &str,
    errors: &mut Collector,
) -> Option<String> {
    let entry = section.require(key, example, errors)?;
    filled(entry, errors)
}

fn filled(entry: &Entry<'_>, errors: &mut Collector) -> Option<String> {
    let text = entry.text(errors)?;
    if text.value.trim().is_empty() {
        errors.push(
            Diagnostic::new(format!("`{}` names no column", entry.key), text.span)
                .help("give a name from the header of the data"),
        );
        return None;
    }
    Some(text.value)
}

/// The elements that a claim yields.
fn yields(
    table: &Section<'_>,
    owner: &str,
    draft: &mut Draft,
    errors: &mut Collector,
) -> Vec<Yield> {
    table
        .entries()
        .iter()
        .filter_map(|entry| {
            let key = entry.key_text();
            let left = errors.take(parser::left_of_yields(&key.value, &key.place));
            let terms = terms(
                entry,
                format!("`{}`, yielded by {owner},", shorten(entry.key)),
                errors,
            );
            let (Some(left), Some(terms)) = (left, terms) else {
                draft.lost.text(&key.value);
                return None;
            };
            Some(Yield {
                family: left.family,
                pattern: left.pattern,
                pattern_spans: left.pattern_spans,
                terms,
                span: key.place.whole(),
            })
        })
        .collect()
}

/// Open ranges need a bound, and a bound needs an open range.
fn check_open(section: &Section<'_>, claim: &Claim, errors: &mut Collector) {
    let open = claim
        .terms
        .items
        .iter()
        .flat_map(|item| &item.sweeps)
        .filter(|sweep| sweep.end.is_none());
    let open: Vec<_> = open.collect();
    if let [_, second, ..] = open[..] {
        errors.push(
            Diagnostic::new("two open ranges in one list of terms", second.span)
                .also(open[0].span, "the first")
                .help("one length is sought: give all other ranges an end"),
        );
    }
    match (open.first(), section.get("at_most")) {
        (Some(sweep), None) if !claim.is_open() => errors.push(
            Diagnostic::new(
                "this range has no end, and the claim no `at_most`",
                sweep.span,
            )
            .help("add `at_most = 12`: lengths up to it are tried, or write the end, as in `1..8`"),
        ),
        (None, Some(entry)) if claim.at_most.is_some() && !claim.terms.items.is_empty() => errors
            .push(
            Diagnostic::new(
                "`at_most` bounds an open range, but no range is open",
                entry.key_span,
            )
            .help("leave the end of a range in the terms out, as in `1..`, or take `at_most` away"),
        ),
        _ => {}
    }
}
