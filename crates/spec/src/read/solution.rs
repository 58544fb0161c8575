//! `[solution]`

use super::draft::Draft;
use super::names::{Primes, declared};
use super::redefinition;
use super::section::{Entry, Section, Text, shorten};
use crate::collect::Collector;
use crate::model::{Decimal, Solution, SolutionKind};
use crate::parser;
use crate::source::Diagnostic;
use crate::suggest::did_you_mean;
use indexmap::IndexMap;
use linform_scalar::{Rational, rational_of_decimal};

pub(crate) fn read(section: &Section<'_>, draft: &mut Draft, errors: &mut Collector) {
    if let Some(there) = &draft.solution {
        errors.push(redefinition("the solution", section.span, there.span));
        return;
    }
    let kind = match (section.get("decays_like"), section.get("at")) {
        (Some(decay), None) => {
            section.allow(&["decays_like"], errors);
            decay
                .text(errors)
                .and_then(|text| errors.take(parser::expression(&text.value, &text.place)))
                .map(SolutionKind::DecaysLike)
        }
        (None, Some(at)) => initial_values(section, at, draft, errors),
        (Some(decay), Some(at)) => {
            errors.push(
                Diagnostic::new("the solution is singled out twice", at.key_span)
                    .also(decay.key_span, "and here")
                    .help("give either `decays_like`, or `at` with initial values"),
            );
            None
        }
        (None, None) => {
            errors.push_absence(
                Diagnostic::new("[solution] does not say which solution", section.span)
                    .help("add `decays_like = \"Ai(t)\"`, or `at = \"0\"` and a value for every generator"),
            );
            None
        }
    };
    draft.solution = kind.map(|kind| Solution {
        kind,
        span: section.span,
    });
}

/// `at` and a value for each generator, in the order of the generators.
fn initial_values(
    section: &Section<'_>,
    at: &Entry<'_>,
    draft: &Draft,
    errors: &mut Collector,
) -> Option<SolutionKind> {
    let at = at.text(errors).and_then(|text| decimal(&text, errors));
    let mut given = IndexMap::new();
    for entry in section.entries().iter().filter(|entry| entry.key != "at") {
        let Some(name) = declared(&entry.key_text(), Primes::Allowed, errors) else {
            continue;
        };
        let generators = || draft.generators.iter().map(|g| g.name.as_str());
        if errors.is_full() {
            return None;
        }
        if !generators().any(|generator| generator == name.name) {
            if draft.lost.hides_symbol(&name.name) {
                continue;
            }
            let help = match did_you_mean(&name.name, generators().chain(["decays_like"])) {
                Some(near) => format!("did you mean `{near}`?"),
                None => "[solution] takes `at` and one value for each generator".to_owned(),
            };
            errors.push_absence(
                Diagnostic::new(
                    format!("unknown key `{}` in [solution]", shorten(entry.key)),
                    entry.key_span,
                )
                .help(help),
            );
            continue;
        }
        if let Some(value) = entry.text(errors).and_then(|text| decimal(&text, errors)) {
            given.insert(name.name, value);
        }
    }
    let mut values = IndexMap::new();
    for generator in &draft.generators {
        if errors.is_full() {
            return None;
        }
        match given.swap_remove(&generator.name) {
            Some(value) => {
                values.insert(generator.name.clone(), value);
            }
            None if section.entries().iter().any(|e| e.key == generator.name) => {}
            None => errors.push_absence(
                Diagnostic::new(
                    format!("[solution] gives no value of `{}`", generator.name),
                    section.span,
                )
                .help(format!("add `\"{}\" = \"…\"`", generator.name)),
            ),
        }
    }
    Some(SolutionKind::Initial { at: at?, values })
}

/// A decimal, or a fraction `a/b`.
fn decimal(text: &Text, errors: &mut Collector) -> Option<Decimal> {
    let value = text.value.trim();
    // Longer fractions than this are refused before they are parsed.
    const LONGEST: usize = 100_000;
    let parsed = rational_of_decimal(value).ok().or_else(|| {
        (value.len() <= LONGEST)
            .then(|| value.parse::<Rational>().ok())
            .flatten()
    });
    if parsed.is_none() {
        errors.push(
            Diagnostic::new(
                format!("`{}` is not a number", shorten(&text.value)),
                text.place.whole(),
            )
            .help("write a decimal such as `-0.295`, or a fraction such as `1/3`"),
        );
    }
    parsed.map(|parsed| Decimal {
        text: value.to_owned(),
        value: parsed,
        span: text.place.whole(),
    })
}
