//! What a checked spec file says.

use crate::claim::Claim;
use crate::expression::Expr;
use crate::family::Family;
use crate::source::{SourceFile, Span};
use indexmap::IndexMap;
use linform_scalar::Rational;

/// A checked spec: every name in it is declared, every call has its arguments.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Model {
    /// The title of the file itself, not of those it includes.
    pub title: Option<String>,
    /// The file itself first, then the included ones.
    pub sources: Vec<SourceFile>,
    /// The differential ring.
    pub ring: RingDeclaration,
    /// The laws by name, in the order of the text, included ones first (so in all the tables below).
    pub laws: IndexMap<String, Law>,
    /// The families given by rules.
    pub families: IndexMap<String, Family>,
    /// Which solution of the ring's equations is meant, for numbers.
    pub solution: Option<Solution>,
    /// The finite-size models.
    pub models: IndexMap<String, FiniteSizeModel>,
    /// The claims of the file itself, in its order.
    pub claims: Vec<Claim>,
}

/// A differential ring ℚ\[constants\]\[variable\]\[generators\] with its derivation.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct RingDeclaration {
    /// The variable, whose derivative is 1; an autonomous ring has none.
    pub variable: Option<String>,
    /// Symbolic constants, whose derivatives are 0.
    pub constants: Vec<String>,
    /// The generators.
    pub generators: Vec<String>,
    /// The derivative of each generator, in the order of the generators: polynomials in the symbols.
    pub derivatives: Vec<Expr>,
}

impl RingDeclaration {
    /// All symbols: generators, then the variable, then the constants.
    pub fn symbols(&self) -> impl Iterator<Item = &str> {
        self.generators
            .iter()
            .chain(&self.variable)
            .chain(&self.constants)
            .map(String::as_str)
    }

    /// The declared symbol that a name with primes starts from, and how many derivatives of it are meant.
    ///
    /// With generators `q` and `q'` the name `q''` is the first derivative of `q'`: the symbol with the most
    /// primes wins.
    pub fn symbol_of(&self, base: &str, primes: u32) -> Option<(&str, u32)> {
        self.symbols()
            .filter_map(|symbol| {
                let (symbol_base, symbol_primes) = split_primes(symbol);
                (symbol_base == base && symbol_primes <= primes)
                    .then(|| (symbol, primes - symbol_primes))
            })
            .min_by_key(|(_, derivatives)| *derivatives)
    }
}

/// A name without its trailing primes, and their number.
pub fn split_primes(name: &str) -> (&str, u32) {
    let base = name.trim_end_matches('\'');
    let primes = u32::try_from(name.len() - base.len()).unwrap_or(u32::MAX);
    (base, primes)
}

/// A function whose logarithmic derivative lies in the ring.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Law {
    /// F′/F
    pub log_derivative: Expr,
    /// Where it is declared.
    pub span: Span,
}

/// Which solution of the ring's equations is meant.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Solution {
    /// How it is singled out.
    pub kind: SolutionKind,
    /// Where it is declared.
    pub span: Span,
}

/// How a solution is singled out.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum SolutionKind {
    /// The first generator decays like this expression, such as `Ai(t)`, as the variable tends to +∞.
    DecaysLike(Expr),
    /// The values of all generators at one point.
    Initial {
        /// The point.
        at: Decimal,
        /// The value of each generator, in the order of the generators.
        values: IndexMap<String, Decimal>,
    },
}

/// A decimal or fraction as written, with its exact value.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Decimal {
    /// As written.
    pub text: String,
    /// The value that is written, taken as exact.
    pub value: Rational,
    /// Where it stands.
    pub span: Span,
}

/// A family of finite-size functions with a small parameter, and the kernel built from it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct FiniteSizeModel {
    /// The small parameter.
    pub parameter: String,
    /// The variable of the equation, and the second argument of the kernel.
    pub variables: [String; 2],
    /// The function, which solves A″ = xA when the parameter is 0.
    pub function: String,
    /// The linear second-order equation, `equation = 0`.
    pub equation: Expr,
    /// The kernel.
    pub kernel: Expr,
    /// The law of the limit.
    pub law: String,
    /// The family of the traces.
    pub traces: String,
    /// Where it is declared.
    pub span: Span,
}
