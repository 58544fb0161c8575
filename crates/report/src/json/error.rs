//! What is wrong with a result file, where, and what to do.

use std::fmt;

/// A text is not a result file that the program reads.
///
/// The message names the place: line and column where the text is not JSON, else the path of the value, such as
/// `claims[3].form[0].coefficient`.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ReadError {
    what: String,
    place: String,
    help: &'static str,
}

impl ReadError {
    pub(crate) fn new(
        what: impl Into<String>,
        place: impl Into<String>,
        help: &'static str,
    ) -> Self {
        ReadError {
            what: what.into(),
            place: place.into(),
            help,
        }
    }

    /// What is wrong.
    pub fn message(&self) -> &str {
        &self.what
    }

    /// Where: `line 3, column 7`, or the path of a value.
    pub fn place(&self) -> &str {
        &self.place
    }

    /// What to do about it.
    pub fn help(&self) -> &str {
        self.help
    }
}

impl fmt::Display for ReadError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}: {}; {}", self.place, self.what, self.help)
    }
}

impl std::error::Error for ReadError {}
