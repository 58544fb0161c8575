use super::*;
use linform_engine::record::{CoefficientKind, Finding, Refutation};
use linform_engine::{Options, PrepareLimits, Silent, prepare, solve};
use linform_scalar::Unlimited;

/// A spec with a claim for every kind of finding, an element known by its derivative, and one that a claim yields.
const SPEC: &str = r#"
title = "Airy \\ function"
[ring]
variable = "x"
generators = ["A", "A'"]
[ring.derivative]
"A" = "A'"
"A'" = "x*A"

[family.w]
rules = ["w[0]' = A^2"]
primitive_terms = ["A^2", "A'^2"]

[[claim]]
name = "product"
target = "w[0]*A"
terms = ["A^3", "A*A'^2"]

[[claim]]
name = "source"
target = "x*A + A'/2"
terms = ["A", "A'"]
yields = { "z[1]" = ["A'", "A"] }

[[claim]]
name = "yielded"
target = "z[1]"
terms = ["A", "A'"]

[[claim]]
name = "integral"
derivative = "A^2"
terms = ["A^2", "A'^2"]

[[claim]]
name = "contradiction"
target = "A*A'"
terms = ["A^2", "A'^2"]
expect = "refuted"

[[claim]]
name = "rational only"
target = "A^2"
terms = "x*A^2"
expect = "refuted"

[[claim]]
name = "no primitive"
derivative = "A^2"
terms = "A^2"
expect = "refuted"

[[claim]]
name = "a \"family\""
target = "A^2"
terms = ["A^2", "x*A^2"]
expect = "undetermined"
"#;

fn solved(spec: &str) -> (ResultRecord, Prepared) {
    let mut no_files = |path: &str| Err(format!("{path} is not there"));
    let model = linform_spec::parse("airy.toml", spec.to_owned(), &mut no_files).unwrap();
    let prepared = prepare(model, None, PrepareLimits::default()).unwrap();
    let wanted = vec![true; prepared.instances.len()];
    let record = solve(&prepared, &wanted, Options::default(), &Unlimited, &Silent);
    (record, prepared)
}

fn statements(script: &str) -> &str {
    &script[script.rfind("x0 = ").unwrap()..]
}

/// The end of the script of PARI/GP, with `P` for the prime and `T` for the point of the witnesses.
const GP: &str = r#"x0 = 'x0;
x1 = 'x1;
x2 = 'x2;
X = [x0, x1, x2];
V = [x2];
Z = vector(#X, i, Mod(random(P), P));
v0 = x2*x0;
DX = [x1, v0, c(1)];
v1 = x0^2;
v2 = x1^2;
v3 = primitive("form of w[0]", v1, [v1, v2], 2, 2, [[x2, c(1), v1], [c(-1), c(1), v2]]);
v4 = v3*x0;
v5 = x0^3;
v6 = x0*v2;
holds("product", v4, [v5, v6], 0, 2, "polynomial", [[x2, c(1), v5], [c(-1), c(1), v6]]);
v7 = c(1, 2)*x1;
v8 = v0 + v7;
holds("source", v8, [x0, x1], 0, 2, "polynomial", [[x2, c(1), x0], [c(1, 2), c(1), x1]]);
v9 = form([[x2, c(1), x1], [c(1, 2), c(1), x0]]);
v10 = v9[1];
holds("yielded", v10, [x0, x1], 0, 2, "polynomial", [[c(1, 2), c(1), x0], [x2, c(1), x1]]);
holds("integral", v1, [v1, v2], 2, 2, "polynomial", [[x2, c(1), v1], [c(-1), c(1), v2]]);
v11 = x0*x1;
contradiction("contradiction", v11, [v1, v2], 0, 2, "polynomial", [[[1, 1], c(1)]], c(1));
v12 = x2*v1;
other("rational only", v1, [v12], 0, 2, "polynomial", [[c(1), x2, v12]], [[2, 0]], P, T);
no_primitive("no primitive", v1, [v1], 2, 2, "polynomial", [[[c(0), c(1)], [c(1), c(1)]]], [[2, 0], [1, 1]], P, [0, 0, 0]);
family("a \"family\"", v1, [v1, v12], 0, 2, "polynomial", [[c(1), c(1), v1]], [[[c(-1)*x2, c(1), v1], [c(1), c(1), v12]]], []);
print(passed, " checks passed, ", failed, " failed");
quit(failed > 0);
"#;

#[test]
fn a_script_holds_the_program_and_a_check_for_every_claim() {
    let (record, prepared) = solved(SPEC);
    let script = gp(&record, &prepared).unwrap();
    assert!(
        script.starts_with("\\\\ Airy / function: re-checks what linform"),
        "{script}"
    );
    assert!(script.contains("\\\\ x1 = A'\n"), "{script}");
    let mut found = statements(&script).to_owned();
    for claim in &record.claims {
        if let Finding::Refuted(
            Refutation::OtherCoefficients { independence, .. }
            | Refutation::NotAPrimitive { independence, .. },
        ) = &claim.finding
        {
            found = found.replace(&independence.prime.to_string(), "P");
            if let Some(value) = independence.point.get("x") {
                found = found.replace(&format!("[0, 0, {value}]"), "T");
            }
        }
    }
    assert_eq!(found, GP);
}

#[test]
fn both_languages_get_the_same_program() {
    let (record, prepared) = solved(SPEC);
    let common = |script: &str| -> Vec<String> {
        let statements = statements(script)
            .lines()
            .map(|line| line.trim_end_matches(';').replace("**", "^"));
        // The declarations of symbols, the point, the parts of a pair and the end differ.
        let statements =
            statements.filter(|line| !line.starts_with(['x', 'X', 'Z', 'p', 'q', 'i', ' ']));
        statements
            .filter(|line| !line.starts_with("v10 = "))
            .collect()
    };
    let python = sympy(&record, &prepared).unwrap();
    assert_eq!(common(&python), common(&gp(&record, &prepared).unwrap()));
    assert!(common(&python).len() > 20);
    assert!(python.starts_with("# Airy / function"), "{python}");
    assert!(python.ends_with("if failed:\n    raise SystemExit(1)\n"));
}

#[test]
fn a_family_is_checked_as_a_whole_and_its_shift_apart() {
    let spec = SPEC.split("[[claim]]").next().unwrap().to_owned()
        + "[[claim]]\nname = \"a\"\nderivative = \"A'\"\nterms = [\"A\", \"2\"]\nexpect = \"undetermined\"\n"
        + "[[claim]]\nname = \"b\"\nderivative = \"A'\"\nterms = [\"A\", \"2\"]\ncoefficients = \"constant\"\nexpect = \"undetermined\"\n";
    let (record, prepared) = solved(&spec);
    let script = gp(&record, &prepared).unwrap();
    // A target known by its derivative: the form 1/2 · 2 is 1. With constant coefficients its derivative vanishes.
    for line in [
        "family(\"a\", x1, [x0, c(2)], 2, 2, \"polynomial\", [[c(1), c(1), x0]], [], [[[c(1, 2), c(1), c(2)]]]);\n",
        "family(\"b\", x1, [x0, c(2)], 1, 3, \"constant\", [[c(1), c(1), x0]], [[[c(0), c(1), x0], [c(1), c(1), c(2)]]], []);\n",
    ] {
        assert!(script.contains(line), "{line}{}", statements(&script));
    }
}

#[test]
fn only_the_longest_list_of_terms_refutes() {
    let spec = SPEC.split("[[claim]]").next().unwrap().to_owned()
        + "[[claim]]\nname = \"open\"\ntarget = \"A\"\nterms = \"A^n*A' for n = 1..\"\nat_most = 3\nexpect = \"refuted\"\n";
    let (mut record, prepared) = solved(&spec);
    assert!(
        gp(&record, &prepared)
            .unwrap()
            .contains("\ncontradiction(\"open\"")
    );
    record.claims[0].terms.pop();
    let error = gp(&record, &prepared).unwrap_err().to_string();
    assert!(error.starts_with("the terms of \"open\""), "{error}");
}

#[test]
fn unsettled_claims_are_mentioned_and_not_checked() {
    let (mut record, prepared) = solved(SPEC);
    record.claims.truncate(1);
    record.claims[0].finding = crate::samples::timed_out();
    let script = sympy(&record, &prepared).unwrap();
    assert!(
        script.contains("\n# product is unsettled: time\n"),
        "{script}"
    );
    assert!(!statements(&script).contains("holds("));
}

#[test]
fn a_record_of_another_spec_is_refused() {
    let (record, prepared) = solved(SPEC);
    let mut renamed = record.clone();
    renamed.claims[1].name = "nothing".to_owned();
    let error = sympy(&renamed, &prepared).unwrap_err();
    assert_eq!(
        error.to_string(),
        "the spec has no claim \"nothing\"; solve the spec again"
    );

    let mut other_terms = record.clone();
    other_terms.claims[1].terms.pop();
    assert!(
        gp(&other_terms, &prepared)
            .unwrap_err()
            .to_string()
            .contains("the terms of")
    );

    let mut other_kind = record.clone();
    other_kind.claims[1].coefficients = CoefficientKind::Rational;
    let error = sympy(&other_kind, &prepared).unwrap_err().to_string();
    assert!(
        error.starts_with("the target and the kind of coefficients of \"source\""),
        "{error}"
    );

    let mut no_form = record.clone();
    no_form.primitives.clear();
    assert!(
        gp(&no_form, &prepared)
            .unwrap_err()
            .to_string()
            .contains("\"w[0]\"")
    );

    let mut other_form = record;
    let Finding::Holds { form } = &mut other_form.claims[0].finding else {
        panic!("{:?}", other_form.claims[0]);
    };
    form[0].term = "B^3".to_owned();
    assert!(
        sympy(&other_form, &prepared)
            .unwrap_err()
            .to_string()
            .contains("\"B^3\"")
    );
}
