//! Tables of a spec file, walked by hand so that every key keeps its place.

use crate::collect::Collector;
use crate::place::Place;
use crate::source::{Diagnostic, Span};
use crate::suggest::did_you_mean;
use std::ops::Range;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

/// The file that is being read.
#[derive(Clone, Copy)]
pub(crate) struct File<'a> {
    pub(crate) number: usize,
    pub(crate) text: &'a str,
}

impl File<'_> {
    /// A place in this file; the ends are moved to character boundaries.
    pub(crate) fn span(&self, range: Range<usize>) -> Span {
        let start = self.text.floor_char_boundary(range.start);
        Span {
            file: self.number,
            start,
            end: self.text.floor_char_boundary(range.end).max(start),
        }
    }
}

/// A string of the file.
#[derive(Clone, Debug)]
pub(crate) struct Text {
    pub(crate) value: String,
    pub(crate) place: Place,
    /// The whole token with its quotes.
    pub(crate) span: Span,
}

/// A key with its value.
#[derive(Clone, Copy)]
pub(crate) struct Entry<'a> {
    pub(crate) file: File<'a>,
    pub(crate) key: &'a str,
    pub(crate) key_span: Span,
    pub(crate) value: &'a Spanned<DeValue<'a>>,
}

/// A table with its entries in the order of the text.
pub(crate) struct Section<'a> {
    /// For messages: `[ring]`.
    pub(crate) name: String,
    pub(crate) span: Span,
    entries: Vec<Entry<'a>>,
}

impl<'a> Section<'a> {
    pub(crate) fn new(
        name: impl Into<String>,
        span: Span,
        file: File<'a>,
        table: &'a DeTable<'a>,
    ) -> Section<'a> {
        let mut entries: Vec<_> = table
            .iter()
            .map(|(key, value)| Entry {
                file,
                key: key.get_ref().as_ref(),
                key_span: file.span(key.span()),
                value,
            })
            .collect();
        entries.sort_by_key(|entry| entry.key_span.start);
        Section {
            name: name.into(),
            span,
            entries,
        }
    }

    /// All entries, in the order of the text.
    pub(crate) fn entries(&self) -> &[Entry<'a>] {
        &self.entries
    }

    pub(crate) fn get(&self, key: &str) -> Option<&Entry<'a>> {
        self.entries.iter().find(|entry| entry.key == key)
    }

    /// Notes every key that is none of these. True if there is none.
    pub(crate) fn allow(&self, keys: &[&str], errors: &mut Collector) -> bool {
        let mut known = true;
        for entry in &self.entries {
            if keys.contains(&entry.key) {
                continue;
            }
            known = false;
            if errors.is_full() {
                break;
            }
            let help = match did_you_mean(entry.key, keys.iter().copied()) {
                Some(near) => format!("did you mean `{near}`?"),
                None => format!("{} takes {}", self.name, keys.join(", ")),
            };
            errors.push(
                Diagnostic::new(
                    format!("unknown key `{}` in {}", shorten(entry.key), self.name),
                    entry.key_span,
                )
                .help(help),
            );
        }
        known
    }

    /// The entry, or a note that it is missing.
    pub(crate) fn require(
        &self,
        key: &str,
        example: &str,
        errors: &mut Collector,
    ) -> Option<&Entry<'a>> {
        let entry = self.get(key);
        // A slip of the pen in the key is told as such.
        let misspelt = || {
            !errors.is_empty()
                && self
                    .entries
                    .iter()
                    .any(|entry| did_you_mean(entry.key, [key]).is_some())
        };
        if entry.is_none() && !errors.is_full() && !misspelt() {
            errors.push_absence(
                Diagnostic::new(format!("{} has no `{key}`", self.name), self.span)
                    .help(format!("add `{example}`")),
            );
        }
        entry
    }

    /// The sub-table under a key.
    pub(crate) fn section(
        &self,
        key: &str,
        name: impl Into<String>,
        errors: &mut Collector,
    ) -> Option<Section<'a>> {
        self.get(key)?.section(name, errors)
    }
}

impl<'a> Entry<'a> {
    pub(crate) fn value_span(&self) -> Span {
        self.file.span(self.value.span())
    }

    fn wrong_type(&self, value: &Spanned<DeValue<'a>>, expected: &str) -> Diagnostic {
        let found = match value.get_ref() {
            DeValue::String(_) => "a string",
            DeValue::Integer(_) => "an integer",
            DeValue::Float(_) => "a decimal",
            DeValue::Boolean(_) => "true or false",
            DeValue::Datetime(_) => "a date",
            DeValue::Array(_) => "a list",
            DeValue::Table(_) => "a table",
        };
        let help = match (expected, value.get_ref()) {
            (
                "a string" | "a string or a list of strings",
                DeValue::Integer(_) | DeValue::Float(_),
            ) => "put it in quotation marks".to_owned(),
            _ => format!("`{}` is {expected}", shorten(self.key)),
        };
        Diagnostic::new(
            format!(
                "`{}`: expected {expected}, found {found}",
                shorten(self.key)
            ),
            self.file.span(value.span()),
        )
        .help(help)
    }

    pub(crate) fn section(
        &self,
        name: impl Into<String>,
        errors: &mut Collector,
    ) -> Option<Section<'a>> {
        match self.value.get_ref() {
            DeValue::Table(table) => Some(Section::new(name, self.key_span, self.file, table)),
            _ => {
                errors.push(self.wrong_type(self.value, "a table"));
                None
            }
        }
    }

    /// The sections of a list of tables, as in `[[claim]]`.
    pub(crate) fn sections(&self, name: &str, errors: &mut Collector) -> Vec<Section<'a>> {
        let DeValue::Array(list) = self.value.get_ref() else {
            errors.push(
                self.wrong_type(self.value, "a list of tables")
                    .help(format!("each one begins with a line `{name}`")),
            );
            return Vec::new();
        };
        list.iter()
            .filter_map(|element| match element.get_ref() {
                DeValue::Table(table) => Some(Section::new(
                    name,
                    self.file.span(element.span()),
                    self.file,
                    table,
                )),
                _ => {
                    errors.push(self.wrong_type(element, "a list of tables"));
                    None
                }
            })
            .collect()
    }

    fn text_of(&self, value: &'a Spanned<DeValue<'a>>) -> Option<Text> {
        let DeValue::String(text) = value.get_ref() else {
            return None;
        };
        let span = self.file.span(value.span());
        let token = &self.file.text[span.start..span.end];
        Some(Text {
            value: text.clone().into_owned(),
            place: Place::of_token(self.file.number, span.start, token),
            span,
        })
    }

    pub(crate) fn text(&self, errors: &mut Collector) -> Option<Text> {
        let text = self.text_of(self.value);
        if text.is_none() {
            errors.push(self.wrong_type(self.value, "a string"));
        }
        text
    }

    /// The key itself as a text.
    pub(crate) fn key_text(&self) -> Text {
        let token = &self.file.text[self.key_span.start..self.key_span.end];
        Text {
            value: self.key.to_owned(),
            place: Place::of_token(self.file.number, self.key_span.start, token),
            span: self.key_span,
        }
    }

    /// A list of strings; also one string, if `lone` allows it.
    pub(crate) fn texts(&self, lone: bool, errors: &mut Collector) -> Option<Vec<Text>> {
        let expected = if lone {
            "a string or a list of strings"
        } else {
            "a list of strings"
        };
        match self.value.get_ref() {
            DeValue::String(_) if lone => Some(self.text_of(self.value).into_iter().collect()),
            DeValue::Array(list) => {
                let mut texts = Vec::with_capacity(list.len());
                let mut complete = true;
                for element in list.iter() {
                    match self.text_of(element) {
                        Some(text) => texts.push(text),
                        None => {
                            complete = false;
                            errors.push(self.wrong_type(element, expected));
                        }
                    }
                }
                complete.then_some(texts)
            }
            _ => {
                errors.push(self.wrong_type(self.value, expected));
                None
            }
        }
    }

    pub(crate) fn boolean(&self, errors: &mut Collector) -> Option<bool> {
        let value = self.value.get_ref().as_bool();
        if value.is_none() {
            errors.push(self.wrong_type(self.value, "true or false"));
        }
        value
    }

    /// An integer within bounds.
    pub(crate) fn integer(&self, least: i64, most: i64, errors: &mut Collector) -> Option<i64> {
        let DeValue::Integer(digits) = self.value.get_ref() else {
            errors.push(self.wrong_type(self.value, "an integer"));
            return None;
        };
        let value = i64::from_str_radix(digits.as_str(), digits.radix()).ok();
        let inside = value.filter(|value| (least..=most).contains(value));
        if inside.is_none() {
            errors.push(
                Diagnostic::new(format!("`{}` is out of range", self.key), self.value_span())
                    .help(format!("it lies between {least} and {most}")),
            );
        }
        inside
    }

    /// One of a few words.
    pub(crate) fn word<T: Copy>(
        &self,
        words: &[(&'static str, T)],
        errors: &mut Collector,
    ) -> Option<T> {
        let text = self.text(errors)?;
        let found = words.iter().find(|(word, _)| *word == text.value);
        if found.is_none() {
            let names = words.iter().map(|(word, _)| *word);
            let help = match did_you_mean(&text.value, names.clone()) {
                Some(near) => format!("did you mean `{near}`?"),
                None => format!("it is one of {}", names.collect::<Vec<_>>().join(", ")),
            };
            errors.push(
                Diagnostic::new(
                    format!("unknown value `{}` of `{}`", shorten(&text.value), self.key),
                    text.place.whole(),
                )
                .help(help),
            );
        }
        found.map(|(_, value)| *value)
    }
}

/// A name as it may stand in a message: not longer than a line.
pub(crate) fn shorten(name: &str) -> String {
    const LONGEST: usize = 60;
    if name.chars().count() <= LONGEST {
        return name.to_owned();
    }
    name.chars().take(LONGEST).chain(['…']).collect()
}
