//! Every ready spec against its golden decisions, which `reference/decide.py` made with FLINT, without this program:
//! verdicts, coefficients of the forms, and sizes of the families of solutions.

use linform_engine::Options;
use linform_engine::record::{ClaimRecord, Finding, FormTerm, Refutation};
use linform_tests::{root, solve_spec, specs};
use serde::Deserialize;
use std::collections::BTreeSet;
use std::fs;

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Decision {
    name: String,
    index: indexmap::IndexMap<String, i64>,
    verdict: String,
    /// The number of solutions' parameters.
    kernel: Option<usize>,
    /// The number of terms offered.
    terms: Option<usize>,
    /// Position of the term, numerator and denominator of its coefficient.
    form: Option<Vec<(usize, String, String)>>,
}

fn positions(claim: &ClaimRecord, form: &[FormTerm]) -> Vec<(usize, String, String)> {
    form.iter()
        .map(|term| {
            let position = claim.terms.iter().position(|text| *text == term.term);
            let coefficient = &term.coefficient;
            (
                position.unwrap(),
                coefficient.numerator.text(&coefficient.names),
                coefficient.denominator.text(&coefficient.names),
            )
        })
        .collect()
}

/// A sum of monomials as a set: the order in which they are written does not matter here.
fn monomials(text: &str) -> BTreeSet<String> {
    let signed = text.replace(" - ", " + -");
    signed.split(" + ").map(str::to_owned).collect()
}

fn assert_agrees(claim: &ClaimRecord, decision: &Decision, place: &str) {
    assert_eq!(claim.finding.verdict().word(), decision.verdict, "{place}");
    let form = match &claim.finding {
        Finding::Holds { form } => form,
        Finding::Refuted(Refutation::OtherCoefficients { form, .. }) => form,
        Finding::Undetermined { kernel, .. } => {
            assert_eq!(Some(kernel.len()), decision.kernel, "{place}");
            return;
        }
        _ => {
            assert!(decision.form.is_none(), "{place}");
            return;
        }
    };
    assert_eq!(Some(claim.terms.len()), decision.terms, "{place}");
    let expected = decision.form.as_ref().unwrap();
    let found = positions(claim, form);
    assert_eq!(found.len(), expected.len(), "{place}");
    for (found, expected) in found.iter().zip(expected) {
        assert_eq!(found.0, expected.0, "{place}");
        assert_eq!(monomials(&found.1), monomials(&expected.1), "{place}");
        assert_eq!(monomials(&found.2), monomials(&expected.2), "{place}");
    }
}

#[test]
fn every_spec_has_its_golden_decisions() {
    for path in specs() {
        let name = path.file_stem().unwrap().to_string_lossy().into_owned();
        let golden = root().join("tests/golden").join(format!("{name}.json"));
        let Ok(text) = fs::read_to_string(&golden) else {
            panic!("{} is missing: see reference/decide.py", golden.display());
        };
        let decisions: Vec<Decision> = serde_json::from_str(&text).unwrap();
        let record = solve_spec(&path, Options::default());
        assert_eq!(record.claims.len(), decisions.len(), "{name}");
        for (claim, decision) in record.claims.iter().zip(&decisions) {
            let place = format!("{name}: {} {:?}", claim.name, claim.index);
            assert_eq!(claim.name, decision.name, "{place}");
            assert_eq!(claim.index, decision.index, "{place}");
            assert_agrees(claim, decision, &place);
        }
    }
}
