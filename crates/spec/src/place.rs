//! Where the characters of a text stand in its file.

use crate::source::Span;

/// Maps the bytes of a decoded TOML string to those of the file.
#[derive(Clone, Debug)]
pub(crate) struct Place {
    file: usize,
    /// In rising order; together they cover the decoded text.
    segments: Vec<Segment>,
    /// The byte of the file after the last character.
    end: usize,
}

/// A stretch of the decoded text that is either literally in the file or one escape sequence.
#[derive(Clone, Copy, Debug)]
struct Segment {
    decoded: usize,
    raw: usize,
    /// The length in the file of an escape sequence; none for literal text.
    escape: Option<usize>,
}

impl Place {
    /// A text that stands in the file as it is.
    pub(crate) fn literal(file: usize, start: usize, length: usize) -> Place {
        Place {
            file,
            segments: vec![Segment {
                decoded: 0,
                raw: start,
                escape: None,
            }],
            end: start + length,
        }
    }

    /// A string token of TOML, `token` being its bytes in the file from `start` on, quotes included.
    pub(crate) fn of_token(file: usize, start: usize, token: &str) -> Place {
        let quotes = ["\"\"\"", "'''", "\"", "'"]
            .into_iter()
            .find(|quotes| token.len() >= 2 * quotes.len() && token.starts_with(quotes));
        let Some(quotes) = quotes else {
            return Place::literal(file, start, token.len());
        };
        let mut from = quotes.len();
        // Tokens recovered after a syntax error may lack their closing quotes.
        let to = token
            .floor_char_boundary(token.len() - quotes.len())
            .max(from);
        if quotes.len() == 3 {
            // A newline right after the opening quotes is not part of the text.
            let inner = &token[from..to];
            from += if inner.starts_with("\r\n") {
                2
            } else {
                usize::from(inner.starts_with('\n'))
            };
        }
        if quotes.starts_with('\'') {
            return Place::literal(file, start + from, to - from);
        }
        Place {
            file,
            segments: segments_of(&token[from..to], start + from),
            end: start + to,
        }
    }

    /// The place of the decoded bytes `start..end`.
    pub(crate) fn span(&self, start: usize, end: usize) -> Span {
        let first = self.raw_start(start);
        let last = if end > start {
            self.raw_end(end)
        } else {
            first
        };
        Span {
            file: self.file,
            start: first,
            end: last.max(first),
        }
    }

    /// The place of the whole text.
    pub(crate) fn whole(&self) -> Span {
        Span {
            file: self.file,
            start: self.segments.first().map_or(self.end, |s| s.raw),
            end: self.end,
        }
    }

    fn segment(&self, byte: usize) -> Option<&Segment> {
        let after = self.segments.partition_point(|s| s.decoded <= byte);
        self.segments.get(after.checked_sub(1)?)
    }

    fn raw_start(&self, byte: usize) -> usize {
        self.segment(byte).map_or(self.end, |segment| {
            let inside = match segment.escape {
                None => byte - segment.decoded,
                Some(_) => 0,
            };
            (segment.raw + inside).min(self.end)
        })
    }

    fn raw_end(&self, byte: usize) -> usize {
        self.segment(byte - 1).map_or(self.end, |segment| {
            let inside = segment.escape.unwrap_or(byte - segment.decoded);
            (segment.raw + inside).min(self.end)
        })
    }
}

/// The segments of the inside of a basic string. An invalid escape sequence, in a token recovered after a syntax
/// error, gets some place inside the token.
fn segments_of(inner: &str, start: usize) -> Vec<Segment> {
    let mut segments = Vec::new();
    let (mut decoded, mut at) = (0, 0);
    while at < inner.len() {
        let rest = &inner[at..];
        let plain = rest.find('\\').unwrap_or(rest.len());
        if plain > 0 {
            segments.push(Segment {
                decoded,
                raw: start + at,
                escape: None,
            });
            decoded += plain;
            at += plain;
            continue;
        }
        let digits = match rest.as_bytes().get(1) {
            Some(b'x') => 2,
            Some(b'u') => 4,
            Some(b'U') => 8,
            Some(b' ' | b'\t' | b'\r' | b'\n') => {
                // A backslash at the end of a line swallows all white space that follows.
                let kept = rest[1..].trim_start_matches([' ', '\t', '\r', '\n']);
                at = inner.len() - kept.len();
                continue;
            }
            _ => 0,
        };
        let raw_length = rest.ceil_char_boundary(2 + digits);
        segments.push(Segment {
            decoded,
            raw: start + at,
            escape: Some(raw_length),
        });
        let code = rest
            .get(2..raw_length)
            .and_then(|hex| u32::from_str_radix(hex, 16).ok());
        decoded += match code.and_then(char::from_u32) {
            Some(character) if digits > 0 => character.len_utf8(),
            _ => 1,
        };
        at += raw_length;
    }
    segments
}
