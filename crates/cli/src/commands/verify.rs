//! `linform verify`.

use super::{spec_failure, use_threads};
use crate::arguments::Verify;
use crate::exit::{self, Failure};
use crate::limits::Watch;
use crate::{files, output};
use linform_engine::{CheckOutcome, Verification, title};
use linform_report::Digest;
use std::fmt::Write;

pub(crate) fn run(command: &Verify) -> Result<u8, Failure> {
    use_threads(&command.work)?;
    let text = files::read(&command.result, files::RESULT_BYTES)?;
    let read = linform_report::read_json(&text)
        .map_err(|error| Failure::wrong(format!("{}: {error}", command.result.display())))?;
    let watch = Watch::start(command.work.time_limit, command.work.memory_limit);
    let mut verification = linform_engine::verify(&read.record, &watch)
        .map_err(|failure| spec_failure(&failure, &command.look))?;
    verification.problems.extend(
        read.missing
            .iter()
            .map(|field| format!("the result does not hold {field}")),
    );
    if read.record.claims.is_empty() {
        verification
            .problems
            .push("the result holds no claim".to_owned());
    }
    for note in &read.notes {
        output::message(&format!("note: {note}"));
    }
    match read.digest {
        Digest::Agrees => {}
        Digest::Absent => output::message(
            "note: the file carries no digest, so a change outside the claims would go unnoticed",
        ),
        Digest::Differs { .. } => verification.problems.insert(
            0,
            "the file was changed after it was written: its digest does not match".to_owned(),
        ),
    }
    output::result(&describe(&verification))?;
    Ok(match (&verification.stopped, verification.is_confirmed()) {
        (Some(_), _) => exit::LIMIT,
        (None, true) => exit::AS_EXPECTED,
        (None, false) => exit::DIFFERENT,
    })
}

/// What a confirmation means, and what it does not.
const CONFIRMED: &str = "\
What the result decides is confirmed: the spec in it was read again, its definitions were expanded in an
arithmetic that takes no part in finding answers, and every verdict was checked by substitution.
Taken on trust: the reader of specs, and that the rules in the spec are the ones meant.
";

/// The verification in words.
fn describe(verification: &Verification) -> String {
    let mut text = String::new();
    for problem in &verification.problems {
        let _ = writeln!(text, "rejected   {problem}");
    }
    let (mut confirmed, mut rejected, mut open) = (0, 0, 0);
    for check in &verification.claims {
        let name = title(&check.name, &check.index);
        let verdict = check.verdict.word();
        let _ = match &check.outcome {
            CheckOutcome::Confirmed(how) => {
                confirmed += 1;
                writeln!(text, "confirmed  {name} {verdict}: {how}")
            }
            CheckOutcome::Rejected(why) => {
                rejected += 1;
                writeln!(text, "rejected   {name} {verdict}: {why}")
            }
            CheckOutcome::Open => {
                open += 1;
                writeln!(
                    text,
                    "open       {name}: the result gives no verdict, so there is nothing to check"
                )
            }
        };
    }
    if let Some(stop) = verification.stopped {
        let _ = writeln!(
            text,
            "stopped    {stop}; the claims after this line were not checked"
        );
    }
    let _ = writeln!(
        text,
        "{confirmed} confirmed, {rejected} rejected, {open} open"
    );
    if verification.missing > 0 {
        let noun = if verification.missing == 1 {
            "claim"
        } else {
            "claims"
        };
        let _ = writeln!(
            text,
            "not in this result: {} {noun} of the spec",
            verification.missing
        );
    }
    match (verification.is_confirmed(), confirmed) {
        (false, _) => text.push_str("The result is not confirmed.\n"),
        (true, 0) => {
            text.push_str("The result decides nothing, so there was nothing to confirm.\n")
        }
        (true, _) => text.push_str(CONFIRMED),
    }
    text
}
