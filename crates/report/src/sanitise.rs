//! Text of a spec in output: what a terminal or a reader would not show as it is, is made visible.

/// The text with control characters and marks of writing direction written as `\u{…}`.
///
/// A spec, or a result file that came by mail, may hold terminal control sequences in its names; shown raw they could hide
/// or forge lines of a report.
pub(crate) fn visible(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        if is_hidden(c) {
            out.extend(c.escape_unicode());
        } else {
            out.push(c);
        }
    }
    out
}

/// The beginning of a text from a file, quoted, for a message.
pub(crate) fn excerpt(text: &str) -> String {
    const LONGEST: usize = 60;
    match text.char_indices().nth(LONGEST) {
        None => format!("\"{}\"", visible(text)),
        Some((end, _)) => format!("\"{}…\"", visible(&text[..end])),
    }
}

fn is_hidden(c: char) -> bool {
    c.is_control()
        || matches!(u32::from(c), 0xAD | 0x61C | 0x180E | 0x200B..=0x200F | 0x2028..=0x202E | 0x2060..=0x206F
            | 0xFEFF | 0xFFF9..=0xFFFB | 0xE0000..=0xE0FFF)
}

#[cfg(test)]
mod tests {
    use super::visible;

    #[test]
    fn control_sequences_are_made_visible() {
        assert_eq!(visible("a\u{1b}[31mb\r\n"), "a\\u{1b}[31mb\\u{d}\\u{a}");
        assert_eq!(visible("u[3,0] \u{202e}℘′"), "u[3,0] \\u{202e}℘′");
    }
}
