//! Lists of terms, `ratio(F,n) for n = 1..j+1`.

use crate::expression::{Condition, Expr, ExprKind, Sweep};
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
        let mut walk = Walk::new(env, length, MAX_INSTANCES);
        for item in &self.items {
            let complete = walk.run(item, 0, &mut |scope| {
                terms.push(substitute(&item.body, scope)?);
                Ok(())
            })?;
            if !complete {
                return Err(
                    Diagnostic::new(format!("more than {MAX_INSTANCES} terms"), item.span)
                        .help("shorten the range"),
                );
            }
        }
        self.not_empty(terms.len(), env)?;
        Ok(terms)
    }

    /// The number of terms, or nothing if counting them takes more than `budget` steps.
    pub(crate) fn count(
        &self,
        env: &Environment,
        length: Option<i64>,
        budget: usize,
    ) -> Result<Option<usize>, Diagnostic> {
        let mut count = 0;
        let mut walk = Walk::new(env, length, budget);
        for item in &self.items {
            let complete = walk.run(item, 0, &mut |_| {
                count += 1;
                Ok(())
            })?;
            if !complete {
                return Ok(None);
            }
        }
        self.not_empty(count, env)?;
        Ok(Some(count))
    }

    /// Does this name occur anywhere in the list?
    pub(crate) fn mentions(&self, name: &str) -> bool {
        fn occurs(expr: &Expr, name: &str) -> bool {
            matches!(&expr.kind, ExprKind::Name { base, .. } if base == name)
                || expr.parts().into_iter().any(|part| occurs(part, name))
        }
        self.items.iter().any(|item| {
            let bounds = item
                .sweeps
                .iter()
                .flat_map(|sweep| [&sweep.start].into_iter().chain(&sweep.end));
            let operands = item.conditions.iter().flat_map(|c| &c.operands);
            bounds
                .chain(operands)
                .chain([&item.body])
                .any(|expr| occurs(expr, name))
        })
    }

    fn not_empty(&self, count: usize, env: &Environment) -> Result<(), Diagnostic> {
        if count > 0 {
            return Ok(());
        }
        Err(Diagnostic::new(
            format!(
                "the list of terms of {} is empty{}",
                self.owner,
                describe(env)
            ),
            self.span,
        )
        .label("no term for these indices")
        .help("let the range end at or after its start, or shorten the sweep of the claim"))
    }
}

/// The state of a walk through the values of the sweeps of an item.
struct Walk {
    scope: Environment,
    length: Option<i64>,
    budget: usize,
    tried: usize,
}

impl Walk {
    fn new(env: &Environment, length: Option<i64>, budget: usize) -> Walk {
        Walk {
            scope: env.clone(),
            length,
            budget,
            tried: 0,
        }
    }

    /// Visits the values that the conditions keep. False if the budget does not suffice.
    fn run(
        &mut self,
        item: &TermsItem,
        level: usize,
        visit: &mut dyn FnMut(&Environment) -> Result<(), Diagnostic>,
    ) -> Result<bool, Diagnostic> {
        let Some(sweep) = item.sweeps.get(level) else {
            // With sweeps, this step was counted with its range.
            if level == 0 {
                self.tried = self.tried.saturating_add(1);
                if self.tried > self.budget {
                    return Ok(false);
                }
            }
            for condition in &item.conditions {
                if !condition_holds(condition, &self.scope)? {
                    return Ok(true);
                }
            }
            visit(&self.scope)?;
            return Ok(true);
        };
        let start = index_value(&sweep.start, &self.scope)?;
        let end = match (&sweep.end, self.length) {
            (Some(end), _) => index_value(end, &self.scope)?,
            (None, Some(length)) => start.saturating_add(length).saturating_sub(1),
            (None, None) => {
                return Err(Diagnostic::new("this range has no end", sweep.span)
                    .help("the length of the form must be chosen before the terms are listed"));
            }
        };
        // Counted before it is run through, so that a long range costs nothing.
        self.tried = self.tried.saturating_add(1);
        if end >= start {
            let width = usize::try_from(end.abs_diff(start)).unwrap_or(usize::MAX);
            self.tried = self.tried.saturating_add(width);
        }
        if self.tried > self.budget {
            return Ok(false);
        }
        let (slot, _) = self.scope.insert_full(sweep.variable.clone(), start);
        for value in start..=end {
            self.scope[slot] = value;
            if !self.run(item, level + 1, visit)? {
                return Ok(false);
            }
        }
        self.scope.shift_remove(&sweep.variable);
        Ok(true)
    }
}
