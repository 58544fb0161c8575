//! One claim as a statement that checks it.

use super::dialect::{list, quoted};
use super::emitter::Emitter;
use super::error::ScriptError;
use crate::json::coefficients_word;
use crate::sanitise::excerpt;
use linform_engine::record::{
    ClaimRecord, CoefficientKind, Finding, FormTerm, IndependenceRecord, KnownBy, Refutation,
};
use linform_engine::{Instance, NodeId, Operation, Prepared, TermList};

/// What the equations of a claim compare.
struct Compared {
    target: String,
    terms: Vec<String>,
    known: Known,
    /// How many of the symbols the monomials of the rows are made of.
    split: usize,
}

/// How a target is known; the preludes say what is compared in each case.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Known {
    Value = 0,
    /// By its derivative, where no coefficient contains the variable.
    ConstantDerivative = 1,
    /// By its derivative, where coefficients may contain the variable.
    Derivative = 2,
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
    let kind = kind_asked(prepared, instance);
    let wrong = |what: &str| {
        ScriptError::new(format!(
            "{what} of {} are not those of the spec",
            excerpt(&instance.title())
        ))
    };
    if claim.target != instance.target_text || claim.coefficients != kind {
        return Err(wrong("the target and the kind of coefficients"));
    }
    let place = instance
        .alternatives
        .iter()
        .position(|terms| terms.texts == claim.terms);
    let place = place.ok_or_else(|| wrong("the terms"))?;
    // A shorter list than the longest refutes nothing.
    if matches!(claim.finding, Finding::Refuted(_)) && place + 1 < instance.alternatives.len() {
        return Err(wrong("the terms"));
    }
    let list_of_terms = &instance.alternatives[place];
    let compared = compared(emitter, prepared, values, claim, instance, list_of_terms)?;
    let head = format!(
        "{title}, {}, {}, {}, {}, {}",
        compared.target,
        list(compared.terms.iter().cloned()),
        compared.known as usize,
        compared.split,
        quoted(coefficients_word(kind)),
    );
    let form = |emitter: &Emitter<'_>, parts: &[FormTerm]| {
        emitter.form(parts, &claim.terms, &compared.terms)
    };
    let statement = match &claim.finding {
        Finding::Unsettled(_) => return Ok(()),
        Finding::Holds { form: found } => {
            format!("holds({head}, {})", form(emitter, found)?)
        }
        Finding::Undetermined {
            particular,
            kernel,
            shift,
        } => {
            let particular = form(emitter, particular)?;
            let kernel = kernel
                .iter()
                .map(|vector| emitter.whole_form(vector, &claim.terms, &compared.terms))
                .collect::<Result<Vec<_>, _>>()?;
            let ones = shift
                .iter()
                .map(|ones| form(emitter, ones))
                .collect::<Result<Vec<_>, _>>()?;
            format!(
                "family({head}, {particular}, {}, {})",
                list(kernel),
                list(ones)
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
            format!("contradiction({head}, {}, {value})", list(equations))
        }
        Finding::Refuted(Refutation::OtherCoefficients {
            form: only,
            independence,
        }) => {
            let only = form(emitter, only)?;
            let witness = witness(emitter, prepared, &compared, independence)?;
            format!("other({head}, {only}, {witness})")
        }
        Finding::Refuted(Refutation::NotAPrimitive {
            coefficients,
            derivatives,
            independence,
        }) => {
            let pairs = pairs(emitter, claim, coefficients, derivatives)?;
            let witness = witness(emitter, prepared, &compared, independence)?;
            format!("no_primitive({head}, {pairs}, {witness})")
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
    let constant = claim.coefficients == CoefficientKind::Constant;
    Ok(Compared {
        target,
        terms,
        known: match (by_derivative, constant || prepared.variable().is_none()) {
            (false, _) => Known::Value,
            (true, true) => Known::ConstantDerivative,
            (true, false) => Known::Derivative,
        },
        split: if constant {
            prepared.constants().start
        } else {
            prepared.generators()
        },
    })
}

/// The kind of coefficients that the spec asks for.
fn kind_asked(prepared: &Prepared, instance: &Instance) -> CoefficientKind {
    match prepared.model.claims[instance.claim].coefficients {
        linform_spec::Coefficients::Polynomial => CoefficientKind::Polynomial,
        linform_spec::Coefficients::Rational => CoefficientKind::Rational,
        linform_spec::Coefficients::Constant => CoefficientKind::Constant,
    }
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

/// Rows, prime and point of a witness of independence.
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
        "{}, {}, {}",
        list(rows),
        witness.prime,
        list(point)
    ))
}

/// For each term the coefficients `p` and `r`.
fn pairs(
    emitter: &Emitter<'_>,
    claim: &ClaimRecord,
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
    let mut pairs = Vec::new();
    for text in &claim.terms {
        let (p, r) = (find(coefficients, text)?, find(derivatives, text)?);
        pairs.push(format!("[{p}, {r}]"));
    }
    Ok(list(pairs))
}
