//! Indices put into expressions, sums, open ranges and open sweeps.

use linform_spec::{
    Environment, Model, Relation, index_value, parse, parse_expression, substitute, summands,
    text_of,
};

fn env(pairs: &[(&str, i64)]) -> Environment {
    pairs.iter().map(|(n, v)| ((*n).to_owned(), *v)).collect()
}

/// The text with the indices put in, or the message of the error.
fn put(text: &str, pairs: &[(&str, i64)]) -> String {
    match substitute(&parse_expression(text).unwrap(), &env(pairs)) {
        Ok(expr) => text_of(&expr),
        Err(error) => error.message,
    }
}

const RING: &str = r#"
[ring]
variable = "t"
generators = ["q", "q'"]
[ring.derivative]
"q" = "q'"
"q'" = "t*q + 2*q^3"
[law.F]
log_derivative = "q'^2 - t*q^2 - q^4"
[family.u]
symmetric = true
rules = ["u[j,k] = q for 0 <= k <= j"]
"#;

fn model(rest: &str) -> Model {
    parse("test.toml", format!("{RING}{rest}"), &mut |path| {
        Err(format!("no {path}"))
    })
    .unwrap_or_else(|failure| panic!("{failure}"))
}

fn claim(rest: &str) -> linform_spec::Claim {
    let text = format!("[[claim]]\nname = \"c\"\ntarget = \"q\"\n{rest}\n");
    model(&text).claims.remove(0)
}

#[test]
fn arithmetic_of_indices_becomes_a_literal() {
    let j = [("j", 5)];
    assert_eq!(put("(j-2)*a[j-3]", &j), "3*a[2]");
    assert_eq!(put("a[2*(j-1)/4]", &j), "a[2]");
    assert_eq!(put("t^(j-2)*ratio(F, j^2)", &j), "t^3*ratio(F,25)");
    assert_eq!(put("minor(u,[j,j+1],[0,j])", &j), "minor(u,[5,6],[0,5])");
    assert_eq!(put("q/(j+1) + j/2*t", &j), "q/6 + 5/2*t");
    assert_eq!(put("correction(edge, 2*j)", &j), "correction(edge,10)");
    assert_eq!(put("-j*t", &j), "-5*t");
}

#[test]
fn negative_values_stand_in_parentheses_outside_of_indices() {
    let j = [("j", -1)];
    assert_eq!(put("t*j + u[j,0]", &j), "t*(-1) + u[-1,0]");
    assert_eq!(put("t - j", &j), "t - (-1)");
    assert_eq!(put("(-1)^(j+3)*q", &j), "1*q");
}

#[test]
fn powers_too_large_for_an_index_stay_powers() {
    assert_eq!(put("2^j*q", &[("j", 100)]), "2^100*q");
    assert_eq!(put("u[2^j,0]", &[("j", 100)]), "this index is out of range");
}

#[test]
fn errors_name_what_the_indices_make_wrong() {
    assert_eq!(put("q^(2-j)", &[("j", 3)]), "the exponent (2 - j) is -1");
    assert_eq!(put("q^j", &[("j", 20_000)]), "the exponent j is 20000");
    assert_eq!(
        put("q/(j-3)", &[("j", 3)]),
        "the divisor (j - 3) is 0 for these indices"
    );
    assert_eq!(
        put("q^(j/2)", &[("j", 3)]),
        "the exponent 3/2 is not an integer"
    );
    assert_eq!(
        put("a[j/2]", &[("j", 3)]),
        "the index 3/2 is not an integer"
    );
    assert_eq!(
        put("a[j/0]", &[("j", 3)]),
        "the index 3/0 is not an integer"
    );
    assert_eq!(
        put("a[j+1]", &[("j", i64::MAX)]),
        "this index is out of range"
    );
    assert_eq!(
        put("a[-(j-1)]", &[("j", i64::MIN + 1)]),
        "this index is out of range"
    );
    let value = |text: &str| index_value(&parse_expression(text).unwrap(), &env(&[("j", 1)]));
    assert_eq!(value("j*(2-5)^2").unwrap(), 9);
    assert!(value("k").is_err() && value("u[1]").is_err() && value("j'").is_err());
}

#[test]
fn a_sum_keeps_its_variable_and_gets_literal_bounds() {
    let text = "sum(w[i]*z[j-i] for i = 1..j-1)";
    assert_eq!(
        put(text, &[("j", 3)]),
        "sum(w[i]*z[3 - i] for i = 1..2)".replace(" - ", "-")
    );
    // A bound variable of the same name outside is not the variable of the sum.
    assert_eq!(
        put("i*sum(i*q for i = 1..i)", &[("i", 3)]),
        "3*sum(i*q for i = 1..3)"
    );
}

#[test]
fn summands_are_closed_and_an_empty_sum_has_none() {
    let list = |text: &str, pairs: &[(&str, i64)]| {
        let sum = substitute(&parse_expression(text).unwrap(), &env(pairs)).unwrap();
        summands(&sum).map(|list| list.iter().map(text_of).collect::<Vec<_>>())
    };
    let text = "sum(w[i]*z[j-i] for i = 1..j-1)";
    assert_eq!(list(text, &[("j", 3)]).unwrap(), ["w[1]*z[2]", "w[2]*z[1]"]);
    assert!(list(text, &[("j", 1)]).unwrap().is_empty());
    assert!(list(text, &[("j", -5)]).unwrap().is_empty());
    assert!(list("q", &[]).is_err());
    let long = list("sum(q for i = 0..10^12)", &[]).unwrap_err();
    assert!(long.message.contains("more than 1000000 summands"));
}

#[test]
fn nested_sums_are_listed_from_the_outside() {
    let outer = parse_expression("sum(sum(u[i,k] for k = 0..i) for i = 1..2)").unwrap();
    let inner = summands(&outer).unwrap();
    assert_eq!(text_of(&inner[1]), "sum(u[2,k] for k = 0..2)");
    assert_eq!(summands(&inner[1]).unwrap().len(), 3);
}

#[test]
fn an_open_list_takes_as_many_values_as_it_is_told() {
    let claim = claim("terms = [\"q\", \"ratio(F,n) for n = 2..\"]\nat_most = 6");
    assert!(claim.terms.is_open() && !claim.is_open());
    assert_eq!(claim.terms.first_open_value(&env(&[])).unwrap(), Some(2));
    let texts = |length| -> Vec<String> {
        let terms = claim.terms.expand(&env(&[]), Some(length)).unwrap();
        terms.iter().map(text_of).collect()
    };
    assert_eq!(texts(2), ["q", "ratio(F,2)", "ratio(F,3)"]);
    assert_eq!(texts(0), ["q"]);
    assert!(claim.terms.expand(&env(&[]), None).is_err());
}

#[test]
fn an_open_sweep_ends_where_the_sum_of_its_indices_does() {
    let claim = claim("for = \"n = 0.., k = -1..n\"\nterms = \"q\"");
    assert!(claim.is_open());
    let error = claim.instances(None, 100).unwrap_err();
    assert!(error.help.unwrap().contains("--through"));
    let instances = claim.instances(Some(2), 100).unwrap();
    let expected = [
        (0, -1),
        (0, 0),
        (1, -1),
        (1, 0),
        (1, 1),
        (2, -1),
        (2, 0),
        (3, -1),
    ];
    assert_eq!(instances, expected.map(|(n, k)| env(&[("n", n), ("k", k)])));
}

#[test]
fn a_closed_sweep_is_not_bounded() {
    let claim = claim("for = \"n = 3..5\"\nterms = \"q\"");
    let instances = claim.instances(Some(4), 100).unwrap();
    assert_eq!(instances, [3, 4, 5].map(|n| env(&[("n", n)])));
}

#[test]
fn a_claim_without_sweep_has_one_instance() {
    let claim = claim("terms = \"q\"");
    assert_eq!(claim.instances(None, 1).unwrap(), [env(&[])]);
}

#[test]
fn the_limit_on_instances_is_exact() {
    let claim = claim("for = \"j = 1..10, k = 1..10, j + k <= 5\"\nterms = \"q\"");
    assert_eq!(claim.instances(None, 100).unwrap().len(), 10);
    assert!(
        claim
            .instances(None, 9)
            .unwrap_err()
            .message
            .contains("more than 9")
    );
}

#[test]
fn terms_may_run_over_several_indices_with_conditions() {
    let claim = claim(
        "for = \"m = 3..3\"\nterms = \"t^i*ratio(F,n) for n = 1..m, i = 0..m, 2*i + n == m, n != 3\"",
    );
    let terms = claim.terms.expand(&env(&[("m", 3)]), None).unwrap();
    assert_eq!(
        terms.iter().map(text_of).collect::<Vec<_>>(),
        ["t^1*ratio(F,1)"]
    );
}

#[test]
fn a_range_in_a_rule_is_a_condition() {
    let model = model(
        "[family.w]\nrules = [\"w[j] = 1 for j = 2..4, j != 3\", \"w[j] = 2 for j = 7\", \"w[j] = 3 for j = 9..\"]\n",
    );
    let value = |j: i64| {
        let resolved = model.families["w"].resolve(&[j])?;
        Some(text_of(&resolved.rule.body))
    };
    let found: Vec<_> = (1..=10).filter_map(value).collect();
    assert_eq!(found, ["1", "1", "2", "3", "3"]);
    assert_eq!(
        model.families["w"].rules[0].conditions[1].relations,
        [Relation::LessEqual, Relation::LessEqual]
    );
}

#[test]
fn a_condition_that_cannot_be_evaluated_does_not_match() {
    let model = model("[family.w]\nrules = [\"w[j] = 1 for j^3 > 0\", \"w[j] = 2\"]\n");
    let resolved = model.families["w"].resolve(&[i64::MAX]).unwrap();
    assert_eq!(text_of(&resolved.rule.body), "2");
}

#[test]
fn the_first_rule_wins_in_a_symmetric_family_whatever_the_order_of_its_indices() {
    let model = model(
        "[family.n]\nsymmetric = true\nrules = [\"n[0,j] = q^j\", \"n[i,j] = t^(i+j)\", \"n[0,3] = t\"]\n[family.m]\nsymmetric = true\nrules = [\"m[i,j] = q for i <= j\"]\n",
    );
    let number = |family: &str, indices: &[i64]| {
        let family = &model.families[family];
        let resolved = family.resolve(indices).unwrap();
        let rule = family.rules.iter().position(|rule| rule == resolved.rule);
        (rule, resolved.indices)
    };
    for indices in [[0, 3], [3, 0]] {
        assert_eq!(number("n", &indices), (Some(0), vec![0, 3]));
    }
    for indices in [[1, 2], [2, 1]] {
        assert_eq!(number("n", &indices), (Some(1), vec![2, 1]));
        assert_eq!(number("m", &indices), (Some(0), vec![1, 2]));
    }
}
