//! A record as text for a terminal or a log.

mod claim;
mod paint;
#[cfg(test)]
mod tests;
mod wrap;

use crate::formula::Style;
use crate::sanitise::visible;
use crate::words;
use linform_engine::record::{ClaimRecord, ResultRecord};
use paint::Paint;
use wrap::{columns, sentence};

/// How a text is written.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct TextOptions {
    /// Colour by ANSI escape sequences.
    pub colour: bool,
    /// Primes, powers and signs in Unicode; else ASCII, as far as the names of the spec are.
    pub unicode: bool,
    /// Columns of a line; 0 for no limit. Single numbers and products are not broken.
    pub width: usize,
}

impl TextOptions {
    fn style(&self) -> Style {
        if self.unicode {
            Style::Unicode
        } else {
            Style::Ascii
        }
    }
}

/// The record as text: what was decided, claim by claim, and a summary at the end.
///
/// Control characters in the texts of a spec are shown as `\u{…}`, so nothing in a spec can steer the terminal.
pub fn text(record: &ResultRecord, options: &TextOptions) -> String {
    let mut out = String::new();
    head(&mut out, record, options);
    for group in record.claims.chunk_by(|a, b| a.name == b.name) {
        out.push('\n');
        write_group(&mut out, group, options);
    }
    out.push('\n');
    tail(&mut out, record, options);
    out
}

fn head(out: &mut String, record: &ResultRecord, options: &TextOptions) {
    let style = options.style();
    let paint = Paint { on: options.colour };
    if let Some(title) = &record.spec.title {
        sentence(out, "", &paint.heading(&visible(title)), 0, options.width);
    }
    let mut origin = vec![visible(&record.program)];
    origin.extend(
        record
            .spec
            .sources
            .first()
            .map(|source| visible(&source.path)),
    );
    let hash: String = record.spec.blake3.chars().take(16).collect();
    origin.push(format!("blake3 {}", visible(&hash)));
    let origin = origin.join(words::separator(style));
    sentence(out, "", &paint.aside(&origin), 2, options.width);
    for grading in &record.gradings {
        sentence(out, "", &words::grading(style, grading), 2, options.width);
    }
    if let Some(largest) = record
        .primitives
        .iter()
        .max_by_key(|primitive| primitive.system.rows)
    {
        let elements: Vec<String> = record
            .primitives
            .iter()
            .map(|primitive| primitive.element.clone())
            .collect();
        let elements = crate::formula::folded_terms(style, &elements, 4);
        let text = format!(
            "found from their derivatives on the way: {} ({}, largest system {})",
            elements.join(", "),
            record.primitives.len(),
            words::shape(style, &largest.system),
        );
        sentence(out, "", &text, 2, options.width);
    }
}

/// The instances of one claim under its name.
fn write_group(out: &mut String, group: &[ClaimRecord], options: &TextOptions) {
    let paint = Paint { on: options.colour };
    let Some(first) = group.first() else {
        return;
    };
    let mut heading = paint.heading(&visible(&first.name));
    if group.len() > 1 {
        let counts = words::counts(group);
        let counts = match counts.strip_prefix(&format!("{} ", group.len())) {
            Some(word) => format!("all {word}"),
            None => counts,
        };
        heading.push_str(&format!(" ({} instances: {counts})", group.len()));
    }
    sentence(out, "", &heading, 2, options.width);
    // One very long target must not push all the others to the right.
    let widest = group
        .iter()
        .map(|claim| columns(&claim::target(options, claim)))
        .filter(|columns| *columns <= 24)
        .max()
        .unwrap_or(0);
    for claim in group {
        claim::write(out, options, claim, widest);
    }
}

fn tail(out: &mut String, record: &ResultRecord, options: &TextOptions) {
    let style = options.style();
    let paint = Paint { on: options.colour };
    let unexpected = words::unexpected(record);
    let claims = match record.claims.len() {
        1 => "1 claim".to_owned(),
        count => format!("{count} claims"),
    };
    let counts = words::counts(&record.claims);
    let agreement = match unexpected.len() {
        0 if record.claims.len() == 1 => "as expected".to_owned(),
        0 => "all as expected".to_owned(),
        count => paint.alarm(&format!("{count} not as expected:")),
    };
    sentence(
        out,
        "",
        &format!("{claims}: {counts}; {agreement}"),
        2,
        options.width,
    );
    for claim in unexpected {
        let line = format!(
            "{}: {}, expected {}",
            words::label(style, claim),
            paint.verdict(claim.finding.verdict()),
            claim.expected.word()
        );
        sentence(out, "  ", &line, 4, options.width);
    }
}
