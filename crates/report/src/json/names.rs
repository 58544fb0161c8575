//! The base symbols of a result, and coefficients read in them.

use super::node::Node;
use crate::sanitise::{excerpt, visible};
use linform_engine::published::{Coefficient, PublishedPolynomial};
use linform_engine::record::SpecRecord;
use linform_scalar::published::BigInt;
use std::cell::Cell;
use std::sync::Arc;

/// The names that exponents count, and how much may still be read.
#[derive(Debug)]
pub(crate) struct Names {
    names: Arc<[String]>,
    /// Exponents are stored densely, so a hostile file could ask for far more memory than its own length.
    budget: Cell<usize>,
    /// Reading a number takes time that grows with the square of its digits.
    work: Cell<u64>,
}

/// Bytes that all coefficients of one file may take, as estimated from their terms.
const BUDGET: usize = 1 << 30;
/// What a term takes beside its exponents: two numbers, and its place in a map.
const TERM: usize = 200;
/// Most digits of one integer.
const MOST_DIGITS: usize = 100_000;
/// The sum of the squares of the digits of all numbers: some seconds of reading.
const WORK: u64 = 100_000_000_000;
/// Most names that are gathered from coefficients.
const MOST_NAMES: usize = 64;

impl Default for Names {
    fn default() -> Self {
        Names::new(Vec::new())
    }
}

/// The base symbols as the spec declares them, or as the coefficients mention them if the file holds no spec.
///
/// # Errors
///
/// Why the spec in the file does not tell its symbols.
pub(crate) fn base_names(spec: &SpecRecord, document: &Node) -> Result<Names, String> {
    if spec.sources.is_empty() {
        return Ok(Names::scan(document));
    }
    linform_engine::base_names(spec)
        .map(Names::new)
        .map_err(|failure| {
            let first = failure.diagnostics.first();
            let reason = first.map_or(String::new(), |diagnostic| {
                format!(": {}", visible(&diagnostic.message))
            });
            format!("spec.sources is not a spec that can be read{reason}")
        })
}

impl Names {
    fn new(names: Vec<String>) -> Names {
        Names {
            names: names.into(),
            budget: Cell::new(BUDGET),
            work: Cell::new(WORK),
        }
    }

    /// The names that occur in the coefficients of a document, in the order in which they first do.
    pub(crate) fn scan(document: &Node) -> Names {
        let mut names = Vec::new();
        scan(document, &mut names);
        Names::new(names)
    }

    /// The coefficient 0.
    pub(crate) fn zero(&self) -> Coefficient {
        Coefficient {
            names: self.names.clone(),
            numerator: PublishedPolynomial::default(),
            denominator: PublishedPolynomial::constant(self.names.len(), BigInt::from(1).into()),
        }
    }

    /// Reads a coefficient such as `3/10*t^2 - 1/5` or `(t^2 + 1)/(2*t)`, within bounds.
    ///
    /// # Errors
    ///
    /// What is wrong with the text, in words.
    pub(crate) fn coefficient(&self, text: &str) -> Result<Coefficient, String> {
        let terms = 1 + text
            .bytes()
            .filter(|byte| matches!(byte, b'+' | b'-'))
            .count();
        let cost = text.len() + terms * (TERM + 4 * self.names.len());
        let left = self.budget.get().checked_sub(cost);
        self.budget
            .set(left.ok_or("all coefficients together have too many terms")?);
        for digits in text.split(|c: char| !c.is_ascii_digit()).map(str::len) {
            if digits > MOST_DIGITS {
                return Err(format!("a number with more than {MOST_DIGITS} digits"));
            }
            let work = (digits as u64).pow(2);
            let left = self.work.get().checked_sub(work);
            self.work
                .set(left.ok_or("all numbers together have too many digits")?);
        }
        if text.trim().is_empty() {
            return Err("the coefficient is empty".to_owned());
        }
        Coefficient::parse(text, &self.names).map_err(|_| {
            let known = match self.names.is_empty() {
                true => "without symbols".to_owned(),
                false => format!("in {}", visible(&self.names.join(", "))),
            };
            format!(
                "{} is no coefficient such as 3/10*t^2 - 1/5, {known}",
                excerpt(text)
            )
        })
    }
}

fn scan(node: &Node, names: &mut Vec<String>) {
    match node {
        Node::List(items) => items.iter().for_each(|item| scan(item, names)),
        Node::Object(fields) => {
            for (field, value) in fields {
                match value {
                    Node::Text(text)
                        if matches!(field.as_str(), "coefficient" | "multiplier" | "value") =>
                    {
                        scan_text(text, names);
                    }
                    Node::List(_) | Node::Object(_) => scan(value, names),
                    _ => {}
                }
            }
        }
        _ => {}
    }
}

fn scan_text(text: &str, names: &mut Vec<String>) {
    let words = text.split(|c: char| !is_name(c));
    for word in words.filter(|word| word.starts_with(is_name_start)) {
        if names.len() < MOST_NAMES && !names.iter().any(|name| name == word) {
            names.push(word.to_owned());
        }
    }
}

fn is_name_start(c: char) -> bool {
    c.is_alphabetic() || c == '_'
}

fn is_name(c: char) -> bool {
    c.is_alphanumeric() || c == '_' || c == '\''
}
