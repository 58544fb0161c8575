//! Square systems with several right sides.

use crate::profile::{Contradiction, Profile};
use crate::residual::Vector;
use crate::{Fraction, System};
use linform_ring::{Monomial, Polynomial};
use linform_scalar::{Control, Integer, Rational, Stop};

/// A system `S·X = B`.
///
/// *Invariant*: `S` is not singular, because it was not so modulo a prime at a point.
pub(crate) struct Square<'a> {
    /// The number of rows and of unknowns.
    pub(crate) size: usize,
    /// The number of right sides.
    pub(crate) rights: usize,
    /// Row, column and value of the entries that are not 0; the right sides are the columns from `size` on.
    pub(crate) entries: Vec<(usize, usize, &'a Polynomial)>,
}

/// One column of the solution of a square system, `numerators[i] / denominator`, integral.
#[derive(Clone, Debug)]
pub(crate) struct Quotients {
    pub(crate) denominator: Polynomial,
    pub(crate) numerators: Vec<Polynomial>,
}

impl<'a> Square<'a> {
    /// The independent rows and columns of a system. Its right sides are `b` and the free columns in order.
    pub(crate) fn of_profile(system: &'a System, profile: &Profile, free: &[usize]) -> Square<'a> {
        let size = profile.columns.len();
        let mut place = vec![0; system.columns()];
        for (index, &column) in profile.columns.iter().enumerate() {
            place[column] = index;
        }
        for (index, &column) in free.iter().enumerate() {
            place[column] = size + 1 + index;
        }
        let mut entries = Vec::new();
        for (i, &row) in profile.rows.iter().enumerate() {
            let row = &system.rows()[row];
            entries.extend(row.entries.iter().map(|(j, entry)| (i, place[*j], entry)));
            if !row.right.is_zero() {
                entries.push((i, size, &row.right));
            }
        }
        Square {
            size,
            rights: 1 + free.len(),
            entries,
        }
    }

    /// The system for the weights with which a contradicting row is a combination of its support.
    pub(crate) fn of_contradiction(system: &'a System, found: &Contradiction) -> Square<'a> {
        let size = found.support.len();
        let mut entries = Vec::new();
        for (j, &row) in found.support.iter().chain([&found.row]).enumerate() {
            let row = &system.rows()[row];
            let entry = |(i, &column): (usize, &usize)| Some((i, j, row.entry(column)?));
            entries.extend(found.columns.iter().enumerate().filter_map(entry));
        }
        Square {
            size,
            rights: 1,
            entries,
        }
    }

    /// Where the entries stand in the matrix `[S | B]`, row by row.
    pub(crate) fn places(&self) -> Vec<usize> {
        let width = self.size + self.rights;
        self.entries.iter().map(|(i, j, _)| i * width + j).collect()
    }

    /// The degree of all entries in every symbol, as a monomial.
    pub(crate) fn degrees(&self) -> Monomial {
        self.entries
            .iter()
            .fold(Monomial::one(), |all, (_, _, p)| all.lcm(&p.degrees()))
    }

    /// Do the quotients solve the system with the right side of this index? Multiplied out in every row.
    pub(crate) fn is_solved_by(
        &self,
        right: usize,
        candidate: &Quotients,
        control: &dyn Control,
    ) -> Result<bool, Stop> {
        let mut polynomials = candidate.numerators.clone();
        polynomials.push(-&candidate.denominator);
        let mut vector = Vector::new(&polynomials, &self.degrees());
        let mut rows: Vec<Vec<(usize, &Polynomial)>> = vec![Vec::new(); self.size];
        for &(i, j, entry) in &self.entries {
            if j < self.size {
                rows[i].push((j, entry));
            } else if j == self.size + right {
                rows[i].push((self.size, entry));
            }
        }
        for row in rows {
            if !vector.is_orthogonal_to(row.into_iter(), control)? {
                return Ok(false);
            }
        }
        Ok(true)
    }
}

impl Quotients {
    /// The same quotients with integral polynomials that share no number.
    pub(crate) fn without_content(self) -> Quotients {
        let all = || self.numerators.iter().chain([&self.denominator]);
        let lcm = all().fold(Integer::ONE, |lcm, p| lcm.lcm(p.denominator()));
        let content = all().fold(Integer::ZERO, |gcd, p| {
            gcd.gcd(&(p.content() * lcm.div_exact(p.denominator())))
        });
        let sign = match self.denominator.leading() {
            Some((_, coefficient)) if coefficient.is_negative() => -Integer::ONE,
            _ => Integer::ONE,
        };
        match Rational::new(lcm * sign, content) {
            Some(factor) if !factor.is_one() => Quotients {
                denominator: self.denominator.scale(&factor),
                numerators: self.numerators.iter().map(|p| p.scale(&factor)).collect(),
            },
            _ => self,
        }
    }

    /// The quotients as fractions in lowest terms.
    pub(crate) fn fractions(self, control: &dyn Control) -> Result<Vec<Fraction>, Stop> {
        let mut fractions = Vec::with_capacity(self.numerators.len());
        for numerator in self.numerators {
            let fraction = Fraction::new(numerator, self.denominator.clone(), control)?;
            fractions.push(fraction.expect("the denominator of a solution is not 0"));
        }
        Ok(fractions)
    }
}
