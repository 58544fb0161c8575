//! Every verdict with its data, small enough to see by eye, by both solvers.

use crate::common::{claim, only, run, text_of_form};
use linform_engine::record::{Finding, KnownBy, Refutation, StopKind};
use linform_engine::{Options, Solver, verify};
use linform_scalar::Unlimited;

/// Runs one claim by both solvers, verifies the record, and gives the finding.
fn finding(target: &str, terms: &str, more: &str) -> Finding {
    let rest = claim("c", target, terms, more);
    let mut findings = [Solver::FractionFree, Solver::Modular].map(|solver| {
        let record = run(
            &rest,
            Options {
                solver,
                ..Options::default()
            },
        );
        let verification = verify(&record, &Unlimited).unwrap();
        assert!(verification.is_confirmed(), "{verification:?}");
        only(&record).finding.clone()
    });
    assert_eq!(findings[0], findings[1], "the solvers differ on {target}");
    std::mem::replace(&mut findings[0], Finding::Holds { form: Vec::new() })
}

fn holds(target: &str, terms: &str, more: &str) -> String {
    match finding(target, terms, more) {
        Finding::Holds { form } => text_of_form(&form),
        other => panic!("{target}: {other:?}"),
    }
}

#[test]
fn a_unique_polynomial_solution_holds() {
    assert_eq!(
        holds("target = \"q^4\"", r#"["ratio(F,1)", "q^2", "q'^2"]"#, ""),
        "(-1)*ratio(F,1) + (-t)*q^2 + (1)*q'^2"
    );
    assert_eq!(holds("target = \"0\"", r#"["q", "q'"]"#, ""), "");
}

#[test]
fn higher_derivatives_are_reduced() {
    assert_eq!(
        holds("target = \"q'''\"", r#"["q", "q'", "q^2*q'"]"#, ""),
        "(1)*q + (t)*q' + (6)*q^2*q'"
    );
}

#[test]
fn a_contradiction_refutes() {
    let Finding::Refuted(Refutation::Contradiction { rows, value }) =
        finding("target = \"q\"", r#"["q'", "q^2"]"#, "")
    else {
        panic!("not a contradiction");
    };
    assert_eq!(
        (rows[0].monomial.as_str(), value.to_string().as_str()),
        ("q", "1")
    );
}

#[test]
fn a_claim_that_holds_only_with_rational_functions_is_refuted_and_the_form_is_shown() {
    let Finding::Refuted(Refutation::OtherCoefficients { form, independence }) =
        finding("target = \"ratio(F,1)\"", r#"["t*ratio(F,1)", "q^3"]"#, "")
    else {
        panic!("not refuted with a form");
    };
    assert_eq!(text_of_form(&form), "(1/t)*t*ratio(F,1)");
    assert_eq!(independence.rows.len(), 2);
    let rational = holds(
        "target = \"ratio(F,1)\"",
        r#"["t*ratio(F,1)", "q^3"]"#,
        "coefficients = \"rational\"",
    );
    assert_eq!(rational, "(1/t)*t*ratio(F,1)");
}

#[test]
fn constant_coefficients_leave_the_variable_to_the_monomials() {
    assert_eq!(
        holds(
            "target = \"t*q\"",
            r#"["q''", "q^3"]"#,
            "coefficients = \"constant\""
        ),
        "(1)*q'' + (-2)*q^3"
    );
    assert!(matches!(
        finding(
            "target = \"t*q\"",
            r#"["q"]"#,
            "coefficients = \"constant\""
        ),
        Finding::Refuted(Refutation::Contradiction { .. })
    ));
}

#[test]
fn dependent_terms_leave_a_family() {
    let Finding::Undetermined {
        particular,
        kernel,
        shift: None,
    } = finding("target = \"q^2\"", r#"["q^2", "t*q^2", "q'"]"#, "")
    else {
        panic!("not a family");
    };
    assert_eq!(text_of_form(&particular), "(1)*q^2");
    assert_eq!(kernel.len(), 1);
}

#[test]
fn a_target_known_by_its_derivative_is_integrated() {
    assert_eq!(
        holds("derivative = \"q^2\"", r#"["ratio(F,1)"]"#, ""),
        "(-1)*ratio(F,1)"
    );
    assert_eq!(
        holds("derivative = \"q^2 + 2*t*q*q'\"", r#"["q^2"]"#, ""),
        "(t)*q^2"
    );
}

#[test]
fn coefficients_that_are_no_derivatives_refute_a_primitive() {
    let Finding::Refuted(Refutation::NotAPrimitive {
        coefficients,
        derivatives,
        ..
    }) = finding("derivative = \"t*q^2\"", r#"["ratio(F,1)"]"#, "")
    else {
        panic!("not refuted as a primitive");
    };
    assert_eq!(text_of_form(&coefficients), "(-t)*ratio(F,1)");
    assert!(derivatives.is_empty());
}

#[test]
fn terms_that_depend_on_derivatives_of_others_are_tried_by_degree() {
    // (q)' = q' makes the doubled system dependent, and yet the form is unique.
    assert_eq!(
        holds("derivative = \"q + t*q'\"", r#"["q", "q'"]"#, ""),
        "(t)*q"
    );
    let Finding::Unsettled(unsettled) = finding("derivative = \"t*q'\"", r#"["q", "q'"]"#, "")
    else {
        panic!("a primitive of t q' needs the integral of q");
    };
    assert_eq!(unsettled.stop, StopKind::Degree);
}

#[test]
fn the_constant_of_integration_is_a_family_where_the_terms_allow_it() {
    let Finding::Undetermined {
        particular,
        kernel,
        shift: Some(shift),
    } = finding("derivative = \"q^2\"", r#"["1", "ratio(F,1)"]"#, "")
    else {
        panic!("not a family");
    };
    assert_eq!(text_of_form(&particular), "(-1)*ratio(F,1)");
    assert!(kernel.is_empty());
    assert_eq!(text_of_form(&shift), "(1)*1");
}

#[test]
fn the_smallest_length_that_works_is_found() {
    // V₃ = V₁³ − 3 V₁ q² − 2 q q′.
    let target = "target = \"ratio(F,1)^3 - 3*ratio(F,1)*q^2 - 2*q*q'\"";
    assert_eq!(
        holds(target, "\"ratio(F,n) for n = 1..\"", "at_most = 6"),
        "(1)*ratio(F,3)"
    );
    let rest = claim("c", target, "\"ratio(F,n) for n = 1..\"", "at_most = 2");
    let record = run(&rest, Options::default());
    assert_eq!(
        only(&record).terms.len(),
        2,
        "the refutation takes the longest list"
    );
    assert!(matches!(only(&record).finding, Finding::Refuted(_)));
}

#[test]
fn claims_yield_elements_for_later_claims() {
    let rest = format!(
        "{}{}",
        claim(
            "first",
            "target = \"q^4\"",
            r#"["q'^2", "t*q^2", "ratio(F,1)"]"#,
            r#"yields = { "w[3]" = ["q", "q'", "1"] }"#
        ),
        claim("second", "target = \"w[3]\"", r#"["q", "q'", "1"]"#, "")
    );
    let record = run(&rest, Options::default());
    let Finding::Holds { form } = &record.claims[1].finding else {
        panic!("{:?}", record.claims[1])
    };
    assert_eq!(text_of_form(form), "(1)*q + (-1)*q' + (-1)*1");
    assert!(verify(&record, &Unlimited).unwrap().is_confirmed());
}

#[test]
fn a_claim_that_uses_a_refuted_one_is_unsettled_and_says_so() {
    let rest = format!(
        "{}{}",
        claim(
            "first",
            "target = \"q^4\"",
            r#"["q"]"#,
            r#"yields = { "w[0]" = ["q"] }"#
        ),
        claim("second", "target = \"w[0]\"", r#"["q"]"#, "")
    );
    let record = run(&rest, Options::default());
    let Finding::Unsettled(unsettled) = &record.claims[1].finding else {
        panic!("{:?}", record.claims[1])
    };
    assert_eq!(unsettled.stop, StopKind::Prerequisite);
    assert!(
        unsettled.reason.contains("claim first"),
        "{}",
        unsettled.reason
    );
}

#[test]
fn a_primitive_that_does_not_exist_refutes_its_own_claim_and_unsettles_others() {
    let family = "[family.p]\nrules = [\"p[0] = q\", \"p[1]' = q\"]\nprimitive_terms = \"ratio(F,n) for n = 1..3\"\n";
    let rest = format!(
        "{family}{}{}",
        claim(
            "itself",
            "target = \"p[1]\"",
            "\"ratio(F,n) for n = 1..3\"",
            ""
        ),
        claim(
            "another",
            "target = \"p[1]^2\"",
            "\"ratio(F,n) for n = 1..3\"",
            ""
        )
    );
    let record = run(&rest, Options::default());
    assert!(
        matches!(record.claims[0].finding, Finding::Refuted(_)),
        "{:?}",
        record.claims[0]
    );
    assert_eq!(record.claims[0].known_by, KnownBy::Derivative);
    let Finding::Unsettled(unsettled) = &record.claims[1].finding else {
        panic!("{:?}", record.claims[1])
    };
    assert!(unsettled.reason.contains("`p[1]`"), "{}", unsettled.reason);
}

#[test]
fn a_unique_rational_coefficient_is_shown_where_terms_depend_on_derivatives() {
    // E′ = k E: the primitive of E is E/k, and no other.
    let text = r#"
[ring]
variable = "t"
constants = ["k"]
generators = ["E"]
[ring.derivative]
"E" = "k*E"
[[claim]]
name = "c"
derivative = "E"
terms = ["E"]
"#;
    let model =
        linform_spec::parse("spec.toml", text.to_owned(), &mut |_| Err(String::new())).unwrap();
    let prepared =
        linform_engine::prepare(model, None, linform_engine::PrepareLimits::default()).unwrap();
    let record = linform_engine::solve(
        &prepared,
        &[true],
        Options::default(),
        &Unlimited,
        &linform_engine::Silent,
    );
    let Finding::Refuted(Refutation::OtherCoefficients { form, .. }) = &only(&record).finding
    else {
        panic!("{:?}", only(&record).finding);
    };
    assert_eq!(text_of_form(form), "(1/k)*E");
    assert!(verify(&record, &Unlimited).unwrap().is_confirmed());
}

#[test]
fn a_first_integral_among_the_terms_leaves_a_primitive_open() {
    // x² + y² is constant, so 2 x y is the derivative of x² and of −y².
    let text = r#"
[ring]
variable = "t"
generators = ["x", "y"]
[ring.derivative]
"x" = "y"
"y" = "-x"
[[claim]]
name = "c"
derivative = "2*x*y"
terms = ["x^2", "y^2"]
"#;
    let model =
        linform_spec::parse("spec.toml", text.to_owned(), &mut |_| Err(String::new())).unwrap();
    let limits = linform_engine::PrepareLimits::default();
    let prepared = linform_engine::prepare(model, None, limits).unwrap();
    let record = linform_engine::solve(
        &prepared,
        &[true],
        Options::default(),
        &Unlimited,
        &linform_engine::Silent,
    );
    let Finding::Unsettled(unsettled) = &only(&record).finding else {
        panic!("{:?}", only(&record).finding);
    };
    assert!(unsettled.reason.contains("first integral"));
}
