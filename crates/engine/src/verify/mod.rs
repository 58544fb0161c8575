//! Re-checking a record by a way independent of how it was found.
//!
//! The spec inside the record is read again and its program evaluated in an arithmetic of its own (published rationals,
//! plain maps of terms), in which nothing is solved: forms are substituted, left-kernel vectors multiplied out,
//! uniqueness rests on a determinant that does not vanish modulo a prime. Only the reader of specs and the unfolding of
//! families are shared with the solving side.

mod arithmetic;
mod claim;
mod expansion;
mod grading;
mod modular;
mod uniqueness;

use crate::prepare::{PrepareError, PrepareLimits, prepare_within};
use crate::program::NodeId;
use crate::record::{ClaimRecord, KnownBy, ResultRecord, Verdict};
use crate::source::{hash_of, model_of};
use arithmetic::{CheckArithmetic, CheckError};
use expansion::Expansion;
use linform_scalar::{Control, Stop};
use linform_spec::{Environment, Failure};

/// What became of one check.
#[derive(Clone, Debug, PartialEq)]
pub enum CheckOutcome {
    /// The statement is right; how it was checked, in words.
    Confirmed(String),
    /// The statement is wrong, or its data are; why.
    Rejected(String),
    /// There is nothing to check: the record leaves the claim open.
    Open,
}

/// The check of one claim.
#[derive(Clone, Debug, PartialEq)]
pub struct ClaimCheck {
    /// The name of the claim.
    pub name: String,
    /// Its index.
    pub index: Environment,
    /// The verdict in the record.
    pub verdict: Verdict,
    /// What became of it.
    pub outcome: CheckOutcome,
}

/// The check of a whole record.
#[derive(Clone, Debug, PartialEq)]
pub struct Verification {
    /// What is wrong with the record as a whole (hash, title, gradings, claims that the spec does not make).
    pub problems: Vec<String>,
    /// The claims, in the order of the record.
    pub claims: Vec<ClaimCheck>,
    /// How many claim instances of the spec are not in the record.
    pub missing: usize,
    /// The limit that ended the work, if one did.
    pub stopped: Option<Stop>,
}

impl Verification {
    /// Is everything that the record decides confirmed?
    pub fn is_confirmed(&self) -> bool {
        let confirmed = |check: &ClaimCheck| !matches!(check.outcome, CheckOutcome::Rejected(_));
        self.stopped.is_none() && self.problems.is_empty() && self.claims.iter().all(confirmed)
    }
}

/// Re-checks a record.
///
/// # Errors
///
/// The spec inside the record cannot be read.
pub fn verify(record: &ResultRecord, control: &dyn Control) -> Result<Verification, Failure> {
    let (model, limits) = (model_of(&record.spec)?, PrepareLimits::default());
    let prepared = match prepare_within(model, record.spec.through, limits, control) {
        Ok(prepared) => prepared,
        Err(PrepareError::Mistakes(failure)) => return Err(failure),
        Err(PrepareError::Stopped(stop)) => {
            return Ok(Verification {
                problems: Vec::new(),
                claims: Vec::new(),
                missing: 0,
                stopped: Some(stop),
            });
        }
    };
    let mut problems = Vec::new();
    let hash = hash_of(&record.spec.sources);
    if hash != record.spec.blake3 {
        problems.push(format!(
            "the hash of the spec is {hash}, but the result says {}",
            record.spec.blake3
        ));
    }
    if prepared.model.title != record.spec.title {
        problems.push("the title is not the one of the spec".to_owned());
    }
    let mut check = Check {
        arithmetic: CheckArithmetic {
            prepared: &prepared,
            record,
            control,
            derivatives: Vec::new(),
        },
        values: vec![None; prepared.program.len()],
    };
    let mut verification = Verification {
        problems,
        claims: Vec::new(),
        missing: 0,
        stopped: None,
    };
    if let Err(stop) = check.run(&mut verification) {
        verification.stopped = Some(stop);
    }
    Ok(verification)
}

struct Check<'a> {
    arithmetic: CheckArithmetic<'a>,
    values: Vec<Option<Expansion>>,
}

impl Check<'_> {
    fn run(&mut self, verification: &mut Verification) -> Result<(), Stop> {
        let (prepared, record) = (self.arithmetic.prepared, self.arithmetic.record);
        for node in &prepared.derivatives {
            match self.value(*node) {
                Ok(value) => self.arithmetic.derivatives.push(value),
                Err(CheckError::Stop(stop)) => return Err(stop),
                Err(CheckError::Wrong(why)) => verification.problems.push(why),
            }
        }
        self.check_gradings(verification)?;
        let mut seen = vec![false; prepared.instances.len()];
        for claim in &record.claims {
            let outcome = match self.place_of(claim) {
                None => CheckOutcome::Rejected("the spec makes no such claim".to_owned()),
                Some(place) if seen[place] => {
                    CheckOutcome::Rejected("this claim stands twice in the result".to_owned())
                }
                Some(place) => {
                    seen[place] = true;
                    match self.claim(claim, &prepared.instances[place]) {
                        Ok(outcome) => outcome,
                        Err(CheckError::Wrong(why)) => CheckOutcome::Rejected(why),
                        Err(CheckError::Stop(stop)) => return Err(stop),
                    }
                }
            };
            let (name, index, verdict) = (
                claim.name.clone(),
                claim.index.clone(),
                claim.finding.verdict(),
            );
            verification.claims.push(ClaimCheck {
                name,
                index,
                verdict,
                outcome,
            });
        }
        verification.missing = seen.iter().filter(|seen| !**seen).count();
        self.check_primitives(verification)?;
        Ok(())
    }

    /// Every recorded primitive, also one that no claim in the record needs.
    fn check_primitives(&mut self, verification: &mut Verification) -> Result<(), Stop> {
        let record = self.arithmetic.record;
        for primitive in &record.primitives {
            match self.primitive(primitive) {
                Ok(()) => {}
                Err(CheckError::Stop(stop)) => return Err(stop),
                Err(CheckError::Wrong(why)) => verification.problems.push(why),
            }
        }
        Ok(())
    }

    fn place_of(&self, claim: &ClaimRecord) -> Option<usize> {
        let instances = &self.arithmetic.prepared.instances;
        instances
            .iter()
            .position(|instance| instance.name == claim.name && instance.index == claim.index)
    }

    /// The value of a node, computed once.
    fn value(&mut self, node: NodeId) -> Result<Expansion, CheckError> {
        let program = &self.arithmetic.prepared.program;
        program.evaluate(&mut self.arithmetic, &[node], &mut self.values)?;
        self.values[node.position()]
            .clone()
            .ok_or(CheckError::Stop(Stop::SizeLimit))
    }

    /// The weights in the record must make the derivation and the laws homogeneous.
    fn check_gradings(&mut self, verification: &mut Verification) -> Result<(), Stop> {
        let (prepared, record) = (self.arithmetic.prepared, self.arithmetic.record);
        let mut pairs: Vec<(Expansion, Option<usize>)> = Vec::new();
        for (generator, derivative) in self.arithmetic.derivatives.clone().into_iter().enumerate() {
            pairs.push((derivative, Some(generator)));
        }
        for law in &prepared.laws {
            match self.value(*law) {
                Ok(value) => pairs.push((value, None)),
                Err(CheckError::Stop(stop)) => return Err(stop),
                Err(CheckError::Wrong(why)) => verification.problems.push(why),
            }
        }
        for grading in &record.gradings {
            if !grading::grading_is_right(grading, prepared, &pairs) {
                verification.problems.push(
                    "a grading in the result does not make the derivation and the laws homogeneous"
                        .to_owned(),
                );
            }
        }
        Ok(())
    }

    /// Is the target known by its derivative?
    fn by_derivative(claim: &ClaimRecord) -> bool {
        claim.known_by == KnownBy::Derivative
    }
}
