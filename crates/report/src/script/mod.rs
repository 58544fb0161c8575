//! Scripts that re-prove the claims of a record in general-purpose systems.
//!
//! A script holds the whole program of definitions: it is written by evaluating the program in an arithmetic whose
//! elements are names (module `emitter`), so no recursion is written a second time.

mod claim;
mod dialect;
mod emitter;
mod error;

#[cfg(test)]
mod tests;

pub use error::ScriptError;

use crate::sanitise::excerpt;
use dialect::{Dialect, list};
use emitter::Emitter;
use linform_engine::record::ResultRecord;
use linform_engine::{Instance, Prepared};
use std::collections::HashMap;

/// A Python script that checks every claim of the record with SymPy's sparse polynomials.
///
/// Run as `python3 FILE`: it prints `ok` or `FAILED` for each claim and each element found from its derivative, then
/// the counts; its exit status is 1 if any check failed.
///
/// # Errors
///
/// The record does not belong to the prepared spec, or lacks a form that a later claim needs.
pub fn sympy(record: &ResultRecord, prepared: &Prepared) -> Result<String, ScriptError> {
    script(Dialect::Sympy, record, prepared)
}

/// A script that checks every claim of the record with PARI/GP.
///
/// Run as `gp -q FILE`: it prints `ok` or `FAILED` for each claim and each element found from its derivative, then the
/// counts; its exit status is 1 if any check failed.
///
/// # Errors
///
/// As [`sympy`].
pub fn gp(record: &ResultRecord, prepared: &Prepared) -> Result<String, ScriptError> {
    script(Dialect::Gp, record, prepared)
}

fn script(
    dialect: Dialect,
    record: &ResultRecord,
    prepared: &Prepared,
) -> Result<String, ScriptError> {
    let mut emitter = Emitter::new(dialect, prepared, record);
    let title = record.spec.title.as_deref().unwrap_or("Linear forms");
    let mut head = dialect.comment(&format!("{title}: re-checks what {} found", record.program));
    head.push_str(&dialect.comment(&format!("spec BLAKE3 {}", record.spec.blake3)));
    for (index, name) in prepared.symbols.iter().enumerate() {
        head.push_str(&dialect.comment(&format!("{} = {name}", dialect::symbol(index))));
    }
    head.push_str(dialect.prelude());
    head.push_str(&dialect.symbols(prepared.symbols.len()));
    let variable = prepared.variable().map(dialect::symbol);
    head.push_str(&dialect.statement(&format!("V = {}", list(variable))));
    head.push_str(dialect.point());
    emitter.out = head;

    let mut values: Vec<Option<String>> = vec![None; prepared.program.len()];
    prepared
        .program
        .evaluate(&mut emitter, &prepared.derivatives, &mut values)?;
    let mut derivatives: Vec<String> = prepared
        .derivatives
        .iter()
        .map(|node| values[node.position()].clone().unwrap_or_default())
        .collect();
    derivatives.extend(prepared.variable().map(|_| "c(1)".to_owned()));
    derivatives.resize(prepared.symbols.len(), "c(0)".to_owned());
    emitter.statement(&format!("DX = {}", list(derivatives)));

    let instances: HashMap<String, &Instance> = prepared
        .instances
        .iter()
        .map(|instance| (instance.title(), instance))
        .collect();
    for claim in &record.claims {
        let title = linform_engine::title(&claim.name, &claim.index);
        let instance = instances.get(&title).ok_or_else(|| {
            ScriptError::new(format!("the spec has no claim {}", excerpt(&title)))
        })?;
        claim::write(&mut emitter, prepared, &mut values, claim, instance)?;
    }
    emitter.out.push_str(dialect.epilogue());
    Ok(emitter.out)
}
