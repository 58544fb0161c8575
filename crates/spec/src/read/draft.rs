//! What the files say, before names are checked.

use super::lost::Lost;
use crate::claim::Claim;
use crate::expression::{Expr, ExprKind};
use crate::family::Family;
use crate::model::{FiniteSizeModel, Law, Solution};
use crate::source::Span;
use indexmap::IndexMap;
use linform_scalar::Integer;
use std::collections::{HashMap, HashSet};

/// A declared name and its place.
#[derive(Clone, Debug)]
pub(crate) struct Declared {
    pub(crate) name: String,
    pub(crate) span: Span,
}

/// Everything read so far. Where a text could not be read, an expression is 0 and the collector holds an error.
#[derive(Debug, Default)]
pub(crate) struct Draft {
    pub(crate) title: Option<String>,
    /// Where the ring was declared, apart from added constants.
    pub(crate) ring: Option<Span>,
    pub(crate) variable: Option<Declared>,
    pub(crate) constants: Vec<Declared>,
    pub(crate) generators: Vec<Declared>,
    /// By the canonical name of what is derived; with the place of the key.
    pub(crate) derivatives: IndexMap<String, (Span, Expr)>,
    pub(crate) laws: IndexMap<String, Law>,
    pub(crate) families: IndexMap<String, DraftFamily>,
    pub(crate) solution: Option<Solution>,
    pub(crate) models: IndexMap<String, DraftModel>,
    pub(crate) claims: Vec<Claim>,
    /// The claims in which something could not be read.
    pub(crate) flawed_claims: HashSet<usize>,
    /// The claims whose indices could not be read, with the words that stand in their place.
    pub(crate) unreadable_claims: HashMap<usize, Vec<String>>,
    /// The claims by name.
    pub(crate) claim_spans: HashMap<String, Span>,
    /// The declarations that could not be read: names unknown for want of them are no mistakes.
    pub(crate) lost: Lost,
}

/// A family, whose arity is unknown when no rule could be read.
#[derive(Debug)]
pub(crate) struct DraftFamily {
    pub(crate) family: Family,
    pub(crate) arity: Option<usize>,
}

/// A model with the places of the names it refers to.
#[derive(Debug)]
pub(crate) struct DraftModel {
    pub(crate) model: FiniteSizeModel,
    pub(crate) law_span: Span,
    pub(crate) traces_span: Span,
    pub(crate) names: [Declared; 4],
}

/// The stand-in for an expression that could not be read.
pub(crate) fn placeholder(span: Span) -> Expr {
    Expr::new(ExprKind::Number(Integer::ZERO), span)
}
