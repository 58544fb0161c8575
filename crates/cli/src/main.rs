//! The command line of `linform`: arguments, progress, files, exit codes. It holds no mathematics.

mod arguments;
mod commands;
mod diagnostics;
mod exit;
mod files;
mod limits;
mod output;
mod pattern;
mod progress;

use arguments::{Arguments, Command};
use clap::Parser;
use std::process::ExitCode;

fn main() -> ExitCode {
    let arguments = match Arguments::try_parse() {
        Ok(arguments) => arguments,
        Err(error) => {
            // Help and version are answers, everything else is a wrong command line; clap knows which stream is meant.
            let code = if error.use_stderr() {
                exit::WRONG
            } else {
                exit::AS_EXPECTED
            };
            let _ = error.print();
            return ExitCode::from(code);
        }
    };
    let status = match &arguments.command {
        Command::Solve(command) => commands::solve::run(command),
        Command::Verify(command) => commands::verify::run(command),
        Command::Export(command) => commands::export::run(command),
        Command::New(command) => commands::new::run(command),
    };
    match status {
        Ok(code) => ExitCode::from(code),
        Err(failure) => {
            output::message(&failure.text);
            ExitCode::from(failure.code)
        }
    }
}
