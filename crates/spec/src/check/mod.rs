//! Names, arities and divisors: what can be said of a draft without the ring.

mod call;
mod claims;
mod index;
mod names;
mod rehearse;
mod scope;
mod value;

use crate::collect::Collector;
use crate::expression::{Expr, ExprKind};
use crate::family::{Known, Pattern, Rule};
use crate::model::{Model, RingDeclaration, SolutionKind};
use crate::read::{Declared, Draft, DraftFamily, DraftModel, count_indices};
use crate::source::{Diagnostic, SourceFile, Span};
use crate::terms::Terms;
use names::{Kind, Names};
use scope::{RangeOf, Scope, Where};

/// Notes every mistake in a draft.
pub(crate) fn check(draft: &Draft, errors: &mut Collector) {
    let no_ring = draft.ring.is_none();
    if no_ring && !draft.lost.everything && !draft.lost.symbols {
        errors.push_absence(
            Diagnostic::new("there is no [ring]", Span::default()).help(
                "declare the ring: `[ring]` with `generators = […]`, and `[ring.derivative]`",
            ),
        );
    }
    let mut names = Names::new(draft, errors);
    names.lost.symbols |= no_ring;
    let names = names;
    for (_, expr) in draft.derivatives.values() {
        Scope::new(&names, Where::Derivation).value(expr, errors);
    }
    for law in draft.laws.values() {
        Scope::new(&names, Where::Ring).value(&law.log_derivative, errors);
    }
    for family in draft.families.values() {
        check_family(&names, family, errors);
    }
    for model in draft.models.values() {
        check_model(&names, model, errors);
    }
    check_solution(&names, draft, errors);
    let mut right = Vec::new();
    for (number, claim) in draft.claims.iter().enumerate() {
        let unreadable = draft.unreadable_claims.get(&number);
        // Without any word for its indices nothing sensible can be said of a claim.
        if unreadable.is_some_and(Vec::is_empty) {
            continue;
        }
        let words = unreadable.map_or(&[][..], Vec::as_slice);
        if claims::check(&names, claim, words, errors) && !draft.flawed_claims.contains(&number) {
            right.push(claim);
        }
    }
    // Trying the sweeps out makes sense only where everything is known.
    if !draft.lost.everything {
        rehearse::rehearse(&right, errors);
    }
}

/// The model of a draft without mistakes.
pub(crate) fn finish(draft: Draft, sources: Vec<SourceFile>) -> Model {
    let name = |declared: Declared| declared.name;
    let mut derivatives = draft.derivatives;
    let derivatives = draft
        .generators
        .iter()
        .filter_map(|generator| derivatives.swap_remove(&generator.name))
        .map(|(_, expr)| expr)
        .collect();
    Model {
        title: draft.title,
        sources,
        ring: RingDeclaration {
            variable: draft.variable.map(name),
            constants: draft.constants.into_iter().map(name).collect(),
            generators: draft.generators.into_iter().map(name).collect(),
            derivatives,
        },
        laws: draft.laws,
        families: draft
            .families
            .into_iter()
            .map(|(name, family)| (name, family.family))
            .collect(),
        solution: draft.solution,
        models: draft
            .models
            .into_iter()
            .map(|(name, model)| (name, model.model))
            .collect(),
        claims: draft.claims,
    }
}

fn check_rule(names: &Names, rule: &Rule, errors: &mut Collector) {
    let mut scope = Scope::new(names, Where::Ring);
    for (name, span) in variables(rule) {
        scope.bind(name, span, errors);
    }
    for condition in &rule.conditions {
        scope.condition(condition, errors);
    }
    scope.value(&rule.body, errors);
}

fn check_family(names: &Names, family: &DraftFamily, errors: &mut Collector) {
    for rule in &family.family.rules {
        check_rule(names, rule, errors);
    }
    let Some(terms) = &family.family.primitive_terms else {
        return;
    };
    let mut primitive = family
        .family
        .rules
        .iter()
        .filter(|rule| rule.known == Known::Derivative)
        .peekable();
    if primitive.peek().is_none() && !family.family.rules.is_empty() {
        errors.push(
            Diagnostic::new(
                "`primitive_terms` without a rule for a derivative",
                terms.span,
            )
            .help(format!(
                "a rule such as `{}[j]' = … for j >= 1` needs them; take them away otherwise",
                family.family.name
            )),
        );
    }
    let Some(first) = primitive.next() else {
        return;
    };
    // The list is checked once, for the first rule; the others must bind the variables that occur in it.
    let mut scope = Scope::new(names, Where::Ring);
    for (name, span) in variables(first) {
        scope.indices.push((name.to_owned(), span));
    }
    check_terms(&mut scope, terms, errors);
    let used: Vec<(&str, Span)> = variables(first)
        .filter(|(name, _)| terms.mentions(name))
        .collect();
    for rule in primitive {
        for (name, _) in &used {
            if !variables(rule).any(|(other, _)| other == *name) {
                errors.push(
                    Diagnostic::new(
                        format!("the primitive terms use `{name}`, which this rule does not bind"),
                        rule.span,
                    )
                    .also(terms.span, "the terms")
                    .help("name the indices of all rules for derivatives in the same way"),
                );
            }
        }
    }
    for sweep in terms.items.iter().flat_map(|item| &item.sweeps) {
        if sweep.end.is_none() {
            errors.push(
                Diagnostic::new("this range has no end", sweep.span).help(
                    "where a primitive is sought must be finite: write the end, as in `1..j+1`",
                ),
            );
        }
    }
}

/// The variables on the left of a rule.
fn variables(rule: &Rule) -> impl Iterator<Item = (&str, Span)> {
    rule.pattern
        .iter()
        .zip(&rule.pattern_spans)
        .filter_map(|(pattern, span)| match pattern {
            Pattern::Variable(name) => Some((name.as_str(), *span)),
            Pattern::Fixed(_) => None,
        })
}

/// Checks a list of terms; the scope is left as it was.
fn check_terms(scope: &mut Scope<'_>, terms: &Terms, errors: &mut Collector) {
    let outer = scope.indices.len();
    for item in &terms.items {
        for sweep in &item.sweeps {
            scope.sweep(sweep, RangeOf::Listing, errors);
        }
        for condition in &item.conditions {
            scope.condition(condition, errors);
        }
        scope.value(&item.body, errors);
        scope.indices.truncate(outer);
    }
}

fn check_model(names: &Names, draft: &DraftModel, errors: &mut Collector) {
    let model = &draft.model;
    for (number, name) in draft.names.iter().enumerate() {
        let earlier = draft.names[..number].iter().find(|e| e.name == name.name);
        if let Some(earlier) = earlier {
            errors.push(
                Diagnostic::new(format!("`{}` is declared twice", name.name), name.span)
                    .also(earlier.span, "first here")
                    .help("parameter, variables and function of a model have different names"),
            );
        } else if names.constants().contains(&name.name) {
            errors.push(
                Diagnostic::new(
                    format!("`{}` is already a constant of the ring", name.name),
                    name.span,
                )
                .help("choose another letter in the model"),
            );
        }
    }
    if !names.is_law(&model.law) {
        names.unknown(Kind::Law, &model.law, draft.law_span, errors);
    }
    match names.family(&model.traces) {
        None => names.unknown(Kind::Family, &model.traces, draft.traces_span, errors),
        Some(Some(arity)) if arity != 2 => errors.push(
            Diagnostic::new(
                format!("`{}` has {}", model.traces, count_indices(arity)),
                draft.traces_span,
            )
            .help("the traces of a kernel have two indices"),
        ),
        Some(_) => {}
    }
    Scope::new(names, Where::Equation(model)).value(&model.equation, errors);
    Scope::new(names, Where::Kernel(model)).value(&model.kernel, errors);
}

fn check_solution(names: &Names, draft: &Draft, errors: &mut Collector) {
    let Some(solution) = &draft.solution else {
        return;
    };
    let hidden = draft.lost.everything || draft.lost.variable || names.lost.symbols;
    if draft.variable.is_none() && !hidden {
        errors.push_absence(
            Diagnostic::new(
                "a solution needs a variable, and the ring has none",
                solution.span,
            )
            .help("add `variable = \"t\"` to [ring]"),
        );
        return;
    }
    if let SolutionKind::DecaysLike(expr) = &solution.kind {
        let mut scope = Scope::new(names, Where::Decay);
        scope.value(expr, errors);
        if !mentions_function(expr) {
            errors.push(
                Diagnostic::new("this does not decay", expr.span)
                    .help("the forms known are multiples of `Ai(t)`"),
            );
        }
    }
}

fn mentions_function(expr: &Expr) -> bool {
    matches!(expr.kind, ExprKind::Apply { .. }) || expr.parts().into_iter().any(mentions_function)
}
