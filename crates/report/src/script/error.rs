//! Why there is no script.

use std::fmt;

/// A record and a spec do not fit together, or the record lacks what a script has to contain.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ScriptError(String);

impl ScriptError {
    pub(super) fn new(what: impl Into<String>) -> Self {
        ScriptError(what.into())
    }
}

impl fmt::Display for ScriptError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}; solve the spec again", self.0)
    }
}

impl std::error::Error for ScriptError {}
