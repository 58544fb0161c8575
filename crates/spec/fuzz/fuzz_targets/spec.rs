//! Any text is read or refused, and places lie inside the file.
#![no_main]

use libfuzzer_sys::fuzz_target;

fuzz_target!(|text: &str| {
    let result = linform_spec::parse("fuzz.toml", text.to_owned(), &mut |path| {
        // Every file includes what was given, so that circles occur.
        if path.len() < 9 { Ok(text.to_owned()) } else { Err("no file".to_owned()) }
    });
    match result {
        Ok(model) => {
            for claim in &model.claims {
                let instances = claim.instances(Some(20), 1000).unwrap_or_default();
                for env in instances.iter().take(20) {
                    let terms = claim.terms.expand(env, Some(3)).unwrap_or_default();
                    for term in terms.iter().take(100) {
                        let text = linform_spec::text_of(term);
                        assert_eq!(linform_spec::text_of(&linform_spec::parse_expression(&text).unwrap()), text);
                    }
                }
            }
        }
        Err(failure) => {
            assert!(!failure.diagnostics.is_empty());
            for label in failure.diagnostics.iter().flat_map(|d| &d.labels) {
                let text = &failure.sources[label.span.file].text;
                assert!(text.get(label.span.start..label.span.end).is_some());
            }
        }
    }
});
