//! The ring of Painlevé II with the Tracy–Widom law, and runs in it.

use linform_engine::record::{ClaimRecord, FormTerm, ResultRecord};
use linform_engine::{Options, PrepareLimits, Prepared, Silent, prepare, solve};
use linform_scalar::Unlimited;
use linform_spec::{Failure, Model};

const HEAD: &str = r#"
[ring]
variable = "t"
generators = ["q", "q'"]
[ring.derivative]
"q" = "q'"
"q'" = "t*q + 2*q^3"
[law.F]
log_derivative = "q'^2 - t*q^2 - q^4"
"#;

pub(crate) fn model(rest: &str) -> Model {
    let text = format!("{HEAD}{rest}");
    linform_spec::parse("spec.toml", text, &mut |_| Err("no files here".to_owned()))
        .unwrap_or_else(|failure| panic!("{failure}"))
}

pub(crate) fn try_prepare(rest: &str) -> Result<Prepared, Failure> {
    prepare(model(rest), None, PrepareLimits::default())
}

pub(crate) fn run(rest: &str, options: Options) -> ResultRecord {
    let prepared = try_prepare(rest).unwrap_or_else(|failure| panic!("{failure}"));
    let wanted = vec![true; prepared.instances.len()];
    solve(&prepared, &wanted, options, &Unlimited, &Silent)
}

/// A claim with one target and a TOML list of terms.
pub(crate) fn claim(name: &str, target: &str, terms: &str, more: &str) -> String {
    format!("[[claim]]\nname = \"{name}\"\n{target}\nterms = {terms}\n{more}\n")
}

/// The only claim of a record.
pub(crate) fn only(record: &ResultRecord) -> &ClaimRecord {
    assert_eq!(record.claims.len(), 1);
    &record.claims[0]
}

pub(crate) fn text_of_form(form: &[FormTerm]) -> String {
    let terms: Vec<String> = form
        .iter()
        .map(|term| format!("({})*{}", term.coefficient, term.term))
        .collect();
    terms.join(" + ")
}
