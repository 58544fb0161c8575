//! Lines of a limited width.

use crate::words::GLUE;

/// The columns that a text takes on a terminal, escape sequences of colour aside.
pub(super) fn columns(text: &str) -> usize {
    let mut count = 0;
    let mut escape = false;
    for c in text.chars() {
        match (escape, c) {
            (false, '\u{1b}') => escape = true,
            (true, 'm') => escape = false,
            (true, _) => {}
            (false, _) => count += 1,
        }
    }
    count
}

/// Writes pieces with single spaces between them: the first line after `head`, further ones after `indent` spaces. A piece
/// is never broken; a width of 0 means no limit.
pub(super) fn fill<'a>(
    out: &mut String,
    head: &str,
    pieces: impl IntoIterator<Item = &'a str>,
    indent: usize,
    width: usize,
) {
    let mut column = columns(head);
    let mut fresh = true;
    let start = out.len();
    out.push_str(head);
    for piece in pieces {
        let size = columns(piece);
        if !fresh && width > 0 && column + 1 + size > width {
            out.push('\n');
            out.extend(std::iter::repeat_n(' ', indent));
            column = indent;
            fresh = true;
        }
        if !fresh {
            out.push(' ');
            column += 1;
        }
        out.push_str(piece);
        column += size;
        fresh = false;
    }
    if out[start..].contains(GLUE) {
        let line = out[start..].replace(GLUE, " ");
        out.truncate(start);
        out.push_str(&line);
    }
    out.push('\n');
}

/// Writes a sentence, broken at its spaces.
pub(super) fn sentence(out: &mut String, head: &str, text: &str, indent: usize, width: usize) {
    fill(out, head, text.split(' '), indent, width);
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn lines_keep_the_width_and_pieces_stay_whole() {
        let mut out = String::new();
        fill(
            &mut out,
            "x = ",
            ["aaa", "+ bbb", "+ cccccccccccc", "+ d"],
            4,
            14,
        );
        assert_eq!(out, "x = aaa + bbb\n    + cccccccccccc\n    + d\n");
        out.clear();
        sentence(&mut out, "", "one\u{a0}two three", 0, 8);
        assert_eq!(out, "one two\nthree\n");
        out.clear();
        sentence(&mut out, "- ", "\u{1b}[1mone\u{1b}[0m two", 2, 9);
        assert_eq!(out, "- \u{1b}[1mone\u{1b}[0m two\n");
    }
}
