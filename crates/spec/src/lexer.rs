//! The tokens of expressions.

use crate::place::Place;
use crate::source::Diagnostic;
use linform_scalar::Integer;

/// The longest expression, in bytes.
const MAX_TEXT: usize = 1 << 20;

/// The most digits of a number.
const MAX_DIGITS: usize = 100_000;

/// The most primes on one name.
pub(crate) const MAX_PRIMES: u32 = 1000;

/// A token and the bytes it stands at in the text.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Token {
    pub(crate) kind: TokenKind,
    pub(crate) start: usize,
    pub(crate) end: usize,
}

#[derive(Clone, Debug, PartialEq)]
pub(crate) enum TokenKind {
    Number(Integer),
    Name {
        base: String,
        primes: u32,
    },
    /// Primes that follow something else than a name.
    Primes(u32),
    Text(String),
    /// `+ - * / ^ ( ) [ ] , .. = == != < <= > >=`
    Sign(&'static str),
    End,
}

const SIGNS: [(&str, &str); 22] = [
    ("..", ".."),
    ("==", "=="),
    ("!=", "!="),
    ("<=", "<="),
    (">=", ">="),
    ("≤", "<="),
    ("≥", ">="),
    ("≠", "!="),
    ("+", "+"),
    ("-", "-"),
    ("−", "-"),
    ("*", "*"),
    ("·", "*"),
    ("/", "/"),
    ("^", "^"),
    ("(", "("),
    (")", ")"),
    ("[", "["),
    ("]", "]"),
    (",", ","),
    ("<", "<"),
    (">", ">"),
];

/// Can a name start with this character?
pub(crate) fn starts_name(c: char) -> bool {
    // The Weierstrass sign counts as mathematics, not as a letter, in Unicode.
    c.is_alphabetic() || c == '_' || c == '℘'
}

/// Can a name go on with this character?
pub(crate) fn continues_name(c: char) -> bool {
    starts_name(c) || c.is_ascii_digit()
}

/// How many primes this character stands for.
fn primes_in(c: char) -> Option<u32> {
    match c {
        '\'' | '′' | '’' => Some(1),
        '″' => Some(2),
        '‴' => Some(3),
        '⁗' => Some(4),
        _ => None,
    }
}

/// The tokens of a text, with `End` after the last.
pub(crate) fn tokens(text: &str, place: &Place) -> Result<Vec<Token>, Diagnostic> {
    if text.len() > MAX_TEXT {
        return Err(Diagnostic::new(
            format!("this expression has {} bytes", text.len()),
            place.span(0, text.floor_char_boundary(60)),
        )
        .help(format!(
            "at most {MAX_TEXT} are read: give parts of it names, as elements of a family"
        )));
    }
    let mut tokens = Vec::new();
    let mut at = 0;
    while let Some(c) = text[at..].chars().next() {
        let rest = &text[at..];
        let start = at;
        let kind = if c.is_whitespace() {
            at += c.len_utf8();
            continue;
        } else if c.is_ascii_digit() {
            let length = rest
                .find(|c: char| !c.is_ascii_digit())
                .unwrap_or(rest.len());
            at += length;
            number(&rest[..length], text, start, place)?
        } else if starts_name(c) {
            let length = rest.find(|c| !continues_name(c)).unwrap_or(rest.len());
            at += length;
            let primes = primes_at(text, &mut at, place)?;
            TokenKind::Name {
                base: rest[..length].to_owned(),
                primes,
            }
        } else if primes_in(c).is_some() {
            TokenKind::Primes(primes_at(text, &mut at, place)?)
        } else if c == '"' {
            let Some(length) = rest[1..].find('"') else {
                return Err(
                    Diagnostic::new("this text has no end", place.span(start, start + 1))
                        .help("close it with a quotation mark"),
                );
            };
            at += length + 2;
            TokenKind::Text(rest[1..=length].to_owned())
        } else if rest.starts_with("**") {
            return Err(
                Diagnostic::new("`**` is not an operator", place.span(start, start + 2))
                    .help("a power is written `a^b`"),
            );
        } else if let Some((sign, meaning)) = SIGNS.iter().find(|(s, _)| rest.starts_with(s)) {
            at += sign.len();
            TokenKind::Sign(meaning)
        } else if c == '=' {
            at += 1;
            TokenKind::Sign("=")
        } else {
            return Err(Diagnostic::new(
                format!("unexpected character `{}`", c.escape_debug()),
                place.span(start, start + c.len_utf8()),
            )
            .help(help_for(c)));
        };
        tokens.push(Token {
            kind,
            start,
            end: at,
        });
    }
    tokens.push(Token {
        kind: TokenKind::End,
        start: text.len(),
        end: text.len(),
    });
    Ok(tokens)
}

fn primes_at(text: &str, at: &mut usize, place: &Place) -> Result<u32, Diagnostic> {
    let start = *at;
    let mut primes = 0u32;
    while let Some((c, count)) = text[*at..]
        .chars()
        .next()
        .and_then(|c| Some((c, primes_in(c)?)))
    {
        primes = primes.saturating_add(count);
        *at += c.len_utf8();
    }
    if primes > MAX_PRIMES {
        return Err(
            Diagnostic::new(format!("{primes} primes in a row"), place.span(start, *at))
                .help(format!("at most {MAX_PRIMES} are read")),
        );
    }
    Ok(primes)
}

fn number(digits: &str, text: &str, start: usize, place: &Place) -> Result<TokenKind, Diagnostic> {
    let end = start + digits.len();
    let after = &text[end..];
    let mut following = after.chars();
    if let Some(c) = following.next() {
        if starts_name(c) {
            return Err(Diagnostic::new(
                "a number runs into a name",
                place.span(start, end + c.len_utf8()),
            )
            .help("write the product out, as in `2*q`"));
        }
        if c == '.' && following.next() != Some('.') {
            return Err(Diagnostic::new(
                "decimals are not exact numbers",
                place.span(start, end + 1),
            )
            .help("write a fraction, as in `3/2`"));
        }
    }
    if digits.len() > MAX_DIGITS {
        return Err(Diagnostic::new(
            format!("a number of {} digits", digits.len()),
            place.span(start, end),
        )
        .help(format!("at most {MAX_DIGITS} digits are read")));
    }
    digits
        .parse()
        .map(TokenKind::Number)
        .map_err(|_| Diagnostic::new("not a number", place.span(start, end)))
}

fn help_for(c: char) -> String {
    match c {
        '{' | '}' => "group with parentheses `( )`".to_owned(),
        '×' | '⋅' | '∗' => "a product is written `a*b`".to_owned(),
        '÷' | ':' => "a quotient is written `a/b`".to_owned(),
        '–' | '—' => "a difference is written `a - b`".to_owned(),
        '.' => "a range is written `1..n`".to_owned(),
        '&' | '|' => "conditions are separated by commas".to_owned(),
        ';' => "the parts of a list are separated by commas".to_owned(),
        '²' | '³' | '⁴' => "a power is written `a^2`".to_owned(),
        '“' | '”' | '„' => "text stands in straight quotation marks".to_owned(),
        _ => "an expression is made of numbers, names, `+ - * / ^`, `u[1,0]` and calls".to_owned(),
    }
}
