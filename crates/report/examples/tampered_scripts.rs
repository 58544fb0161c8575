//! Writes scripts of a result that is right, and of results that are wrong in one place each.
//!
//! Usage: `tampered_scripts FOLDER`. Of every script `right.*` all checks pass; of any other one at least one fails.

use linform_engine::published::Coefficient;
use linform_engine::record::{Finding, FormTerm, Refutation, ResultRecord, Verdict};
use linform_engine::{Options, PrepareLimits, Silent, prepare, solve};
use linform_scalar::Unlimited;
use std::error::Error;
use std::path::Path;
use std::sync::Arc;

const SPEC: &str = r#"
[ring]
variable = "t"
constants = ["b"]
generators = ["q", "q'"]
[ring.derivative]
"q" = "q'"
"q'" = "t*q + 2*q^3"

[law.F]
log_derivative = "q'^2 - t*q^2 - q^4"

[family.u]
rules = ["u[0] = ratio(F,1)", "u[1]' = q^2"]
primitive_terms = ["ratio(F,1)", "q"]

[[claim]]
name = "holds"
target = "t*q + q'"
terms = ["q", "q'", "1"]

[[claim]]
name = "element"
target = "u[1] + b*q"
terms = ["ratio(F,1)", "q"]

[[claim]]
name = "constant"
target = "2*b*q"
terms = ["q", "q'"]
coefficients = "constant"

[[claim]]
name = "rational"
target = "q/2"
terms = ["b*t*q"]
coefficients = "rational"

[[claim]]
name = "other"
target = "q"
terms = ["b*q", "q'"]
expect = "refuted"

[[claim]]
name = "other by derivative"
derivative = "q^2"
terms = ["b*ratio(F,1)", "q"]
expect = "refuted"

[[claim]]
name = "other constant"
target = "q"
terms = ["b*q", "t*q"]
coefficients = "constant"
expect = "refuted"

[[claim]]
name = "contradiction"
target = "q^3"
terms = ["q", "t*q'"]
expect = "refuted"

[[claim]]
name = "no primitive"
derivative = "q^2"
terms = ["q^2"]
expect = "refuted"

[[claim]]
name = "family"
target = "q"
terms = ["q", "t*q", "b*q", "q'"]
expect = "undetermined"

[[claim]]
name = "family by derivative"
derivative = "q'"
terms = ["q", "t*q", "1", "t"]
expect = "undetermined"

[[claim]]
name = "constant of integration"
derivative = "q'"
terms = ["q", "b"]
expect = "undetermined"

[[claim]]
name = "first integral"
derivative = "q'"
terms = ["q", "b"]
coefficients = "constant"
expect = "undetermined"
"#;

type Change = fn(&mut ResultRecord, &Coefficients) -> Option<()>;

/// Coefficients by their texts.
struct Coefficients {
    names: Arc<[String]>,
}

impl Coefficients {
    fn of(&self, text: &str) -> Option<Coefficient> {
        Coefficient::parse(text, &self.names).ok()
    }

    fn part(&self, term: &str, text: &str) -> Option<FormTerm> {
        let (term, coefficient) = (term.to_owned(), self.of(text)?);
        Some(FormTerm { term, coefficient })
    }
}

fn finding<'r>(record: &'r mut ResultRecord, name: &str) -> Option<&'r mut Finding> {
    let mut claims = record.claims.iter_mut();
    let claim = claims.find(|claim| claim.name == name)?;
    Some(&mut claim.finding)
}

fn form<'r>(record: &'r mut ResultRecord, name: &str) -> Option<&'r mut Vec<FormTerm>> {
    match finding(record, name)? {
        Finding::Holds { form }
        | Finding::Undetermined {
            particular: form, ..
        }
        | Finding::Refuted(Refutation::OtherCoefficients { form, .. }) => Some(form),
        _ => None,
    }
}

type Family<'r> = (&'r mut Vec<Vec<FormTerm>>, &'r mut Option<Vec<FormTerm>>);

fn family<'r>(record: &'r mut ResultRecord, name: &str) -> Option<Family<'r>> {
    match finding(record, name)? {
        Finding::Undetermined { kernel, shift, .. } => Some((kernel, shift)),
        _ => None,
    }
}

const CHANGES: &[(&str, Change)] = &[
    ("wrong_digit", |r, c| {
        form(r, "holds")?[0].coefficient = c.of("2*t")?;
        Some(())
    }),
    ("denominator_where_none_is_admitted", |r, c| {
        form(r, "holds")?[0].coefficient = c.of("(t^2)/(t)")?;
        Some(())
    }),
    ("variable_in_a_constant", |r, c| {
        // Every form in q and q' of another target would do; this one keeps the sum.
        let claim = r.claims.iter_mut().find(|claim| claim.name == "constant")?;
        claim.finding = Finding::Holds {
            form: vec![c.part("q", "(2*b*t)/(t)")?],
        };
        Some(())
    }),
    ("member_of_a_family_as_the_form", |r, c| {
        *finding(r, "family")? = Finding::Holds {
            form: vec![c.part("q", "1")?],
        };
        Some(())
    }),
    ("member_up_to_a_constant_as_the_form", |r, c| {
        *finding(r, "constant of integration")? = Finding::Holds {
            form: vec![c.part("q", "1")?],
        };
        Some(())
    }),
    ("zero_in_the_kernel", |r, _| {
        family(r, "family")?.0[0].clear();
        Some(())
    }),
    ("zero_coefficients_in_the_kernel", |r, c| {
        let form = &mut family(r, "family")?.0[0];
        for part in form {
            part.coefficient = c.of("0")?;
        }
        Some(())
    }),
    ("one_vector_of_the_kernel_twice", |r, _| {
        let kernel = family(r, "family")?.0;
        kernel[1] = kernel[0].clone();
        Some(())
    }),
    ("kernel_too_small", |r, _| {
        family(r, "family")?.0.pop()?;
        Some(())
    }),
    ("kernel_too_small_by_derivative", |r, _| {
        family(r, "family by derivative")?.0.pop()?;
        Some(())
    }),
    ("kernel_without_a_first_integral", |r, _| {
        family(r, "first integral")?.0.clear();
        Some(())
    }),
    ("kernel_with_the_variable", |r, c| {
        let kernel = family(r, "first integral")?.0;
        kernel[0][0].coefficient = c.of("t/(t)")?;
        Some(())
    }),
    ("shift_is_not_one", |r, c| {
        let shift = family(r, "constant of integration")?.1.as_mut()?;
        shift[0].coefficient = c.of("2/(b)")?;
        Some(())
    }),
    ("shift_is_missing", |r, _| {
        family(r, "family by derivative")?.1.take()?;
        Some(())
    }),
    ("polynomial_as_a_quotient", |r, c| {
        let claims = &mut r.claims;
        let witness = claims.iter().find_map(|claim| match &claim.finding {
            Finding::Refuted(Refutation::OtherCoefficients { independence, .. })
                if claim.name == "other" =>
            {
                Some(independence.clone())
            }
            _ => None,
        })?;
        let claim = claims.iter_mut().find(|claim| claim.name == "holds")?;
        claim.finding = Finding::Refuted(Refutation::OtherCoefficients {
            form: vec![c.part("q", "(2*t^2)/(2*t)")?, c.part("q'", "1")?],
            independence: linform_engine::record::IndependenceRecord {
                rows: vec!["q".to_owned(), "q'".to_owned(), "1".to_owned()],
                ..witness
            },
        });
        Some(())
    }),
    ("dependent_rows_of_a_witness", |r, _| {
        match finding(r, "other by derivative")? {
            Finding::Refuted(Refutation::OtherCoefficients { independence, .. }) => {
                independence.rows[1] = independence.rows[0].clone();
                Some(())
            }
            _ => None,
        }
    }),
    ("composite_modulus_of_a_witness", |r, _| {
        match finding(r, "other")? {
            Finding::Refuted(Refutation::OtherCoefficients { independence, .. }) => {
                independence.prime -= 1;
                Some(())
            }
            _ => None,
        }
    }),
    ("coefficients_of_a_primitive", |r, c| {
        match finding(r, "no primitive")? {
            Finding::Refuted(Refutation::NotAPrimitive { derivatives, .. }) => {
                derivatives[0].coefficient = c.of("2")?;
                Some(())
            }
            _ => None,
        }
    }),
    ("multiplier_of_a_certificate", |r, c| {
        match finding(r, "contradiction")? {
            Finding::Refuted(Refutation::Contradiction { rows, .. }) => {
                rows[0].multiplier = c.of("t + 7")?;
                Some(())
            }
            _ => None,
        }
    }),
    ("value_of_a_certificate_is_zero", |r, c| {
        match finding(r, "contradiction")? {
            Finding::Refuted(Refutation::Contradiction { rows, value }) => {
                rows.clear();
                *value = c.of("0")?;
                Some(())
            }
            _ => None,
        }
    }),
    ("form_of_an_element", |r, c| {
        r.primitives.first_mut()?.form[0].coefficient = c.of("-2")?;
        Some(())
    }),
];

fn main() -> Result<(), Box<dyn Error>> {
    let folder = std::env::args().nth(1).ok_or("name a folder")?;
    let mut no_files = |path: &str| Err(format!("{path} is not there"));
    let model = linform_spec::parse("tampered.toml", SPEC.to_owned(), &mut no_files)
        .map_err(|failure| format!("{failure:?}"))?;
    let prepared =
        prepare(model, None, PrepareLimits::default()).map_err(|failure| format!("{failure:?}"))?;
    let wanted = vec![true; prepared.instances.len()];
    let right = solve(&prepared, &wanted, Options::default(), &Unlimited, &Silent);
    for claim in &right.claims {
        let verdict = claim.finding.verdict();
        if verdict != claim.expected || verdict == Verdict::Unsettled {
            return Err(format!("{}: {:?}", claim.name, claim.finding).into());
        }
    }
    let write = |name: &str, record: &ResultRecord| -> Result<(), Box<dyn Error>> {
        let path = |end: &str| Path::new(&folder).join(format!("{name}.{end}"));
        std::fs::write(path("py"), linform_report::sympy(record, &prepared)?)?;
        std::fs::write(path("gp"), linform_report::gp(record, &prepared)?)?;
        std::fs::write(path("json"), linform_report::json(record))?;
        Ok(())
    };
    write("right", &right)?;
    let coefficients = Coefficients {
        names: ["t".to_owned(), "b".to_owned()].into(),
    };
    for (name, change) in CHANGES {
        let mut record = right.clone();
        change(&mut record, &coefficients)
            .ok_or_else(|| format!("{name}: there is nothing to change"))?;
        write(name, &record)?;
    }
    Ok(())
}
