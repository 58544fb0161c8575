//! `linform export`.

use super::{keep_matching, spec_failure, unfold};
use crate::arguments::{Export, Look, Target};
use crate::exit::{self, Failure};
use crate::{files, output};
use linform_engine::model_of;
use linform_engine::record::ResultRecord;
use linform_report::{Digest, TextOptions};
use linform_scalar::Unlimited;

pub(crate) fn run(command: &Export) -> Result<u8, Failure> {
    let text = files::read(&command.result, files::RESULT_BYTES)?;
    let wrong = |what: String| Failure::wrong(format!("{}: {what}", command.result.display()));
    let read = linform_report::read_json(&text).map_err(|error| wrong(error.to_string()))?;
    if matches!(read.digest, Digest::Differs { .. }) {
        output::message(
            "warning: the result was changed after it was written; see `linform verify`",
        );
    }
    let mut record = read.record;
    keep_matching(&mut record, command.claim.as_deref())?;
    let exported = export(&record, command.to).map_err(|failure| match failure.code {
        exit::WRONG => wrong(failure.text),
        _ => failure,
    })?;
    match &command.out {
        Some(path) => files::write(path, &exported)?,
        None => output::result(&exported)?,
    }
    Ok(exit::AS_EXPECTED)
}

fn export(record: &ResultRecord, target: Target) -> Result<String, Failure> {
    let look = Look { ascii: true };
    let prepared = || {
        let model = model_of(&record.spec).map_err(|failure| spec_failure(&failure, &look))?;
        unfold(model, record.spec.through, &look, &Unlimited)
    };
    Ok(match target {
        Target::Latex => linform_report::latex(record),
        Target::Csv => linform_report::csv(record),
        Target::Json => linform_report::json(record),
        Target::Text => linform_report::text(
            record,
            &TextOptions {
                colour: false,
                unicode: true,
                width: 100,
            },
        ),
        Target::Sympy => linform_report::sympy(record, &prepared()?)
            .map_err(|error| Failure::wrong(error.to_string()))?,
        Target::Gp => linform_report::gp(record, &prepared()?)
            .map_err(|error| Failure::wrong(error.to_string()))?,
    })
}
