//! `[model.NAME]`

use super::draft::{Declared, Draft, DraftModel};
use super::names::{Primes, declared, declared_key};
use super::section::{Entry, Section, shorten};
use super::{redefinition, required_expression};
use crate::collect::Collector;
use crate::model::FiniteSizeModel;
use crate::source::{Diagnostic, Span};

pub(crate) fn read(entry: &Entry<'_>, draft: &mut Draft, errors: &mut Collector) {
    let name = declared_key(entry, errors);
    let Some(section) = entry.section(format!("[model.{}]", shorten(entry.key)), errors) else {
        draft.lost.text(entry.key);
        return;
    };
    section.allow(
        &[
            "parameter",
            "variables",
            "function",
            "equation",
            "kernel",
            "law",
            "traces",
        ],
        errors,
    );
    let parameter = name_under(&section, "parameter", "parameter = \"h\"", errors);
    let function = name_under(&section, "function", "function = \"A\"", errors);
    let law = name_under(&section, "law", "law = \"F\"", errors);
    let traces = name_under(&section, "traces", "traces = \"u\"", errors);
    let variables = variables(&section, errors);
    let equation = required_expression(&section, "equation", "equation = \"A'' - x*A\"", errors);
    let kernel = required_expression(&section, "kernel", "kernel = \"…\"", errors);
    let Some(name) = name else {
        draft.lost.text(entry.key);
        return;
    };
    let (Some(parameter), Some(function), Some(law), Some(traces), Some([x, y])) =
        (parameter, function, law, traces, variables)
    else {
        draft.lost.text(entry.key);
        return;
    };
    if let Some(there) = draft.models.get(&name.name) {
        errors.push(redefinition(
            &format!("the model `{}`", name.name),
            name.span,
            there.model.span,
        ));
        return;
    }
    let model = FiniteSizeModel {
        parameter: parameter.name.clone(),
        variables: [x.name.clone(), y.name.clone()],
        function: function.name.clone(),
        equation,
        kernel,
        law: law.name,
        traces: traces.name,
        span: entry.key_span,
    };
    draft.models.insert(
        name.name,
        DraftModel {
            model,
            law_span: law.span,
            traces_span: traces.span,
            names: [parameter, x, y, function],
        },
    );
}

fn name_under(
    section: &Section<'_>,
    key: &str,
    example: &str,
    errors: &mut Collector,
) -> Option<Declared> {
    let text = section.require(key, example, errors)?.text(errors)?;
    declared(&text, Primes::Refused, errors)
}

fn variables(section: &Section<'_>, errors: &mut Collector) -> Option<[Declared; 2]> {
    let entry = section.require("variables", "variables = [\"x\", \"y\"]", errors)?;
    let texts = entry.texts(false, errors)?;
    let names: Vec<_> = texts
        .iter()
        .filter_map(|text| declared(text, Primes::Refused, errors))
        .collect();
    if names.len() < texts.len() {
        return None;
    }
    let span: Span = entry.value_span();
    match <[Declared; 2]>::try_from(names) {
        Ok(pair) => Some(pair),
        Err(names) => {
            errors.push(
                Diagnostic::new(
                    format!("a model has 2 variables, not {}", names.len()),
                    span,
                )
                .help("the kernel has two arguments: `variables = [\"x\", \"y\"]`"),
            );
            None
        }
    }
}
