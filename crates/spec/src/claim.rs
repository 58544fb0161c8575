//! Claims and the instances of their sweeps.

use crate::expression::{Condition, Expr, Sweep};
use crate::family::Pattern;
use crate::index::{Environment, condition_holds, index_value};
use crate::source::{Diagnostic, Span};
use crate::terms::Terms;

/// A statement: the target is a linear form in the terms.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Claim {
    /// The name, unique in the file.
    pub name: String,
    /// The sweeps, the first outermost.
    pub sweeps: Vec<Sweep>,
    /// Which combinations of the indices are kept; all must hold.
    pub conditions: Vec<Condition>,
    /// What is claimed to be a linear form.
    pub target: Target,
    /// In what.
    pub terms: Terms,
    /// What the coefficients may be.
    pub coefficients: Coefficients,
    /// The verdict that the author expects.
    pub expect: Verdict,
    /// Family elements defined by the coefficients once found.
    pub yields: Vec<Yield>,
    /// The largest length of an open list of terms.
    pub at_most: Option<i64>,
    /// The largest degree of a coefficient in the variable (claims about numbers).
    pub degree: Option<i64>,
    /// The weight of the target in a grading of the ring (claims about numbers).
    pub weight: Option<i64>,
    /// Where it is declared.
    pub span: Span,
}

/// What a claim is about.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Target {
    /// An element of the ring.
    Value(Expr),
    /// An element known only through its derivative, which lies in the ring.
    Derivative(Expr),
    /// Numbers in a file.
    Data {
        /// The file, relative to the spec.
        path: String,
        /// Where the path stands.
        path_span: Span,
        /// The column that holds the variable.
        at: String,
        /// The column that holds the target.
        value: String,
        /// The column that holds absolute errors of the target.
        error: Option<String>,
    },
}

/// What coefficients may be.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Hash)]
pub enum Coefficients {
    /// Polynomials in the variable.
    #[default]
    Polynomial,
    /// Rational functions of the variable.
    Rational,
    /// Constants.
    Constant,
}

/// How a claim can end.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Hash)]
pub enum Verdict {
    /// There is exactly one linear form.
    #[default]
    Holds,
    /// There is none.
    Refuted,
    /// There is a family of them.
    Undetermined,
    /// A limit was hit, or the data are too poor.
    Unsettled,
}

impl Coefficients {
    /// Every kind with its name in a spec.
    pub const ALL: [(&'static str, Coefficients); 3] = [
        ("polynomial", Coefficients::Polynomial),
        ("rational", Coefficients::Rational),
        ("constant", Coefficients::Constant),
    ];

    /// The name in a spec.
    pub fn name(self) -> &'static str {
        match self {
            Coefficients::Polynomial => "polynomial",
            Coefficients::Rational => "rational",
            Coefficients::Constant => "constant",
        }
    }
}

impl Verdict {
    /// Every verdict with its name.
    pub const ALL: [(&'static str, Verdict); 4] = [
        ("holds", Verdict::Holds),
        ("refuted", Verdict::Refuted),
        ("undetermined", Verdict::Undetermined),
        ("unsettled", Verdict::Unsettled),
    ];

    /// The name in specs and results.
    pub fn name(self) -> &'static str {
        match self {
            Verdict::Holds => "holds",
            Verdict::Refuted => "refuted",
            Verdict::Undetermined => "undetermined",
            Verdict::Unsettled => "unsettled",
        }
    }
}

/// A family element defined by the coefficients of a claim: Σ (coefficient) × (term of this list).
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Yield {
    /// The family.
    pub family: String,
    /// Its indices: numbers and index variables of the claim.
    pub pattern: Vec<Pattern>,
    /// Where each of them stands.
    pub pattern_spans: Vec<Span>,
    /// The terms that take the coefficients, as many as the claim has.
    pub terms: Terms,
    /// Where it is declared.
    pub span: Span,
}

impl Claim {
    /// Has one of the sweeps no end?
    pub fn is_open(&self) -> bool {
        self.sweeps.iter().any(|sweep| sweep.end.is_none())
    }

    /// All values of the indices, in lexicographic order; one empty environment for a claim without sweep.
    ///
    /// `through` bounds the sum of the indices of a claim with an open sweep, and no others.
    ///
    /// # Errors
    ///
    /// If there is no instance, if there are more than `limit` (or more than four times as many combinations
    /// have to be tried against the conditions), if a sweep is open and `through` is missing, or if a bound
    /// cannot be evaluated.
    ///
    /// # Complexity
    ///
    /// Linear in the combinations tried; a sweep that is too long is refused before it is run through.
    pub fn instances(
        &self,
        through: Option<i64>,
        limit: usize,
    ) -> Result<Vec<Environment>, Diagnostic> {
        // Counted first, so that a sweep that is too long takes no memory.
        let budget = limit.saturating_mul(4);
        let through = through.filter(|_| self.is_open());
        let mut found = Vec::new();
        let mut count = Walk::new(self, through, limit, budget);
        count
            .run(0, &mut |_| {})
            .and_then(|()| {
                found.reserve_exact(count.found);
                Walk::new(self, through, limit, budget).run(0, &mut |env| found.push(env.clone()))
            })
            .map_err(|stop| stop.into_diagnostic(self, limit))?;
        self.not_empty(found)
    }

    /// The instances of a closed claim, or nothing if finding them takes more than `budget` steps.
    pub(crate) fn instances_within(
        &self,
        budget: usize,
    ) -> Result<Option<Vec<Environment>>, Diagnostic> {
        let mut found = Vec::new();
        match Walk::new(self, None, budget, budget).run(0, &mut |env| found.push(env.clone())) {
            Ok(()) => self.not_empty(found).map(Some),
            Err(WalkStop::TooMany(_)) => Ok(None),
            Err(WalkStop::Wrong(diagnostic)) => Err(diagnostic),
        }
    }

    fn not_empty(&self, found: Vec<Environment>) -> Result<Vec<Environment>, Diagnostic> {
        if found.is_empty() {
            return Err(Diagnostic::new(
                format!("the sweep of claim `{}` is empty", self.name),
                self.sweep_span(),
            )
            .label("no values of the indices are left")
            .help("let every range end at or after its start, and check the conditions"));
        }
        Ok(found)
    }

    /// Where the sweeps stand, or the claim if it has none.
    pub(crate) fn sweep_span(&self) -> Span {
        match (self.sweeps.first(), self.sweeps.last()) {
            (Some(first), Some(last)) => first.span.to(last.span),
            _ => self.span,
        }
    }
}

/// The state of a walk through the instances.
struct Walk<'a> {
    claim: &'a Claim,
    through: Option<i64>,
    /// The most instances.
    limit: usize,
    /// The most values of indices tried.
    budget: usize,
    tried: usize,
    found: usize,
    scope: Environment,
}

/// Why a walk ended early.
enum WalkStop {
    TooMany(Span),
    Wrong(Diagnostic),
}

impl From<Diagnostic> for WalkStop {
    fn from(diagnostic: Diagnostic) -> WalkStop {
        WalkStop::Wrong(diagnostic)
    }
}

impl WalkStop {
    fn into_diagnostic(self, claim: &Claim, limit: usize) -> Diagnostic {
        match self {
            WalkStop::Wrong(diagnostic) => diagnostic,
            WalkStop::TooMany(span) => Diagnostic::new(
                format!(
                    "the sweep of claim `{}` has more than {limit} instances",
                    claim.name
                ),
                span,
            )
            .help("shorten the ranges, or split the claim"),
        }
    }
}

impl<'a> Walk<'a> {
    fn new(claim: &'a Claim, through: Option<i64>, limit: usize, budget: usize) -> Walk<'a> {
        Walk {
            claim,
            through,
            limit,
            budget,
            tried: 0,
            found: 0,
            scope: Environment::new(),
        }
    }

    fn run(&mut self, level: usize, visit: &mut dyn FnMut(&Environment)) -> Result<(), WalkStop> {
        let claim = self.claim;
        let Some(sweep) = claim.sweeps.get(level) else {
            return self.arrive(visit);
        };
        let start = index_value(&sweep.start, &self.scope)?;
        let end = match (&sweep.end, self.through) {
            (Some(end), _) => index_value(end, &self.scope)?,
            (None, Some(through)) => self.last_of_open(level, through),
            (None, None) => {
                return Err(WalkStop::Wrong(
                    Diagnostic::new(
                        format!("the sweep of claim `{}` has no end", claim.name),
                        sweep.span,
                    )
                    .help("an open sweep is a table: say how far to take it with `--through N`"),
                ));
            }
        };
        // Counted before it is run through, so that a long range costs nothing.
        self.tried = self.tried.saturating_add(1);
        if end >= start {
            let width = usize::try_from(end.abs_diff(start)).unwrap_or(usize::MAX);
            self.tried = self.tried.saturating_add(width);
        }
        if self.tried > self.budget {
            return Err(WalkStop::TooMany(sweep.span));
        }
        let (slot, _) = self.scope.insert_full(sweep.variable.clone(), start);
        for value in start..=end {
            self.scope[slot] = value;
            self.run(level + 1, visit)?;
        }
        self.scope.shift_remove(&sweep.variable);
        Ok(())
    }

    /// The last value that an open sweep can take: later indices count as at least their start, where that
    /// is known, since they may be negative.
    fn last_of_open(&self, level: usize, through: i64) -> i64 {
        let so_far = self
            .scope
            .values()
            .fold(0i64, |sum, v| sum.saturating_add(*v));
        let later = self.claim.sweeps[level + 1..]
            .iter()
            .filter_map(|sweep| index_value(&sweep.start, &self.scope).ok())
            .fold(0i64, |sum, start| sum.saturating_add(start.min(0)));
        through.saturating_sub(so_far).saturating_sub(later)
    }

    fn arrive(&mut self, visit: &mut dyn FnMut(&Environment)) -> Result<(), WalkStop> {
        if let Some(through) = self.through {
            let sum: i128 = self.scope.values().map(|v| i128::from(*v)).sum();
            if sum > i128::from(through) {
                return Ok(());
            }
        }
        for condition in &self.claim.conditions {
            if !condition_holds(condition, &self.scope)? {
                return Ok(());
            }
        }
        if self.found == self.limit {
            return Err(WalkStop::TooMany(self.claim.sweep_span()));
        }
        self.found += 1;
        visit(&self.scope);
        Ok(())
    }
}
