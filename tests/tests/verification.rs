//! Records are re-checked by a way that took no part in finding them: true ones are confirmed, changed ones rejected.

use linform_engine::published::Coefficient;
use linform_engine::record::{Finding, FormTerm, Refutation, ResultRecord, Verdict};
use linform_engine::{CheckOutcome, Options, verify};
use linform_scalar::Unlimited;
use linform_scalar::published::{BigRational, One};
use linform_tests::{solve_named, solve_spec, specs};

#[test]
fn every_record_of_a_ready_spec_is_confirmed() {
    for path in specs() {
        let record = solve_spec(&path, Options::default());
        let verification = verify(&record, &Unlimited).unwrap();
        assert!(verification.is_confirmed(), "{verification:#?}");
        assert_eq!(verification.missing, 0);
        for check in &verification.claims {
            let confirmed = matches!(check.outcome, CheckOutcome::Confirmed(_));
            assert!(confirmed, "{}: {:?}", check.name, check.outcome);
        }
    }
}

/// Adds 1 to the constant term of the numerator.
fn change(coefficient: &mut Coefficient) {
    let constant = vec![0; coefficient.names.len()];
    coefficient.numerator.add_term(constant, BigRational::one());
}

/// Asserts that exactly the claim at this position is rejected.
fn assert_rejected(record: &ResultRecord, position: usize, what: &str) {
    let verification = verify(record, &Unlimited).unwrap();
    assert!(!verification.is_confirmed());
    for (index, check) in verification.claims.iter().enumerate() {
        let rejected = matches!(check.outcome, CheckOutcome::Rejected(_));
        assert_eq!(
            rejected,
            index == position,
            "{what}: {} {:?}",
            check.name,
            check.index
        );
    }
}

/// Specs small enough to re-check once for every coefficient.
const SMALL: [&str; 4] = ["halphen", "lame", "jacobi", "painleve-two-backlund"];

#[test]
fn a_changed_coefficient_of_a_form_is_rejected() {
    let mut changes = 0;
    for name in SMALL {
        let record = solve_named(name);
        for position in 0..record.claims.len() {
            let Finding::Holds { form } = &record.claims[position].finding else {
                continue;
            };
            for (term, original) in form.iter().enumerate() {
                let mut changed = record.clone();
                if let Finding::Holds { form } = &mut changed.claims[position].finding {
                    change(&mut form[term].coefficient);
                }
                assert_rejected(&changed, position, &original.term);
                changes += 1;
            }
        }
    }
    assert!(changes > 40);
}

#[test]
fn a_changed_certificate_is_rejected() {
    let mut changes = 0;
    for name in SMALL {
        let record = solve_named(name);
        for position in 0..record.claims.len() {
            let Finding::Refuted(Refutation::Contradiction { rows, .. }) =
                &record.claims[position].finding
            else {
                continue;
            };
            for (row, original) in rows.iter().enumerate() {
                let mut changed = record.clone();
                if let Finding::Refuted(Refutation::Contradiction { rows, .. }) =
                    &mut changed.claims[position].finding
                {
                    change(&mut rows[row].multiplier);
                }
                assert_rejected(&changed, position, &original.monomial);
                changes += 1;
            }
        }
    }
    assert!(changes > 5);
}

#[test]
fn a_verdict_without_its_evidence_is_rejected() {
    let record = solve_named("halphen");
    for position in 0..record.claims.len() {
        let mut changed = record.clone();
        let finding = &mut changed.claims[position].finding;
        *finding = match finding.verdict() {
            Verdict::Refuted => Finding::Holds { form: Vec::new() },
            _ => Finding::Holds {
                form: vec![FormTerm {
                    term: "w1*w2*w3*w1".to_owned(),
                    coefficient: Coefficient::parse("1", &Vec::new().into()).unwrap(),
                }],
            },
        };
        assert_rejected(&changed, position, "no evidence");
    }
}

#[test]
fn a_changed_spec_is_rejected() {
    let mut record = solve_named("halphen");
    let text = &mut record.spec.sources[0].text;
    *text = text.replace("w1*w2 + w1*w3 - w2*w3", "w1*w2 + w1*w3 + w2*w3");
    let verification = verify(&record, &Unlimited).unwrap();
    assert!(!verification.problems.is_empty(), "the hash does not match");
    assert!(!verification.is_confirmed());
}
