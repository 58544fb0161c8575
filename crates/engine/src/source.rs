//! The spec inside a result: its text, its hash, and the way back to a model.

use crate::record::{SourceRecord, SpecRecord};
use linform_spec::{Failure, Model};

/// The record of the sources of a model.
pub(crate) fn spec_record(model: &Model, through: Option<i64>) -> SpecRecord {
    let sources: Vec<SourceRecord> = model
        .sources
        .iter()
        .map(|source| SourceRecord {
            path: source.path.clone(),
            text: source.text.clone(),
        })
        .collect();
    SpecRecord {
        title: model.title.clone(),
        through,
        blake3: hash_of(&sources),
        sources,
    }
}

/// The hash of the sources: of a single file, the hash of its bytes; of several, the hash of their hashes.
pub fn hash_of(sources: &[SourceRecord]) -> String {
    let hash = |source: &SourceRecord| blake3::hash(source.text.as_bytes());
    match sources {
        [source] => hash(source).to_hex().to_string(),
        _ => {
            let mut hasher = blake3::Hasher::new();
            for source in sources {
                hasher.update(hash(source).as_bytes());
            }
            hasher.finalize().to_hex().to_string()
        }
    }
}

/// Reads the model back from the sources that a result holds.
///
/// # Errors
///
/// The mistakes in the sources; a result written by the program has none.
pub fn model_of(spec: &SpecRecord) -> Result<Model, Failure> {
    let Some((main, included)) = spec.sources.split_first() else {
        return Err(Failure {
            sources: Vec::new(),
            diagnostics: vec![linform_spec::Diagnostic {
                message: "the result does not hold the text of its spec".to_owned(),
                labels: Vec::new(),
                help: Some("make the result again with `linform solve SPEC --out FILE`".to_owned()),
            }],
        });
    };
    linform_spec::parse(&main.path, main.text.clone(), &mut |path| {
        included
            .iter()
            .find(|source| source.path == path)
            .map(|source| source.text.clone())
            .ok_or_else(|| "the result does not hold this file".to_owned())
    })
}

/// The names of the symbols that coefficients may contain: the variable and the constants.
///
/// # Errors
///
/// As [`model_of`].
pub fn base_names(spec: &SpecRecord) -> Result<Vec<String>, Failure> {
    let ring = model_of(spec)?.ring;
    Ok(ring.variable.into_iter().chain(ring.constants).collect())
}
