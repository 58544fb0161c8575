//! Reading with a bound, and writing so that a file is either whole or untouched.

use crate::exit::Failure;
use std::io::{Read, Write};
use std::path::Path;

/// The largest spec that is read.
pub(crate) const SPEC_BYTES: u64 = 16 << 20;
/// The largest result that is read.
pub(crate) const RESULT_BYTES: u64 = 1 << 28;

/// The text of a file of at most `limit` bytes.
pub(crate) fn read(path: &Path, limit: u64) -> Result<String, Failure> {
    read_text(path, limit)
        .map_err(|why| Failure::files(format!("cannot read {}: {why}", path.display())))
}

/// As [`read`], with the reason alone for a failure.
pub(crate) fn read_text(path: &Path, limit: u64) -> Result<String, String> {
    let file = std::fs::File::open(path).map_err(|error| error.to_string())?;
    let metadata = file.metadata().map_err(|error| error.to_string())?;
    if metadata.is_dir() {
        return Err("it is a folder".to_owned());
    }
    let too_large = || format!("it is larger than {} MB", limit >> 20);
    if metadata.len() > limit {
        return Err(too_large());
    }
    let mut bytes = Vec::new();
    // A pipe or device tells no length, so the bound is kept while reading too.
    file.take(limit + 1)
        .read_to_end(&mut bytes)
        .map_err(|error| error.to_string())?;
    if bytes.len() as u64 > limit {
        return Err(too_large());
    }
    String::from_utf8(bytes).map_err(|error| {
        format!(
            "it is not UTF-8 text (byte {})",
            error.utf8_error().valid_up_to()
        )
    })
}

/// Writes a file by way of a temporary one beside it, so that an interruption leaves the old content.
pub(crate) fn write(path: &Path, text: &str) -> Result<(), Failure> {
    let folder = match path.parent() {
        Some(parent) if !parent.as_os_str().is_empty() => parent,
        _ => Path::new("."),
    };
    let attempt = || -> std::io::Result<()> {
        let mut builder = tempfile::Builder::new();
        #[cfg(unix)]
        builder.permissions(std::os::unix::fs::PermissionsExt::from_mode(0o644));
        let mut file = builder.prefix(".linform-").tempfile_in(folder)?;
        file.write_all(text.as_bytes())?;
        file.as_file().sync_all()?;
        file.persist(path).map_err(|error| error.error)?;
        Ok(())
    };
    attempt().map_err(|error| Failure::files(format!("cannot write {}: {error}", path.display())))
}
