//! The program as a user runs it: commands, exit codes, files.

use std::path::{Path, PathBuf};
use std::process::{Command, Output};
use tempfile::TempDir;

fn linform(arguments: &[&str]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_linform"))
        .args(arguments)
        .output()
        .unwrap()
}

fn spec(name: &str) -> String {
    Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("../../specs")
        .join(name)
        .to_string_lossy()
        .into_owned()
}

fn code(output: &Output) -> i32 {
    output.status.code().expect("the program ends by itself")
}

fn stdout(output: &Output) -> String {
    String::from_utf8(output.stdout.clone()).unwrap()
}

fn stderr(output: &Output) -> String {
    String::from_utf8(output.stderr.clone()).unwrap()
}

/// A ring, a law and what is appended.
fn write_spec(folder: &TempDir, name: &str, claims: &str) -> String {
    let head = r#"
[ring]
variable = "t"
generators = ["q", "q'"]
[ring.derivative]
"q" = "q'"
"q'" = "t*q + 2*q^3"
[law.F]
log_derivative = "q'^2 - t*q^2 - q^4"
"#;
    let path = folder.path().join(name);
    std::fs::write(&path, format!("{head}{claims}")).unwrap();
    path.to_string_lossy().into_owned()
}

fn result_of(folder: &TempDir, spec_name: &str) -> PathBuf {
    let path = folder.path().join("result.json");
    let output = linform(&["solve", &spec(spec_name), "--out", path.to_str().unwrap()]);
    assert_eq!(code(&output), 0, "{}", stderr(&output));
    path
}

#[test]
fn the_identity_the_shape_and_the_evidence_are_shown() {
    let output = linform(&["solve", &spec("airy-traces.toml"), "--ascii"]);
    assert_eq!(code(&output), 0);
    let text = stdout(&output);
    // Shinault & Tracy 2011 for the form; the shapes follow from the counts of monomials.
    assert!(
        text.contains("u[3,0] = 1/24*F''''/F + 1/3*t*F''/F + 7/12*F'/F"),
        "{text}"
    );
    assert!(text.contains("33 x 8") && text.contains("28 x 4"), "{text}");
    assert!(
        text.contains("proved") && text.contains("all as expected"),
        "{text}"
    );
    assert!(text.is_ascii());
}

#[test]
fn the_json_has_the_fields_of_the_contract() {
    let output = linform(&[
        "solve",
        &spec("airy-traces.toml"),
        "--format",
        "json",
        "--claim",
        "trace[3,0]",
    ]);
    let text = stdout(&output);
    let flat: String = text.split_whitespace().collect();
    for part in [
        r#"{"format":"linform-result/1","program":"linform0.1.0","spec":{"title":"TracesoftheAirykernel","blake3":""#,
        r#""claims":[{"name":"trace","index":{"j":3,"k":0},"verdict":"holds","system":{"method":"matching","rows":33,"columns":8"#,
        r#""form":[{"term":"ratio(F,1)","coefficient":"7/12"},{"term":"ratio(F,2)","coefficient":"1/3*t"},{"term":"ratio(F,4)","coefficient":"1/24"}]"#,
        r#""evidence":{"kind":"proved""#,
    ] {
        assert!(flat.contains(part), "{part}\n{text}");
    }
}

#[test]
fn the_json_does_not_depend_on_the_run_or_the_number_of_threads() {
    let run = |jobs: &str| {
        stdout(&linform(&[
            "solve",
            &spec("airy-traces.toml"),
            "--format",
            "json",
            "--jobs",
            jobs,
        ]))
    };
    let first = run("1");
    assert_eq!(first, run("1"));
    assert_eq!(first, run("2"));
    assert_eq!(first, run("7"));
}

#[test]
fn the_starter_spec_solves_as_it_stands() {
    let folder = TempDir::new().unwrap();
    let path = folder.path().join("mein größter spec.toml");
    let path = path.to_str().unwrap();
    assert_eq!(code(&linform(&["new", path])), 0);
    let output = linform(&["solve", path]);
    assert_eq!(code(&output), 0, "{}{}", stdout(&output), stderr(&output));
    // A second time would overwrite: refused, and the file stays.
    std::fs::write(path, "mine").unwrap();
    assert_eq!(code(&linform(&["new", path])), 4);
    assert_eq!(std::fs::read_to_string(path).unwrap(), "mine");
}

#[test]
fn a_result_is_verified_and_a_changed_one_is_not() {
    let folder = TempDir::new().unwrap();
    let path = result_of(&folder, "airy-traces.toml");
    let output = linform(&["verify", path.to_str().unwrap()]);
    assert_eq!(code(&output), 0, "{}", stdout(&output));
    let text = std::fs::read_to_string(&path).unwrap();
    let place = text
        .find("\"coefficient\": \"7/12\"")
        .expect("the coefficient stands there");
    let mut changed = text.clone();
    changed.replace_range(place..place + 21, "\"coefficient\": \"7/13\"");
    std::fs::write(&path, &changed).unwrap();
    let output = linform(&["verify", path.to_str().unwrap()]);
    assert_eq!(code(&output), 1);
    assert!(
        stdout(&output).contains("digest") && stdout(&output).contains("rejected   trace[j="),
        "{}",
        stdout(&output)
    );
}

#[test]
fn every_digit_of_a_result_matters() {
    let folder = TempDir::new().unwrap();
    let path = result_of(&folder, "halphen.toml");
    let text = std::fs::read_to_string(&path).unwrap();
    let digits: Vec<usize> = text
        .bytes()
        .enumerate()
        .filter(|(_, byte)| byte.is_ascii_digit())
        .map(|(at, _)| at)
        .collect();
    assert!(digits.len() > 200);
    for place in digits.iter().step_by(digits.len() / 60) {
        let mut bytes = text.clone().into_bytes();
        bytes[*place] = if bytes[*place] == b'9' {
            b'1'
        } else {
            bytes[*place] + 1
        };
        std::fs::write(&path, bytes).unwrap();
        let output = linform(&["verify", path.to_str().unwrap()]);
        assert!(
            [1, 2].contains(&code(&output)),
            "a digit changed at byte {place} went unnoticed"
        );
    }
}

#[test]
fn the_exit_codes_are_those_of_the_contract() {
    let folder = TempDir::new().unwrap();
    let claim = |target: &str, expect: &str| {
        format!(
            "[[claim]]\nname = \"c\"\ntarget = \"{target}\"\nterms = \"ratio(F,1)\"\nexpect = \"{expect}\"\n"
        )
    };
    let right = write_spec(&folder, "right.toml", &claim("q", "refuted"));
    let different = write_spec(&folder, "different.toml", &claim("q", "holds"));
    let broken = write_spec(&folder, "broken.toml", &claim("x", "holds"));
    let endless = write_spec(&folder, "endless.toml", &claim("ratio(F,300)", "holds"));
    assert_eq!(code(&linform(&["solve", &right])), 0);
    assert_eq!(code(&linform(&["solve", &different])), 1);
    assert_eq!(code(&linform(&["solve", &broken])), 2);
    assert_eq!(code(&linform(&["solve", &right, "--nonsense"])), 2);
    assert_eq!(
        code(&linform(&["solve", &right, "--claim", "none such"])),
        2
    );
    assert_eq!(
        code(&linform(&["solve", &endless, "--time-limit", "300ms"])),
        3
    );
    assert_eq!(
        code(&linform(&["solve", &endless, "--memory-limit", "60MB"])),
        3
    );
    assert_eq!(code(&linform(&["solve", "there/is/none.toml"])), 4);
    assert_eq!(
        code(&linform(&["solve", &right, "--out", "there/is/none.json"])),
        4
    );
    assert_eq!(code(&linform(&["verify", &right])), 2);
    assert_eq!(code(&linform(&["--help"])), 0);
    assert_eq!(code(&linform(&[])), 2);
}

#[test]
fn a_limit_leaves_the_decided_claims_decided() {
    let folder = TempDir::new().unwrap();
    let claims = "[[claim]]\nname = \"easy\"\ntarget = \"q^4\"\nterms = [\"ratio(F,1)\", \"q^2\", \"q'^2\"]\n\
                  [[claim]]\nname = \"hard\"\ntarget = \"ratio(F,300)\"\nterms = \"q\"\n";
    let path = write_spec(&folder, "mixed.toml", claims);
    let output = linform(&["solve", &path, "--time-limit", "500ms", "--ascii"]);
    assert_eq!(code(&output), 3);
    let text = stdout(&output);
    assert!(text.contains("--time-limit"), "{text}");
    assert!(text.contains("1 holds") || text.contains("holds"), "{text}");
    assert!(text.contains("unsettled"), "{text}");
}

#[cfg(unix)]
#[test]
fn an_interrupt_keeps_what_was_decided() {
    let folder = TempDir::new().unwrap();
    let claims = "[[claim]]\nname = \"easy\"\ntarget = \"q^4\"\nterms = [\"ratio(F,1)\", \"q^2\", \"q'^2\"]\n\
                  [[claim]]\nname = \"hard\"\ntarget = \"ratio(F,300)\"\nterms = \"q\"\n";
    let path = write_spec(&folder, "mixed.toml", claims);
    let out = folder.path().join("out.json");
    let mut child = Command::new(env!("CARGO_BIN_EXE_linform"))
        .args(["solve", &path, "--quiet", "--out", out.to_str().unwrap()])
        .spawn()
        .unwrap();
    std::thread::sleep(std::time::Duration::from_millis(700));
    // The shell's own `kill`: a small system need not have one as a program.
    let sent = Command::new("sh")
        .args(["-c", &format!("kill -INT {}", child.id())])
        .status()
        .unwrap();
    assert!(sent.success());
    assert_eq!(child.wait().unwrap().code(), Some(3));
    let text = std::fs::read_to_string(&out).unwrap();
    assert!(
        text.contains("\"verdict\": \"unsettled\"") && text.contains("\"verdict\": \"holds\""),
        "{text}"
    );
}

#[test]
fn huge_requests_are_refused_at_once() {
    let folder = TempDir::new().unwrap();
    let claim = |extra: &str, target: &str| {
        format!("[[claim]]\nname = \"c\"\n{extra}\ntarget = \"{target}\"\nterms = \"q\"\n")
    };
    let deep = format!("{}q{}", "(".repeat(1_000_000), ")".repeat(1_000_000));
    let cases = [
        (claim("", "t^999999999"), 2),
        (claim("", "(1+t+q)^5000"), 3),
        (claim("", "2^999999999*q"), 2),
        (claim("", &deep), 2),
        (claim("for = \"j = 0..1000000000\"", "q"), 2),
        (claim("", "(1 + t + q + q')^900"), 3),
    ];
    for (position, (claims, expected)) in cases.iter().enumerate() {
        let path = write_spec(&folder, "huge.toml", claims);
        let start = std::time::Instant::now();
        let output = linform(&["solve", &path]);
        assert_eq!(
            code(&output),
            *expected,
            "case {position}: {}{}",
            stdout(&output),
            stderr(&output)
        );
        // A second on a quiet machine in a release build; tests run beside others, unoptimised.
        assert!(
            start.elapsed().as_secs() < 10,
            "case {position} took {:?}",
            start.elapsed()
        );
        assert!(
            stderr(&output).len() < 10_000,
            "case {position} says too much"
        );
    }
    let path = folder.path().join("large.toml");
    std::fs::File::create(&path)
        .unwrap()
        .set_len(1_000_000_000)
        .unwrap();
    let output = linform(&["solve", path.to_str().unwrap()]);
    assert_eq!(code(&output), 4);
    assert!(stderr(&output).contains("larger than 2 MB"));
}

#[test]
fn every_mistake_of_a_spec_is_shown_with_its_place() {
    let folder = TempDir::new().unwrap();
    let claims = "[family.a]\nrules = [\"a[0] = a[1]\", \"a[1] = a[0]\", \"a[j] = q for j >= 3\"]\n\
                  [[claim]]\nname = \"circle\"\ntarget = \"a[0]\"\nterms = \"q\"\n\
                  [[claim]]\nname = \"gap\"\ntarget = \"a[2]\"\nterms = \"q\"\n";
    let path = write_spec(&folder, "wrong.toml", claims);
    let output = linform(&["solve", &path, "--ascii"]);
    assert_eq!(code(&output), 2);
    let text = stderr(&output);
    assert!(
        text.contains("the rules run in a circle: a[0] → a[1] → a[0]")
            || text.contains("a[0] -> a[1] -> a[0]"),
        "{text}"
    );
    assert!(
        text.contains("no rule covers `a[2]`") && text.contains("wrong.toml:"),
        "{text}"
    );
    assert!(text.contains("2 mistakes"), "{text}");
}

#[test]
fn a_result_is_exported_in_every_format() {
    let folder = TempDir::new().unwrap();
    let path = result_of(&folder, "weierstrass.toml");
    let path = path.to_str().unwrap();
    for (format, part) in [
        ("latex", "\\documentclass"),
        ("csv", "claim,index,target,verdict,term,coefficient"),
        ("json", "\"linform-result/1\""),
        ("sympy", "import"),
        ("gp", "quit"),
        ("text", "as expected"),
    ] {
        let output = linform(&["export", path, "--to", format]);
        assert_eq!(code(&output), 0, "{}", stderr(&output));
        assert!(
            stdout(&output).contains(part),
            "{format}: {}",
            stdout(&output)
        );
    }
    // Exported JSON is the result again.
    let again = linform(&["export", path, "--to", "json"]);
    assert_eq!(stdout(&again), std::fs::read_to_string(path).unwrap());
}

#[test]
fn an_open_sweep_is_bounded_on_the_command_line() {
    let folder = TempDir::new().unwrap();
    let claims = "[[claim]]\nname = \"table\"\nfor = \"n = 1..\"\ntarget = \"ratio(F,n)\"\nterms = \"ratio(F,k) for k = 1..n\"\n";
    let path = write_spec(&folder, "open.toml", claims);
    assert_eq!(code(&linform(&["solve", &path])), 2);
    let output = linform(&["solve", &path, "--through", "4", "--ascii"]);
    assert_eq!(code(&output), 0, "{}", stderr(&output));
    assert!(
        stdout(&output).contains("4 instances"),
        "{}",
        stdout(&output)
    );
}

#[test]
fn includes_are_found_beside_the_including_file_and_kept_in_the_result() {
    let folder = TempDir::new().unwrap();
    write_spec(&folder, "base ring.toml", "");
    let main = folder.path().join("main.toml");
    std::fs::write(&main, "include = \"base ring.toml\"\n[[claim]]\nname = \"c\"\ntarget = \"q^4\"\nterms = [\"ratio(F,1)\", \"q^2\", \"q'^2\"]\n").unwrap();
    let result = folder.path().join("result.json");
    let output = linform(&[
        "solve",
        main.to_str().unwrap(),
        "--out",
        result.to_str().unwrap(),
    ]);
    assert_eq!(code(&output), 0, "{}", stderr(&output));
    // The result stands alone.
    std::fs::remove_file(folder.path().join("base ring.toml")).unwrap();
    let output = linform(&["verify", result.to_str().unwrap()]);
    assert_eq!(code(&output), 0, "{}{}", stdout(&output), stderr(&output));
}

#[test]
fn a_spec_is_not_overwritten_and_a_link_is_followed() {
    let folder = TempDir::new().unwrap();
    let path = write_spec(
        &folder,
        "mine.toml",
        "[[claim]]\nname = \"c\"\ntarget = \"q\"\nterms = \"q\"\n",
    );
    let before = std::fs::read_to_string(&path).unwrap();
    assert_eq!(code(&linform(&["solve", &path, "--out", &path])), 2);
    assert_eq!(std::fs::read_to_string(&path).unwrap(), before);
    #[cfg(unix)]
    {
        let (target, link) = (
            folder.path().join("target.json"),
            folder.path().join("link.json"),
        );
        std::fs::write(&target, "old").unwrap();
        std::os::unix::fs::symlink(&target, &link).unwrap();
        assert_eq!(
            code(&linform(&["solve", &path, "--out", link.to_str().unwrap()])),
            0
        );
        assert!(
            std::fs::symlink_metadata(&link)
                .unwrap()
                .file_type()
                .is_symlink()
        );
        assert!(
            std::fs::read_to_string(&target)
                .unwrap()
                .contains("linform-result/1")
        );
        assert_eq!(code(&linform(&["solve", &path, "--out", "/dev/full"])), 4);
        assert_eq!(
            code(&linform(&["solve", &path, "--quiet", "--out", "/dev/null"])),
            0
        );
        assert!(!std::fs::metadata("/dev/null").unwrap().is_file());
    }
}

#[test]
fn unfolding_obeys_the_limits() {
    let folder = TempDir::new().unwrap();
    let target = "sum(sum(sum(i*j*k*q for i = 1..1000) for j = 1..1000) for k = 1..1000)";
    let claims = format!("[[claim]]\nname = \"c\"\ntarget = \"{target}\"\nterms = \"q\"\n");
    let path = write_spec(&folder, "sums.toml", &claims);
    let start = std::time::Instant::now();
    assert_eq!(
        code(&linform(&["solve", &path, "--time-limit", "500ms"])),
        3
    );
    assert!(start.elapsed().as_secs() < 5);
}
