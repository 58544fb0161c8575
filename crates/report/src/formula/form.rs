//! Linear forms, in pieces between which a line may be broken.

use super::Style;
use super::coefficient::{Signed, signed};
use super::expression::{Level, expression, parentheses};
use linform_engine::record::FormTerm;

/// One product of a form, with its sign except for a first positive one. Its parts are the summands of a coefficient that
/// is a sum: a line may be broken between them, but is better broken between products.
pub(crate) type Product = Vec<String>;

/// The products of a form: `1/24·F⁗/F`, `+ 1/3·t·F″/F`. A form without terms is `0`.
pub(crate) fn form(style: Style, form: &[FormTerm]) -> Vec<Product> {
    let mut products = Vec::new();
    for part in in_reading_order(form) {
        let first = products.is_empty();
        products.push(product(
            style,
            first,
            &signed(style, &part.coefficient),
            part,
        ));
    }
    if products.is_empty() {
        products.push(vec!["0".to_owned()]);
    }
    products
}

/// A form in one line.
pub(crate) fn form_line(style: Style, parts: &[FormTerm]) -> String {
    line(&form(style, parts))
}

pub(crate) fn line(products: &[Product]) -> String {
    products
        .iter()
        .map(|parts| parts.join(" "))
        .collect::<Vec<_>>()
        .join(" ")
}

/// The products of `particular + Σ letterᵢ·kernelᵢ`.
pub(crate) fn combination(
    style: Style,
    particular: &[FormTerm],
    kernel: &[(String, &[FormTerm])],
) -> Vec<Product> {
    let mut products = Vec::new();
    if !particular.is_empty() || kernel.is_empty() {
        products = form(style, particular);
    }
    let dot = style.dot();
    for (letter, vector) in kernel {
        let mut inner = form(style, vector);
        let whole = line(&inner);
        // A single product needs no parentheses: a term that is 0 by itself gives `c₁·0`.
        let bare = inner.len() == 1 && !whole.starts_with(style.minus());
        let (open, close) = match bare {
            true => ("", ""),
            false => parentheses(style, &whole),
        };
        let plus = if products.is_empty() { "" } else { "+ " };
        if whole == "1" {
            products.push(vec![format!("{plus}{letter}")]);
            continue;
        }
        if let Some(first) = inner.first_mut().and_then(|product| product.first_mut()) {
            first.insert_str(0, &format!("{plus}{letter}{dot}{open}"));
        }
        if let Some(last) = inner.last_mut().and_then(|product| product.last_mut()) {
            last.push_str(close);
        }
        products.append(&mut inner);
    }
    products
}

/// The terms in the order in which they are read: the highest derivative of a law first, as its papers print them; any
/// other list as the user gave it.
pub(crate) fn in_reading_order(form: &[FormTerm]) -> Vec<&FormTerm> {
    let orders: Option<Vec<(&str, u32)>> = form.iter().map(|part| order_of(&part.term)).collect();
    let mut parts: Vec<&FormTerm> = form.iter().collect();
    if let Some(orders) = orders
        && orders
            .windows(2)
            .all(|pair| pair[0].0 == pair[1].0 && pair[0].1 < pair[1].1)
    {
        parts.reverse();
    }
    parts
}

/// The law and the order of `ratio(F,n)` or `derivative(F,n)`.
fn order_of(term: &str) -> Option<(&str, u32)> {
    let (law, order) = term.strip_suffix(')')?.rsplit_once(',')?;
    Some((law, order.trim().parse().ok()?))
        .filter(|(law, _)| law.starts_with("ratio(") || law.starts_with("derivative("))
}

/// Does the term hold a symbol that coefficients may hold? Then it is set in parentheses: `t·(t·q)` is not `t²·q`.
fn holds_base_symbol(part: &FormTerm) -> bool {
    let mut words = part
        .term
        .split(|c: char| !(c.is_alphanumeric() || c == '_' || c == '\''));
    words.any(|word| part.coefficient.names.iter().any(|name| name == word))
}

fn product(style: Style, first: bool, coefficient: &Signed, part: &FormTerm) -> Product {
    let sign = match (first, coefficient.negative) {
        (true, false) => String::new(),
        (true, true) => style.minus().to_owned(),
        (false, false) => "+ ".to_owned(),
        (false, true) => format!("{} ", style.minus()),
    };
    let level = if holds_base_symbol(part) {
        Level::Power
    } else {
        Level::Product
    };
    let term = expression(style, &part.term);
    let trivial = term.text == "1";
    let several = coefficient.summands.len() > 1;
    let dot = style.dot();
    let tail = match (coefficient.is_unit(), trivial) {
        (true, _) => return vec![format!("{sign}{}", term.at(style, level))],
        (false, true) => String::new(),
        (false, false) => format!("{dot}{}", term.at(style, level)),
    };
    if let (Style::Latex, Some(denominator)) = (style, &coefficient.denominator) {
        let numerator = joined(style, &coefficient.summands);
        return vec![format!(
            "{sign}\\frac{{{numerator}}}{{{}}}{tail}",
            denominator.text
        )];
    }
    let (open, close) = parentheses(style, &joined(style, &coefficient.summands));
    let below = match &coefficient.denominator {
        Some(denominator) => format!("/{}", denominator.at(style, Level::Power)),
        None => String::new(),
    };
    let last = coefficient.summands.len() - 1;
    let mut parts = Vec::new();
    for (position, (negative, summand)) in coefficient.summands.iter().enumerate() {
        let mut part = if position == 0 {
            format!("{sign}{}{summand}", if several { open } else { "" })
        } else {
            format!("{} {summand}", if *negative { style.minus() } else { "+" })
        };
        if position == last {
            part.push_str(if several { close } else { "" });
            part.push_str(&below);
            part.push_str(&tail);
        }
        parts.push(part);
    }
    parts
}

fn joined(style: Style, summands: &[(bool, String)]) -> String {
    let mut text = String::new();
    for (position, (negative, summand)) in summands.iter().enumerate() {
        match (position, negative) {
            (0, _) => {}
            (_, true) => text.push_str(&format!(" {} ", style.minus())),
            (_, false) => text.push_str(" + "),
        }
        text.push_str(summand);
    }
    text
}

/// A list of terms in short: all of up to `most`, else the first two, a mark of omission, and the last.
pub(crate) fn folded_terms(style: Style, terms: &[String], most: usize) -> Vec<String> {
    let write = |term: &String| expression(style, term).text;
    if terms.len() <= most.max(3) {
        return terms.iter().map(write).collect();
    }
    let mut folded: Vec<String> = terms[..2].iter().map(write).collect();
    folded.push(style.pick("...", "…", "\\dots").to_owned());
    folded.extend(terms.last().map(write));
    folded
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::samples::{part, polynomial, quotient};

    #[test]
    fn signs_units_and_sums_are_written_as_by_hand() {
        let parts = [
            part("ratio(F,1)", polynomial(&[(-1, 1, 0)])),
            part("ratio(F,2)", polynomial(&[(-3, 10, 2), (1, 5, 0)])),
            part("ratio(F,3)", polynomial(&[(2, 1, 1)])),
        ];
        assert_eq!(
            form_line(Style::Unicode, &parts),
            "2·t·F‴/F − (3/10·t² − 1/5)·F″/F − F′/F"
        );
        assert_eq!(
            form_line(Style::Ascii, &parts),
            "2*t*F'''/F - (3/10*t^2 - 1/5)*F''/F - F'/F"
        );
        assert_eq!(
            form_line(Style::Latex, &parts),
            "2\\,t\\,\\frac{F'''}{F} - \\Bigl(\\frac{3}{10}\\,t^{2} - \\frac{1}{5}\\Bigr)\\,\\frac{F''}{F} - \\frac{F'}{F}"
        );
        let parts = [
            part("q", quotient(&[(1, 1, 2), (1, 1, 0)], &[(2, 1, 1)])),
            part("q + 1", quotient(&[(-1, 2, 0)], &[(1, 1, 1), (1, 1, 0)])),
            part("1", polynomial(&[(1, 1, 3)])),
            part("1", polynomial(&[(-1, 1, 0)])),
        ];
        assert_eq!(
            form_line(Style::Unicode, &parts),
            "(t² + 1)/(2·t)·q − 1/(2·t + 2)·(q + 1) + t³ − 1"
        );
        assert_eq!(form_line(Style::Unicode, &[]), "0");
    }

    #[test]
    fn a_family_is_a_solution_plus_multiples_of_the_kernel() {
        let particular = [part("a", polynomial(&[(1, 2, 0)]))];
        let kernel = [
            part("a", polynomial(&[(1, 1, 0)])),
            part("b", polynomial(&[(-1, 1, 1)])),
        ];
        let family = |particular: &[_]| {
            line(&combination(
                Style::Unicode,
                particular,
                &[("c₁".to_owned(), &kernel)],
            ))
        };
        assert_eq!(family(&particular), "1/2·a + c₁·(a − t·b)");
        assert_eq!(family(&[]), "c₁·(a − t·b)");
    }

    #[test]
    fn a_kernel_of_one_product_needs_no_parentheses() {
        for (term, sign, written) in [
            ("0", 1, "q + c₁·0"),
            ("q - q", 1, "q + c₁·(q − q)"),
            ("q - q", -1, "q + c₁·(−(q − q))"),
            ("1", 1, "q + c₁"),
        ] {
            let kernel = [part(term, polynomial(&[(sign, 1, 0)]))];
            let particular = [part("q", polynomial(&[(1, 1, 0)]))];
            let products = combination(Style::Unicode, &particular, &[("c₁".to_owned(), &kernel)]);
            assert_eq!(line(&products), written);
        }
    }
}
