//! Random records for tests.

use crate::samples::canonical;
use indexmap::IndexMap;
use linform_engine::published::{Coefficient, PublishedPolynomial};
use linform_engine::record::*;
use linform_scalar::published::{BigInt, BigRational};
use proptest::collection::vec;
use proptest::prelude::*;
use std::sync::Arc;

fn polynomials() -> impl Strategy<Value = PublishedPolynomial> {
    let value = (any::<i128>(), 1..i64::MAX, 0u32..4)
        .prop_map(|(n, d, power)| BigRational::new(BigInt::from(n).pow(power), BigInt::from(d)));
    vec((vec(0u32..40, 1), value), 0..4).prop_map(|terms| {
        let mut sum = PublishedPolynomial::default();
        terms
            .into_iter()
            .for_each(|(exponents, value)| sum.add_term(exponents, value));
        sum
    })
}

fn coefficients() -> impl Strategy<Value = Coefficient> {
    let one = PublishedPolynomial::constant(1, BigInt::from(1).into());
    let denominators = prop_oneof![
        3 => Just(one),
        1 => polynomials().prop_map(|mut p| {
            // Of higher degree than any other term, so that it is neither 0 nor a constant.
            p.add_term(vec![50], BigInt::from(3).into());
            p
        })
    ];
    (polynomials(), denominators).prop_map(|(numerator, denominator)| {
        canonical(Coefficient {
            names: Arc::from(["t".to_owned()]),
            numerator,
            denominator,
        })
    })
}

/// Texts with quotes, backslashes, control characters and characters outside the basic plane.
pub(crate) fn texts() -> impl Strategy<Value = String> {
    prop_oneof![
        Just("ratio(F,3)".to_owned()),
        vec(
            prop_oneof![
                Just('"'),
                Just('\\'),
                Just('\n'),
                Just('\u{1b}'),
                any::<char>()
            ],
            0..6
        )
        .prop_map(|characters| characters.into_iter().collect())
    ]
}

fn forms() -> impl Strategy<Value = Vec<FormTerm>> {
    vec(
        (texts(), coefficients()).prop_map(|(term, coefficient)| FormTerm { term, coefficient }),
        0..3,
    )
}

fn witnesses() -> impl Strategy<Value = IndependenceRecord> {
    (vec(texts(), 0..3), any::<u64>(), any::<u64>()).prop_map(|(rows, prime, value)| {
        IndependenceRecord {
            rows,
            prime,
            point: IndexMap::from([("t".to_owned(), value)]),
        }
    })
}

fn findings() -> impl Strategy<Value = Finding> {
    let row = (texts(), coefficients()).prop_map(|(monomial, multiplier)| CertificateRow {
        monomial,
        multiplier,
    });
    prop_oneof![
        forms().prop_map(|form| Finding::Holds { form }),
        (vec(row, 0..3), coefficients())
            .prop_map(|(rows, value)| Finding::Refuted(Refutation::Contradiction { rows, value })),
        (forms(), witnesses()).prop_map(|(form, independence)| {
            Finding::Refuted(Refutation::OtherCoefficients { form, independence })
        }),
        (forms(), forms(), witnesses()).prop_map(|(coefficients, derivatives, independence)| {
            Finding::Refuted(Refutation::NotAPrimitive {
                coefficients,
                derivatives,
                independence,
            })
        }),
        (forms(), vec(forms(), 0..3), proptest::option::of(forms())).prop_map(
            |(particular, kernel, shift)| Finding::Undetermined {
                particular,
                kernel,
                shift,
            }
        ),
        (0usize..6, texts()).prop_map(|(kind, reason)| {
            let stop = [
                StopKind::Time,
                StopKind::Memory,
                StopKind::Interrupt,
                StopKind::Size,
                StopKind::Degree,
                StopKind::Prerequisite,
            ][kind];
            Finding::Unsettled(Unsettled { stop, reason })
        }),
    ]
}

pub(crate) fn claims() -> impl Strategy<Value = ClaimRecord> {
    let system = (texts(), texts(), any::<usize>(), any::<usize>()).prop_map(
        |(method, solver, rows, columns)| SystemRecord {
            method,
            solver,
            rows,
            columns,
        },
    );
    let kinds = (any::<bool>(), 0usize..3, 0usize..4);
    let asked = (
        texts(),
        vec((texts(), any::<i64>()), 0..3),
        texts(),
        vec(texts(), 0..3),
    );
    (asked, kinds, proptest::option::of(system), findings()).prop_map(
        |((name, index, target, terms), (derivative, coefficients, expected), system, finding)| {
            ClaimRecord {
                name,
                index: index.into_iter().collect(),
                target,
                known_by: if derivative {
                    KnownBy::Derivative
                } else {
                    KnownBy::Value
                },
                terms,
                coefficients: [
                    CoefficientKind::Polynomial,
                    CoefficientKind::Rational,
                    CoefficientKind::Constant,
                ][coefficients],
                expected: [
                    Verdict::Holds,
                    Verdict::Refuted,
                    Verdict::Undetermined,
                    Verdict::Unsettled,
                ][expected],
                system,
                finding,
            }
        },
    )
}
