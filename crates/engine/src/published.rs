//! Coefficients in the published number types: what a result file holds.
//!
//! This module shares no code with crate `ring`: polynomials are maps from exponents to `num` rationals.

use linform_scalar::published::{BigInt, BigRational, One, Signed, Zero, gcd, lcm};
use std::collections::BTreeMap;
use std::fmt;

/// A polynomial in named symbols with published coefficients.
///
/// *Invariant*: no coefficient is 0. Exponents are counted in the order of a list of names that travels separately.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct PublishedPolynomial {
    terms: BTreeMap<Vec<u32>, BigRational>,
}

impl PublishedPolynomial {
    /// A constant, in any number of symbols.
    pub fn constant(symbols: usize, value: BigRational) -> Self {
        let mut result = Self::default();
        result.add_term(vec![0; symbols], value);
        result
    }

    /// Adds one term.
    pub fn add_term(&mut self, exponents: Vec<u32>, value: BigRational) {
        if value.is_zero() {
            return;
        }
        match self.terms.entry(exponents) {
            std::collections::btree_map::Entry::Vacant(place) => {
                place.insert(value);
            }
            std::collections::btree_map::Entry::Occupied(mut place) => {
                *place.get_mut() += value;
                if place.get().is_zero() {
                    place.remove();
                }
            }
        }
    }

    /// The terms, from the highest power (lexicographically) to the lowest.
    pub fn terms(&self) -> impl Iterator<Item = (&[u32], &BigRational)> {
        self.terms
            .iter()
            .rev()
            .map(|(exponents, value)| (exponents.as_slice(), value))
    }

    fn divided_by(&self, divisor: &BigRational) -> Self {
        let terms = self
            .terms
            .iter()
            .map(|(exponents, value)| (exponents.clone(), value / divisor));
        PublishedPolynomial {
            terms: terms.collect(),
        }
    }

    /// The least common denominator of the coefficients.
    fn common_denominator(&self) -> BigInt {
        self.terms.values().fold(BigInt::one(), |common, value| {
            lcm(common, value.denom().clone())
        })
    }

    /// The rational number by which the polynomial is a primitive integral one with positive leading coefficient.
    fn content(&self) -> BigRational {
        let denominator = self.common_denominator();
        let numerator = self.terms.values().fold(BigInt::zero(), |common, value| {
            gcd(common, value.numer() * (&denominator / value.denom()))
        });
        let content = BigRational::new(numerator, denominator);
        let negative = self
            .terms()
            .next()
            .is_some_and(|(_, value)| value.is_negative());
        if negative { -content } else { content }
    }

    /// Number of terms.
    pub fn len(&self) -> usize {
        self.terms.len()
    }

    /// Is this 0?
    pub fn is_empty(&self) -> bool {
        self.terms.is_empty()
    }

    /// Is this 1?
    pub fn is_one(&self) -> bool {
        self.terms.len() == 1
            && self
                .terms
                .iter()
                .all(|(exponents, value)| value.is_one() && exponents.iter().all(|&e| e == 0))
    }

    /// The text with the given names: `3/10*t^2 - 1/5`.
    pub fn text(&self, names: &[String]) -> String {
        if self.is_empty() {
            return "0".to_owned();
        }
        let mut text = String::new();
        for (position, (exponents, value)) in self.terms().enumerate() {
            text.push_str(match (position, value.is_negative()) {
                (0, false) => "",
                (0, true) => "-",
                (_, false) => " + ",
                (_, true) => " - ",
            });
            let monomial = monomial_text(exponents, names);
            let size = value.abs();
            match (size.is_one(), monomial.is_empty()) {
                (_, true) => text.push_str(&size.to_string()),
                (true, false) => text.push_str(&monomial),
                (false, false) => text.push_str(&format!("{size}*{monomial}")),
            }
        }
        text
    }
}

/// The text of a monomial: `q^2*t`, empty for 1.
pub fn monomial_text(exponents: &[u32], names: &[String]) -> String {
    let factors = exponents
        .iter()
        .zip(names)
        .filter(|(exponent, _)| **exponent > 0);
    factors
        .map(|(exponent, name)| {
            if *exponent == 1 {
                name.clone()
            } else {
                format!("{name}^{exponent}")
            }
        })
        .collect::<Vec<_>>()
        .join("*")
}

/// A coefficient of a linear form: a quotient of polynomials in the variable and the constants.
///
/// *Invariant*: the quotient is in lowest terms as it was found; for a polynomial the denominator is 1.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Coefficient {
    /// The names of the symbols that exponents count.
    pub names: std::sync::Arc<[String]>,
    /// The numerator.
    pub numerator: PublishedPolynomial,
    /// The denominator.
    pub denominator: PublishedPolynomial,
}

impl Coefficient {
    /// Is the denominator 1?
    pub fn is_polynomial(&self) -> bool {
        self.denominator.is_one()
    }
}

impl fmt::Display for Coefficient {
    /// `1/3*t`; a quotient with integral numerator and denominator, `(t^2 + 1)/(2*t)`.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if self.is_polynomial() {
            return f.write_str(&self.numerator.text(&self.names));
        }
        let clear = BigRational::from_integer(self.numerator.common_denominator());
        let numerator = self.numerator.divided_by(&clear.recip()).text(&self.names);
        let denominator = self.denominator.divided_by(&clear.recip());
        let simple = denominator.len() == 1;
        let denominator = denominator.text(&self.names);
        let wrap = |text: String, bare: bool| if bare { text } else { format!("({text})") };
        let bare = simple && !denominator.contains(['*', '/', '-']);
        write!(
            f,
            "{}/{}",
            wrap(numerator, self.numerator.len() <= 1),
            wrap(denominator, bare)
        )
    }
}

/// A text is not a coefficient.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct CoefficientError(String);

impl fmt::Display for CoefficientError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.0)
    }
}

impl std::error::Error for CoefficientError {}

/// The largest exponent that is read.
const MOST_EXPONENT: u32 = 100_000;

impl Coefficient {
    /// Reads a coefficient as [`Display`](fmt::Display) writes it, in the given symbols.
    ///
    /// # Errors
    ///
    /// A text that is no quotient of sums of terms `c*t^i`, a symbol that is not among the names, a denominator 0.
    pub fn parse(
        text: &str,
        names: &std::sync::Arc<[String]>,
    ) -> Result<Coefficient, CoefficientError> {
        let wrong = |what: &str| CoefficientError(format!("`{}`: {what}", shorten(text)));
        let (numerator, denominator) = split_quotient(text);
        let read = |part: &str| {
            let inner = part
                .trim()
                .strip_prefix('(')
                .and_then(|rest| rest.strip_suffix(')'))
                .unwrap_or(part);
            parse_sum(inner, names).ok_or_else(|| {
                wrong("not a sum of terms such as 3/10*t^2 in the symbols of the base")
            })
        };
        let numerator = read(numerator)?;
        let denominator = match denominator {
            Some(part) => read(part)?,
            None => PublishedPolynomial::constant(names.len(), BigRational::one()),
        };
        let Some((exponents, leading)) = denominator.terms().next() else {
            return Err(wrong("the denominator is 0"));
        };
        // `t/3` is a polynomial; other denominators become integral and primitive, with positive leading coefficient.
        let factor = if denominator.len() == 1 && exponents.iter().all(|&exponent| exponent == 0) {
            leading.clone()
        } else {
            denominator.content()
        };
        let (numerator, denominator) = (
            numerator.divided_by(&factor),
            denominator.divided_by(&factor),
        );
        Ok(Coefficient {
            names: names.clone(),
            numerator,
            denominator,
        })
    }
}

fn shorten(text: &str) -> String {
    const SHOWN: usize = 60;
    let mut short: String = text.chars().take(SHOWN).collect();
    if short.len() < text.len() {
        short.push('…');
    }
    short
}

/// Splits `N/(D)`, `(N)/D` and `N/7`-like texts: a slash outside parentheses that is not part of a rational number.
fn split_quotient(text: &str) -> (&str, Option<&str>) {
    let mut depth = 0usize;
    let bytes = text.as_bytes();
    for (position, byte) in bytes.iter().enumerate() {
        match byte {
            b'(' => depth += 1,
            b')' => depth = depth.saturating_sub(1),
            b'/' if depth == 0 => {
                let after_digit = position > 0 && bytes[position - 1].is_ascii_digit();
                let before_digit = bytes.get(position + 1).is_some_and(u8::is_ascii_digit);
                // `t^2/3` never occurs: a rational number stands in front of its monomial.
                if !(after_digit && before_digit) {
                    return (&text[..position], Some(&text[position + 1..]));
                }
            }
            _ => {}
        }
    }
    (text, None)
}

fn parse_sum(text: &str, names: &[String]) -> Option<PublishedPolynomial> {
    let mut sum = PublishedPolynomial::default();
    let mut rest = text.trim();
    if rest == "0" {
        return Some(sum);
    }
    let mut first = true;
    while !rest.is_empty() {
        let negative = match rest.as_bytes()[0] {
            b'-' => true,
            b'+' if !first => false,
            _ if first => {
                let (exponents, value, tail) = parse_term(rest, names)?;
                sum.add_term(exponents, value);
                (rest, first) = (tail, false);
                continue;
            }
            _ => return None,
        };
        let (exponents, value, tail) = parse_term(rest[1..].trim_start(), names)?;
        sum.add_term(exponents, if negative { -value } else { value });
        (rest, first) = (tail, false);
    }
    (!first).then_some(sum)
}

/// One term without its sign, and what follows it.
fn parse_term<'t>(text: &'t str, names: &[String]) -> Option<(Vec<u32>, BigRational, &'t str)> {
    let end = text.find(['+', '-']).unwrap_or(text.len());
    let (term, rest) = text.split_at(end);
    let mut exponents = vec![0u32; names.len()];
    let mut value = BigRational::one();
    for (position, factor) in term.trim().split('*').map(str::trim).enumerate() {
        if factor.starts_with(|c: char| c.is_ascii_digit()) {
            // A number stands first; `+5`, `1_000` and spaces inside are refused.
            if position > 0
                || !factor
                    .bytes()
                    .all(|byte| byte.is_ascii_digit() || byte == b'/')
            {
                return None;
            }
            let (numerator, denominator) = factor.split_once('/').unwrap_or((factor, "1"));
            let denominator: BigInt = denominator.parse().ok()?;
            if denominator.is_zero() {
                return None;
            }
            value = BigRational::new(numerator.parse().ok()?, denominator);
            continue;
        }
        let (name, exponent) = factor.split_once('^').unwrap_or((factor, "1"));
        let index = names.iter().position(|known| known == name)?;
        let exponent: u32 = exponent
            .parse()
            .ok()
            .filter(|exponent| *exponent <= MOST_EXPONENT)?;
        exponents[index] = exponents[index]
            .checked_add(exponent)
            .filter(|sum| *sum <= MOST_EXPONENT)?;
    }
    Some((exponents, value, rest))
}
