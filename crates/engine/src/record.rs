//! The result record: what was asked, what was found, and what it rests on.
//!
//! A record is plain data in published number types. It holds the text of the spec it answers, so that a third
//! party can check it with nothing else at hand. Renderers (crate `report`) turn it into text, JSON, LaTeX, CSV.

use crate::published::Coefficient;
use indexmap::IndexMap;
use linform_scalar::Stop;

/// The record of one run of `solve` on one spec.
#[derive(Clone, Debug, PartialEq)]
pub struct ResultRecord {
    /// Name and version of the program that wrote the record.
    pub program: String,
    /// The spec that was decided.
    pub spec: SpecRecord,
    /// The gradings of the ring that were found, with the laws homogeneous.
    pub gradings: Vec<GradingRecord>,
    /// The elements known only through their derivative that the claims needed, in the order in which they were solved.
    pub primitives: Vec<PrimitiveRecord>,
    /// One entry for each instance of each claim, in the order of the spec.
    pub claims: Vec<ClaimRecord>,
}

/// The spec that a record answers.
#[derive(Clone, Debug, PartialEq)]
pub struct SpecRecord {
    /// The title, if the spec has one.
    pub title: Option<String>,
    /// The bound on the sum of the indices of open sweeps, if one was given.
    pub through: Option<i64>,
    /// Hash of all source files, in hexadecimal.
    pub blake3: String,
    /// The source files: the spec first, then what it includes.
    pub sources: Vec<SourceRecord>,
}

/// One source file of a spec.
#[derive(Clone, Debug, PartialEq)]
pub struct SourceRecord {
    /// The path as the user or the including file wrote it.
    pub path: String,
    /// The whole text.
    pub text: String,
}

/// A grading of the ring: weights for which the derivation, and every law, is homogeneous.
#[derive(Clone, Debug, PartialEq)]
pub struct GradingRecord {
    /// Weights count modulo this number; 0 means over the integers.
    pub modulus: String,
    /// The weight of the derivation.
    pub derivation: String,
    /// The weight of each symbol.
    pub weights: IndexMap<String, String>,
}

/// An element known only through its derivative, and the linear form found for it.
#[derive(Clone, Debug, PartialEq)]
pub struct PrimitiveRecord {
    /// The element, such as `u[3,0]`.
    pub element: String,
    /// The shape of the system that was solved.
    pub system: SystemRecord,
    /// The form; terms with coefficient 0 are left out.
    pub form: Vec<FormTerm>,
}

/// One instance of a claim and what was found.
#[derive(Clone, Debug, PartialEq)]
pub struct ClaimRecord {
    /// The name of the claim.
    pub name: String,
    /// The values of its sweep variables.
    pub index: IndexMap<String, i64>,
    /// The target as the user wrote it, indices put in.
    pub target: String,
    /// Whether the target itself was matched, or its derivative.
    pub known_by: KnownBy,
    /// The terms that were offered, indices put in.
    pub terms: Vec<String>,
    /// Which coefficients the claim admits.
    pub coefficients: CoefficientKind,
    /// The verdict that the spec expects.
    pub expected: Verdict,
    /// The system that was solved; nothing if the work stopped before there was one.
    pub system: Option<SystemRecord>,
    /// The verdict with its data.
    pub finding: Finding,
}

/// How a target is known to the matching.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum KnownBy {
    /// As an element of the ring.
    Value,
    /// Only its derivative is an element known in advance; the constant of integration is taken as 0, that is,
    /// the target is the form itself and nothing is added to it.
    Derivative,
}

/// Which coefficients a claim admits.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum CoefficientKind {
    /// Polynomials in the variable and the constants.
    Polynomial,
    /// Quotients of such polynomials.
    Rational,
    /// Polynomials in the constants alone.
    Constant,
}

/// The four answers.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Verdict {
    /// The claim is true; its coefficients are unique.
    Holds,
    /// The claim is false as stated.
    Refuted,
    /// Many solutions: a family.
    Undetermined,
    /// A limit was hit before the answer was known.
    Unsettled,
}

impl Verdict {
    /// The word used in specs, results and output.
    pub fn word(self) -> &'static str {
        match self {
            Verdict::Holds => "holds",
            Verdict::Refuted => "refuted",
            Verdict::Undetermined => "undetermined",
            Verdict::Unsettled => "unsettled",
        }
    }
}

/// The shape of a system and how it was solved.
#[derive(Clone, Debug, PartialEq)]
pub struct SystemRecord {
    /// The way of deciding: `matching`.
    pub method: String,
    /// The algorithm that solved the system: `fraction-free` or `modular`.
    pub solver: String,
    /// Number of equations: one for each monomial that occurs.
    pub rows: usize,
    /// Number of unknowns.
    pub columns: usize,
}

/// One term of a linear form.
#[derive(Clone, Debug, PartialEq)]
pub struct FormTerm {
    /// The term as the user wrote it, indices put in.
    pub term: String,
    /// Its coefficient.
    pub coefficient: Coefficient,
}

/// The verdict on a claim with the data that belong to it.
#[derive(Clone, Debug, PartialEq)]
pub enum Finding {
    /// Holds, proved by exact substitution in the ring; terms with coefficient 0 are left out.
    Holds {
        /// The form.
        form: Vec<FormTerm>,
    },
    /// Refuted, for a reason that can be checked.
    Refuted(Refutation),
    /// The solutions are `particular + Σ cᵢ kernelᵢ`, where the `cᵢ` are any rational functions of the base symbols (of the
    /// constants alone, for a claim about constant coefficients); and, if there is a shift, plus any constant times it.
    Undetermined {
        /// One solution.
        particular: Vec<FormTerm>,
        /// Forms that vanish identically, a basis of them.
        kernel: Vec<Vec<FormTerm>>,
        /// For a target known by its derivative: a form equal to 1, if the terms span one. It moves the constant of integration.
        shift: Option<Vec<FormTerm>>,
    },
    /// No verdict.
    Unsettled(Unsettled),
}

impl Finding {
    /// The verdict without its data.
    pub fn verdict(&self) -> Verdict {
        match self {
            Finding::Holds { .. } => Verdict::Holds,
            Finding::Refuted(_) => Verdict::Refuted,
            Finding::Undetermined { .. } => Verdict::Undetermined,
            Finding::Unsettled(_) => Verdict::Unsettled,
        }
    }
}

/// Why a claim is false as stated.
#[derive(Clone, Debug, PartialEq)]
pub enum Refutation {
    /// No coefficients at all, not even rational ones: the equations of the listed monomials contradict each other.
    /// Multiplied as told and added up, their left sides vanish identically and their right sides do not.
    Contradiction {
        /// The equations and their multipliers: a left-kernel vector.
        rows: Vec<CertificateRow>,
        /// What the right sides add up to.
        value: Coefficient,
    },
    /// The only solution has coefficients that the claim does not admit (rational functions, or functions of the variable).
    OtherCoefficients {
        /// The only solution.
        form: Vec<FormTerm>,
        /// A proof that there is no other.
        independence: IndependenceRecord,
    },
    /// The derivative matches only with coefficients `r` that are not the derivatives of the coefficients `p`.
    NotAPrimitive {
        /// The coefficients `p` of the terms.
        coefficients: Vec<FormTerm>,
        /// The coefficients `r` that would have to be their derivatives.
        derivatives: Vec<FormTerm>,
        /// A proof that there are no others.
        independence: IndependenceRecord,
    },
}

/// One equation of a certificate.
#[derive(Clone, Debug, PartialEq)]
pub struct CertificateRow {
    /// The monomial whose coefficients are compared.
    pub monomial: String,
    /// The multiplier of the equation.
    pub multiplier: Coefficient,
}

/// Witness that the columns of a system are linearly independent over the rational functions: the square block on
/// the listed rows has a determinant that does not vanish modulo the prime at the point.
#[derive(Clone, Debug, PartialEq)]
pub struct IndependenceRecord {
    /// The monomials of the rows, as many as the system has columns.
    pub rows: Vec<String>,
    /// The prime.
    pub prime: u64,
    /// The values of the base symbols.
    pub point: IndexMap<String, u64>,
}

/// Why there is no verdict.
#[derive(Clone, Debug, PartialEq)]
pub struct Unsettled {
    /// The limit that was hit.
    pub stop: StopKind,
    /// The limit in words, and what would settle the claim.
    pub reason: String,
}

/// The limits that leave a claim unsettled.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum StopKind {
    /// The time limit.
    Time,
    /// The memory limit.
    Memory,
    /// The user's interrupt.
    Interrupt,
    /// A bound on the size of expressions.
    Size,
    /// The search over degrees for a primitive among dependent terms ended without an answer.
    Degree,
    /// An earlier claim whose coefficients this one uses did not hold.
    Prerequisite,
}

impl From<Stop> for StopKind {
    fn from(stop: Stop) -> Self {
        match stop {
            Stop::TimeLimit => StopKind::Time,
            Stop::MemoryLimit => StopKind::Memory,
            Stop::Interrupted => StopKind::Interrupt,
            _ => StopKind::Size,
        }
    }
}

impl StopKind {
    /// The word used in result files.
    pub fn word(self) -> &'static str {
        match self {
            StopKind::Time => "time",
            StopKind::Memory => "memory",
            StopKind::Interrupt => "interrupt",
            StopKind::Size => "size",
            StopKind::Degree => "degree",
            StopKind::Prerequisite => "prerequisite",
        }
    }
}
