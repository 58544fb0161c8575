//! Expressions, ranges, conditions, terms and rules from tokens.

use crate::expression::{Condition, Expr, ExprKind, Function, MAX_DEPTH, Relation, Sweep};
use crate::family::{Known, Pattern, Rule};
use crate::lexer::{MAX_PRIMES, Token, TokenKind, tokens};
use crate::place::Place;
use crate::source::{Diagnostic, Span};
use crate::suggest::did_you_mean;
use crate::terms::TermsItem;

/// The deepest nesting of brackets, calls, signs and exponents.
const MAX_NESTING: usize = 200;

/// The longest list of ranges and conditions, in tokens.
const MAX_CLAUSE_TOKENS: usize = 500;

/// The most indices of a family.
const MAX_INDICES: usize = 16;

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

/// `e` or `e for i = 1..n, …`
pub(crate) fn terms_item(text: &str, place: &Place) -> Parsed<TermsItem> {
    let mut parser = Parser::new(text, place)?;
    let body = parser.expression()?;
    let (sweeps, conditions) = parser.clauses_after_for()?;
    Ok(TermsItem {
        body,
        sweeps,
        conditions,
        span: place.whole(),
    })
}

/// `j = 0..8, k = 0..j, j + k <= 8`
pub(crate) fn clauses(text: &str, place: &Place) -> Parsed<(Vec<Sweep>, Vec<Condition>)> {
    let mut parser = Parser::new(text, place)?;
    parser.clauses()
}

/// The family on the left of a rule, and the rule.
pub(crate) fn rule(text: &str, place: &Place) -> Parsed<(String, Rule)> {
    let mut parser = Parser::new(text, place)?;
    let left = parser.left_side()?;
    let known = match left.primes {
        0 => Known::Value,
        1 => Known::Derivative,
        _ => {
            return Err(Diagnostic::new(
                "a rule gives an element or its first derivative",
                left.span,
            )
            .help("write one prime on the left"));
        }
    };
    parser.expect("=", "between the two sides of a rule")?;
    let body = parser.expression()?;
    let (sweeps, mut conditions) = parser.clauses_after_for()?;
    // In a rule `for j = 1..5` is a condition: the pattern has already bound the variable.
    conditions.extend(sweeps.into_iter().map(condition_of_sweep));
    let rule = Rule {
        pattern: left.pattern,
        pattern_spans: left.pattern_spans,
        known,
        body,
        conditions,
        span: place.whole(),
    };
    Ok((left.family, rule))
}

/// A family with indices, as on the left of `yields`.
pub(crate) fn left_of_yields(text: &str, place: &Place) -> Parsed<LeftSide> {
    let mut parser = Parser::new(text, place)?;
    let left = parser.left_side()?;
    if left.primes > 0 {
        return Err(Diagnostic::new(
            "coefficients give an element, not its derivative",
            left.span,
        )
        .help("leave the prime out"));
    }
    parser.finish("nothing more")?;
    Ok(left)
}

/// `u[j,0]'`
pub(crate) struct LeftSide {
    pub(crate) family: String,
    pub(crate) pattern: Vec<Pattern>,
    pub(crate) pattern_spans: Vec<Span>,
    primes: u32,
    span: Span,
}

fn condition_of_sweep(sweep: Sweep) -> Condition {
    let variable = Expr::new(
        ExprKind::Name {
            base: sweep.variable,
            primes: 0,
        },
        sweep.variable_span,
    );
    let mut operands = vec![sweep.start, variable];
    operands.extend(sweep.end);
    Condition {
        relations: vec![Relation::LessEqual; operands.len() - 1],
        operands,
        span: sweep.span,
    }
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

    /// A chain of summands.
    fn sum(&mut self) -> Parsed<Tree> {
        let mut summands = vec![(Sign::Plus, Some(self.binary(PRODUCT)?))];
        loop {
            let sign = match self.sign() {
                Some("+") => Sign::Plus,
                Some("-") => Sign::Minus,
                _ => return balanced(&mut summands),
            };
            self.advance();
            summands.push((sign, Some(self.binary(PRODUCT)?)));
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
                let group = ExprKind::Group(Box::new(inner.expr));
                self.derivative_of_group(token.start, inner.depth + 1, group)
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

    /// `(e)'` is `D(e)`, without the parentheses, which the call has anyway.
    fn derivative_of_group(&mut self, start: usize, depth: usize, group: ExprKind) -> Parsed<Tree> {
        match (self.primes()?, group) {
            (0, group) => self.tree(start, depth, group),
            (primes, ExprKind::Group(inner)) => self.tree(
                start,
                depth,
                ExprKind::Call {
                    function: Function::D,
                    arguments: vec![*inner],
                    primes: primes - 1,
                },
            ),
            (_, other) => self.tree(start, depth, other),
        }
    }

    fn primes(&mut self) -> Parsed<u32> {
        let mut primes = 0;
        while let TokenKind::Primes(more) = self.token().kind {
            primes += more;
            if primes > MAX_PRIMES {
                return Err(self
                    .error_here(format!("{primes} primes in a row"))
                    .help(format!("at most {MAX_PRIMES} are read")));
            }
            self.advance();
        }
        Ok(primes)
    }

    fn close(&mut self, sign: &str, open: usize) -> Parsed<()> {
        if self.takes(sign) {
            return Ok(());
        }
        Err(self
            .expected(&format!("`{sign}`"))
            .also(self.place.span(open, open + 1), "opened here")
            .help(
                if matches!(
                    self.token().kind,
                    TokenKind::Name { .. } | TokenKind::Number(_)
                ) {
                    format!("close with `{sign}`, or join the parts with an operator such as `*`")
                } else {
                    format!("close with `{sign}`")
                },
            ))
    }

    /// Comma-separated things up to a closing sign.
    fn list(
        &mut self,
        close: &'static str,
        open: usize,
        item: fn(&mut Self) -> Parsed<Tree>,
    ) -> Parsed<(Vec<Expr>, usize)> {
        let (mut items, mut depth) = (Vec::new(), 0);
        if self.takes(close) {
            return Ok((items, depth));
        }
        loop {
            let tree = self.nested(item)?;
            depth = depth.max(tree.depth);
            items.push(tree.expr);
            if !self.takes(",") {
                self.close(close, open)?;
                return Ok((items, depth));
            }
        }
    }

    fn element(&mut self, start: usize, family: String, name_primes: u32) -> Parsed<Tree> {
        let open = self.token().start;
        if name_primes > 0 {
            return Err(self
                .error_here("a prime between a family and its indices")
                .help(format!(
                    "write the prime after the bracket, as in `{family}[1]'`"
                )));
        }
        self.advance();
        let (indices, depth) = self.list("]", open, |parser| parser.binary(SUM))?;
        if indices.is_empty() {
            return Err(Diagnostic::new(
                format!("`{family}[]` has no index"),
                self.span_from(start),
            )
            .help(format!("write the indices out, as in `{family}[1]`")));
        }
        let primes = self.primes()?;
        self.tree(
            start,
            depth + 1,
            ExprKind::Element {
                family,
                indices,
                primes,
            },
        )
    }

    fn call(&mut self, start: usize, name: String, name_primes: u32) -> Parsed<Tree> {
        let name_end = self.span_from(start).end;
        let name_span = Span {
            end: name_end,
            ..self.span_from(start)
        };
        let open = self.token().start;
        self.advance();
        let (mut arguments, depth) = self.list(")", open, Self::argument)?;
        let Some(function) = Function::of_name(&name) else {
            let plain = !matches!(
                arguments.first().map(|argument| &argument.kind),
                Some(ExprKind::List(_) | ExprKind::Text(_) | ExprKind::For { .. })
            );
            if arguments.len() == 1 && plain {
                let argument = Box::new(arguments.remove(0));
                return self.tree(
                    start,
                    depth + 1,
                    ExprKind::Apply {
                        function: name,
                        primes: name_primes,
                        argument,
                    },
                );
            }
            return Err(unknown_function(&name, name_span));
        };
        if name_primes > 0 {
            return Err(Diagnostic::new(
                format!("a prime between `{name}` and its arguments"),
                name_span,
            )
            .help("write the prime after the closing parenthesis"));
        }
        let primes = self.primes()?;
        self.tree(
            start,
            depth + 1,
            ExprKind::Call {
                function,
                arguments,
                primes,
            },
        )
    }

    /// An argument of a call: an expression, a list, a text, or an expression over a sweep.
    fn argument(&mut self) -> Parsed<Tree> {
        let token = self.token().clone();
        match token.kind {
            TokenKind::Sign("[") => {
                self.advance();
                let (items, depth) = self.list("]", token.start, |parser| parser.binary(SUM))?;
                self.tree(token.start, depth + 1, ExprKind::List(items))
            }
            TokenKind::Text(text) => {
                self.advance();
                self.tree(token.start, 1, ExprKind::Text(text))
            }
            _ => {
                let body = self.binary(SUM)?;
                if !self.at_for() {
                    return Ok(body);
                }
                self.advance();
                let (sweep, depth) = self.sweep()?;
                let depth = 1 + body.depth.max(depth);
                if self.sign() == Some(",") {
                    return Err(self
                        .error_here("a sum runs over one range")
                        .help("write `sum(sum(e for i = 1..n) for j = 1..n)` for two"));
                }
                self.tree(
                    token.start,
                    depth,
                    ExprKind::For {
                        body: Box::new(body.expr),
                        sweep: Box::new(sweep),
                    },
                )
            }
        }
    }

    /// `i = a..b` or `i = a..`
    fn sweep(&mut self) -> Parsed<(Sweep, usize)> {
        let start = self.token().start;
        let TokenKind::Name { base, primes: 0 } = self.token().kind.clone() else {
            return Err(self
                .expected("an index variable")
                .help("a range is written `i = 1..n`"));
        };
        self.advance();
        let variable_span = self.span_from(start);
        if !self.takes("=") {
            return Err(self.expected("`=`").help("a range is written `i = 1..n`"));
        }
        let first = self.binary(SUM)?;
        self.range(start, base, variable_span, first)
    }

    /// The rest of a sweep from `..` on.
    fn range(
        &mut self,
        start: usize,
        variable: String,
        variable_span: Span,
        first: Tree,
    ) -> Parsed<(Sweep, usize)> {
        if !self.takes("..") {
            return Err(self
                .expected("`..`")
                .help(format!("a range is written `{variable} = 1..n`")));
        }
        let open = self.at_end() || matches!(self.sign(), Some("," | ")"));
        let last = if open { None } else { Some(self.binary(SUM)?) };
        let depth = first.depth.max(last.as_ref().map_or(0, |last| last.depth));
        let sweep = Sweep {
            variable,
            start: first.expr,
            end: last.map(|last| last.expr),
            span: self.span_from(start),
            variable_span,
        };
        Ok((sweep, depth))
    }

    /// `for …` up to the end of the text, or the end.
    fn clauses_after_for(&mut self) -> Parsed<(Vec<Sweep>, Vec<Condition>)> {
        if !self.at_for() {
            self.finish("an operator, `for`")?;
            return Ok((Vec::new(), Vec::new()));
        }
        self.advance();
        self.clauses()
    }

    /// Ranges and conditions, separated by commas, up to the end of the text.
    fn clauses(&mut self) -> Parsed<(Vec<Sweep>, Vec<Condition>)> {
        if self.tokens.len() - self.at > MAX_CLAUSE_TOKENS {
            return Err(self
                .error_here("these ranges and conditions are too long")
                .help("they are evaluated at every step of a sweep: simplify them"));
        }
        let (mut sweeps, mut conditions) = (Vec::new(), Vec::new());
        loop {
            let start = self.token().start;
            let first = self.binary(SUM)?;
            if let (ExprKind::Name { base, primes: 0 }, true) = (&first.expr.kind, self.takes("="))
            {
                let (variable, variable_span) = (base.clone(), first.expr.span);
                let value = self.binary(SUM)?;
                if self.sign() == Some("..") {
                    sweeps.push(self.range(start, variable, variable_span, value)?.0);
                } else {
                    conditions.push(Condition {
                        operands: vec![first.expr, value.expr],
                        relations: vec![Relation::Equal],
                        span: self.span_from(start),
                    });
                }
            } else {
                conditions.push(self.condition(start, first.expr)?);
            }
            if self.at_end() {
                return Ok((sweeps, conditions));
            }
            if !self.takes(",") {
                return Err(self
                    .expected("`,` or the end")
                    .help("ranges and conditions are separated by commas"));
            }
        }
    }

    fn relation(&mut self) -> Option<Relation> {
        let relation = match self.sign()? {
            "<" => Relation::Less,
            "<=" => Relation::LessEqual,
            ">" => Relation::Greater,
            ">=" => Relation::GreaterEqual,
            "==" | "=" => Relation::Equal,
            "!=" => Relation::NotEqual,
            _ => return None,
        };
        self.advance();
        Some(relation)
    }

    fn condition(&mut self, start: usize, first: Expr) -> Parsed<Condition> {
        let (mut operands, mut relations) = (vec![first], Vec::new());
        while let Some(relation) = self.relation() {
            relations.push(relation);
            operands.push(self.binary(SUM)?.expr);
        }
        if relations.is_empty() {
            return Err(self
                .expected("a range or a condition")
                .help("write `j = 0..8` or `j + k <= 8`"));
        }
        Ok(Condition {
            operands,
            relations,
            span: self.span_from(start),
        })
    }

    /// `u[j,0]'` on the left of a rule.
    fn left_side(&mut self) -> Parsed<LeftSide> {
        let left = self.binary(SUM)?.expr;
        let ExprKind::Element {
            family,
            indices,
            primes,
        } = left.kind
        else {
            return Err(
                Diagnostic::new("expected an element of a family", left.span)
                    .help("the left side is written `u[j,0]`"),
            );
        };
        let mut pattern: Vec<Pattern> = Vec::with_capacity(indices.len());
        for (number, expr) in indices.iter().enumerate() {
            if number == MAX_INDICES {
                return Err(
                    Diagnostic::new(format!("more than {MAX_INDICES} indices"), left.span)
                        .help("a family has few indices"),
                );
            }
            let next = pattern_of(expr)?;
            if let Pattern::Variable(name) = &next
                && let Some(first) = pattern.iter().position(|p| *p == next)
            {
                return Err(Diagnostic::new(
                    format!("the index variable `{name}` stands twice on the left"),
                    expr.span,
                )
                .also(indices[first].span, "here first")
                .help(format!(
                    "use two variables, and the condition that they are equal: `for {name} == …`"
                )));
            }
            pattern.push(next);
        }
        Ok(LeftSide {
            family,
            pattern,
            pattern_spans: indices.iter().map(|index| index.span).collect(),
            primes,
            span: left.span,
        })
    }
}

#[derive(Clone, Copy, PartialEq, Eq)]
enum Sign {
    Plus,
    Minus,
}

/// The tree of a chain of summands. The sign of the first is not looked at.
///
/// Short chains lean to the left. Long ones are cut at the `+` nearest to the middle, which changes neither the
/// value nor the text, `a - b + (c - d) = a - b + c - d`, so that sums of thousands of terms make shallow trees.
fn balanced(summands: &mut [(Sign, Option<Tree>)]) -> Parsed<Tree> {
    const SHORT: usize = 16;
    if summands.len() > SHORT
        && let Some(cut) = middle_plus(summands)
    {
        let (left, right) = summands.split_at_mut(cut);
        return joined(Sign::Plus, balanced(left)?, balanced(right)?);
    }
    let mut trees = summands
        .iter_mut()
        .filter_map(|(sign, tree)| Some((*sign, tree.take()?)));
    // A chain has at least one summand, and each is taken once.
    let Some((_, mut left)) = trees.next() else {
        return Err(Diagnostic::new("expected an expression", Span::default()));
    };
    for (sign, right) in trees {
        left = joined(sign, left, right)?;
    }
    Ok(left)
}

/// The `+` nearest to the middle, other than the sign of the first summand.
fn middle_plus(summands: &[(Sign, Option<Tree>)]) -> Option<usize> {
    let middle = summands.len() / 2;
    let plus = |i: &usize| summands[*i].0 == Sign::Plus;
    let before = (1..=middle).rev().find(plus);
    let after = (middle + 1..summands.len()).find(plus);
    match (before, after) {
        (Some(before), Some(after)) if after - middle < middle - before => Some(after),
        (Some(before), _) => Some(before),
        (None, after) => after,
    }
}

fn joined(sign: Sign, left: Tree, right: Tree) -> Parsed<Tree> {
    let span = left.expr.span.to(right.expr.span);
    let depth = 1 + left.depth.max(right.depth);
    if depth > MAX_DEPTH {
        return Err(too_deep(right.expr.span));
    }
    let make = match sign {
        Sign::Plus => ExprKind::Add,
        Sign::Minus => ExprKind::Sub,
    };
    Ok(Tree {
        expr: Expr::new(make(Box::new(left.expr), Box::new(right.expr)), span),
        depth,
    })
}

fn too_deep(span: Span) -> Diagnostic {
    Diagnostic::new(
        format!("more than {MAX_DEPTH} operations inside each other"),
        span,
    )
    .help("a chain of operators counts: put parts of it into parentheses")
}

fn pattern_of(expr: &Expr) -> Parsed<Pattern> {
    let fixed = |value: Option<i64>| {
        value.map(Pattern::Fixed).ok_or_else(|| {
            Diagnostic::new("this index is out of range", expr.span)
                .help("indices lie between -2^63 and 2^63 - 1")
        })
    };
    match &expr.kind {
        ExprKind::Number(n) => fixed(n.to_i64()),
        ExprKind::Neg(inner) => match &inner.kind {
            ExprKind::Number(n) => fixed((-n).to_i64()),
            _ => Err(not_a_pattern(expr)),
        },
        ExprKind::Name { base, primes: 0 } => Ok(Pattern::Variable(base.clone())),
        _ => Err(not_a_pattern(expr)),
    }
}

fn not_a_pattern(expr: &Expr) -> Diagnostic {
    Diagnostic::new("an index on the left is a number or a variable", expr.span)
        .help("shift the rule: write `a[j] = … for j >= 2`, not `a[j+2] = …`")
}

/// The error for a call of something that is no function.
pub(crate) fn unknown_function(name: &str, span: Span) -> Diagnostic {
    let help = match did_you_mean(name, Function::ALL.map(Function::name)) {
        Some(near) => format!("did you mean `{near}`?"),
        None => format!(
            "the functions are {}; a product is written with `*`",
            Function::ALL.map(Function::name).join(", ")
        ),
    };
    Diagnostic::new(format!("unknown function `{name}`"), span).help(help)
}
