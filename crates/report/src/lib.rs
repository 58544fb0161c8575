//! One result record in several formats: text, JSON, CSV, LaTeX, and scripts that re-check it elsewhere.
//!
//! *Invariant*: nothing is computed or decided here, and the same record gives the same bytes.

mod csv;
mod formula;
mod json;
mod latex;
#[cfg(test)]
mod samples;
mod sanitise;
mod script;
#[cfg(test)]
mod strategies;
#[cfg(test)]
mod tests;
mod text;
mod words;

pub use crate::csv::csv;
pub use json::{Digest, LARGEST_FILE, Read, ReadError, json, read_json};
pub use latex::latex;
pub use script::{ScriptError, gp, sympy};
pub use text::{TextOptions, text};
