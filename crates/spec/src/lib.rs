//! The text of a spec file to a checked model, with diagnostics that point into the file.
//!
//! *Invariant*: no floating point, no input or output: included files come through a closure of the caller.

mod claim;
mod expression;
mod family;
mod index;
mod lexer;
mod model;
mod parser;
mod place;
mod source;
mod suggest;
mod terms;
mod text;

pub use claim::{Claim, Coefficients, Target, Verdict, Yield};
pub use expression::{Condition, Expr, ExprKind, Function, MAX_DEPTH, Relation, Sweep};
pub use family::{Family, Known, Pattern, Resolved, Rule};
pub use index::{
    Environment, MAX_EXPONENT, MAX_INSTANCES, condition_holds, index_value, substitute, summands,
};
pub use model::{
    Decimal, FiniteSizeModel, Law, Model, RingDeclaration, Solution, SolutionKind, split_primes,
};
pub use parser::parse_expression;
pub use source::{Diagnostic, Failure, Label, SourceFile, Span};
pub use suggest::did_you_mean;
pub use terms::{Terms, TermsItem};
pub use text::text_of;
