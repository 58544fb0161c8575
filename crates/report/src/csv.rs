//! A record as a table.

use linform_engine::record::{ClaimRecord, Finding, ResultRecord};

const HEADER: [&str; 9] = [
    "claim",
    "index",
    "target",
    "verdict",
    "term",
    "coefficient",
    "rows",
    "columns",
    "evidence",
];

/// The forms that were found as CSV (RFC 4180, with a header): one row for each term, and one row with empty `term` and
/// `coefficient` for a claim without a form, so that no claim is missing.
///
/// Names, targets and terms that a spreadsheet would take for a formula (they begin with `=`, `+`, `-`, `@`, a tabulator
/// or a line break) get a leading apostrophe. Coefficients are left as they are, so that a program can read them: they
/// hold digits, names of the ring and `+ - * / ^ ( )` only.
pub fn csv(record: &ResultRecord) -> String {
    let mut rows = vec![HEADER.map(str::to_owned)];
    for claim in &record.claims {
        match &claim.finding {
            Finding::Holds { form } if !form.is_empty() => rows.extend(
                form.iter()
                    .map(|part| cells(claim, &part.term, &part.coefficient.to_string())),
            ),
            _ => rows.push(cells(claim, "", "")),
        }
    }
    let mut bytes = Vec::new();
    let mut writer = ::csv::WriterBuilder::new()
        .terminator(::csv::Terminator::CRLF)
        .from_writer(&mut bytes);
    // Writing to memory does not fail, and all rows have the same length.
    let written = rows.iter().try_for_each(|row| writer.write_record(row));
    debug_assert!(written.is_ok());
    drop(writer);
    String::from_utf8_lossy(&bytes).into_owned()
}

fn cells(claim: &ClaimRecord, term: &str, coefficient: &str) -> [String; 9] {
    let index: Vec<String> = claim
        .index
        .iter()
        .map(|(name, value)| format!("{name}={value}"))
        .collect();
    let shape = |count: fn(&linform_engine::record::SystemRecord) -> usize| {
        claim
            .system
            .as_ref()
            .map_or(String::new(), |system| count(system).to_string())
    };
    let evidence = match &claim.finding {
        Finding::Unsettled(_) => "none",
        _ => "proved",
    };
    [
        harmless(&claim.name),
        harmless(&index.join(" ")),
        harmless(&claim.target),
        claim.finding.verdict().word().to_owned(),
        harmless(term),
        coefficient.to_owned(),
        shape(|system| system.rows),
        shape(|system| system.columns),
        evidence.to_owned(),
    ]
}

fn harmless(text: &str) -> String {
    if text.starts_with(['=', '+', '-', '@', '\t', '\r', '\n']) {
        format!("'{text}")
    } else {
        text.to_owned()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::samples;

    #[test]
    fn every_term_and_every_claim_has_a_row() {
        let table = csv(&samples::record());
        let rows: Vec<&str> = table.split("\r\n").collect();
        assert_eq!(
            rows[0],
            "claim,index,target,verdict,term,coefficient,rows,columns,evidence"
        );
        assert_eq!(
            rows[1],
            "trace,j=2 k=0,\"u[2,0]\",holds,\"ratio(F,1)\",1/3*t,33,8,proved"
        );
        assert_eq!(
            rows[6],
            "single product,,\"u[0,0]*u[1,1]\",refuted,,,28,4,proved"
        );
        assert_eq!(rows[10], "large,,\"u[90,90]\",unsettled,,,,,none");
        assert_eq!(rows.len(), 12);
    }

    #[test]
    fn texts_of_the_spec_are_no_formulas_and_are_read_back() {
        let mut record = samples::record();
        record.claims.truncate(1);
        record.claims[0].name = "=HYPERLINK(\"x\")\n,".to_owned();
        record.claims[0].target = "-u[2,0]".to_owned();
        let Finding::Holds { form } = &mut record.claims[0].finding else {
            panic!("a claim that holds");
        };
        form[0].coefficient = samples::polynomial(&[(-1, 3, 1)]);
        let table = csv(&record);
        let mut reader = ::csv::Reader::from_reader(table.as_bytes());
        let row = reader.records().next().unwrap().unwrap();
        assert_eq!(&row[0], "'=HYPERLINK(\"x\")\n,");
        assert_eq!(&row[2], "'-u[2,0]");
        assert_eq!(&row[5], "-1/3*t");
    }
}
