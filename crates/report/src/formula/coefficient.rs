//! Coefficients: quotients of polynomials in the base symbols.

use super::Style;
use super::expression::{Level, Written};
use super::name::{name, power, power_may_follow, primes};
use linform_engine::published::{Coefficient, PublishedPolynomial};
use linform_scalar::published::{BigInt, BigRational, One, Signed as _, Zero, gcd, lcm};
use linform_spec::split_primes;
use std::borrow::Cow;

/// A formula without its sign.
#[derive(Clone, Debug)]
pub(crate) struct Signed {
    pub(crate) negative: bool,
    /// The summands after the sign was taken out: texts with the sign before each but the first.
    pub(crate) summands: Vec<(bool, String)>,
    /// The denominator, if it is not 1.
    pub(crate) denominator: Option<Written>,
}

impl Signed {
    /// Is this ±1?
    pub(crate) fn is_unit(&self) -> bool {
        self.denominator.is_none() && matches!(&self.summands[..], [(false, text)] if text == "1")
    }
}

/// A coefficient with the sign of its first term taken out.
pub(crate) fn signed(style: Style, coefficient: &Coefficient) -> Signed {
    let (numerator, denominator) = sides(coefficient);
    let mut negative = false;
    let mut summands = Vec::new();
    for (position, (exponents, value)) in numerator.terms().enumerate() {
        if position == 0 {
            negative = value.is_negative();
        }
        let text = value_and_monomial(style, &value.abs(), exponents, &coefficient.names);
        summands.push((value.is_negative() != negative, text));
    }
    if summands.is_empty() {
        summands.push((false, "0".to_owned()));
    }
    Signed {
        negative,
        summands,
        denominator: (!coefficient.is_polynomial())
            .then(|| polynomial(style, &denominator, &coefficient.names)),
    }
}

/// A coefficient in one piece: `−3/10·t² + 1/5`.
pub(crate) fn coefficient(style: Style, coefficient: &Coefficient) -> Written {
    let (above, below) = sides(coefficient);
    let numerator = polynomial(style, &above, &coefficient.names);
    if coefficient.is_polynomial() {
        return numerator;
    }
    let denominator = polynomial(style, &below, &coefficient.names);
    quotient(style, &numerator, &denominator)
}

/// Numerator and denominator; those of a quotient with integral coefficients, without a common integral factor, and with
/// a positive leading coefficient of the denominator: `(t² + 1)/(2·t)`.
fn sides(
    coefficient: &Coefficient,
) -> (Cow<'_, PublishedPolynomial>, Cow<'_, PublishedPolynomial>) {
    let (above, below) = (&coefficient.numerator, &coefficient.denominator);
    if coefficient.is_polynomial() {
        return (Cow::Borrowed(above), Cow::Borrowed(below));
    }
    let values = || above.terms().chain(below.terms()).map(|(_, value)| value);
    let common = values().fold(BigInt::one(), |common, value| {
        lcm(common, value.denom().clone())
    });
    let content = values().fold(BigInt::zero(), |content, value| {
        gcd(content, value.numer() * (&common / value.denom()))
    });
    let negative = below
        .terms()
        .next()
        .is_some_and(|(_, value)| value.is_negative());
    if content.is_zero() {
        return (Cow::Borrowed(above), Cow::Borrowed(below));
    }
    let factor = BigRational::new(if negative { -common } else { common }, content);
    let scaled = |side: &PublishedPolynomial| {
        let mut result = PublishedPolynomial::default();
        for (exponents, value) in side.terms() {
            result.add_term(exponents.to_vec(), value * &factor);
        }
        Cow::Owned(result)
    };
    (scaled(above), scaled(below))
}

pub(crate) fn quotient(style: Style, numerator: &Written, denominator: &Written) -> Written {
    match style {
        Style::Latex => Written {
            text: format!("\\frac{{{}}}{{{}}}", numerator.text, denominator.text),
            level: Level::Power,
        },
        _ => Written {
            text: format!(
                "{}/{}",
                numerator.at(style, Level::Product),
                denominator.at(style, Level::Power)
            ),
            level: Level::Product,
        },
    }
}

fn polynomial(style: Style, polynomial: &PublishedPolynomial, names: &[String]) -> Written {
    let mut text = String::new();
    let mut level = Level::Atom;
    for (position, (exponents, value)) in polynomial.terms().enumerate() {
        let negative = value.is_negative();
        text.push_str(&match (position, negative) {
            (0, false) => String::new(),
            (0, true) => style.minus().to_owned(),
            (_, false) => " + ".to_owned(),
            (_, true) => format!(" {} ", style.minus()),
        });
        let term = value_and_monomial(style, &value.abs(), exponents, names);
        level = match (position, negative) {
            (0, false) if term.bytes().all(|b| b.is_ascii_digit()) => Level::Atom,
            (0, false) if value.is_one() && exponents.iter().filter(|e| **e > 0).count() == 1 => {
                Level::Power
            }
            (0, false) => Level::Product,
            _ => Level::Sum,
        };
        text.push_str(&term);
    }
    if text.is_empty() {
        text.push('0');
    }
    Written { text, level }
}

/// A positive number times a monomial: `1/3·t²`, `3·t`, `t`, `7/12`.
fn value_and_monomial(
    style: Style,
    value: &BigRational,
    exponents: &[u32],
    names: &[String],
) -> String {
    let monomial = monomial(style, exponents, names);
    match (value.is_one(), monomial.is_empty()) {
        (true, false) => monomial,
        (_, true) => number(style, value),
        (false, false) => format!("{}{}{monomial}", number(style, value), style.dot()),
    }
}

fn number(style: Style, value: &BigRational) -> String {
    if style == Style::Latex && !value.is_integer() {
        let sign = if value.is_negative() { "-" } else { "" };
        format!(
            "{sign}\\frac{{{}}}{{{}}}",
            value.numer().abs(),
            value.denom()
        )
    } else {
        value.to_string()
    }
}

fn monomial(style: Style, exponents: &[u32], names: &[String]) -> String {
    let mut factors = Vec::new();
    for (exponent, symbol) in exponents
        .iter()
        .zip(names)
        .filter(|(exponent, _)| **exponent > 0)
    {
        let (base, order) = split_primes(symbol);
        let symbol = format!("{}{}", name(style, base), primes(style, order));
        factors.push(match *exponent {
            1 => symbol,
            _ if power_may_follow(style, order) => {
                format!("{symbol}{}", power(style, &exponent.to_string()))
            }
            _ => format!("({symbol}){}", power(style, &exponent.to_string())),
        });
    }
    factors.join(style.dot())
}
