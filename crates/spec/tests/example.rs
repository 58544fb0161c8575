//! The example of the specification of the language, taken in whole.

use linform_spec::{
    Environment, Function, Known, Model, SolutionKind, Target, Verdict, parse, substitute, text_of,
};

fn model(text: &str) -> Model {
    parse("airy.toml", text.to_owned(), &mut |path| {
        Err(format!("no file {path}"))
    })
    .unwrap_or_else(|failure| panic!("{failure}"))
}

fn airy() -> Model {
    model(include_str!("good/airy.toml"))
}

fn env(pairs: &[(&str, i64)]) -> Environment {
    pairs.iter().map(|(n, v)| ((*n).to_owned(), *v)).collect()
}

#[test]
fn every_part_of_the_example_is_read() {
    let model = airy();
    assert_eq!(model.title.as_deref(), Some("Traces of the Airy kernel"));
    assert_eq!(model.ring.variable.as_deref(), Some("t"));
    assert_eq!(model.ring.generators, ["q", "q'"]);
    assert_eq!(text_of(&model.ring.derivatives[1]), "t*q + 2*q^3");
    assert_eq!(
        text_of(&model.laws["F"].log_derivative),
        "q'^2 - t*q^2 - q^4"
    );
    assert_eq!(model.families.keys().collect::<Vec<_>>(), ["a", "u"]);
    assert!(model.families["u"].symmetric && !model.families["a"].symmetric);
    assert_eq!(model.families["u"].rules[1].known, Known::Derivative);
    assert!(matches!(
        &model.solution.as_ref().unwrap().kind,
        SolutionKind::DecaysLike(e) if text_of(e) == "Ai(t)"
    ));
    let edge = &model.models["edge"];
    assert_eq!(
        text_of(&edge.equation),
        "(1 - h*x)^2*A'' - h*(1 - h*x)*A' + (-x + h*x^2/2)*A"
    );
    assert_eq!(
        text_of(&edge.kernel),
        "sqrt((1 - h*x)*(1 - h*y))/(1 - h*(x + y)/2)*(A(x)*(1 - h*y)*A'(y) - (1 - h*x)*A'(x)*A(y))/(x - y)"
    );
    let names: Vec<_> = model.claims.iter().map(|c| c.name.as_str()).collect();
    assert_eq!(names, ["trace", "single product", "correction"]);
    assert_eq!(model.claims[1].expect, Verdict::Refuted);
}

#[test]
fn a_triangular_sweep_has_its_instances_in_lexicographic_order() {
    let model = airy();
    let instances = model.claims[0].instances(None, 1_000_000).unwrap();
    // 0 ≤ k ≤ j and j + k ≤ 8: 9 + 7 + 5 + 3 + 1.
    assert_eq!(instances.len(), 25);
    assert_eq!(instances[3], env(&[("j", 2), ("k", 0)]));
    assert!(instances.windows(2).all(|p| {
        let key = |e: &Environment| (e["j"], e["k"]);
        key(&p[0]) < key(&p[1])
    }));
    // A bound is for open sweeps alone.
    assert_eq!(
        model.claims[0].instances(Some(1), 1_000_000).unwrap(),
        instances
    );
}

#[test]
fn terms_are_listed_with_the_indices_put_in() {
    let model = airy();
    let env = env(&[("j", 2), ("k", 1)]);
    let terms = model.claims[0].terms.expand(&env, None).unwrap();
    let texts: Vec<_> = terms.iter().map(text_of).collect();
    assert_eq!(
        texts,
        ["ratio(F,1)", "ratio(F,2)", "ratio(F,3)", "ratio(F,4)"]
    );
    let Target::Value(target) = &model.claims[0].target else {
        panic!("a value is claimed")
    };
    assert_eq!(text_of(&substitute(target, &env).unwrap()), "u[2,1]");
}

#[test]
fn rules_are_found_by_pattern_condition_and_symmetry() {
    let model = airy();
    let u = &model.families["u"];
    let text = |indices: &[i64]| {
        let resolved = u.resolve(indices).unwrap();
        let body = substitute(&resolved.rule.body, &resolved.environment).unwrap();
        (resolved.indices, text_of(&body))
    };
    assert_eq!(text(&[0, 0]), (vec![0, 0], "ratio(F,1)".to_owned()));
    assert_eq!(text(&[0, 3]), (vec![3, 0], "-a[0]*a[3]".to_owned()));
    let expected = "u[4,0]*u[1,0] - a[4]*a[1] - u[5,1]".to_owned();
    assert_eq!(text(&[2, 4]), (vec![4, 2], expected.clone()));
    assert_eq!(text(&[4, 2]), (vec![4, 2], expected));
    assert!(u.resolve(&[-1, 0]).is_none());
    assert!(u.resolve(&[1]).is_none());
    let a = model.families["a"].resolve(&[5]).unwrap();
    assert_eq!(
        text_of(&substitute(&a.rule.body, &a.environment).unwrap()),
        "t*a[3] + 3*a[2] + a[1]*u[3,0] - a[0]*u[3,1]"
    );
}

#[test]
fn the_kernel_of_the_example_contains_a_square_root() {
    fn mentions(e: &linform_spec::Expr) -> bool {
        matches!(
            &e.kind,
            linform_spec::ExprKind::Call {
                function: Function::Sqrt,
                ..
            }
        ) || e.parts().into_iter().any(mentions)
    }
    assert!(mentions(&airy().models["edge"].kernel));
}
