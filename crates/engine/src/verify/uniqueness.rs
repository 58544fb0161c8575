//! Is a form the only one, and is a kernel all of it? By ranks modulo a prime.

use super::Check;
use super::arithmetic::CheckError;
use super::claim::{Compared, wrong};
use super::expansion::Expansion;
use super::modular::{RANK_PRIME, quotient_modulo, rank_modulo};
use crate::record::{ClaimRecord, FormTerm, IndependenceRecord};
use linform_scalar::{PrimeField, SplitMix};
use rustc_hash::FxHashMap;

impl Check<'_> {
    /// The kernel vanishes, is independent, and is all of it; the shift is 1.
    pub(super) fn check_family(
        &self,
        claim: &ClaimRecord,
        kernel: &[Vec<FormTerm>],
        shift: Option<&[FormTerm]>,
        compared: &Compared,
    ) -> Result<(), CheckError> {
        // A form whose derivative is compared vanishes itself; without a varying coefficient its derivative does.
        let terms: Vec<&Expansion> = compared.terms.iter().collect();
        for form in kernel {
            let value = if compared.paired {
                self.arithmetic.form_value(form, &claim.terms, &terms)?.0
            } else {
                self.left_side(claim, form, compared)?.0
            };
            if !value.is_empty() {
                return wrong("a form of the kernel does not vanish");
            }
        }
        let forms: Vec<&[FormTerm]> = kernel.iter().map(Vec::as_slice).collect();
        if self.rank_of_forms(&forms, &claim.terms) < kernel.len() {
            return wrong("the forms of the kernel are dependent");
        }
        let (dimension, shifted) = if compared.paired {
            let rank = self.rank(&terms, compared.split);
            let one = self.arithmetic.one();
            let with_one: Vec<&Expansion> =
                std::iter::once(&one).chain(terms.iter().copied()).collect();
            (
                terms.len() - rank,
                self.rank(&with_one, compared.split) == rank,
            )
        } else {
            let columns: Vec<&Expansion> = compared.columns.iter().collect();
            (columns.len() - self.rank(&columns, compared.split), false)
        };
        if kernel.len() != dimension || shift.is_some() != shifted || dimension == 0 && !shifted {
            return wrong("the kernel does not have the dimension that the terms have");
        }
        if let Some(form) = shift {
            let (numerator, denominator) =
                self.arithmetic.form_value(form, &claim.terms, &terms)?;
            if numerator != denominator {
                return wrong("the form that should be 1 is not");
            }
        }
        Ok(())
    }

    /// Is the form the only one?
    pub(super) fn check_unique(&self, compared: &Compared) -> Result<(), CheckError> {
        let columns: Vec<&Expansion> = compared.columns.iter().collect();
        if self.rank(&columns, compared.split) == columns.len() {
            return Ok(());
        }
        // Two forms with one derivative differ by a constant: the terms and 1 must be independent then.
        let one = self.arithmetic.one();
        let with_one: Vec<&Expansion> = std::iter::once(&one).chain(&compared.terms).collect();
        if compared.paired
            && self.rank(&with_one, compared.split) == with_one.len()
            && !self.has_integral(compared)?
        {
            return Ok(());
        }
        wrong("the form is not the only one")
    }

    /// Does a combination of the terms, with coefficients of low degree in the variable, have derivative 0?
    fn has_integral(&self, compared: &Compared) -> Result<bool, CheckError> {
        const DEGREE: usize = 2;
        let prepared = self.arithmetic.prepared;
        let Some(variable) = prepared.variable() else {
            return Ok(false);
        };
        let symbol = Expansion::symbol(prepared.symbols.len(), variable);
        let mut columns = Vec::with_capacity(compared.terms.len() * (DEGREE + 1));
        for term in &compared.terms {
            let mut multiple = term.clone();
            for _ in 0..=DEGREE {
                columns.push(self.arithmetic.derivative(&multiple)?);
                multiple = self.arithmetic.product(&multiple, &symbol)?;
            }
        }
        let columns: Vec<&Expansion> = columns.iter().collect();
        Ok(self.rank(&columns, prepared.constants().start) < columns.len())
    }

    /// The rank of elements over the rational functions of the base, by their values modulo a prime at a point that nobody
    /// chose. It never exceeds the rank sought, and falls short of it with a chance of about `degree · 2^-61`.
    fn rank(&self, elements: &[&Expansion], split: usize) -> usize {
        let point = self.point();
        let mut rows: FxHashMap<Box<[u32]>, Vec<u64>> = FxHashMap::default();
        for (column, element) in elements.iter().enumerate() {
            for (monomial, entry) in element.split(split) {
                let row = rows
                    .entry(monomial)
                    .or_insert_with(|| vec![0; elements.len()]);
                row[column] = entry.residue(RANK_PRIME, &point).unwrap_or(0);
            }
        }
        rank_modulo(rows.into_values(), RANK_PRIME)
    }

    /// The rank of the coefficient vectors of forms.
    fn rank_of_forms(&self, forms: &[&[FormTerm]], texts: &[String]) -> usize {
        let point = self.point();
        let rows = forms.iter().map(|form| {
            let mut row = vec![0; texts.len()];
            let mut used = vec![false; texts.len()];
            for FormTerm { term, coefficient } in *form {
                let Some(place) =
                    (0..texts.len()).find(|&place| texts[place] == *term && !used[place])
                else {
                    continue;
                };
                used[place] = true;
                let residue = |value| self.arithmetic.lift(value).residue(RANK_PRIME, &point);
                let (n, d) = (
                    residue(&coefficient.numerator),
                    residue(&coefficient.denominator),
                );
                if let (Some(n), Some(d)) = (n, d) {
                    row[place] = quotient_modulo(n, d, RANK_PRIME);
                }
            }
            row
        });
        rank_modulo(rows.collect::<Vec<_>>().into_iter(), RANK_PRIME)
    }

    /// A point for ranks.
    fn point(&self) -> Vec<u64> {
        let mut random = SplitMix::new(0x5241_4E4B);
        self.arithmetic
            .prepared
            .symbols
            .iter()
            .map(|_| random.next_word() % RANK_PRIME)
            .collect()
    }

    /// The determinant of the square block on the given rows must not vanish modulo the prime at the point. For the form of a
    /// target known by its derivative the terms and 1 may serve as columns instead of the pairs.
    pub(super) fn check_independence(
        &self,
        independence: &IndependenceRecord,
        compared: &Compared,
        of_the_form: bool,
    ) -> Result<(), CheckError> {
        let IndependenceRecord { rows, prime, .. } = independence;
        if *prime < 3 || *prime >= 1 << 62 || PrimeField::new(*prime).is_none() {
            return wrong("the witness of uniqueness has no prime");
        }
        let pairs: Vec<&Expansion> = compared.columns.iter().collect();
        if rows.len() == pairs.len() && self.is_regular(independence, &pairs, compared.split) {
            return Ok(());
        }
        let one = self.arithmetic.one();
        let terms: Vec<&Expansion> = std::iter::once(&one).chain(&compared.terms).collect();
        if of_the_form
            && compared.paired
            && rows.len() == terms.len()
            && self.is_regular(independence, &terms, compared.split)
        {
            return Ok(());
        }
        wrong("the determinant that should show uniqueness vanishes, or has the wrong shape")
    }

    /// Is the square block of the columns on the rows of the witness regular?
    fn is_regular(
        &self,
        independence: &IndependenceRecord,
        columns: &[&Expansion],
        split: usize,
    ) -> bool {
        let IndependenceRecord { rows, prime, point } = independence;
        let names = &self.arithmetic.prepared.symbols;
        let place: Vec<u64> = names
            .iter()
            .map(|name| point.get(name).copied().unwrap_or(0))
            .collect();
        let mut matrix = vec![vec![0u64; columns.len()]; rows.len()];
        for (column, element) in columns.iter().enumerate() {
            let entries = self.split_rows(element, split);
            for (row, monomial) in rows.iter().enumerate() {
                let Some(entry) = entries.get(monomial) else {
                    continue;
                };
                match entry.residue(*prime, &place) {
                    Some(value) => matrix[row][column] = value,
                    None => return false,
                }
            }
        }
        rank_modulo(matrix.into_iter(), *prime) == rows.len()
    }
}
