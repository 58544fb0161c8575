//! Files, and the files they include.

use super::draft::Draft;
use super::read_file;
use super::section::{File, Section, Text};
use crate::collect::Collector;
use crate::source::{Diagnostic, SourceFile, Span};
use toml::de::{DeTable, Error};

/// The largest file, in bytes.
const MAX_FILE: usize = 2 << 20;

/// The most files of one spec.
const MAX_FILES: usize = 64;

/// Above this size only the first syntax error is told: collecting all takes memory for each.
const MAX_RECOVERED: usize = 1 << 18;

type Loader<'a> = &'a mut dyn FnMut(&str) -> Result<String, String>;

/// The result of reading a spec with everything it includes.
pub(crate) struct Read {
    pub(crate) sources: Vec<SourceFile>,
    pub(crate) draft: Draft,
}

/// Reads a file and, before it, the files it includes.
pub(crate) fn read_files(
    path: &str,
    text: String,
    load: Loader<'_>,
    errors: &mut Collector,
) -> Read {
    let mut reader = Reader {
        load,
        errors,
        sources: Vec::new(),
        draft: Draft::default(),
        open: Vec::new(),
    };
    reader.read(path.to_owned(), text);
    Read {
        sources: reader.sources,
        draft: reader.draft,
    }
}

struct Reader<'a> {
    load: Loader<'a>,
    errors: &'a mut Collector,
    /// The text of a file that is still open is empty here.
    sources: Vec<SourceFile>,
    draft: Draft,
    /// The files that are being read, the innermost last.
    open: Vec<usize>,
}

impl Reader<'_> {
    fn read(&mut self, path: String, text: String) {
        let number = self.sources.len();
        self.sources.push(SourceFile {
            path,
            text: String::new(),
        });
        self.open.push(number);
        self.read_text(number, &text);
        self.open.pop();
        // A file that is too large is not kept either.
        if text.len() <= MAX_FILE {
            self.sources[number].text = text;
        }
    }

    fn read_text(&mut self, number: usize, text: &str) {
        let file = File { number, text };
        if text.len() > MAX_FILE {
            let start = Span {
                file: number,
                start: 0,
                end: 0,
            };
            self.errors.push(
                Diagnostic::new(format!("this file has {} bytes", text.len()), start).help(
                    format!(
                        "a spec has at most {} MB, which is {MAX_FILE} bytes; numbers belong into a data file",
                        MAX_FILE >> 20
                    ),
                ),
            );
            self.draft.lost.everything = true;
            return;
        }
        // A byte order mark is no part of the text; it is skipped in the TOML reader too.
        let table = match DeTable::parse(text) {
            Ok(table) => table,
            Err(first) => {
                self.draft.lost.everything = true;
                if text.len() > MAX_RECOVERED {
                    self.errors.push_syntax(syntax_error(file, &first));
                    return;
                }
                let (table, all) = DeTable::parse_recoverable(text);
                for error in &all {
                    if self.errors.is_full() {
                        break;
                    }
                    self.errors.push_syntax(syntax_error(file, error));
                }
                table
            }
        };
        let table = table.get_ref();
        let top = Section::new("the file", file.span(0..0), file, table);
        if let Some(entry) = top.get("include") {
            for include in entry.texts(true, self.errors).unwrap_or_default() {
                self.include(number, &include);
            }
        }
        read_file(file, table, &mut self.draft, self.errors);
    }

    fn include(&mut self, from: usize, include: &Text) {
        let span = include.place.whole();
        let path = join(&self.sources[from].path, &include.value);
        let same =
            |reader: &Self, number: &usize| normal(&reader.sources[*number].path) == normal(&path);
        if let Some(position) = self.open.iter().position(|number| same(self, number)) {
            let chain: Vec<_> = self.open[position..]
                .iter()
                .map(|number| self.sources[*number].path.as_str())
                .chain([path.as_str()])
                .collect();
            let chain = chain.join(" → ");
            self.errors.push(
                Diagnostic::new("the files include each other in a circle", span)
                    .label(chain)
                    .help("take one of the includes away"),
            );
            self.draft.lost.everything = true;
            return;
        }
        if (0..self.sources.len()).any(|number| same(self, &number)) {
            // Reached on two ways: read once.
            return;
        }
        if self.sources.len() == MAX_FILES {
            self.errors.push(
                Diagnostic::new(format!("more than {MAX_FILES} files"), span)
                    .help("put included files together"),
            );
            self.draft.lost.everything = true;
            return;
        }
        match (self.load)(&path) {
            Ok(text) => self.read(path, text),
            Err(reason) => {
                self.errors.push(
                    Diagnostic::new(format!("cannot read `{path}`: {reason}"), span)
                        .help("the path is relative to the file that includes it"),
                );
                self.draft.lost.everything = true;
            }
        }
    }
}

/// The path of an included file, relative to the file that includes it.
fn join(from: &str, include: &str) -> String {
    let include = include.strip_prefix("./").unwrap_or(include);
    if include.starts_with('/') {
        return include.to_owned();
    }
    match from.rfind('/') {
        Some(slash) => format!("{}/{include}", &from[..slash]),
        None => include.to_owned(),
    }
}

/// A path without `.`, `..` and doubled slashes, to tell whether two are the same.
fn normal(path: &str) -> Vec<&str> {
    let mut parts: Vec<&str> = Vec::new();
    if path.starts_with('/') {
        parts.push("");
    }
    for part in path.split('/') {
        match part {
            "" | "." => {}
            ".." if parts.last().is_some_and(|last| !["", ".."].contains(last)) => {
                parts.pop();
            }
            part => parts.push(part),
        }
    }
    parts
}

fn syntax_error(file: File<'_>, error: &Error) -> Diagnostic {
    let message = error.message();
    let help = if message.starts_with("duplicate key") {
        "each key stands once in its table, and each table has one header"
    } else if message.starts_with("invalid unquoted key") {
        "put a key with primes or other signs in quotation marks, as in `\"q'\" = …`"
    } else if message.starts_with("string values must be quoted")
        || message.starts_with("invalid boolean")
        || message.starts_with("invalid float")
    {
        "put the value in quotation marks"
    } else if message.contains("escape") {
        "a backslash is written `\\\\`, or the string stands in single quotation marks"
    } else if message.starts_with("unclosed") || message.starts_with("invalid basic string") {
        "close what was opened on this line"
    } else {
        "a spec is a TOML file: `[section]` lines, and `key = value` lines"
    };
    let range = error.span().unwrap_or(0..0);
    Diagnostic::new(message, file.span(range)).help(help)
}
