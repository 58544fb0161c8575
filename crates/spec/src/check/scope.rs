//! Which names an expression may use, by where it stands.

use super::names::Names;
use crate::collect::Collector;
use crate::expression::Sweep;
use crate::index::{Environment, index_value};
use crate::model::FiniteSizeModel;
use crate::read::shorten;
use crate::source::{Diagnostic, Span};

/// Where an expression stands.
#[derive(Clone, Copy, Debug)]
pub(crate) enum Where<'a> {
    /// Anywhere in the ring: laws, rules, exact claims.
    Ring,
    /// The derivative of a generator: polynomials in the symbols.
    Derivation,
    /// The terms of a claim about numbers.
    Data,
    /// The equation of a model, in its first variable.
    Equation(&'a FiniteSizeModel),
    /// The kernel of a model.
    Kernel(&'a FiniteSizeModel),
    /// The asymptotic form of a solution.
    Decay,
}

/// The checker of one expression, with the index variables that it may use.
pub(crate) struct Scope<'a> {
    pub(crate) names: &'a Names,
    pub(crate) place: Where<'a>,
    /// The index variables in scope, each with its place.
    pub(crate) indices: Vec<(String, Span)>,
    /// Words that stand where index variables could not be read: each may be one unless it is a symbol.
    pub(crate) assumed: &'a [String],
    /// The sweeps whose variables are not yet in scope, for help lines.
    pub(crate) later: &'a [Sweep],
}

/// What kind of thing a range runs over.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum RangeOf {
    /// Instances or terms: an empty range is an error.
    Listing,
    /// Summands: an empty range, written `1..0`, is fine.
    Sum,
}

impl<'a> Scope<'a> {
    pub(crate) fn new(names: &'a Names, place: Where<'a>) -> Scope<'a> {
        Scope {
            names,
            place,
            indices: Vec::new(),
            assumed: &[],
            later: &[],
        }
    }

    pub(crate) fn binds(&self, name: &str) -> bool {
        self.indices.iter().any(|(index, _)| index == name)
            || (self.assumed.iter().any(|word| word == name)
                && self.names.symbol_span(name).is_none())
    }

    /// Brings an index variable into scope, unless it hides another name.
    pub(crate) fn bind(&mut self, name: &str, span: Span, errors: &mut Collector) {
        let clash = match self.indices.iter().find(|(index, _)| index == name) {
            Some((_, first)) => Some(("index variable", *first)),
            None => self.names.symbol_span(name).map(|span| ("symbol", span)),
        };
        if let Some((kind, there)) = clash {
            errors.push(
                Diagnostic::new(
                    format!("the index variable `{}` is already a name", shorten(name)),
                    span,
                )
                .also(there, format!("the {kind}"))
                .help("choose another letter for the index"),
            );
        }
        self.indices.push((name.to_owned(), span));
    }

    /// Checks the bounds of a range and brings its variable into scope.
    pub(crate) fn sweep(&mut self, sweep: &Sweep, of: RangeOf, errors: &mut Collector) {
        self.index(&sweep.start, errors);
        if let Some(end) = &sweep.end {
            self.index(end, errors);
            // One below the start is how an empty range is written; further below is a slip.
            let empty = Environment::new();
            if let (Ok(from), Ok(to)) =
                (index_value(&sweep.start, &empty), index_value(end, &empty))
                && to < from
                && !(of == RangeOf::Sum && from.checked_sub(to) == Some(1))
            {
                errors.push(
                    Diagnostic::new(format!("the range {from}..{to} runs backwards"), sweep.span)
                        .help(format!("write `{} = {to}..{from}`", sweep.variable)),
                );
            }
        }
        self.bind(&sweep.variable, sweep.variable_span, errors);
    }
}
