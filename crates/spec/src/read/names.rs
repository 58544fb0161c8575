//! Declared names.

use super::draft::Declared;
use super::section::{Entry, Text, shorten};
use crate::collect::Collector;
use crate::lexer::{TokenKind, tokens};
use crate::source::Diagnostic;

/// May a name end in primes?
#[derive(Clone, Copy, PartialEq, Eq)]
pub(crate) enum Primes {
    Allowed,
    Refused,
}

/// The text as a declared name, with straight primes.
pub(crate) fn declared(text: &Text, primes: Primes, errors: &mut Collector) -> Option<Declared> {
    match name_in(&text.value, text) {
        Some((base, count)) if count == 0 || primes == Primes::Allowed => Some(Declared {
            name: base + &"'".repeat(count as usize),
            span: text.place.whole(),
        }),
        Some((base, _)) => {
            errors.push(
                Diagnostic::new(
                    format!("`{}` cannot carry primes", shorten(&text.value)),
                    text.place.whole(),
                )
                .help(format!(
                    "a prime means a derivative; only generators are named so: write `{}`",
                    shorten(&base)
                )),
            );
            None
        }
        None => {
            errors.push(
                Diagnostic::new(
                    format!("`{}` is not a name", shorten(&text.value)),
                    text.place.whole(),
                )
                .help("a name is made of letters, digits and `_`, begins with a letter or `_`, and is not `for`"),
            );
            None
        }
    }
}

/// The key as a declared name without primes.
pub(crate) fn declared_key(entry: &Entry<'_>, errors: &mut Collector) -> Option<Declared> {
    declared(&entry.key_text(), Primes::Refused, errors)
}

fn name_in(value: &str, text: &Text) -> Option<(String, u32)> {
    let tokens = tokens(value, &text.place).ok()?;
    match &tokens[..] {
        [name, end] if end.kind == TokenKind::End && name.end - name.start == value.len() => {
            match &name.kind {
                TokenKind::Name { base, primes } if base != "for" => Some((base.clone(), *primes)),
                _ => None,
            }
        }
        _ => None,
    }
}
