//! One coefficient of a record is changed; the check must notice.

use crate::oracle::Question;
use crate::spec::{RandomRing, Tape};
use linform_engine::published::Coefficient;
use linform_engine::record::{Finding, FormTerm, Refutation, ResultRecord};
use linform_engine::verify;
use linform_scalar::Unlimited;
use linform_scalar::published::{BigInt, BigRational};

/// Adds a number to the numerator.
fn change(coefficient: &mut Coefficient, amount: i64) {
    let symbols = coefficient.names.len();
    coefficient
        .numerator
        .add_term(vec![0; symbols], BigRational::from(BigInt::from(amount)));
}

fn pick<'a>(form: &'a mut [FormTerm], tape: &mut Tape) -> Option<&'a mut FormTerm> {
    let place = tape.below(form.len().max(1));
    form.get_mut(place)
}

/// # Errors
///
/// A changed record that was confirmed.
pub(crate) fn is_noticed(
    record: &ResultRecord,
    questions: &[Question],
    ring: &RandomRing,
    tape: &mut Tape,
) -> Result<(), String> {
    for (place, question) in questions.iter().enumerate() {
        let mut changed = record.clone();
        let amount = [1, -1, 2, 17][tape.below(4)];
        // The value of a term in the comparison: a change of its coefficient is none if that is 0.
        let matters = |name: &str| {
            let texts = record.claims[place].terms.iter();
            let found = texts.zip(&question.terms).find(|(text, _)| *text == name);
            found.is_some_and(|(_, term)| {
                !term.value.is_zero()
                    && (!question.by_derivative || !term.value.derived(&ring.derivatives).is_zero())
            })
        };
        let mut form_change = |form: &mut [FormTerm]| match pick(form, tape) {
            Some(term) if matters(&term.term) => {
                change(&mut term.coefficient, amount);
                true
            }
            _ => false,
        };
        let altered = match &mut changed.claims[place].finding {
            Finding::Holds { form }
            | Finding::Refuted(Refutation::OtherCoefficients { form, .. }) => form_change(form),
            Finding::Undetermined {
                particular,
                kernel,
                shift,
            } => match tape_choice(amount, shift.is_some()) {
                0 => form_change(particular),
                1 => kernel.first_mut().is_some_and(|form| form_change(form)),
                _ => shift.as_mut().is_some_and(|form| form_change(form)),
            },
            Finding::Refuted(Refutation::Contradiction { rows, value }) => match rows.first_mut() {
                Some(row) if amount > 0 => {
                    change(&mut row.multiplier, amount);
                    true
                }
                _ => {
                    change(value, amount);
                    true
                }
            },
            Finding::Refuted(Refutation::NotAPrimitive {
                coefficients,
                derivatives,
                ..
            }) => {
                if amount > 0 && !coefficients.is_empty() {
                    form_change(coefficients)
                } else {
                    form_change(derivatives)
                }
            }
            Finding::Unsettled(_) => false,
        };
        if !altered {
            continue;
        }
        let verification =
            verify(&changed, &Unlimited).map_err(|failure| format!("{:?}", failure.diagnostics))?;
        if verification.is_confirmed() {
            return Err(format!(
                "confirmed after {amount} was added to a coefficient of {}:\n{:?}",
                changed.claims[place].name, changed.claims[place].finding
            ));
        }
    }
    Ok(())
}

fn tape_choice(amount: i64, shifted: bool) -> usize {
    match amount {
        1 | -1 => 0,
        2 => 1,
        _ if shifted => 2,
        _ => 1,
    }
}
