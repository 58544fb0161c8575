//! A record as a LaTeX document.

mod lines;

use crate::formula::{Style, combination, form, summands};
use crate::words;
use lines::equation;
use linform_engine::record::{ClaimRecord, Finding, FormTerm, Refutation, ResultRecord};

const STYLE: Style = Style::Latex;

const PREAMBLE: &str = "\\documentclass[a4paper,11pt]{article}
\\usepackage[utf8]{inputenc}
\\usepackage{amsmath,amssymb}
\\setlength{\\parindent}{0pt}
\\setlength{\\parskip}{4pt}
\\setlength{\\emergencystretch}{3em}
\\allowdisplaybreaks
\\begin{document}
";

/// The record as a complete document for any LaTeX with `amsmath`.
///
/// Families have their indices as subscripts, derivatives are primes or numbers in parentheses, long forms are broken
/// into lines. No text of a spec can act as a command.
pub fn latex(record: &ResultRecord) -> String {
    let mut out = String::from(PREAMBLE);
    let title = record.spec.title.as_deref().unwrap_or("Linear forms");
    out.push_str(&format!("\\section*{{{}}}\n", words::plain(STYLE, title)));
    let hash: String = record.spec.blake3.chars().take(16).collect();
    let mut origin = vec![words::plain(STYLE, &record.program)];
    origin.extend(
        record
            .spec
            .sources
            .first()
            .map(|source| words::plain(STYLE, &source.path)),
    );
    origin.push(format!("BLAKE3 {}", words::plain(STYLE, &hash)));
    out.push_str(&format!(
        "{{\\small {}}}\n",
        origin.join(words::separator(STYLE))
    ));
    for grading in &record.gradings {
        out.push_str(&format!("\n{}\n", words::grading(STYLE, grading)));
    }
    for group in record.claims.chunk_by(|a, b| a.name == b.name) {
        if let Some(first) = group.first() {
            out.push_str(&format!(
                "\n\\subsection*{{{}}}\n",
                words::plain(STYLE, &first.name)
            ));
        }
        for claim in group {
            write_claim(&mut out, claim);
        }
    }
    let unexpected = words::unexpected(record);
    let agreement = match unexpected.len() {
        0 if record.claims.len() == 1 => "as expected.".to_owned(),
        0 => "all as expected.".to_owned(),
        _ => {
            let labels: Vec<String> = unexpected
                .iter()
                .map(|claim| words::label(STYLE, claim))
                .collect();
            format!("not as expected: {}.", labels.join("; "))
        }
    };
    out.push_str(&format!(
        "\n\\bigskip Claims: {}; {agreement}\n",
        words::counts(&record.claims)
    ));
    out.push_str("\\end{document}\n");
    out
}

fn write_claim(out: &mut String, claim: &ClaimRecord) {
    let parts = match claim.target.as_str() {
        "" => vec!["\\text{(target unknown)}".to_owned()],
        target => summands(STYLE, target),
    };
    let target = parts.join(" ");
    match &claim.finding {
        Finding::Holds { form: found } => out.push_str(&equation(&parts, &form(STYLE, found))),
        Finding::Undetermined {
            particular,
            kernel,
            shift,
        } => {
            let letters = words::letters(STYLE, claim, kernel.len() + shift.iter().len());
            let multiples: Vec<(String, &[FormTerm])> = letters
                .iter()
                .cloned()
                .zip(kernel.iter().chain(shift).map(Vec::as_slice))
                .collect();
            out.push_str(&equation(
                &parts,
                &combination(STYLE, particular, &multiples),
            ));
            if !letters.is_empty() {
                out.push_str(&format!(
                    "{}.\n\n",
                    words::free_choice(STYLE, claim, &letters)
                ));
            }
        }
        Finding::Refuted(refutation) => {
            let refused = words::refused(STYLE, claim, refutation);
            out.push_str(&format!("\n{} {refused}", words::inline(STYLE, &target)));
            match refutation {
                Refutation::OtherCoefficients { form: only, .. } => {
                    out.push_str(&format!("; {}\n", words::instead(claim)));
                    out.push_str(&equation(&parts, &form(STYLE, only)));
                }
                _ => out.push_str(".\n\n"),
            }
        }
        Finding::Unsettled(_) => {
            let terms = words::terms(STYLE, claim);
            out.push_str(&format!(
                "\n{} in {terms}: no verdict.\n\n",
                words::inline(STYLE, &target)
            ));
        }
    }
    let mut facts = Vec::new();
    match words::index(STYLE, claim) {
        index if index.is_empty() => {}
        index => facts.push(index),
    }
    let verdict = claim.finding.verdict();
    facts.push(if verdict == claim.expected {
        format!("\\textbf{{{}}}", verdict.word())
    } else {
        format!(
            "\\textbf{{{}}} (expected: {})",
            verdict.word(),
            claim.expected.word()
        )
    });
    facts.extend(
        claim
            .system
            .as_ref()
            .map(|system| words::shape(STYLE, system)),
    );
    facts.push(words::evidence(STYLE, claim));
    out.push_str(&format!(
        "{{\\small {}.",
        facts.join(words::separator(STYLE))
    ));
    for detail in words::details(STYLE, claim) {
        out.push_str(&format!(" {}.", capitalised(&detail)));
    }
    out.push_str("\\par}\n");
}

fn capitalised(sentence: &str) -> String {
    let mut characters = sentence.chars();
    match characters.next() {
        Some(first) => first.to_uppercase().chain(characters).collect(),
        None => String::new(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::samples;
    use crate::tests::braces;

    #[test]
    fn a_document_is_complete_and_balanced() {
        let document = latex(&samples::record());
        assert!(document.starts_with("\\documentclass"));
        assert!(document.ends_with("\\end{document}\n"));
        assert_eq!(braces(&document), (0, 0));
        assert_eq!(
            document.matches("\\begin{").count(),
            document.matches("\\end{").count()
        );
        assert_eq!(document.matches('$').count() % 2, 0);
        for part in [
            "u_{3,0} &= \\frac{1}{24}\\,\\frac{F^{(4)}}{F} + \\frac{1}{3}\\,t\\,\\frac{F''}{F} + \\frac{7}{12}\\,\\frac{F'}{F}",
            "$j = 3$, $k = 0$; \\textbf{holds}; $33 \\times 8$ by matching, fraction-free",
            "$3\\,t$ times the first minus the second leaves $0 = \\frac{2}{3}$.",
            "q^{2} &= \\frac{t^{2} + 1}{2\\,t}\\,\\frac{F'}{F}",
            "c_{1}\\,\\Bigl(-\\Bigl(t - \\frac{1}{5}\\Bigr)",
        ] {
            assert!(document.contains(part), "{part}\n{document}");
        }
    }

    #[test]
    fn hostile_texts_do_not_act() {
        let hostile = "\\input{/etc/passwd}$ %\n\n\\end{document} _^~#& \u{1b}☃ }{";
        let mut record = samples::record();
        record.program = hostile.to_owned();
        record.spec.title = Some(hostile.to_owned());
        record.spec.blake3 = "}}\\input{x}".to_owned();
        record.spec.sources[0].path = hostile.to_owned();
        record.gradings[0].modulus = hostile.to_owned();
        record.gradings[0]
            .weights
            .insert(hostile.to_owned(), hostile.to_owned());
        for claim in &mut record.claims {
            claim.name = hostile.to_owned();
            claim.target = hostile.to_owned();
            claim.index.insert(hostile.to_owned(), 1);
            claim
                .terms
                .iter_mut()
                .for_each(|term| *term = hostile.to_owned());
            if let Some(system) = &mut claim.system {
                system.method = hostile.to_owned();
            }
            if let Finding::Holds { form } = &mut claim.finding {
                form.iter_mut()
                    .for_each(|part| part.term = hostile.to_owned());
            }
            if let Finding::Refuted(Refutation::Contradiction { rows, .. }) = &mut claim.finding {
                rows.iter_mut()
                    .for_each(|row| row.monomial = hostile.to_owned());
            }
        }
        let document = latex(&record);
        assert_eq!(braces(&document), (0, 0));
        assert!(!document.contains("\\input"));
        assert_eq!(document.matches("\\end{document}").count(), 1);
        assert!(!document.contains(|c: char| c.is_control() && c != '\n'));
    }
}
