//! Every diagnostic points at its place: one file for each, which says what is expected.
//!
//! A file in `tests/bad` begins with lines `# expect LINE:COLUMN FRAGMENT`, one for each diagnostic, in the order
//! of their places (`PATH:LINE:COLUMN` in an included file). There must be no others, and each must offer help.

#![allow(clippy::disallowed_methods, reason = "tests read files")]

use linform_spec::{Failure, parse};
use std::path::Path;

const FOLDER: &str = concat!(env!("CARGO_MANIFEST_DIR"), "/tests/bad");

fn read(path: &str) -> Result<String, String> {
    std::fs::read_to_string(Path::new(FOLDER).join(path)).map_err(|_| "no such file".to_owned())
}

/// `LINE:COLUMN MESSAGE` for each diagnostic.
fn found(failure: &Failure) -> Vec<String> {
    let place = |span: linform_spec::Span| {
        let source = &failure.sources[span.file];
        assert!(source.text.is_char_boundary(span.start) && source.text.is_char_boundary(span.end));
        assert!(span.start <= span.end);
        let (line, column) = source.line_column(span.start);
        if span.file == 0 {
            format!("{line}:{column}")
        } else {
            format!("{}:{line}:{column}", source.path)
        }
    };
    failure
        .diagnostics
        .iter()
        .map(|diagnostic| {
            assert!(diagnostic.help.is_some(), "no help: {}", diagnostic.message);
            diagnostic
                .labels
                .iter()
                .skip(1)
                .for_each(|l| drop(place(l.span)));
            format!(
                "{} {}",
                place(diagnostic.labels[0].span),
                diagnostic.message
            )
        })
        .collect()
}

#[test]
fn every_bad_spec_gets_the_diagnostics_that_it_announces() {
    let mut files: Vec<_> = std::fs::read_dir(FOLDER)
        .unwrap()
        .map(|entry| entry.unwrap().file_name().into_string().unwrap())
        .filter(|name| name.ends_with(".toml"))
        .collect();
    files.sort();
    assert!(files.len() > 100, "the folder has {} files", files.len());
    let mut wrong = Vec::new();
    for file in files {
        let text = read(&file).unwrap();
        let expected: Vec<_> = text
            .lines()
            .map_while(|line| line.strip_prefix("# expect "))
            .map(str::to_owned)
            .collect();
        let found = match parse(&file, text, &mut |path| read(path)) {
            Ok(_) => Vec::new(),
            Err(failure) => found(&failure),
        };
        let agrees = !expected.is_empty()
            && expected.len() == found.len()
            && expected
                .iter()
                .zip(&found)
                .all(|(e, f)| f.starts_with(e.as_str()));
        if !agrees {
            wrong.push(format!(
                "{file}\n  expected {expected:#?}\n  found {found:#?}"
            ));
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}
