//! Diagnostics as they are found.

use crate::source::{Diagnostic, Span};

/// The most diagnostics of one run; what comes after is only counted.
const MAX_DIAGNOSTICS: usize = 100;

/// Every mistake found so far.
#[derive(Debug, Default)]
pub(crate) struct Collector {
    found: Vec<Found>,
    left_out: usize,
    withheld: usize,
}

#[derive(Debug)]
struct Found {
    diagnostic: Diagnostic,
    origin: Origin,
}

/// Can a mistake be the consequence of another?
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Origin {
    /// The text is not TOML.
    Syntax,
    /// What stands there is wrong by itself.
    Itself,
    /// Something is absent, which may be for want of a part that could not be read.
    Absence,
}

impl Collector {
    pub(crate) fn push(&mut self, diagnostic: Diagnostic) {
        self.add(diagnostic, Origin::Itself);
    }

    pub(crate) fn push_syntax(&mut self, diagnostic: Diagnostic) {
        self.add(diagnostic, Origin::Syntax);
    }

    /// Something is missing or unknown: told only if the syntax was right throughout.
    pub(crate) fn push_absence(&mut self, diagnostic: Diagnostic) {
        self.add(diagnostic, Origin::Absence);
    }

    /// The value, or nothing after noting the mistake.
    pub(crate) fn take<T>(&mut self, result: Result<T, Diagnostic>) -> Option<T> {
        result.map_err(|diagnostic| self.push(diagnostic)).ok()
    }

    /// Is there room for more? Costly help is not worth its time otherwise.
    pub(crate) fn is_full(&self) -> bool {
        self.found.len() >= MAX_DIAGNOSTICS
    }

    /// Something is wrong or unknown, but may be the consequence of a mistake that is noted.
    pub(crate) fn withhold(&mut self) {
        self.withheld += 1;
    }

    /// A number that grows with everything noted or withheld.
    pub(crate) fn count(&self) -> usize {
        self.found.len() + self.left_out + self.withheld
    }

    pub(crate) fn is_empty(&self) -> bool {
        self.found.is_empty()
    }

    /// Takes over the mistakes of another collector, as absences.
    pub(crate) fn append_absences(&mut self, other: Collector) {
        for found in other.found {
            self.push_absence(found.diagnostic);
        }
    }

    fn add(&mut self, diagnostic: Diagnostic, origin: Origin) {
        if self.is_full() {
            self.left_out += 1;
        } else {
            self.found.push(Found { diagnostic, origin });
        }
    }

    /// The diagnostics in the order of their places.
    ///
    /// After a syntax error, what may be its consequence is left out: everything on its line
    /// (`line_of` tells lines apart), and every absence.
    pub(crate) fn finish(self, line_of: impl Fn(Span) -> (usize, usize)) -> Vec<Diagnostic> {
        let line = |found: &Found| found.diagnostic.labels.first().map(|l| line_of(l.span));
        let broken: Vec<_> = self
            .found
            .iter()
            .filter(|found| found.origin == Origin::Syntax)
            .map(line)
            .collect();
        let mut kept: Vec<Diagnostic> = self
            .found
            .into_iter()
            .filter(|found| match found.origin {
                Origin::Syntax => true,
                Origin::Itself => !broken.contains(&line(found)),
                Origin::Absence => broken.is_empty(),
            })
            .map(|found| found.diagnostic)
            .collect();
        kept.sort_by_key(|diagnostic| {
            diagnostic
                .labels
                .first()
                .map(|label| (label.span.file, label.span.start))
        });
        if self.left_out > 0
            && let Some(last) = kept.last().and_then(|d| d.labels.first())
        {
            kept.push(
                Diagnostic::new(format!("{} more mistakes", self.left_out), last.span)
                    .help("correct those above first"),
            );
        }
        kept
    }
}
