//! Expressions that stand for elements of the ring, or of a model.

use super::index::Index;
use super::names::Kind;
use super::scope::{Scope, Where};
use crate::collect::Collector;
use crate::expression::{Expr, ExprKind};
use crate::read::{count_indices, shorten};
use crate::source::{Diagnostic, Span};
use linform_scalar::{Integer, Rational};

/// Constants are followed exactly up to this size of numerator or denominator.
const MAX_BITS: u64 = 4096;

/// What is known of a value without the ring.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) enum Value {
    /// This number.
    Number(Rational),
    /// A number not known here: it depends on an index, is large, or is wrong.
    Constant,
    /// No number, because of what stands here.
    Element(Span),
}

impl Scope<'_> {
    /// Checks an expression that stands for an element, and follows constants, for the sake of divisors.
    pub(crate) fn value(&mut self, expr: &Expr, errors: &mut Collector) -> Value {
        match &expr.kind {
            ExprKind::Number(n) => bounded(Some(Rational::from(n.clone()))),
            ExprKind::Name { base, primes } => self.name(expr.span, base, *primes, errors),
            ExprKind::Group(a) => self.value(a, errors),
            ExprKind::Neg(a) => match self.value(a, errors) {
                Value::Number(a) => Value::Number(-a),
                other => other,
            },
            ExprKind::Add(a, b) => self.both(a, b, errors, |a, b| Some(a + b)),
            ExprKind::Sub(a, b) => self.both(a, b, errors, |a, b| Some(a - b)),
            ExprKind::Mul(a, b) => self.both(a, b, errors, |a, b| Some(a * b)),
            ExprKind::Div(a, b) => self.quotient(a, b, errors),
            ExprKind::Pow(a, b) => {
                let base = self.value(a, errors);
                match (base, self.exponent(b, errors)) {
                    (Value::Number(base), Index::Fixed(exponent)) => power(&base, exponent),
                    (Value::Number(_), _) => Value::Constant,
                    (base, _) => base,
                }
            }
            ExprKind::Element {
                family, indices, ..
            } => {
                self.element(expr.span, family, indices, errors);
                Value::Element(expr.span)
            }
            ExprKind::Call {
                function,
                arguments,
                ..
            } => {
                self.call(expr.span, *function, arguments, errors);
                Value::Element(expr.span)
            }
            ExprKind::Apply {
                function,
                primes,
                argument,
            } => {
                self.apply(expr.span, function, *primes, argument, errors);
                Value::Element(expr.span)
            }
            ExprKind::List(_) | ExprKind::Text(_) | ExprKind::For { .. } => {
                errors.push(
                    Diagnostic::new("an expression was expected here", expr.span)
                        .help("lists, texts and ranges are arguments of certain calls only"),
                );
                Value::Constant
            }
        }
    }

    fn both(
        &mut self,
        a: &Expr,
        b: &Expr,
        errors: &mut Collector,
        combine: fn(&Rational, &Rational) -> Option<Rational>,
    ) -> Value {
        match (self.value(a, errors), self.value(b, errors)) {
            (Value::Element(span), _) | (_, Value::Element(span)) => Value::Element(span),
            (Value::Number(a), Value::Number(b)) => bounded(combine(&a, &b)),
            _ => Value::Constant,
        }
    }

    fn quotient(&mut self, a: &Expr, b: &Expr, errors: &mut Collector) -> Value {
        let dividend = self.value(a, errors);
        let divisor = self.value(b, errors);
        let units = matches!(self.place, Where::Equation(_) | Where::Kernel(_));
        match (&dividend, &divisor) {
            (_, Value::Number(divisor)) if divisor.is_zero() => {
                errors.push(
                    Diagnostic::new("division by zero", b.span)
                        .help("the divisor is 0, whatever the variables are"),
                );
                Value::Constant
            }
            (_, Value::Element(culprit)) if !units => {
                let mut error = Diagnostic::new("division by something that is not a unit", b.span)
                    .label("not a number")
                    .help("elements of the ring are divided by nonzero rational numbers only");
                if *culprit != b.span {
                    error = error.also(*culprit, "because of this");
                }
                errors.push(error);
                Value::Element(*culprit)
            }
            (Value::Element(span), _) | (_, Value::Element(span)) => Value::Element(*span),
            (Value::Number(a), Value::Number(b)) => bounded(a.checked_div(b)),
            _ => Value::Constant,
        }
    }

    fn name(&self, span: Span, base: &str, primes: u32, errors: &mut Collector) -> Value {
        if primes == 0 && self.binds(base) {
            return Value::Constant;
        }
        match self.place {
            Where::Equation(model) | Where::Kernel(model) => {
                self.model_name(model, span, base, primes, errors);
            }
            Where::Ring | Where::Data if self.names.is_element(base, primes) => {}
            Where::Decay if self.names.is_base(base, primes) => {}
            Where::Decay if self.names.is_element(base, primes) => errors.push(
                Diagnostic::new(
                    format!("`{}` cannot stand here", written(base, primes)),
                    span,
                )
                .help(self.what_may_stand_here()),
            ),
            Where::Derivation if self.names.is_symbol(base, primes) => {}
            Where::Derivation if self.names.is_element(base, primes) => errors.push(
                Diagnostic::new(
                    format!(
                        "`{}` is a derivative that is no generator",
                        written(base, primes)
                    ),
                    span,
                )
                .help(self.what_may_stand_here()),
            ),
            _ => self.unknown_name(span, base, primes, errors),
        }
        Value::Element(span)
    }

    fn unknown_name(&self, span: Span, base: &str, primes: u32, errors: &mut Collector) {
        if self.names.is_law(base) {
            errors.push(
                Diagnostic::new(
                    format!("the law `{base}` is not an element of the ring"),
                    span,
                )
                .help(format!(
                    "its logarithmic derivative is: write `ratio({base},1)`"
                )),
            );
            return;
        }
        if let Some(arity) = self.names.family(base) {
            let indices = vec!["1"; arity.unwrap_or(1)].join(",");
            errors.push(
                Diagnostic::new(format!("the family `{base}` stands without indices"), span).help(
                    format!("write an element of it, such as `{base}[{indices}]`"),
                ),
            );
            return;
        }
        if self.names.lost.symbols {
            errors.withhold();
            return;
        }
        let indices = self.indices.iter().map(|(name, _)| name.as_str());
        let candidates = self.names.symbols().chain(indices).collect();
        let name = written(base, primes);
        self.names.note_unknown(
            "name",
            &name,
            span,
            candidates,
            "declare it in [ring]: as a generator, the variable, or a constant",
            errors,
        );
    }

    fn element(&self, span: Span, family: &str, indices: &[Expr], errors: &mut Collector) {
        for index in indices {
            self.index(index, errors);
        }
        if !matches!(self.place, Where::Ring | Where::Data) {
            errors.push(
                Diagnostic::new(
                    format!("an element of `{}` cannot stand here", shorten(family)),
                    span,
                )
                .help(self.what_may_stand_here()),
            );
            return;
        }
        match self.names.family(family) {
            None => self.names.unknown(Kind::Family, family, span, errors),
            Some(Some(arity)) if arity != indices.len() => errors.push(
                Diagnostic::new(
                    format!(
                        "`{family}` has {}, not {}",
                        count_indices(arity),
                        indices.len()
                    ),
                    span,
                )
                .help(format!(
                    "write `{family}[{}]`",
                    ["i", "j", "k", "l"]
                        .iter()
                        .copied()
                        .cycle()
                        .take(arity.min(8))
                        .collect::<Vec<_>>()
                        .join(",")
                )),
            ),
            Some(_) => {}
        }
    }

    /// What an expression is made of at this place, for help lines.
    pub(crate) fn what_may_stand_here(&self) -> &'static str {
        match self.place {
            Where::Ring | Where::Data => "an element of the ring stands here",
            Where::Derivation => {
                "derivatives of generators are written in the symbols themselves: a polynomial in the \
                 generators, the variable and the constants, without `D` and further primes"
            }
            Where::Equation(_) | Where::Kernel(_) => {
                "a model is written with its parameter, its variables, its function, and constants"
            }
            Where::Decay => "the asymptotic form is a multiple of `Ai(t)`",
        }
    }
}

/// A name as it is written.
pub(crate) fn written(base: &str, primes: u32) -> String {
    format!("{base}{}", "'".repeat(primes.min(8) as usize))
}

/// The number, unless it is large.
fn bounded(value: Option<Rational>) -> Value {
    match value {
        Some(value) if value.numerator().bits().max(value.denominator().bits()) <= MAX_BITS => {
            Value::Number(value)
        }
        _ => Value::Constant,
    }
}

fn power(base: &Rational, exponent: i64) -> Value {
    let Ok(magnitude) = u32::try_from(exponent.unsigned_abs()) else {
        return Value::Constant;
    };
    let bits = |n: &Integer| n.bits().saturating_mul(u64::from(magnitude));
    if bits(base.numerator()).max(bits(base.denominator())) > MAX_BITS {
        return Value::Constant;
    }
    let value = base.pow(magnitude);
    bounded(if exponent < 0 {
        value.recip()
    } else {
        Some(value)
    })
}
