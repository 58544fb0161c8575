//! Texts and trees of expressions give each other back; nothing makes the reader panic.

use linform_spec::{Expr, ExprKind, Function, Span, Sweep, parse, parse_expression, text_of};
use proptest::prelude::*;

/// The form of a tree without its places.
fn form(expr: &Expr, groups: bool) -> String {
    let parts = || {
        let parts: Vec<_> = expr.parts().into_iter().map(|p| form(p, groups)).collect();
        parts.join(" ")
    };
    match &expr.kind {
        ExprKind::Number(n) => n.to_string(),
        ExprKind::Name { base, primes } => format!("{base}'{primes}"),
        ExprKind::Text(text) => format!("{text:?}"),
        ExprKind::Group(a) if groups => format!("(group {})", form(a, groups)),
        ExprKind::Group(a) => form(a, groups),
        ExprKind::Neg(_) => format!("(neg {})", parts()),
        ExprKind::Add(a, b) if groups => format!("(+ {} {})", form(a, groups), form(b, groups)),
        ExprKind::Sub(a, b) if groups => format!("(- {} {})", form(a, groups), form(b, groups)),
        ExprKind::Add(..) | ExprKind::Sub(..) => {
            let mut list = Vec::new();
            summands(expr, &mut list);
            format!("(sum{})", list.concat())
        }
        ExprKind::Mul(..) => format!("(* {})", parts()),
        ExprKind::Div(..) => format!("(/ {})", parts()),
        ExprKind::Pow(..) => format!("(^ {})", parts()),
        ExprKind::Element { family, primes, .. } => format!("({family}[]'{primes} {})", parts()),
        ExprKind::Call {
            function, primes, ..
        } => format!("({function:?}'{primes} {})", parts()),
        ExprKind::Apply {
            function, primes, ..
        } => format!("({function}()'{primes} {})", parts()),
        ExprKind::List(_) => format!("[{}]", parts()),
        ExprKind::For { sweep, .. } => format!("(for {} {})", sweep.variable, parts()),
    }
}

/// A sum without regard to its grouping; parentheses still group.
fn summands(expr: &Expr, list: &mut Vec<String>) {
    match &expr.kind {
        ExprKind::Add(a, b) => {
            summands(a, list);
            list.push(" +".to_owned());
            summands(b, list);
        }
        ExprKind::Sub(a, b) => {
            summands(a, list);
            list.push(format!(" - {}", form(b, false)));
        }
        _ => list.push(form(expr, false)),
    }
}

fn expr(kind: ExprKind) -> Expr {
    Expr::new(kind, Span::default())
}

fn name(base: &str, primes: u32) -> Expr {
    expr(ExprKind::Name {
        base: base.to_owned(),
        primes,
    })
}

/// Trees with and without the parentheses that their text needs.
fn trees() -> impl Strategy<Value = Expr> {
    let leaf = prop_oneof![
        (0i64..12).prop_map(|n| Expr::integer(n, Span::default())),
        (
            prop_oneof![Just("q"), Just("t_1"), Just("℘"), Just("ζ2")],
            0u32..3
        )
            .prop_map(|(base, primes)| name(base, primes)),
    ];
    leaf.prop_recursive(5, 40, 3, |inner| {
        let pair = || (inner.clone(), inner.clone()).prop_map(|(a, b)| (Box::new(a), Box::new(b)));
        prop_oneof![
            pair().prop_map(|(a, b)| expr(ExprKind::Add(a, b))),
            pair().prop_map(|(a, b)| expr(ExprKind::Sub(a, b))),
            pair().prop_map(|(a, b)| expr(ExprKind::Mul(a, b))),
            pair().prop_map(|(a, b)| expr(ExprKind::Div(a, b))),
            pair().prop_map(|(a, b)| expr(ExprKind::Pow(a, b))),
            inner.clone().prop_map(|a| expr(ExprKind::Neg(Box::new(a)))),
            inner
                .clone()
                .prop_map(|a| expr(ExprKind::Group(Box::new(a)))),
            (prop::collection::vec(inner.clone(), 1..3), 0u32..3).prop_map(|(indices, primes)| {
                expr(ExprKind::Element {
                    family: "u".to_owned(),
                    indices,
                    primes,
                })
            }),
            (inner.clone(), 0u32..3).prop_map(|(a, primes)| {
                expr(ExprKind::Call {
                    function: Function::D,
                    arguments: vec![a],
                    primes,
                })
            }),
            inner.clone().prop_map(|a| {
                expr(ExprKind::Call {
                    function: Function::Ratio,
                    arguments: vec![name("F", 0), a],
                    primes: 0,
                })
            }),
            (inner.clone(), inner.clone()).prop_map(|(a, b)| {
                expr(ExprKind::Call {
                    function: Function::Minor,
                    arguments: vec![
                        name("u", 0),
                        expr(ExprKind::List(vec![a])),
                        expr(ExprKind::List(vec![b])),
                    ],
                    primes: 0,
                })
            }),
            (inner.clone(), inner.clone(), inner.clone()).prop_map(|(body, start, end)| {
                let sweep = Sweep {
                    variable: "i".to_owned(),
                    start,
                    end: Some(end),
                    span: Span::default(),
                    variable_span: Span::default(),
                };
                expr(ExprKind::Call {
                    function: Function::Sum,
                    arguments: vec![expr(ExprKind::For {
                        body: Box::new(body),
                        sweep: Box::new(sweep),
                    })],
                    primes: 0,
                })
            }),
            (inner, 0u32..3).prop_map(|(a, primes)| {
                expr(ExprKind::Apply {
                    function: "A".to_owned(),
                    primes,
                    argument: Box::new(a),
                })
            }),
        ]
    })
}

/// Texts made of the pieces of the language, mostly wrong.
fn scraps() -> impl Strategy<Value = String> {
    let piece = prop::sample::select(vec![
        "q", "q'", "F", "u", "t", "ratio", "minor", "sum", "D", "column", "for", "[", "]", "(",
        ")", ",", "..", "+", "-", "*", "/", "^", "=", "<=", "<", ">", "!=", "0", "1", "12", "'",
        "′", "\"", " ", "\\", "\n", "ζ", "℘", "$",
    ]);
    prop::collection::vec(piece, 0..24).prop_map(|pieces| pieces.concat())
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 128, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn the_text_of_a_tree_is_read_back_as_the_tree(tree in trees()) {
        let text = text_of(&tree);
        let again = parse_expression(&text).map_err(|e| TestCaseError::fail(format!("{text}: {e}")))?;
        prop_assert_eq!(form(&again, false), form(&tree, false), "{}", text);
        prop_assert_eq!(text_of(&again), text);
    }

    #[test]
    fn what_was_read_keeps_its_parentheses(tree in trees()) {
        let read = parse_expression(&text_of(&tree)).unwrap();
        let again = parse_expression(&text_of(&read)).unwrap();
        prop_assert_eq!(form(&again, true), form(&read, true));
    }

    #[test]
    fn no_expression_makes_the_reader_panic(text in prop_oneof![scraps(), any::<String>()]) {
        match parse_expression(&text) {
            Ok(expr) => {
                let again = parse_expression(&text_of(&expr)).unwrap();
                prop_assert_eq!(form(&again, true), form(&expr, true));
            }
            Err(error) => {
                for label in &error.labels {
                    prop_assert!(text.is_char_boundary(label.span.start));
                    prop_assert!(text.is_char_boundary(label.span.end));
                    prop_assert!(label.span.start <= label.span.end);
                }
            }
        }
    }

    #[test]
    fn no_change_of_a_spec_makes_the_reader_panic(
        at in 0usize..3000,
        cut in 0usize..40,
        insert in prop_oneof![scraps(), any::<String>()],
    ) {
        let spec = include_str!("good/airy.toml");
        let from = spec.floor_char_boundary(at.min(spec.len()));
        let to = spec.floor_char_boundary((from + cut).min(spec.len())).max(from);
        let text = format!("{}{insert}{}", &spec[..from], &spec[to..]);
        if let Err(failure) = parse("airy.toml", text, &mut |_| Err("no file".to_owned())) {
            prop_assert!(!failure.diagnostics.is_empty());
            for label in failure.diagnostics.iter().flat_map(|d| &d.labels) {
                let text = &failure.sources[label.span.file].text;
                prop_assert!(text.get(label.span.start..label.span.end).is_some());
            }
        }
    }
}
