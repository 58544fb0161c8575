//! Random rings and claims, decided by both solvers and judged by ranks that the tests compute themselves.

mod modular;
mod oracle;
mod spec;
mod tampering;

use linform_engine::record::{ClaimRecord, CoefficientKind, Finding, Refutation, ResultRecord};
use linform_engine::{Options, Solver, verify};
use linform_report::{TextOptions, csv, json, latex, read_json, text};
use linform_scalar::Unlimited;
use linform_tests::solve_text;
use modular::Poly;
use oracle::{Oracle, Question};
use proptest::collection::vec;
use proptest::prelude::*;
use proptest::test_runner::{Config, RngSeed};
use spec::{Element, RandomRing, Tape};

/// A fixed seed, shown by a failing test; the environment variable `LINFORM_ROUNDS` multiplies the cases and changes it.
fn cases(count: u32) -> Config {
    let factor = std::env::var("LINFORM_ROUNDS").ok();
    let factor: u32 = factor.and_then(|text| text.parse().ok()).unwrap_or(1);
    Config {
        cases: count * factor,
        rng_seed: RngSeed::Fixed(u64::from(factor)),
        failure_persistence: None,
        max_shrink_iters: 2000,
        ..Config::default()
    }
}

const PLAIN: TextOptions = TextOptions {
    colour: false,
    unicode: false,
    width: 0,
};

/// What is asked about the terms.
#[derive(Clone, Copy, Debug)]
enum Plan {
    Planted,
    PlantedRational,
    Disturbed,
    Anything,
}

fn question(ring: &RandomRing, tape: &mut Tape, name: usize) -> Question {
    let kinds = [
        CoefficientKind::Polynomial,
        CoefficientKind::Rational,
        CoefficientKind::Constant,
    ];
    let kind = kinds[tape.below(3)];
    let plan = [
        Plan::Planted,
        Plan::PlantedRational,
        Plan::Disturbed,
        Plan::Anything,
    ][tape.below(4)];
    let by_derivative = tape.below(3) == 2;
    let constant = kind == CoefficientKind::Constant;
    let mut terms: Vec<Element> = (0..1 + tape.below(4)).map(|_| ring.term(tape)).collect();
    if tape.below(6) == 5 {
        let mut dependent = terms[0].times(&ring.coefficient(tape, constant));
        dependent = dependent.plus(&terms[terms.len() - 1]);
        terms.push(dependent);
    }
    let coefficients: Vec<Element> = terms
        .iter()
        .map(|_| ring.coefficient(tape, constant))
        .collect();
    let mut sum = ring.number(0);
    for (term, coefficient) in terms.iter().zip(&coefficients) {
        sum = sum.plus(&coefficient.times(term));
    }
    let one = Poly::constant(ring.symbols(), 1);
    let values: Vec<Poly> = coefficients
        .into_iter()
        .map(|element| element.value)
        .collect();
    let mut planted = Some((values, one));
    let undivided = terms.clone();
    match plan {
        Plan::Planted => {}
        Plan::PlantedRational if ring.has_base() && !(constant && ring.variable.is_some()) => {
            let from = ring.generators + tape.below(ring.symbols() - ring.generators);
            let divisor = ring.symbol(from).plus(&ring.number(tape.below(3) as i64));
            terms = terms.iter().map(|term| divisor.times(term)).collect();
            planted = planted.map(|(values, _)| (values, divisor.value));
        }
        Plan::PlantedRational => {}
        Plan::Disturbed => {
            sum = sum.plus(&ring.polynomial(tape, 0, ring.symbols(), 3));
            planted = None;
        }
        Plan::Anything => {
            sum = ring.polynomial(tape, 0, ring.symbols(), 3);
            planted = None;
        }
    }
    let (key, target) = match (by_derivative, &planted) {
        (false, _) => ("target", sum),
        (true, Some(_)) => ("derivative", ring.derived(&sum)),
        (true, None) => ("derivative", sum),
    };
    let texts: Vec<&str> = terms.iter().map(|term| term.text.as_str()).collect();
    let word = match kind {
        CoefficientKind::Polynomial => "polynomial",
        CoefficientKind::Rational => "rational",
        CoefficientKind::Constant => "constant",
    };
    let text = format!(
        "[[claim]]\nname = \"c{name}\"\n{key} = \"{}\"\nterms = {texts:?}\ncoefficients = \"{word}\"\n",
        target.text
    );
    Question {
        text,
        target,
        terms,
        undivided,
        kind,
        by_derivative,
        planted,
    }
}

/// The part of a finding that does not depend on the solver.
fn essence(claim: &ClaimRecord) -> String {
    match &claim.finding {
        Finding::Holds { form } => format!("holds {form:?}"),
        Finding::Refuted(Refutation::OtherCoefficients { form, .. }) => format!("other {form:?}"),
        Finding::Refuted(Refutation::NotAPrimitive {
            coefficients,
            derivatives,
            ..
        }) => {
            format!("no primitive {coefficients:?} {derivatives:?}")
        }
        Finding::Undetermined { kernel, shift, .. } => {
            format!("family {} {}", kernel.len(), shift.is_some())
        }
        other => other.verdict().word().to_owned(),
    }
}

fn judge_record(
    record: &ResultRecord,
    oracle: &Oracle,
    questions: &[Question],
) -> Result<(), String> {
    for (claim, question) in record.claims.iter().zip(questions) {
        oracle
            .judge(question, claim)
            .map_err(|wrong| format!("{}: {wrong}", claim.name))?;
    }
    let verification =
        verify(record, &Unlimited).map_err(|failure| format!("{:?}", failure.diagnostics))?;
    if !verification.is_confirmed() {
        return Err(format!("not confirmed: {verification:?}"));
    }
    let read = read_json(&json(record)).map_err(|error| error.to_string())?;
    if read.record != *record {
        return Err("the record changes when it is written and read".to_owned());
    }
    for (colour, unicode, width) in [(false, false, 0), (true, true, 40)] {
        text(
            record,
            &TextOptions {
                colour,
                unicode,
                width,
            },
        );
    }
    for rendered in [latex(record), csv(record)] {
        assert!(!rendered.is_empty());
    }
    Ok(())
}

fn check(bytes: &[u8]) -> Result<(), String> {
    let mut tape = Tape::new(bytes);
    let ring = RandomRing::new(&mut tape);
    let questions: Vec<Question> = (0..1 + tape.below(3))
        .map(|name| question(&ring, &mut tape, name))
        .collect();
    let claims: String = questions
        .iter()
        .map(|question| question.text.as_str())
        .collect();
    let spec = format!("{}{claims}", ring.text);
    let oracle = Oracle::new(&ring);
    let report = |wrong: String| format!("{spec}\n{wrong}");
    let records = [Solver::FractionFree, Solver::Modular].map(|solver| {
        let options = Options {
            solver,
            ..Options::default()
        };
        solve_text("random.toml", spec.clone(), options)
    });
    for record in &records {
        let shown = |wrong| format!("{wrong}\n{}", text(record, &PLAIN));
        judge_record(record, &oracle, &questions)
            .map_err(shown)
            .map_err(report)?;
        tampering::is_noticed(record, &questions, &ring, &mut tape).map_err(report)?;
    }
    for (left, right) in records[0].claims.iter().zip(&records[1].claims) {
        if essence(left) != essence(right) {
            return Err(report(format!(
                "the solvers differ:\n{}\n{}",
                essence(left),
                essence(right)
            )));
        }
    }
    Ok(())
}

proptest! {
    #![proptest_config(cases(64))]

    #[test]
    fn verdicts_on_random_claims_are_those_of_the_ranks(bytes in vec(any::<u8>(), 0..160)) {
        check(&bytes).map_err(TestCaseError::fail)?;
    }
}
