//! Definitions as straight-line programs.
//!
//! Every law, family element, target and term of a spec becomes a node of one program, shared where it is used twice. The
//! program knows nothing of how it is evaluated: [`Program::evaluate`] runs it in any [`Arithmetic`]. There is one
//! program for all arithmetics, so no recursion is ever written twice.

use crate::arithmetic::Arithmetic;
use indexmap::IndexSet;
use linform_scalar::Rational;
use rustc_hash::FxHashSet;

/// A node of a [`Program`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct NodeId(pub(crate) usize);

impl NodeId {
    /// The position in the program; operands stand before the node that uses them.
    pub fn position(self) -> usize {
        self.0
    }
}

/// One step of a program.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub enum Operation {
    /// A rational constant.
    Rational(Rational),
    /// The symbol with this index in the ring.
    Symbol(usize),
    /// The sum.
    Add(NodeId, NodeId),
    /// The difference.
    Sub(NodeId, NodeId),
    /// The product.
    Mul(NodeId, NodeId),
    /// The opposite.
    Neg(NodeId),
    /// A rational multiple.
    Scale(Rational, NodeId),
    /// A power, exponent at least 2.
    Pow(NodeId, u32),
    /// The derivative.
    Derive(NodeId),
    /// `F^(n)/F` for the law `F` with this index and `n ≥ 1`: the logarithmic derivative `V₁` if `previous` is missing,
    /// else `Vₙ = Vₙ₋₁′ + V₁ Vₙ₋₁`.
    Ratio {
        /// The index of the law.
        law: usize,
        /// The order `n`.
        order: u32,
        /// The node of `V₁` (for `n = 1`, the logarithmic derivative as the spec gives it).
        logarithmic: NodeId,
        /// The node of `Vₙ₋₁`, missing for `n = 1`.
        previous: Option<NodeId>,
    },
    /// The determinant of a square matrix, row by row.
    Determinant {
        /// Number of rows.
        size: usize,
        /// The entries, `size²` of them.
        entries: Vec<NodeId>,
    },
    /// The element of the span of the terms (coefficients polynomial in the variable and the constants) that has the
    /// given derivative.
    Primitive {
        /// The index of the element in [`Program::primitives`].
        primitive: usize,
        /// The derivative.
        derivative: NodeId,
        /// The terms.
        terms: Vec<NodeId>,
    },
    /// An element defined by the coefficients found for an earlier claim, as a form in other terms.
    Yielded {
        /// The index of the element in [`Program::yielded`].
        yielded: usize,
        /// The terms.
        terms: Vec<NodeId>,
    },
}

impl Operation {
    /// Calls `visit` with every operand.
    pub fn for_each_operand(&self, mut visit: impl FnMut(NodeId)) {
        match self {
            Operation::Rational(_) | Operation::Symbol(_) => {}
            Operation::Add(a, b) | Operation::Sub(a, b) | Operation::Mul(a, b) => {
                visit(*a);
                visit(*b);
            }
            Operation::Neg(a)
            | Operation::Scale(_, a)
            | Operation::Pow(a, _)
            | Operation::Derive(a) => visit(*a),
            Operation::Ratio {
                logarithmic,
                previous,
                ..
            } => {
                visit(*logarithmic);
                previous.iter().copied().for_each(visit);
            }
            Operation::Determinant { entries, .. } => entries.iter().copied().for_each(visit),
            Operation::Primitive {
                derivative, terms, ..
            } => {
                visit(*derivative);
                terms.iter().copied().for_each(visit);
            }
            Operation::Yielded { terms, .. } => terms.iter().copied().for_each(visit),
        }
    }
}

/// An element that is known through its derivative.
#[derive(Clone, Debug, PartialEq)]
pub struct PrimitiveElement {
    /// The element, such as `u[3,0]`.
    pub name: String,
    /// The terms of its form as the spec writes them, indices put in.
    pub terms: Vec<String>,
}

/// An element that an earlier claim defines by its coefficients.
#[derive(Clone, Debug, PartialEq)]
pub struct YieldedElement {
    /// The element, such as `w[2]`.
    pub name: String,
    /// The position of the claim among all claim instances.
    pub claim: usize,
}

/// A straight-line program. *Invariant*: operands stand before the nodes that use them, and no two nodes are equal.
#[derive(Clone, Debug, Default)]
pub struct Program {
    operations: IndexSet<Operation, rustc_hash::FxBuildHasher>,
    primitives: Vec<PrimitiveElement>,
    yielded: Vec<YieldedElement>,
}

impl Program {
    /// The node of an operation: an existing one if there is an equal one.
    pub(crate) fn node(&mut self, operation: Operation) -> NodeId {
        NodeId(self.operations.insert_full(operation).0)
    }

    pub(crate) fn add_primitive(&mut self, element: PrimitiveElement) -> usize {
        self.primitives.push(element);
        self.primitives.len() - 1
    }

    pub(crate) fn add_yielded(&mut self, element: YieldedElement) -> usize {
        self.yielded.push(element);
        self.yielded.len() - 1
    }

    /// Number of nodes.
    pub fn len(&self) -> usize {
        self.operations.len()
    }

    /// Has the program no node?
    pub fn is_empty(&self) -> bool {
        self.operations.is_empty()
    }

    /// The operation of a node.
    pub fn operation(&self, node: NodeId) -> &Operation {
        &self.operations[node.0]
    }

    /// The elements known through their derivatives.
    pub fn primitives(&self) -> &[PrimitiveElement] {
        &self.primitives
    }

    /// The elements defined by the coefficients of earlier claims.
    pub fn yielded(&self) -> &[YieldedElement] {
        &self.yielded
    }

    /// The nodes on which `roots` depend, themselves included, in the order of the program.
    pub fn needed_for(&self, roots: &[NodeId]) -> Vec<NodeId> {
        self.missing_for(roots, |_| false)
    }

    /// Evaluates what `roots` need and `values` does not hold yet.
    ///
    /// `values` has one place for each node and keeps what is computed, so that later calls reuse it.
    ///
    /// # Errors
    ///
    /// The first error of the arithmetic; values computed before it are kept.
    ///
    /// # Panics
    ///
    /// If `values` is shorter than the program.
    pub fn evaluate<A: Arithmetic>(
        &self,
        arithmetic: &mut A,
        roots: &[NodeId],
        values: &mut [Option<A::Element>],
    ) -> Result<(), A::Error> {
        for node in self.missing_for(roots, |node| values[node.0].is_some()) {
            let value =
                self.evaluate_node(arithmetic, node, &|operand| values[operand.0].as_ref())?;
            values[node.0] = Some(value);
        }
        Ok(())
    }

    /// The nodes that have to be evaluated for `roots`, in the order of the program: what a node with a value depends on is
    /// not needed again.
    ///
    /// # Complexity
    ///
    /// `n log n` for `n` nodes found.
    pub(crate) fn missing_for(
        &self,
        roots: &[NodeId],
        has_value: impl Fn(NodeId) -> bool,
    ) -> Vec<NodeId> {
        let mut found: FxHashSet<NodeId> = FxHashSet::default();
        let mut open: Vec<NodeId> = roots.to_vec();
        while let Some(node) = open.pop() {
            if !has_value(node) && found.insert(node) {
                self.operations[node.0].for_each_operand(|operand| open.push(operand));
            }
        }
        let mut missing: Vec<NodeId> = found.into_iter().collect();
        missing.sort_unstable();
        missing
    }

    /// Evaluates one node from the values of its operands.
    ///
    /// # Panics
    ///
    /// If `lookup` has no value for an operand.
    pub(crate) fn evaluate_node<'v, A: Arithmetic>(
        &self,
        arithmetic: &mut A,
        node: NodeId,
        lookup: &impl Fn(NodeId) -> Option<&'v A::Element>,
    ) -> Result<A::Element, A::Error>
    where
        A::Element: 'v,
    {
        // Operands stand before the node, so whoever evaluates in order has them.
        let value = |operand: &NodeId| lookup(*operand).expect("operands are evaluated first");
        match self.operation(node) {
            Operation::Rational(number) => arithmetic.rational(number),
            Operation::Symbol(index) => arithmetic.symbol(*index),
            Operation::Add(a, b) => arithmetic.add(value(a), value(b)),
            Operation::Sub(a, b) => arithmetic.sub(value(a), value(b)),
            Operation::Mul(a, b) => arithmetic.mul(value(a), value(b)),
            Operation::Neg(a) => arithmetic.scale(&-Rational::ONE, value(a)),
            Operation::Scale(factor, a) => arithmetic.scale(factor, value(a)),
            Operation::Pow(a, exponent) => arithmetic.pow(value(a), *exponent),
            Operation::Derive(a) => arithmetic.derive(value(a)),
            Operation::Ratio {
                law,
                order,
                logarithmic,
                previous,
            } => arithmetic.ratio(
                *law,
                *order,
                value(logarithmic),
                previous.as_ref().map(value),
            ),
            Operation::Determinant { size, entries } => {
                let entries: Vec<&A::Element> = entries.iter().map(value).collect();
                arithmetic.determinant(*size, &entries)
            }
            Operation::Primitive {
                primitive,
                derivative,
                terms,
            } => {
                let terms: Vec<&A::Element> = terms.iter().map(value).collect();
                arithmetic.primitive(
                    *primitive,
                    &self.primitives[*primitive],
                    value(derivative),
                    &terms,
                )
            }
            Operation::Yielded { yielded, terms } => {
                let terms: Vec<&A::Element> = terms.iter().map(value).collect();
                arithmetic.yielded(&self.yielded[*yielded], &terms)
            }
        }
    }
}
