//! Chains of summands as shallow trees.

use super::{PRODUCT, Parsed, Parser, Tree, too_deep};
use crate::expression::{Expr, ExprKind, MAX_DEPTH};
use crate::source::{Diagnostic, Span};

impl Parser<'_> {
    /// A chain of summands.
    pub(super) fn sum(&mut self) -> Parsed<Tree> {
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
