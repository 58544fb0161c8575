//! The choices that a user may make, none of which changes a verdict.

/// How a claim is decided.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Method {
    /// The program chooses.
    #[default]
    Auto,
    /// By comparing the coefficients of monomials: an exact system over the base.
    Matching,
}

/// How a system is solved.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Solver {
    /// The program chooses.
    #[default]
    Auto,
    /// Fraction-free elimination.
    FractionFree,
    /// Primes and points, remaindering, reconstruction.
    Modular,
}
