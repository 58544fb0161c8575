//! What the scripting languages do not share.
//!
//! Statements are built from what both read in the same way: sums and products of names, calls, lists in brackets, and
//! strings in double quotes. Everything that works differently is a function of the prelude.

use crate::sanitise::visible;
use linform_scalar::published::{BigInt, BigRational, One, Signed};

/// A language of scripts.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Dialect {
    /// Python with the library SymPy.
    Sympy,
    /// The language of PARI/GP.
    Gp,
}

/// Longer literals of Python have to be hexadecimal.
const LONGEST_DECIMAL: u64 = 4000;

impl Dialect {
    pub(super) fn prelude(self) -> &'static str {
        match self {
            Dialect::Sympy => include_str!("prelude.py"),
            Dialect::Gp => include_str!("prelude.gp"),
        }
    }

    /// A line of a comment. Backslashes are replaced, as one at the end of a line would join it to the next.
    pub(super) fn comment(self, text: &str) -> String {
        let mark = match self {
            Dialect::Sympy => "#",
            Dialect::Gp => "\\\\",
        };
        format!("{mark} {}\n", visible(text).replace('\\', "/"))
    }

    /// A statement in a line of its own.
    pub(super) fn statement(self, text: &str) -> String {
        match self {
            Dialect::Sympy => format!("{text}\n"),
            Dialect::Gp => format!("{text};\n"),
        }
    }

    /// The declaration of the symbols `x0, x1, …` and of their list `X`.
    pub(super) fn symbols(self, count: usize) -> String {
        let names: Vec<String> = (0..count).map(symbol).collect();
        let list = names.join(", ");
        match self {
            Dialect::Sympy => {
                // A ring without symbols cannot be declared: one that is never used does no harm.
                let declared = if count == 0 { "x0" } else { &list };
                format!("R, *X = ring(\"{declared}\", QQ)\nX = X[:{count}]\n")
                    + &names
                        .iter()
                        .enumerate()
                        .map(|(i, name)| format!("{name} = X[{i}]\n"))
                        .collect::<String>()
            }
            Dialect::Gp => {
                names
                    .iter()
                    .map(|name| format!("{name} = '{name};\n"))
                    .collect::<String>()
                    + &format!("X = [{list}];\n")
            }
        }
    }

    /// The point `Z` at which ranks are taken.
    pub(super) fn point(self) -> &'static str {
        match self {
            Dialect::Sympy => "Z = [dice.randrange(P) for x in X]\n",
            Dialect::Gp => "Z = vector(#X, i, Mod(random(P), P));\n",
        }
    }

    /// The count at the end, and the exit status.
    pub(super) fn epilogue(self) -> &'static str {
        match self {
            Dialect::Sympy => {
                "print(passed, \"checks passed,\", failed, \"failed\")\nif failed:\n    raise SystemExit(1)\n"
            }
            Dialect::Gp => {
                "print(passed, \" checks passed, \", failed, \" failed\");\nquit(failed > 0);\n"
            }
        }
    }

    pub(super) fn power(self, base: &str, exponent: u32) -> String {
        match (self, exponent) {
            (_, 1) => base.to_owned(),
            (Dialect::Sympy, _) => format!("{base}**{exponent}"),
            (Dialect::Gp, _) => format!("{base}^{exponent}"),
        }
    }

    pub(super) fn integer(self, value: &BigInt) -> String {
        // Three bits make less than a digit.
        if self == Dialect::Sympy && value.bits() > 3 * LONGEST_DECIMAL {
            let sign = if value.is_negative() { "-" } else { "" };
            return format!("{sign}0x{}", value.abs().to_str_radix(16));
        }
        value.to_string()
    }

    /// A rational number as an element of the ring.
    pub(super) fn rational(self, value: &BigRational) -> String {
        let numerator = self.integer(value.numer());
        if value.denom().is_one() {
            format!("c({numerator})")
        } else {
            format!("c({numerator}, {})", self.integer(value.denom()))
        }
    }
}

/// The name of the symbol with this index.
pub(super) fn symbol(index: usize) -> String {
    format!("x{index}")
}

/// A string.
pub(super) fn quoted(text: &str) -> String {
    format!(
        "\"{}\"",
        visible(text).replace('\\', "\\\\").replace('"', "\\\"")
    )
}

/// A list.
pub(super) fn list(items: impl IntoIterator<Item = String>) -> String {
    format!("[{}]", items.into_iter().collect::<Vec<_>>().join(", "))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn texts_stay_inside_their_strings_and_comments() {
        assert_eq!(quoted("a\"); quit(0); \\"), "\"a\\\"); quit(0); \\\\\"");
        assert_eq!(quoted("a\nb"), "\"a\\\\u{a}b\"");
        assert_eq!(Dialect::Gp.comment("a \\\nquit"), "\\\\ a //u{a}quit\n");
    }

    #[test]
    fn long_integers_are_hexadecimal_where_decimals_are_refused() {
        let large = -(BigInt::from(1) << 20_000u32);
        assert_eq!(
            Dialect::Sympy.integer(&large),
            format!("-0x1{}", "0".repeat(5000))
        );
        assert_eq!(Dialect::Gp.integer(&large).len(), 6022);
    }
}
