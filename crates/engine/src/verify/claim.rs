//! The checks of single claims.

use super::arithmetic::CheckError;
use super::expansion::Expansion;
use super::{Check, CheckOutcome};
use crate::prepare::Instance;
use crate::program::{NodeId, Operation};
use crate::published::{Coefficient, PublishedPolynomial, monomial_text};
use crate::record::{
    CertificateRow, ClaimRecord, CoefficientKind, Finding, FormTerm, KnownBy, PrimitiveRecord,
    Refutation, SystemRecord,
};
use std::collections::{BTreeMap, BTreeSet};

/// The elements that a claim compares: the target (or its derivative) and the columns of the system.
pub(super) struct Compared {
    pub(super) right: Expansion,
    pub(super) terms: Vec<Expansion>,
    /// The terms, or for a target known by its derivative the pairs (derivative of term, term).
    pub(super) columns: Vec<Expansion>,
    pub(super) paired: bool,
    /// The number of leading symbols whose monomials are compared: the generators, and the variable where the coefficients
    /// are constants.
    pub(super) split: usize,
}

pub(super) fn wrong<T>(what: impl Into<String>) -> Result<T, CheckError> {
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
    pub(super) fn left_side(
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
    pub(super) fn split_rows(
        &self,
        element: &Expansion,
        split: usize,
    ) -> BTreeMap<String, Expansion> {
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
}

fn row_name(exponents: &[u32], names: &[String]) -> String {
    let text = monomial_text(exponents, names);
    if text.is_empty() {
        "1".to_owned()
    } else {
        text
    }
}

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
