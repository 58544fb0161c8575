//! Systems of linear equations.

use linform_ring::{Monomial, Polynomial};
use linform_scalar::{Integer, Rational};

/// One equation `Σ entry_j · x_j = right`.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Row {
    /// The entries that are not 0, by ascending column.
    pub entries: Vec<(usize, Polynomial)>,
    /// The right side.
    pub right: Polynomial,
}

/// The system `A·x = b` with polynomial entries; unknowns are fractions of polynomials.
///
/// All symbols that occur belong to the base: they are numbers, not unknowns.
///
/// *Invariant*: in every row the columns ascend strictly and lie below [`System::columns`], no entry is 0, and
/// all coefficients are integers.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct System {
    columns: usize,
    rows: Vec<Row>,
}

impl System {
    /// The system without equations in this number of unknowns.
    pub fn new(columns: usize) -> System {
        System {
            columns,
            rows: Vec::new(),
        }
    }

    /// Adds an equation. Entries may come in any order, those of one column are added up, and a row with
    /// denominators is multiplied by the least common one.
    ///
    /// # Panics
    ///
    /// If an entry lies outside the columns.
    pub fn push(&mut self, mut row: Row) {
        assert!(
            row.entries.iter().all(|(column, _)| *column < self.columns),
            "an entry outside the {} columns",
            self.columns
        );
        if !row.entries.is_sorted_by(|a, b| a.0 < b.0) {
            row.entries.sort_by_key(|(column, _)| *column);
            let mut merged: Vec<(usize, Polynomial)> = Vec::with_capacity(row.entries.len());
            for (column, entry) in row.entries {
                match merged.last_mut() {
                    Some((last, sum)) if *last == column => *sum = &*sum + &entry,
                    _ => merged.push((column, entry)),
                }
            }
            row.entries = merged;
        }
        row.entries.retain(|(_, entry)| !entry.is_zero());
        let common = row
            .entries
            .iter()
            .map(|(_, entry)| entry)
            .chain([&row.right])
            .fold(Integer::ONE, |lcm, entry| lcm.lcm(entry.denominator()));
        if !common.is_one() {
            let factor = Rational::from(common);
            for (_, entry) in &mut row.entries {
                *entry = entry.scale(&factor);
            }
            row.right = row.right.scale(&factor);
        }
        self.rows.push(row);
    }

    /// The number of unknowns.
    pub fn columns(&self) -> usize {
        self.columns
    }

    /// The degree of all entries in every symbol, as a monomial.
    pub(crate) fn degrees(&self) -> Monomial {
        self.rows
            .iter()
            .fold(Monomial::one(), |all, row| all.lcm(&row.degrees()))
    }

    /// The equations.
    pub fn rows(&self) -> &[Row] {
        &self.rows
    }
}

impl Row {
    /// The entry of a column, if it is not 0.
    pub fn entry(&self, column: usize) -> Option<&Polynomial> {
        let place = self
            .entries
            .binary_search_by_key(&column, |(column, _)| *column);
        place.ok().map(|index| &self.entries[index].1)
    }

    /// The least common multiple of all monomials of the entries and the right side.
    pub(crate) fn degrees(&self) -> Monomial {
        self.entries
            .iter()
            .map(|(_, entry)| entry)
            .chain([&self.right])
            .fold(Monomial::one(), |all, p| all.lcm(&p.degrees()))
    }

    /// The number of terms of all entries and the right side.
    pub(crate) fn terms(&self) -> usize {
        self.entries
            .iter()
            .map(|(_, entry)| entry.len())
            .sum::<usize>()
            + self.right.len()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn number(numerator: i64, denominator: i64) -> Polynomial {
        Polynomial::constant(Rational::new(numerator, denominator).unwrap())
    }

    #[test]
    fn a_pushed_row_is_sorted_merged_and_integral() {
        let mut system = System::new(4);
        system.push(Row {
            entries: vec![
                (3, number(1, 6)),
                (1, number(1, 2)),
                (3, number(1, 3)),
                (0, number(0, 1)),
                (2, number(5, 1)),
                (2, number(-5, 1)),
            ],
            right: number(1, 3),
        });
        let expected = Row {
            entries: vec![(1, number(3, 1)), (3, number(3, 1))],
            right: number(2, 1),
        };
        assert_eq!(system.rows(), [expected]);
        assert_eq!(system.rows()[0].entry(3), Some(&number(3, 1)));
        assert_eq!(system.rows()[0].entry(2), None);
    }

    #[test]
    #[should_panic(expected = "outside the 2 columns")]
    fn an_entry_outside_the_columns_is_a_mistake_of_the_caller() {
        System::new(2).push(Row {
            entries: vec![(2, Polynomial::one())],
            right: Polynomial::zero(),
        });
    }
}
