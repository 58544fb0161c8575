use super::*;
use crate::samples;
use linform_engine::record::{
    CertificateRow, ClaimRecord, CoefficientKind, Finding, KnownBy, Refutation,
};

const PLAIN: TextOptions = TextOptions {
    colour: false,
    unicode: true,
    width: 100,
};

#[test]
fn every_verdict_is_told_in_words() {
    let text = text(&samples::record(), &PLAIN);
    assert_eq!(text, GOLDEN);
}

const GOLDEN: &str = "\
Traces of the Airy kernel
linform 0.1.0 · airy-traces.toml · blake3 abababababababab
graded modulo 3: q 1, q′ 2, t 2; the derivation 1
found from their derivatives on the way: u[2,0] (1, largest system 19 × 6 by matching,
  fraction-free)

trace (2 instances: all hold)
  u[2,0] = 1/6·F‴/F + 1/3·t·F′/F
    j = 2, k = 0 · holds · 33 × 8 by matching, fraction-free · proved: the derivatives agree;
      constant of integration 0
  u[3,0] = 1/24·F⁗/F + 1/3·t·F″/F + 7/12·F′/F
    j = 3, k = 0 · holds · 33 × 8 by matching, fraction-free · proved: the derivatives agree;
      constant of integration 0

single product
  u[0,0]·u[1,1] is no linear form in F′/F, F″/F, F‴/F, F⁗/F, whatever the coefficients
    refuted · 28 × 4 by matching, fraction-free · proved: the equations contradict each other
    comparing the coefficients of q′⁸ and q²·q′⁴: 3·t times the first minus the second leaves
      0 = 2/3

quotient
  q² is no linear form in F′/F, with polynomial coefficients
    but with rational coefficients, and only these:
    q² = (t² + 1)/(2·t)·F′/F
    refuted · 28 × 4 by matching, fraction-free · proved: there is one solution, and its
      coefficients are not admitted

primitive
  u[1,0] is no linear form in F′/F, whatever the coefficients
    refuted (expected: holds) · 28 × 4 by matching, fraction-free · proved: the derivative alone has
      a solution, and it is not the derivative of a form
    over the terms b, the derivative Σ r·b + Σ p·b′ has one solution, Σ p·b = t·F′/F and
      Σ r·b = 2·F′/F, where r is not p′

family
  F″/F/2 = 1/2·F″/F + c₁·(−(t − 1/5)·F″/F + F′/F), for any rational function c₁ of t
    undetermined · 28 × 4 by matching, fraction-free · proved: the terms are linearly dependent

large
  u[90,90] in F′/F, F″/F, …, F⁽¹⁰⁰⁾/F (100 terms): no verdict
    unsettled (expected: holds) · limit: time: the time limit of 5 s was reached while expanding the
      terms; raise --time-limit

7 claims: 2 hold, 3 refuted, 1 undetermined, 1 unsettled; 2 not as expected:
  primitive: refuted, expected holds
  large: unsettled, expected holds
";

#[test]
fn ascii_text_has_no_other_characters() {
    let options = TextOptions {
        unicode: false,
        ..PLAIN
    };
    let text = text(&samples::record(), &options);
    assert!(text.is_ascii(), "{text}");
    for line in [
        "  u[3,0] = 1/24*F''''/F + 1/3*t*F''/F + 7/12*F'/F\n",
        "    j = 3, k = 0 | holds | 33 x 8 by matching, fraction-free | proved: the derivatives agree;\n",
        "    comparing the coefficients of q'^8 and q^2*q'^4: 3*t times the first minus the second leaves\n",
    ] {
        assert!(text.contains(line), "{line}\n{text}");
    }
}

#[test]
fn lines_keep_the_width_and_the_width_may_be_unlimited() {
    let mut record = samples::record();
    let long: Vec<_> = (1..40)
        .map(|n| {
            samples::part(
                &format!("ratio(F,{n})"),
                samples::polynomial(&[(n, 7, 2), (-1, 5, 0)]),
            )
        })
        .collect();
    record.claims.push(samples::claim(
        "long",
        "u[20,19]",
        39,
        Finding::Holds { form: long },
    ));
    for width in [40, 60] {
        let text = text(&record, &TextOptions { width, ..PLAIN });
        let too_long = text.lines().find(|line| line.chars().count() > width);
        assert_eq!(too_long, None);
        assert!(
            text.contains("\n             + (38/7·t² − 1/5)·F⁽³⁸⁾/F"),
            "{text}"
        );
    }
    let unlimited = text(&record, &TextOptions { width: 0, ..PLAIN });
    assert!(unlimited.lines().any(|line| line.chars().count() > 800));
}

#[test]
fn long_certificates_are_folded() {
    let row = |n: i64| CertificateRow {
        monomial: format!("q^{n}"),
        multiplier: samples::polynomial(&[(n, 1, 1), (1, 1, 0)]),
    };
    let mut record = samples::record();
    let rows = (2..14).map(row).collect();
    let value = samples::polynomial(&[(1, 1, 1)]);
    record.claims = vec![samples::claim(
        "a",
        "q",
        2,
        Finding::Refuted(Refutation::Contradiction { rows, value }),
    )];
    let text = text(&record, &TextOptions { width: 0, ..PLAIN });
    assert!(
        text.contains(
            "comparing the coefficients of 12 monomials, with [m] for the equation of m: \
             (2·t + 1)·[q²] + (3·t + 1)·[q³] + (4·t + 1)·[q⁴] + … (9 more) leaves 0 = t\n"
        ),
        "{text}"
    );
}

#[test]
fn words_say_what_was_checked_and_no_more() {
    let said = |claim: ClaimRecord| {
        let mut record = samples::record();
        record.claims = vec![claim];
        text(&record, &TextOptions { width: 0, ..PLAIN })
    };
    let claim = |finding| samples::claim("a", "q", 2, finding);

    let constant = said(ClaimRecord {
        coefficients: CoefficientKind::Constant,
        ..claim(samples::rational_only())
    });
    assert!(
        constant.contains("in F′/F, F″/F, with constant coefficients\n    but with rational functions of the constants, and among those only these:\n"),
        "{constant}"
    );
    assert!(
        constant.ends_with("\n1 claim: 1 refuted; as expected\n"),
        "{constant}"
    );

    let family = said(ClaimRecord {
        known_by: KnownBy::Derivative,
        coefficients: CoefficientKind::Constant,
        ..claim(samples::family())
    });
    assert!(family.contains(", for any constant c₁\n"), "{family}");
    assert!(
        family.contains("proved: the derivatives agree for every choice\n"),
        "{family}"
    );

    let zero = samples::part("0", samples::polynomial(&[(1, 1, 0)]));
    let nothing = said(ClaimRecord {
        target: "0".to_owned(),
        terms: vec!["0".to_owned()],
        ..claim(Finding::Undetermined {
            particular: Vec::new(),
            kernel: vec![vec![zero]],
            shift: None,
        })
    });
    assert!(
        nothing.contains("  0 = c₁·0, for any rational function c₁ of t\n"),
        "{nothing}"
    );
}

#[test]
fn targets_of_a_group_are_aligned() {
    let mut record = samples::record();
    record.claims.truncate(2);
    record.claims[1].target = "u[13,10]".to_owned();
    let text = text(&record, &PLAIN);
    assert!(text.contains("  u[2,0]   = 1/6"), "{text}");
    assert!(text.contains("  u[13,10] = 1/24"), "{text}");
    assert!(
        text.ends_with("\n2 claims: 2 hold; all as expected\n"),
        "{text}"
    );
}

#[test]
fn verdicts_are_coloured_on_demand_only() {
    let coloured = text(
        &samples::record(),
        &TextOptions {
            colour: true,
            ..PLAIN
        },
    );
    for part in [
        "\u{1b}[32mholds\u{1b}[0m",
        "\u{1b}[31mrefuted\u{1b}[0m",
        "\u{1b}[1;31m(expected: holds)\u{1b}[0m",
    ] {
        assert!(coloured.contains(part), "{coloured}");
    }
    let mut plain = coloured;
    while let Some(start) = plain.find('\u{1b}') {
        let end = start + plain[start..].find('m').unwrap();
        plain.replace_range(start..=end, "");
    }
    assert_eq!(plain, text(&samples::record(), &PLAIN));
}

#[test]
fn nothing_in_a_spec_steers_the_terminal() {
    let hostile = "\u{1b}]0;x\u{7} \r\n\u{202e}7 claims: 7 hold";
    let mut record = samples::record();
    record.program = hostile.to_owned();
    record.spec.title = Some(hostile.to_owned());
    record.spec.blake3 = hostile.to_owned();
    record.spec.sources[0].path = hostile.to_owned();
    record.gradings[0]
        .weights
        .insert(hostile.to_owned(), hostile.to_owned());
    record.primitives[0].element = hostile.to_owned();
    for claim in &mut record.claims {
        claim.name = hostile.to_owned();
        claim.target = hostile.to_owned();
        claim.index.insert(hostile.to_owned(), 1);
        claim
            .terms
            .iter_mut()
            .for_each(|term| *term = hostile.to_owned());
    }
    for unicode in [false, true] {
        let text = text(&record, &TextOptions { unicode, ..PLAIN });
        assert!(
            !text.contains(|c: char| c.is_control() && c != '\n' || c == '\u{202e}'),
            "{text}"
        );
        assert!(
            !text
                .lines()
                .any(|line| line.starts_with("7 claims: 7 hold")),
            "{text}"
        );
    }
}
