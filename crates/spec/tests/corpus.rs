//! The corpus of the fuzz targets, run without a fuzzer.

#![allow(clippy::disallowed_methods, reason = "tests read files")]

use linform_spec::{parse, parse_expression, text_of};

fn corpus(target: &str) -> Vec<(String, String)> {
    let folder = format!("{}/fuzz/corpus/{target}", env!("CARGO_MANIFEST_DIR"));
    let mut files: Vec<_> = std::fs::read_dir(folder)
        .unwrap()
        .map(|entry| entry.unwrap().path())
        .collect();
    files.sort();
    files
        .into_iter()
        .map(|path| {
            let text = String::from_utf8_lossy(&std::fs::read(&path).unwrap()).into_owned();
            (path.display().to_string(), text)
        })
        .collect()
}

#[test]
fn every_spec_of_the_corpus_is_read_or_refused_with_places_inside_the_file() {
    let files = corpus("spec");
    assert!(files.len() >= 10);
    let mut read = 0;
    for (name, text) in files {
        let result = parse(&name, text.clone(), &mut |_| Ok(text.clone()));
        match result {
            Ok(model) => {
                read += 1;
                for claim in &model.claims {
                    for env in claim.instances(Some(8), 1000).unwrap() {
                        assert!(!claim.terms.expand(&env, Some(3)).unwrap().is_empty());
                    }
                }
            }
            Err(failure) => {
                assert!(!failure.diagnostics.is_empty(), "{name}");
                for label in failure.diagnostics.iter().flat_map(|d| &d.labels) {
                    let text = &failure.sources[label.span.file].text;
                    let place = text.get(label.span.start..label.span.end);
                    assert!(place.is_some(), "{name}: {failure}");
                }
            }
        }
    }
    assert!(read >= 2, "{read} specs of the corpus are right");
}

#[test]
fn every_expression_of_the_corpus_is_read_back_from_its_text() {
    let files = corpus("expression");
    assert!(files.len() >= 4);
    for (name, text) in files {
        let written = text_of(&parse_expression(&text).unwrap_or_else(|e| panic!("{name}: {e}")));
        assert_eq!(text_of(&parse_expression(&written).unwrap()), written);
    }
}
