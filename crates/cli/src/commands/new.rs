//! `linform new`.

use crate::arguments::New;
use crate::exit::{self, Failure};
use crate::output;
use std::io::Write;

/// The starter spec; a test solves it.
const STARTER: &str = include_str!("../../starter.toml");

pub(crate) fn run(command: &New) -> Result<u8, Failure> {
    let path = &command.file;
    let failure = |error: std::io::Error| {
        let hint = if error.kind() == std::io::ErrorKind::AlreadyExists {
            "; choose another name"
        } else {
            ""
        };
        Failure::files(format!("cannot write {}: {error}{hint}", path.display()))
    };
    // `create_new` refuses a file that exists: nothing of the user's is overwritten.
    let mut file = std::fs::File::create_new(path).map_err(failure)?;
    file.write_all(STARTER.as_bytes())
        .and_then(|()| file.sync_all())
        .map_err(failure)?;
    output::message(&format!(
        "wrote {0}; next: linform solve {0}",
        path.display()
    ));
    Ok(exit::AS_EXPECTED)
}
