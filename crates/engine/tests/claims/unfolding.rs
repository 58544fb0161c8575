//! What only index values reveal: circles, gaps, zero divisors, wrong yields; and what may be unfolded.

use crate::common::{claim, model, try_prepare};
use linform_engine::{PrepareLimits, prepare};

fn messages(rest: &str) -> Vec<String> {
    match try_prepare(rest) {
        Ok(_) => panic!("no mistake was found"),
        Err(failure) => failure
            .diagnostics
            .iter()
            .map(|diagnostic| diagnostic.message.clone())
            .collect(),
    }
}

fn family(rules: &str) -> String {
    format!("[family.a]\nrules = [{rules}]\n")
}

#[test]
fn a_circle_of_rules_is_shown() {
    let rest = family(r#""a[0] = a[1]", "a[1] = q*a[2]", "a[2] = a[0]""#)
        + &claim("c", "target = \"a[1]\"", r#""q""#, "");
    assert_eq!(
        messages(&rest),
        ["the rules run in a circle: a[1] → a[2] → a[0] → a[1]"]
    );
}

#[test]
fn an_uncovered_index_is_named_with_what_needs_it() {
    let rest = family(r#""a[0] = q", "a[j] = a[j-2] for j >= 2""#)
        + &claim("c", "target = \"a[5]\"", r#""q""#, "");
    assert_eq!(messages(&rest), ["no rule covers `a[1]`"]);
    let failure = try_prepare(&rest).err().unwrap();
    assert!(
        failure.diagnostics[0]
            .labels
            .iter()
            .any(|label| label.text.contains("a[3], which is needed by a[5]"))
    );
}

#[test]
fn all_mistakes_come_in_one_run() {
    let rest = family(r#""a[0] = a[0]", "a[2] = q""#)
        + &claim("circle", "target = \"a[0] + a[1]\"", r#""q""#, "")
        + &claim(
            "zero",
            "for = \"n = 1..3\"\ntarget = \"a[2]/(n-2)\"",
            r#""q""#,
            "",
        );
    let found = messages(&rest);
    assert_eq!(found.len(), 3, "{found:?}");
}

#[test]
fn an_endless_recursion_is_cut_off() {
    let rest = family(r#""a[j] = a[j+1]""#) + &claim("c", "target = \"a[0]\"", r#""q""#, "");
    let found = messages(&rest);
    assert!(
        found[0].contains("rests on a chain of 10000 elements"),
        "{found:?}"
    );
}

#[test]
fn long_recursions_that_end_are_unfolded() {
    let rest = family(r#""a[0] = q", "a[j] = a[j-1] + j*q'""#)
        + &claim("c", "target = \"a[9000]\"", r#"["q", "q'"]"#, "");
    assert!(try_prepare(&rest).is_ok());
}

#[test]
fn yields_must_match_the_terms_of_their_claim() {
    // The lengths differ only at n = 25 001, beyond what the reader of specs rehearses.
    let rest = claim(
        "c",
        "for = \"n = 1..25001\"\ntarget = \"q\"",
        r#""q""#,
        r#"yields = { "w[n]" = "q for k = 1..2, 25000*k <= n + 24999" }"#,
    );
    let found = messages(&rest);
    assert!(
        found[0].contains("is given 2 terms for the 1 coefficients"),
        "{found:?}"
    );
}

#[test]
fn an_element_is_not_used_before_a_claim_defines_it() {
    let rest = claim("early", "target = \"w[0]\"", r#""q""#, "")
        + &claim(
            "late",
            "target = \"q\"",
            r#""q""#,
            r#"yields = { "w[0]" = ["q"] }"#,
        );
    assert_eq!(
        messages(&rest),
        ["`w[0]` is not defined by any claim before this place"]
    );
}

#[test]
fn the_number_of_instances_and_nodes_is_bounded() {
    let rest = claim(
        "c",
        "for = \"n = 1..100\"\ntarget = \"q^n\"",
        "\"q'^k for k = 1..n\"",
        "",
    );
    let limits = PrepareLimits {
        instances: 50,
        ..PrepareLimits::default()
    };
    assert!(prepare(model(&rest), None, limits).is_err());
    let limits = PrepareLimits {
        nodes: 20,
        ..PrepareLimits::default()
    };
    assert!(prepare(model(&rest), None, limits).is_err());
}

#[test]
fn equal_definitions_share_a_node() {
    let one = try_prepare(&claim("c", "target = \"q*q' + q*q'\"", r#""q""#, "")).unwrap();
    let two = try_prepare(&claim(
        "c",
        "target = \"q*q' + q*q' + 0*q^5\"",
        r#""q""#,
        "",
    ))
    .unwrap();
    // q, q', q·q', the sum, t, and what the law and the derivation need; q^5 comes on top.
    assert!(two.program.len() <= one.program.len() + 3);
}

#[test]
fn an_element_is_not_defined_twice_by_claims() {
    let yields = r#"yields = { "w[0]" = ["q"] }"#;
    let rest = claim("one", "target = \"q\"", r#""q""#, yields)
        + &claim("two", "target = \"2*q\"", r#""q""#, yields);
    assert_eq!(messages(&rest), ["`w[0]` is defined already"]);
    let rest = family(r#""a[0] = q""#)
        + &claim(
            "c",
            "target = \"q\"",
            r#""q""#,
            r#"yields = { "a[0]" = ["q"] }"#,
        );
    assert!(
        messages(&rest)[0].contains("`a[0]`"),
        "{:?}",
        messages(&rest)
    );
}
