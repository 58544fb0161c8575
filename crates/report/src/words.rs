//! What a finding says, in words; shared by the text and the LaTeX report.

use crate::formula::{
    Level, Style, coefficient, escape, expression, folded_terms, form_line, signed, subscripted,
};
use crate::sanitise::visible;
use linform_engine::published::Coefficient;
use linform_engine::record::{
    CertificateRow, ClaimRecord, CoefficientKind, Finding, FormTerm, GradingRecord, KnownBy,
    Refutation, ResultRecord, SystemRecord, Verdict,
};

/// A space at which no line is broken.
pub(crate) const GLUE: char = '\u{a0}';

/// A formula inside a sentence.
pub(crate) fn inline(style: Style, formula: &str) -> String {
    match style {
        Style::Latex => format!("${formula}$"),
        _ => formula.replace(' ', "\u{a0}"),
    }
}

/// Words of the user inside a sentence.
pub(crate) fn plain(style: Style, text: &str) -> String {
    match style {
        Style::Latex => escape(text),
        _ => visible(text),
    }
}

/// What stands between the parts of a line.
pub(crate) fn separator(style: Style) -> &'static str {
    style.pick(" | ", " · ", "; ")
}

/// `j = 3, k = 0`; empty for a claim without a sweep.
pub(crate) fn index(style: Style, claim: &ClaimRecord) -> String {
    let values = claim.index.iter().map(|(name, value)| {
        let name = expression(style, name).text;
        inline(style, &format!("{name} = {value}"))
    });
    values.collect::<Vec<_>>().join(", ")
}

/// `trace[j=3, k=0]`, to point at an instance.
pub(crate) fn label(style: Style, claim: &ClaimRecord) -> String {
    let name = plain(style, &claim.name);
    if claim.index.is_empty() {
        return name;
    }
    let values = claim
        .index
        .iter()
        .map(|(name, value)| format!("{}={value}", plain(style, name)));
    format!("{name}[{}]", values.collect::<Vec<_>>().join(", "))
}

/// `33 × 8 by matching, fraction-free`
pub(crate) fn shape(style: Style, system: &SystemRecord) -> String {
    let times = style.pick("x", "×", "\\times");
    let mut text = inline(
        style,
        &format!("{} {times} {}", system.rows, system.columns),
    );
    if !system.method.is_empty() {
        text.push_str(&format!(" by {}", plain(style, &system.method)));
    }
    if !system.solver.is_empty() {
        text.push_str(&format!(", {}", plain(style, &system.solver)));
    }
    text
}

/// What the verdict rests on.
pub(crate) fn evidence(style: Style, claim: &ClaimRecord) -> String {
    match &claim.finding {
        Finding::Holds { .. } => match claim.known_by {
            KnownBy::Value => "proved: both sides expanded in the ring agree".to_owned(),
            KnownBy::Derivative => {
                "proved: the derivatives agree; constant of integration 0".to_owned()
            }
        },
        Finding::Refuted(Refutation::Contradiction { .. }) => {
            "proved: the equations contradict each other".to_owned()
        }
        Finding::Refuted(Refutation::OtherCoefficients { .. }) => {
            "proved: there is one solution, and its coefficients are not admitted".to_owned()
        }
        Finding::Refuted(Refutation::NotAPrimitive { .. }) => {
            "proved: the derivative alone has a solution, and it is not the derivative of a form"
                .to_owned()
        }
        Finding::Undetermined { kernel, .. } if kernel.is_empty() => {
            "proved: the derivatives agree, and the terms leave the constant of integration open"
                .to_owned()
        }
        Finding::Undetermined { .. } => match claim.known_by {
            KnownBy::Value => "proved: the terms are linearly dependent".to_owned(),
            // The terms themselves may be independent, where their derivatives are not.
            KnownBy::Derivative => "proved: the derivatives agree for every choice".to_owned(),
        },
        Finding::Unsettled(unsettled) => {
            let limit = format!("limit: {}", unsettled.stop.word());
            match plain(style, &unsettled.reason) {
                reason if reason.is_empty() => limit,
                reason => format!("{limit}: {reason}"),
            }
        }
    }
}

/// `polynomial coefficients`
pub(crate) fn admitted(kind: CoefficientKind) -> &'static str {
    match kind {
        CoefficientKind::Polynomial => "polynomial coefficients",
        CoefficientKind::Rational => "rational coefficients",
        CoefficientKind::Constant => "constant coefficients",
    }
}

/// `is no linear form in …`
pub(crate) fn refused(style: Style, claim: &ClaimRecord, refutation: &Refutation) -> String {
    let with = match (refutation, claim.coefficients) {
        (
            Refutation::Contradiction { .. } | Refutation::NotAPrimitive { .. },
            CoefficientKind::Polynomial | CoefficientKind::Rational,
        ) => "whatever the coefficients".to_owned(),
        (_, kind) => format!("with {}", admitted(kind)),
    };
    format!("is no linear form in {}, {with}", terms(style, claim))
}

/// What introduces the only solution, whose coefficients are not those that the claim admits.
pub(crate) fn instead(claim: &ClaimRecord) -> &'static str {
    match claim.coefficients {
        // Coefficients that contain the variable were not looked for.
        CoefficientKind::Constant => {
            "but with rational functions of the constants, and among those only these:"
        }
        CoefficientKind::Polynomial | CoefficientKind::Rational => {
            "but with rational coefficients, and only these:"
        }
    }
}

/// The terms of a claim, many of them folded: `F′/F, F″/F, …, F⁗/F (4 terms)`.
pub(crate) fn terms(style: Style, claim: &ClaimRecord) -> String {
    const MOST: usize = 4;
    if claim.terms.is_empty() {
        return "its terms".to_owned();
    }
    let folded = folded_terms(style, &claim.terms, MOST);
    let count = if claim.terms.len() > MOST {
        format!(" ({} terms)", claim.terms.len())
    } else {
        String::new()
    };
    let folded: Vec<String> = folded.iter().map(|term| inline(style, term)).collect();
    format!("{}{count}", folded.join(", "))
}

/// Further sentences on a finding, one a line.
pub(crate) fn details(style: Style, claim: &ClaimRecord) -> Vec<String> {
    match &claim.finding {
        Finding::Refuted(Refutation::Contradiction { rows, value }) => {
            vec![contradiction(style, rows, value, claim.known_by)]
        }
        Finding::Refuted(Refutation::NotAPrimitive {
            coefficients,
            derivatives,
            ..
        }) => {
            let sum = |factor: &str| match style {
                Style::Ascii => format!("sum {factor}*b"),
                Style::Unicode => format!("Σ {factor}·b"),
                Style::Latex => format!("\\sum {factor}\\,b"),
            };
            let prime = style.pick("'", "′", "'");
            let solution = |factor: &str, parts: &[FormTerm]| {
                inline(
                    style,
                    &format!("{} = {}", sum(factor), form_line(style, parts)),
                )
            };
            vec![format!(
                "over the terms {}, the derivative {} has one solution, {} and {}, where {} is not {}",
                inline(style, "b"),
                inline(style, &format!("{} + {}{prime}", sum("r"), sum("p"))),
                solution("p", coefficients),
                solution("r", derivatives),
                inline(style, "r"),
                inline(style, &format!("p{prime}")),
            )]
        }
        _ => Vec::new(),
    }
}

/// The left-kernel vector in words; long ones are folded.
fn contradiction(
    style: Style,
    rows: &[CertificateRow],
    value: &Coefficient,
    known_by: KnownBy,
) -> String {
    const ORDINALS: [&str; 3] = ["first", "second", "third"];
    let sides = match known_by {
        KnownBy::Value => "",
        KnownBy::Derivative => " in the derivatives of both sides",
    };
    let monomial =
        |row: &CertificateRow| expression(style, &row.monomial).at(style, Level::Product);
    let leaves = format!(
        "leaves {}",
        inline(style, &format!("0 = {}", coefficient(style, value).text))
    );
    match rows {
        [] => "the certificate has no equations".to_owned(),
        [row] => {
            let (negative, factor) = factor(style, &row.multiplier);
            let sign = if negative { style.minus() } else { "" };
            let times = match (negative, factor) {
                (false, None) => String::new(),
                (_, factor) => {
                    let factor = factor.unwrap_or_else(|| "1".to_owned());
                    format!(", times {},", inline(style, &format!("{sign}{factor}")))
                }
            };
            let monomial = inline(style, &monomial(row));
            format!("comparing the coefficients of {monomial}{sides}{times} {leaves}")
        }
        rows if rows.len() <= ORDINALS.len() => {
            let monomials: Vec<String> = rows
                .iter()
                .map(|row| inline(style, &monomial(row)))
                .collect();
            let (last, first) = monomials
                .split_last()
                .map_or(("", &[][..]), |(last, first)| (last.as_str(), first));
            let mut steps = String::new();
            for (position, (row, ordinal)) in rows.iter().zip(ORDINALS).enumerate() {
                let (negative, factor) = factor(style, &row.multiplier);
                steps.push_str(match (position, negative) {
                    (0, false) => "",
                    (0, true) => "minus ",
                    (_, false) => " plus ",
                    (_, true) => " minus ",
                });
                if let Some(factor) = factor {
                    steps.push_str(&format!("{} times ", inline(style, &factor)));
                }
                steps.push_str(&format!("the {ordinal}"));
            }
            format!(
                "comparing the coefficients of {} and {last}{sides}: {steps} {leaves}",
                first.join(", ")
            )
        }
        rows => {
            let mut sum = String::new();
            for (position, row) in rows.iter().take(ORDINALS.len()).enumerate() {
                let (negative, factor) = factor(style, &row.multiplier);
                sum.push_str(&match (position, negative) {
                    (0, false) => String::new(),
                    (0, true) => style.minus().to_owned(),
                    (_, false) => " + ".to_owned(),
                    (_, true) => format!(" {} ", style.minus()),
                });
                if let Some(factor) = factor {
                    sum.push_str(&format!("{factor}{}", style.dot()));
                }
                sum.push_str(&format!("[{}]", monomial(row)));
            }
            sum.push_str(style.pick(" + ...", " + …", " + \\dotsb"));
            format!(
                "comparing the coefficients of {} monomials{sides}, with {} for the equation of {}: {} ({} more) {leaves}",
                rows.len(),
                inline(style, "[m]"),
                inline(style, "m"),
                inline(style, &sum),
                rows.len() - ORDINALS.len(),
            )
        }
    }
}

/// The sign of a multiplier, and its size unless that is 1.
fn factor(style: Style, multiplier: &Coefficient) -> (bool, Option<String>) {
    let parts = signed(style, multiplier);
    if parts.is_unit() {
        return (parts.negative, None);
    }
    let whole = coefficient(style, multiplier);
    let size = if parts.summands.len() == 1 && parts.denominator.is_none() {
        parts.summands[0].1.clone()
    } else {
        // A sum keeps its signs inside the parentheses.
        return (false, Some(whole.at(style, Level::Product)));
    };
    (parts.negative, Some(size))
}

/// As many letters as the kernel has vectors, none of them a name of the ring.
pub(crate) fn letters(style: Style, claim: &ClaimRecord, count: usize) -> Vec<String> {
    let used = names_of(claim);
    let letter = ["c", "k", "m", "s", "w", "free"]
        .into_iter()
        .find(|letter| !used.iter().any(|name| name.starts_with(letter)))
        .unwrap_or("free");
    (1..=count)
        .map(|number| subscripted(style, letter, number))
        .collect()
}

fn names_of(claim: &ClaimRecord) -> Vec<String> {
    match &claim.finding {
        Finding::Undetermined {
            particular,
            kernel,
            shift,
        } => {
            let parts = particular
                .iter()
                .chain(kernel.iter().chain(shift).flatten());
            parts
                .flat_map(|part| part.coefficient.names.iter().cloned())
                .collect()
        }
        _ => Vec::new(),
    }
}

/// The functions that the letters of a family may be.
pub(crate) fn free_choice(style: Style, claim: &ClaimRecord, letters: &[String]) -> String {
    let letters: Vec<String> = letters.iter().map(|letter| inline(style, letter)).collect();
    let functions = match &claim.finding {
        Finding::Undetermined { kernel, .. } => kernel.len().min(letters.len()),
        _ => letters.len(),
    };
    let base = match &claim.finding {
        Finding::Undetermined { kernel, .. } => kernel
            .iter()
            .flatten()
            .next()
            .map_or(&[][..], |part| &part.coefficient.names),
        _ => &[],
    };
    let constant = claim.coefficients == CoefficientKind::Constant || base.is_empty();
    let (kind, of) = if constant {
        ("constant", String::new())
    } else {
        let base = base
            .iter()
            .map(|name| inline(style, &expression(style, name).text));
        let base = base.collect::<Vec<_>>().join(", ");
        ("rational function", format!(" of {base}"))
    };
    let several = |kind: &str, letters: &[String]| {
        let plural = if letters.len() == 1 { "" } else { "s" };
        format!("{kind}{plural} {}", letters.join(", "))
    };
    // What moves the constant of integration may itself only be a constant.
    let (free, shifts) = letters.split_at(functions);
    match (free.is_empty(), shifts.is_empty()) {
        (false, false) => format!(
            "for any {}{of} and any {}",
            several(kind, free),
            several("constant", shifts)
        ),
        (true, _) => format!("for any {}", several("constant", shifts)),
        (_, true) => format!("for any {}{of}", several(kind, free)),
    }
}

/// `graded modulo 3: q 1, q′ 2, t 2; the derivation 1`
pub(crate) fn grading(style: Style, grading: &GradingRecord) -> String {
    let modulus = match grading.modulus.as_str() {
        "0" => String::new(),
        modulus => format!(" modulo {}", plain(style, modulus)),
    };
    let weights = grading
        .weights
        .iter()
        .filter(|(_, weight)| *weight != "0")
        .map(|(name, weight)| {
            let (name, weight) = (
                inline(style, &expression(style, name).text),
                plain(style, weight),
            );
            format!("{name}{}{weight}", style.pick(GLUE, GLUE, '~'))
        });
    format!(
        "graded{modulus}: {}; the derivation {}",
        weights.collect::<Vec<_>>().join(", "),
        plain(style, &grading.derivation)
    )
}

/// `3 hold, 1 refuted`
pub(crate) fn counts<'a>(claims: impl IntoIterator<Item = &'a ClaimRecord>) -> String {
    let mut count = [0usize; 4];
    for claim in claims {
        count[claim.finding.verdict() as usize] += 1;
    }
    let verdicts = [
        Verdict::Holds,
        Verdict::Refuted,
        Verdict::Undetermined,
        Verdict::Unsettled,
    ];
    let parts = verdicts.into_iter().filter_map(|verdict| {
        let word = match (verdict, count[verdict as usize]) {
            (_, 0) => return None,
            (Verdict::Holds, 2..) => "hold",
            (verdict, _) => verdict.word(),
        };
        Some(format!("{} {word}", count[verdict as usize]))
    });
    match parts.collect::<Vec<_>>() {
        parts if parts.is_empty() => "none".to_owned(),
        parts => parts.join(", "),
    }
}

/// The claims whose verdict is not the expected one.
pub(crate) fn unexpected(record: &ResultRecord) -> Vec<&ClaimRecord> {
    let claims = record.claims.iter();
    claims
        .filter(|claim| claim.finding.verdict() != claim.expected)
        .collect()
}
