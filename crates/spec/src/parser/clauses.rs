//! Ranges, conditions, and what they stand behind.

use super::{Parsed, Parser, SUM, Tree};
use crate::expression::{Condition, Expr, ExprKind, Relation, Sweep};
use crate::lexer::TokenKind;
use crate::place::Place;
use crate::source::Span;
use crate::terms::TermsItem;

/// The longest list of ranges and conditions, in tokens.
const MAX_CLAUSE_TOKENS: usize = 500;

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

impl Parser<'_> {
    /// `i = a..b` or `i = a..`
    pub(super) fn sweep(&mut self) -> Parsed<(Sweep, usize)> {
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
    pub(super) fn clauses_after_for(&mut self) -> Parsed<(Vec<Sweep>, Vec<Condition>)> {
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
}
