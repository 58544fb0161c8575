//! The checks of single claims.

use super::arithmetic::CheckError;
use super::expansion::Expansion;
use super::{Check, CheckOutcome};
use crate::prepare::{Instance, Prepared};
use crate::program::{NodeId, Operation};
use crate::published::{Coefficient, PublishedPolynomial, monomial_text};
use crate::record::{
    CertificateRow, ClaimRecord, CoefficientKind, Finding, FormTerm, GradingRecord,
    IndependenceRecord, KnownBy, PrimitiveRecord, Refutation, SystemRecord,
};
use linform_scalar::published::{BigInt, Zero};
use linform_scalar::{PrimeField, SplitMix};
use rustc_hash::FxHashMap;
use std::collections::{BTreeMap, BTreeSet};

/// The elements that a claim compares: the target (or its derivative) and the columns of the system.
struct Compared {
    right: Expansion,
    terms: Vec<Expansion>,
    /// The terms, or for a target known by its derivative the pairs (derivative of term, term).
    columns: Vec<Expansion>,
    paired: bool,
    /// The number of leading symbols whose monomials are compared: the generators, and the variable where the coefficients
    /// are constants.
    split: usize,
}

fn wrong<T>(what: impl Into<String>) -> Result<T, CheckError> {
    Err(CheckError::Wrong(what.into()))
}

impl Check<'_> {
    pub(super) fn claim(
        &mut self,
        claim: &ClaimRecord,
        instance: &Instance,
    ) -> Result<CheckOutcome, CheckError> {
        let prepared = self.arithmetic.prepared;
        let Some(list) = instance
            .alternatives
            .iter()
            .find(|list| list.texts == claim.terms)
        else {
            return wrong("the terms are not those of the spec");
        };
        let kind = match prepared.model.claims[instance.claim].coefficients {
            linform_spec::Coefficients::Polynomial => CoefficientKind::Polynomial,
            linform_spec::Coefficients::Rational => CoefficientKind::Rational,
            linform_spec::Coefficients::Constant => CoefficientKind::Constant,
        };
        if claim.target != instance.target_text || claim.coefficients != kind {
            return wrong("the target or the kind of coefficients is not that of the spec");
        }
        if claim.expected != crate::solve::expected(prepared, instance) {
            return wrong("the expected verdict is not that of the spec");
        }
        if matches!(claim.finding, Finding::Unsettled(_)) {
            return Ok(CheckOutcome::Open);
        }
        if matches!(claim.finding, Finding::Refuted(_))
            && instance.alternatives.last() != Some(list)
        {
            return wrong("a refutation must take the longest list of terms");
        }
        if kind == CoefficientKind::Constant && prepared.variable().is_some() {
            check_constants(&claim.finding)?;
        }
        let compared = self.compared(claim, instance, &list.nodes)?;
        self.check_shape(claim, &compared)?;
        let how = match &claim.finding {
            Finding::Holds { form } => {
                check_kind(form, kind)?;
                self.check_form(claim, form, &compared)?;
                self.check_unique(&compared)?;
                "the form was substituted and both sides expanded; they agree"
            }
            Finding::Undetermined {
                particular,
                kernel,
                shift,
            } => {
                self.check_form(claim, particular, &compared)?;
                self.check_family(claim, kernel, shift.as_deref(), &compared)?;
                "the particular form was substituted, and every form of the kernel expands to 0"
            }
            Finding::Refuted(Refutation::Contradiction { rows, value }) => {
                self.check_contradiction(rows, value, &compared)?;
                "the multiplied equations add up to 0 on the left and to something else on the right"
            }
            Finding::Refuted(Refutation::OtherCoefficients { form, independence }) => {
                if kind == CoefficientKind::Rational || self.all_polynomial(form) {
                    return wrong("the coefficients are of the kind that the claim admits");
                }
                self.check_form(claim, form, &compared)?;
                self.check_unique(&compared)?;
                self.check_independence(independence, &compared, true)?;
                "the rational form was substituted, and a determinant shows that it is the only one"
            }
            Finding::Refuted(Refutation::NotAPrimitive {
                coefficients,
                derivatives,
                independence,
            }) => {
                self.check_no_primitive(claim, coefficients, derivatives, &compared)?;
                self.check_independence(independence, &compared, false)?;
                "the only coefficients that match the derivative are not those of a primitive"
            }
            Finding::Unsettled(_) => return Ok(CheckOutcome::Open),
        };
        Ok(CheckOutcome::Confirmed(how.to_owned()))
    }

    fn compared(
        &mut self,
        claim: &ClaimRecord,
        instance: &Instance,
        terms: &[crate::program::NodeId],
    ) -> Result<Compared, CheckError> {
        let prepared = self.arithmetic.prepared;
        let right = match (
            prepared.program.operation(instance.target),
            claim.known_by,
            instance.known_by,
        ) {
            // The claim is about an element that the family knows by its derivative alone.
            (
                Operation::Primitive {
                    derivative,
                    terms: own,
                    ..
                },
                KnownBy::Derivative,
                KnownBy::Value,
            ) => {
                if own != terms {
                    return wrong("the element was not sought in the terms of the claim");
                }
                self.value(*derivative)?
            }
            (_, known, given) if known == given => self.value(instance.target)?,
            _ => return wrong("the target is not known in the way that the result says"),
        };
        let terms = terms
            .iter()
            .map(|node| self.value(*node))
            .collect::<Result<Vec<_>, _>>()?;
        self.compare(right, terms, Self::by_derivative(claim), claim.coefficients)
    }

    fn compare(
        &self,
        right: Expansion,
        terms: Vec<Expansion>,
        by_derivative: bool,
        kind: CoefficientKind,
    ) -> Result<Compared, CheckError> {
        let prepared = self.arithmetic.prepared;
        let varying = prepared.variable().is_some() && kind != CoefficientKind::Constant;
        let mut columns = Vec::new();
        for term in &terms {
            if by_derivative {
                columns.push(self.arithmetic.derivative(term)?);
            }
            if !by_derivative || varying {
                columns.push(term.clone());
            }
        }
        let split = match kind {
            CoefficientKind::Constant => prepared.constants().start,
            CoefficientKind::Polynomial | CoefficientKind::Rational => prepared.generators(),
        };
        Ok(Compared {
            right,
            terms,
            columns,
            paired: by_derivative && varying,
            split,
        })
    }

    fn check_shape(&self, claim: &ClaimRecord, compared: &Compared) -> Result<(), CheckError> {
        let Some(system) = &claim.system else {
            return wrong("the shape of the system is missing");
        };
        self.check_system(system, compared)
    }

    fn check_system(&self, system: &SystemRecord, compared: &Compared) -> Result<(), CheckError> {
        if system.method != "matching"
            || !["fraction-free", "modular"].contains(&system.solver.as_str())
        {
            return wrong("the method is not one that this program has");
        }
        let split = compared.split;
        let all = compared.columns.iter().chain([&compared.right]);
        let monomials: BTreeSet<Vec<u32>> = all
            .flat_map(|value| {
                value
                    .monomials()
                    .map(|exponents| exponents[..split].to_vec())
            })
            .collect();
        if (system.rows, system.columns) != (monomials.len(), compared.columns.len()) {
            return wrong(format!(
                "the system has {} rows and {} columns, not {} and {}",
                monomials.len(),
                compared.columns.len(),
                system.rows,
                system.columns
            ));
        }
        Ok(())
    }

    /// `Σ p b`, or its derivative, as numerator and denominator.
    fn left_side(
        &self,
        claim: &ClaimRecord,
        form: &[FormTerm],
        compared: &Compared,
    ) -> Result<(Expansion, Expansion), CheckError> {
        let terms: Vec<&Expansion> = compared.terms.iter().collect();
        let (numerator, denominator) = self.arithmetic.form_value(form, &claim.terms, &terms)?;
        if Self::by_derivative(claim) {
            return Ok(self
                .arithmetic
                .quotient_derivative(&numerator, &denominator)?);
        }
        Ok((numerator, denominator))
    }

    fn check_form(
        &self,
        claim: &ClaimRecord,
        form: &[FormTerm],
        compared: &Compared,
    ) -> Result<(), CheckError> {
        let (numerator, denominator) = self.left_side(claim, form, compared)?;
        if numerator != self.arithmetic.product(&compared.right, &denominator)? {
            return wrong("the form was substituted and the two sides differ");
        }
        Ok(())
    }

    /// The kernel vanishes, is independent, and is all of it; the shift is 1.
    fn check_family(
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

    /// Are all coefficients polynomial, whatever common factors numerator and denominator have?
    fn all_polynomial(&self, form: &[FormTerm]) -> bool {
        form.iter().all(|FormTerm { coefficient, .. }| {
            let numerator = self.arithmetic.lift(&coefficient.numerator);
            self.arithmetic
                .lift(&coefficient.denominator)
                .divides(&numerator)
        })
    }

    /// A primitive in the record: its element exists, its system has the shape stated, its form is right and the only one.
    pub(super) fn primitive(&mut self, primitive: &PrimitiveRecord) -> Result<(), CheckError> {
        let program = &self.arithmetic.prepared.program;
        let name = &primitive.element;
        let node = (0..program.len())
            .map(NodeId)
            .find(|node| match program.operation(*node) {
                Operation::Primitive { primitive, .. } => {
                    program.primitives()[*primitive].name == *name
                }
                _ => false,
            });
        let Some(node) = node else {
            return wrong(format!("the claims need no element `{name}`"));
        };
        let Operation::Primitive {
            derivative, terms, ..
        } = program.operation(node)
        else {
            return wrong(format!("the claims need no element `{name}`"));
        };
        self.value(node)?;
        let right = self.value(*derivative)?;
        let terms = terms
            .iter()
            .map(|term| self.value(*term))
            .collect::<Result<Vec<_>, _>>()?;
        let compared = self.compare(right, terms, true, CoefficientKind::Polynomial)?;
        let named = |error| match error {
            CheckError::Wrong(why) => CheckError::Wrong(format!("`{name}`: {why}")),
            stop => stop,
        };
        self.check_unique(&compared).map_err(named)?;
        self.check_system(&primitive.system, &compared)
            .map_err(named)
    }

    /// Is the form the only one?
    fn check_unique(&self, compared: &Compared) -> Result<(), CheckError> {
        let columns: Vec<&Expansion> = compared.columns.iter().collect();
        if self.rank(&columns, compared.split) == columns.len() {
            return Ok(());
        }
        // Two forms with one derivative differ by a constant: the terms and 1 must be independent then.
        let one = self.arithmetic.one();
        let with_one: Vec<&Expansion> = std::iter::once(&one).chain(&compared.terms).collect();
        if compared.paired && self.rank(&with_one, compared.split) == with_one.len() {
            return Ok(());
        }
        wrong("the form is not the only one")
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

    /// `Σ y · (row of the columns) = 0` and `Σ y · (row of the right side) = value ≠ 0`.
    fn check_contradiction(
        &self,
        rows: &[CertificateRow],
        value: &Coefficient,
        compared: &Compared,
    ) -> Result<(), CheckError> {
        let mut multipliers: BTreeMap<&str, Expansion> = BTreeMap::new();
        for row in rows {
            if !row.multiplier.is_polynomial() {
                return wrong("a multiplier of the certificate has a denominator");
            }
            let lifted = self.arithmetic.lift(&row.multiplier.numerator);
            if multipliers.insert(&row.monomial, lifted).is_some() {
                return wrong("an equation stands twice in the certificate");
            }
        }
        let combine = |element: &Expansion| -> Result<Expansion, CheckError> {
            let mut sum = Expansion::default();
            for (monomial, cofactor) in self.split_rows(element, compared.split) {
                if let Some(multiplier) = multipliers.get(monomial.as_str()) {
                    sum = sum.plus(&self.arithmetic.product(multiplier, &cofactor)?);
                }
            }
            Ok(sum)
        };
        let mut occurring: BTreeSet<String> = BTreeSet::new();
        for element in compared.columns.iter().chain([&compared.right]) {
            occurring.extend(self.split_rows(element, compared.split).into_keys());
        }
        if !rows.iter().all(|row| occurring.contains(&row.monomial)) {
            return wrong("the certificate names an equation that the system does not have");
        }
        for column in &compared.columns {
            if !combine(column)?.is_empty() {
                return wrong("the multiplied equations do not add up to 0 on the left");
            }
        }
        let right = combine(&compared.right)?;
        if right.is_empty()
            || right != self.arithmetic.lift(&value.numerator)
            || !value.is_polynomial()
        {
            return wrong("the multiplied equations do not add up to the given value on the right");
        }
        Ok(())
    }

    /// The rows of an element: the monomials in the first symbols, by name, with their cofactors in the rest.
    fn split_rows(&self, element: &Expansion, split: usize) -> BTreeMap<String, Expansion> {
        let names = &self.arithmetic.prepared.symbols;
        let rows = element.split(split).into_iter();
        rows.map(|(leading, cofactor)| (row_name(&leading, names), cofactor))
            .collect()
    }

    fn check_no_primitive(
        &self,
        claim: &ClaimRecord,
        coefficients: &[FormTerm],
        derivatives: &[FormTerm],
        compared: &Compared,
    ) -> Result<(), CheckError> {
        if !compared.paired {
            return wrong("the target is not one that is known by its derivative");
        }
        // Σ (p b′ + r b) = X′ …
        let terms: Vec<&Expansion> = compared.terms.iter().collect();
        let derived: Vec<&Expansion> = compared.columns.iter().step_by(2).collect();
        let (n, d) = self
            .arithmetic
            .form_value(coefficients, &claim.terms, &derived)?;
        let (m, e) = self
            .arithmetic
            .form_value(derivatives, &claim.terms, &terms)?;
        let left = self
            .arithmetic
            .product(&n, &e)?
            .plus(&self.arithmetic.product(&m, &d)?);
        let common = self.arithmetic.product(&d, &e)?;
        if left != self.arithmetic.product(&compared.right, &common)? {
            return wrong("the coefficients do not match the derivative");
        }
        // … and r = p′ fails for some term.
        let find = |form: &[FormTerm], term: &str| {
            let found = form.iter().find(|entry| entry.term == term);
            found.map(|entry| {
                (
                    self.arithmetic.lift(&entry.coefficient.numerator),
                    self.arithmetic.lift(&entry.coefficient.denominator),
                )
            })
        };
        let zero = || (Expansion::default(), self.arithmetic.one());
        for term in &claim.terms {
            let (n, d) = find(coefficients, term).unwrap_or_else(zero);
            let (m, e) = find(derivatives, term).unwrap_or_else(zero);
            let (n1, d1) = self.arithmetic.quotient_derivative(&n, &d)?;
            if self.arithmetic.product(&n1, &e)? != self.arithmetic.product(&m, &d1)? {
                return Ok(());
            }
        }
        wrong("the coefficients are those of a primitive")
    }

    /// The determinant of the square block on the given rows must not vanish modulo the prime at the point. For the form of a
    /// target known by its derivative the terms and 1 may serve as columns instead of the pairs.
    fn check_independence(
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

fn row_name(exponents: &[u32], names: &[String]) -> String {
    let text = monomial_text(exponents, names);
    if text.is_empty() {
        "1".to_owned()
    } else {
        text
    }
}

/// The Mersenne prime by which ranks are computed.
const RANK_PRIME: u64 = (1 << 61) - 1;

/// Are the coefficients of the kind that the claim admits?
fn check_kind(form: &[FormTerm], kind: CoefficientKind) -> Result<(), CheckError> {
    if kind != CoefficientKind::Rational
        && !form.iter().all(|term| term.coefficient.is_polynomial())
    {
        return wrong("a coefficient has a denominator");
    }
    Ok(())
}

/// Are the coefficients of a claim about constants free of the variable, which is the first of their symbols?
fn check_constants(finding: &Finding) -> Result<(), CheckError> {
    let none: &[Vec<FormTerm>] = &[];
    let (form, kernel): (&[FormTerm], _) = match finding {
        Finding::Holds { form } => (form, none),
        Finding::Refuted(Refutation::OtherCoefficients { form, .. }) => (form, none),
        Finding::Undetermined {
            particular, kernel, ..
        } => (particular, kernel.as_slice()),
        _ => (&[], none),
    };
    let varies = |value: &PublishedPolynomial| {
        value
            .terms()
            .any(|(exponents, _)| exponents.first().is_some_and(|&exponent| exponent > 0))
    };
    let mut terms = form.iter().chain(kernel.iter().flatten());
    if terms.any(|FormTerm { coefficient, .. }| {
        varies(&coefficient.numerator) || varies(&coefficient.denominator)
    }) {
        return wrong("a coefficient that should be constant contains the variable");
    }
    Ok(())
}

fn product_modulo(a: u64, b: u64, prime: u64) -> u64 {
    (u128::from(a) * u128::from(b) % u128::from(prime)) as u64
}

/// `a/b`, by Fermat; 0 if `b` is 0.
fn quotient_modulo(a: u64, b: u64, prime: u64) -> u64 {
    let (mut base, mut exponent, mut result) = (b, prime - 2, a);
    while exponent > 0 {
        if exponent & 1 == 1 {
            result = product_modulo(result, base, prime);
        }
        base = product_modulo(base, base, prime);
        exponent >>= 1;
    }
    result
}

/// The rank of the rows, by plain elimination modulo a prime, written for the check alone.
fn rank_modulo(rows: impl Iterator<Item = Vec<u64>>, prime: u64) -> usize {
    // Reduced rows with the place of their leading 1.
    let mut basis: Vec<(usize, Vec<u64>)> = Vec::new();
    for mut row in rows {
        for (pivot, known) in &basis {
            let factor = row[*pivot];
            if factor != 0 {
                for (target, value) in row.iter_mut().zip(known) {
                    let negative = prime - product_modulo(factor, *value, prime);
                    *target =
                        ((u128::from(*target) + u128::from(negative)) % u128::from(prime)) as u64;
                }
            }
        }
        if basis.len() == row.len() {
            break;
        }
        if let Some(pivot) = row.iter().position(|&value| value != 0) {
            let leading = row[pivot];
            row.iter_mut()
                .for_each(|value| *value = quotient_modulo(*value, leading, prime));
            basis.push((pivot, row));
        }
    }
    basis.len()
}

/// Do the weights make every element homogeneous, and the derivation too?
pub(super) fn grading_is_right(
    grading: &GradingRecord,
    prepared: &Prepared,
    elements: &[(Expansion, Option<usize>)],
) -> bool {
    let Ok(modulus) = grading.modulus.parse::<BigInt>() else {
        return false;
    };
    let Ok(derivation) = grading.derivation.parse::<BigInt>() else {
        return false;
    };
    let weights: Option<Vec<BigInt>> = prepared
        .symbols
        .iter()
        .map(|name| {
            grading
                .weights
                .get(name)
                .and_then(|weight| weight.parse().ok())
        })
        .collect();
    let Some(weights) = weights else { return false };
    let vanishes = |value: BigInt| {
        if modulus.is_zero() {
            value.is_zero()
        } else {
            (value % &modulus).is_zero()
        }
    };
    let weight = |exponents: &[u32]| -> BigInt {
        exponents
            .iter()
            .zip(&weights)
            .map(|(e, w)| w * BigInt::from(*e))
            .sum()
    };
    // The variable has derivative 1, of weight 0.
    if prepared
        .variable()
        .is_some_and(|variable| !vanishes(&weights[variable] + &derivation))
    {
        return false;
    }
    elements.iter().all(|(element, generator)| {
        let mut terms = element.monomials().map(weight);
        match generator {
            Some(generator) => {
                let expected = &weights[*generator] + &derivation;
                terms.all(|found| vanishes(found - &expected))
            }
            None => match terms.next() {
                Some(first) => terms.all(|found| vanishes(found - &first)),
                None => true,
            },
        }
    })
}
