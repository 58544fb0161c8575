//! Running a prepared spec: definitions are evaluated, claims decided, findings proved and recorded.

use crate::matching::{self, Match, Solved};
use crate::polynomials::{EvaluationError, Forms, RingArithmetic, ring_of};
use crate::prepare::{Instance, Prepared, TermList};
use crate::program::{NodeId, Operation};
use crate::publish::Publisher;
use crate::record::{
    ClaimRecord, CoefficientKind, Finding, GradingRecord, KnownBy, PrimitiveRecord, ResultRecord,
    StopKind, SystemRecord, Unsettled, Verdict,
};
use crate::strategy::{Method, Solver};
use linform_ring::{Polynomial, Ring};
use linform_scalar::{Control, Stop};
use linform_spec::Coefficients;
use std::sync::OnceLock;
use std::sync::atomic::{AtomicUsize, Ordering};

/// What the user may choose.
#[derive(Clone, Copy, Debug, Default)]
pub struct Options {
    /// How claims are decided.
    pub method: Method,
    /// How systems are solved.
    pub solver: Solver,
}

/// Is told how far the work is.
pub trait Observer: Sync {
    /// A definition was evaluated: `done` of `total`.
    fn evaluated(&self, done: usize, total: usize);
    /// A claim was decided: `done` of `total`.
    fn decided(&self, done: usize, total: usize);
}

/// Does not look.
#[derive(Clone, Copy, Debug, Default)]
pub struct Silent;

impl Observer for Silent {
    fn evaluated(&self, _done: usize, _total: usize) {}
    fn decided(&self, _done: usize, _total: usize) {}
}

/// Decides the claim instances of a spec, those that `wanted` admits.
///
/// Instances are decided in parallel on the current thread pool; the record does not depend on the number of threads.
/// An element that outgrows its bounds leaves the claims that need it unsettled and no others. When `control` ends the
/// work, what was decided is kept and the rest is unsettled.
pub fn solve(
    prepared: &Prepared,
    wanted: &[bool],
    options: Options,
    control: &dyn Control,
    observer: &dyn Observer,
) -> ResultRecord {
    Run::new(prepared, wanted, options, control, observer).finish()
}

/// The value of a node, or why it has none.
type Value = Result<Polynomial, EvaluationError>;

/// What is found, each thing written once: one thread evaluates definitions while others decide the claims that are ready.
struct Found {
    values: Vec<OnceLock<Value>>,
    forms: Forms,
    records: Vec<OnceLock<ClaimRecord>>,
    /// The number of claims decided so far.
    decided: AtomicUsize,
}

impl Found {
    fn new(prepared: &Prepared) -> Found {
        fn empty<T>(length: usize) -> Vec<OnceLock<T>> {
            std::iter::repeat_with(OnceLock::new).take(length).collect()
        }
        Found {
            values: empty(prepared.program.len()),
            forms: Forms {
                primitives: empty(prepared.program.primitives().len()),
                claims: empty(prepared.instances.len()),
                titles: prepared.instances.iter().map(Instance::title).collect(),
            },
            records: empty(prepared.instances.len()),
            decided: AtomicUsize::new(0),
        }
    }

    fn value(&self, node: NodeId) -> Option<&Value> {
        self.values[node.position()].get()
    }
}

struct Run<'a> {
    prepared: &'a Prepared,
    wanted: Vec<usize>,
    options: Options,
    control: &'a dyn Control,
    observer: &'a dyn Observer,
    publisher: Publisher,
}

impl<'a> Run<'a> {
    fn new(
        prepared: &'a Prepared,
        wanted: &[bool],
        options: Options,
        control: &'a dyn Control,
        observer: &'a dyn Observer,
    ) -> Self {
        let mut needed = wanted.to_vec();
        // A wanted claim may use what earlier claims yield; those are decided as well.
        for position in (0..prepared.instances.len()).rev() {
            if needed[position] {
                for claim in yielding_claims(prepared, &roots_of(&prepared.instances[position])) {
                    needed[claim] = true;
                }
            }
        }
        let wanted = (0..prepared.instances.len())
            .filter(|&position| needed[position])
            .collect();
        let publisher = Publisher::new(prepared);
        Run {
            prepared,
            wanted,
            options,
            control,
            observer,
            publisher,
        }
    }

    fn finish(self) -> ResultRecord {
        let found = Found::new(self.prepared);
        let gradings = match ring_of(self.prepared, self.control) {
            Ok(ring) => {
                self.decide_all(&ring, &found);
                self.gradings(&ring, &found)
            }
            Err(error) => {
                for &position in &self.wanted {
                    let _ =
                        found.records[position].set(self.undecided(position, unsettled(&error)));
                }
                Vec::new()
            }
        };
        let primitives = found.forms.primitives.iter().filter_map(OnceLock::get);
        let primitives = primitives.filter_map(|solution| {
            let Match::Holds(coefficients) = &solution.solved.matched else {
                return None;
            };
            Some(PrimitiveRecord {
                element: solution.element.clone(),
                system: system_record(&solution.solved),
                form: self.publisher.form(&solution.terms, coefficients),
            })
        });
        ResultRecord {
            program: concat!("linform ", env!("CARGO_PKG_VERSION")).to_owned(),
            spec: crate::source::spec_record(&self.prepared.model, self.prepared.through),
            gradings,
            primitives: primitives.collect(),
            claims: found
                .records
                .into_iter()
                .filter_map(OnceLock::into_inner)
                .collect(),
        }
    }

    /// Evaluates on this thread and decides on the thread pool. A claim that uses the coefficients of earlier ones waits
    /// until those are decided.
    fn decide_all(&self, ring: &Ring, found: &Found) {
        let program = &self.prepared.program;
        let all: Vec<NodeId> = self
            .wanted
            .iter()
            .flat_map(|&position| roots_of(&self.prepared.instances[position]))
            .collect();
        let total = program.needed_for(&all).len();
        let mut evaluated = 0;
        let mut rest = self.wanted.iter().copied().peekable();
        while rest.peek().is_some() {
            rayon::in_place_scope(|scope| {
                while let Some(&position) = rest.peek() {
                    if let Err(stop) = self.control.proceed() {
                        self.leave(rest.by_ref(), stop, found);
                        return;
                    }
                    let roots = roots_of(&self.prepared.instances[position]);
                    let open = |claim: usize| found.records[claim].get().is_none();
                    if yielding_claims(self.prepared, &roots).into_iter().any(open) {
                        break;
                    }
                    evaluated += self.evaluate(ring, &roots, found, evaluated, total);
                    rest.next();
                    scope.spawn(move |_| self.decide_into(ring, position, found));
                }
            });
        }
    }

    /// Records the rest as unsettled.
    fn leave(&self, rest: impl Iterator<Item = usize>, stop: Stop, found: &Found) {
        let finding = unsettled(&stop.into());
        for position in rest {
            let _ = found.records[position].set(self.undecided(position, finding.clone()));
        }
    }

    fn decide_into(&self, ring: &Ring, position: usize, found: &Found) {
        let (record, coefficients) = self.decide(ring, position, found);
        if let Some(coefficients) = coefficients {
            let _ = found.forms.claims[position].set(coefficients);
        }
        let _ = found.records[position].set(record);
        let done = found.decided.fetch_add(1, Ordering::Relaxed) + 1;
        self.observer.decided(done, self.wanted.len());
    }

    /// The gradings for which every law's `V₁` and `V₂` are homogeneous, and with them all `F^(n)/F`.
    fn gradings(&self, ring: &Ring, found: &Found) -> Vec<GradingRecord> {
        self.evaluate(ring, &self.prepared.laws, found, 0, 0);
        let mut homogeneous = Vec::new();
        for node in &self.prepared.laws {
            let Some(Ok(first)) = found.value(*node) else {
                return Vec::new();
            };
            let second = ring
                .derive(first, self.control)
                .and_then(|d| Ok(&d + &first.mul(first, self.control)?));
            let Ok(second) = second else {
                return Vec::new();
            };
            homogeneous.extend([first.clone(), second]);
        }
        self.publisher.gradings(ring, &homogeneous)
    }

    /// Evaluates what the roots need; a failure is kept with the node and passed to all that need it.
    fn evaluate(
        &self,
        ring: &Ring,
        roots: &[NodeId],
        found: &Found,
        done: usize,
        total: usize,
    ) -> usize {
        let program = &self.prepared.program;
        let (solver, control, forms) = (self.options.solver, self.control, &found.forms);
        let mut arithmetic = RingArithmetic {
            ring,
            solver,
            control,
            forms,
        };
        let missing = program.missing_for(roots, |node| found.value(node).is_some());
        for (step, node) in missing.iter().enumerate() {
            let mut failure = control.proceed().err().map(EvaluationError::from);
            program.operation(*node).for_each_operand(|operand| {
                if let (None, Some(Err(error))) = (&failure, found.value(operand)) {
                    failure = Some(error.clone());
                }
            });
            let value = match failure {
                Some(error) => Err(error),
                None => program.evaluate_node(&mut arithmetic, *node, &|operand: NodeId| {
                    found.value(operand).and_then(|value| value.as_ref().ok())
                }),
            };
            let _ = found.values[node.position()].set(value);
            self.observer.evaluated(done + step + 1, total);
        }
        missing.len()
    }

    fn decide(
        &self,
        ring: &Ring,
        position: usize,
        found: &Found,
    ) -> (ClaimRecord, Option<Vec<Polynomial>>) {
        let instance = &self.prepared.instances[position];
        let mut last = None;
        for list in &instance.alternatives {
            match self.decide_list(ring, instance, list, found) {
                Ok(decision) => {
                    let refuted = matches!(decision.0.finding, Finding::Refuted(_));
                    last = Some(decision);
                    if !refuted {
                        break;
                    }
                }
                // A longer list may be the one in which a primitive was sought; a limit ends all.
                Err(error) => {
                    let limit = matches!(error, EvaluationError::Stop(_));
                    last = Some((self.undecided(position, unsettled(&error)), None));
                    if limit {
                        break;
                    }
                }
            }
        }
        last.unwrap_or_else(|| {
            (
                self.undecided(position, unsettled(&Stop::SizeLimit.into())),
                None,
            )
        })
    }

    fn decide_list(
        &self,
        ring: &Ring,
        instance: &Instance,
        list: &TermList,
        found: &Found,
    ) -> Result<(ClaimRecord, Option<Vec<Polynomial>>), EvaluationError> {
        let kind = self.kind(instance);
        let value = |node: &NodeId| match found.value(*node) {
            Some(Ok(value)) => Ok(value),
            Some(Err(error)) => Err(error.clone()),
            None => Err(Stop::SizeLimit.into()),
        };
        let mut known_by = instance.known_by;
        let solved = match self.primitive_outcome(instance, list, kind, found) {
            Some(solved) => {
                known_by = KnownBy::Derivative;
                solved
            }
            None => {
                let target = value(&instance.target)?;
                let terms = list
                    .nodes
                    .iter()
                    .map(value)
                    .collect::<Result<Vec<_>, _>>()?;
                let solver = self.options.solver;
                match known_by {
                    KnownBy::Value => {
                        matching::match_value(ring, target, &terms, kind, solver, self.control)?
                    }
                    KnownBy::Derivative => matching::match_derivative(
                        ring,
                        target,
                        &terms,
                        kind,
                        solver,
                        self.control,
                    )?,
                }
            }
        };
        let mut coefficients = None;
        if let Match::Holds(solution) = &solved.matched {
            self.prove(ring, instance, list, known_by, solution, &value)?;
            coefficients = solution
                .iter()
                .map(linform_solver::Fraction::is_polynomial)
                .collect();
        }
        let finding = self.publisher.finding(&list.texts, &solved.matched);
        let record = ClaimRecord {
            known_by,
            system: Some(system_record(&solved)),
            terms: list.texts.clone(),
            ..self.record(instance, finding)
        };
        Ok((record, coefficients))
    }

    /// The outcome of the primitive step, if the target is an element known through its derivative and the claim offers
    /// exactly the terms in which its form was sought: then nothing has to be solved twice.
    fn primitive_outcome(
        &self,
        instance: &Instance,
        list: &TermList,
        kind: CoefficientKind,
        found: &Found,
    ) -> Option<Solved> {
        let Operation::Primitive {
            primitive, terms, ..
        } = self.prepared.program.operation(instance.target)
        else {
            return None;
        };
        if *terms != list.nodes
            || kind == CoefficientKind::Constant
            || instance.known_by == KnownBy::Derivative
        {
            return None;
        }
        if let Some(solution) = found.forms.primitives[*primitive].get() {
            return Some(solution.solved.clone());
        }
        match found.value(instance.target) {
            Some(Err(EvaluationError::Primitive {
                element, solved, ..
            })) if *element == self.prepared.program.primitives()[*primitive].name => {
                Some(solved.for_kind(kind))
            }
            _ => None,
        }
    }

    /// Substitutes the form and expands both sides; the solver's own checks took the system's rows, this takes the elements.
    fn prove<'v>(
        &self,
        ring: &Ring,
        instance: &Instance,
        list: &TermList,
        known_by: KnownBy,
        coefficients: &[linform_solver::Fraction],
        value: &impl Fn(&NodeId) -> Result<&'v Polynomial, EvaluationError>,
    ) -> Result<(), EvaluationError> {
        let terms = list
            .nodes
            .iter()
            .map(value)
            .collect::<Result<Vec<_>, _>>()?;
        let (target, by_derivative) = match self.prepared.program.operation(instance.target) {
            Operation::Primitive { derivative, .. } if known_by == KnownBy::Derivative => {
                (value(derivative)?, true)
            }
            _ => (value(&instance.target)?, known_by == KnownBy::Derivative),
        };
        let holds = matching::substitution_holds(
            ring,
            target,
            by_derivative,
            coefficients,
            &terms,
            self.control,
        )?;
        if holds {
            Ok(())
        } else {
            Err(EvaluationError::Unproved(instance.title()))
        }
    }

    fn kind(&self, instance: &Instance) -> CoefficientKind {
        match self.prepared.model.claims[instance.claim].coefficients {
            Coefficients::Polynomial => CoefficientKind::Polynomial,
            Coefficients::Rational => CoefficientKind::Rational,
            Coefficients::Constant => CoefficientKind::Constant,
        }
    }

    fn undecided(&self, position: usize, finding: Finding) -> ClaimRecord {
        self.record(&self.prepared.instances[position], finding)
    }

    fn record(&self, instance: &Instance, finding: Finding) -> ClaimRecord {
        ClaimRecord {
            name: instance.name.clone(),
            index: instance.index.clone(),
            target: instance.target_text.clone(),
            known_by: instance.known_by,
            terms: instance
                .alternatives
                .last()
                .map(|list| list.texts.clone())
                .unwrap_or_default(),
            coefficients: self.kind(instance),
            expected: expected(self.prepared, instance),
            system: None,
            finding,
        }
    }
}

/// The verdict that the spec expects of an instance.
pub(crate) fn expected(prepared: &Prepared, instance: &Instance) -> Verdict {
    match prepared.model.claims[instance.claim].expect {
        linform_spec::Verdict::Holds => Verdict::Holds,
        linform_spec::Verdict::Refuted => Verdict::Refuted,
        linform_spec::Verdict::Undetermined => Verdict::Undetermined,
        linform_spec::Verdict::Unsettled => Verdict::Unsettled,
    }
}

fn system_record(solved: &Solved) -> SystemRecord {
    SystemRecord {
        method: "matching".to_owned(),
        solver: solved.solver.to_owned(),
        rows: solved.rows,
        columns: solved.columns,
    }
}

fn roots_of(instance: &Instance) -> Vec<NodeId> {
    let terms = instance
        .alternatives
        .iter()
        .flat_map(|list| list.nodes.iter().copied());
    std::iter::once(instance.target).chain(terms).collect()
}

/// The claims whose coefficients the roots use.
fn yielding_claims(prepared: &Prepared, roots: &[NodeId]) -> Vec<usize> {
    if prepared.program.yielded().is_empty() {
        return Vec::new();
    }
    let needed = prepared.program.needed_for(roots);
    let mut claims: Vec<usize> = needed
        .iter()
        .filter_map(|node| match prepared.program.operation(*node) {
            Operation::Yielded { yielded, .. } => Some(prepared.program.yielded()[*yielded].claim),
            _ => None,
        })
        .collect();
    claims.sort_unstable();
    claims.dedup();
    claims
}

/// Why a claim has no verdict, and what would settle it.
fn unsettled(error: &EvaluationError) -> Finding {
    let (stop, reason) = match error {
        EvaluationError::Stop(stop) => {
            let remedy = match stop {
                Stop::TimeLimit => "give more time with --time-limit",
                Stop::MemoryLimit => "give more memory with --memory-limit",
                Stop::Interrupted => "run the command again",
                _ => {
                    "ask for smaller indices or exponents: the expressions have more terms or higher powers than the program takes"
                }
            };
            (StopKind::from(*stop), format!("{stop}; {remedy}"))
        }
        EvaluationError::Primitive {
            element, reason, ..
        } => (
            StopKind::Prerequisite,
            format!(
                "`{element}` has no form: {reason}; state a claim about `{element}` to see the certificate"
            ),
        ),
        EvaluationError::Prerequisite { element, claim } => (
            StopKind::Prerequisite,
            format!(
                "`{element}` is defined by the coefficients of claim {claim}, which does not hold with polynomial coefficients"
            ),
        ),
        EvaluationError::Unproved(claim) => (
            StopKind::Prerequisite,
            format!(
                "the form found for {claim} failed its proof by substitution: please report this as a defect"
            ),
        ),
    };
    Finding::Unsettled(Unsettled { stop, reason })
}
