//! Standard output and standard error.

use crate::arguments::Look;
use linform_engine::record::{ResultRecord, Verdict};
use linform_report::TextOptions;
use std::io::{IsTerminal, Write};

/// Prints a result. A reader that closes the pipe has seen enough: that is no error.
pub(crate) fn result(text: &str) -> Result<(), crate::exit::Failure> {
    let mut stdout = std::io::stdout().lock();
    match stdout
        .write_all(text.as_bytes())
        .and_then(|()| stdout.flush())
    {
        Err(error) if error.kind() != std::io::ErrorKind::BrokenPipe => Err(
            crate::exit::Failure::files(format!("cannot write to standard output: {error}")),
        ),
        _ => Ok(()),
    }
}

/// Prints a remark or an error; where even that fails, there is nobody to tell.
pub(crate) fn message(text: &str) {
    let _ = writeln!(std::io::stderr().lock(), "{}", text.trim_end());
}

fn colour_wanted(is_terminal: bool) -> bool {
    is_terminal && std::env::var_os("NO_COLOR").is_none_or(|value| value.is_empty())
}

fn unicode_wanted(look: &Look) -> bool {
    if look.ascii {
        return false;
    }
    // The first of these that is set and not empty decides, as POSIX has it.
    let locale = ["LC_ALL", "LC_CTYPE", "LANG"]
        .iter()
        .filter_map(std::env::var_os)
        .find(|value| !value.is_empty());
    match locale {
        Some(locale) => {
            let locale = locale.to_string_lossy().to_ascii_uppercase();
            locale.contains("UTF-8") || locale.contains("UTF8")
        }
        // Nothing is said: a pipe or file takes UTF-8, a terminal may not.
        None => !std::io::stdout().is_terminal(),
    }
}

/// How results are written to standard output.
pub(crate) fn text_options(look: &Look) -> TextOptions {
    const WIDTH: usize = 100;
    TextOptions {
        colour: colour_wanted(std::io::stdout().is_terminal()),
        unicode: unicode_wanted(look),
        width: WIDTH,
    }
}

/// How diagnostics are drawn on standard error: with colour, with box-drawing characters.
pub(crate) fn diagnostic_look(look: &Look) -> (bool, bool) {
    (
        colour_wanted(std::io::stderr().is_terminal()),
        unicode_wanted(look),
    )
}

/// A record in one line: `58 claims: 55 hold, 3 refuted`.
pub(crate) fn summary(record: &ResultRecord) -> String {
    let verdicts = [
        Verdict::Holds,
        Verdict::Refuted,
        Verdict::Undetermined,
        Verdict::Unsettled,
    ];
    let counts: Vec<String> = verdicts
        .iter()
        .map(|verdict| {
            (
                verdict,
                record
                    .claims
                    .iter()
                    .filter(|claim| claim.finding.verdict() == *verdict)
                    .count(),
            )
        })
        .filter(|(_, count)| *count > 0)
        .map(|(verdict, count)| match verdict {
            Verdict::Holds if count > 1 => format!("{count} hold"),
            _ => format!("{count} {}", verdict.word()),
        })
        .collect();
    let total = record.claims.len();
    format!(
        "{total} {}: {}",
        if total == 1 { "claim" } else { "claims" },
        counts.join(", ")
    )
}
