//! From a checked model to one program and a list of claim instances.
//!
//! Families are unfolded on demand: only the elements that a claim needs become nodes. Whatever depends on index
//! values and so escapes the checks of the spec reader is found here, with all errors of the run collected: rules that run
//! in a circle, indices that no rule covers, denominators that are 0 for some index.

mod build;
mod element;
mod expression;
mod yields;

use crate::program::{NodeId, Program};
use crate::record::KnownBy;
use linform_scalar::{Control, Stop, Unlimited};
use linform_spec::{Environment, Failure, Model};
use std::ops::Range;

/// A spec made ready for evaluation.
#[derive(Clone, Debug)]
pub struct Prepared {
    /// The checked model.
    pub model: Model,
    /// The bound on the sum of the indices of open sweeps.
    pub through: Option<i64>,
    /// The names of the symbols in the order of the ring: generators, variable, constants.
    pub symbols: Vec<String>,
    /// For each generator the node of its derivative.
    pub derivatives: Vec<NodeId>,
    /// For each law the node of its logarithmic derivative.
    pub laws: Vec<NodeId>,
    /// All definitions, targets and terms.
    pub program: Program,
    /// The claim instances, in the order of the spec.
    pub instances: Vec<Instance>,
}

impl Prepared {
    /// The number of generators.
    pub fn generators(&self) -> usize {
        self.model.ring.generators.len()
    }

    /// The index of the variable.
    pub fn variable(&self) -> Option<usize> {
        self.model
            .ring
            .variable
            .is_some()
            .then(|| self.generators())
    }

    /// The indices of the constants.
    pub fn constants(&self) -> Range<usize> {
        self.symbols.len() - self.model.ring.constants.len()..self.symbols.len()
    }
}

/// One instance of a claim.
#[derive(Clone, Debug)]
pub struct Instance {
    /// The position of the claim in the model.
    pub claim: usize,
    /// The name of the claim.
    pub name: String,
    /// The values of the sweep variables.
    pub index: Environment,
    /// The node of the target, or of its derivative if that alone is known.
    pub target: NodeId,
    /// Whether `target` is the target itself or its derivative.
    pub known_by: KnownBy,
    /// The target as the user wrote it, indices put in.
    pub target_text: String,
    /// The lists of terms to try, in this order: one list, or for an open range one for each length.
    pub alternatives: Vec<TermList>,
}

impl Instance {
    /// The name with the index: `trace[j=3,k=0]`.
    pub fn title(&self) -> String {
        title(&self.name, &self.index)
    }
}

/// A claim's name with its index: `trace[j=3,k=0]`.
pub fn title(name: &str, index: &Environment) -> String {
    if index.is_empty() {
        return name.to_owned();
    }
    let index: Vec<String> = index
        .iter()
        .map(|(variable, value)| format!("{variable}={value}"))
        .collect();
    format!("{name}[{}]", index.join(","))
}

/// A list of terms.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct TermList {
    /// The nodes of the terms.
    pub nodes: Vec<NodeId>,
    /// The terms as the user wrote them, indices put in.
    pub texts: Vec<String>,
}

/// Bounds on what one spec may unfold to.
#[derive(Clone, Copy, Debug)]
pub struct PrepareLimits {
    /// The largest number of claim instances.
    pub instances: usize,
    /// The largest number of nodes of the program.
    pub nodes: usize,
    /// The deepest chain of family elements that need one another.
    pub depth: usize,
    /// The largest number of expressions that are visited on the way.
    pub steps: usize,
}

impl Default for PrepareLimits {
    fn default() -> Self {
        PrepareLimits {
            instances: 200_000,
            nodes: 3_000_000,
            depth: 10_000,
            steps: 10_000_000,
        }
    }
}

/// Why a model was not unfolded.
#[derive(Clone, Debug)]
pub enum PrepareError {
    /// Mistakes in the spec.
    Mistakes(Failure),
    /// A limit.
    Stopped(Stop),
}

/// Unfolds a model; `through` bounds the sum of the indices of open sweeps.
///
/// # Errors
///
/// Every mistake that only index values reveal, each pointing into the spec.
///
/// # Complexity
///
/// Linear in the number of expressions visited.
pub fn prepare(
    model: Model,
    through: Option<i64>,
    limits: PrepareLimits,
) -> Result<Prepared, Failure> {
    let sources = model.sources.clone();
    prepare_within(model, through, limits, &Unlimited).map_err(|error| match error {
        PrepareError::Mistakes(failure) => failure,
        PrepareError::Stopped(stop) => Failure {
            sources,
            diagnostics: vec![build::plain_failure(stop.to_string())],
        },
    })
}

/// As [`prepare`], under a control.
///
/// # Errors
///
/// The mistakes, or the limit that ended the work.
pub fn prepare_within(
    model: Model,
    through: Option<i64>,
    limits: PrepareLimits,
    control: &dyn Control,
) -> Result<Prepared, PrepareError> {
    // Definitions may need one another in chains of thousands of elements, each some calls deep.
    const STACK: usize = 1 << 30;
    let worker = std::thread::Builder::new().stack_size(STACK);
    let built = std::thread::scope(|scope| {
        let task = worker.spawn_scoped(scope, || {
            build::Builder::new(&model, limits, control).run(through)
        });
        match task.map(|handle| handle.join()) {
            Ok(Ok(built)) => built,
            Ok(Err(panic)) => std::panic::resume_unwind(panic),
            Err(error) => {
                let message = format!(
                    "the program could not reserve memory to unfold the definitions: {error}"
                );
                Err(build::Unbuilt::Mistakes(vec![build::plain_failure(
                    message,
                )]))
            }
        }
    });
    match built {
        Ok(built) => Ok(built.into_prepared(model, through)),
        Err(build::Unbuilt::Stopped(stop)) => Err(PrepareError::Stopped(stop)),
        Err(build::Unbuilt::Mistakes(diagnostics)) => Err(PrepareError::Mistakes(Failure {
            sources: model.sources,
            diagnostics,
        })),
    }
}
