//! Formulas broken into lines of a limited width.

use crate::formula::Product;

/// About the width of a line of text, in letters of a formula.
const LINE: usize = 68;

/// The display of `left = right`, broken between summands and products where it is too long for a line.
///
/// Lines are broken by hand, as automatic breaking needs packages that a plain installation lacks.
pub(super) fn equation(left: &[String], right: &[Product]) -> String {
    let whole = left.join(" ");
    let left_width = width(&whole) + 3;
    // A long left side stands on lines of its own.
    let (mut lines, room) = if left_width > LINE / 2 {
        let mut lines = fill(left.iter().map(String::as_str), LINE);
        if let Some(first) = lines.first_mut() {
            first.insert_str(0, "& ");
        }
        (lines, LINE)
    } else {
        (Vec::new(), LINE - left_width)
    };
    let mut pieces = Vec::new();
    for product in right {
        let whole = product.join(" ");
        if width(&whole) <= room {
            pieces.push(whole);
        } else {
            pieces.extend(product.iter().cloned());
        }
    }
    let mut right = fill(pieces.iter().map(String::as_str), room);
    if let Some(first) = right.first_mut() {
        let left = if lines.is_empty() {
            format!("{whole} ")
        } else {
            String::new()
        };
        first.insert_str(0, &format!("{left}&= "));
    }
    // The empty group makes a sign at the beginning of a line a binary one.
    for line in lines.iter_mut().skip(1).chain(right.iter_mut().skip(1)) {
        line.insert_str(0, "&\\quad {}");
    }
    lines.append(&mut right);
    format!(
        "\\begin{{align*}}\n{}\n\\end{{align*}}\n",
        lines.join(" \\\\\n")
    )
}

/// Lines of pieces, none wider than told unless a piece is.
fn fill<'a>(pieces: impl Iterator<Item = &'a str>, room: usize) -> Vec<String> {
    let mut lines = vec![String::new()];
    let mut column = 0;
    for piece in pieces {
        let size = width(piece);
        if column > 0 && column + size > room {
            lines.push(String::new());
            column = 0;
        }
        if let Some(line) = lines.last_mut() {
            if !line.is_empty() {
                line.push(' ');
            }
            line.push_str(piece);
        }
        column += size;
    }
    lines
}

/// About the width of a formula, in letters: commands count as one letter, a fraction as its wider part.
fn width(formula: &str) -> usize {
    let mut count = 0;
    let mut rest = formula;
    while let Some(c) = rest.chars().next() {
        rest = &rest[c.len_utf8()..];
        match c {
            '\\' => {
                let end = rest
                    .find(|c: char| !c.is_ascii_alphabetic())
                    .unwrap_or(rest.len());
                let (command, tail) = rest.split_at(end);
                rest = tail;
                match command {
                    "frac" => {
                        let (above, tail) = group(rest);
                        let (below, tail) = group(tail);
                        count += width(above).max(width(below)) + 1;
                        rest = tail;
                    }
                    "bigl" | "bigr" | "Bigl" | "Bigr" | "text" | "mathit" | "operatorname" => {}
                    "" => rest = &rest[rest.chars().next().map_or(0, char::len_utf8)..],
                    _ => count += 1,
                }
            }
            '{' | '}' | '^' | '_' | ' ' => {}
            '+' | '-' | '=' => count += 3,
            _ => count += 1,
        }
    }
    count
}

/// The contents of the group in braces at the beginning of a text, and what follows it.
fn group(text: &str) -> (&str, &str) {
    let Some(inner) = text.strip_prefix('{') else {
        return ("", text);
    };
    let mut depth = 0usize;
    for (position, byte) in inner.bytes().enumerate() {
        match byte {
            b'{' => depth += 1,
            b'}' if depth == 0 => return (&inner[..position], &inner[position + 1..]),
            b'}' => depth -= 1,
            _ => {}
        }
    }
    (inner, "")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn widths_are_those_of_the_typeset_formula() {
        assert_eq!(width("\\frac{1}{24}\\,\\frac{F^{(4)}}{F}"), 3 + 5);
        assert_eq!(width("\\bigl(\\alpha + t^{2}\\bigr)"), 1 + 1 + 3 + 2 + 1);
        assert_eq!(width("\\frac{1"), 2);
    }

    #[test]
    fn long_forms_are_broken_between_products() {
        let right: Vec<Product> = (0..30).map(|n| vec![format!("+ a_{{{n}}}")]).collect();
        let display = equation(&["u_{3,0}".to_owned()], &right);
        assert!(display.contains(" \\\\\n&\\quad {}+ a_{"), "{display}");
        let longest = display.lines().map(width).max().unwrap();
        assert!(longest <= LINE + 4, "{longest}: {display}");
        let joined: Vec<String> = right.concat();
        let flat = display.replace(" \\\\\n&\\quad {}", " ");
        assert!(flat.contains(&joined.join(" ")), "{flat}");
    }
}
