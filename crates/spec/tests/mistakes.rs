//! What the help says, and that one mistake does not hide another.

use linform_spec::{Failure, parse};

fn mistakes(text: &str) -> Failure {
    parse("test.toml", text.to_owned(), &mut |path| {
        Err(format!("no {path}"))
    })
    .unwrap_err()
}

#[test]
fn the_derivation_is_written_in_the_symbols_themselves() {
    for derivative in ["r'", "r''", "D(r)", "f[1]"] {
        let failure = mistakes(&format!(
            "[ring]\ngenerators = [\"q\", \"r\"]\n[ring.derivative]\n\"q\" = \"{derivative}\"\n\"r\" = \"r^2\"\n[family.f]\nrules = [\"f[n] = r\"]\n"
        ));
        let [mistake] = &failure.diagnostics[..] else {
            panic!("one mistake in {derivative}: {failure}")
        };
        let help = mistake.help.as_deref().unwrap();
        assert!(help.contains("in the symbols themselves"), "{help}");
    }
}
