//! Records for tests.

use indexmap::IndexMap;
use linform_engine::published::{Coefficient, PublishedPolynomial};
use linform_engine::record::*;
use linform_scalar::published::{BigInt, BigRational};
use std::sync::Arc;

/// The sum of `numerator/denominator · t^power` over the denominator polynomial of the same shape.
pub(crate) fn quotient(
    numerator: &[(i64, i64, u32)],
    denominator: &[(i64, i64, u32)],
) -> Coefficient {
    let side = |terms: &[(i64, i64, u32)]| {
        let mut sum = PublishedPolynomial::default();
        for (n, d, power) in terms {
            sum.add_term(
                vec![*power],
                BigRational::new(BigInt::from(*n), BigInt::from(*d)),
            );
        }
        sum
    };
    canonical(Coefficient {
        names: Arc::from(["t".to_owned()]),
        numerator: side(numerator),
        denominator: side(denominator),
    })
}

/// The coefficient as it is read from its text.
pub(crate) fn canonical(coefficient: Coefficient) -> Coefficient {
    Coefficient::parse(&coefficient.to_string(), &coefficient.names).unwrap()
}

pub(crate) fn polynomial(terms: &[(i64, i64, u32)]) -> Coefficient {
    quotient(terms, &[(1, 1, 0)])
}

pub(crate) fn part(term: &str, coefficient: Coefficient) -> FormTerm {
    FormTerm {
        term: term.to_owned(),
        coefficient,
    }
}

pub(crate) fn index(values: &[(&str, i64)]) -> IndexMap<String, i64> {
    values
        .iter()
        .map(|(name, value)| ((*name).to_owned(), *value))
        .collect()
}

fn matching(rows: usize, columns: usize) -> SystemRecord {
    SystemRecord {
        method: "matching".to_owned(),
        solver: "fraction-free".to_owned(),
        rows,
        columns,
    }
}

pub(crate) fn claim(name: &str, target: &str, length: i64, finding: Finding) -> ClaimRecord {
    ClaimRecord {
        name: name.to_owned(),
        index: IndexMap::new(),
        target: target.to_owned(),
        known_by: KnownBy::Value,
        terms: (1..=length).map(|n| format!("ratio(F,{n})")).collect(),
        coefficients: CoefficientKind::Polynomial,
        expected: finding.verdict(),
        system: Some(matching(28, 4)),
        finding,
    }
}

/// The traces `u[2,0]` and `u[3,0]` of the Airy kernel.
pub(crate) fn traces() -> Vec<ClaimRecord> {
    let forms = [
        vec![
            part("ratio(F,1)", polynomial(&[(1, 3, 1)])),
            part("ratio(F,3)", polynomial(&[(1, 6, 0)])),
        ],
        vec![
            part("ratio(F,1)", polynomial(&[(7, 12, 0)])),
            part("ratio(F,2)", polynomial(&[(1, 3, 1)])),
            part("ratio(F,4)", polynomial(&[(1, 24, 0)])),
        ],
    ];
    let traces = [2, 3].into_iter().zip(forms);
    traces
        .map(|(j, form)| ClaimRecord {
            index: index(&[("j", j), ("k", 0)]),
            known_by: KnownBy::Derivative,
            system: Some(matching(33, 8)),
            ..claim(
                "trace",
                &format!("u[{j},0]"),
                j + 1,
                Finding::Holds { form },
            )
        })
        .collect()
}

pub(crate) fn contradiction() -> Finding {
    let row = |monomial: &str, multiplier| CertificateRow {
        monomial: monomial.to_owned(),
        multiplier,
    };
    Finding::Refuted(Refutation::Contradiction {
        rows: vec![
            row("q'^8", polynomial(&[(3, 1, 1)])),
            row("q^2*q'^4", polynomial(&[(-1, 1, 0)])),
        ],
        value: polynomial(&[(2, 3, 0)]),
    })
}

fn witness() -> IndependenceRecord {
    IndependenceRecord {
        rows: vec!["q'^2".to_owned(), "q^4".to_owned()],
        prime: 4_611_686_018_427_387_847,
        point: IndexMap::from([("t".to_owned(), 12_345_678_901_234_567)]),
    }
}

pub(crate) fn rational_only() -> Finding {
    Finding::Refuted(Refutation::OtherCoefficients {
        form: vec![part(
            "ratio(F,1)",
            quotient(&[(1, 1, 2), (1, 1, 0)], &[(2, 1, 1)]),
        )],
        independence: witness(),
    })
}

pub(crate) fn no_primitive() -> Finding {
    Finding::Refuted(Refutation::NotAPrimitive {
        coefficients: vec![part("ratio(F,1)", polynomial(&[(1, 1, 1)]))],
        derivatives: vec![part("ratio(F,1)", polynomial(&[(2, 1, 0)]))],
        independence: witness(),
    })
}

pub(crate) fn family() -> Finding {
    Finding::Undetermined {
        particular: vec![part("ratio(F,2)", polynomial(&[(1, 2, 0)]))],
        kernel: vec![vec![
            part("ratio(F,1)", polynomial(&[(1, 1, 0)])),
            part("ratio(F,2)", polynomial(&[(-1, 1, 1), (1, 5, 0)])),
        ]],
        shift: None,
    }
}

pub(crate) fn timed_out() -> Finding {
    Finding::Unsettled(Unsettled {
        stop: StopKind::Time,
        reason: "the time limit of 5 s was reached while expanding the terms; raise --time-limit"
            .to_owned(),
    })
}

pub(crate) const SOURCE: &str = "title = \"Traces of the Airy kernel\"\n\n[ring]\nvariable = \"t\"\ngenerators = [\"q\", \"q'\"]\n[ring.derivative]\n\"q\" = \"q'\"\n\"q'\" = \"t*q + 2*q^3\"\n\n[law.F]\nlog_derivative = \"q'^2 - t*q^2 - q^4\"\n\n[[claim]]\nname = \"trace\"\ntarget = \"ratio(F,1)\"\nterms = \"ratio(F,n) for n = 1..2\"\n";

/// A record with every kind of finding.
pub(crate) fn record() -> ResultRecord {
    let mut claims = traces();
    claims.push(claim("single product", "u[0,0]*u[1,1]", 4, contradiction()));
    claims.push(claim("quotient", "q^2", 1, rational_only()));
    claims.push(ClaimRecord {
        known_by: KnownBy::Derivative,
        expected: Verdict::Holds,
        ..claim("primitive", "u[1,0]", 1, no_primitive())
    });
    claims.push(claim("family", "ratio(F,2)/2", 2, family()));
    claims.push(ClaimRecord {
        system: None,
        expected: Verdict::Holds,
        ..claim("large", "u[90,90]", 100, timed_out())
    });
    ResultRecord {
        program: "linform 0.1.0".to_owned(),
        spec: SpecRecord {
            title: Some("Traces of the Airy kernel".to_owned()),
            through: None,
            blake3: "ab".repeat(32),
            sources: vec![SourceRecord {
                path: "airy-traces.toml".to_owned(),
                text: SOURCE.to_owned(),
            }],
        },
        gradings: vec![GradingRecord {
            modulus: "3".to_owned(),
            derivation: "1".to_owned(),
            weights: [("q", "1"), ("q'", "2"), ("t", "2")]
                .map(|(name, weight)| (name.to_owned(), weight.to_owned()))
                .into(),
        }],
        primitives: vec![PrimitiveRecord {
            element: "u[2,0]".to_owned(),
            system: matching(19, 6),
            form: vec![
                part("ratio(F,1)", polynomial(&[(1, 3, 1)])),
                part("ratio(F,3)", polynomial(&[(1, 6, 0)])),
            ],
        }],
        claims,
    }
}
