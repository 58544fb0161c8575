//! Included files, and every optional part of a claim.

use linform_spec::{
    Coefficients, Failure, Model, Pattern, SolutionKind, Target, Verdict, parse, text_of,
};

const RING: &str = r#"
title = "the ring"
[ring]
variable = "t"
generators = ["q", "q'"]
[ring.derivative]
"q" = "q'"
"q'" = "t*q + 2*q^3"
[law.F]
log_derivative = "q'^2 - t*q^2 - q^4"
[[claim]]
name = "own business of the included file"
target = "unknown"
terms = "q"
"#;

fn read(text: &str, files: &[(&str, &str)]) -> Result<Model, Failure> {
    parse("specs/main.toml", text.to_owned(), &mut |path| {
        files
            .iter()
            .find(|(name, _)| *name == path)
            .map(|(_, text)| (*text).to_owned())
            .ok_or_else(|| "no such file".to_owned())
    })
}

fn right(text: &str, files: &[(&str, &str)]) -> Model {
    read(text, files).unwrap_or_else(|failure| panic!("{failure}"))
}

#[test]
fn an_including_file_adds_constants_laws_and_families() {
    let model = right(
        "include = \"parts/ring.toml\"\n[ring]\nconstants = [\"b\"]\n[law.G]\nlog_derivative = \"b*q\"\n",
        &[("specs/parts/ring.toml", RING)],
    );
    assert_eq!(model.title, None);
    assert_eq!(model.ring.constants, ["b"]);
    assert_eq!(model.laws.keys().collect::<Vec<_>>(), ["F", "G"]);
    assert!(model.claims.is_empty());
    let paths: Vec<_> = model.sources.iter().map(|s| s.path.as_str()).collect();
    assert_eq!(paths, ["specs/main.toml", "specs/parts/ring.toml"]);
    let law = model.laws["F"].log_derivative.span;
    assert_eq!(
        &model.sources[law.file].text[law.start..law.end],
        "q'^2 - t*q^2 - q^4"
    );
}

#[test]
fn a_file_included_on_two_ways_is_read_once() {
    let model = right(
        "include = [\"a.toml\", \"b.toml\", \"../specs/./a.toml\"]\n",
        &[
            (
                "specs/a.toml",
                "include = \"ring.toml\"\n[law.A]\nlog_derivative = \"q\"\n",
            ),
            (
                "specs/b.toml",
                "include = \"ring.toml\"\n[law.B]\nlog_derivative = \"q\"\n",
            ),
            ("specs/ring.toml", RING),
        ],
    );
    assert_eq!(model.laws.keys().collect::<Vec<_>>(), ["F", "A", "B"]);
    assert_eq!(model.sources.len(), 4);
}

#[test]
fn a_file_that_includes_itself_is_refused() {
    let failure = read("include = \"main.toml\"\n", &[]).unwrap_err();
    assert!(
        failure.diagnostics[0].message.contains("circle"),
        "{failure}"
    );
}

#[test]
fn every_part_of_a_claim_is_kept() {
    let rest = r#"
[[claim]]
name = "factor"
for = "j = 1..3"
derivative = "D(q^j) - sum(w[i]*w[j-i] for i = 1..j-1)"
terms = ["ratio(F,k) for k = 1..2*j"]
yields = { "w[j]" = "2*ratio(F,k) for k = 1..2*j" }
coefficients = "rational"
expect = "undetermined"
[[claim]]
name = "numbers"
data = "g.csv"
at = "t"
value = "G"
error = "dG"
terms = ['derivative(F,n) for n = 0..2', 'column("B1")']
degree = 4
weight = -1
expect = "unsettled"
coefficients = "constant"
"#;
    let model = right(
        &format!("{RING}{rest}").replace("\"unknown\"", "\"q\""),
        &[],
    );
    let [_, factor, numbers] = &model.claims[..] else {
        panic!("three claims")
    };
    assert!(matches!(&factor.target, Target::Derivative(_)));
    assert_eq!(factor.coefficients, Coefficients::Rational);
    assert_eq!(factor.expect, Verdict::Undetermined);
    assert_eq!(factor.yields[0].family, "w");
    assert_eq!(
        factor.yields[0].pattern,
        [Pattern::Variable("j".to_owned())]
    );
    assert_eq!(
        text_of(&factor.yields[0].terms.items[0].body),
        "2*ratio(F,k)"
    );
    let Target::Data {
        path,
        at,
        value,
        error,
        path_span,
    } = &numbers.target
    else {
        panic!("a claim about numbers")
    };
    assert_eq!(
        (path.as_str(), at.as_str(), value.as_str()),
        ("g.csv", "t", "G")
    );
    assert_eq!(error.as_deref(), Some("dG"));
    assert_eq!(
        &model.sources[0].text[path_span.start..path_span.end],
        "\"g.csv\""
    );
    assert_eq!((numbers.degree, numbers.weight), (Some(4), Some(-1)));
    assert_eq!(text_of(&numbers.terms.items[1].body), "column(\"B1\")");
}

#[test]
fn initial_values_are_kept_exactly_and_in_the_order_of_the_generators() {
    let text = format!("{RING}[solution]\nat = \"-1/3\"\n\"q'\" = \"-2.5e-1\"\n\"q\" = \"0.36\"\n");
    let model = right(&text.replace("\"unknown\"", "\"q\""), &[]);
    let Some(SolutionKind::Initial { at, values }) = model.solution.map(|s| s.kind) else {
        panic!("initial values")
    };
    assert_eq!(at.value.to_string(), "-1/3");
    let values: Vec<_> = values
        .iter()
        .map(|(n, v)| format!("{n} {}", v.value))
        .collect();
    assert_eq!(values, ["q 9/25", "q' -1/4"]);
}

#[test]
fn names_may_be_written_in_other_alphabets_and_with_other_primes() {
    let model = right(
        "[ring]\ngenerators = [\"℘\", \"℘′\", \"ζ\"]\nconstants = [\"g2\"]\n[ring.derivative]\n\"℘\" = \"℘′\"\n\"℘'\" = \"6·℘^2 − g2/2\"\n\"ζ\" = \"-℘\"\n",
        &[],
    );
    assert_eq!(model.ring.generators, ["℘", "℘'", "ζ"]);
    assert_eq!(text_of(&model.ring.derivatives[1]), "6*℘^2 - g2/2");
    assert_eq!(model.ring.symbol_of("℘", 3), Some(("℘'", 2)));
    assert_eq!(model.ring.symbol_of("ζ", 0), Some(("ζ", 0)));
    assert_eq!(model.ring.symbol_of("g", 0), None);
}
