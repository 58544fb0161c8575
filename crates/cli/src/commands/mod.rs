//! One module for each command.

pub(crate) mod export;
pub(crate) mod new;
pub(crate) mod solve;
pub(crate) mod verify;

use crate::arguments::{Look, Work};
use crate::exit::{self, Failure};
use crate::{diagnostics, files, output};
use linform_engine::record::ResultRecord;
use linform_engine::{PrepareError, PrepareLimits, Prepared, prepare_within};
use linform_scalar::Control;
use linform_spec::Model;
use std::path::Path;

/// Sets the number of threads; all cores if the user does not say.
fn use_threads(work: &Work) -> Result<(), Failure> {
    let threads = work.jobs.map_or(0, usize::from);
    rayon::ThreadPoolBuilder::new()
        .num_threads(threads)
        .build_global()
        .map_err(|error| {
            Failure::wrong(format!(
                "cannot start the threads: {error}; try a smaller --jobs"
            ))
        })
}

fn spec_failure(failure: &linform_spec::Failure, look: &Look) -> Failure {
    let (colour, unicode) = output::diagnostic_look(look);
    Failure::wrong(diagnostics::text(failure, colour, unicode))
}

/// Reads and checks a spec.
fn load_model(path: &Path, look: &Look) -> Result<Model, Failure> {
    let text = files::read(path, files::SPEC_BYTES)?;
    let mut load = |included: &str| files::read_text(Path::new(included), files::SPEC_BYTES);
    linform_spec::parse(&path.to_string_lossy(), text, &mut load)
        .map_err(|failure| spec_failure(&failure, look))
}

fn unfold(
    model: Model,
    through: Option<i64>,
    look: &Look,
    control: &dyn Control,
) -> Result<Prepared, Failure> {
    prepare_within(model, through, PrepareLimits::default(), control).map_err(|error| match error {
        PrepareError::Mistakes(failure) => spec_failure(&failure, look),
        PrepareError::Stopped(stop) => Failure {
            code: exit::LIMIT,
            text: format!("{stop} while the definitions were unfolded; nothing was decided"),
        },
    })
}

/// Keeps the claims that a pattern admits; it is a mistake if there are none.
fn keep_matching(record: &mut ResultRecord, pattern: Option<&str>) -> Result<(), Failure> {
    let Some(pattern) = pattern else {
        return Ok(());
    };
    record
        .claims
        .retain(|claim| crate::pattern::matches(pattern, &claim.name, &claim.index));
    if record.claims.is_empty() {
        return Err(Failure::wrong(format!(
            "no claim of the result matches `{pattern}`"
        )));
    }
    Ok(())
}
