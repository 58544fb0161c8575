//! Writing and reading polynomials.

use linform_ring::{Polynomial, Symbols};
use linform_scalar::Rational;
use proptest::prelude::*;
use std::fmt::Write;

fn symbols() -> Symbols {
    let generators = vec!["q".to_string(), "q'".to_string()];
    Symbols::new(generators, Some("t".into()), vec!["b_1".into()])
}

#[test]
fn canonical_text_falls_in_degree_with_signs_between_terms() {
    let symbols = symbols();
    for (text, canonical) in [
        ("0", "0"),
        ("t - t", "0"),
        ("-1/5 + t^2*3/10", "3/10*t^2 - 1/5"),
        ("-t", "-t"),
        ("1*t^1*q^0", "t"),
        ("q'^2 - t*q^2 - q^4", "-q^4 - q^2*t + q'^2"),
        ("(q + q')^2/2", "1/2*q^2 + q*q' + 1/2*q'^2"),
        ("b_1*t*q'*q*6/4", "3/2*q*q'*t*b_1"),
        ("2*-3", "-6"),
        ("- - 2", "2"),
        ("-t^2", "-t^2"),
        ("(-t)^2", "t^2"),
        ("t/-2/3", "-1/6*t"),
        (" ( t\n+\t1 ) * 7 ", "7*t + 7"),
        ("2^3^2", "!"),
        ("1/(1+1)", "1/2"),
    ] {
        match symbols.parse(text) {
            Ok(p) => assert_eq!(symbols.format(&p), canonical, "{text}"),
            Err(error) => assert_eq!(canonical, "!", "{text}: {error}"),
        }
    }
}

#[test]
fn errors_name_what_and_where() {
    let symbols = symbols();
    for (text, message) in [
        ("", "the text ends too early at byte 0"),
        ("t +", "the text ends too early at byte 3"),
        ("(t", "the text ends too early at byte 2"),
        ("t)", "unexpected character ')' at byte 1"),
        ("t t", "unexpected character 't' at byte 2"),
        ("t + s*t", "unknown name `s` at byte 4"),
        ("q''", "unknown name `q''` at byte 0"),
        ("t^t", "expected an exponent in digits at byte 2"),
        ("t^-1", "expected an exponent in digits at byte 2"),
        ("1/0", "division by zero at byte 3"),
        ("1/(t-t)", "division by zero at byte 7"),
        ("1/t", "division by what is not a number at byte 3"),
        ("t^999999999", "an exponent above 32767 at byte 11"),
        ("t^32767*t", "a product or power is too large at byte 9"),
        ("(1+t+q)^5000", "a product or power is too large at byte 12"),
        (
            "(1+t+q+q'+b_1)^60",
            "a product or power is too large at byte 17",
        ),
        ("0.5", "unexpected character '.' at byte 1"),
        ("t × q", "unexpected character '×' at byte 2"),
    ] {
        assert_eq!(
            symbols.parse(text).unwrap_err().to_string(),
            message,
            "{text}"
        );
    }
}

#[test]
fn hostile_texts_are_refused() {
    let symbols = symbols();
    let deep = |n: usize| format!("{}t{}", "(".repeat(n), ")".repeat(n));
    assert!(symbols.parse(&deep(100)).is_ok());
    assert!(symbols.parse(&deep(101)).is_err());
    assert!(symbols.parse(&deep(1_000_000)).is_err());
    assert!(symbols.parse(&"9".repeat(100_001)).is_err());
    assert!(symbols.parse(&format!("{}t", "-".repeat(100_000))).is_ok());
    // Every step stays small, the result would not.
    let mut tower = "(t+q)".to_string();
    for _ in 0..20 {
        tower = format!("({tower}^30)");
    }
    assert!(symbols.parse(&tower).is_err());
    assert!(symbols.parse("((((2^30000)^30000)^30000)^30000)").is_err());
    let product = "(1+t+q+q'+b_1)^9*".repeat(40);
    assert!(symbols.parse(&product[..product.len() - 1]).is_err());
}

#[test]
fn long_sums_are_read_and_written_back() {
    let symbols = symbols();
    let mut text = String::new();
    for i in (2..=3001u32).rev() {
        let separator = if text.is_empty() { "" } else { " + " };
        write!(text, "{separator}{}*q^{}*t^{}", 10 * i + 1, i, i % 7 + 2).unwrap();
    }
    let p = symbols.parse(&text).unwrap();
    assert_eq!(p.len(), 3000);
    assert_eq!(symbols.format(&p), text);
}

fn polynomials() -> impl Strategy<Value = Polynomial> {
    let term = (proptest::collection::vec(0u16..5, 4), -50i64..50, 1i64..30);
    proptest::collection::vec(term, 0..6).prop_map(|terms| {
        Polynomial::from_terms(terms.into_iter().map(|(exponents, n, d)| {
            let monomial = linform_ring::Monomial::from_exponents(&exponents).unwrap();
            (monomial, Rational::new(n, d).unwrap())
        }))
    })
}

proptest! {
    #![proptest_config(ProptestConfig {
        cases: 64,
        rng_seed: proptest::test_runner::RngSeed::Fixed(1),
        failure_persistence: None,
        ..ProptestConfig::default()
    })]

    #[test]
    fn reading_inverts_writing(p in polynomials()) {
        let symbols = symbols();
        let text = symbols.format(&p);
        let back = symbols.parse(&text).unwrap();
        prop_assert_eq!(symbols.format(&back), text);
        prop_assert_eq!(back, p);
    }

    #[test]
    fn any_text_is_read_or_refused(text in "[tq'b_1 0-9+*/^()×-]{0,24}") {
        let symbols = symbols();
        match symbols.parse(&text) {
            Ok(p) => prop_assert!(p.is_canonical()),
            Err(error) => prop_assert!(error.offset() <= text.len()),
        }
    }
}
