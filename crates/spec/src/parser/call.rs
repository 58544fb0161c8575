//! Elements of families, calls, and their arguments.

use super::{Parsed, Parser, SUM, Tree};
use crate::expression::{Expr, ExprKind, Function};
use crate::lexer::{MAX_PRIMES, TokenKind};
use crate::source::{Diagnostic, Span};
use crate::suggest::did_you_mean;

impl Parser<'_> {
    pub(super) fn primes(&mut self) -> Parsed<u32> {
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

    pub(super) fn close(&mut self, sign: &str, open: usize) -> Parsed<()> {
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

    pub(super) fn element(
        &mut self,
        start: usize,
        family: String,
        name_primes: u32,
    ) -> Parsed<Tree> {
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

    pub(super) fn call(&mut self, start: usize, name: String, name_primes: u32) -> Parsed<Tree> {
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
