//! Families of ring elements given by rules.

use crate::expression::{Condition, Expr};
use crate::index::{Environment, condition_holds};
use crate::source::Span;
use crate::terms::Terms;
use indexmap::IndexMap;

/// Indexed elements of the ring, given by rules.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Family {
    /// The name.
    pub name: String,
    /// The number of indices.
    pub arity: usize,
    /// May the indices be exchanged?
    pub symmetric: bool,
    /// The rules in the order of the text; the first that matches wins.
    pub rules: Vec<Rule>,
    /// Where a primitive is sought: the indices are those of the primitive rule.
    pub primitive_terms: Option<Terms>,
    /// Where it is declared.
    pub span: Span,
}

/// One rule, `u[j,0]' = -a[0]*a[j] for j >= 1`.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Rule {
    /// The indices on the left.
    pub pattern: Vec<Pattern>,
    /// Where each of them stands.
    pub pattern_spans: Vec<Span>,
    /// Does the rule give the element or its derivative?
    pub known: Known,
    /// The right side.
    pub body: Expr,
    /// When the rule applies; all must hold.
    pub conditions: Vec<Condition>,
    /// Where it stands.
    pub span: Span,
}

/// One index on the left of a rule.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Pattern {
    /// This number only.
    Fixed(i64),
    /// Any number, called by this name. No name occurs twice in a pattern.
    Variable(String),
}

/// What a rule gives.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Known {
    /// The element itself.
    Value,
    /// Its derivative: the element is a primitive in the span of the family's primitive terms.
    Derivative,
}

/// The rule for one element.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Resolved<'a> {
    /// The rule.
    pub rule: &'a Rule,
    /// The values of the variables of its pattern.
    pub environment: Environment,
    /// The indices in the order in which the rule matched: equal for all orders of a symmetric element.
    pub indices: Vec<i64>,
}

impl Family {
    /// The rule for the element with these indices.
    ///
    /// The first rule that matches wins. In a symmetric family each rule is tried with the indices in falling
    /// order, then in rising order, then as given, before the next rule is looked at. A condition that cannot
    /// be evaluated (an overflow) does not match.
    pub fn resolve(&self, indices: &[i64]) -> Option<Resolved<'_>> {
        let mut orders: Vec<Vec<i64>> = Vec::with_capacity(3);
        if self.symmetric {
            let mut sorted = indices.to_vec();
            sorted.sort_unstable();
            orders.push(sorted.iter().rev().copied().collect());
            orders.push(sorted);
        }
        orders.push(indices.to_vec());
        self.rules.iter().find_map(|rule| {
            orders.iter().find_map(|indices| {
                rule.matches(indices).map(|environment| Resolved {
                    rule,
                    environment,
                    indices: indices.clone(),
                })
            })
        })
    }
}

impl Rule {
    /// The values of the pattern's variables, if the rule applies to these indices.
    pub fn matches(&self, indices: &[i64]) -> Option<Environment> {
        if self.pattern.len() != indices.len() {
            return None;
        }
        let mut environment = IndexMap::new();
        for (pattern, index) in self.pattern.iter().zip(indices) {
            match pattern {
                Pattern::Fixed(value) if value == index => {}
                Pattern::Fixed(_) => return None,
                Pattern::Variable(name) => {
                    environment.insert(name.clone(), *index);
                }
            }
        }
        self.conditions
            .iter()
            .all(|condition| condition_holds(condition, &environment).unwrap_or(false))
            .then_some(environment)
    }
}
