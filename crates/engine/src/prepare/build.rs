//! The builder that turns expressions into nodes.

use super::{Instance, PrepareLimits, Prepared, TermList};
use crate::program::{NodeId, Operation, Program};
use crate::record::KnownBy;
use linform_scalar::{Control, Stop};
use linform_spec::{
    Claim, Diagnostic, Environment, Expr, Label, Model, Span, Target, Terms, substitute, text_of,
};
use rustc_hash::FxHashMap;
use std::fmt::Display;

/// The largest number of lengths that are tried for an open range of terms.
const MOST_LENGTHS: i64 = 500;

/// Marks a definition whose mistake has been reported already.
#[derive(Clone, Copy, Debug)]
pub(super) struct Reported;

pub(super) type Built<T = NodeId> = Result<T, Reported>;

/// A family element: the family's name and canonical indices.
pub(super) type ElementKey = (String, Vec<i64>);

/// What is known of a family element.
#[derive(Clone, Copy, Debug)]
pub(super) enum ElementState {
    /// Its definition is being built; meeting it again means a circle.
    Open,
    /// Its node.
    Done(NodeId),
    /// Its definition is wrong, and that was reported.
    Wrong,
}

pub(super) struct Builder<'m> {
    pub(super) model: &'m Model,
    pub(super) limits: PrepareLimits,
    control: &'m dyn Control,
    steps: usize,
    stopped: Option<Stop>,
    pub(super) program: Program,
    pub(super) symbols: Vec<String>,
    pub(super) elements: FxHashMap<ElementKey, ElementState>,
    /// The elements whose definitions are open, with the places that asked for them.
    pub(super) stack: Vec<(ElementKey, Span)>,
    pub(super) laws: Vec<Option<NodeId>>,
    pub(super) instances: Vec<Instance>,
    pub(super) diagnostics: Vec<Diagnostic>,
}

/// What a successful build gives.
pub(super) struct Output {
    symbols: Vec<String>,
    derivatives: Vec<NodeId>,
    laws: Vec<NodeId>,
    program: Program,
    instances: Vec<Instance>,
}

impl Output {
    pub(super) fn into_prepared(self, model: Model, through: Option<i64>) -> Prepared {
        let Output {
            symbols,
            derivatives,
            laws,
            program,
            instances,
        } = self;
        Prepared {
            model,
            through,
            symbols,
            derivatives,
            laws,
            program,
            instances,
        }
    }
}

/// Why nothing was built.
pub(super) enum Unbuilt {
    Mistakes(Vec<Diagnostic>),
    Stopped(Stop),
}

/// A failure without a place in the spec.
pub(super) fn plain_failure(message: String) -> Diagnostic {
    Diagnostic {
        message,
        labels: Vec::new(),
        help: None,
    }
}

impl<'m> Builder<'m> {
    pub(super) fn new(model: &'m Model, limits: PrepareLimits, control: &'m dyn Control) -> Self {
        let ring = &model.ring;
        let symbols = ring
            .generators
            .iter()
            .chain(&ring.variable)
            .chain(&ring.constants)
            .cloned()
            .collect();
        Builder {
            model,
            limits,
            control,
            steps: 0,
            stopped: None,
            program: Program::default(),
            symbols,
            elements: FxHashMap::default(),
            stack: Vec::new(),
            laws: vec![None; model.laws.len()],
            instances: Vec::new(),
            diagnostics: Vec::new(),
        }
    }

    pub(super) fn run(mut self, through: Option<i64>) -> Result<Output, Unbuilt> {
        let model = self.model;
        let derivatives: Vec<Built> = model
            .ring
            .derivatives
            .iter()
            .map(|expression| self.closed(expression))
            .collect();
        let laws: Vec<Built> = (0..model.laws.len())
            .map(|law| self.logarithmic_derivative(law))
            .collect();
        for (position, claim) in model.claims.iter().enumerate() {
            // Every instance is tried even after a mistake in another, so that one run shows all mistakes.
            let _ = self.claim(position, claim, through);
            if self.stopped.is_some() || self.steps > self.limits.steps {
                break;
            }
            if self.program.len() > self.limits.nodes
                || self.instances.len() > self.limits.instances
            {
                self.report_size(claim);
                break;
            }
        }
        if let Some(stop) = self.stopped {
            return Err(Unbuilt::Stopped(stop));
        }
        if !self.diagnostics.is_empty() {
            return Err(Unbuilt::Mistakes(self.diagnostics));
        }
        let (Ok(derivatives), Ok(laws)) = (
            derivatives.into_iter().collect::<Built<_>>(),
            laws.into_iter().collect::<Built<_>>(),
        ) else {
            return Err(Unbuilt::Mistakes(self.diagnostics));
        };
        let (symbols, program, instances) = (self.symbols, self.program, self.instances);
        Ok(Output {
            symbols,
            derivatives,
            laws,
            program,
            instances,
        })
    }

    /// Counts a visited expression, and asks from time to time whether the work may go on.
    pub(super) fn step(&mut self, span: &Span) -> Built<()> {
        const PERIOD: usize = 1 << 12;
        self.steps += 1;
        if self.stopped.is_some() {
            return Err(Reported);
        }
        if self.steps.is_multiple_of(PERIOD)
            && let Err(stop) = self.control.proceed()
        {
            self.stopped = Some(stop);
            return Err(Reported);
        }
        if self.steps > self.limits.steps {
            if self.steps == self.limits.steps + 1 {
                let message = format!(
                    "the definitions unfold to more than {} expressions",
                    self.limits.steps
                );
                let help = "let sums and sweeps run over fewer indices".to_owned();
                self.report(message, *span, "the limit was passed here", Some(help));
            }
            return Err(Reported);
        }
        Ok(())
    }

    fn report_size(&mut self, claim: &Claim) {
        let (nodes, instances) = (self.program.len(), self.instances.len());
        self.report(
            format!("the claims unfold to {instances} instances and {nodes} definitions, more than the program takes"),
            claim.span,
            "while unfolding this claim",
            Some("let the sweep run over fewer indices".to_owned()),
        );
    }

    /// Records a mistake.
    pub(super) fn report(
        &mut self,
        message: impl Display,
        span: Span,
        label: &str,
        help: Option<String>,
    ) -> Reported {
        const MOST: usize = 100;
        let message = message.to_string();
        // A mistake that shows at every index is told once.
        let known = self.diagnostics.iter().any(|diagnostic| {
            diagnostic.message == message
                && diagnostic
                    .labels
                    .first()
                    .is_some_and(|label| label.span == span)
        });
        if self.diagnostics.len() < MOST && !known {
            let labels = vec![Label {
                span,
                text: label.to_owned(),
            }];
            self.diagnostics.push(Diagnostic {
                message,
                labels,
                help,
            });
        }
        Reported
    }

    /// Passes on a mistake that the spec crate found.
    pub(super) fn pass<T>(&mut self, result: Result<T, Diagnostic>) -> Built<T> {
        result.map_err(|diagnostic| {
            if !self.diagnostics.contains(&diagnostic) {
                self.diagnostics.push(diagnostic);
            }
            Reported
        })
    }

    fn claim(&mut self, position: usize, claim: &Claim, through: Option<i64>) -> Built<()> {
        let (expression, known_by) = match &claim.target {
            Target::Value(expression) => (expression, KnownBy::Value),
            Target::Derivative(expression) => (expression, KnownBy::Derivative),
            Target::Data { .. } => {
                let help = "give the claim a `target` or a `derivative` in the ring";
                let message = format!(
                    "claim `{}` is about data, which this version does not decide",
                    claim.name
                );
                return Err(self.report(message, claim.span, "this claim", Some(help.to_owned())));
            }
        };
        let instances = claim.instances(through, self.limits.instances);
        for index in self.pass(instances)? {
            if self.program.len() > self.limits.nodes
                || self.instances.len() > self.limits.instances
                || self.stopped.is_some()
                || self.steps > self.limits.steps
            {
                return Err(Reported);
            }
            let _ = self.instance(position, claim, expression, known_by, index);
        }
        Ok(())
    }

    fn instance(
        &mut self,
        position: usize,
        claim: &Claim,
        expression: &Expr,
        known_by: KnownBy,
        index: Environment,
    ) -> Built<()> {
        let substituted = substitute(expression, &index);
        let closed = self.pass(substituted)?;
        let target = self.node_of(&closed);
        let target_text = match known_by {
            KnownBy::Value => text_of(&closed),
            KnownBy::Derivative => format!("primitive of {}", text_of(&closed)),
        };
        let alternatives = self.alternatives(claim, &index);
        let (target, alternatives) = (target?, alternatives?);
        let instance = self.instances.len();
        self.instances.push(Instance {
            claim: position,
            name: claim.name.clone(),
            index: index.clone(),
            target,
            known_by,
            target_text,
            alternatives,
        });
        self.define_yields(claim, instance, &index)
    }

    fn alternatives(&mut self, claim: &Claim, index: &Environment) -> Built<Vec<TermList>> {
        if !claim.terms.is_open() {
            return Ok(vec![self.term_list(&claim.terms, index, None)?]);
        }
        let Some(at_most) = claim.at_most else {
            let help = "add `at_most = …`, the largest length to try".to_owned();
            return Err(self.report(
                "an open range of terms needs a bound",
                claim.span,
                "this claim",
                Some(help),
            ));
        };
        if at_most > MOST_LENGTHS {
            let message =
                format!("`at_most` is {at_most}, but at most {MOST_LENGTHS} lengths are tried");
            return Err(self.report(message, claim.span, "this claim", None));
        }
        (1..=at_most)
            .map(|length| self.term_list(&claim.terms, index, Some(length)))
            .collect()
    }

    pub(super) fn term_list(
        &mut self,
        terms: &Terms,
        index: &Environment,
        length: Option<i64>,
    ) -> Built<TermList> {
        let expanded = terms.expand(index, length);
        let expressions = self.pass(expanded)?;
        let texts = expressions.iter().map(text_of).collect();
        let nodes: Vec<Built> = expressions
            .iter()
            .map(|expression| self.node_of(expression))
            .collect();
        Ok(TermList {
            nodes: nodes.into_iter().collect::<Built<_>>()?,
            texts,
        })
    }

    /// The node of an expression without index variables.
    fn closed(&mut self, expression: &Expr) -> Built {
        let substituted = substitute(expression, &Environment::default());
        let closed = self.pass(substituted)?;
        self.node_of(&closed)
    }

    pub(super) fn logarithmic_derivative(&mut self, law: usize) -> Built {
        if let Some(node) = self.laws[law] {
            return Ok(node);
        }
        let model = self.model;
        let node = self.closed(&model.laws[law].log_derivative)?;
        self.laws[law] = Some(node);
        Ok(node)
    }

    /// `F^(order)/F`.
    pub(super) fn ratio(&mut self, law: usize, order: u32) -> Built {
        if order == 0 {
            return Ok(self.one());
        }
        let logarithmic = self.logarithmic_derivative(law)?;
        let mut previous = None;
        for order in 1..=order {
            previous = Some(self.program.node(Operation::Ratio {
                law,
                order,
                logarithmic,
                previous,
            }));
        }
        previous.ok_or(Reported)
    }
}
