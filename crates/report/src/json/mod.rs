//! Records as JSON, and JSON as records.

mod digest;
mod error;
mod layout;
mod names;
mod node;
mod place;
mod read;
#[cfg(test)]
mod tests;
mod write;

pub use error::ReadError;
pub use read::{Digest, LARGEST_FILE, Read, read_json};
pub(crate) use write::coefficients_word;
pub use write::json;
