//! The exit codes, a contract with scripts.

/// Every claim was decided as expected; or the command did what it was told.
pub(crate) const AS_EXPECTED: u8 = 0;
/// Some verdict differs from what is expected; or a result was not confirmed.
pub(crate) const DIFFERENT: u8 = 1;
/// The command line, a spec or a result file is wrong.
pub(crate) const WRONG: u8 = 2;
/// A limit was hit, or the user stopped the work.
pub(crate) const LIMIT: u8 = 3;
/// A file could not be read or written.
pub(crate) const FILES: u8 = 4;

/// Why a command ended early: what to say and with which code to leave.
#[derive(Debug)]
pub(crate) struct Failure {
    pub(crate) code: u8,
    pub(crate) text: String,
}

impl Failure {
    pub(crate) fn wrong(text: impl Into<String>) -> Failure {
        Failure {
            code: WRONG,
            text: text.into(),
        }
    }

    pub(crate) fn files(text: impl Into<String>) -> Failure {
        Failure {
            code: FILES,
            text: text.into(),
        }
    }
}
