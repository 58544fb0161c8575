//! Reading polynomials from text.

use crate::{Polynomial, Symbols};
use linform_scalar::{Control, Integer, Rational, Stop, Unlimited};
use std::fmt;
use std::sync::atomic::{AtomicU32, Ordering};

/// The longest text, in bytes.
const LONGEST_TEXT: usize = 1 << 26;
/// The deepest nesting of parentheses.
const DEEPEST_NESTING: usize = 100;
/// The longest number, in digits.
const LONGEST_NUMBER: usize = 100_000;
/// The largest number of terms of a product or power within the text.
const MOST_TERMS: usize = 200_000;
/// How often the products of one text may ask whether to go on: some tenths of a second.
const MOST_STEPS: u32 = 2000;

/// A text is no polynomial in the given symbols, or exceeds a bound.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ParseError {
    kind: ParseErrorKind,
    offset: usize,
}

#[derive(Clone, Debug, PartialEq, Eq)]
enum ParseErrorKind {
    TextTooLong,
    NestingTooDeep,
    NumberTooLong,
    ExponentTooLarge,
    ResultTooLarge,
    UnknownName(String),
    UnexpectedCharacter(char),
    UnexpectedEnd,
    ExponentExpected,
    DivisionByPolynomial,
    DivisionByZero,
}

impl ParseError {
    /// The byte in the text at which the trouble was noticed.
    pub fn offset(&self) -> usize {
        self.offset
    }
}

impl fmt::Display for ParseError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match &self.kind {
            ParseErrorKind::TextTooLong => {
                write!(f, "the text is longer than {LONGEST_TEXT} bytes")?;
            }
            ParseErrorKind::NestingTooDeep => {
                write!(f, "parentheses nested deeper than {DEEPEST_NESTING}")?;
            }
            ParseErrorKind::NumberTooLong => {
                write!(f, "a number of more than {LONGEST_NUMBER} digits")?;
            }
            ParseErrorKind::ExponentTooLarge => {
                write!(f, "an exponent above {}", crate::Monomial::MAX_EXPONENT)?;
            }
            ParseErrorKind::ResultTooLarge => f.write_str("a product or power is too large")?,
            ParseErrorKind::UnknownName(name) => write!(f, "unknown name `{name}`")?,
            ParseErrorKind::UnexpectedCharacter(character) => {
                write!(f, "unexpected character {character:?}")?;
            }
            ParseErrorKind::UnexpectedEnd => f.write_str("the text ends too early")?,
            ParseErrorKind::ExponentExpected => f.write_str("expected an exponent in digits")?,
            ParseErrorKind::DivisionByPolynomial => {
                f.write_str("division by what is not a number")?;
            }
            ParseErrorKind::DivisionByZero => f.write_str("division by zero")?,
        }
        write!(f, " at byte {}", self.offset)
    }
}

impl std::error::Error for ParseError {}

/// Counts the questions instead of the time, so that what is too large does not depend on the machine.
#[derive(Default)]
struct Budget(AtomicU32);

impl Control for Budget {
    fn proceed(&self) -> Result<(), Stop> {
        if self.0.fetch_add(1, Ordering::Relaxed) < MOST_STEPS {
            Ok(())
        } else {
            Err(Stop::SizeLimit)
        }
    }

    fn term_limit(&self) -> usize {
        MOST_TERMS
    }
}

impl Symbols {
    /// Reads a polynomial: integers, names, `+ - * / ^` and parentheses, with division by numbers alone.
    ///
    /// `^` binds closest, then `*` and `/` from the left, then the signs; spaces separate. Inverse to
    /// [`Symbols::format`].
    ///
    /// # Errors
    ///
    /// What is wrong and at which byte. Bounded are the text (64 MiB), the nesting (100), the digits of a
    /// number (100 000), exponents, and the size of products and powers.
    ///
    /// # Examples
    ///
    /// ```
    /// use linform_ring::Symbols;
    ///
    /// let symbols = Symbols::new(vec![], Some("t".into()), vec![]);
    /// let p = symbols.parse("(3*t^2 - 2)/10")?;
    /// assert_eq!(symbols.format(&p), "3/10*t^2 - 1/5");
    /// assert!(symbols.parse("1/t").is_err());
    /// # Ok::<(), linform_ring::ParseError>(())
    /// ```
    pub fn parse(&self, text: &str) -> Result<Polynomial, ParseError> {
        let mut reader = Reader {
            symbols: self,
            text,
            offset: 0,
            depth: 0,
            budget: Budget::default(),
        };
        if text.len() > LONGEST_TEXT {
            return Err(reader.error(ParseErrorKind::TextTooLong));
        }
        let result = reader.sum()?;
        match reader.peek() {
            None => Ok(result),
            Some(character) => Err(reader.error(ParseErrorKind::UnexpectedCharacter(character))),
        }
    }
}

struct Reader<'a> {
    symbols: &'a Symbols,
    text: &'a str,
    offset: usize,
    depth: usize,
    budget: Budget,
}

impl<'a> Reader<'a> {
    fn error(&self, kind: ParseErrorKind) -> ParseError {
        ParseError {
            kind,
            offset: self.offset,
        }
    }

    fn stopped(&self, _: Stop) -> ParseError {
        self.error(ParseErrorKind::ResultTooLarge)
    }

    /// The next character that is not a space.
    fn peek(&mut self) -> Option<char> {
        let rest = &self.text[self.offset..];
        let trimmed = rest.trim_start();
        self.offset += rest.len() - trimmed.len();
        trimmed.chars().next()
    }

    fn take(&mut self, expected: char) -> bool {
        let found = self.peek() == Some(expected);
        if found {
            self.offset += expected.len_utf8();
        }
        found
    }

    /// The longest piece from here on whose characters all pass.
    fn piece(&mut self, passes: impl Fn(char) -> bool) -> &'a str {
        let rest = &self.text[self.offset..];
        let end = rest.find(|c| !passes(c)).unwrap_or(rest.len());
        self.offset += end;
        &rest[..end]
    }

    /// Are the signs at this place together a minus?
    fn signs(&mut self) -> bool {
        let mut negative = false;
        loop {
            if self.take('-') {
                negative = !negative;
            } else if !self.take('+') {
                return negative;
            }
        }
    }

    fn sum(&mut self) -> Result<Polynomial, ParseError> {
        // Long sums of single terms are the usual text: their terms are sorted once, at the end.
        let mut summands = Vec::new();
        loop {
            let negative = self.signs();
            let value = self.product()?;
            summands.push(if negative { -&value } else { value });
            if !matches!(self.peek(), Some('+' | '-')) {
                break;
            }
        }
        if summands.len() == 1 {
            return Ok(summands.swap_remove(0));
        }
        Ok(Polynomial::from_terms(summands.into_iter().flat_map(
            |summand| {
                let (terms, denominator) = summand.into_parts();
                terms.into_iter().map(move |(monomial, coefficient)| {
                    let value = Rational::new(coefficient, denominator.clone());
                    (monomial, value.unwrap_or_default())
                })
            },
        )))
    }

    fn product(&mut self) -> Result<Polynomial, ParseError> {
        let mut result = self.power()?;
        loop {
            if self.take('*') {
                let negative = self.signs();
                let factor = self.power()?;
                // Products of single terms (and their powers) make up any canonical text, and their work is bounded by its length.
                let product = if result.len() <= 1 && factor.len() <= 1 {
                    result.mul(&factor, &Unlimited)
                } else {
                    result.mul(&factor, &self.budget)
                };
                result = product.map_err(|stop| self.stopped(stop))?;
                if negative {
                    result = -&result;
                }
            } else if self.take('/') {
                let negative = self.signs();
                let divisor = self.power()?;
                let Some(value) = divisor.as_constant() else {
                    return Err(self.error(ParseErrorKind::DivisionByPolynomial));
                };
                let Some(inverse) = value.recip() else {
                    return Err(self.error(ParseErrorKind::DivisionByZero));
                };
                result = result.scale(&if negative { -inverse } else { inverse });
            } else {
                return Ok(result);
            }
        }
    }

    fn power(&mut self) -> Result<Polynomial, ParseError> {
        let base = self.atom()?;
        if !self.take('^') {
            return Ok(base);
        }
        self.peek();
        let digits = self.piece(|c| c.is_ascii_digit());
        if digits.is_empty() {
            return Err(self.error(ParseErrorKind::ExponentExpected));
        }
        let exponent = match digits.parse::<u32>() {
            Ok(exponent) if exponent <= u32::from(crate::Monomial::MAX_EXPONENT) => exponent,
            _ => return Err(self.error(ParseErrorKind::ExponentTooLarge)),
        };
        let power = if base.len() <= 1 {
            base.pow(exponent, &Unlimited)
        } else {
            base.pow(exponent, &self.budget)
        };
        power.map_err(|stop| self.stopped(stop))
    }

    fn atom(&mut self) -> Result<Polynomial, ParseError> {
        match self.peek() {
            None => Err(self.error(ParseErrorKind::UnexpectedEnd)),
            Some('(') => {
                if self.depth == DEEPEST_NESTING {
                    return Err(self.error(ParseErrorKind::NestingTooDeep));
                }
                self.offset += 1;
                self.depth += 1;
                let inner = self.sum()?;
                self.depth -= 1;
                match (self.take(')'), self.peek()) {
                    (true, _) => Ok(inner),
                    (false, None) => Err(self.error(ParseErrorKind::UnexpectedEnd)),
                    (false, Some(other)) => {
                        Err(self.error(ParseErrorKind::UnexpectedCharacter(other)))
                    }
                }
            }
            Some(first) if first.is_ascii_digit() => {
                let digits = self.piece(|c| c.is_ascii_digit());
                if digits.len() > LONGEST_NUMBER {
                    return Err(self.error(ParseErrorKind::NumberTooLong));
                }
                let value = digits.parse::<Integer>();
                let value =
                    value.map_err(|_| self.error(ParseErrorKind::UnexpectedCharacter(first)))?;
                Ok(Polynomial::constant(value.into()))
            }
            Some(first) if first.is_alphabetic() || first == '_' => {
                let start = self.offset;
                self.piece(|c| c.is_alphanumeric() || c == '_');
                self.piece(|c| c == '\'');
                let name = &self.text[start..self.offset];
                match self.symbols.index_of(name) {
                    Some(index) => Ok(Polynomial::symbol(self.symbols, index)),
                    None => {
                        let kind = ParseErrorKind::UnknownName(name.chars().take(80).collect());
                        self.offset = start;
                        Err(self.error(kind))
                    }
                }
            }
            Some(other) => Err(self.error(ParseErrorKind::UnexpectedCharacter(other))),
        }
    }
}
