//! One claim as a statement that checks it.

use super::dialect::{list, quoted};
use super::emitter::Emitter;
use super::error::ScriptError;
use crate::sanitise::excerpt;
use linform_engine::record::{
    ClaimRecord, CoefficientKind, Finding, FormTerm, IndependenceRecord, KnownBy, Refutation,
};
use linform_engine::{Arithmetic, Instance, NodeId, Operation, Prepared, TermList};

/// The names of the elements that the equations of a claim compare.
struct Compared {
    target: String,
    terms: Vec<String>,
    /// The columns of the system: the terms, or derivatives and terms by turns.
    columns: Vec<String>,
    /// The derivatives of the terms, where the target is known by its derivative.
    derivatives: Vec<String>,
    /// How many of the symbols the monomials of the rows are made of.
    split: usize,
}

/// Values of nodes, shared by all claims.
pub(super) type Values = [Option<String>];

pub(super) fn write(
    emitter: &mut Emitter<'_>,
    prepared: &Prepared,
    values: &mut Values,
    claim: &ClaimRecord,
    instance: &Instance,
) -> Result<(), ScriptError> {
    let title = quoted(&instance.title());
    if let Finding::Unsettled(unsettled) = &claim.finding {
        let note = format!(
            "{} is unsettled: {}",
            instance.title(),
            unsettled.stop.word()
        );
        let note = emitter.dialect.comment(&note);
        emitter.out.push_str(&note);
        return Ok(());
    }
    let list_of_terms = instance
        .alternatives
        .iter()
        .find(|terms| terms.texts == claim.terms);
    let list_of_terms = list_of_terms.ok_or_else(|| {
        ScriptError::new(format!(
            "the terms of {} are not those of the spec",
            excerpt(&instance.title())
        ))
    })?;
    let compared = compared(emitter, prepared, values, claim, instance, list_of_terms)?;
    let by_derivative = emitter.dialect.truth(claim.known_by == KnownBy::Derivative);
    let target = compared.target.as_str();
    let form = |emitter: &Emitter<'_>, parts: &[FormTerm]| {
        emitter.form(parts, &claim.terms, &compared.terms)
    };
    let statement = match &claim.finding {
        Finding::Unsettled(_) => return Ok(()),
        Finding::Holds { form: found } => {
            format!(
                "holds({title}, {target}, {by_derivative}, {})",
                form(emitter, found)?
            )
        }
        Finding::Undetermined {
            particular,
            kernel,
            shift,
        } => {
            let particular = form(emitter, particular)?;
            let kernel = kernel
                .iter()
                .chain(shift)
                .map(|vector| form(emitter, vector))
                .collect::<Result<Vec<_>, _>>()?;
            format!(
                "family({title}, {target}, {by_derivative}, {particular}, {})",
                list(kernel)
            )
        }
        Finding::Refuted(Refutation::Contradiction { rows, value }) => {
            let mut equations = Vec::new();
            for row in rows {
                let monomial = emitter.monomial(&row.monomial, compared.split)?;
                equations.push(format!(
                    "[{monomial}, {}]",
                    polynomial(emitter, &row.multiplier)?
                ));
            }
            let value = polynomial(emitter, value)?;
            let columns = list(compared.columns.iter().cloned());
            format!(
                "contradiction({title}, {target}, {columns}, {}, {value})",
                list(equations)
            )
        }
        Finding::Refuted(Refutation::OtherCoefficients {
            form: only,
            independence,
        }) => {
            let only = form(emitter, only)?;
            let witness = witness(emitter, prepared, &compared, independence)?;
            format!("other({title}, {target}, {by_derivative}, {only}, {witness})")
        }
        Finding::Refuted(Refutation::NotAPrimitive {
            coefficients,
            derivatives,
            independence,
        }) => {
            let pairs = pairs(emitter, claim, &compared, coefficients, derivatives)?;
            let witness = witness(emitter, prepared, &compared, independence)?;
            format!("no_primitive({title}, {target}, {pairs}, {witness})")
        }
    };
    emitter.statement(&statement);
    Ok(())
}

fn compared(
    emitter: &mut Emitter<'_>,
    prepared: &Prepared,
    values: &mut Values,
    claim: &ClaimRecord,
    instance: &Instance,
    terms: &TermList,
) -> Result<Compared, ScriptError> {
    let by_derivative = claim.known_by == KnownBy::Derivative;
    let right = match prepared.program.operation(instance.target) {
        // The claim is about an element that its family knows by the derivative alone.
        Operation::Primitive { derivative, .. }
            if by_derivative && instance.known_by == KnownBy::Value =>
        {
            *derivative
        }
        _ if claim.known_by == instance.known_by => instance.target,
        _ => {
            let title = instance.title();
            return Err(ScriptError::new(format!(
                "the target of {} is not known as the result says",
                excerpt(&title)
            )));
        }
    };
    let mut roots: Vec<NodeId> = terms.nodes.clone();
    roots.push(right);
    prepared.program.evaluate(emitter, &roots, values)?;
    let name = |node: &NodeId| values[node.position()].clone().unwrap_or_default();
    let target = name(&right);
    let terms: Vec<String> = terms.nodes.iter().map(name).collect();
    // The derivatives are columns of the system only; a claim that holds needs none of them by itself.
    let needed = by_derivative && matches!(claim.finding, Finding::Refuted(_));
    let derivatives = if needed {
        terms
            .iter()
            .map(|term| emitter.derive(term))
            .collect::<Result<Vec<_>, _>>()?
    } else {
        Vec::new()
    };
    let constant = claim.coefficients == CoefficientKind::Constant;
    let columns = match (needed, constant || prepared.variable().is_none()) {
        (false, _) => terms.clone(),
        (true, true) => derivatives.clone(),
        (true, false) => derivatives
            .iter()
            .zip(&terms)
            .flat_map(|(d, b)| [d.clone(), b.clone()])
            .collect(),
    };
    Ok(Compared {
        target,
        terms,
        columns,
        derivatives,
        split: if constant {
            prepared.constants().start
        } else {
            prepared.generators()
        },
    })
}

fn polynomial(
    emitter: &Emitter<'_>,
    coefficient: &linform_engine::published::Coefficient,
) -> Result<String, ScriptError> {
    if !coefficient.is_polynomial() {
        return Err(ScriptError::new(
            "a multiplier of a certificate has a denominator",
        ));
    }
    Ok(emitter.coefficient(coefficient)?.0)
}

/// Columns, rows, prime and point of a witness of independence.
fn witness(
    emitter: &Emitter<'_>,
    prepared: &Prepared,
    compared: &Compared,
    witness: &IndependenceRecord,
) -> Result<String, ScriptError> {
    let rows = witness
        .rows
        .iter()
        .map(|row| emitter.monomial(row, compared.split));
    let rows = rows.collect::<Result<Vec<_>, _>>()?;
    let point = prepared
        .symbols
        .iter()
        .map(|name| witness.point.get(name).copied().unwrap_or(0).to_string());
    Ok(format!(
        "{}, {}, {}, {}",
        list(compared.columns.iter().cloned()),
        list(rows),
        witness.prime,
        list(point)
    ))
}

/// For each term the coefficients `p` and `r`, the derivative of the term, and the term.
fn pairs(
    emitter: &Emitter<'_>,
    claim: &ClaimRecord,
    compared: &Compared,
    coefficients: &[FormTerm],
    derivatives: &[FormTerm],
) -> Result<String, ScriptError> {
    let find =
        |parts: &[FormTerm], text: &String| match parts.iter().find(|part| part.term == *text) {
            Some(part) => emitter
                .coefficient(&part.coefficient)
                .map(|(above, below)| format!("[{above}, {below}]")),
            None => Ok("[c(0), c(1)]".to_owned()),
        };
    let places = compared.derivatives.iter().zip(&compared.terms);
    let mut pairs = Vec::new();
    for (text, (derivative, term)) in claim.terms.iter().zip(places) {
        let (p, r) = (find(coefficients, text)?, find(derivatives, text)?);
        pairs.push(format!("[{p}, {r}, {derivative}, {term}]"));
    }
    Ok(list(pairs))
}
