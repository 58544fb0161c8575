//! README.md tells the truth: its session is run and its output compared, its commands exist.

use std::path::Path;
use std::process::Command;
use tempfile::TempDir;

fn readme() -> String {
    std::fs::read_to_string(Path::new(env!("CARGO_MANIFEST_DIR")).join("../../README.md")).unwrap()
}

/// The fenced blocks of a language, in order.
fn blocks<'t>(text: &'t str, language: &str) -> Vec<&'t str> {
    let opening = format!("```{language}\n");
    text.split(&opening)
        .skip(1)
        .map(|rest| rest.split("```").next().unwrap())
        .collect()
}

#[test]
fn the_session_prints_what_the_readme_shows() {
    let text = readme();
    let folder = TempDir::new().unwrap();
    std::fs::write(folder.path().join("levels.toml"), blocks(&text, "toml")[0]).unwrap();
    let sessions = blocks(&text, "console");
    assert_eq!(sessions.len(), 2);
    for session in sessions {
        let mut printed = String::new();
        for line in session.lines() {
            let Some(command) = line.strip_prefix("$ linform ") else {
                continue;
            };
            printed.push_str(line);
            printed.push('\n');
            let output = Command::new(env!("CARGO_BIN_EXE_linform"))
                .args(command.split(' '))
                .env("LC_ALL", "C.UTF-8")
                .current_dir(folder.path())
                .output()
                .unwrap();
            assert!(
                output.status.success(),
                "{command}: {}",
                String::from_utf8_lossy(&output.stderr)
            );
            printed.push_str(std::str::from_utf8(&output.stdout).unwrap());
        }
        assert_eq!(printed, session);
    }
}

#[test]
fn the_job_command_names_a_spec_that_is_there() {
    let text = readme();
    let command = blocks(&text, "sh")[0];
    let spec = command.trim().rsplit(' ').next().unwrap();
    assert!(
        Path::new(env!("CARGO_MANIFEST_DIR"))
            .join("../..")
            .join(spec)
            .is_file(),
        "{spec}"
    );
}
