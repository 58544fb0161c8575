//! Lists of terms, `ratio(F,n) for n = 1..j+1`.

use crate::expression::{Condition, Expr, Sweep};
use crate::index::{
    Environment, MAX_INSTANCES, condition_holds, describe, index_value, substitute,
};
use crate::source::{Diagnostic, Span};

/// The terms of a linear form.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Terms {
    /// The parts of the list, one for each string.
    pub items: Vec<TermsItem>,
    /// Whose terms these are, for messages: `` claim `trace` ``.
    pub owner: String,
    /// Where they stand.
    pub span: Span,
}

/// One string of a list of terms: an expression, over a sweep or alone.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct TermsItem {
    /// The term.
    pub body: Expr,
    /// Its sweeps, the first outermost.
    pub sweeps: Vec<Sweep>,
    /// Which combinations are kept.
    pub conditions: Vec<Condition>,
    /// Where it stands.
    pub span: Span,
}

impl Terms {
    /// Has one of the ranges no end?
    pub fn is_open(&self) -> bool {
        self.items
            .iter()
            .flat_map(|item| &item.sweeps)
            .any(|sweep| sweep.end.is_none())
    }

    /// The value at which the first open range starts, if one is open and its start depends on `env` alone.
    ///
    /// # Errors
    ///
    /// If the start cannot be evaluated.
    pub fn first_open_value(&self, env: &Environment) -> Result<Option<i64>, Diagnostic> {
        self.items
            .iter()
            .flat_map(|item| &item.sweeps)
            .find(|sweep| sweep.end.is_none())
            .map(|sweep| index_value(&sweep.start, env))
            .transpose()
    }

    /// The terms for these values of the indices, in order; a term may occur twice.
    ///
    /// An open range takes `length` values from its start on.
    ///
    /// # Errors
    ///
    /// If there is no term, if a range is open and no length is given, if there are more than a million
    /// terms, or if an index cannot be evaluated.
    pub fn expand(&self, env: &Environment, length: Option<i64>) -> Result<Vec<Expr>, Diagnostic> {
        let mut terms = Vec::new();
        let mut tried = 0;
        for item in &self.items {
            let mut scope = env.clone();
            item.expand(0, &mut scope, length, &mut tried, &mut terms)?;
        }
        if terms.is_empty() {
            return Err(Diagnostic::new(
                format!(
                    "the list of terms of {}{} is empty",
                    self.owner,
                    describe(env)
                ),
                self.span,
            )
            .label("no term for these indices")
            .help("let the range end at or after its start, or shorten the sweep of the claim"));
        }
        Ok(terms)
    }
}

impl TermsItem {
    fn expand(
        &self,
        level: usize,
        scope: &mut Environment,
        length: Option<i64>,
        tried: &mut usize,
        terms: &mut Vec<Expr>,
    ) -> Result<(), Diagnostic> {
        let Some(sweep) = self.sweeps.get(level) else {
            for condition in &self.conditions {
                if !condition_holds(condition, scope)? {
                    return Ok(());
                }
            }
            terms.push(substitute(&self.body, scope)?);
            return Ok(());
        };
        let start = index_value(&sweep.start, scope)?;
        let end = match (&sweep.end, length) {
            (Some(end), _) => index_value(end, scope)?,
            (None, Some(length)) => start.saturating_add(length).saturating_sub(1),
            (None, None) => {
                return Err(Diagnostic::new("this range has no end", sweep.span)
                    .help("the length of the form must be chosen before the terms are listed"));
            }
        };
        if end >= start {
            let width = usize::try_from(end.abs_diff(start)).unwrap_or(usize::MAX);
            *tried = tried.saturating_add(width).saturating_add(1);
            if *tried > MAX_INSTANCES {
                return Err(Diagnostic::new(
                    format!("more than {MAX_INSTANCES} terms"),
                    sweep.span,
                )
                .help("shorten the range"));
            }
        }
        for value in start..=end {
            scope.insert(sweep.variable.clone(), value);
            self.expand(level + 1, scope, length, tried, terms)?;
        }
        scope.shift_remove(&sweep.variable);
        Ok(())
    }
}
