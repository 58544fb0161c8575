use super::*;
use crate::samples;
use crate::strategies::{claims, texts};
use linform_engine::record::*;
use proptest::collection::vec;
use proptest::prelude::*;

proptest! {
    #![proptest_config(ProptestConfig::with_cases(48))]

    #[test]
    fn a_record_is_read_back_as_it_was_written(claims in vec(claims(), 0..4), title in proptest::option::of(texts()), through: Option<i64>) {
        let mut record = samples::record();
        record.claims.extend(claims);
        record.spec.title = title;
        record.spec.through = through;
        let read = read_json(&json(&record)).unwrap();
        prop_assert_eq!(read.digest, Digest::Agrees);
        prop_assert_eq!(read.record, record);
        prop_assert!(read.notes.is_empty(), "{:?}", read.notes);
    }

    #[test]
    fn no_text_makes_the_reader_panic(position: prop::sample::Index, cut: prop::sample::Index, insert in texts()) {
        let text = json(&samples::record());
        let (from, to) = (position.index(text.len()), cut.index(text.len()));
        let (from, to) = (text.floor_char_boundary(from.min(to)), text.floor_char_boundary(from.max(to)));
        let changed = format!("{}{insert}{}", &text[..from], &text[to..]);
        if let Ok(read) = read_json(&changed) {
            prop_assert!(read.digest != Digest::Agrees || read.record == samples::record());
        }
        let _ = read_json(&insert);
    }
}

#[test]
fn the_contract_fields_come_first_and_in_order() {
    let mut record = samples::record();
    record.claims.drain(..1);
    record.claims.truncate(1);
    record.gradings.clear();
    record.primitives.clear();
    record.spec.sources.clear();
    let text = json(&record);
    let (body, digest) = text.rsplit_once(",\n  \"digest\": ").unwrap();
    assert_eq!(
        body,
        r#"{
  "format": "linform-result/1",
  "program": "linform 0.1.0",
  "spec": {
    "title": "Traces of the Airy kernel",
    "blake3": "abababababababababababababababababababababababababababababababab",
    "sources": []
  },
  "claims": [
    {
      "name": "trace",
      "index": {"j": 3, "k": 0},
      "verdict": "holds",
      "system": {"method": "matching", "rows": 33, "columns": 8, "solver": "fraction-free"},
      "form": [
        {"term": "ratio(F,1)", "coefficient": "7/12"},
        {"term": "ratio(F,2)", "coefficient": "1/3*t"},
        {"term": "ratio(F,4)", "coefficient": "1/24"}
      ],
      "evidence": {"kind": "proved"},
      "target": "u[3,0]",
      "known_by": "derivative",
      "terms": ["ratio(F,1)", "ratio(F,2)", "ratio(F,3)", "ratio(F,4)"],
      "coefficients": "polynomial",
      "expected": "holds"
    }
  ],
  "gradings": [],
  "primitives": []"#
    );
    assert_eq!(digest.len(), "\"\"\n}\n".len() + 64);
}

#[test]
fn every_changed_digit_is_noticed() {
    let text = json(&samples::record());
    let digits = text.char_indices().filter(|(_, c)| c.is_ascii_digit());
    let mut flipped = 0;
    for (position, digit) in digits {
        let other = if digit == '7' { '4' } else { '7' };
        let changed = format!("{}{other}{}", &text[..position], &text[position + 1..]);
        if let Ok(read) = read_json(&changed) {
            assert!(
                matches!(read.digest, Digest::Differs { .. }),
                "byte {position}"
            );
        }
        flipped += 1;
    }
    assert!(flipped > 200, "{flipped}");
}

#[test]
fn layout_does_not_matter_for_the_digest() {
    let text = json(&samples::record());
    let squeezed: String = text.lines().map(str::trim).collect();
    assert_eq!(read_json(&squeezed).unwrap().digest, Digest::Agrees);
    let bom = format!("\u{feff}{text}");
    assert_eq!(read_json(&bom).unwrap().digest, Digest::Agrees);
}

#[test]
fn the_bound_of_open_sweeps_stands_before_the_sources() {
    let mut record = samples::record();
    assert!(!json(&record).contains("\"through\""));
    record.spec.through = Some(-12);
    let text = json(&record);
    assert!(
        text.contains(",\n    \"through\": -12,\n    \"sources\": ["),
        "{text}"
    );
    let wrong = text.replace("\"through\": -12", "\"through\": \"12\"");
    let error = read_json(&wrong).unwrap_err().to_string();
    assert!(
        error.starts_with("spec.through: expected an integer"),
        "{error}"
    );
}

const CONTRACT_ONLY: &str = r#"{ "format": "linform-result/1", "program": "linform 0.1.0",
  "spec": {"title": "Traces", "blake3": "00"},
  "claims": [ { "name": "trace", "index": {"j": 3, "k": 0}, "verdict": "holds",
      "system": {"method": "matching", "rows": 33, "columns": 8},
      "form": [ {"term": "ratio(F,1)", "coefficient": "7/12"}, {"term": "ratio(F,2)", "coefficient": "1/3*t"} ],
      "evidence": { "kind": "proved" } } ] }"#;

#[test]
fn a_file_with_the_contract_fields_alone_is_read_and_what_it_lacks_is_listed() {
    let read = read_json(CONTRACT_ONLY).unwrap();
    assert_eq!(read.digest, Digest::Absent);
    let claim = &read.record.claims[0];
    assert_eq!(claim.index, samples::index(&[("j", 3), ("k", 0)]));
    let Finding::Holds { form } = &claim.finding else {
        panic!("{claim:?}");
    };
    assert_eq!(form[1].coefficient, samples::polynomial(&[(1, 3, 1)]));
    for path in [
        "spec.sources",
        "claims[0].target",
        "claims[0].terms",
        "claims[0].system.solver",
        "gradings",
    ] {
        assert!(
            read.missing.iter().any(|missing| missing == path),
            "{path}: {:?}",
            read.missing
        );
    }
}

#[test]
fn errors_say_what_where_and_what_to_do() {
    let cases = [
        (
            "{\n  \"format\": \"linform-result/1\",\n  oops}",
            "line 3, column 3: key must be a string",
        ),
        ("{}", "the document: the field \"format\" is missing"),
        ("[1]", "the document: expected an object, found a list"),
        (
            r#"{"format": "linform-result/2"}"#,
            "format: the format is \"linform-result/2\"",
        ),
        (
            r#"{"format": "linform-result/1", "claims": [{}]}"#,
            "claims[0]: the field \"verdict\" is missing",
        ),
        (
            r#"{"format": "linform-result/1", "claims": [{"name": 1, "verdict": "holds"}]}"#,
            "claims[0].name: expected a string, found a number",
        ),
        (
            r#"{"format": "linform-result/1", "claims": [{"name": "a", "verdict": "true"}]}"#,
            "claims[0].verdict: \"true\" is none of \"holds\", \"refuted\"",
        ),
        (
            r#"{"format": "linform-result/1", "claims": [{"name": "a", "verdict": "holds", "form": [{"term": "x", "coefficient": "1/0"}]}]}"#,
            "claims[0].form[0].coefficient: \"1/0\" is no coefficient",
        ),
        (
            r#"{"format": "linform-result/1", "claims": [{"name": "a", "verdict": "holds", "index": {"a b": 1.5}}]}"#,
            "claims[0].index[\"a b\"]: expected an integer",
        ),
        (
            r#"{"format": "linform-result/1", "claims": [], "claims": []}"#,
            "line 1, column",
        ),
    ];
    for (text, expected) in cases {
        let error = read_json(text).unwrap_err();
        assert!(error.to_string().starts_with(expected), "{error}");
        assert!(!error.help().is_empty());
    }
}

#[test]
fn hostile_files_end_in_an_error() {
    let with = |coefficient: &str| {
        format!(
            r#"{{"format": "linform-result/1", "claims": [{{"name": "a", "verdict": "holds",
               "form": [{{"term": "x", "coefficient": "{coefficient}"}}]}}]}}"#
        )
    };
    for coefficient in [
        "(((((((((1",
        "t^99999999999999999999",
        "t^4294967295*t",
        "1/2/3/4/5",
        "(t+1)^9",
        "t+",
        "--t",
        "1 2",
        "1/(t - t)",
        "",
        "q'^",
        "½",
        &"9".repeat(100_001),
    ] {
        assert!(
            read_json(&with(coefficient)).is_err(),
            "{}",
            &coefficient[..coefficient.len().min(20)]
        );
    }
    assert!(read_json(&with("1/2*t^2 - 3")).is_ok());
    assert!(read_json(&"{\"a\":".repeat(100_000)).is_err());
    // A name has a place in every exponent vector: many names and many terms must not multiply into memory.
    let names: String = (0..200).map(|i| format!("x{i} + ")).collect();
    assert!(read_json(&with(&format!("{names}1"))).is_err());
}

#[test]
fn a_missing_certificate_and_a_left_over_form_are_reported() {
    let flipped = CONTRACT_ONLY
        .replace("\"holds\"", "\"refuted\"")
        .replace("\"proved\"", "\"probabilistic\"");
    let read = read_json(&flipped).unwrap();
    assert!(read.missing.contains(&"claims[0].certificate".to_owned()));
    assert!(
        read.notes
            .iter()
            .any(|note| note.contains("claims[0].form was not read")),
        "{:?}",
        read.notes
    );
    assert!(
        read.notes
            .iter()
            .any(|note| note.contains("\"probabilistic\"")),
        "{:?}",
        read.notes
    );
    let typo = CONTRACT_ONLY.replace("\"evidence\"", "\"evidnce\"");
    assert!(read_json(&typo).unwrap().notes[0].contains("claims[0].evidnce"));
}

#[test]
fn remarks_on_a_file_are_bounded() {
    let claims = vec![r#"{"name": "a", "verdict": "unsettled", "unknown": 1}"#; 2000].join(",");
    let read = read_json(&format!(
        r#"{{"format": "linform-result/1", "claims": [{claims}]}}"#
    ))
    .unwrap();
    assert_eq!(read.record.claims.len(), 2000);
    assert_eq!((read.missing.len(), read.notes.len()), (1000, 1000));
    let fields: Vec<String> = (0..20_000).map(|field| format!("\"{field}\": 0")).collect();
    let error = read_json(&format!("{{{}}}", fields.join(","))).unwrap_err();
    assert!(
        error.to_string().contains("more than 10000 fields"),
        "{error}"
    );
}
