//! What every renderer keeps for every record.

use crate::samples;
use crate::strategies::{claims, texts};
use crate::{TextOptions, csv, json, latex, text};
use proptest::collection::vec;
use proptest::prelude::*;

/// The depth of braces at the end, and the smallest on the way; escaped braces do not count.
pub(crate) fn braces(text: &str) -> (i64, i64) {
    let (mut depth, mut least, mut escaped) = (0i64, 0i64, false);
    for c in text.chars() {
        match (escaped, c) {
            (true, _) => escaped = false,
            (false, '\\') => escaped = true,
            (false, '{') => depth += 1,
            (false, '}') => depth -= 1,
            _ => {}
        }
        least = least.min(depth);
    }
    (depth, least)
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(48))]

    #[test]
    fn every_record_is_written_whole(claims in vec(claims(), 0..5), title in texts(), width in 0usize..120, unicode: bool) {
        let mut record = samples::record();
        record.claims.extend(claims);
        record.spec.title = Some(title);

        let written = text(&record, &TextOptions { colour: false, unicode, width });
        prop_assert!(!written.contains(|c: char| c.is_control() && c != '\n'));
        prop_assert_eq!(&written, &text(&record, &TextOptions { colour: false, unicode, width }));

        let document = latex(&record);
        prop_assert_eq!(braces(&document), (0, 0), "{}", document);
        prop_assert_eq!(document.matches("\\begin{").count(), document.matches("\\end{").count());
        prop_assert!(!document.contains("\n\n\n\n"));

        let table = csv(&record);
        let mut reader = ::csv::Reader::from_reader(table.as_bytes());
        let rows: Vec<_> = reader.records().collect::<Result<_, _>>().unwrap();
        prop_assert!(rows.len() >= record.claims.len());
        prop_assert!(rows.iter().all(|row| row.len() == 9));

        prop_assert_eq!(json(&record), json(&record));
    }
}
