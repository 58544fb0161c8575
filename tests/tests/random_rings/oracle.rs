//! What a claim's record must say, judged by ranks modulo a prime.

use crate::modular::{self, Poly};
use crate::spec::{Element, RandomRing};
use linform_engine::published::{Coefficient, PublishedPolynomial};
use linform_engine::record::{
    ClaimRecord, CoefficientKind, Finding, FormTerm, Refutation, Verdict,
};
use linform_scalar::SplitMix;
use std::collections::BTreeMap;

/// A claim as it was made.
#[derive(Clone, Debug)]
pub(crate) struct Question {
    pub(crate) text: String,
    pub(crate) target: Element,
    pub(crate) terms: Vec<Element>,
    /// The terms before they were multiplied by the divisor of planted coefficients.
    pub(crate) undivided: Vec<Element>,
    pub(crate) kind: CoefficientKind,
    pub(crate) by_derivative: bool,
    /// Coefficients that were planted, and a divisor of all of them; nothing for a target of any other kind.
    pub(crate) planted: Option<(Vec<Poly>, Poly)>,
}

pub(crate) struct Oracle<'a> {
    pub(crate) ring: &'a RandomRing,
    pub(crate) point: Vec<u64>,
}

type Entries = BTreeMap<Vec<u32>, u64>;

impl<'a> Oracle<'a> {
    pub(crate) fn new(ring: &'a RandomRing) -> Self {
        let mut random = SplitMix::new(0x0050_4F49_4E54);
        let point = (0..ring.symbols()).map(|_| random.next_word() % modular::PRIME);
        Oracle {
            ring,
            point: point.collect(),
        }
    }

    fn split(&self, kind: CoefficientKind) -> usize {
        match (kind, self.ring.variable) {
            (CoefficientKind::Constant, Some(variable)) => variable + 1,
            _ => self.ring.generators,
        }
    }

    fn rows(&self, value: &Poly, split: usize) -> Entries {
        value
            .rows(split, &self.point)
            .into_iter()
            .filter(|(_, entry)| *entry != 0)
            .collect()
    }

    fn rank(&self, elements: &[&Poly], split: usize) -> usize {
        let rows: Vec<Entries> = elements
            .iter()
            .map(|value| self.rows(value, split))
            .collect();
        modular::rank(&rows)
    }

    fn polynomial(&self, value: &PublishedPolynomial) -> Poly {
        let symbols = self.ring.symbols();
        let mut result = Poly::default();
        for (exponents, coefficient) in value.terms() {
            let mut all = vec![0; symbols - exponents.len()];
            all.extend(exponents);
            let residue = |text: String| {
                let (digits, sign) = text
                    .strip_prefix('-')
                    .map_or((&*text, false), |rest| (rest, true));
                let value = digits.bytes().fold(0, |value, digit| {
                    modular::sum(modular::product(value, 10), u64::from(digit - b'0'))
                });
                if sign {
                    modular::negative(value)
                } else {
                    value
                }
            };
            let inverse = modular::inverse(residue(coefficient.denom().to_string()));
            result.add_term(
                all,
                modular::product(residue(coefficient.numer().to_string()), inverse),
            );
        }
        result
    }

    /// The value of a polynomial in the base symbols at the point.
    fn at_point(&self, value: &Poly) -> u64 {
        let rows = value.rows(0, &self.point);
        rows.values().next().copied().unwrap_or(0)
    }

    fn coefficient_at_point(&self, value: &Coefficient) -> u64 {
        let [n, d] =
            [&value.numerator, &value.denominator].map(|p| self.at_point(&self.polynomial(p)));
        modular::product(n, modular::inverse(d))
    }

    /// The values of a form's coefficients, one for each term of the claim.
    fn vector(&self, form: &[FormTerm], terms: &[String]) -> Result<Vec<u64>, String> {
        let mut values = vec![None; terms.len()];
        for FormTerm { term, coefficient } in form {
            let place =
                (0..terms.len()).find(|&place| terms[place] == *term && values[place].is_none());
            let place = place.ok_or_else(|| format!("no term {term}"))?;
            values[place] = Some(self.coefficient_at_point(coefficient));
        }
        Ok(values.into_iter().map(Option::unwrap_or_default).collect())
    }

    fn combination(&self, vector: &[u64], columns: &[&Poly], split: usize) -> Entries {
        let mut total = Entries::new();
        for (factor, column) in vector.iter().zip(columns) {
            for (place, value) in self.rows(column, split) {
                let entry = total.entry(place).or_insert(0);
                *entry = modular::sum(*entry, modular::product(*factor, value));
            }
        }
        total.retain(|_, value| *value != 0);
        total
    }

    /// Judges what was found; an error is what is wrong.
    pub(crate) fn judge(&self, question: &Question, record: &ClaimRecord) -> Result<(), String> {
        if question.by_derivative
            && self.ring.variable.is_some()
            && question.kind != CoefficientKind::Constant
        {
            return self.judge_derivative(question, record);
        }
        let derived: Vec<Poly>;
        let mut columns: Vec<&Poly> = question.terms.iter().map(|term| &term.value).collect();
        if question.by_derivative {
            derived = columns
                .iter()
                .map(|value| value.derived(&self.ring.derivatives))
                .collect();
            columns = derived.iter().collect();
        }
        let split = self.split(question.kind);
        let target = &question.target.value;
        let rank = self.rank(&columns, split);
        let mut all = columns.clone();
        all.push(target);
        let consistent = self.rank(&all, split) == rank;
        let system = record.system.as_ref().ok_or("no system")?;
        if system.columns != columns.len() {
            return Err(format!("{} columns", system.columns));
        }
        match (&record.finding, consistent, rank == columns.len()) {
            (Finding::Refuted(Refutation::Contradiction { .. }), false, _) => Ok(()),
            (Finding::Holds { form }, true, true) => {
                self.agrees(form, question, record, &columns, split, true)
            }
            (Finding::Refuted(Refutation::OtherCoefficients { form, .. }), true, true) => {
                self.agrees(form, question, record, &columns, split, false)
            }
            (
                Finding::Undetermined {
                    particular,
                    kernel,
                    shift,
                },
                true,
                false,
            ) => {
                if kernel.len() != columns.len() - rank || shift.is_some() {
                    return Err(format!("kernel of dimension {}", kernel.len()));
                }
                let particular = self.vector(particular, &record.terms)?;
                let target = self.rows(target, split);
                if self.combination(&particular, &columns, split) != target {
                    return Err("the particular form is none".to_owned());
                }
                let mut rows = Vec::new();
                for form in kernel {
                    let form = self.vector(form, &record.terms)?;
                    if !self.combination(&form, &columns, split).is_empty() {
                        return Err("a form of the kernel does not vanish".to_owned());
                    }
                    rows.push(form);
                }
                if modular::dense_rank(rows.clone()) != rows.len() {
                    return Err("the kernel is dependent".to_owned());
                }
                if let Some(planted) = self.planted(question) {
                    let difference = planted.iter().zip(&particular);
                    rows.push(
                        difference
                            .map(|(p, q)| modular::sum(*p, modular::negative(*q)))
                            .collect(),
                    );
                    if modular::dense_rank(rows) != kernel.len() {
                        return Err("the planted form is not in the family".to_owned());
                    }
                }
                Ok(())
            }
            (finding, ..) => Err(format!(
                "{} although consistent: {consistent}, rank {rank} of {}",
                finding.verdict().word(),
                columns.len()
            )),
        }
    }

    fn planted(&self, question: &Question) -> Option<Vec<u64>> {
        let (values, divisor) = question.planted.as_ref()?;
        let inverse = modular::inverse(self.at_point(divisor));
        Some(
            values
                .iter()
                .map(|value| modular::product(self.at_point(value), inverse))
                .collect(),
        )
    }

    /// The only form has the right values, the planted ones, and is polynomial exactly if it was accepted as that.
    fn agrees(
        &self,
        form: &[FormTerm],
        question: &Question,
        record: &ClaimRecord,
        columns: &[&Poly],
        split: usize,
        holds: bool,
    ) -> Result<(), String> {
        let vector = self.vector(form, &record.terms)?;
        if self.combination(&vector, columns, split) != self.rows(&question.target.value, split) {
            return Err("the form is not the target".to_owned());
        }
        if self
            .planted(question)
            .is_some_and(|planted| planted != vector)
        {
            return Err("the form is not the planted one".to_owned());
        }
        self.right_kind(form, question, holds)
    }

    fn right_kind(
        &self,
        form: &[FormTerm],
        question: &Question,
        holds: bool,
    ) -> Result<(), String> {
        let polynomial = form.iter().all(|term| term.coefficient.is_polynomial());
        if holds != (polynomial || question.kind == CoefficientKind::Rational) {
            return Err("the form is not of the kind that the verdict says".to_owned());
        }
        if let (Some((_, divisor)), true) = (&question.planted, !polynomial)
            && divisor.0.len() <= 1
            && divisor
                .0
                .keys()
                .all(|exponents| exponents.iter().all(|&e| e == 0))
        {
            return Err("the planted form is polynomial, the one found is not".to_owned());
        }
        Ok(())
    }

    /// `(Σ p b)′` with varying coefficients: a form is the only one exactly if the terms and 1 are independent.
    fn judge_derivative(&self, question: &Question, record: &ClaimRecord) -> Result<(), String> {
        let verdict = record.finding.verdict();
        let columns: Vec<&Poly> = question.terms.iter().map(|term| &term.value).collect();
        let split = self.ring.generators;
        let dimension = columns.len() - self.rank(&columns, split);
        let one = Poly::constant(self.ring.symbols(), 1);
        let mut with_one = columns.clone();
        with_one.push(&one);
        let spans_one = self.rank(&with_one, split) == columns.len() - dimension;
        // A ring may have first integrals: functions, not of the base alone, that the derivation takes to 0. Where the terms
        // span one, which forms have the derivative is not a question of ranks.
        let integrals = self.constants_in_span(question)
            > self.vanishing_in_span(question) + usize::from(spans_one);
        if integrals {
            return Ok(());
        }
        if question.planted.is_some()
            && question.kind == CoefficientKind::Rational
            && verdict == Verdict::Refuted
        {
            return Err("a planted derivative was refuted".to_owned());
        }
        let polynomial =
            |(_, divisor): &(Vec<Poly>, Poly)| divisor.0.keys().all(|e| e.iter().all(|&e| e == 0));
        if question.planted.as_ref().is_some_and(polynomial) && verdict == Verdict::Refuted {
            return Err("a planted polynomial derivative was refuted".to_owned());
        }
        match &record.finding {
            Finding::Holds { form }
            | Finding::Refuted(Refutation::OtherCoefficients { form, .. }) => {
                self.right_kind(form, question, verdict == Verdict::Holds)?;
                if dimension > 0 || spans_one {
                    return Err(
                        "another form has the same derivative, but one was said to be the only one"
                            .to_owned(),
                    );
                }
                let vector = self.vector(form, &record.terms)?;
                if self
                    .planted(question)
                    .is_some_and(|planted| planted != vector)
                {
                    return Err("the form is not the planted one".to_owned());
                }
                Ok(())
            }
            Finding::Undetermined { kernel, shift, .. } => {
                if kernel.len() != dimension || shift.is_some() != spans_one {
                    return Err(format!(
                        "kernel of dimension {}, not {dimension}",
                        kernel.len()
                    ));
                }
                Ok(())
            }
            _ => Ok(()),
        }
    }

    /// Multiples of the terms by `1, t, t², t³`.
    fn multiples(&self, question: &Question) -> Vec<Poly> {
        let symbols = self.ring.symbols();
        let variable = self.ring.variable.map(|index| Poly::symbol(symbols, index));
        let mut result = Vec::new();
        for term in &question.undivided {
            let mut value = term.value.clone();
            for _ in 0..4 {
                result.push(value.clone());
                if let Some(variable) = &variable {
                    value = value.times(variable);
                }
            }
        }
        result
    }

    /// The dimension of the forms of degree at most 3 whose derivative is 0, over the constants.
    fn constants_in_span(&self, question: &Question) -> usize {
        let derived: Vec<Poly> = self
            .multiples(question)
            .iter()
            .map(|value| value.derived(&self.ring.derivatives))
            .collect();
        let columns: Vec<&Poly> = derived.iter().collect();
        columns.len() - self.rank(&columns, self.split(CoefficientKind::Constant))
    }

    /// The same for the forms that are 0.
    fn vanishing_in_span(&self, question: &Question) -> usize {
        let multiples = self.multiples(question);
        let columns: Vec<&Poly> = multiples.iter().collect();
        columns.len() - self.rank(&columns, self.split(CoefficientKind::Constant))
    }
}
