//! Declarations that could not be read, so that what hangs on them alone is not told as a second mistake.

use crate::lexer::{continues_name, starts_name};
use crate::model::split_primes;
use std::collections::HashSet;
use toml::Spanned;
use toml::de::DeValue;

/// What is lost of the declarations.
#[derive(Clone, Debug, Default)]
pub(crate) struct Lost {
    /// A file, or a part of it that cannot be told: any name may be known after all.
    pub(crate) everything: bool,
    /// The generators: any symbol may be known after all.
    pub(crate) symbols: bool,
    /// The variable of the ring.
    pub(crate) variable: bool,
    /// The derivatives of the generators.
    pub(crate) derivation: bool,
    /// The derivatives of these alone, without primes.
    derived: HashSet<String>,
    /// These names, without primes.
    names: HashSet<String>,
}

impl Lost {
    /// May this law, family, model or index variable be known after all?
    pub(crate) fn hides(&self, name: &str) -> bool {
        self.everything || self.names.contains(split_primes(name).0)
    }

    /// May this symbol be known after all?
    pub(crate) fn hides_symbol(&self, name: &str) -> bool {
        self.symbols || self.hides(name)
    }

    /// May the derivative of this generator be given after all?
    pub(crate) fn hides_derivative(&self, generator: &str) -> bool {
        self.everything || self.derivation || self.derived.contains(split_primes(generator).0)
    }

    /// The whole ring.
    pub(crate) fn ring(&mut self) {
        self.symbols = true;
        self.variable = true;
        self.derivation = true;
    }

    /// The names alone, in alphabetical order.
    pub(crate) fn into_names(self) -> Vec<String> {
        let mut names: Vec<_> = self.names.into_iter().collect();
        names.sort_unstable();
        names
    }

    /// A text that was to declare a name.
    pub(crate) fn text(&mut self, text: &str) {
        self.names.extend(words(text));
    }

    /// A key that was to name a generator.
    pub(crate) fn derivative(&mut self, key: &str) {
        self.derived.extend(words(key));
    }

    /// A value that was to declare names: by the keys of its tables, or by its strings where there is no table.
    pub(crate) fn value(&mut self, value: &Spanned<DeValue<'_>>) {
        let mut left = vec![value];
        while let Some(value) = left.pop() {
            match value.get_ref() {
                DeValue::String(text) => self.text(text),
                DeValue::Array(list) => left.extend(list.iter()),
                DeValue::Table(table) => {
                    for (key, value) in table.iter() {
                        self.text(key.get_ref());
                        if !matches!(value.get_ref(), DeValue::String(_)) {
                            left.push(value);
                        }
                    }
                }
                _ => {}
            }
        }
    }
}

/// Everything in the text that may be meant as a name, without primes.
fn words(text: &str) -> impl Iterator<Item = String> {
    text.split(|c: char| !continues_name(c))
        .map(|word| word.trim_start_matches(|c: char| !starts_name(c)))
        .filter(|word| !word.is_empty())
        .map(str::to_owned)
}
