//! Text of a user in a LaTeX document, where nothing in it may act as a command.

/// The text with every character that LaTeX would take for more than itself replaced.
///
/// What a plain LaTeX installation has no glyph for is written as its code point, `[U+2603]`.
pub(crate) fn escape(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    let mut last = ' ';
    for c in text.chars() {
        // Kept apart where two of them would form a ligature.
        let joins = |c: char| "`'-,?!\"".contains(c);
        if joins(c) && joins(last) {
            out.push_str("{}");
        }
        last = c;
        match c {
            '\\' => out.push_str("\\textbackslash{}"),
            '{' | '}' | '%' | '#' | '&' | '_' | '$' => {
                out.push('\\');
                out.push(c);
            }
            '^' => out.push_str("\\textasciicircum{}"),
            '~' => out.push_str("\\textasciitilde{}"),
            '<' | '>' | '|' => out.push_str(&format!("\\ensuremath{{{c}}}")),
            '"' => out.push_str("''"),
            '\n' | '\r' | '\t' | '\u{a0}' => out.push(' '),
            ' '..='~' => out.push(c),
            '′' => out.push_str("\\ensuremath{'}"),
            'À'..='ſ' if c.is_alphabetic() && !WITHOUT_GLYPH.contains(c) => out.push(c),
            _ => match symbol(c) {
                Some(command) => out.push_str(&format!("\\ensuremath{{{command}}}")),
                None => out.push_str(&format!("[U+{:04X}]", u32::from(c))),
            },
        }
    }
    out
}

/// Latin letters that LaTeX's standard encoding does not have.
const WITHOUT_GLYPH: &str = "ÐÞðþĄąĐđĘęĦħĮįĸĿŀŉŊŋŦŧŲųſ";

/// The command for a letter that mathematics uses.
pub(crate) fn symbol(c: char) -> Option<&'static str> {
    let found = LETTERS.iter().find(|(letter, _, _)| *letter == c);
    found.map(|(_, _, command)| *command)
}

/// The command for a Greek letter by its English name.
pub(crate) fn symbol_of_name(name: &str) -> Option<&'static str> {
    let found = LETTERS.iter().find(|(_, known, _)| *known == name);
    found.map(|(_, _, command)| *command)
}

/// Letter, name, command; capitals that look like Latin ones have no command in LaTeX.
const LETTERS: [(char, &str, &str); 38] = [
    ('α', "alpha", "\\alpha"),
    ('β', "beta", "\\beta"),
    ('γ', "gamma", "\\gamma"),
    ('δ', "delta", "\\delta"),
    ('ε', "epsilon", "\\varepsilon"),
    ('ζ', "zeta", "\\zeta"),
    ('η', "eta", "\\eta"),
    ('θ', "theta", "\\theta"),
    ('ι', "iota", "\\iota"),
    ('κ', "kappa", "\\kappa"),
    ('λ', "lambda", "\\lambda"),
    ('μ', "mu", "\\mu"),
    ('ν', "nu", "\\nu"),
    ('ξ', "xi", "\\xi"),
    ('π', "pi", "\\pi"),
    ('ρ', "rho", "\\rho"),
    ('σ', "sigma", "\\sigma"),
    ('ς', "varsigma", "\\varsigma"),
    ('τ', "tau", "\\tau"),
    ('υ', "upsilon", "\\upsilon"),
    ('φ', "phi", "\\varphi"),
    ('χ', "chi", "\\chi"),
    ('ψ', "psi", "\\psi"),
    ('ω', "omega", "\\omega"),
    ('Γ', "Gamma", "\\Gamma"),
    ('Δ', "Delta", "\\Delta"),
    ('Θ', "Theta", "\\Theta"),
    ('Λ', "Lambda", "\\Lambda"),
    ('Ξ', "Xi", "\\Xi"),
    ('Π', "Pi", "\\Pi"),
    ('Σ', "Sigma", "\\Sigma"),
    ('Υ', "Upsilon", "\\Upsilon"),
    ('Φ', "Phi", "\\Phi"),
    ('Ψ', "Psi", "\\Psi"),
    ('Ω', "Omega", "\\Omega"),
    ('℘', "wp", "\\wp"),
    ('ℓ', "ell", "\\ell"),
    ('∂', "partial", "\\partial"),
];

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn no_character_of_a_text_acts_as_a_command() {
        assert_eq!(
            escape("\\input{/etc/passwd} 100% a_b^2 #1 & $x$ ~"),
            "\\textbackslash{}input\\{/etc/passwd\\} 100\\% a\\_b\\textasciicircum{}2 \\#1 \\& \\$x\\$ \\textasciitilde{}"
        );
        assert_eq!(
            escape("℘ é ☃ ^^5c"),
            "\\ensuremath{\\wp} é [U+2603] \\textasciicircum{}\\textasciicircum{}5c"
        );
    }
}
