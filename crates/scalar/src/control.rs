//! How long work is told to stop.

/// Why a computation ended before its answer was known.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum Stop {
    /// The time granted by the caller is used up.
    TimeLimit,
    /// The memory granted by the caller is used up, or one step would exceed it.
    MemoryLimit,
    /// The user asked for the end.
    Interrupted,
    /// An intermediate object would exceed a fixed bound of the representation (exponents, number of terms).
    SizeLimit,
}

impl std::fmt::Display for Stop {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(match self {
            Stop::TimeLimit => "the time limit was reached",
            Stop::MemoryLimit => "the memory limit was reached",
            Stop::Interrupted => "interrupted",
            Stop::SizeLimit => "an intermediate expression outgrew its bounds",
        })
    }
}

impl std::error::Error for Stop {}

/// The caller's say in a long computation: asked often, so an implementation must be cheap (an atomic load).
pub trait Control: Sync {
    /// May the work go on?
    ///
    /// # Errors
    ///
    /// The reason to stop. Callers return it unchanged and leave no partial result behind.
    fn proceed(&self) -> Result<(), Stop>;

    /// The largest number of terms that one polynomial may have.
    fn term_limit(&self) -> usize {
        20_000_000
    }
}

/// A control that never stops the work: for tests and for computations known to be small.
#[derive(Clone, Copy, Debug, Default)]
pub struct Unlimited;

impl Control for Unlimited {
    fn proceed(&self) -> Result<(), Stop> {
        Ok(())
    }
}
