//! Expressions back to text.

use crate::expression::{Expr, ExprKind, Sweep};
use std::fmt::Write;

/// The expression in canonical spacing: `u[3,0]`, `ratio(F,3)`, `D(A^2)`, `q'^2 - t*q^2`.
///
/// Parentheses are those of the tree, and where the tree has none but needs some they are added, so that
/// [`parse_expression`](crate::parse_expression) of the text gives the tree back: exactly if the tree was read
/// from a text, and otherwise up to the grouping of sums, `a + (b - c) = a + b - c`.
pub fn text_of(expr: &Expr) -> String {
    let mut out = String::new();
    write_expr(&mut out, expr, SUM, Spacing::Wide);
    out
}

// How tightly a form binds; an operand that binds less tightly than its place asks for gets parentheses.
const SUM: u8 = 1;
const PRODUCT: u8 = 2;
const POWER: u8 = 3;
const ATOM: u8 = 4;

/// Are there spaces around `+` and `-`?
#[derive(Clone, Copy, PartialEq, Eq)]
enum Spacing {
    Wide,
    Narrow,
}

fn binding(expr: &Expr) -> u8 {
    match &expr.kind {
        ExprKind::Add(..) | ExprKind::Sub(..) | ExprKind::For { .. } => SUM,
        ExprKind::Neg(_) | ExprKind::Mul(..) | ExprKind::Div(..) => PRODUCT,
        ExprKind::Pow(..) => POWER,
        // A negative number has the sign of a negation.
        ExprKind::Number(n) if n.is_negative() => PRODUCT,
        _ => ATOM,
    }
}

fn write_expr(out: &mut String, expr: &Expr, least: u8, spacing: Spacing) {
    if binding(expr) < least {
        out.push('(');
        write_bare(out, expr, SUM, spacing);
        out.push(')');
    } else {
        write_bare(out, expr, least, spacing);
    }
}

/// An operand on the right of `*`, `/` or `^`, where a bare minus sign is read as part of the operand.
fn write_right(out: &mut String, expr: &Expr, spacing: Spacing) {
    if let ExprKind::Neg(operand) = &expr.kind {
        out.push('-');
        if matches!(operand.kind, ExprKind::Neg(_)) {
            write_right(out, operand, spacing);
        } else {
            write_expr(out, operand, POWER, spacing);
        }
    } else {
        write_expr(out, expr, POWER, spacing);
    }
}

/// On the left of a product a bare minus sign would take the whole product.
fn write_left(out: &mut String, expr: &Expr, spacing: Spacing) {
    let negative = match &expr.kind {
        ExprKind::Neg(_) => true,
        ExprKind::Number(n) => n.is_negative(),
        _ => false,
    };
    write_expr(out, expr, if negative { ATOM } else { PRODUCT }, spacing);
}

fn write_bare(out: &mut String, expr: &Expr, least: u8, spacing: Spacing) {
    match &expr.kind {
        ExprKind::Number(n) => {
            let _ = write!(out, "{n}");
        }
        ExprKind::Name { base, primes } => {
            out.push_str(base);
            write_primes(out, *primes);
        }
        ExprKind::Neg(a) => {
            out.push('-');
            write_expr(out, a, least.max(PRODUCT), spacing);
        }
        ExprKind::Add(a, b) => write_sum(out, a, '+', b, spacing),
        ExprKind::Sub(a, b) => write_sum(out, a, '-', b, spacing),
        ExprKind::Mul(a, b) => {
            write_left(out, a, spacing);
            out.push('*');
            write_right(out, b, spacing);
        }
        ExprKind::Div(a, b) => {
            write_left(out, a, spacing);
            out.push('/');
            write_right(out, b, spacing);
        }
        ExprKind::Pow(a, b) => {
            write_expr(out, a, ATOM, spacing);
            out.push('^');
            write_right(out, b, Spacing::Narrow);
        }
        ExprKind::Group(a) => {
            out.push('(');
            write_expr(out, a, SUM, spacing);
            out.push(')');
        }
        ExprKind::Element {
            family,
            indices,
            primes,
        } => {
            out.push_str(family);
            write_list(out, indices, Spacing::Narrow);
            write_primes(out, *primes);
        }
        ExprKind::Call {
            function,
            arguments,
            primes,
        } => {
            out.push_str(function.name());
            let spacing = if function.arity() == 1 {
                Spacing::Wide
            } else {
                Spacing::Narrow
            };
            write_between(out, '(', arguments, ')', spacing);
            write_primes(out, *primes);
        }
        ExprKind::Apply {
            function,
            primes,
            argument,
        } => {
            out.push_str(function);
            write_primes(out, *primes);
            out.push('(');
            write_expr(out, argument, SUM, Spacing::Wide);
            out.push(')');
        }
        ExprKind::List(list) => write_list(out, list, Spacing::Narrow),
        ExprKind::Text(text) => {
            let _ = write!(out, "\"{text}\"");
        }
        ExprKind::For { body, sweep } => {
            write_expr(out, body, SUM, Spacing::Wide);
            out.push_str(" for ");
            write_sweep(out, sweep);
        }
    }
}

fn write_sum(out: &mut String, left: &Expr, sign: char, right: &Expr, spacing: Spacing) {
    write_expr(out, left, SUM, spacing);
    // After a plus sign the parentheses of a sum change nothing.
    let least = if sign == '+' { SUM } else { PRODUCT };
    match spacing {
        Spacing::Wide => {
            let _ = write!(out, " {sign} ");
        }
        Spacing::Narrow => out.push(sign),
    }
    write_expr(out, right, least, spacing);
}

fn write_sweep(out: &mut String, sweep: &Sweep) {
    out.push_str(&sweep.variable);
    out.push_str(" = ");
    write_expr(out, &sweep.start, SUM, Spacing::Narrow);
    out.push_str("..");
    if let Some(end) = &sweep.end {
        write_expr(out, end, SUM, Spacing::Narrow);
    }
}

fn write_list(out: &mut String, list: &[Expr], spacing: Spacing) {
    write_between(out, '[', list, ']', spacing);
}

fn write_between(out: &mut String, open: char, list: &[Expr], close: char, spacing: Spacing) {
    out.push(open);
    for (number, expr) in list.iter().enumerate() {
        if number > 0 {
            out.push(',');
        }
        write_expr(out, expr, SUM, spacing);
    }
    out.push(close);
}

fn write_primes(out: &mut String, primes: u32) {
    out.extend(std::iter::repeat_n('\'', primes as usize));
}
