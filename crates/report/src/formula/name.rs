//! Names, primes, powers and indices.

use super::Style;
use super::latex_text::{escape, symbol, symbol_of_name};
use crate::sanitise::visible;

/// A name without primes.
pub(crate) fn name(style: Style, base: &str) -> String {
    if style != Style::Latex {
        return visible(base);
    }
    // `g2`, `x_1` and `E4` are read as letters with an index, as mathematicians write them.
    let stem = base.trim_end_matches(|c: char| c.is_ascii_digit());
    let (stem, index) = match stem.strip_suffix('_') {
        Some(short) if !short.is_empty() => (short, &base[stem.len()..]),
        _ if stem.is_empty() => (base, ""),
        _ => (stem, &base[stem.len()..]),
    };
    let (stem, mut index) = match stem.split_once('_') {
        Some((short, rest)) if !short.is_empty() && !rest.is_empty() => {
            (short, format!("{}{index}", letters(rest)))
        }
        _ => (stem, index.to_owned()),
    };
    if !index.is_empty() {
        index = format!("_{{{index}}}");
    }
    format!("{}{index}", letters(stem))
}

fn letters(word: &str) -> String {
    let mut characters = word.chars();
    match (characters.next(), characters.next()) {
        (Some(c), None) if c.is_ascii_alphanumeric() => word.to_owned(),
        (Some(c), None) if symbol(c).is_some() => symbol(c).unwrap_or_default().to_owned(),
        _ => match symbol_of_name(word) {
            Some(command) => command.to_owned(),
            None => format!("\\mathit{{{}}}", escape_in_mathematics(word)),
        },
    }
}

/// Letters outside ASCII have no place in a mathematical alphabet: they are set as text.
fn escape_in_mathematics(word: &str) -> String {
    if word.chars().all(|c| c.is_ascii_alphanumeric()) {
        word.to_owned()
    } else {
        format!("\\text{{{}}}", escape(word))
    }
}

/// The mark of the `order`-th derivative behind a name: primes, or the number in parentheses.
pub(crate) fn primes(style: Style, order: u32) -> String {
    match (style, order) {
        (_, 0) => String::new(),
        (Style::Unicode, 1..=4) => ["′", "″", "‴", "⁗"][order as usize - 1].to_owned(),
        (Style::Unicode, _) => format!("⁽{}⁾", superscript(&order.to_string())),
        (Style::Ascii, 1..=4) | (Style::Latex, 1..=3) => "'".repeat(order as usize),
        (Style::Ascii, _) => format!("^({order})"),
        (Style::Latex, _) => format!("^{{({order})}}"),
    }
}

/// Can a power follow the mark of this derivative without parentheses?
pub(crate) fn power_may_follow(style: Style, order: u32) -> bool {
    order <= style.pick(4, 4, 3)
}

/// The mark of a power.
pub(crate) fn power(style: Style, exponent: &str) -> String {
    let plain = exponent.bytes().all(|b| b.is_ascii_digit());
    match style {
        Style::Unicode if plain => superscript(exponent),
        Style::Latex => format!("^{{{exponent}}}"),
        _ if plain => format!("^{exponent}"),
        _ => format!("^({exponent})"),
    }
}

fn superscript(digits: &str) -> String {
    const HIGH: [char; 10] = ['⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹'];
    digits
        .chars()
        .map(|c| c.to_digit(10).map_or(c, |digit| HIGH[digit as usize]))
        .collect()
}

/// A letter with a number as its index: `c₁`.
pub(crate) fn subscripted(style: Style, letter: &str, number: usize) -> String {
    const LOW: [char; 10] = ['₀', '₁', '₂', '₃', '₄', '₅', '₆', '₇', '₈', '₉'];
    let digits = number.to_string();
    match style {
        Style::Ascii => format!("{letter}{digits}"),
        Style::Latex => format!("{letter}_{{{digits}}}"),
        Style::Unicode => {
            let low = digits.chars().filter_map(|c| c.to_digit(10));
            format!(
                "{letter}{}",
                low.map(|digit| LOW[digit as usize]).collect::<String>()
            )
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn latex_names_are_letters_with_indices() {
        for (plain, latex) in [
            ("t", "t"),
            ("g2", "g_{2}"),
            ("x_12", "x_{12}"),
            ("alpha", "\\alpha"),
            ("ζ3", "\\zeta_{3}"),
            ("Ai", "\\mathit{Ai}"),
            ("x_max", "x_{\\mathit{max}}"),
            ("_", "\\mathit{\\text{\\_}}"),
            ("é", "\\mathit{\\text{é}}"),
            ("a__b", "a_{\\mathit{\\text{\\_b}}}"),
        ] {
            assert_eq!(name(Style::Latex, plain), latex);
        }
    }

    #[test]
    fn derivatives_are_primes_then_numbers() {
        let marks = |style| [1, 3, 4, 5, 12].map(|order| primes(style, order)).join(" ");
        assert_eq!(marks(Style::Unicode), "′ ‴ ⁗ ⁽⁵⁾ ⁽¹²⁾");
        assert_eq!(marks(Style::Ascii), "' ''' '''' ^(5) ^(12)");
        assert_eq!(marks(Style::Latex), "' ''' ^{(4)} ^{(5)} ^{(12)}");
    }
}
