//! The arguments of every command.

use clap::{Args, Parser, Subcommand, ValueEnum};
use std::path::PathBuf;
use std::time::Duration;

/// Decides whether a quantity is a linear form with rational-polynomial coefficients in given terms, and recovers the
/// coefficients exactly.
#[derive(Debug, Parser)]
#[command(
    name = "linform",
    version,
    max_term_width = 100,
    arg_required_else_help = true
)]
#[command(
    after_help = "Exit codes: 0 every claim was decided as expected; 1 some verdict differs, or a result was not \
confirmed; 2 the command line or a file's content is wrong; 3 a limit was hit or the work was interrupted; 4 a file \
could not be read or written."
)]
pub(crate) struct Arguments {
    #[command(subcommand)]
    pub(crate) command: Command,
}

#[derive(Debug, Subcommand)]
pub(crate) enum Command {
    /// Decide every claim of a spec
    Solve(Solve),
    /// Re-check a result by a way independent of how it was found
    Verify(Verify),
    /// Write a result as LaTeX, CSV, JSON, or as a script that proves it again
    Export(Export),
    /// Write a commented starter spec
    New(New),
}

/// Limits and habits that all long commands share.
#[derive(Debug, Args)]
pub(crate) struct Work {
    /// Stop after this time: seconds, or a number with s, m or h
    #[arg(long, value_name = "TIME", value_parser = duration)]
    pub(crate) time_limit: Option<Duration>,
    /// Stop before the program takes more memory than this: bytes, or a number with KB, MB or GB
    #[arg(long, value_name = "SIZE", value_parser = bytes, default_value = "2GB")]
    pub(crate) memory_limit: u64,
    /// Number of threads [default: all cores]
    #[arg(long, value_name = "N", value_parser = clap::value_parser!(u16).range(1..=1024))]
    pub(crate) jobs: Option<u16>,
    /// Show no progress and no closing remarks
    #[arg(long, short)]
    pub(crate) quiet: bool,
}

/// How text is written.
#[derive(Debug, Args)]
pub(crate) struct Look {
    /// Plain ASCII only
    #[arg(long)]
    pub(crate) ascii: bool,
}

#[derive(Debug, Args)]
pub(crate) struct Solve {
    /// Spec files
    #[arg(required = true, value_name = "SPEC")]
    pub(crate) specs: Vec<PathBuf>,
    /// Only claims whose name, or name with index such as `trace[j=3,k=0]`, matches; `*` stands for anything
    #[arg(long, value_name = "PATTERN")]
    pub(crate) claim: Option<String>,
    /// How claims are decided; never changes a verdict
    #[arg(long, value_enum, default_value_t = MethodName::Auto)]
    pub(crate) method: MethodName,
    /// How the systems of the matching are solved; never changes a verdict
    #[arg(long, value_enum, default_value_t = SolverName::Auto)]
    pub(crate) solver: SolverName,
    /// Accept only proofs by exact substitution (what matching gives in any case)
    #[arg(long)]
    pub(crate) prove: bool,
    /// Bound on the sum of the indices of open sweeps such as `n = 0..`
    #[arg(long, value_name = "N", value_parser = clap::value_parser!(i64).range(0..=1_000_000))]
    pub(crate) through: Option<i64>,
    /// Write the result to this file instead of standard output
    #[arg(long, short, value_name = "FILE")]
    pub(crate) out: Option<PathBuf>,
    /// Format of the result [default: text; with --out: by the file's ending, else json]
    #[arg(long, value_enum)]
    pub(crate) format: Option<Format>,
    #[command(flatten)]
    pub(crate) look: Look,
    #[command(flatten)]
    pub(crate) work: Work,
}

#[derive(Debug, Args)]
pub(crate) struct Verify {
    /// A result written by `linform solve --out FILE`
    #[arg(value_name = "FILE")]
    pub(crate) result: PathBuf,
    #[command(flatten)]
    pub(crate) look: Look,
    #[command(flatten)]
    pub(crate) work: Work,
}

#[derive(Debug, Args)]
pub(crate) struct Export {
    /// A result written by `linform solve --out FILE`
    #[arg(value_name = "RESULT")]
    pub(crate) result: PathBuf,
    /// What to write: a document, data, or a script for SymPy or PARI/GP that proves every identity again
    #[arg(long, value_enum)]
    pub(crate) to: Target,
    /// Only claims whose name, or name with index, matches; `*` stands for anything
    #[arg(long, value_name = "PATTERN")]
    pub(crate) claim: Option<String>,
    /// Write to this file instead of standard output
    #[arg(long, short, value_name = "FILE")]
    pub(crate) out: Option<PathBuf>,
}

#[derive(Debug, Args)]
pub(crate) struct New {
    /// The file to write; it must not exist yet
    #[arg(value_name = "FILE")]
    pub(crate) file: PathBuf,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub(crate) enum MethodName {
    /// The program chooses
    Auto,
    /// Compare the coefficients of monomials exactly
    Matching,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub(crate) enum SolverName {
    /// The program chooses
    Auto,
    /// Fraction-free elimination
    FractionFree,
    /// Primes and points, remaindering, reconstruction
    Modular,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub(crate) enum Format {
    Text,
    Json,
    Latex,
    Csv,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub(crate) enum Target {
    Latex,
    Csv,
    Json,
    Text,
    Sympy,
    Gp,
}

/// A number with an optional unit, in the smallest unit.
fn with_unit(text: &str, units: &[(&str, u64)]) -> Option<u64> {
    let end = text
        .find(|c: char| !c.is_ascii_digit())
        .unwrap_or(text.len());
    let (number, unit) = text.split_at(end);
    let factor = units
        .iter()
        .find(|(name, _)| name.eq_ignore_ascii_case(unit.trim()))?
        .1;
    number
        .parse::<u64>()
        .ok()?
        .checked_mul(factor)
        .filter(|value| *value > 0)
}

fn duration(text: &str) -> Result<Duration, String> {
    let milliseconds = with_unit(
        text,
        &[
            ("", 1000),
            ("ms", 1),
            ("s", 1000),
            ("m", 60_000),
            ("h", 3_600_000),
        ],
    );
    milliseconds
        .map(Duration::from_millis)
        .ok_or_else(|| "write a positive whole number, such as 30, 30s, 5m or 2h".to_owned())
}

fn bytes(text: &str) -> Result<u64, String> {
    let value = with_unit(
        text,
        &[
            ("", 1),
            ("B", 1),
            ("KB", 1000),
            ("MB", 1_000_000),
            ("GB", 1_000_000_000),
            ("KiB", 1 << 10),
            ("MiB", 1 << 20),
            ("GiB", 1 << 30),
        ],
    );
    value.ok_or_else(|| "write a positive whole number, such as 500MB or 2GB".to_owned())
}
