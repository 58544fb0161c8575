//! Rules of families, and the left sides of `yields`.

use super::{Parsed, Parser, SUM};
use crate::expression::{Condition, Expr, ExprKind, Relation, Sweep};
use crate::family::{Known, Pattern, Rule};
use crate::place::Place;
use crate::source::{Diagnostic, Span};

/// The most indices of a family.
const MAX_INDICES: usize = 16;

/// The family on the left of a rule, and the rule.
pub(crate) fn rule(text: &str, place: &Place) -> Parsed<(String, Rule)> {
    let mut parser = Parser::new(text, place)?;
    let left = parser.left_side()?;
    let known = match left.primes {
        0 => Known::Value,
        1 => Known::Derivative,
        _ => {
            return Err(Diagnostic::new(
                "a rule gives an element or its first derivative",
                left.span,
            )
            .help("write one prime on the left"));
        }
    };
    parser.expect("=", "between the two sides of a rule")?;
    let body = parser.expression()?;
    let (sweeps, mut conditions) = parser.clauses_after_for()?;
    // In a rule `for j = 1..5` is a condition: the pattern has already bound the variable.
    conditions.extend(sweeps.into_iter().map(condition_of_sweep));
    let rule = Rule {
        pattern: left.pattern,
        pattern_spans: left.pattern_spans,
        known,
        body,
        conditions,
        span: place.whole(),
    };
    Ok((left.family, rule))
}

/// A family with indices, as on the left of `yields`.
pub(crate) fn left_of_yields(text: &str, place: &Place) -> Parsed<LeftSide> {
    let mut parser = Parser::new(text, place)?;
    let left = parser.left_side()?;
    if left.primes > 0 {
        return Err(Diagnostic::new(
            "coefficients give an element, not its derivative",
            left.span,
        )
        .help("leave the prime out"));
    }
    parser.finish("nothing more")?;
    Ok(left)
}

/// `u[j,0]'`
pub(crate) struct LeftSide {
    pub(crate) family: String,
    pub(crate) pattern: Vec<Pattern>,
    pub(crate) pattern_spans: Vec<Span>,
    primes: u32,
    span: Span,
}

fn condition_of_sweep(sweep: Sweep) -> Condition {
    let variable = Expr::new(
        ExprKind::Name {
            base: sweep.variable,
            primes: 0,
        },
        sweep.variable_span,
    );
    let mut operands = vec![sweep.start, variable];
    operands.extend(sweep.end);
    Condition {
        relations: vec![Relation::LessEqual; operands.len() - 1],
        operands,
        span: sweep.span,
    }
}

impl Parser<'_> {
    /// `u[j,0]'` on the left of a rule.
    fn left_side(&mut self) -> Parsed<LeftSide> {
        let left = self.binary(SUM)?.expr;
        let ExprKind::Element {
            family,
            indices,
            primes,
        } = left.kind
        else {
            return Err(
                Diagnostic::new("expected an element of a family", left.span)
                    .help("the left side is written `u[j,0]`"),
            );
        };
        let mut pattern: Vec<Pattern> = Vec::with_capacity(indices.len());
        for (number, expr) in indices.iter().enumerate() {
            if number == MAX_INDICES {
                return Err(
                    Diagnostic::new(format!("more than {MAX_INDICES} indices"), left.span)
                        .help("a family has few indices"),
                );
            }
            let next = pattern_of(expr)?;
            if let Pattern::Variable(name) = &next
                && let Some(first) = pattern.iter().position(|p| *p == next)
            {
                return Err(Diagnostic::new(
                    format!("the index variable `{name}` stands twice on the left"),
                    expr.span,
                )
                .also(indices[first].span, "here first")
                .help(format!(
                    "use two variables, and the condition that they are equal: `for {name} == …`"
                )));
            }
            pattern.push(next);
        }
        Ok(LeftSide {
            family,
            pattern,
            pattern_spans: indices.iter().map(|index| index.span).collect(),
            primes,
            span: left.span,
        })
    }
}

fn pattern_of(expr: &Expr) -> Parsed<Pattern> {
    let fixed = |value: Option<i64>| {
        value.map(Pattern::Fixed).ok_or_else(|| {
            Diagnostic::new("this index is out of range", expr.span)
                .help("indices lie between -2^63 and 2^63 - 1")
        })
    };
    match &expr.kind {
        ExprKind::Number(n) => fixed(n.to_i64()),
        ExprKind::Neg(inner) => match &inner.kind {
            ExprKind::Number(n) => fixed((-n).to_i64()),
            _ => Err(not_a_pattern(expr)),
        },
        ExprKind::Name { base, primes: 0 } => Ok(Pattern::Variable(base.clone())),
        _ => Err(not_a_pattern(expr)),
    }
}

fn not_a_pattern(expr: &Expr) -> Diagnostic {
    Diagnostic::new("an index on the left is a number or a variable", expr.span)
        .help("shift the rule: write `a[j] = … for j >= 2`, not `a[j+2] = …`")
}
