//! The text of a spec file to a checked model, with diagnostics that point into the file.
//!
//! *Invariant*: no floating point, no input or output: included files come through a closure of the caller.

mod check;
mod claim;
mod collect;
mod expression;
mod family;
mod index;
mod lexer;
mod model;
mod parser;
mod place;
mod read;
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

/// The checked model of a spec file, with all that it includes.
///
/// `path` is the name of the file in messages, and what the paths of included files are relative to; `load`
/// gives the text of an included file, or says in a few words why it cannot be read.
///
/// # Errors
///
/// Every mistake in the spec, with its place. A text beyond the limits on size is one, too.
///
/// # Complexity
///
/// Linear in the texts, up to logarithms.
///
/// # Examples
///
/// ```
/// let text = r#"
/// [ring]
/// generators = ["p", "p'"]
/// constants = ["g2"]
/// [ring.derivative]
/// "p" = "p'"
/// "p'" = "6*p^2 - g2/2"
///
/// [[claim]]
/// name = "fourth derivative"
/// target = "p''''"
/// terms = ["p^3", "g2*p", "p'^2", "g2^2"]
/// coefficients = "constant"
/// "#;
/// let model = linform_spec::parse("example.toml", text.to_owned(), &mut |_| Err("none".to_owned()))?;
/// assert_eq!(model.ring.generators, ["p", "p'"]);
/// assert_eq!(model.claims[0].terms.items.len(), 4);
/// # Ok::<(), linform_spec::Failure>(())
/// ```
pub fn parse(
    path: &str,
    text: String,
    load: &mut dyn FnMut(&str) -> Result<String, String>,
) -> Result<Model, Failure> {
    let mut errors = collect::Collector::default();
    let read::Read { sources, draft } = read::read_files(path, text, load, &mut errors);
    check::check(&draft, &mut errors);
    if errors.is_empty() {
        return Ok(check::finish(draft, sources));
    }
    let diagnostics = errors.finish(|span| {
        let line = sources
            .get(span.file)
            .map_or(0, |source| source.line_column(span.start).0);
        (span.file, line)
    });
    Err(Failure {
        sources,
        diagnostics,
    })
}
