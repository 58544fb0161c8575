//! The layers: which crate may use which, and what the exact crates must not contain.

use cargo_metadata::{DependencyKind, MetadataCommand, Package};
use std::collections::{BTreeMap, BTreeSet};
use std::fs;
use std::path::{Path, PathBuf};

/// What each crate may use of the others. A change here is a decision about the architecture.
const ALLOWED: &[(&str, &[&str])] = &[
    ("linform-scalar", &[]),
    ("linform-ring", &["linform-scalar"]),
    ("linform-reconstruct", &["linform-scalar"]),
    (
        "linform-solver",
        &["linform-scalar", "linform-ring", "linform-reconstruct"],
    ),
    ("linform-spec", &["linform-scalar"]),
    (
        "linform-engine",
        &[
            "linform-scalar",
            "linform-ring",
            "linform-reconstruct",
            "linform-solver",
            "linform-spec",
        ],
    ),
    (
        "linform-report",
        &["linform-scalar", "linform-spec", "linform-engine"],
    ),
    // The command line implements the control of `scalar`: limits and the interrupt.
    (
        "linform",
        &[
            "linform-scalar",
            "linform-spec",
            "linform-engine",
            "linform-report",
        ],
    ),
];

/// The backends of big numbers, which `scalar` alone names.
const BACKENDS: &[&str] = &[
    "rug",
    "gmp-mpfr-sys",
    "num-bigint",
    "num-rational",
    "num-traits",
    "num-integer",
];

/// The crates without floating point, input and output, and clocks.
const EXACT: &[&str] = &["scalar", "ring", "reconstruct", "solver", "spec"];

/// What the sources of an exact crate must not name.
const FORBIDDEN: &[&str] = &["f32", "f64", "std::fs", "std::io", "std::net", "std::time"];

fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR"))
        .parent()
        .unwrap()
        .to_path_buf()
}

fn packages() -> Vec<Package> {
    let metadata = MetadataCommand::new()
        .manifest_path(root().join("Cargo.toml"))
        .no_deps()
        .exec()
        .unwrap();
    metadata.packages
}

/// The names of the dependencies that end up in the program or build it: all but those of tests.
fn dependencies(package: &Package) -> BTreeSet<&str> {
    package
        .dependencies
        .iter()
        .filter(|dependency| dependency.kind != DependencyKind::Development)
        .map(|dependency| dependency.name.as_str())
        .collect()
}

#[test]
fn crates_use_only_the_layers_below() {
    let allowed: BTreeMap<_, _> = ALLOWED.iter().copied().collect();
    let mut seen = 0;
    for package in packages() {
        if package.name.as_str() == "linform-tests" {
            continue;
        }
        let Some(allowed) = allowed.get(package.name.as_str()) else {
            panic!("{} has no line in the table", package.name);
        };
        for name in dependencies(&package) {
            if name.starts_with("linform") {
                assert!(
                    allowed.contains(&name),
                    "{} must not use {name}",
                    package.name
                );
            }
        }
        seen += 1;
    }
    assert_eq!(seen, ALLOWED.len());
}

#[test]
fn tests_of_a_crate_use_no_layer_above() {
    let position: BTreeMap<&str, usize> = ALLOWED
        .iter()
        .enumerate()
        .map(|(position, (name, _))| (*name, position))
        .collect();
    for package in packages() {
        let Some(own) = position.get(package.name.as_str()) else {
            continue;
        };
        for dependency in &package.dependencies {
            if let Some(other) = position.get(dependency.name.as_str()) {
                assert!(
                    other < own,
                    "{} stands below {} in the table",
                    package.name,
                    dependency.name
                );
            }
        }
    }
}

#[test]
fn scalar_alone_names_the_backends_of_big_numbers() {
    for package in packages() {
        let used = dependencies(&package);
        let backends: Vec<_> = BACKENDS
            .iter()
            .filter(|name| used.contains(*name))
            .collect();
        if package.name.as_str() == "linform-scalar" {
            assert!(!backends.is_empty());
        } else {
            assert!(backends.is_empty(), "{} uses {backends:?}", package.name);
        }
    }
}

/// The Rust sources below a folder.
fn sources(folder: &Path) -> Vec<PathBuf> {
    let mut found = Vec::new();
    for entry in fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() {
            found.extend(sources(&path));
        } else if path.extension().is_some_and(|extension| extension == "rs") {
            found.push(path);
        }
    }
    found.sort();
    found
}

/// The text without comments and without what stands in string literals.
fn code_of(text: &str) -> String {
    let mut code = String::new();
    for line in text.lines() {
        let mut inside = false;
        let mut escaped = false;
        let mut characters = line.chars().peekable();
        while let Some(character) = characters.next() {
            if inside {
                inside = escaped || character != '"';
                escaped = character == '\\' && !escaped;
            } else if character == '/' && characters.peek() == Some(&'/') {
                break;
            } else if character == '"' {
                inside = true;
            } else {
                code.push(character);
            }
        }
        code.push('\n');
    }
    code
}

/// Does the code name the path, as whole words?
fn names(code: &str, path: &str) -> bool {
    let word = |c: char| c.is_alphanumeric() || c == '_';
    code.match_indices(path)
        .any(|(at, _)| !code[..at].ends_with(word) && !code[at + path.len()..].starts_with(word))
}

#[test]
fn exact_crates_contain_no_floating_point_no_files_and_no_clock() {
    for name in EXACT {
        let folder = root().join("crates").join(name).join("src");
        let files = sources(&folder);
        assert!(!files.is_empty());
        for file in files {
            let code = code_of(&fs::read_to_string(&file).unwrap());
            for forbidden in FORBIDDEN {
                assert!(
                    !names(&code, forbidden),
                    "{} names {forbidden}",
                    file.display()
                );
            }
        }
    }
}

#[test]
fn forbidden_words_are_found_in_code_alone() {
    assert!(names(&code_of("let x: f64 = 0;"), "f64"));
    assert!(names(&code_of("use std::fs::File;"), "std::fs"));
    assert!(!names(&code_of("let half64 = 1; // f64"), "f64"));
    assert!(!names(&code_of("let text = \"f64 \\\" f64\";"), "f64"));
}

/// The linter holds the same line while the code is written.
#[test]
fn exact_crates_ban_floating_point_and_clocks_by_lint() {
    for name in EXACT {
        let path = root().join("crates").join(name).join("clippy.toml");
        let Ok(text) = fs::read_to_string(&path) else {
            panic!("{} is missing", path.display());
        };
        for item in ["f32", "f64", "std::fs::", "std::time::"] {
            assert!(text.contains(item), "{} allows {item}", path.display());
        }
    }
}

#[test]
fn every_crate_of_the_table_has_a_folder() {
    for (name, _) in ALLOWED {
        let folder = name.strip_prefix("linform-").unwrap_or("cli");
        assert!(root().join("crates").join(folder).is_dir(), "{folder}");
    }
}
