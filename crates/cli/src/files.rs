//! Reading with a bound, and writing so that a file is either whole or untouched.

use crate::exit::Failure;
use std::io::{Read, Write};
use std::path::Path;

/// The largest spec that is read.
pub(crate) const SPEC_BYTES: u64 = 2 << 20;
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

/// Do two paths lead to one file that exists?
pub(crate) fn is_same(a: &Path, b: &Path) -> bool {
    match (a.canonicalize(), b.canonicalize()) {
        (Ok(a), Ok(b)) => a == b,
        _ => false,
    }
}

/// Writes a file by way of a temporary one beside it, so that an interruption leaves the old content.
///
/// A link is followed, a device or a pipe is written to as it is, and a file that may not be written is left alone.
pub(crate) fn write(path: &Path, text: &str) -> Result<(), Failure> {
    let attempt = || -> std::io::Result<()> {
        match std::fs::metadata(path) {
            Ok(metadata) if metadata.is_file() => {
                // Opening for writing asks for the permission that replacing the file would pass by.
                std::fs::OpenOptions::new().append(true).open(path)?;
                replace(&path.canonicalize()?, text)
            }
            Ok(_) => std::fs::OpenOptions::new()
                .write(true)
                .open(path)?
                .write_all(text.as_bytes()),
            Err(error) if error.kind() == std::io::ErrorKind::NotFound => replace(path, text),
            Err(error) => Err(error),
        }
    };
    attempt().map_err(|error| {
        // The name of the temporary file would tell the user nothing.
        let why = error.to_string();
        let why = why.split(" at path ").next().unwrap_or_default();
        Failure::files(format!("cannot write {}: {why}", path.display()))
    })
}

fn replace(path: &Path, text: &str) -> std::io::Result<()> {
    let folder = match path.parent() {
        Some(parent) if !parent.as_os_str().is_empty() => parent,
        _ => Path::new("."),
    };
    let mut builder = tempfile::Builder::new();
    #[cfg(unix)]
    builder.permissions(std::os::unix::fs::PermissionsExt::from_mode(0o644));
    let mut file = builder.prefix(".linform-").tempfile_in(folder)?;
    file.write_all(text.as_bytes())?;
    file.as_file().sync_all()?;
    file.persist(path).map_err(|error| error.error)?;
    Ok(())
}
