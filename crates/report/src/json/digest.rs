//! The digest by which a change of a result file is noticed.

use super::layout::{canonical, canonical_object};
use super::node::Node;

/// The name of the field that holds the digest.
pub(crate) const FIELD: &str = "digest";

/// BLAKE3, in hexadecimal, of the canonical text of a document without its field `digest`.
///
/// # References
///
/// J. O'Connor, J.-P. Aumasson, S. Neves, Z. Wilcox-O'Hearn, *BLAKE3: one function, fast everywhere*, 2020.
pub(crate) fn digest(document: &Node) -> String {
    let mut text = String::new();
    match document {
        Node::Object(fields) => {
            let rest = fields.iter().filter(|(name, _)| name != FIELD);
            canonical_object(rest, &mut text);
        }
        other => canonical(other, &mut text),
    }
    blake3::hash(text.as_bytes()).to_hex().to_string()
}
