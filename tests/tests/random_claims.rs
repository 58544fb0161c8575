//! Claims at the borders between verdicts: each was once decided or checked wrongly.

use linform_engine::published::Coefficient;
use linform_engine::record::{
    Finding, FormTerm, IndependenceRecord, Refutation, ResultRecord, Verdict,
};
use linform_engine::{Options, Solver, verify};
use linform_scalar::Unlimited;
use linform_tests::{form, solve_text, texts};

const RING: &str = r#"
[ring]
variable = "t"
generators = ["q", "q'"]
[ring.derivative]
"q" = "q'"
"q'" = "t*q + 2*q^3"
"#;

/// The record of a spec in the ring of Painlevé II, the same by both solvers.
fn decided(rest: &str) -> ResultRecord {
    let [left, right] = [Solver::FractionFree, Solver::Modular].map(|solver| {
        let options = Options {
            solver,
            ..Options::default()
        };
        solve_text("spec.toml", format!("{RING}{rest}"), options)
    });
    for (l, r) in left.claims.iter().zip(&right.claims) {
        assert_eq!(l.finding, r.finding);
    }
    left
}

fn one_claim(lines: &str) -> ResultRecord {
    decided(&format!("[[claim]]\nname = \"c\"\n{lines}\n"))
}

fn confirmed(record: &ResultRecord) -> bool {
    verify(record, &Unlimited).unwrap().is_confirmed()
}

fn term(term: &str, coefficient: &str) -> FormTerm {
    let names = vec!["t".to_owned()].into();
    FormTerm {
        term: term.to_owned(),
        coefficient: Coefficient::parse(coefficient, &names).unwrap(),
    }
}

#[test]
fn a_rational_claim_about_a_primitive_admits_rational_coefficients() {
    let record = decided(
        r#"
[family.p]
rules = ["p[1]' = q'"]
primitive_terms = ["t*q"]
[[claim]]
name = "rational"
target = "p[1]"
terms = ["t*q"]
coefficients = "rational"
[[claim]]
name = "polynomial"
target = "p[1]"
terms = ["t*q"]
"#,
    );
    assert!(confirmed(&record));
    assert_eq!(
        texts(form(&record.claims[0])),
        [("t*q".to_owned(), "1/t".to_owned())]
    );
    assert_eq!(record.claims[1].finding.verdict(), Verdict::Refuted);
}

#[test]
fn a_constant_claim_with_the_variable_in_a_coefficient_is_rejected() {
    let mut record = one_claim("target = \"t*q\"\nterms = [\"q\"]\ncoefficients = \"constant\"");
    assert_eq!(record.claims[0].finding.verdict(), Verdict::Refuted);
    record.claims[0].finding = Finding::Holds {
        form: vec![term("q", "t")],
    };
    assert!(!confirmed(&record));
}

#[test]
fn other_coefficients_of_a_constant_claim_must_be_free_of_the_variable() {
    let mut record =
        one_claim("target = \"q\"\nterms = [\"q\", \"t*q\"]\ncoefficients = \"constant\"");
    assert_eq!(record.claims[0].finding.verdict(), Verdict::Holds);
    let independence = IndependenceRecord {
        rows: vec!["q".to_owned(), "q*t".to_owned()],
        prime: 1_000_003,
        point: Default::default(),
    };
    record.claims[0].finding = Finding::Refuted(Refutation::OtherCoefficients {
        form: vec![term("t*q", "1/t")],
        independence,
    });
    assert!(!confirmed(&record));
}

#[test]
fn one_member_of_a_family_is_no_proof_that_a_claim_holds() {
    let mut record = one_claim("target = \"q\"\nterms = [\"q\", \"t*q\"]");
    let Finding::Undetermined { particular, .. } = record.claims[0].finding.clone() else {
        panic!("{:?}", record.claims[0].finding);
    };
    record.claims[0].finding = Finding::Holds { form: particular };
    assert!(!confirmed(&record));
}

#[test]
fn a_part_of_a_kernel_is_rejected() {
    let record = one_claim("target = \"q\"\nterms = [\"q\", \"2*q\", \"t*q\"]");
    for change in [0, 1] {
        let mut changed = record.clone();
        let Finding::Undetermined { kernel, .. } = &mut changed.claims[0].finding else {
            panic!("{:?}", record.claims[0].finding);
        };
        assert_eq!(kernel.len(), 2);
        if change == 0 {
            kernel.pop();
        } else {
            kernel[1] = kernel[0].clone();
        }
        assert!(!confirmed(&changed));
    }
}

#[test]
fn the_kernel_of_a_derivative_claim_is_complete() {
    // q, 2q and t q span a space of dimension 1 over the rational functions.
    let record = one_claim("derivative = \"q'\"\nterms = [\"q\", \"2*q\", \"t*q\"]");
    let Finding::Undetermined { kernel, .. } = &record.claims[0].finding else {
        panic!("{:?}", record.claims[0].finding);
    };
    assert_eq!(kernel.len(), 2);
}

#[test]
fn a_constant_of_integration_is_not_multiplied_by_functions() {
    let record = one_claim("derivative = \"q'\"\nterms = [\"q\", \"1\"]");
    assert_eq!(record.claims[0].finding.verdict(), Verdict::Undetermined);
    let options = linform_report::TextOptions {
        colour: false,
        unicode: false,
        width: 0,
    };
    let text = linform_report::text(&record, &options);
    assert!(!text.contains("any rational function"), "{text}");
}
