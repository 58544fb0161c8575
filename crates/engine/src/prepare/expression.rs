//! Closed expressions to nodes.

use super::build::{Builder, Built};
use crate::program::{NodeId, Operation};
use linform_scalar::Rational;
use linform_spec::{Environment, Expr, ExprKind, Function, Span, index_value, summands};

/// The largest power of a number that is computed, in binary digits.
const MOST_BITS: u64 = 4_000_000;
/// The largest determinant: the expansion along rows takes `size · 2^size` steps.
const MOST_ROWS: usize = 14;
/// The highest derivative of a law, or of any expression.
const MOST_DERIVATIVES: i64 = 2_000;

impl Builder<'_> {
    pub(super) fn one(&mut self) -> NodeId {
        self.program.node(Operation::Rational(Rational::ONE))
    }

    fn number(&mut self, value: Rational) -> NodeId {
        self.program.node(Operation::Rational(value))
    }

    fn as_number(&self, node: NodeId) -> Option<&Rational> {
        match self.program.operation(node) {
            Operation::Rational(value) => Some(value),
            _ => None,
        }
    }

    /// The node of an expression in which no index variable is left.
    pub(super) fn node_of(&mut self, expression: &Expr) -> Built {
        let span = &expression.span;
        self.step(span)?;
        match &expression.kind {
            ExprKind::Number(value) => Ok(self.number(value.clone().into())),
            ExprKind::Name { base, primes } => self.name(base, *primes, span),
            ExprKind::Group(inner) => self.node_of(inner),
            ExprKind::Neg(inner) => {
                let node = self.node_of(inner)?;
                Ok(self.scaled(-Rational::ONE, node))
            }
            ExprKind::Add(a, b) => {
                let (a, b) = self.both(a, b)?;
                Ok(self.sum(a, b))
            }
            ExprKind::Sub(a, b) => {
                let (a, b) = self.both(a, b)?;
                Ok(match (self.as_number(a), self.as_number(b)) {
                    (Some(a), Some(b)) => self.number(a - b),
                    (_, Some(zero)) if zero.is_zero() => a,
                    _ => self.program.node(Operation::Sub(a, b)),
                })
            }
            ExprKind::Mul(a, b) => {
                let (a, b) = self.both(a, b)?;
                Ok(
                    match (self.as_number(a).cloned(), self.as_number(b).cloned()) {
                        (Some(factor), _) => self.scaled(factor, b),
                        (_, Some(factor)) => self.scaled(factor, a),
                        _ => self.program.node(Operation::Mul(a, b)),
                    },
                )
            }
            ExprKind::Div(a, b) => {
                let (a, b) = self.both(a, b)?;
                match self.as_number(b).map(Rational::recip) {
                    Some(Some(factor)) => Ok(self.scaled(factor, a)),
                    Some(None) => Err(self.report(
                        "division by zero",
                        *span,
                        "the denominator is 0 here",
                        None,
                    )),
                    None => Err(self.report(
                        "division by something that is not a nonzero rational number",
                        *span,
                        "not a unit of the ring",
                        Some(
                            "multiply the other side instead, or use `coefficients = \"rational\"`"
                                .to_owned(),
                        ),
                    )),
                }
            }
            ExprKind::Pow(base, exponent) => self.power(base, exponent, span),
            ExprKind::Element {
                family,
                indices,
                primes,
            } => {
                let empty = Environment::default();
                let values: Result<Vec<i64>, _> = indices
                    .iter()
                    .map(|index| index_value(index, &empty))
                    .collect();
                let values = self.pass(values)?;
                let node = self.element(family, &values, span)?;
                Ok(self.derived(node, i64::from(*primes)))
            }
            ExprKind::Call {
                function,
                arguments,
                primes,
            } => {
                let node = match function {
                    Function::Sum => self.sum_call(expression)?,
                    _ => self.call(*function, arguments, span)?,
                };
                Ok(self.derived(node, i64::from(*primes)))
            }
            ExprKind::List(_)
            | ExprKind::Text(_)
            | ExprKind::For { .. }
            | ExprKind::Apply { .. } => Err(self.report(
                "this is not a value of the ring",
                *span,
                "a list, a text, a range or a function of a model has no place here",
                None,
            )),
        }
    }

    fn both(&mut self, a: &Expr, b: &Expr) -> Built<(NodeId, NodeId)> {
        // Both sides are built before either mistake ends the expression, so that one run shows both.
        let (a, b) = (self.node_of(a), self.node_of(b));
        Ok((a?, b?))
    }

    fn sum(&mut self, a: NodeId, b: NodeId) -> NodeId {
        match (self.as_number(a), self.as_number(b)) {
            (Some(a), Some(b)) => self.number(a + b),
            (Some(zero), _) if zero.is_zero() => b,
            (_, Some(zero)) if zero.is_zero() => a,
            _ => self.program.node(Operation::Add(a, b)),
        }
    }

    fn scaled(&mut self, factor: Rational, node: NodeId) -> NodeId {
        if let Some(value) = self.as_number(node) {
            let product = value * &factor;
            return self.number(product);
        }
        if factor.is_zero() {
            return self.number(Rational::ZERO);
        }
        if factor.is_one() {
            node
        } else {
            self.program.node(Operation::Scale(factor, node))
        }
    }

    fn derived(&mut self, mut node: NodeId, times: i64) -> NodeId {
        for _ in 0..times {
            node = match self.as_number(node) {
                Some(_) => self.number(Rational::ZERO),
                None => self.program.node(Operation::Derive(node)),
            };
        }
        node
    }

    /// A symbol, or a derivative of the generator with the most primes.
    fn name(&mut self, base: &str, primes: u32, span: &Span) -> Built {
        if i64::from(primes) > MOST_DERIVATIVES {
            return Err(self.report(
                "too many primes",
                *span,
                "this derivative is too high",
                None,
            ));
        }
        for kept in (0..=primes).rev() {
            let name = format!("{base}{}", "'".repeat(kept as usize));
            if let Some(index) = self.symbols.iter().position(|symbol| *symbol == name) {
                let node = self.program.node(Operation::Symbol(index));
                return Ok(self.derived(node, i64::from(primes - kept)));
            }
        }
        Err(self.report(
            format!("unknown name `{base}`"),
            *span,
            "not a symbol of the ring",
            None,
        ))
    }

    fn power(&mut self, base: &Expr, exponent: &Expr, span: &Span) -> Built {
        let value = index_value(exponent, &Environment::default());
        let exponent_value = self.pass(value)?;
        let node = self.node_of(base)?;
        let Ok(power) = u32::try_from(exponent_value) else {
            let help = "negative powers are no elements of the ring".to_owned();
            let message =
                format!("the exponent {exponent_value} is outside the range of the program");
            return Err(self.report(message, *span, "here", Some(help)));
        };
        if let Some(value) = self.as_number(node) {
            let bits = value.numerator().bits().max(value.denominator().bits());
            if bits > 1 && bits.saturating_mul(u64::from(power)) > MOST_BITS {
                return Err(self.report(
                    "this number is too long",
                    *span,
                    "a power of a number",
                    None,
                ));
            }
            let result = value.pow(power);
            return Ok(self.number(result));
        }
        Ok(match power {
            0 => self.one(),
            1 => node,
            _ => self.program.node(Operation::Pow(node, power)),
        })
    }

    fn call(&mut self, function: Function, arguments: &[Expr], span: &Span) -> Built {
        match (function, arguments) {
            (Function::Ratio, [law, order]) => self.ratio_call(law, order, span),
            (Function::D, [inner]) => {
                let node = self.node_of(inner)?;
                Ok(self.derived(node, 1))
            }
            (Function::Minor, [family, rows, columns]) => self.minor(family, rows, columns, span),
            (Function::Correction, _) => Err(self.report(
                "`correction` needs the expansion of a finite-size model, which this version does not have",
                *span,
                "here",
                None,
            )),
            (Function::Derivative, _) | (Function::Column, _) => Err(self.report(
                "`derivative(F,n)` and `column(…)` are numbers and belong to claims about data",
                *span,
                "not an element of the ring",
                Some("write `ratio(F,n)` for F^(n)/F".to_owned()),
            )),
            _ => Err(self.report("this call has no value in the ring", *span, "here", None)),
        }
    }

    fn ratio_call(&mut self, law: &Expr, order: &Expr, span: &Span) -> Built {
        let value = index_value(order, &Environment::default());
        let order = self.pass(value)?;
        let name = match &law.kind {
            ExprKind::Name { base, primes } => format!("{base}{}", "'".repeat(*primes as usize)),
            _ => String::new(),
        };
        let Some(law) = self.model.laws.get_index_of(&name) else {
            return Err(self.report(format!("unknown law `{name}`"), law.span, "not a law", None));
        };
        match u32::try_from(order) {
            Ok(order) if i64::from(order) <= MOST_DERIVATIVES => self.ratio(law, order),
            _ => {
                let help = format!("the order n of ratio(F,n) runs from 0 to {MOST_DERIVATIVES}");
                Err(self.report(
                    format!("a law has no derivative of order {order} here"),
                    *span,
                    "here",
                    Some(help),
                ))
            }
        }
    }

    fn minor(&mut self, family: &Expr, rows: &Expr, columns: &Expr, span: &Span) -> Built {
        let ExprKind::Name { base, .. } = &family.kind else {
            return Err(self.report(
                "a minor is taken of a family",
                family.span,
                "not a family",
                None,
            ));
        };
        let (rows, columns) = (self.index_list(rows)?, self.index_list(columns)?);
        if rows.len() != columns.len() || rows.is_empty() || rows.len() > MOST_ROWS {
            let help = format!("give as many rows as columns, between 1 and {MOST_ROWS}");
            let message = format!(
                "a minor with {} rows and {} columns",
                rows.len(),
                columns.len()
            );
            return Err(self.report(message, *span, "here", Some(help)));
        }
        let mut entries = Vec::with_capacity(rows.len() * columns.len());
        for row in &rows {
            for column in &columns {
                entries.push(self.element(base, &[*row, *column], span));
            }
        }
        let entries = entries.into_iter().collect::<Built<Vec<_>>>()?;
        Ok(self.program.node(Operation::Determinant {
            size: rows.len(),
            entries,
        }))
    }

    fn index_list(&mut self, list: &Expr) -> Built<Vec<i64>> {
        let ExprKind::List(items) = &list.kind else {
            return Err(self.report(
                "expected a list of indices",
                list.span,
                "such as [0,1]",
                None,
            ));
        };
        let values: Result<Vec<i64>, _> = items
            .iter()
            .map(|item| index_value(item, &Environment::default()))
            .collect();
        self.pass(values)
    }

    /// `sum(e for i = 1..n)`; an empty sum is 0.
    fn sum_call(&mut self, call: &Expr) -> Built {
        let parts = summands(call);
        let parts = self.pass(parts)?;
        let mut total = self.number(Rational::ZERO);
        for part in &parts {
            let node = self.node_of(part)?;
            total = self.sum(total, node);
        }
        Ok(total)
    }
}
