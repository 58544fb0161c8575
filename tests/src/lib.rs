//! Shared helpers of the test package: the ready specs, and results of running them.

use linform_engine::record::{ClaimRecord, Finding, FormTerm, ResultRecord};
use linform_engine::{Options, PrepareLimits, Prepared, Silent};
use linform_scalar::Unlimited;
use std::fs;
use std::path::{Path, PathBuf};

/// The top folder of the sources.
pub fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("..")
}

/// The paths of all ready specs, in alphabetical order.
///
/// # Panics
///
/// If the folder `specs` cannot be read.
pub fn specs() -> Vec<PathBuf> {
    let mut found: Vec<PathBuf> = fs::read_dir(root().join("specs"))
        .unwrap()
        .map(|entry| entry.unwrap().path())
        .filter(|path| {
            path.extension()
                .is_some_and(|extension| extension == "toml")
        })
        .collect();
    found.sort();
    found
}

/// Reads and unfolds a spec given as text; included files are those of the folder `specs`.
///
/// # Panics
///
/// If the text has mistakes: the messages are those of the spec.
pub fn prepared(name: &str, text: String) -> Prepared {
    let mut load = |path: &str| {
        let file = Path::new(path).file_name().unwrap_or_default();
        fs::read_to_string(root().join("specs").join(file)).map_err(|error| error.to_string())
    };
    let model = match linform_spec::parse(name, text, &mut load) {
        Ok(model) => model,
        Err(failure) => panic!("{name}: {:#?}", failure.diagnostics),
    };
    match linform_engine::prepare(model, None, PrepareLimits::default()) {
        Ok(prepared) => prepared,
        Err(failure) => panic!("{name}: {:#?}", failure.diagnostics),
    }
}

/// Decides every claim of a spec given as text.
pub fn solve_text(name: &str, text: String, options: Options) -> ResultRecord {
    let prepared = prepared(name, text);
    let wanted = vec![true; prepared.instances.len()];
    linform_engine::solve(&prepared, &wanted, options, &Unlimited, &Silent)
}

/// Decides every claim of a ready spec.
///
/// # Panics
///
/// If the file cannot be read or has mistakes.
pub fn solve_spec(path: &Path, options: Options) -> ResultRecord {
    let name = path.file_name().unwrap().to_string_lossy().into_owned();
    solve_text(&name, fs::read_to_string(path).unwrap(), options)
}

/// Decides every claim of the ready spec with this name.
pub fn solve_named(name: &str) -> ResultRecord {
    solve_spec(
        &root().join("specs").join(format!("{name}.toml")),
        Options::default(),
    )
}

/// The claim with this name and these values of its sweep variables.
///
/// # Panics
///
/// If there is none.
pub fn claim<'a>(record: &'a ResultRecord, name: &str, index: &[i64]) -> &'a ClaimRecord {
    record
        .claims
        .iter()
        .find(|claim| claim.name == name && claim.index.values().copied().eq(index.iter().copied()))
        .unwrap_or_else(|| panic!("no claim {name} {index:?}"))
}

/// The form of a claim that holds.
///
/// # Panics
///
/// If the claim does not hold.
pub fn form(claim: &ClaimRecord) -> &[FormTerm] {
    match &claim.finding {
        Finding::Holds { form } => form,
        other => panic!("{}: {}", claim.name, other.verdict().word()),
    }
}

/// A form as pairs of texts, term and coefficient.
pub fn texts(form: &[FormTerm]) -> Vec<(String, String)> {
    form.iter()
        .map(|term| (term.term.clone(), term.coefficient.to_string()))
        .collect()
}
