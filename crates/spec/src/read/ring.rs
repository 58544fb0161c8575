//! `[ring]` and `[ring.derivative]`.

use super::draft::Draft;
use super::names::{Primes, declared};
use super::section::Section;
use super::{expression, redefinition};
use crate::collect::Collector;
use crate::source::Diagnostic;
use crate::suggest::did_you_mean;

/// The most generators, and the most constants.
const MAX_SYMBOLS: usize = 1000;

pub(crate) fn read(section: &Section<'_>, draft: &mut Draft, errors: &mut Collector) {
    let keys = ["variable", "constants", "generators", "derivative"];
    if !section.allow(&keys, errors) {
        draft.incomplete = true;
    }
    if let Some(entry) = section.get("constants") {
        match entry.texts(false, errors) {
            Some(texts) => {
                for text in texts {
                    draft
                        .constants
                        .extend(declared(&text, Primes::Refused, errors));
                }
            }
            None => draft.incomplete = true,
        }
    }
    check_size(section, draft, errors);
    if let Some(there) = draft.ring {
        // Constants may be added to an included ring; nothing else may change.
        for key in ["variable", "generators", "derivative"] {
            if let Some(entry) = section.get(key) {
                errors.push(redefinition("the ring", entry.key_span, there));
            }
        }
        return;
    }
    draft.ring = Some(section.span);
    if let Some(text) = section.get("variable").and_then(|e| e.text(errors)) {
        draft.variable = declared(&text, Primes::Refused, errors);
        draft.incomplete |= draft.variable.is_none();
    }
    let generators = section
        .require("generators", "generators = [\"q\", \"q'\"]", errors)
        .and_then(|entry| entry.texts(false, errors));
    match generators {
        Some(texts) => {
            for text in texts {
                match declared(&text, Primes::Allowed, errors) {
                    Some(name) => draft.generators.push(name),
                    None => draft.incomplete = true,
                }
            }
        }
        None => draft.incomplete = true,
    }
    check_size(section, draft, errors);
    if let Some(derivative) = section.section("derivative", "[ring.derivative]", errors) {
        read_derivatives(&derivative, draft, errors);
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
        draft.incomplete = true;
    }
}

fn read_derivatives(section: &Section<'_>, draft: &mut Draft, errors: &mut Collector) {
    for entry in section.entries() {
        let key = declared(&entry.key_text(), Primes::Allowed, errors);
        let value = entry.text(errors).map(|text| expression(&text, errors));
        let (Some(key), Some(value)) = (key, value) else {
            draft.incomplete = true;
            continue;
        };
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
    if draft.incomplete {
        return;
    }
    for generator in &draft.generators {
        if !draft.derivatives.contains_key(&generator.name) {
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
        if errors.is_full() || generators().any(|generator| generator == name) {
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
