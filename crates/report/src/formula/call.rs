//! Calls of the built-in functions.

use super::Style;
use super::expression::{Level, Written, bounds, list, with_primes, write};
use super::name::name;
use linform_scalar::Integer;
use linform_spec::{Expr, ExprKind, Function};

pub(super) fn call(style: Style, function: Function, arguments: &[Expr]) -> Written {
    let derivative = |law: &Expr, order: u32| {
        let base = write(style, law).at(style, Level::Atom);
        with_primes(style, &base, order)
    };
    match (function, arguments) {
        (Function::Ratio, [law, order]) if small(order).is_some() => {
            let order = small(order).unwrap_or_default();
            let (above, below) = (derivative(law, order).text, derivative(law, 0).text);
            match style {
                _ if order == 0 => Written::new("1", Level::Atom),
                Style::Latex => Written::new(format!("\\frac{{{above}}}{{{below}}}"), Level::Power),
                _ => Written::new(format!("{above}/{below}"), Level::Product),
            }
        }
        (Function::Derivative, [law, order]) if small(order).is_some() => {
            derivative(law, small(order).unwrap_or_default())
        }
        (Function::Minor, [family, rows, columns]) if style != Style::Ascii => {
            let (family, rows, columns) = (
                write(style, family).text,
                bare(style, rows),
                bare(style, columns),
            );
            match style {
                Style::Latex => Written::new(
                    format!("\\det\\bigl({family}_{{ik}}\\bigr)_{{i={rows};\\,k={columns}}}"),
                    Level::Power,
                ),
                _ => Written::new(format!("det {family}[{rows}|{columns}]"), Level::Power),
            }
        }
        (Function::Sum, [body]) if style == Style::Latex => match &body.kind {
            ExprKind::For {
                body: summand,
                sweep,
            } => {
                let (start, end) = bounds(style, body);
                let summand = write(style, summand).at(style, Level::Product);
                let variable = name(style, &sweep.variable);
                Written::new(
                    format!("\\sum_{{{variable}={start}}}^{{{end}}} {summand}"),
                    Level::Sum,
                )
            }
            _ => write(style, body),
        },
        (Function::Sqrt, [argument]) if style == Style::Latex => Written::new(
            format!("\\sqrt{{{}}}", write(style, argument).text),
            Level::Atom,
        ),
        _ => {
            let name = style.pick(
                function.name().to_owned(),
                function.name().to_owned(),
                format!("\\operatorname{{{}}}", function.name()),
            );
            Written::new(format!("{name}({})", list(style, arguments)), Level::Atom)
        }
    }
}

/// The items of a list without its brackets.
fn bare(style: Style, expr: &Expr) -> String {
    match &expr.kind {
        ExprKind::List(items) => list(style, items),
        _ => write(style, expr).text,
    }
}

pub(super) fn small(expr: &Expr) -> Option<u32> {
    match &expr.kind {
        ExprKind::Number(value) => {
            Integer::to_i64(value).and_then(|value| u32::try_from(value).ok())
        }
        ExprKind::Group(inner) => small(inner),
        _ => None,
    }
}
