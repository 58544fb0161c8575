//! Every ready spec, end to end in the library: verdicts as expected, by every method, on any number of threads.

use linform_engine::record::{ResultRecord, Verdict};
use linform_engine::{Options, Solver, verify};
use linform_scalar::Unlimited;
use linform_tests::{claim, root, solve_spec, solve_text, specs};
use std::fs;

fn with(solver: Solver) -> Options {
    Options {
        solver,
        ..Options::default()
    }
}

/// The record without the name of the algorithm that solved each system.
fn without_solver(mut record: ResultRecord) -> ResultRecord {
    let systems = record
        .claims
        .iter_mut()
        .filter_map(|claim| claim.system.as_mut())
        .chain(
            record
                .primitives
                .iter_mut()
                .map(|primitive| &mut primitive.system),
        );
    for system in systems {
        system.solver.clear();
    }
    record
}

#[test]
fn every_claim_of_every_spec_has_the_expected_verdict() {
    let mut claims = 0;
    for path in specs() {
        let record = solve_spec(&path, Options::default());
        for claim in &record.claims {
            assert_eq!(
                claim.finding.verdict(),
                claim.expected,
                "{}: {} {:?}",
                path.display(),
                claim.name,
                claim.index
            );
        }
        let refuted = record
            .claims
            .iter()
            .filter(|claim| claim.finding.verdict() == Verdict::Refuted);
        // The starter spec is for reading.
        assert!(refuted.count() > 0 || path.ends_with("starter.toml"));
        claims += record.claims.len();
    }
    assert!(claims > 150);
}

#[test]
fn both_solvers_give_the_same_record_for_every_spec() {
    for path in specs() {
        let fraction_free = solve_spec(&path, with(Solver::FractionFree));
        let modular = solve_spec(&path, with(Solver::Modular));
        let chosen = solve_spec(&path, Options::default());
        let fraction_free = without_solver(fraction_free);
        assert_eq!(fraction_free, without_solver(modular), "{}", path.display());
        assert_eq!(fraction_free, without_solver(chosen), "{}", path.display());
    }
}

#[test]
fn results_are_the_same_bytes_on_any_number_of_threads() {
    for path in specs() {
        let json = |threads: usize| {
            let pool = rayon::ThreadPoolBuilder::new()
                .num_threads(threads)
                .build()
                .unwrap();
            pool.install(|| linform_report::json(&solve_spec(&path, Options::default())))
        };
        let once = json(1);
        for threads in [1, 2, 5] {
            assert_eq!(once, json(threads), "{}", path.display());
        }
    }
}

#[test]
fn results_of_every_spec_come_back_from_their_files() {
    for path in specs() {
        let record = solve_spec(&path, Options::default());
        let read = linform_report::read_json(&linform_report::json(&record)).unwrap();
        assert_eq!(read.record, record, "{}", path.display());
        assert_eq!(read.digest, linform_report::Digest::Agrees);
        assert!(read.missing.is_empty() && read.notes.is_empty());
    }
}

/// The text of the traces' spec with one rule changed.
fn broken(rule: &str, instead: &str) -> String {
    let text = fs::read_to_string(root().join("specs/airy-traces.toml")).unwrap();
    assert_eq!(text.matches(rule).count(), 1, "{rule}");
    text.replace(rule, instead)
}

/// With a wrong rule some claims must fail. Those that do not use the rule are true still, and a claim about what the rule
/// defines may state another identity, never the true elements' form.
#[test]
fn breaking_a_rule_never_gives_a_wrong_form() {
    let truth = solve_text(
        "airy-traces.toml",
        fs::read_to_string(root().join("specs/airy-traces.toml")).unwrap(),
        Options::default(),
    );
    for (rule, instead) in [
        ("a[1] = q' + q*u[0,0]", "a[1] = q' - q*u[0,0]"),
        ("+ a[1]*u[0,0] - a[0]*u[0,1]", "+ a[1]*u[0,0] + a[0]*u[0,1]"),
        ("(j-2)*a[j-3]", "(j-1)*a[j-3]"),
        ("u[j,0]' = -a[0]*a[j]", "u[j,0]' = a[0]*a[j]"),
        ("- a[j]*a[k-1] - u[j+1,k-1]", "- a[j]*a[k-1] + u[j+1,k-1]"),
        ("\"q'\" = \"t*q + 2*q^3\"", "\"q'\" = \"t*q + 3*q^3\""),
        (
            "log_derivative = \"q'^2 - t*q^2 - q^4\"",
            "log_derivative = \"q'^2 - t*q^2 + q^4\"",
        ),
    ] {
        let found = solve_text("broken.toml", broken(rule, instead), Options::default());
        // What is decided in the changed ring is true there.
        assert!(
            verify(&found, &Unlimited).unwrap().is_confirmed(),
            "{instead}"
        );
        let mut changed = 0;
        for (index, expected) in truth.claims.iter().enumerate() {
            let claim = &found.claims[index];
            if claim.finding != expected.finding {
                changed += 1;
            }
        }
        let traces = |record: &ResultRecord| {
            record
                .claims
                .iter()
                .filter(|claim| claim.name == "trace" && claim.finding.verdict() == Verdict::Holds)
                .count()
        };
        assert!(changed > 0, "{instead}");
        assert!(traces(&found) < traces(&truth), "{instead}");
        let check = claim(&found, "trace", &[3, 1]);
        assert_ne!(
            check.finding,
            claim(&truth, "trace", &[3, 1]).finding,
            "{instead}"
        );
    }
}
