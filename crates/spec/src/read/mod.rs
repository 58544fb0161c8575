//! From files to a draft: structure, types, keys, and the syntax of every expression.

mod claims;
mod draft;
mod families;
mod include;
mod laws;
mod lost;
mod models;
mod names;
mod ring;
mod section;
mod solution;

pub(crate) use draft::{Declared, Draft, DraftFamily, DraftModel};
pub(crate) use include::{Read, read_files};
pub(crate) use lost::Lost;
pub(crate) use section::shorten;

use crate::collect::Collector;
use crate::expression::Expr;
use crate::parser;
use crate::source::{Diagnostic, Span};
use crate::suggest::did_you_mean;
use crate::terms::Terms;
use section::{Entry, File, Section, Text};
use toml::de::{DeTable, DeValue};

/// The keys at the top of a file.
const TOP: [&str; 8] = [
    "title", "include", "ring", "law", "solution", "family", "model", "claim",
];

/// Adds what one file says.
fn read_file(file: File<'_>, table: &DeTable<'_>, draft: &mut Draft, errors: &mut Collector) {
    let main = file.number == 0;
    let top = Section::new("the file", file.span(0..0), file, table);
    // Without a header, its keys seem to stand at the top: after a syntax error they are not told.
    let mut stray = Collector::default();
    if !top.allow(&TOP, &mut stray) {
        for entry in top.entries().iter().filter(|e| !TOP.contains(&e.key)) {
            lose(entry, draft);
        }
        errors.append_absences(stray);
    }
    if let Some(entry) = top.get("title") {
        let title = entry.text(errors);
        if main {
            draft.title = title.map(|title| title.value);
        }
    }
    if let Some(entry) = top.get("ring") {
        match entry.section("[ring]", errors) {
            Some(section) => ring::read(&section, draft, errors),
            None => draft.lost.ring(),
        }
    }
    // Without a table of laws, families or models it is open which there were to be.
    let tables = ["law", "family", "model"].into_iter();
    draft.lost.everything |= tables
        .filter_map(|kind| top.get(kind))
        .any(|entry| !matches!(entry.value.get_ref(), DeValue::Table(_)));
    for_each(&top, "law", errors, |entry, errors| {
        laws::read(entry, draft, errors);
    });
    if let Some(section) = top.section("solution", "[solution]", errors) {
        solution::read(&section, draft, errors);
    }
    for_each(&top, "family", errors, |entry, errors| {
        families::read(entry, draft, errors);
    });
    for_each(&top, "model", errors, |entry, errors| {
        models::read(entry, draft, errors);
    });
    // The claims of an included file are its own business.
    if main && let Some(entry) = top.get("claim") {
        for section in entry.sections("[[claim]]", errors) {
            if errors.is_full() {
                break;
            }
            claims::read(&section, draft, errors);
        }
    }
}

/// What is lost by an unknown key at the top, by what it seems to be meant for.
fn lose(entry: &Entry<'_>, draft: &mut Draft) {
    let near = did_you_mean(entry.key, TOP);
    match near.as_deref() {
        Some("title" | "solution") => {}
        Some("include") => draft.lost.everything = true,
        Some("ring") => draft.lost.ring(),
        Some(_) => draft.lost.value(entry.value),
        None => {
            draft.lost.value(entry.value);
            // The ring under another name, or without its header.
            let ring = match entry.value.get_ref() {
                DeValue::Table(table) => table.iter().any(|(key, _)| key.get_ref() == "generators"),
                _ => ring::KEYS.contains(&entry.key),
            };
            if ring {
                draft.lost.ring();
            }
        }
    }
}

/// Runs through the tables `[kind.NAME]`.
fn for_each(
    top: &Section<'_>,
    kind: &str,
    errors: &mut Collector,
    mut read: impl FnMut(&Entry<'_>, &mut Collector),
) {
    if let Some(section) = top.section(kind, format!("[{kind}]"), errors) {
        for entry in section.entries() {
            if errors.is_full() {
                break;
            }
            read(entry, errors);
        }
    }
}

/// The text as an expression.
fn expression(text: &Text, errors: &mut Collector) -> Expr {
    errors
        .take(parser::expression(&text.value, &text.place))
        .unwrap_or_else(|| draft::placeholder(text.span))
}

/// The expression under a required key.
fn required_expression(
    section: &Section<'_>,
    key: &str,
    example: &str,
    errors: &mut Collector,
) -> Expr {
    let text = section
        .require(key, example, errors)
        .and_then(|entry| entry.text(errors));
    match text {
        Some(text) => expression(&text, errors),
        None => draft::placeholder(section.span),
    }
}

/// The terms under a key.
fn terms(entry: &Entry<'_>, owner: String, errors: &mut Collector) -> Option<Terms> {
    let texts = entry.texts(true, errors)?;
    let span = entry.value_span();
    if texts.is_empty() {
        errors.push(
            Diagnostic::new(format!("the list of terms of {owner} is empty"), span)
                .help("a linear form has at least one term, such as `\"ratio(F,n) for n = 1..4\"`"),
        );
        return None;
    }
    let items: Vec<_> = texts
        .iter()
        .filter_map(|text| errors.take(parser::terms_item(&text.value, &text.place)))
        .collect();
    (items.len() == texts.len()).then_some(Terms { items, owner, span })
}

/// The error for a name that another file declares already.
fn redefinition(what: &str, here: Span, there: Span) -> Diagnostic {
    Diagnostic::new(format!("{what} is declared twice"), here)
        .label("again here")
        .also(there, "declared here")
        .help("a file may add to what it includes, but redefine nothing")
}

/// `1 index`, `2 indices`
pub(crate) fn count_indices(count: usize) -> String {
    if count == 1 {
        "1 index".to_owned()
    } else {
        format!("{count} indices")
    }
}
