//! Expressions as the user wrote them.

use crate::source::Span;
use linform_scalar::Integer;

/// An expression with its place.
///
/// *Invariant*: trees made by the parser are at most [`MAX_DEPTH`] deep, so recursion over them is safe.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Expr {
    /// What it is.
    pub kind: ExprKind,
    /// Where it stands.
    pub span: Span,
}

/// The depth of the deepest tree. Chains of `*`, `/` and `-` count, as they lean to the left; sums are balanced.
pub const MAX_DEPTH: usize = 500;

/// The forms of an expression.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum ExprKind {
    /// An integer, not negative in the source.
    Number(Integer),
    /// A symbol, a law, a family, a model or an index variable, with the primes that follow it.
    Name {
        /// The name without primes.
        base: String,
        /// The number of primes.
        primes: u32,
    },
    /// `-a`
    Neg(Box<Expr>),
    /// `a + b`
    Add(Box<Expr>, Box<Expr>),
    /// `a - b`
    Sub(Box<Expr>, Box<Expr>),
    /// `a*b`
    Mul(Box<Expr>, Box<Expr>),
    /// `a/b`
    Div(Box<Expr>, Box<Expr>),
    /// `a^b`
    Pow(Box<Expr>, Box<Expr>),
    /// `(a)`: parentheses are kept, so that the text can be given back.
    Group(Box<Expr>),
    /// `u[i,j]`, with primes for derivatives.
    Element {
        /// The family.
        family: String,
        /// The indices.
        indices: Vec<Expr>,
        /// The number of derivatives.
        primes: u32,
    },
    /// A call of a built-in function, with primes for derivatives. `(a)'` is read as `D(a)`.
    Call {
        /// The function.
        function: Function,
        /// The arguments.
        arguments: Vec<Expr>,
        /// The number of derivatives.
        primes: u32,
    },
    /// `A'(x)`: the unknown function of a model, or the asymptotic form of a solution. Nowhere else.
    Apply {
        /// The function's name.
        function: String,
        /// The number of derivatives, written before the parenthesis.
        primes: u32,
        /// The argument.
        argument: Box<Expr>,
    },
    /// `[a,b]`: row and column numbers of a minor.
    List(Vec<Expr>),
    /// `"B1"`: the name of a column of data.
    Text(String),
    /// `a for i = 1..n`, inside `sum(…)` only.
    For {
        /// What is summed.
        body: Box<Expr>,
        /// Over what.
        sweep: Box<Sweep>,
    },
}

impl Expr {
    /// An expression of this form at this place.
    pub fn new(kind: ExprKind, span: Span) -> Expr {
        Expr { kind, span }
    }

    /// The integer as an expression; a negative one is `Neg` of a number.
    pub fn integer(value: i64, span: Span) -> Expr {
        let magnitude = Expr::new(ExprKind::Number(Integer::from(value.unsigned_abs())), span);
        if value < 0 {
            Expr::new(ExprKind::Neg(Box::new(magnitude)), span)
        } else {
            magnitude
        }
    }

    /// The direct parts, in the order of the text; the bounds of a sum's sweep come after its body.
    pub fn parts(&self) -> Vec<&Expr> {
        match &self.kind {
            ExprKind::Number(_) | ExprKind::Name { .. } | ExprKind::Text(_) => Vec::new(),
            ExprKind::Neg(a) | ExprKind::Group(a) | ExprKind::Apply { argument: a, .. } => vec![a],
            ExprKind::Add(a, b)
            | ExprKind::Sub(a, b)
            | ExprKind::Mul(a, b)
            | ExprKind::Div(a, b)
            | ExprKind::Pow(a, b) => vec![a, b],
            ExprKind::Element { indices: list, .. }
            | ExprKind::Call {
                arguments: list, ..
            }
            | ExprKind::List(list) => list.iter().collect(),
            ExprKind::For { body, sweep } => {
                let mut parts = vec![&**body, &sweep.start];
                parts.extend(&sweep.end);
                parts
            }
        }
    }
}

/// The built-in functions.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Function {
    /// `ratio(F,n)` = F⁽ⁿ⁾/F
    Ratio,
    /// `derivative(F,n)` = F⁽ⁿ⁾, in claims about numbers
    Derivative,
    /// `D(e)`, the derivation
    D,
    /// `minor(u,[i,…],[j,…])`, the determinant of these rows and columns
    Minor,
    /// `sum(e for i = a..b)`; an empty sum is 0
    Sum,
    /// `correction(m,j)`, the coefficient of order `j` of a model's expansion, divided by its law
    Correction,
    /// `column("name")` of the data
    Column,
    /// `sqrt(e)` of a power series with leading coefficient 1, in models
    Sqrt,
}

impl Function {
    /// Every function.
    pub const ALL: [Function; 8] = [
        Function::Ratio,
        Function::Derivative,
        Function::D,
        Function::Minor,
        Function::Sum,
        Function::Correction,
        Function::Column,
        Function::Sqrt,
    ];

    /// The name by which it is called.
    pub fn name(self) -> &'static str {
        match self {
            Function::Ratio => "ratio",
            Function::Derivative => "derivative",
            Function::D => "D",
            Function::Minor => "minor",
            Function::Sum => "sum",
            Function::Correction => "correction",
            Function::Column => "column",
            Function::Sqrt => "sqrt",
        }
    }

    /// How a call looks, for messages.
    pub fn usage(self) -> &'static str {
        match self {
            Function::Ratio => "ratio(F, n)",
            Function::Derivative => "derivative(F, n)",
            Function::D => "D(e)",
            Function::Minor => "minor(u, [0,1], [0,1])",
            Function::Sum => "sum(e for i = 1..n)",
            Function::Correction => "correction(model, j)",
            Function::Column => "column(\"name\")",
            Function::Sqrt => "sqrt(e)",
        }
    }

    /// The number of its arguments.
    pub fn arity(self) -> usize {
        match self {
            Function::Ratio | Function::Derivative | Function::Correction => 2,
            Function::Minor => 3,
            Function::D | Function::Sum | Function::Column | Function::Sqrt => 1,
        }
    }

    /// The function of this name.
    pub fn of_name(name: &str) -> Option<Function> {
        Function::ALL
            .into_iter()
            .find(|function| function.name() == name)
    }
}

/// `i = a..b`, or `i = a..` without an end.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Sweep {
    /// The index variable.
    pub variable: String,
    /// The first value.
    pub start: Expr,
    /// The last value; none for an open range.
    pub end: Option<Expr>,
    /// Where it stands.
    pub span: Span,
    /// Where the variable stands.
    pub variable_span: Span,
}

/// How two index expressions are compared.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Relation {
    /// `<`
    Less,
    /// `<=`
    LessEqual,
    /// `>`
    Greater,
    /// `>=`
    GreaterEqual,
    /// `==`, also `=` in the conditions of a rule
    Equal,
    /// `!=`
    NotEqual,
}

/// A chain of comparisons, `1 <= k <= j`.
///
/// *Invariant*: there is one operand more than relations, and at least one relation.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Condition {
    /// What is compared.
    pub operands: Vec<Expr>,
    /// How neighbours are compared.
    pub relations: Vec<Relation>,
    /// Where it stands.
    pub span: Span,
}
