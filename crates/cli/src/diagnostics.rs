//! Mistakes in specs, drawn with the place they stand in.

use linform_spec::{Diagnostic, Failure, SourceFile};
use miette::{GraphicalReportHandler, GraphicalTheme, LabeledSpan, NamedSource, SourceCode};

/// One diagnostic as the drawing library wants it.
#[derive(Debug)]
struct Drawn {
    message: String,
    help: Option<String>,
    source: Option<NamedSource<String>>,
    labels: Vec<LabeledSpan>,
    /// Labels in other files.
    related: Vec<Drawn>,
    /// Belongs to another diagnostic and is no mistake of its own.
    is_remark: bool,
}

impl std::fmt::Display for Drawn {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(&self.message)
    }
}

impl std::error::Error for Drawn {}

impl miette::Diagnostic for Drawn {
    fn severity(&self) -> Option<miette::Severity> {
        self.is_remark.then_some(miette::Severity::Advice)
    }

    fn help<'a>(&'a self) -> Option<Box<dyn std::fmt::Display + 'a>> {
        self.help
            .as_ref()
            .map(|help| Box::new(help) as Box<dyn std::fmt::Display>)
    }

    fn source_code(&self) -> Option<&dyn SourceCode> {
        self.source.as_ref().map(|source| source as &dyn SourceCode)
    }

    fn labels(&self) -> Option<Box<dyn Iterator<Item = LabeledSpan> + '_>> {
        Some(Box::new(self.labels.iter().cloned()))
    }

    fn related<'a>(&'a self) -> Option<Box<dyn Iterator<Item = &'a dyn miette::Diagnostic> + 'a>> {
        (!self.related.is_empty()).then(|| {
            Box::new(
                self.related
                    .iter()
                    .map(|part| part as &dyn miette::Diagnostic),
            ) as Box<dyn Iterator<Item = _>>
        })
    }
}

/// The longest line, in bytes, that is drawn with marks under it.
const LONGEST_LINE: usize = 400;

/// The part of a diagnostic that stands in one file.
fn part(diagnostic: &Diagnostic, sources: &[SourceFile], file: usize, message: String) -> Drawn {
    let here = || {
        diagnostic
            .labels
            .iter()
            .filter(|label| label.span.file == file)
    };
    let Some(source) = sources.get(file) else {
        return Drawn {
            message,
            help: None,
            source: None,
            labels: Vec::new(),
            related: Vec::new(),
            is_remark: false,
        };
    };
    if let Some(label) =
        here().find(|label| line_of(&source.text, label.span.start).len() > LONGEST_LINE)
    {
        // A line of a million characters would bury the message: the place is told in words.
        let (line, column) = source.line_column(label.span.start);
        let near: String = source
            .text
            .get(label.span.start..)
            .unwrap_or_default()
            .chars()
            .take(30)
            .collect();
        let place = format!("{}:{line}:{column}, at `{near}…`", source.path);
        let message = format!("{message} ({place})");
        return Drawn {
            message,
            help: None,
            source: None,
            labels: Vec::new(),
            related: Vec::new(),
            is_remark: false,
        };
    }
    let labels = here()
        .map(|label| {
            let length = label.span.end.saturating_sub(label.span.start);
            let text = Some(label.text.clone()).filter(|text| !text.is_empty());
            LabeledSpan::new(text, label.span.start, length)
        })
        .collect();
    let source = Some(NamedSource::new(&source.path, source.text.clone()));
    Drawn {
        message,
        help: None,
        source,
        labels,
        related: Vec::new(),
        is_remark: false,
    }
}

/// The line around a byte.
fn line_of(text: &str, byte: usize) -> &str {
    let byte = byte.min(text.len());
    let start = text.as_bytes()[..byte]
        .iter()
        .rposition(|&b| b == b'\n')
        .map_or(0, |position| position + 1);
    let end = text.as_bytes()[byte..]
        .iter()
        .position(|&b| b == b'\n')
        .map_or(text.len(), |position| byte + position);
    text.get(start..end).unwrap_or_default()
}

fn drawn(diagnostic: &Diagnostic, sources: &[SourceFile]) -> Drawn {
    let mut files: Vec<usize> = diagnostic
        .labels
        .iter()
        .map(|label| label.span.file)
        .collect();
    files.dedup();
    let Some((&first, others)) = files.split_first() else {
        let (message, help) = (diagnostic.message.clone(), diagnostic.help.clone());
        return Drawn {
            message,
            help,
            source: None,
            labels: Vec::new(),
            related: Vec::new(),
            is_remark: false,
        };
    };
    let related = others
        .iter()
        .map(|&file| Drawn {
            is_remark: true,
            ..part(
                diagnostic,
                sources,
                file,
                "this place belongs to it".to_owned(),
            )
        })
        .collect();
    let whole = part(diagnostic, sources, first, diagnostic.message.clone());
    Drawn {
        help: diagnostic.help.clone(),
        related,
        ..whole
    }
}

/// The text of all mistakes of a run, with a closing count.
pub(crate) fn text(failure: &Failure, colour: bool, unicode: bool) -> String {
    let theme = match (colour, unicode) {
        (true, true) => GraphicalTheme::unicode(),
        (false, true) => GraphicalTheme::unicode_nocolor(),
        (true, false) => GraphicalTheme::ascii(),
        (false, false) => GraphicalTheme::none(),
    };
    let handler = GraphicalReportHandler::new_themed(theme)
        .with_width(100)
        .with_links(false);
    let mut text = String::new();
    for diagnostic in &failure.diagnostics {
        if handler
            .render_report(&mut text, &drawn(diagnostic, &failure.sources))
            .is_err()
        {
            text.push_str(&diagnostic.message);
        }
        text.push('\n');
    }
    let count = failure.diagnostics.len();
    text.push_str(&format!(
        "{count} {}",
        if count == 1 { "mistake" } else { "mistakes" }
    ));
    if let Some(source) = failure.sources.first() {
        text.push_str(&format!(" in {}", source.path));
    }
    text
}
