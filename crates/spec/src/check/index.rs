//! Index expressions and conditions.

use super::scope::{Scope, Where};
use crate::collect::Collector;
use crate::expression::{Condition, Expr, ExprKind};
use crate::index::{Environment, Integral, MAX_EXPONENT, integer, not_integral};
use crate::read::shorten;
use crate::source::Diagnostic;

/// What is known of an index expression.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Index {
    /// It has this value.
    Fixed(i64),
    /// It depends on index variables.
    Variable,
    /// It is wrong, and that is noted.
    Wrong,
}

impl Scope<'_> {
    /// Checks an expression that stands for an integer.
    pub(crate) fn index(&self, expr: &Expr, errors: &mut Collector) -> Index {
        self.integral(expr, Integral::Index, errors)
    }

    fn integral(&self, expr: &Expr, what: Integral, errors: &mut Collector) -> Index {
        match self.index_names(expr, what, errors) {
            // Without variables its value is known, or it has none.
            Index::Fixed(_) => errors
                .take(integer(expr, &Environment::new(), what))
                .map_or(Index::Wrong, Index::Fixed),
            other => other,
        }
    }

    /// Checks the names; `Fixed` means that there are none.
    fn index_names(&self, expr: &Expr, what: Integral, errors: &mut Collector) -> Index {
        match &expr.kind {
            ExprKind::Number(n) if n.to_i64().is_none() => {
                errors.push(
                    Diagnostic::new(format!("this {what} is out of range"), expr.span).help(
                        match what {
                            Integral::Index => "indices lie between -2^63 and 2^63 - 1".to_owned(),
                            Integral::Exponent => {
                                format!("exponents lie between 0 and {MAX_EXPONENT}")
                            }
                        },
                    ),
                );
                Index::Wrong
            }
            ExprKind::Number(_) => Index::Fixed(0),
            ExprKind::Name { base, primes: 0 } if self.binds(base) => Index::Variable,
            ExprKind::Name { base, primes } => {
                self.not_an_index(expr, base, *primes, what, errors);
                Index::Wrong
            }
            ExprKind::Neg(a) | ExprKind::Group(a) => self.index_names(a, what, errors),
            ExprKind::Add(a, b)
            | ExprKind::Sub(a, b)
            | ExprKind::Mul(a, b)
            | ExprKind::Div(a, b)
            | ExprKind::Pow(a, b) => {
                match (
                    self.index_names(a, what, errors),
                    self.index_names(b, what, errors),
                ) {
                    (Index::Wrong, _) | (_, Index::Wrong) => Index::Wrong,
                    (Index::Variable, _) | (_, Index::Variable) => Index::Variable,
                    (Index::Fixed(_), Index::Fixed(_)) => Index::Fixed(0),
                }
            }
            _ => {
                errors.push(not_integral(what, expr.span));
                Index::Wrong
            }
        }
    }

    fn not_an_index(
        &self,
        expr: &Expr,
        base: &str,
        primes: u32,
        what: Integral,
        errors: &mut Collector,
    ) {
        if self.names.is_element(base, primes) {
            let name = shorten(base);
            errors.push(
                Diagnostic::new(format!("the symbol `{name}` is not an {what}"), expr.span)
                    .help("indices and exponents are integers, or index variables bound by `for` or by the left side of a rule"),
            );
            return;
        }
        let help = if self.later.iter().any(|sweep| sweep.variable == base) {
            "its range comes later: write the outer ranges first".to_owned()
        } else if self.indices.is_empty() {
            "no index variable is bound here: `for` binds them, and so does the left side of a rule"
                .to_owned()
        } else {
            let known: Vec<_> = self.indices.iter().map(|(name, _)| shorten(name)).collect();
            format!("the index variables here are {}", known.join(", "))
        };
        let candidates = self.indices.iter().map(|(name, _)| name.as_str()).collect();
        self.names
            .note_unknown("index variable", base, expr.span, candidates, &help, errors);
    }

    /// Checks an exponent.
    pub(crate) fn exponent(&self, expr: &Expr, errors: &mut Collector) -> Index {
        let index = self.integral(expr, Integral::Exponent, errors);
        if let Index::Fixed(value) = index {
            // In a model, negative powers are those of power series that are units.
            let units = matches!(self.place, Where::Equation(_) | Where::Kernel(_));
            let least = if units { -MAX_EXPONENT } else { 0 };
            if !(least..=MAX_EXPONENT).contains(&value) {
                errors.push(
                    Diagnostic::new(
                        if value < 0 {
                            format!("the exponent {value} is negative")
                        } else {
                            format!("the exponent {value} is too large")
                        },
                        expr.span,
                    )
                    .help(format!("exponents lie between {least} and {MAX_EXPONENT}")),
                );
                return Index::Wrong;
            }
        }
        index
    }

    pub(crate) fn condition(&self, condition: &Condition, errors: &mut Collector) {
        for operand in &condition.operands {
            self.index(operand, errors);
        }
    }
}
