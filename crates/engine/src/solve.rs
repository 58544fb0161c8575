//! Running a prepared spec: definitions are evaluated, claims decided, findings proved and recorded.

use crate::matching::{self, Match, Solved};
use crate::polynomials::{EvaluationError, RingArithmetic, ring_of};
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
use rayon::prelude::*;

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

struct Run<'a> {
    prepared: &'a Prepared,
    wanted: Vec<usize>,
    options: Options,
    control: &'a dyn Control,
    observer: &'a dyn Observer,
    publisher: Publisher,
    decided: Vec<Option<ClaimRecord>>,
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
        for position in (0..prepared.instances.len())
            .rev()
            .filter(|&position| wanted[position])
        {
            for claim in yielding_claims(prepared, &roots_of(&prepared.instances[position])) {
                needed[claim] = true;
            }
        }
        let wanted = (0..prepared.instances.len())
            .filter(|&position| needed[position])
            .collect();
        let decided = vec![None; prepared.instances.len()];
        let publisher = Publisher::new(prepared);
        Run {
            prepared,
            wanted,
            options,
            control,
            observer,
            publisher,
            decided,
        }
    }

    fn finish(mut self) -> ResultRecord {
        let (gradings, primitives) = match ring_of(self.prepared, self.control) {
            Ok(ring) => self.decide_all(&ring),
            Err(error) => {
                let finding = unsettled(&error);
                for position in self.wanted.clone() {
                    self.decided[position] = Some(self.undecided(position, finding.clone()));
                }
                (Vec::new(), Vec::new())
            }
        };
        ResultRecord {
            program: concat!("linform ", env!("CARGO_PKG_VERSION")).to_owned(),
            spec: crate::source::spec_record(&self.prepared.model),
            gradings,
            primitives,
            claims: self.decided.into_iter().flatten().collect(),
        }
    }

    fn decide_all(&mut self, ring: &Ring) -> (Vec<GradingRecord>, Vec<PrimitiveRecord>) {
        let prepared = self.prepared;
        let mut arithmetic = RingArithmetic {
            ring,
            solver: self.options.solver,
            control: self.control,
            primitives: vec![None; prepared.program.primitives().len()],
            claims: prepared
                .instances
                .iter()
                .map(|instance| (instance.title(), None))
                .collect(),
        };
        let mut values: Vec<Option<Value>> = vec![None; prepared.program.len()];
        let roots: Vec<NodeId> = self
            .wanted
            .iter()
            .flat_map(|&position| roots_of(&prepared.instances[position]))
            .collect();
        let needed = prepared.program.needed_for(&roots);
        let mut queue: Vec<usize> = Vec::new();
        let mut evaluated = 0;
        for position in self.wanted.clone() {
            let roots = roots_of(&prepared.instances[position]);
            let open = |claim: usize| self.decided[claim].is_none();
            if yielding_claims(prepared, &roots).into_iter().any(open) {
                self.decide_queue(ring, &mut queue, &values, &mut arithmetic);
            }
            evaluated += self.evaluate(
                &roots,
                &mut arithmetic,
                &mut values,
                evaluated,
                needed.len(),
            );
            queue.push(position);
        }
        self.decide_queue(ring, &mut queue, &values, &mut arithmetic);
        let gradings = self.gradings(ring, &mut arithmetic, &mut values);
        let primitives = arithmetic.primitives.iter().flatten();
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
        (gradings, primitives.collect())
    }

    /// The gradings for which every law's `V₁` and `V₂` are homogeneous, and with them all `F^(n)/F`.
    fn gradings(
        &self,
        ring: &Ring,
        arithmetic: &mut RingArithmetic<'_>,
        values: &mut [Option<Value>],
    ) -> Vec<GradingRecord> {
        self.evaluate(&self.prepared.laws, arithmetic, values, 0, 0);
        let mut homogeneous = Vec::new();
        for node in &self.prepared.laws {
            let Some(Ok(first)) = &values[node.position()] else {
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
        roots: &[NodeId],
        arithmetic: &mut RingArithmetic<'_>,
        values: &mut [Option<Value>],
        done: usize,
        total: usize,
    ) -> usize {
        let program = &self.prepared.program;
        let missing = program.missing_for(roots, values);
        for (step, node) in missing.iter().enumerate() {
            let mut failure = self.control.proceed().err().map(EvaluationError::from);
            program.operation(*node).for_each_operand(|operand| {
                if let (None, Some(Err(error))) = (&failure, &values[operand.position()]) {
                    failure = Some(error.clone());
                }
            });
            let value = match failure {
                Some(error) => Err(error),
                None => program.evaluate_node(arithmetic, *node, &|operand: NodeId| {
                    values[operand.position()]
                        .as_ref()
                        .and_then(|value| value.as_ref().ok())
                }),
            };
            values[node.position()] = Some(value);
            self.observer.evaluated(done + step + 1, total);
        }
        missing.len()
    }

    fn decide_queue(
        &mut self,
        ring: &Ring,
        queue: &mut Vec<usize>,
        values: &[Option<Value>],
        arithmetic: &mut RingArithmetic<'_>,
    ) {
        let before = self.decided.iter().flatten().count();
        let finished = std::sync::atomic::AtomicUsize::new(before);
        let known = &*arithmetic;
        let results: Vec<(usize, ClaimRecord, Option<Vec<Polynomial>>)> = queue
            .par_iter()
            .map(|&position| {
                let (record, coefficients) = self.decide(ring, position, values, known);
                let done = finished.fetch_add(1, std::sync::atomic::Ordering::Relaxed) + 1;
                self.observer.decided(done, self.wanted.len());
                (position, record, coefficients)
            })
            .collect();
        queue.clear();
        for (position, record, coefficients) in results {
            self.decided[position] = Some(record);
            arithmetic.claims[position].1 = coefficients;
        }
    }

    fn decide(
        &self,
        ring: &Ring,
        position: usize,
        values: &[Option<Value>],
        arithmetic: &RingArithmetic<'_>,
    ) -> (ClaimRecord, Option<Vec<Polynomial>>) {
        let instance = &self.prepared.instances[position];
        let mut last = None;
        for list in &instance.alternatives {
            match self.decide_list(ring, instance, list, values, arithmetic) {
                Ok(decision) => {
                    let refuted = matches!(decision.0.finding, Finding::Refuted(_));
                    last = Some(decision);
                    if !refuted {
                        break;
                    }
                }
                Err(error) => {
                    last = Some((self.undecided(position, unsettled(&error)), None));
                    break;
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
        values: &[Option<Value>],
        arithmetic: &RingArithmetic<'_>,
    ) -> Result<(ClaimRecord, Option<Vec<Polynomial>>), EvaluationError> {
        let kind = self.kind(instance);
        let value = |node: &NodeId| match &values[node.position()] {
            Some(Ok(value)) => Ok(value),
            Some(Err(error)) => Err(error.clone()),
            None => Err(Stop::SizeLimit.into()),
        };
        let mut known_by = instance.known_by;
        let solved = match self.primitive_outcome(instance, list, kind, values, arithmetic) {
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
        if let Match::Holds(found) = &solved.matched {
            self.prove(ring, instance, list, known_by, found, &value)?;
            coefficients = found
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
        values: &[Option<Value>],
        arithmetic: &RingArithmetic<'_>,
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
        if let Some(solution) = &arithmetic.primitives[*primitive] {
            return Some(solution.solved.clone());
        }
        match &values[instance.target.position()] {
            Some(Err(EvaluationError::Primitive {
                element, solved, ..
            })) if *element == self.prepared.program.primitives()[*primitive].name => {
                Some((**solved).clone())
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
                "`{element}` is defined by the coefficients of claim {claim}, which does not hold"
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
