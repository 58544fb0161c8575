//! `[law.NAME]`

use super::draft::Draft;
use super::names::declared_key;
use super::section::Entry;
use super::{redefinition, required_expression};
use crate::collect::Collector;
use crate::model::Law;

pub(crate) fn read(entry: &Entry<'_>, draft: &mut Draft, errors: &mut Collector) {
    let name = declared_key(entry, errors);
    let Some(section) = entry.section(format!("[law.{}]", entry.key), errors) else {
        draft.lost.text(entry.key);
        return;
    };
    section.allow(&["log_derivative"], errors);
    let log_derivative =
        required_expression(&section, "log_derivative", "log_derivative = \"…\"", errors);
    let Some(name) = name else {
        draft.lost.text(entry.key);
        return;
    };
    if let Some(there) = draft.laws.get(&name.name) {
        errors.push(redefinition(
            &format!("the law `{}`", name.name),
            name.span,
            there.span,
        ));
        return;
    }
    let law = Law {
        log_derivative,
        span: entry.key_span,
    };
    draft.laws.insert(name.name, law);
}
