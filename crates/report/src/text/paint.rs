//! Colour on a terminal.

use linform_engine::record::Verdict;

#[derive(Clone, Copy)]
pub(super) struct Paint {
    pub(super) on: bool,
}

impl Paint {
    fn with(self, code: &str, text: &str) -> String {
        if self.on && !text.is_empty() {
            format!("\u{1b}[{code}m{text}\u{1b}[0m")
        } else {
            text.to_owned()
        }
    }

    pub(super) fn heading(self, text: &str) -> String {
        self.with("1", text)
    }

    pub(super) fn aside(self, text: &str) -> String {
        self.with("2", text)
    }

    pub(super) fn alarm(self, text: &str) -> String {
        self.with("1;31", text)
    }

    pub(super) fn verdict(self, verdict: Verdict) -> String {
        let code = match verdict {
            Verdict::Holds => "32",
            Verdict::Refuted => "31",
            Verdict::Undetermined => "33",
            Verdict::Unsettled => "35",
        };
        self.with(code, verdict.word())
    }
}
