//! Formulas: the expressions of a spec and the coefficients of a result, as plain text, Unicode text or LaTeX.

mod call;
mod coefficient;
mod expression;
mod form;
mod latex_text;
mod name;

pub(crate) use coefficient::{coefficient, signed};
pub(crate) use expression::{Level, expression, summands};
pub(crate) use form::{Product, combination, folded_terms, form, form_line};
pub(crate) use latex_text::escape;
pub(crate) use name::subscripted;

/// How formulas are written.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Style {
    /// ASCII as far as the names of the spec are.
    Ascii,
    /// Unicode, with primes and powers set high.
    Unicode,
    /// LaTeX mathematics.
    Latex,
}

impl Style {
    /// One of three, by style.
    pub(crate) fn pick<T>(self, ascii: T, unicode: T, latex: T) -> T {
        match self {
            Style::Ascii => ascii,
            Style::Unicode => unicode,
            Style::Latex => latex,
        }
    }

    /// What stands between two factors. Names have any number of letters, so that none stand side by side.
    pub(crate) fn dot(self) -> &'static str {
        self.pick("*", "·", "\\,")
    }

    pub(crate) fn minus(self) -> &'static str {
        self.pick("-", "−", "-")
    }
}
