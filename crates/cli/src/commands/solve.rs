//! `linform solve`.

use super::{load_model, unfold, use_threads};
use crate::arguments::{Format, MethodName, Solve, SolverName};
use crate::exit::{self, Failure};
use crate::limits::Watch;
use crate::progress::Progress;
use crate::{files, output, pattern};
use linform_engine::record::{Finding, ResultRecord, StopKind};
use linform_engine::{Method, Options, Prepared, Solver};
use std::path::Path;

pub(crate) fn run(command: &Solve) -> Result<u8, Failure> {
    if command.out.is_some() && command.specs.len() > 1 {
        return Err(Failure::wrong(
            "--out takes the result of one spec: give one spec, or leave --out away",
        ));
    }
    if command.format == Some(Format::Json) && command.specs.len() > 1 {
        return Err(Failure::wrong(
            "JSON holds the result of one spec: give one spec, or another --format",
        ));
    }
    if let Some(out) = &command.out
        && let Some(spec) = command.specs.iter().find(|spec| files::is_same(spec, out))
    {
        let spec = spec.display();
        return Err(Failure::wrong(format!(
            "--out would overwrite the spec {spec}: choose another name"
        )));
    }
    use_threads(&command.work)?;
    let watch = Watch::start(command.work.time_limit, command.work.memory_limit);
    // All specs are read before the first is decided: a mistake in the last one shows at once.
    let mut ready = Vec::new();
    let mut worst = None;
    for path in &command.specs {
        let prepared = load_model(path, &command.look)
            .and_then(|model| unfold(model, command.through, &command.look, &watch));
        match prepared.and_then(|prepared| {
            selected(&prepared, command, path).map(|wanted| (prepared, wanted))
        }) {
            Ok(work) => ready.push(work),
            Err(failure) => {
                output::message(&failure.text);
                worst = worst.max(Some(failure.code));
            }
        }
    }
    if let Some(code) = worst {
        return Ok(code);
    }
    let mut code = exit::AS_EXPECTED;
    for (prepared, wanted) in &ready {
        let record = decide(prepared, wanted, command, &watch);
        write(&record, command)?;
        code = code.max(code_of(&record));
    }
    if watch.interrupted() {
        code = exit::LIMIT;
    }
    Ok(code)
}

/// Which claim instances the user wants.
fn selected(prepared: &Prepared, command: &Solve, path: &Path) -> Result<Vec<bool>, Failure> {
    let Some(text) = &command.claim else {
        return Ok(vec![true; prepared.instances.len()]);
    };
    let wanted: Vec<bool> = prepared
        .instances
        .iter()
        .map(|instance| pattern::matches(text, &instance.name, &instance.index))
        .collect();
    if wanted.contains(&true) {
        return Ok(wanted);
    }
    let names: Vec<&str> = prepared
        .model
        .claims
        .iter()
        .map(|claim| claim.name.as_str())
        .collect();
    let path = path.display();
    Err(Failure::wrong(format!(
        "no claim of {path} matches `{text}`; its claims are: {}",
        names.join(", ")
    )))
}

fn decide(prepared: &Prepared, wanted: &[bool], command: &Solve, watch: &Watch) -> ResultRecord {
    let method = match command.method {
        MethodName::Auto => Method::Auto,
        MethodName::Matching => Method::Matching,
    };
    let solver = match command.solver {
        SolverName::Auto => Solver::Auto,
        SolverName::FractionFree => Solver::FractionFree,
        SolverName::Modular => Solver::Modular,
    };
    let progress = Progress::new(command.work.quiet);
    let record = linform_engine::solve(
        prepared,
        wanted,
        Options { method, solver },
        watch,
        &progress,
    );
    progress.finish();
    record
}

fn write(record: &ResultRecord, command: &Solve) -> Result<(), Failure> {
    let Some(path) = &command.out else {
        return output::result(&render(
            record,
            command.format.unwrap_or(Format::Text),
            command,
        ));
    };
    let by_ending = || match path.extension().and_then(|ending| ending.to_str()) {
        Some("tex") => Format::Latex,
        Some("csv") => Format::Csv,
        Some("txt") => Format::Text,
        _ => Format::Json,
    };
    files::write(
        path,
        &render(record, command.format.unwrap_or_else(by_ending), command),
    )?;
    if !command.work.quiet {
        output::message(&format!(
            "{}; written to {}",
            output::summary(record),
            path.display()
        ));
    }
    Ok(())
}

fn render(record: &ResultRecord, format: Format, command: &Solve) -> String {
    match format {
        Format::Text => {
            let mut options = output::text_options(&command.look);
            options.colour &= command.out.is_none();
            linform_report::text(record, &options)
        }
        Format::Json => linform_report::json(record),
        Format::Latex => linform_report::latex(record),
        Format::Csv => linform_report::csv(record),
    }
}

/// The exit code that a record calls for: a limit tells more than a difference.
fn code_of(record: &ResultRecord) -> u8 {
    let differing = record
        .claims
        .iter()
        .filter(|claim| claim.finding.verdict() != claim.expected);
    let code = |finding: &Finding| match finding {
        Finding::Unsettled(unsettled) if unsettled.stop != StopKind::Prerequisite => exit::LIMIT,
        _ => exit::DIFFERENT,
    };
    differing
        .map(|claim| code(&claim.finding))
        .max()
        .unwrap_or(exit::AS_EXPECTED)
}
