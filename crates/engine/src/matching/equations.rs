//! The system of a claim: one equation for each monomial.

use super::outcome::{Match, Solved, Witness};
use crate::strategy::Solver;
use indexmap::IndexMap;
use linform_ring::{Monomial, Polynomial};
use linform_scalar::{Control, Integer, Rational, Stop};
use linform_solver::{Fraction, Independence, Method, Row, System};

/// A system whose rows belong to monomials. *Invariant*: rows stand in falling order of their monomials, columns and right
/// side were multiplied by `scales` and `right_scale` to make them integral.
pub(super) struct Equations {
    monomials: Vec<Monomial>,
    system: System,
    scales: Vec<Integer>,
    right_scale: Integer,
}

impl Equations {
    /// Compares coefficients of monomials in the first `split` symbols.
    pub(super) fn new(columns: &[&Polynomial], right: &Polynomial, split: usize) -> Equations {
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

    pub(super) fn solve(
        &self,
        solver: Solver,
        control: &dyn Control,
    ) -> Result<linform_solver::Solved, Stop> {
        match solver {
            Solver::Auto => linform_solver::solve(&self.system, control),
            Solver::FractionFree => linform_solver::solve_fraction_free(&self.system, control),
            Solver::Modular => linform_solver::solve_modular(&self.system, control),
        }
    }

    /// The unknowns of the equations as they were before scaling.
    pub(super) fn unscale(&self, solution: &[Fraction], homogeneous: bool) -> Vec<Fraction> {
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

    pub(super) fn witness(&self, independence: Option<Independence>) -> Witness {
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

    pub(super) fn contradiction(&self, certificate: &linform_solver::Certificate) -> Match {
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

    pub(super) fn solved(&self, method: Method, matched: Match) -> Solved {
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
