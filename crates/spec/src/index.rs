//! Arithmetic of indices, and expressions with the indices put in.

use crate::expression::{Condition, Expr, ExprKind, Function, Relation, Sweep};
use crate::source::{Diagnostic, Span};
use crate::text::text_of;
use indexmap::IndexMap;
use std::fmt;

/// The values of index variables, in the order in which they were bound.
pub type Environment = IndexMap<String, i64>;

/// The most instances, terms or summands that one sweep may have.
pub const MAX_INSTANCES: usize = 1_000_000;

/// The largest exponent.
pub const MAX_EXPONENT: i64 = 10_000;

/// The value of an index expression.
///
/// Integers, index variables, `+ - * ^`, parentheses, and division without remainder.
///
/// # Errors
///
/// If a name has no value in `env`, if something else occurs, if a division leaves a remainder, or if a value
/// leaves the range of an `i64`.
pub fn index_value(expr: &Expr, env: &Environment) -> Result<i64, Diagnostic> {
    integer(expr, env, Integral::Index)
}

/// What an integer in an expression is, for messages.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Integral {
    /// An index, a bound of a range, or an order.
    Index,
    /// An exponent.
    Exponent,
}

impl fmt::Display for Integral {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Integral::Index => "index",
            Integral::Exponent => "exponent",
        })
    }
}

/// As [`index_value`], for exponents too.
pub(crate) fn integer(expr: &Expr, env: &Environment, what: Integral) -> Result<i64, Diagnostic> {
    let both =
        |a: &Expr, b: &Expr| Ok::<_, Diagnostic>((integer(a, env, what)?, integer(b, env, what)?));
    let value = match &expr.kind {
        ExprKind::Number(n) => n.to_i64(),
        ExprKind::Name { base, primes: 0 } => match env.get(base) {
            Some(value) => Some(*value),
            None => {
                return Err(Diagnostic::new(
                    format!("the index variable `{base}` has no value here"),
                    expr.span,
                ));
            }
        },
        ExprKind::Group(a) => Some(integer(a, env, what)?),
        ExprKind::Neg(a) => integer(a, env, what)?.checked_neg(),
        ExprKind::Add(a, b) => {
            let (a, b) = both(a, b)?;
            a.checked_add(b)
        }
        ExprKind::Sub(a, b) => {
            let (a, b) = both(a, b)?;
            a.checked_sub(b)
        }
        ExprKind::Mul(a, b) => {
            let (a, b) = both(a, b)?;
            a.checked_mul(b)
        }
        ExprKind::Div(a, b) => {
            let (a, b) = both(a, b)?;
            match a.checked_rem(b) {
                Some(0) => a.checked_div(b),
                _ => {
                    return Err(Diagnostic::new(
                        format!("the {what} {a}/{b} is not an integer"),
                        expr.span,
                    )
                    .help(format!(
                        "an {what} is an integer: a division in it must leave no remainder"
                    )));
                }
            }
        }
        ExprKind::Pow(a, b) => {
            let (a, b) = both(a, b)?;
            u32::try_from(b).ok().and_then(|b| a.checked_pow(b))
        }
        _ => {
            return Err(not_integral(what, expr.span));
        }
    };
    value.ok_or_else(|| {
        let help = match what {
            Integral::Index => {
                "indices lie between -2^63 and 2^63 - 1, and exponents in them are not negative"
                    .to_owned()
            }
            Integral::Exponent => format!("exponents lie between 0 and {MAX_EXPONENT}"),
        };
        Diagnostic::new(format!("this {what} is out of range"), expr.span).help(help)
    })
}

/// The error for what is no arithmetic of integers.
pub(crate) fn not_integral(what: Integral, span: Span) -> Diagnostic {
    Diagnostic::new(format!("this is not an {what}"), span).help(format!(
        "an {what} is made of integers, index variables and `+ - * ^`"
    ))
}

/// Do all comparisons of the chain hold?
///
/// # Errors
///
/// As [`index_value`].
pub fn condition_holds(condition: &Condition, env: &Environment) -> Result<bool, Diagnostic> {
    let values = condition
        .operands
        .iter()
        .map(|operand| index_value(operand, env))
        .collect::<Result<Vec<_>, _>>()?;
    Ok(values
        .windows(2)
        .zip(&condition.relations)
        .all(|(pair, relation)| {
            let (a, b) = (pair[0], pair[1]);
            match relation {
                Relation::Less => a < b,
                Relation::LessEqual => a <= b,
                Relation::Greater => a > b,
                Relation::GreaterEqual => a >= b,
                Relation::Equal => a == b,
                Relation::NotEqual => a != b,
            }
        }))
}

/// ` at j = 3, k = 0`, or nothing without indices.
pub(crate) fn describe(env: &Environment) -> String {
    let mut text = String::new();
    for (number, (name, value)) in env.iter().enumerate() {
        text.push_str(if number == 0 { " at " } else { ", " });
        text.push_str(&format!("{name} = {value}"));
    }
    text
}

/// The expression with the indices put in.
///
/// Indices, integer arguments of calls, bounds and exponents become literals; arithmetic of numbers and index
/// variables elsewhere, such as `(j-2)` in `(j-2)*a[j-3]`, becomes a literal too. What `env` does not bind
/// stays, so that the variable of a `sum` survives: a sum is kept, with literal bounds (see [`summands`]).
/// The result is closed when `env` binds every free index variable.
///
/// # Errors
///
/// As [`index_value`]; also a negative exponent, or one above [`MAX_EXPONENT`].
pub fn substitute(expr: &Expr, env: &Environment) -> Result<Expr, Diagnostic> {
    Substitution {
        env,
        bound: Vec::new(),
    }
    .value(expr)
}

/// The summands of a closed call of `sum`, in order.
///
/// # Errors
///
/// If the expression is not such a call, if a bound is not an integer, or if there are more than
/// [`MAX_INSTANCES`] summands.
pub fn summands(expr: &Expr) -> Result<Vec<Expr>, Diagnostic> {
    let ExprKind::Call {
        function: Function::Sum,
        arguments,
        ..
    } = &expr.kind
    else {
        return Err(Diagnostic::new("this is not a sum", expr.span));
    };
    let [
        Expr {
            kind: ExprKind::For { body, sweep },
            ..
        },
    ] = &arguments[..]
    else {
        return Err(not_a_sweep(expr.span));
    };
    let Some(end) = &sweep.end else {
        return Err(not_a_sweep(sweep.span));
    };
    let mut env = Environment::new();
    let (start, end) = (index_value(&sweep.start, &env)?, index_value(end, &env)?);
    if end < start {
        return Ok(Vec::new());
    }
    if usize::try_from(end.abs_diff(start)).map_or(true, |width| width >= MAX_INSTANCES) {
        return Err(
            Diagnostic::new(format!("more than {MAX_INSTANCES} summands"), sweep.span)
                .help("shorten the range"),
        );
    }
    (start..=end)
        .map(|value| {
            env.insert(sweep.variable.clone(), value);
            substitute(body, &env)
        })
        .collect()
}

fn not_a_sweep(span: Span) -> Diagnostic {
    Diagnostic::new("a sum needs a range with both ends", span).help("write sum(e for i = 1..n)")
}

struct Substitution<'a> {
    env: &'a Environment,
    /// Variables of the sums around, which hide those of the environment.
    bound: Vec<String>,
}

impl Substitution<'_> {
    fn lookup(&self, name: &str) -> Option<i64> {
        if self.bound.iter().any(|bound| bound == name) {
            return None;
        }
        self.env.get(name).copied()
    }

    /// In a place where a ring element stands.
    fn value(&mut self, expr: &Expr) -> Result<Expr, Diagnostic> {
        // A power such as `2^j` may be too large for an index and yet be a fine coefficient: then it stays.
        if let Arithmetic::Indices = self.arithmetic(expr, Quotients::Kept)
            && let Ok(value) = index_value(expr, self.env)
        {
            let literal = Expr::integer(value, expr.span);
            return Ok(if value < 0 {
                Expr::new(ExprKind::Group(Box::new(literal)), expr.span)
            } else {
                literal
            });
        }
        let kind = match &expr.kind {
            ExprKind::Number(_) | ExprKind::Name { .. } | ExprKind::Text(_) => expr.kind.clone(),
            ExprKind::Neg(a) => ExprKind::Neg(self.boxed(a)?),
            ExprKind::Group(a) => ExprKind::Group(self.boxed(a)?),
            ExprKind::Add(a, b) => ExprKind::Add(self.boxed(a)?, self.boxed(b)?),
            ExprKind::Sub(a, b) => ExprKind::Sub(self.boxed(a)?, self.boxed(b)?),
            ExprKind::Mul(a, b) => ExprKind::Mul(self.boxed(a)?, self.boxed(b)?),
            ExprKind::Div(a, b) => {
                let divisor = self.boxed(b)?;
                if matches!(&divisor.kind, ExprKind::Number(n) if n.is_zero()) {
                    return Err(division_by_zero(b));
                }
                ExprKind::Div(self.boxed(a)?, divisor)
            }
            ExprKind::Pow(a, b) => ExprKind::Pow(self.boxed(a)?, Box::new(self.exponent(b)?)),
            ExprKind::Element {
                family,
                indices,
                primes,
            } => ExprKind::Element {
                family: family.clone(),
                indices: self.indices(indices)?,
                primes: *primes,
            },
            ExprKind::Call {
                function,
                arguments,
                primes,
            } => ExprKind::Call {
                function: *function,
                arguments: self.arguments(*function, arguments)?,
                primes: *primes,
            },
            ExprKind::Apply {
                function,
                primes,
                argument,
            } => ExprKind::Apply {
                function: function.clone(),
                primes: *primes,
                argument: self.boxed(argument)?,
            },
            ExprKind::List(list) => ExprKind::List(self.indices(list)?),
            ExprKind::For { body, sweep } => {
                let start = self.index(&sweep.start)?;
                let end = sweep.end.as_ref().map(|end| self.index(end)).transpose()?;
                self.bound.push(sweep.variable.clone());
                let body = self.boxed(body);
                self.bound.pop();
                ExprKind::For {
                    body: body?,
                    sweep: Box::new(Sweep {
                        start,
                        end,
                        ..(**sweep).clone()
                    }),
                }
            }
        };
        Ok(Expr::new(kind, expr.span))
    }

    fn boxed(&mut self, expr: &Expr) -> Result<Box<Expr>, Diagnostic> {
        self.value(expr).map(Box::new)
    }

    fn arguments(
        &mut self,
        function: Function,
        arguments: &[Expr],
    ) -> Result<Vec<Expr>, Diagnostic> {
        match (function, arguments) {
            // The first argument names a law, a family or a model, whatever indices are called.
            (
                Function::Ratio | Function::Derivative | Function::Minor | Function::Correction,
                [name, rest @ ..],
            ) => {
                let mut result = vec![name.clone()];
                result.extend(self.indices(rest)?);
                Ok(result)
            }
            _ => arguments
                .iter()
                .map(|argument| self.value(argument))
                .collect(),
        }
    }

    fn indices(&mut self, list: &[Expr]) -> Result<Vec<Expr>, Diagnostic> {
        list.iter().map(|expr| self.index(expr)).collect()
    }

    /// In a place where an integer stands (or a list of them).
    fn index(&mut self, expr: &Expr) -> Result<Expr, Diagnostic> {
        if let ExprKind::List(list) = &expr.kind {
            return Ok(Expr::new(ExprKind::List(self.indices(list)?), expr.span));
        }
        match self.arithmetic(expr, Quotients::Exact) {
            Arithmetic::Indices | Arithmetic::Numbers => {
                Ok(Expr::integer(index_value(expr, self.env)?, expr.span))
            }
            Arithmetic::Other => self.value(expr),
        }
    }

    fn exponent(&mut self, expr: &Expr) -> Result<Expr, Diagnostic> {
        if let Arithmetic::Other = self.arithmetic(expr, Quotients::Exact) {
            return self.value(expr);
        }
        let value = integer(expr, self.env, Integral::Exponent)?;
        if !(0..=MAX_EXPONENT).contains(&value) {
            return Err(Diagnostic::new(
                format!("the exponent {} is {value}", text_of(expr)),
                expr.span,
            )
            .help(format!("exponents lie between 0 and {MAX_EXPONENT}")));
        }
        Ok(Expr::integer(value, expr.span))
    }

    /// What an expression is made of. The right operand is asked first: chains lean to the left, so that a
    /// chain with one symbol in it is usually settled at its last operand.
    fn arithmetic(&self, expr: &Expr, quotients: Quotients) -> Arithmetic {
        match &expr.kind {
            ExprKind::Number(_) => Arithmetic::Numbers,
            ExprKind::Name { base, primes: 0 } if self.lookup(base).is_some() => {
                Arithmetic::Indices
            }
            ExprKind::Neg(a) | ExprKind::Group(a) => self.arithmetic(a, quotients),
            ExprKind::Div(_, _) if quotients == Quotients::Kept => Arithmetic::Other,
            ExprKind::Add(a, b)
            | ExprKind::Sub(a, b)
            | ExprKind::Mul(a, b)
            | ExprKind::Div(a, b)
            | ExprKind::Pow(a, b) => match self.arithmetic(b, quotients) {
                Arithmetic::Other => Arithmetic::Other,
                right => self.arithmetic(a, quotients).with(right),
            },
            _ => Arithmetic::Other,
        }
    }
}

/// The error for a divisor that the indices make 0.
fn division_by_zero(divisor: &Expr) -> Diagnostic {
    Diagnostic::new(
        format!("the divisor {} is 0 for these indices", text_of(divisor)),
        divisor.span,
    )
    .help("exclude these indices by a condition")
}

/// What a quotient is: a fraction in a ring element, a division without remainder in an index.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Quotients {
    Kept,
    Exact,
}

/// What an expression is made of.
enum Arithmetic {
    /// Numbers only.
    Numbers,
    /// Numbers and at least one bound index variable.
    Indices,
    /// Something else.
    Other,
}

impl Arithmetic {
    fn with(self, other: Arithmetic) -> Arithmetic {
        match (self, other) {
            (Arithmetic::Other, _) | (_, Arithmetic::Other) => Arithmetic::Other,
            (Arithmetic::Numbers, Arithmetic::Numbers) => Arithmetic::Numbers,
            _ => Arithmetic::Indices,
        }
    }
}
