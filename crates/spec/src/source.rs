//! Source files, places in them, and the diagnostics that point there.

use std::fmt;

/// A stretch of bytes in one source file, `start..end`.
///
/// *Invariant*: both ends are character boundaries of the file's text.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Hash)]
pub struct Span {
    /// Index into [`Model::sources`](crate::Model::sources) or [`Failure::sources`].
    pub file: usize,
    /// First byte.
    pub start: usize,
    /// One past the last byte.
    pub end: usize,
}

impl Span {
    /// The smallest stretch that covers both; `other` is taken to lie in the same file.
    pub fn to(self, other: Span) -> Span {
        Span {
            file: self.file,
            start: self.start.min(other.start),
            end: self.end.max(other.end),
        }
    }
}

/// A file that was read.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct SourceFile {
    /// The path under which the loader found it.
    pub path: String,
    /// Its whole text.
    pub text: String,
}

impl SourceFile {
    /// Line and column of a byte, both counted from 1; a column is a character.
    ///
    /// A byte past the end, or inside a character, counts as the nearest boundary before it.
    pub fn line_column(&self, byte: usize) -> (usize, usize) {
        let before = &self.text[..self.text.floor_char_boundary(byte)];
        let line_start = before.rfind('\n').map_or(0, |newline| newline + 1);
        let line = 1 + before.bytes().filter(|b| *b == b'\n').count();
        (line, 1 + before[line_start..].chars().count())
    }
}

/// A place and what to say there.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Label {
    /// Where.
    pub span: Span,
    /// A short remark printed at the place; may be empty.
    pub text: String,
}

/// One mistake: what is wrong, where, and what to do about it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Diagnostic {
    /// What is wrong, as a lowercase fragment.
    pub message: String,
    /// The places; the first is the one to go to.
    pub labels: Vec<Label>,
    /// What to write instead.
    pub help: Option<String>,
}

impl Diagnostic {
    /// A diagnostic that points at one place.
    pub fn new(message: impl Into<String>, span: Span) -> Diagnostic {
        Diagnostic {
            message: message.into(),
            labels: vec![Label {
                span,
                text: String::new(),
            }],
            help: None,
        }
    }

    /// The same with a remark at the first place.
    pub fn label(mut self, text: impl Into<String>) -> Diagnostic {
        if let Some(first) = self.labels.first_mut() {
            first.text = text.into();
        }
        self
    }

    /// The same with one more place.
    pub fn also(mut self, span: Span, text: impl Into<String>) -> Diagnostic {
        self.labels.push(Label {
            span,
            text: text.into(),
        });
        self
    }

    /// The same with a line of help.
    pub fn help(mut self, text: impl Into<String>) -> Diagnostic {
        self.help = Some(text.into());
        self
    }
}

impl fmt::Display for Diagnostic {
    /// Message and help without the place, which needs the sources.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.message)?;
        match &self.help {
            Some(help) => write!(f, " (help: {help})"),
            None => Ok(()),
        }
    }
}

impl std::error::Error for Diagnostic {}

/// Every mistake found in one run, with the files they point into.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Failure {
    /// The files read so far.
    pub sources: Vec<SourceFile>,
    /// At least one diagnostic, in the order of the places.
    pub diagnostics: Vec<Diagnostic>,
}

impl fmt::Display for Failure {
    /// One line `path:line:column: message` for each diagnostic, followed by its help.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (number, diagnostic) in self.diagnostics.iter().enumerate() {
            if number > 0 {
                writeln!(f)?;
            }
            if let Some(label) = diagnostic.labels.first()
                && let Some(source) = self.sources.get(label.span.file)
            {
                let (line, column) = source.line_column(label.span.start);
                write!(f, "{}:{line}:{column}: ", source.path)?;
            }
            f.write_str(&diagnostic.message)?;
            if let Some(help) = &diagnostic.help {
                write!(f, "\n  help: {help}")?;
            }
        }
        Ok(())
    }
}

impl std::error::Error for Failure {}
