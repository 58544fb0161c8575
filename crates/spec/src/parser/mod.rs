//! Expressions, ranges, conditions, terms and rules from tokens.

mod call;
mod clauses;
mod rule;
mod sum;

pub(crate) use call::unknown_function;
pub(crate) use clauses::{clauses, terms_item};
pub(crate) use rule::{left_of_yields, rule};

use crate::expression::{Expr, ExprKind, Function, MAX_DEPTH};
use crate::lexer::{Token, TokenKind, tokens};
use crate::place::Place;
use crate::source::{Diagnostic, Span};

/// The deepest nesting of brackets, calls, signs and exponents.
const MAX_NESTING: usize = 200;

type Parsed<T> = Result<T, Diagnostic>;

/// How an operator joins its operands.
type Make = fn(Box<Expr>, Box<Expr>) -> ExprKind;

/// An expression that stands alone, such as a term read back from a result.
///
/// Names are not checked: that is the caller's business, as is the form `A(x)` (see
/// [`ExprKind::Apply`]). Spans count the bytes of `text`, in file 0.
///
/// # Errors
///
/// If the text is not an expression, or exceeds the bounds on length, nesting, and numbers.
///
/// # Examples
///
/// ```
/// let term = linform_spec::parse_expression("ratio( F , 3 )")?;
/// assert_eq!(linform_spec::text_of(&term), "ratio(F,3)");
/// # Ok::<(), linform_spec::Diagnostic>(())
/// ```
pub fn parse_expression(text: &str) -> Result<Expr, Diagnostic> {
    expression(text, &Place::literal(0, 0, text.len()))
}

/// A whole text as one expression.
pub(crate) fn expression(text: &str, place: &Place) -> Parsed<Expr> {
    let mut parser = Parser::new(text, place)?;
    let expr = parser.expression()?;
    parser.finish("an operator")?;
    Ok(expr)
}

/// A tree and its depth.
struct Tree {
    expr: Expr,
    depth: usize,
}

struct Parser<'a> {
    tokens: Vec<Token>,
    at: usize,
    nesting: usize,
    place: &'a Place,
}

// Binding powers of the operators.
const SUM: u8 = 1;
const PRODUCT: u8 = 2;
const POWER: u8 = 3;

impl<'a> Parser<'a> {
    fn new(text: &str, place: &'a Place) -> Parsed<Parser<'a>> {
        Ok(Parser {
            tokens: tokens(text, place)?,
            at: 0,
            nesting: 0,
            place,
        })
    }

    // `End` is always last and never passed.
    fn token(&self) -> &Token {
        &self.tokens[self.at.min(self.tokens.len() - 1)]
    }

    fn advance(&mut self) {
        self.at = (self.at + 1).min(self.tokens.len() - 1);
    }

    fn sign(&self) -> Option<&'static str> {
        match self.token().kind {
            TokenKind::Sign(sign) => Some(sign),
            _ => None,
        }
    }

    fn takes(&mut self, sign: &str) -> bool {
        let found = self.sign() == Some(sign);
        if found {
            self.advance();
        }
        found
    }

    fn at_for(&self) -> bool {
        matches!(&self.token().kind, TokenKind::Name { base, primes: 0 } if base == "for")
    }

    fn at_end(&self) -> bool {
        self.token().kind == TokenKind::End
    }

    fn span_from(&self, start: usize) -> Span {
        let end = self.at.checked_sub(1).map_or(start, |i| self.tokens[i].end);
        self.place.span(start, end.max(start))
    }

    fn error_here(&self, message: impl Into<String>) -> Diagnostic {
        let token = self.token();
        Diagnostic::new(message, self.place.span(token.start, token.end))
    }

    fn expected(&self, what: &str) -> Diagnostic {
        let found = match &self.token().kind {
            TokenKind::Number(_) => "a number".to_owned(),
            TokenKind::Name { base, .. } if base == "for" => "`for`".to_owned(),
            TokenKind::Name { .. } => "a name".to_owned(),
            TokenKind::Primes(_) => "a prime".to_owned(),
            TokenKind::Text(_) => "a text".to_owned(),
            TokenKind::Sign(sign) => format!("`{sign}`"),
            TokenKind::End => "the end".to_owned(),
        };
        self.error_here(format!("expected {what}, found {found}"))
    }

    fn expect(&mut self, sign: &str, purpose: &str) -> Parsed<()> {
        if self.takes(sign) {
            Ok(())
        } else {
            Err(self
                .expected(&format!("`{sign}`"))
                .help(format!("`{sign}` is missing {purpose}")))
        }
    }

    fn finish(&self, what: &str) -> Parsed<()> {
        match &self.token().kind {
            TokenKind::End => Ok(()),
            TokenKind::Name { .. } | TokenKind::Number(_) | TokenKind::Sign("(") => Err(self
                .expected(&format!("{what} or the end"))
                .help("a product is written with `*`, as in `2*q`")),
            TokenKind::Primes(_) => Err(self
                .expected(&format!("{what} or the end"))
                .help("a prime stands after a name, `]` or `)`")),
            TokenKind::Sign("=" | "<" | ">" | "<=" | ">=" | "==" | "!=") => Err(self
                .expected(&format!("{what} or the end"))
                .help("an expression stands here, not a relation")),
            TokenKind::Sign(")" | "]") => Err(self
                .expected(&format!("{what} or the end"))
                .help("this bracket was not opened")),
            _ => Err(self
                .expected(&format!("{what} or the end"))
                .help("take the rest away, or join it with an operator")),
        }
    }

    fn expression(&mut self) -> Parsed<Expr> {
        self.binary(SUM).map(|tree| tree.expr)
    }

    fn nested<T>(&mut self, inner: impl FnOnce(&mut Self) -> Parsed<T>) -> Parsed<T> {
        if self.nesting == MAX_NESTING {
            return Err(self
                .error_here(format!("nested more than {MAX_NESTING} deep"))
                .help("give inner parts names, as elements of a family"));
        }
        self.nesting += 1;
        let result = inner(self);
        self.nesting -= 1;
        result
    }

    fn tree(&self, start: usize, depth: usize, kind: ExprKind) -> Parsed<Tree> {
        let span = self.span_from(start);
        if depth > MAX_DEPTH {
            let at = self.tokens[self.at.saturating_sub(1)].clone();
            return Err(too_deep(self.place.span(at.start, at.end)));
        }
        Ok(Tree {
            expr: Expr::new(kind, span),
            depth,
        })
    }

    /// Operator precedence: operators that bind at least as tightly as `least`.
    fn binary(&mut self, least: u8) -> Parsed<Tree> {
        if least == SUM {
            return self.sum();
        }
        let start = self.token().start;
        let mut left = self.unary(least)?;
        loop {
            let (binding, make): (u8, Make) = match self.sign() {
                Some("*") => (PRODUCT, ExprKind::Mul),
                Some("/") => (PRODUCT, ExprKind::Div),
                Some("^") => (POWER, ExprKind::Pow),
                _ => return Ok(left),
            };
            if binding < least {
                return Ok(left);
            }
            self.advance();
            let right = if binding == POWER {
                // To the right: a^b^c = a^(b^c).
                self.nested(|parser| parser.binary(POWER))?
            } else {
                self.binary(binding + 1)?
            };
            let depth = 1 + left.depth.max(right.depth);
            let kind = make(Box::new(left.expr), Box::new(right.expr));
            left = self.tree(start, depth, kind)?;
        }
    }

    /// An operand, perhaps negated. At the start of a sum or product the sign takes the whole product.
    fn unary(&mut self, least: u8) -> Parsed<Tree> {
        let start = self.token().start;
        if self.takes("-") {
            let operand = self.nested(|parser| parser.binary(least.max(PRODUCT)))?;
            return self.tree(
                start,
                operand.depth + 1,
                ExprKind::Neg(Box::new(operand.expr)),
            );
        }
        if self.takes("+") {
            return self.nested(|parser| parser.unary(least));
        }
        self.atom()
    }

    fn atom(&mut self) -> Parsed<Tree> {
        let token = self.token().clone();
        match token.kind {
            TokenKind::Number(n) => {
                self.advance();
                self.tree(token.start, 1, ExprKind::Number(n))
            }
            TokenKind::Name { .. } if self.at_for() => Err(self
                .expected("an expression")
                .help("`for` is a keyword and comes after an expression")),
            TokenKind::Name { base, primes } => {
                self.advance();
                match self.sign() {
                    Some("[") => self.element(token.start, base, primes),
                    Some("(") => self.call(token.start, base, primes),
                    _ => self.tree(token.start, 1, ExprKind::Name { base, primes }),
                }
            }
            TokenKind::Sign("(") => {
                self.advance();
                let inner = self.nested(|parser| parser.binary(SUM))?;
                self.close(")", token.start)?;
                self.after_group(token.start, inner)
            }
            TokenKind::Sign("[") => Err(self
                .expected("an expression")
                .help("a list stands in `minor(u, [0,1], [0,1])` only")),
            TokenKind::Text(_) => Err(self
                .expected("an expression")
                .help("a text stands in `column(\"name\")` only")),
            TokenKind::End => Err(self
                .expected("an expression")
                .help("something is missing here")),
            _ => Err(self
                .expected("an expression")
                .help("an operand is missing here")),
        }
    }

    /// `(e)`, or `(e)'`, which is `D(e)`.
    fn after_group(&mut self, start: usize, inner: Tree) -> Parsed<Tree> {
        let kind = match self.primes()? {
            0 => ExprKind::Group(Box::new(inner.expr)),
            primes => ExprKind::Call {
                function: Function::D,
                arguments: vec![inner.expr],
                primes: primes - 1,
            },
        };
        self.tree(start, inner.depth + 1, kind)
    }
}

fn too_deep(span: Span) -> Diagnostic {
    Diagnostic::new(
        format!("more than {MAX_DEPTH} operations inside each other"),
        span,
    )
    .help("a chain of operators counts: put parts of it into parentheses")
}
