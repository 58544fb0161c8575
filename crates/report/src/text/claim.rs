//! One instance of a claim.

use super::TextOptions;
use super::paint::Paint;
use super::wrap::{columns, fill, sentence};
use crate::formula::{Level, Product, combination, expression, form};
use crate::words;
use linform_engine::record::{ClaimRecord, Finding, FormTerm, Refutation};

/// The target as the left side of an identity.
pub(super) fn target(options: &TextOptions, claim: &ClaimRecord) -> String {
    match claim.target.as_str() {
        "" => "(target unknown)".to_owned(),
        target => expression(options.style(), target).at(options.style(), Level::Sum),
    }
}

/// Writes the block of an instance; targets are padded to `widest`, so that the signs of equality stand in one column.
pub(super) fn write(out: &mut String, options: &TextOptions, claim: &ClaimRecord, widest: usize) {
    let style = options.style();
    let target = target(options, claim);
    match &claim.finding {
        Finding::Holds { form: found } => identity(out, options, &target, widest, found),
        Finding::Undetermined {
            particular,
            kernel,
            shift,
        } => {
            let letters = words::letters(style, claim, kernel.len() + shift.iter().len());
            let multiples: Vec<(String, &[FormTerm])> = letters
                .iter()
                .cloned()
                .zip(kernel.iter().chain(shift).map(Vec::as_slice))
                .collect();
            let mut products = combination(style, particular, &multiples);
            if !letters.is_empty() {
                if let Some(last) = products.last_mut().and_then(|product| product.last_mut()) {
                    last.push(',');
                }
                let choice = words::free_choice(style, claim, &letters);
                products.extend(choice.split(' ').map(|word| vec![word.to_owned()]));
            }
            equation(out, options, &target, widest, &products);
        }
        Finding::Refuted(refutation) => {
            let text = format!(
                "{} {}",
                words::inline(style, &target),
                words::refused(style, claim, refutation)
            );
            sentence(out, "  ", &text, 4, options.width);
            if let Refutation::OtherCoefficients { form: only, .. } = refutation {
                sentence(out, "    ", words::instead(claim), 4, options.width);
                equation(out, options, &format!("  {target}"), 0, &form(style, only));
            }
        }
        Finding::Unsettled(_) => {
            let text = format!(
                "{} in {}: no verdict",
                words::inline(style, &target),
                words::terms(style, claim)
            );
            sentence(out, "  ", &text, 4, options.width);
        }
    }
    sentence(out, "    ", &status(options, claim), 6, options.width);
    for detail in words::details(style, claim) {
        sentence(out, "    ", &detail, 6, options.width);
    }
}

fn identity(
    out: &mut String,
    options: &TextOptions,
    target: &str,
    widest: usize,
    found: &[FormTerm],
) {
    equation(out, options, target, widest, &form(options.style(), found));
}

fn equation(
    out: &mut String,
    options: &TextOptions,
    target: &str,
    widest: usize,
    products: &[Product],
) {
    let padding = widest.saturating_sub(columns(target));
    let head = format!("  {target}{} = ", " ".repeat(padding));
    // A long target leaves no room beside it: the form then begins below.
    let mut indent = columns(&head);
    let mut first = head;
    if options.width > 0 && indent > options.width / 2 {
        // A sign stays with what follows it.
        let target = format!("{target} =")
            .replace("+ ", "+\u{a0}")
            .replace("− ", "−\u{a0}")
            .replace("- ", "-\u{a0}")
            .replace(" =", "\u{a0}=");
        sentence(out, "  ", &target, 4, options.width);
        first = " ".repeat(6);
        indent = 6;
    }
    let mut pieces = Vec::new();
    for product in products {
        let whole = product.join(" ");
        if options.width == 0 || indent + columns(&whole) <= options.width {
            pieces.push(whole);
        } else {
            pieces.extend(product.iter().cloned());
        }
    }
    fill(
        out,
        &first,
        pieces.iter().map(String::as_str),
        indent,
        options.width,
    );
}

/// Index, verdict, shape of the system, and what the verdict rests on.
fn status(options: &TextOptions, claim: &ClaimRecord) -> String {
    let style = options.style();
    let paint = Paint { on: options.colour };
    let verdict = claim.finding.verdict();
    let mut parts = Vec::new();
    match words::index(style, claim) {
        index if index.is_empty() => {}
        index => parts.push(index),
    }
    parts.push(if verdict == claim.expected {
        paint.verdict(verdict)
    } else {
        let expected = paint.alarm(&format!("(expected: {})", claim.expected.word()));
        format!("{} {expected}", paint.verdict(verdict))
    });
    parts.extend(
        claim
            .system
            .as_ref()
            .map(|system| words::shape(style, system)),
    );
    parts.push(words::evidence(style, claim));
    parts.join(words::separator(style))
}
