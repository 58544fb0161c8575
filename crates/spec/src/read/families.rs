//! `[family.NAME]`

use super::draft::{Draft, DraftFamily};
use super::names::declared_key;
use super::section::{Entry, shorten};
use super::{count_indices, redefinition, terms};
use crate::collect::Collector;
use crate::family::{Family, Known, Rule};
use crate::parser;
use crate::source::Diagnostic;

/// The most rules of a family.
const MAX_RULES: usize = 1000;

pub(crate) fn read(entry: &Entry<'_>, draft: &mut Draft, errors: &mut Collector) {
    let name = declared_key(entry, errors);
    let Some(section) = entry.section(format!("[family.{}]", shorten(entry.key)), errors) else {
        draft.lost.text(entry.key);
        return;
    };
    section.allow(&["symmetric", "rules", "primitive_terms"], errors);
    let symmetric = section
        .get("symmetric")
        .and_then(|entry| entry.boolean(errors))
        .unwrap_or(false);
    let primitive_terms = section.get("primitive_terms").and_then(|entry| {
        terms(
            entry,
            format!("the primitive step of {}", section.name),
            errors,
        )
    });
    let texts = section
        .require(
            "rules",
            "rules = [\"a[0] = …\", \"a[j] = … for j >= 1\"]",
            errors,
        )
        .and_then(|entry| entry.texts(true, errors).map(|texts| (entry, texts)));
    let Some(name) = name else {
        draft.lost.text(entry.key);
        return;
    };
    let mut rules: Vec<Rule> = Vec::new();
    if let Some((rules_entry, texts)) = texts {
        if texts.is_empty() {
            errors.push(
                Diagnostic::new(
                    format!("the family `{}` has no rules", name.name),
                    rules_entry.value_span(),
                )
                .help("write at least one, such as `\"a[0] = q\"`"),
            );
        }
        if texts.len() > MAX_RULES {
            errors.push(
                Diagnostic::new(
                    format!("{} rules in one family", texts.len()),
                    rules_entry.value_span(),
                )
                .help(format!("a family has at most {MAX_RULES} rules")),
            );
        }
        for text in texts.iter().take(MAX_RULES) {
            let Some((left, rule)) = errors.take(parser::rule(&text.value, &text.place)) else {
                continue;
            };
            if left != name.name {
                errors.push(
                    Diagnostic::new(
                        format!("a rule for `{}` in {}", shorten(&left), section.name),
                        text.place.span(0, left.len()),
                    )
                    .help(format!("begin with `{}[…] =`, or move the rule", name.name)),
                );
                continue;
            }
            if let Some(first) = rules.first()
                && first.pattern.len() != rule.pattern.len()
            {
                errors.push(
                    Diagnostic::new(
                        format!(
                            "`{}` has {} here",
                            name.name,
                            count_indices(rule.pattern.len())
                        ),
                        text.place.whole(),
                    )
                    .also(first.span, format!("and {} here", first.pattern.len()))
                    .help("all rules of a family have the same number of indices"),
                );
                continue;
            }
            if rule.known == Known::Derivative && section.get("primitive_terms").is_none() {
                errors.push(
                    Diagnostic::new(
                        "this rule gives a derivative, but the family has no `primitive_terms`",
                        text.place.whole(),
                    )
                    .help("say in which terms the primitive is sought: `primitive_terms = \"ratio(F,n) for n = 1..j+1\"`"),
                );
            }
            rules.push(rule);
        }
    }
    if let Some(there) = draft.families.get(&name.name) {
        errors.push(redefinition(
            &format!("the family `{}`", name.name),
            name.span,
            there.family.span,
        ));
        return;
    }
    let arity = rules.first().map(|rule| rule.pattern.len());
    let family = Family {
        name: name.name.clone(),
        arity: arity.unwrap_or(0),
        symmetric,
        rules,
        primitive_terms,
        span: entry.key_span,
    };
    draft
        .families
        .insert(name.name, DraftFamily { family, arity });
}
