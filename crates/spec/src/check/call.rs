//! Calls of functions.

use super::index::Index;
use super::names::Kind;
use super::scope::{RangeOf, Scope, Where};
use super::value::written;
use crate::collect::Collector;
use crate::expression::{Expr, ExprKind, Function};
use crate::index::MAX_EXPONENT;
use crate::model::FiniteSizeModel;
use crate::parser::unknown_function;
use crate::read::{count_indices, shorten};
use crate::source::{Diagnostic, Span};

impl Scope<'_> {
    /// Checks a call of a built-in function.
    pub(crate) fn call(
        &mut self,
        span: Span,
        function: Function,
        arguments: &[Expr],
        errors: &mut Collector,
    ) {
        if !self.allows(function) {
            errors.push(
                Diagnostic::new(format!("`{}` cannot stand here", function.name()), span)
                    .help(self.instead_of(function)),
            );
            return;
        }
        if arguments.len() != function.arity() {
            errors.push(
                Diagnostic::new(
                    format!(
                        "`{}` takes {}, not {}",
                        function.name(),
                        arguments_in_words(function.arity()),
                        arguments.len()
                    ),
                    span,
                )
                .help(format!("write {}", function.usage())),
            );
            return;
        }
        match (function, arguments) {
            (Function::Ratio | Function::Derivative, [law, order]) => {
                self.reference(Kind::Law, function, law, errors);
                self.order(order, errors);
            }
            (Function::Correction, [model, order]) => {
                self.reference(Kind::Model, function, model, errors);
                self.order(order, errors);
            }
            (Function::Minor, [family, rows, columns]) => {
                self.minor(span, family, rows, columns, errors);
            }
            (Function::Sum, [argument]) => self.sum(argument, errors),
            (Function::Column, [argument]) => {
                if !matches!(argument.kind, ExprKind::Text(_)) {
                    errors.push(
                        Diagnostic::new("a column is named by a text", argument.span)
                            .help(format!("write {}", function.usage())),
                    );
                }
            }
            _ => {
                for argument in arguments {
                    self.value(argument, errors);
                }
            }
        }
    }

    fn allows(&self, function: Function) -> bool {
        match self.place {
            Where::Ring => !matches!(
                function,
                Function::Derivative | Function::Column | Function::Sqrt
            ),
            Where::Data => function != Function::Sqrt,
            Where::Derivation | Where::Decay => false,
            Where::Equation(_) | Where::Kernel(_) => function == Function::Sqrt,
        }
    }

    fn instead_of(&self, function: Function) -> &'static str {
        match (self.place, function) {
            (Where::Ring, Function::Derivative) => {
                "`derivative(F, n)` belongs to claims about numbers; in the ring write `ratio(F, n)`"
            }
            (Where::Ring, Function::Column) => {
                "columns belong to claims about numbers, with `data`"
            }
            (Where::Ring | Where::Data, Function::Sqrt) => {
                "square roots belong to the power series of a model"
            }
            _ => self.what_may_stand_here(),
        }
    }

    /// A law, family or model named in a call. Gives its name if it is known.
    fn reference<'e>(
        &self,
        kind: Kind,
        function: Function,
        expr: &'e Expr,
        errors: &mut Collector,
    ) -> Option<&'e str> {
        let ExprKind::Name { base, primes: 0 } = &expr.kind else {
            errors.push(
                Diagnostic::new("a name was expected here", expr.span)
                    .help(format!("write {}", function.usage())),
            );
            return None;
        };
        let known = match kind {
            Kind::Law => self.names.is_law(base),
            Kind::Model => self.names.is_model(base),
            Kind::Family => self.names.family(base).is_some(),
        };
        if !known {
            self.names.unknown(kind, base, expr.span, errors);
            return None;
        }
        Some(base)
    }

    /// The order of a derivative or of a correction.
    fn order(&self, expr: &Expr, errors: &mut Collector) {
        if let Index::Fixed(order) = self.index(expr, errors)
            && !(0..=MAX_EXPONENT).contains(&order)
        {
            errors.push(
                Diagnostic::new(format!("the order {order} is out of range"), expr.span)
                    .help(format!("orders lie between 0 and {MAX_EXPONENT}")),
            );
        }
    }

    fn minor(
        &self,
        span: Span,
        family: &Expr,
        rows: &Expr,
        columns: &Expr,
        errors: &mut Collector,
    ) {
        if let Some(name) = self.reference(Kind::Family, Function::Minor, family, errors)
            && let Some(Some(arity)) = self.names.family(name)
            && arity != 2
        {
            errors.push(
                Diagnostic::new(
                    format!("`{name}` has {}: it has no minors", count_indices(arity)),
                    family.span,
                )
                .help("minors are taken of a family with two indices"),
            );
        }
        let sizes = [rows, columns].map(|list| match &list.kind {
            ExprKind::List(list) => {
                for index in list {
                    self.index(index, errors);
                }
                Some(list.len())
            }
            _ => {
                errors.push(
                    Diagnostic::new("a list was expected here", list.span)
                        .help(format!("write {}", Function::Minor.usage())),
                );
                None
            }
        });
        let [Some(rows), Some(columns)] = sizes else {
            return;
        };
        if rows != columns || rows == 0 {
            errors.push(
                Diagnostic::new(
                    format!("a minor of {rows} rows and {columns} columns"),
                    span,
                )
                .help("give as many rows as columns, and at least one"),
            );
        }
    }

    fn sum(&mut self, argument: &Expr, errors: &mut Collector) {
        let ExprKind::For { body, sweep } = &argument.kind else {
            errors.push(
                Diagnostic::new("a sum needs a range", argument.span)
                    .help(format!("write {}", Function::Sum.usage())),
            );
            return;
        };
        if sweep.end.is_none() {
            errors.push(
                Diagnostic::new("the range of a sum has no end", sweep.span)
                    .help(format!("write {}", Function::Sum.usage())),
            );
        }
        self.sweep(sweep, RangeOf::Sum, errors);
        self.value(body, errors);
        self.indices.pop();
    }

    /// Checks `A'(x)`.
    pub(crate) fn apply(
        &mut self,
        span: Span,
        function: &str,
        primes: u32,
        argument: &Expr,
        errors: &mut Collector,
    ) {
        match self.place {
            Where::Kernel(model) if function == model.function => {
                let variable = matches!(
                    &argument.kind,
                    ExprKind::Name { base, primes: 0 } if model.variables.contains(base)
                );
                if !variable {
                    let [x, y] = &model.variables;
                    errors.push(
                        Diagnostic::new(
                            format!("the argument of `{function}` is a variable of the model"),
                            argument.span,
                        )
                        .help(format!("write `{function}({x})` or `{function}({y})`")),
                    );
                }
            }
            Where::Equation(model) if function == model.function => {
                errors.push(
                    Diagnostic::new(
                        format!("in the equation `{function}` stands without its argument"),
                        span,
                    )
                    .help(format!("write `{}`", written(function, primes))),
                );
            }
            Where::Decay if function == "Ai" && primes == 0 => {
                self.value(argument, errors);
            }
            Where::Decay => errors.push(
                Diagnostic::new(
                    format!("unknown asymptotic form `{}`", written(function, primes)),
                    span,
                )
                .help("the forms known are multiples of `Ai(t)`"),
            ),
            _ if self.names.is_element(function, primes) || self.binds(function) => {
                let name = written(function, primes);
                errors.push(
                    Diagnostic::new(format!("`{}` is not a function", shorten(&name)), span).help(
                        format!("a product is written with `*`: `{}*(…)`", shorten(&name)),
                    ),
                );
            }
            _ if self.names.family(function).is_some() => errors.push(
                Diagnostic::new(format!("the family `{function}` is not a function"), span)
                    .help(format!("indices stand in square brackets: `{function}[…]`")),
            ),
            _ if self.names.is_law(function) => errors.push(
                Diagnostic::new(format!("the law `{function}` is not a function here"), span)
                    .help(format!("write `ratio({function}, n)`")),
            ),
            _ => errors.push(unknown_function(&written(&shorten(function), primes), span)),
        }
    }

    /// Checks a name in an equation or kernel.
    pub(crate) fn model_name(
        &self,
        model: &FiniteSizeModel,
        span: Span,
        base: &str,
        primes: u32,
        errors: &mut Collector,
    ) {
        let kernel = matches!(self.place, Where::Kernel(_));
        let [x, y] = &model.variables;
        if base == model.function {
            if kernel {
                errors.push(
                    Diagnostic::new(format!("in the kernel `{base}` needs an argument"), span)
                        .help(format!("write `{}({x})`", written(base, primes))),
                );
            }
            return;
        }
        let constants = self.names.constants();
        let known = base == model.parameter
            || base == x
            || (kernel && base == y)
            || constants.iter().any(|constant| constant == base);
        if known && primes == 0 {
            return;
        }
        if known {
            errors.push(
                Diagnostic::new(
                    format!("`{}` has no derivative here", written(base, primes)),
                    span,
                )
                .help(format!("only `{}` is derived", model.function)),
            );
            return;
        }
        if base == y {
            errors.push(
                Diagnostic::new(format!("the equation is in `{x}` alone"), span)
                    .help(format!("`{y}` is the second argument of the kernel")),
            );
            return;
        }
        if self.names.lost.symbols {
            errors.withhold();
            return;
        }
        let mut candidates: Vec<&str> = constants.iter().map(String::as_str).collect();
        candidates.extend([&model.parameter, x, y, &model.function].map(String::as_str));
        self.names.note_unknown(
            "name",
            &written(base, primes),
            span,
            candidates,
            self.what_may_stand_here(),
            errors,
        );
    }
}

fn arguments_in_words(arity: usize) -> &'static str {
    match arity {
        1 => "1 argument",
        2 => "2 arguments",
        _ => "3 arguments",
    }
}
