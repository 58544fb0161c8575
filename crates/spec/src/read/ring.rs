//! `[ring]` and `[ring.derivative]`.

use super::draft::{Draft, placeholder};
use super::names::{Primes, declared};
use super::section::Section;
use super::{expression, redefinition};
use crate::collect::Collector;
use crate::source::Diagnostic;
use crate::suggest::did_you_mean;
use std::collections::HashSet;

/// The most generators, and the most constants.
const MAX_SYMBOLS: usize = 1000;

/// The keys of `[ring]`.
pub(crate) const KEYS: [&str; 4] = ["variable", "constants", "generators", "derivative"];

pub(crate) fn read(section: &Section<'_>, draft: &mut Draft, errors: &mut Collector) {
    section.allow(&KEYS, errors);
    for entry in section.entries().iter().filter(|e| !KEYS.contains(&e.key)) {
        match did_you_mean(entry.key, KEYS).as_deref() {
            Some("derivative") => draft.lost.derivation = true,
            near => {
                draft.lost.variable |= near.is_none_or(|key| key == "variable");
                draft.lost.value(entry.value);
            }
        }
    }
    if let Some(entry) = section.get("constants") {
        match entry.texts(false, errors) {
            Some(texts) => {
                for text in texts {
                    match declared(&text, Primes::Refused, errors) {
                        Some(name) => draft.constants.push(name),
                        None => draft.lost.text(&text.value),
                    }
                }
            }
            None => draft.lost.value(entry.value),
        }
    }
    check_size(section, draft, errors);
    if let Some(there) = draft.ring {
        // Constants may be added to an included ring; nothing else may change.
        let mut again = ["variable", "generators", "derivative"]
            .into_iter()
            .filter_map(|key| section.get(key));
        if let Some(entry) = again.next() {
            errors.push(redefinition("the ring", entry.key_span, there));
        }
        for key in ["variable", "generators"] {
            if let Some(entry) = section.get(key) {
                draft.lost.value(entry.value);
            }
        }
        return;
    }
    draft.ring = Some(section.span);
    if let Some(entry) = section.get("variable") {
        draft.variable = entry
            .text(errors)
            .and_then(|text| declared(&text, Primes::Refused, errors));
        if draft.variable.is_none() {
            draft.lost.variable = true;
            draft.lost.value(entry.value);
        }
    }
    match section.require("generators", "generators = [\"q\", \"q'\"]", errors) {
        Some(entry) => match entry.texts(false, errors) {
            Some(texts) => {
                for text in texts {
                    match declared(&text, Primes::Allowed, errors) {
                        Some(name) => draft.generators.push(name),
                        None => draft.lost.text(&text.value),
                    }
                }
            }
            None => draft.lost.value(entry.value),
        },
        None => draft.lost.symbols = true,
    }
    check_size(section, draft, errors);
    if let Some(entry) = section.get("derivative") {
        match entry.section("[ring.derivative]", errors) {
            Some(derivative) => read_derivatives(&derivative, draft, errors),
            None => draft.lost.derivation = true,
        }
    }
    check_derivatives(section, draft, errors);
}

/// Notes a ring with too many symbols.
fn check_size(section: &Section<'_>, draft: &mut Draft, errors: &mut Collector) {
    if draft.generators.len().max(draft.constants.len()) > MAX_SYMBOLS {
        errors.push(
            Diagnostic::new("too many symbols", section.span).help(format!(
                "a ring has at most {MAX_SYMBOLS} generators and as many constants"
            )),
        );
        draft.generators.truncate(MAX_SYMBOLS);
        draft.constants.truncate(MAX_SYMBOLS);
        draft.lost.everything = true;
    }
}

fn read_derivatives(section: &Section<'_>, draft: &mut Draft, errors: &mut Collector) {
    for entry in section.entries() {
        let key = declared(&entry.key_text(), Primes::Allowed, errors);
        let value = entry.text(errors).map(|text| expression(&text, errors));
        let Some(key) = key else {
            draft.lost.derivative(entry.key);
            continue;
        };
        let value = value.unwrap_or_else(|| placeholder(entry.key_span));
        if let Some((there, _)) = draft.derivatives.get(&key.name) {
            errors.push(
                Diagnostic::new(
                    format!("the derivative of `{}` is given twice", key.name),
                    entry.key_span,
                )
                .also(*there, "first here")
                .help("take one of them away"),
            );
            continue;
        }
        draft.derivatives.insert(key.name, (entry.key_span, value));
    }
}

/// The derivation gives the derivative of every generator and of nothing else.
fn check_derivatives(section: &Section<'_>, draft: &Draft, errors: &mut Collector) {
    let mut seen = HashSet::new();
    for generator in &draft.generators {
        let given = draft.derivatives.contains_key(&generator.name)
            || draft.lost.hides_derivative(&generator.name);
        if seen.insert(&generator.name) && !given {
            errors.push_absence(
                Diagnostic::new(
                    format!("the derivation misses the generator `{}`", generator.name),
                    generator.span,
                )
                .help(format!(
                    "add `\"{}\" = \"…\"` to [ring.derivative]",
                    generator.name
                )),
            );
        }
    }
    for (name, (span, _)) in &draft.derivatives {
        let generators = || draft.generators.iter().map(|g| g.name.as_str());
        if errors.is_full()
            || draft.lost.hides_symbol(name)
            || generators().any(|generator| generator == name)
        {
            continue;
        }
        let help = if draft.variable.as_ref().is_some_and(|v| v.name == *name) {
            "the derivative of the variable is 1, always".to_owned()
        } else if draft.constants.iter().any(|c| c.name == *name) {
            "the derivative of a constant is 0, always".to_owned()
        } else if let Some(near) = did_you_mean(name, generators()) {
            format!("did you mean `{near}`?")
        } else {
            format!("add it to the generators of {}", section.name)
        };
        errors.push_absence(
            Diagnostic::new(format!("`{name}` is not a generator"), *span).help(help),
        );
    }
}
