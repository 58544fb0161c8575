//! Deciding a claim by comparing the coefficients of monomials.
//!
//! A claim `X = Σ pₙ bₙ` compares, for every monomial in the generators, polynomials in the base symbols (variable and
//! constants): an overdetermined linear system over ℚ[base]. If only `X′` is known, `X′ = Σ (rₙ bₙ + pₙ bₙ′)` is compared
//! and `rₙ = pₙ′` is demanded of the solution.

use crate::polynomials::combine;
use crate::record::CoefficientKind;
use crate::strategy::Solver;
use indexmap::IndexMap;
use linform_ring::{Monomial, Polynomial, Ring};
use linform_scalar::{Control, Integer, Rational, Stop};
use linform_solver::{Fraction, Independence, Method, Outcome, Row, System};

/// A system that was solved, and the answer.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Solved {
    /// Number of equations.
    pub(crate) rows: usize,
    /// Number of unknowns.
    pub(crate) columns: usize,
    /// The algorithm that was used.
    pub(crate) solver: &'static str,
    /// The answer.
    pub(crate) matched: Match,
}

impl Solved {
    /// The outcome for a claim that admits other coefficients: a unique rational solution is right where those are admitted.
    pub(crate) fn for_kind(&self, kind: CoefficientKind) -> Solved {
        let matched = match &self.matched {
            Match::OtherCoefficients { coefficients, .. } if admitted(coefficients, kind) => {
                Match::Holds(coefficients.clone())
            }
            other => other.clone(),
        };
        Solved {
            matched,
            ..self.clone()
        }
    }
}

/// The answer of the matching.
#[derive(Clone, Debug, PartialEq)]
pub(crate) enum Match {
    /// The only solution, of the admitted kind: one coefficient for each term.
    Holds(Vec<Fraction>),
    /// The only solution, not of the admitted kind.
    OtherCoefficients {
        /// The solution.
        coefficients: Vec<Fraction>,
        /// Why it is the only one.
        independence: Witness,
    },
    /// The only coefficients for which the derivative matches are not those of a primitive.
    NotAPrimitive {
        /// The coefficients `p`.
        coefficients: Vec<Fraction>,
        /// The coefficients `r ≠ p′`.
        derivatives: Vec<Fraction>,
        /// Why they are the only ones.
        independence: Witness,
    },
    /// Many solutions.
    Family {
        /// One of them.
        particular: Vec<Fraction>,
        /// A basis of the forms that vanish.
        kernel: Vec<Vec<Fraction>>,
        /// A form equal to 1, if the target is known by its derivative and the terms span one.
        shift: Option<Vec<Fraction>>,
    },
    /// No solution: equations, by their monomials, with multipliers, and the sum of the right sides.
    Contradiction {
        /// The equations and multipliers.
        rows: Vec<(Monomial, Polynomial)>,
        /// The sum of the right sides, not 0; that of the left sides is 0.
        value: Polynomial,
    },
    /// The terms and their derivatives are dependent, and no primitive was found with coefficients up to this degree.
    DegreeLimit {
        /// The largest degree that was tried.
        degree: usize,
    },
}

/// A witness that the columns of a system are independent.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) struct Witness {
    /// The monomials of a regular square block.
    pub(crate) rows: Vec<Monomial>,
    /// The prime.
    pub(crate) prime: u64,
    /// Values of the base symbols, by index.
    pub(crate) point: Vec<(usize, u64)>,
}

/// A system whose rows belong to monomials. *Invariant*: rows stand in falling order of their monomials, columns and right
/// side were multiplied by `scales` and `right_scale` to make them integral.
struct Equations {
    monomials: Vec<Monomial>,
    system: System,
    scales: Vec<Integer>,
    right_scale: Integer,
}

impl Equations {
    /// Compares coefficients of monomials in the first `split` symbols.
    fn new(columns: &[&Polynomial], right: &Polynomial, split: usize) -> Equations {
        let mut rows: IndexMap<Monomial, Row> = IndexMap::new();
        for (column, polynomial) in columns.iter().enumerate() {
            for (monomial, entry) in polynomial.numerator().split(split) {
                rows.entry(monomial)
                    .or_default()
                    .entries
                    .push((column, entry));
            }
        }
        for (monomial, entry) in right.numerator().split(split) {
            rows.entry(monomial).or_default().right = entry;
        }
        rows.sort_by(|left, _, right, _| right.cmp(left));
        let mut system = System::new(columns.len());
        let mut monomials = Vec::with_capacity(rows.len());
        for (monomial, row) in rows {
            monomials.push(monomial);
            system.push(row);
        }
        let scales = columns
            .iter()
            .map(|polynomial| polynomial.denominator().clone())
            .collect();
        Equations {
            monomials,
            system,
            scales,
            right_scale: right.denominator().clone(),
        }
    }

    fn solve(&self, solver: Solver, control: &dyn Control) -> Result<linform_solver::Solved, Stop> {
        match solver {
            Solver::Auto => linform_solver::solve(&self.system, control),
            Solver::FractionFree => linform_solver::solve_fraction_free(&self.system, control),
            Solver::Modular => linform_solver::solve_modular(&self.system, control),
        }
    }

    /// The unknowns of the equations as they were before scaling.
    fn unscale(&self, solution: &[Fraction], homogeneous: bool) -> Vec<Fraction> {
        let right = if homogeneous {
            Integer::ONE
        } else {
            self.right_scale.clone()
        };
        let factor =
            |scale: &Integer| Rational::new(scale.clone(), right.clone()).unwrap_or_default();
        solution
            .iter()
            .zip(&self.scales)
            .map(|(value, scale)| value.scale(&factor(scale)))
            .collect()
    }

    fn witness(&self, independence: Option<Independence>) -> Witness {
        match independence {
            Some(Independence {
                rows, prime, point, ..
            }) => Witness {
                rows: rows
                    .iter()
                    .map(|&row| self.monomials[row].clone())
                    .collect(),
                prime,
                point,
            },
            None => Witness {
                rows: Vec::new(),
                prime: 0,
                point: Vec::new(),
            },
        }
    }

    fn contradiction(&self, certificate: &linform_solver::Certificate) -> Match {
        let rows = certificate
            .multipliers
            .iter()
            .map(|(row, multiplier)| (self.monomials[*row].clone(), multiplier.clone()))
            .collect();
        let scale = Rational::new(Integer::ONE, self.right_scale.clone()).unwrap_or_default();
        Match::Contradiction {
            rows,
            value: certificate.value.scale(&scale),
        }
    }

    fn solved(&self, method: Method, matched: Match) -> Solved {
        let solver = match method {
            Method::FractionFree => "fraction-free",
            Method::Modular => "modular",
        };
        Solved {
            rows: self.system.rows().len(),
            columns: self.system.columns(),
            solver,
            matched,
        }
    }
}

/// How many leading symbols make up the monomials that are compared.
fn split_of(ring: &Ring, kind: CoefficientKind) -> usize {
    let symbols = ring.symbols();
    match kind {
        CoefficientKind::Constant => symbols.constants().start,
        CoefficientKind::Polynomial | CoefficientKind::Rational => symbols.generators(),
    }
}

fn admitted(coefficients: &[Fraction], kind: CoefficientKind) -> bool {
    kind == CoefficientKind::Rational || coefficients.iter().all(|c| c.is_polynomial().is_some())
}

/// Decides `target = Σ pₙ termₙ`.
///
/// # Errors
///
/// A limit.
pub(crate) fn match_value(
    ring: &Ring,
    target: &Polynomial,
    terms: &[&Polynomial],
    kind: CoefficientKind,
    solver: Solver,
    control: &dyn Control,
) -> Result<Solved, Stop> {
    let equations = Equations::new(terms, target, split_of(ring, kind));
    let solved = equations.solve(solver, control)?;
    let matched = match solved.outcome {
        Outcome::Unique(solution) => {
            let coefficients = equations.unscale(&solution, false);
            if admitted(&coefficients, kind) {
                Match::Holds(coefficients)
            } else {
                Match::OtherCoefficients {
                    coefficients,
                    independence: equations.witness(solved.independence),
                }
            }
        }
        Outcome::Family { particular, kernel } => Match::Family {
            particular: equations.unscale(&particular, false),
            kernel: kernel
                .iter()
                .map(|vector| equations.unscale(vector, true))
                .collect(),
            shift: None,
        },
        Outcome::Inconsistent(certificate) => equations.contradiction(&certificate),
    };
    Ok(equations.solved(solved.method, matched))
}

/// Decides `target = Σ pₙ termₙ` for a target of which only the derivative is known.
///
/// # Errors
///
/// A limit.
pub(crate) fn match_derivative(
    ring: &Ring,
    derivative: &Polynomial,
    terms: &[&Polynomial],
    kind: CoefficientKind,
    solver: Solver,
    control: &dyn Control,
) -> Result<Solved, Stop> {
    let derived = terms
        .iter()
        .map(|term| ring.derive(term, control))
        .collect::<Result<Vec<_>, _>>()?;
    if ring.symbols().variable().is_none() || kind == CoefficientKind::Constant {
        // The coefficients are constants: the derivative of the form has the same coefficients.
        let derived: Vec<&Polynomial> = derived.iter().collect();
        return match_value(ring, derivative, &derived, kind, solver, control);
    }
    let columns: Vec<&Polynomial> = terms
        .iter()
        .copied()
        .zip(&derived)
        .flat_map(|(b, b1)| [b1, b])
        .collect();
    let equations = Equations::new(&columns, derivative, split_of(ring, kind));
    let solved = equations.solve(solver, control)?;
    let matched = match solved.outcome {
        Outcome::Inconsistent(certificate) => equations.contradiction(&certificate),
        Outcome::Family { .. } => match_dependent(ring, derivative, terms, kind, solver, control)?,
        Outcome::Unique(solution) => {
            let unknowns = equations.unscale(&solution, false);
            let (coefficients, derivatives): (Vec<_>, Vec<_>) = unknowns
                .chunks_exact(2)
                .map(|pair| (pair[0].clone(), pair[1].clone()))
                .unzip();
            let independence = equations.witness(solved.independence);
            let mut is_primitive = true;
            for (p, r) in coefficients.iter().zip(&derivatives) {
                is_primitive &= derive_fraction(ring, p, control)? == *r;
            }
            match (is_primitive, admitted(&coefficients, kind)) {
                (true, true) => Match::Holds(coefficients),
                (true, false) => Match::OtherCoefficients {
                    coefficients,
                    independence,
                },
                (false, _) => Match::NotAPrimitive {
                    coefficients,
                    derivatives,
                    independence,
                },
            }
        }
    };
    Ok(equations.solved(solved.method, matched))
}

/// A quotient whose denominator is known not to be 0.
fn quotient(
    numerator: Polynomial,
    denominator: Polynomial,
    control: &dyn Control,
) -> Result<Fraction, Stop> {
    Fraction::new(numerator, denominator, control)?.ok_or(Stop::SizeLimit)
}

/// `(N/D)′ = (N′D − ND′)/D²`.
fn derive_fraction(ring: &Ring, value: &Fraction, control: &dyn Control) -> Result<Fraction, Stop> {
    let (n, d) = (value.numerator(), value.denominator());
    let (n1, d1) = (ring.derive(n, control)?, ring.derive(d, control)?);
    let numerator = &n1.mul(d, control)? - &n.mul(&d1, control)?;
    quotient(numerator, d.mul(d, control)?, control)
}

/// The derivative matches for many pairs `(p, r)`. Among them those with `r = p′` are sought with polynomial coefficients of
/// growing degree in the variable, which makes the system one over the constants.
fn match_dependent(
    ring: &Ring,
    derivative: &Polynomial,
    terms: &[&Polynomial],
    kind: CoefficientKind,
    solver: Solver,
    control: &dyn Control,
) -> Result<Match, Stop> {
    let Some(variable) = ring.symbols().variable() else {
        return Ok(Match::DegreeLimit { degree: 0 });
    };
    let symbol = Polynomial::symbol(ring.symbols(), variable);
    let bound = usize::from(derivative.degree_in(variable).unwrap_or(0)) + 8;
    for degree in 0..=bound {
        let mut scaled = Vec::with_capacity(terms.len() * (degree + 1));
        for term in terms {
            let mut multiple = (*term).clone();
            for _ in 0..=degree {
                scaled.push(multiple.clone());
                multiple = multiple.mul(&symbol, control)?;
            }
        }
        let scaled: Vec<&Polynomial> = scaled.iter().collect();
        let solved = match_derivative(
            ring,
            derivative,
            &scaled,
            CoefficientKind::Constant,
            solver,
            control,
        )?;
        let collect = |values: &[Fraction]| -> Result<Vec<Fraction>, Stop> {
            values
                .chunks_exact(degree + 1)
                .map(|part| collect_powers(part, &symbol, control))
                .collect()
        };
        match solved.matched {
            Match::Holds(values)
            | Match::OtherCoefficients {
                coefficients: values,
                ..
            } => {
                return unique_or_family(ring, collect(&values)?, terms, kind, solver, control);
            }
            Match::Family { particular, .. } => {
                let particular = collect(&particular)?;
                return unique_or_family(ring, particular, terms, kind, solver, control);
            }
            _ => {}
        }
    }
    Ok(Match::DegreeLimit { degree: bound })
}

/// `Σ cᵢ tⁱ` with coefficients free of `t`.
fn collect_powers(
    part: &[Fraction],
    symbol: &Polynomial,
    control: &dyn Control,
) -> Result<Fraction, Stop> {
    let mut denominator = Polynomial::one();
    for value in part {
        denominator = denominator.mul(value.denominator(), control)?;
    }
    let mut numerator = Polynomial::zero();
    let mut power = Polynomial::one();
    for value in part {
        let cofactor = denominator
            .div_exact(value.denominator(), control)?
            .unwrap_or_default();
        numerator = &numerator
            + &value
                .numerator()
                .mul(&cofactor, control)?
                .mul(&power, control)?;
        power = power.mul(symbol, control)?;
    }
    quotient(numerator, denominator, control)
}

/// A primitive was found. Two forms with the same derivative differ by a constant, so the other solutions are given by the
/// dependences of the terms and the constant 1 over the rational functions; without any, the form is the only one.
fn unique_or_family(
    ring: &Ring,
    coefficients: Vec<Fraction>,
    terms: &[&Polynomial],
    kind: CoefficientKind,
    solver: Solver,
    control: &dyn Control,
) -> Result<Match, Stop> {
    let one = Polynomial::one();
    let columns: Vec<&Polynomial> = std::iter::once(&one).chain(terms.iter().copied()).collect();
    let equations = Equations::new(&columns, &Polynomial::zero(), split_of(ring, kind));
    let dependence = equations.solve(solver, control)?;
    let Outcome::Family { kernel, .. } = dependence.outcome else {
        return Ok(if admitted(&coefficients, kind) {
            Match::Holds(coefficients)
        } else {
            Match::OtherCoefficients {
                coefficients,
                independence: equations.witness(dependence.independence),
            }
        });
    };
    let kernel: Vec<Vec<Fraction>> = kernel
        .iter()
        .map(|vector| equations.unscale(vector, true))
        .collect();
    // Among the dependences that use the 1, one is kept as the shift and subtracted from the others.
    let mut shift: Option<Vec<Fraction>> = None;
    let mut vanishing = Vec::with_capacity(kernel.len());
    for vector in kernel {
        let Some((first, rest)) = vector.split_first() else {
            continue;
        };
        if first.is_zero() {
            vanishing.push(rest.to_vec());
            continue;
        }
        // first·1 + Σ rest·b = 0, so −rest/first is a form equal to 1.
        let form = rest
            .iter()
            .map(|value| divided(&value.scale(&-Rational::ONE), first, control))
            .collect::<Result<Vec<_>, _>>()?;
        match &shift {
            None => shift = Some(form),
            Some(known) => {
                let pairs = form.iter().zip(known);
                vanishing.push(
                    pairs
                        .map(|(a, b)| difference(a, b, control))
                        .collect::<Result<_, _>>()?,
                );
            }
        }
    }
    Ok(Match::Family {
        particular: coefficients,
        kernel: vanishing,
        shift,
    })
}

fn divided(a: &Fraction, b: &Fraction, control: &dyn Control) -> Result<Fraction, Stop> {
    let numerator = a.numerator().mul(b.denominator(), control)?;
    quotient(
        numerator,
        a.denominator().mul(b.numerator(), control)?,
        control,
    )
}

fn difference(a: &Fraction, b: &Fraction, control: &dyn Control) -> Result<Fraction, Stop> {
    let left = a.numerator().mul(b.denominator(), control)?;
    let right = b.numerator().mul(a.denominator(), control)?;
    quotient(
        &left - &right,
        a.denominator().mul(b.denominator(), control)?,
        control,
    )
}

/// Proves a form by exact substitution: `Σ pₙ bₙ − X = 0` in the ring, or the same for the derivatives.
///
/// # Errors
///
/// A limit.
pub(crate) fn substitution_holds(
    ring: &Ring,
    target: &Polynomial,
    by_derivative: bool,
    coefficients: &[Fraction],
    terms: &[&Polynomial],
    control: &dyn Control,
) -> Result<bool, Stop> {
    let mut common = Polynomial::one();
    for value in coefficients {
        let shared = common.gcd(value.denominator(), control)?;
        let factor = value
            .denominator()
            .div_exact(&shared, control)?
            .unwrap_or_default();
        common = common.mul(&factor, control)?;
    }
    let mut numerators = Vec::with_capacity(coefficients.len());
    for value in coefficients {
        let cofactor = common
            .div_exact(value.denominator(), control)?
            .unwrap_or_default();
        numerators.push(value.numerator().mul(&cofactor, control)?);
    }
    // The form is `numerator / common`.
    let numerator = combine(numerators.iter(), terms, control)?;
    let difference = if by_derivative {
        let (n1, d1) = (
            ring.derive(&numerator, control)?,
            ring.derive(&common, control)?,
        );
        let left = &n1.mul(&common, control)? - &numerator.mul(&d1, control)?;
        &left - &target.mul(&common, control)?.mul(&common, control)?
    } else {
        &numerator - &target.mul(&common, control)?
    };
    Ok(difference.is_zero())
}
