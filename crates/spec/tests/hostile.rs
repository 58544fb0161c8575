//! Input made to exhaust time, stack or memory gets an error, and soon.

use linform_spec::{Model, parse, parse_expression};

const RING: &str =
    "[ring]\nvariable = \"t\"\ngenerators = [\"q\"]\n[ring.derivative]\n\"q\" = \"q^2\"\n";

fn read(text: String) -> Result<Model, String> {
    parse("hostile.toml", text, &mut |_| Err("no file".to_owned()))
        .map_err(|failure| failure.to_string())
}

/// The first message for a claim with this target.
fn target(expression: &str) -> String {
    let text = format!("{RING}[[claim]]\nname = \"c\"\nterms = \"q\"\ntarget = \"{expression}\"\n");
    read(text).err().unwrap_or_default()
}

#[test]
fn deep_nesting_is_refused() {
    const N: usize = 20_000;
    for (open, close) in [
        ("(", ")"),
        ("D(", ")"),
        ("u[", "]"),
        ("q^", ""),
        ("-", ""),
        ("+", ""),
        ("-(", ")"),
    ] {
        let text = open.repeat(N) + "q" + &close.repeat(N);
        let message = target(&text);
        assert!(
            message.contains("nested more than 200 deep"),
            "{open}: {message}"
        );
        assert!(parse_expression(&text).is_err());
    }
    assert_eq!(target(&("(".repeat(150) + "q" + &")".repeat(150))), "");
}

#[test]
fn long_chains_are_refused_and_shorter_ones_are_read() {
    for sign in [" - q", "*q", "/2"] {
        let message = target(&("q".to_owned() + &sign.repeat(100_000)));
        assert!(
            message.contains("more than 500 operations"),
            "{sign}: {message}"
        );
        assert_eq!(target(&("q".to_owned() + &sign.repeat(450))), "");
    }
    // Sums are balanced.
    assert_eq!(target(&("q".to_owned() + &" + q".repeat(20_000))), "");
    assert_eq!(target(&("q".to_owned() + &" - q + t".repeat(10_000))), "");
}

#[test]
fn the_deepest_tree_can_be_walked_and_dropped_on_a_small_stack() {
    let text = "q".to_owned() + &" - (1)".repeat(490);
    let deep = "(".repeat(199) + &text + &")".repeat(199);
    let walk = move || {
        let expr = parse_expression(&text).unwrap();
        let again = parse_expression(&linform_spec::text_of(&expr)).unwrap();
        assert_eq!(linform_spec::text_of(&again), text);
        assert!(linform_spec::substitute(&expr, &Default::default()).is_ok());
        assert!(
            parse_expression(&deep)
                .unwrap_err()
                .message
                .contains("operations")
        );
    };
    // Half of what a thread gets by default.
    std::thread::Builder::new()
        .stack_size(1 << 20)
        .spawn(walk)
        .unwrap()
        .join()
        .unwrap();
}

#[test]
fn numbers_names_and_texts_are_bounded() {
    assert!(target(&"7".repeat(100_001)).contains("100001 digits"));
    assert_eq!(target(&"7".repeat(100_000)), "");
    assert!(target(&(" ".repeat(1 << 20) + "q")).contains("at most 1048576"));
    assert!(target(&("q".to_owned() + &"'".repeat(100_000))).contains("primes in a row"));
    assert!(target(&("(q)".to_owned() + &"'".repeat(100_000))).contains("primes in a row"));
    let unknown = target(&"s".repeat(100_000));
    assert!(unknown.contains("unknown name") && unknown.len() < 500);
    assert!(target("t^999999999").contains("too large"));
    assert!(
        target("1/((2^10000)^10000)^10000").is_empty(),
        "constants are not evaluated"
    );
}

#[test]
fn long_sweeps_are_refused_before_they_are_run_through() {
    for sweep in [
        "j = 0..1000000000",
        "j = 0..1000, k = 0..1000",
        "j = 0..100, k = 0..10^j",
        "j = 0..9223372036854775807",
        "j = -9223372036854775807..9223372036854775807, k = 0..1",
        "j = 0..100000000, j < 5",
    ] {
        let text = format!(
            "{RING}[[claim]]\nname = \"c\"\ntarget = \"q\"\nterms = \"q\"\nfor = \"{sweep}\"\n"
        );
        let error = match read(text) {
            Err(failure) => failure,
            Ok(model) => {
                model.claims[0]
                    .instances(None, 1_000_000)
                    .unwrap_err()
                    .message
            }
        };
        assert!(
            error.contains("more than 1000000 instances") || error.contains("out of range"),
            "{sweep}: {error}"
        );
    }
}

#[test]
fn long_lists_of_terms_are_refused_before_they_are_run_through() {
    let text = format!(
        "{RING}[[claim]]\nname = \"c\"\ntarget = \"q\"\nterms = \"t^n*q for n = 0..1000000000\"\n"
    );
    let model = read(text).unwrap();
    let error = model.claims[0]
        .terms
        .expand(&Default::default(), None)
        .unwrap_err();
    assert!(error.message.contains("more than 1000000 terms"), "{error}");
}

#[test]
fn clauses_and_rules_are_bounded() {
    let conditions = format!(
        "{RING}[[claim]]\nname = \"c\"\ntarget = \"q\"\nterms = \"q\"\nfor = \"j = 1..9{}\"\n",
        ", j > 0".repeat(1000)
    );
    assert!(read(conditions).unwrap_err().contains("too long"));
    let rules = format!(
        "{RING}[family.u]\nrules = [{}]\n",
        "\"u[0] = q\",".repeat(1001)
    );
    assert!(read(rules).unwrap_err().contains("1001 rules"));
}

#[test]
fn a_large_file_is_refused() {
    let message = read("#".repeat(17 << 20)).unwrap_err();
    assert!(
        message.contains("at most 2 MB, which is 2097152 bytes"),
        "{message}"
    );
}

#[test]
fn files_of_one_thing_many_times_are_answered() {
    const N: usize = 3_000;
    let lines = |f: fn(usize) -> String| (0..N).map(f).collect::<String>();
    let files = [
        "[".repeat(N),
        format!("a = {}", "[".repeat(N)),
        format!("{}b = 1", "a.".repeat(N)),
        "a = 1\n".repeat(N),
        "[[claim]]\n".repeat(N),
        lines(|i| format!("k{i} = 1\n")),
        lines(|i| format!("[law.F{i}]\n")),
        lines(|i| format!("[family.u{i}]\nrules = [\"u{i}[j] = s for j > k\"]\n")),
        lines(|i| format!("[[claim]]\nname = \"{i}\"\ntarget = \"s{i}\"\nterms = \"s\"\n")),
        format!("title = \"{}\"", "\\q".repeat(N)),
        format!("[ring]\ngenerators = [{}]\n", "\"q\",".repeat(N)),
        format!(
            "[ring]\ngenerators = []\n[ring.derivative]\n{}",
            lines(|i| format!("q{i} = \"1\"\n"))
        ),
        "\u{feff}title = 3".to_owned(),
        "\0".repeat(N),
    ];
    for file in files {
        let message = read(file.clone()).unwrap_err();
        let lines = message.lines().count();
        assert!(
            lines <= 2 * 101,
            "{lines} lines for {:?}",
            &file[..file.floor_char_boundary(40)]
        );
    }
}

#[test]
fn includes_without_end_are_refused() {
    let mut number = 0;
    let failure = parse("0.toml", "include = \"next.toml\"".to_owned(), &mut |_| {
        number += 1;
        Ok(format!("include = \"{number}.toml\""))
    })
    .unwrap_err();
    assert!(
        failure.to_string().contains("more than 64 files"),
        "{failure}"
    );
}
