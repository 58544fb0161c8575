//! Expressions of a spec.

use super::call::{call, small};
use super::name::{name, power, power_may_follow, primes};
use super::{Style, escape};
use crate::sanitise::visible;
use linform_spec::{Expr, ExprKind, Function, parse_expression};

/// How tightly a formula holds together.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(crate) enum Level {
    /// A sum, a difference, an opposite.
    Sum,
    /// A product or a quotient.
    Product,
    /// A power, or a derivative that a further exponent must not follow.
    Power,
    /// Anything that needs no parentheses.
    Atom,
}

/// A written formula.
#[derive(Clone, Debug)]
pub(crate) struct Written {
    pub(crate) text: String,
    pub(crate) level: Level,
}

impl Written {
    pub(super) fn new(text: impl Into<String>, level: Level) -> Written {
        Written {
            text: text.into(),
            level,
        }
    }

    /// The text, in parentheses if it holds together less tightly than asked.
    pub(crate) fn at(&self, style: Style, level: Level) -> String {
        if self.level >= level {
            return self.text.clone();
        }
        let (open, close) = parentheses(style, &self.text);
        format!("{open}{}{close}", self.text)
    }
}

/// Parentheses that suit the height of a formula.
pub(crate) fn parentheses(style: Style, inner: &str) -> (&'static str, &'static str) {
    match style {
        Style::Latex if inner.contains("\\frac") => ("\\Bigl(", "\\Bigr)"),
        Style::Latex => ("\\bigl(", "\\bigr)"),
        _ => ("(", ")"),
    }
}

/// The summands of a formula, each with its sign except for a first positive one.
pub(crate) fn summands(style: Style, text: &str) -> Vec<String> {
    let Ok(expr) = parse_expression(text) else {
        return vec![expression(style, text).text];
    };
    let mut parts = Vec::new();
    let mut rest = &expr;
    loop {
        let (sign, left, right) = match &rest.kind {
            ExprKind::Add(left, right) => ("+", left, right),
            ExprKind::Sub(left, right) => (style.minus(), left, right),
            _ => break,
        };
        parts.push(format!(
            "{sign} {}",
            write(style, right).at(style, Level::Product)
        ));
        rest = left;
    }
    parts.push(write(style, rest).text);
    parts.reverse();
    parts
}

/// The words that stand before the derivative of a target known by its derivative alone.
const PRIMITIVE: &str = "primitive of ";

/// The formula of a text from a spec or a result file; a text that is no expression is shown as it is.
pub(crate) fn expression(style: Style, text: &str) -> Written {
    if let Some(derivative) = text.strip_prefix(PRIMITIVE)
        && let Ok(derivative) = parse_expression(derivative)
    {
        let words = style.pick(PRIMITIVE, PRIMITIVE, "\\text{primitive of }");
        let derivative = write(style, &derivative).at(style, Level::Product);
        return Written::new(format!("{words}{derivative}"), Level::Product);
    }
    match (parse_expression(text), style) {
        (Ok(expr), _) => write(style, &expr),
        (Err(_), Style::Latex) => Written::new(
            format!("\\text{{\\ttfamily {}}}", escape(text)),
            Level::Atom,
        ),
        (Err(_), _) => Written::new(visible(text), Level::Atom),
    }
}

// Trees of the parser have a bounded depth, so recursion is safe.
pub(super) fn write(style: Style, expr: &Expr) -> Written {
    let at = |expr: &Expr, level| write(style, expr).at(style, level);
    match &expr.kind {
        ExprKind::Number(value) => Written::new(value.to_string(), Level::Atom),
        ExprKind::Name {
            base,
            primes: order,
        } => with_primes(style, &name(style, base), *order),
        ExprKind::Neg(a) => Written::new(
            format!("{}{}", style.minus(), at(a, Level::Product)),
            Level::Sum,
        ),
        ExprKind::Add(a, b) => Written::new(
            format!("{} + {}", at(a, Level::Sum), at(b, Level::Product)),
            Level::Sum,
        ),
        ExprKind::Sub(a, b) => Written::new(
            format!(
                "{} {} {}",
                at(a, Level::Sum),
                style.minus(),
                at(b, Level::Product)
            ),
            Level::Sum,
        ),
        ExprKind::Mul(a, b) => {
            let level = if has_quotient(a) {
                Level::Power
            } else {
                Level::Product
            };
            let (left, right) = (at(a, Level::Product), at(b, level));
            match (left.as_str(), right.as_str()) {
                ("1", _) => write(style, b),
                (_, "1") => write(style, a),
                _ => Written::new(format!("{left}{}{right}", times(style, b)), Level::Product),
            }
        }
        ExprKind::Div(a, b) => match style {
            Style::Latex => Written::new(
                format!("\\frac{{{}}}{{{}}}", at(a, Level::Sum), at(b, Level::Sum)),
                Level::Power,
            ),
            _ => Written::new(
                format!("{}/{}", at(a, Level::Product), at(b, Level::Power)),
                Level::Product,
            ),
        },
        ExprKind::Pow(a, b) => {
            let exponent = at(b, Level::Sum);
            Written::new(
                format!("{}{}", at(a, Level::Atom), power(style, &exponent)),
                Level::Power,
            )
        }
        ExprKind::Group(a) => write(style, a),
        ExprKind::Element {
            family,
            indices,
            primes: order,
        } => {
            let indices = list(style, indices);
            let element = match style {
                Style::Latex if name(style, family).contains('_') => {
                    format!("{{{}}}_{{{indices}}}", name(style, family))
                }
                Style::Latex => format!("{}_{{{indices}}}", name(style, family)),
                _ => format!("{}[{indices}]", name(style, family)),
            };
            with_primes(style, &element, *order)
        }
        ExprKind::Call {
            function,
            arguments,
            primes: order,
        } => {
            if *function == Function::D && style != Style::Ascii {
                return derived(style, expr, 0);
            }
            let call = call(style, *function, arguments);
            match order {
                0 => call,
                _ => Written::new(
                    format!("{}{}", call.at(style, Level::Atom), primes(style, *order)),
                    if power_may_follow(style, *order) {
                        Level::Atom
                    } else {
                        Level::Power
                    },
                ),
            }
        }
        ExprKind::Apply {
            function,
            primes: order,
            argument,
        } => {
            let function = with_primes(style, &name(style, function), *order).text;
            Written::new(
                format!("{function}({})", at(argument, Level::Sum)),
                Level::Atom,
            )
        }
        ExprKind::List(items) => Written::new(format!("[{}]", list(style, items)), Level::Atom),
        ExprKind::Text(text) => Written::new(
            style.pick(
                format!("\"{}\"", visible(text)),
                format!("\"{}\"", visible(text)),
                format!("\\text{{{}}}", escape(text)),
            ),
            Level::Atom,
        ),
        ExprKind::For { body, sweep } => {
            let (start, end) = bounds(style, expr);
            Written::new(
                format!(
                    "{} for {} = {start}..{end}",
                    at(body, Level::Sum),
                    name(style, &sweep.variable)
                ),
                Level::Sum,
            )
        }
    }
}

/// The derivative of this order of an expression, with nested derivatives counted together.
fn derived(style: Style, expr: &Expr, order: u32) -> Written {
    match &expr.kind {
        ExprKind::Group(inner) => derived(style, inner, order),
        ExprKind::Call {
            function: Function::D,
            arguments,
            primes: more,
        } if arguments.len() == 1 => derived(
            style,
            &arguments[0],
            order.saturating_add(*more).saturating_add(1),
        ),
        ExprKind::Name { base, primes: own } => {
            with_primes(style, &name(style, base), order.saturating_add(*own))
        }
        _ => {
            let inner = write(style, expr);
            let whole = match &expr.kind {
                ExprKind::Element { primes: 0, .. } => inner.text,
                _ => {
                    let (open, close) = parentheses(style, &inner.text);
                    format!("{open}{}{close}", inner.text)
                }
            };
            with_primes(style, &whole, order)
        }
    }
}

pub(super) fn with_primes(style: Style, base: &str, order: u32) -> Written {
    let level = if power_may_follow(style, order) {
        Level::Atom
    } else {
        Level::Power
    };
    Written::new(format!("{base}{}", primes(style, order)), level)
}

pub(super) fn list(style: Style, items: &[Expr]) -> String {
    let items: Vec<String> = items.iter().map(|item| write(style, item).text).collect();
    items.join(",")
}

pub(super) fn bounds(style: Style, expr: &Expr) -> (String, String) {
    match &expr.kind {
        ExprKind::For { sweep, .. } => (
            write(style, &sweep.start).text,
            sweep
                .end
                .as_ref()
                .map_or(String::new(), |end| write(style, end).text),
        ),
        _ => (String::new(), String::new()),
    }
}

/// What stands between two factors.
fn times(style: Style, right: &Expr) -> &'static str {
    match style {
        Style::Latex if starts_with_letter(right) => style.dot(),
        Style::Latex => " \\cdot ",
        _ => style.dot(),
    }
}

/// Is this a product with a quotient of more than numbers? A further quotient beside it is put in parentheses.
fn has_quotient(expr: &Expr) -> bool {
    match &expr.kind {
        ExprKind::Mul(left, right) => has_quotient(left) || has_quotient(right),
        ExprKind::Div(_, below) => !matches!(below.kind, ExprKind::Number(_)),
        ExprKind::Call {
            function: Function::Ratio,
            arguments,
            primes: 0,
        } => arguments.last().and_then(small) != Some(0),
        ExprKind::Group(inner) | ExprKind::Neg(inner) => has_quotient(inner),
        _ => false,
    }
}

fn starts_with_letter(expr: &Expr) -> bool {
    match &expr.kind {
        ExprKind::Name { .. } | ExprKind::Element { .. } | ExprKind::Call { .. } => true,
        ExprKind::Pow(base, _) => starts_with_letter(base),
        ExprKind::Group(_) => true,
        _ => false,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn terms_are_written_as_mathematicians_do() {
        for (text, ascii, unicode, latex) in [
            ("ratio(F,4)", "F''''/F", "F⁗/F", "\\frac{F^{(4)}}{F}"),
            ("ratio(F,2)", "F''/F", "F″/F", "\\frac{F''}{F}"),
            (
                "ratio(F,7)^2",
                "(F^(7)/F)^2",
                "(F⁽⁷⁾/F)²",
                "\\Bigl(\\frac{F^{(7)}}{F}\\Bigr)^{2}",
            ),
            ("u[3,0]", "u[3,0]", "u[3,0]", "u_{3,0}"),
            (
                "u[0,0]*u[1,1]",
                "u[0,0]*u[1,1]",
                "u[0,0]·u[1,1]",
                "u_{0,0}\\,u_{1,1}",
            ),
            ("q^2*q'^4", "q^2*q'^4", "q²·q′⁴", "q^{2}\\,q'^{4}"),
            ("D(A^2)", "D(A^2)", "(A²)′", "\\bigl(A^{2}\\bigr)'"),
            (
                "minor(u,[0,1],[0,2])",
                "minor(u,[0,1],[0,2])",
                "det u[0,1|0,2]",
                "\\det\\bigl(u_{ik}\\bigr)_{i=0,1;\\,k=0,2}",
            ),
            (
                "3*t*(q + 1)",
                "3*t*(q + 1)",
                "3·t·(q + 1)",
                "3\\,t\\,\\bigl(q + 1\\bigr)",
            ),
            (
                "a - (b - c)",
                "a - (b - c)",
                "a − (b − c)",
                "a - \\bigl(b - c\\bigr)",
            ),
            ("a/(b*c)", "a/(b*c)", "a/(b·c)", "\\frac{a}{b\\,c}"),
            ("-g2^3", "-g2^3", "−g2³", "-g_{2}^{3}"),
            ("℘'^2", "℘'^2", "℘′²", "\\wp'^{2}"),
            (
                "q'''''^2",
                "(q^(5))^2",
                "(q⁽⁵⁾)²",
                "\\bigl(q^{(5)}\\bigr)^{2}",
            ),
            ("1", "1", "1", "1"),
            (
                "3/5*t*ratio(F,1)*ratio(G,2)",
                "3/5*t*F'/F*(G''/G)",
                "3/5·t·F′/F·(G″/G)",
                "\\frac{3}{5}\\,t\\,\\frac{F'}{F}\\,\\frac{G''}{G}",
            ),
            (
                "8*ratio(F,0)*ratio(F,1)",
                "8*F'/F",
                "8·F′/F",
                "8\\,\\frac{F'}{F}",
            ),
            ("D(D(A*B))", "D(D(A*B))", "(A·B)″", "\\bigl(A\\,B\\bigr)''"),
            ("D(D(P')')", "D(D(P')')", "P⁗", "P^{(4)}"),
            ("D(u[1,0])", "D(u[1,0])", "u[1,0]′", "u_{1,0}'"),
            (
                "2*alpha*g2^2",
                "2*alpha*g2^2",
                "2·alpha·g2²",
                "2\\,\\alpha\\,g_{2}^{2}",
            ),
            (
                "primitive of x*A^2 + 1",
                "primitive of (x*A^2 + 1)",
                "primitive of (x·A² + 1)",
                "\\text{primitive of }\\bigl(x\\,A^{2} + 1\\bigr)",
            ),
        ] {
            assert_eq!(expression(Style::Ascii, text).text, ascii);
            assert_eq!(expression(Style::Unicode, text).text, unicode);
            assert_eq!(expression(Style::Latex, text).text, latex);
        }
    }

    #[test]
    fn long_targets_come_apart_at_their_signs() {
        assert_eq!(
            summands(Style::Unicode, "-a + (b - c)*d - e"),
            ["−a", "+ (b − c)·d", "− e"]
        );
        assert_eq!(summands(Style::Latex, "%"), ["\\text{\\ttfamily \\%}"]);
    }

    #[test]
    fn a_text_that_is_no_expression_is_shown_harmlessly() {
        let text = "\\input{x} \u{1b}[2J";
        assert_eq!(
            expression(Style::Unicode, text).text,
            "\\input{x} \\u{1b}[2J"
        );
        assert_eq!(
            expression(Style::Latex, text).text,
            "\\text{\\ttfamily \\textbackslash{}input\\{x\\} [U+001B][2J}"
        );
    }
}
