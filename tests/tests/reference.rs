//! Ring and solver against general-purpose libraries: the cases and answers of `reference/reference.json`, which
//! `reference/make.py` wrote with FLINT and SymPy.

use linform_ring::{Polynomial, Ring, Symbols};
use linform_scalar::{PrimeField, Unlimited};
use linform_solver::{Fraction, Outcome, Row, Solved, System};
use serde::Deserialize;
use std::collections::BTreeMap;

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Reference {
    #[serde(rename = "libraries")]
    _libraries: String,
    products: Vec<Product>,
    large_products: Vec<LargeProduct>,
    derivations: Vec<Derivation>,
    quotients: Vec<Quotient>,
    gcds: Vec<Gcd>,
    rational_systems: Vec<LinearSystem>,
    polynomial_systems: Vec<LinearSystem>,
    determinants: Vec<Determinant>,
}

#[derive(Deserialize)]
struct Product {
    symbols: Vec<String>,
    a: String,
    b: String,
    product: String,
}

#[derive(Deserialize)]
struct LargeProduct {
    symbols: Vec<String>,
    a: String,
    b: String,
    terms: usize,
    point: Vec<u64>,
    value: String,
}

#[derive(Deserialize)]
struct Derivation {
    generators: Vec<String>,
    variable: Option<String>,
    constants: Vec<String>,
    rules: Vec<String>,
    element: String,
    derivative: String,
    second: Option<String>,
}

#[derive(Deserialize)]
struct Quotient {
    symbols: Vec<String>,
    dividend: String,
    divisor: String,
    quotient: Option<String>,
}

#[derive(Deserialize)]
struct Gcd {
    symbols: Vec<String>,
    a: String,
    b: String,
    gcd: String,
}

#[derive(Deserialize)]
struct LinearSystem {
    #[serde(default)]
    symbols: Vec<String>,
    rows: Vec<Vec<String>>,
    right: Vec<String>,
    outcome: String,
    #[serde(default)]
    solution: Vec<[String; 2]>,
    #[serde(default)]
    kernel: usize,
}

#[derive(Deserialize)]
struct Determinant {
    symbols: Vec<String>,
    rows: Vec<Vec<String>>,
    minors: Vec<String>,
}

fn reference() -> Reference {
    serde_json::from_str(include_str!("../reference/reference.json")).unwrap()
}

fn generators(names: &[String]) -> Symbols {
    Symbols::new(names.to_vec(), None, Vec::new())
}

/// Reads a text that is canonical, and asserts that it is.
fn read(symbols: &Symbols, text: &str) -> Polynomial {
    let p = symbols.parse(text).unwrap();
    assert_eq!(symbols.format(&p), text);
    p
}

#[test]
fn products_agree_with_the_reference() {
    for case in reference().products {
        let symbols = generators(&case.symbols);
        let (a, b) = (read(&symbols, &case.a), read(&symbols, &case.b));
        let product = a.mul(&b, &Unlimited).unwrap();
        assert_eq!(symbols.format(&product), case.product);
        assert_eq!(b.mul(&a, &Unlimited).unwrap(), product);
    }
}

#[test]
fn large_products_agree_with_the_reference_at_a_point() {
    let field = PrimeField::new((1 << 61) - 1).unwrap();
    for case in reference().large_products {
        let symbols = generators(&case.symbols);
        let (a, b) = (read(&symbols, &case.a), read(&symbols, &case.b));
        let product = a.mul(&b, &Unlimited).unwrap();
        let point: Vec<u64> = case.point.iter().map(|&x| field.element(x)).collect();
        let value = product.evaluate_mod(&field, &point).unwrap();
        assert_eq!(product.len(), case.terms);
        assert_eq!(field.value(value).to_string(), case.value);
    }
}

#[test]
fn derivatives_agree_with_the_reference() {
    for case in reference().derivations {
        let symbols = Symbols::new(case.generators, case.variable, case.constants);
        let rules = case.rules.iter().map(|rule| read(&symbols, rule));
        let ring = Ring::new(symbols.clone(), rules.collect()).unwrap();
        let first = ring
            .derive(&read(&symbols, &case.element), &Unlimited)
            .unwrap();
        assert_eq!(symbols.format(&first), case.derivative);
        if let Some(second) = case.second {
            let twice = ring.derive(&first, &Unlimited).unwrap();
            assert_eq!(symbols.format(&twice), second);
        }
    }
}

#[test]
fn exact_quotients_agree_with_the_reference() {
    for case in reference().quotients {
        let symbols = generators(&case.symbols);
        let dividend = read(&symbols, &case.dividend);
        let quotient = dividend
            .div_exact(&read(&symbols, &case.divisor), &Unlimited)
            .unwrap();
        assert_eq!(quotient.map(|q| symbols.format(&q)), case.quotient);
    }
}

#[test]
fn greatest_common_divisors_agree_with_the_reference() {
    for case in reference().gcds {
        let symbols = generators(&case.symbols);
        let (a, b) = (read(&symbols, &case.a), read(&symbols, &case.b));
        assert_eq!(
            symbols.format(&a.gcd(&b, &Unlimited).unwrap()),
            case.gcd,
            "gcd of {} and {}",
            case.a,
            case.b
        );
    }
}

/// The system and the symbols of its entries.
fn system(rows: &[Vec<String>], right: &[String], symbols: &Symbols) -> System {
    let mut system = System::new(rows[0].len());
    for (row, right) in rows.iter().zip(right) {
        let entries = row.iter().map(|entry| read(symbols, entry)).enumerate();
        system.push(Row {
            entries: entries.collect(),
            right: read(symbols, right),
        });
    }
    system
}

fn check_solved(case: &LinearSystem, symbols: &Symbols, system: &System, solved: &Solved) {
    linform_solver::verify(system, &solved.outcome, &Unlimited)
        .unwrap()
        .unwrap();
    match &solved.outcome {
        Outcome::Unique(solution) => {
            assert_eq!(case.outcome, "unique");
            let found: Vec<[String; 2]> = solution
                .iter()
                .map(|x| {
                    [
                        symbols.format(x.numerator()),
                        symbols.format(x.denominator()),
                    ]
                })
                .collect();
            assert_eq!(found, case.solution);
        }
        Outcome::Family { kernel, .. } => {
            assert_eq!(case.outcome, "family");
            assert_eq!(kernel.len(), case.kernel);
        }
        Outcome::Inconsistent(_) => assert_eq!(case.outcome, "inconsistent"),
    }
}

fn check_systems(cases: &[LinearSystem]) {
    let mut outcomes = BTreeMap::new();
    for case in cases {
        let symbols = Symbols::new(Vec::new(), None, case.symbols.clone());
        let system = system(&case.rows, &case.right, &symbols);
        for solve in [
            linform_solver::solve,
            linform_solver::solve_fraction_free,
            linform_solver::solve_modular,
        ] {
            check_solved(
                case,
                &symbols,
                &system,
                &solve(&system, &Unlimited).unwrap(),
            );
        }
        *outcomes.entry(case.outcome.clone()).or_insert(0) += 1;
    }
    assert_eq!(outcomes.len(), 3, "all three outcomes occur: {outcomes:?}");
}

#[test]
fn solutions_over_the_rationals_agree_with_the_reference() {
    check_systems(&reference().rational_systems);
}

#[test]
fn solutions_over_rational_functions_agree_with_the_reference() {
    check_systems(&reference().polynomial_systems);
}

/// Cramer's rule for the last unknown of `A x = e_n`: `x_n = det A_{n−1} / det A_n`.
#[test]
fn leading_minors_agree_with_the_reference() {
    for case in reference().determinants {
        let symbols = Symbols::new(Vec::new(), None, case.symbols.clone());
        let mut before = Polynomial::one();
        for (size, minor) in (1..).zip(&case.minors) {
            let block: Vec<Vec<String>> = case.rows[..size]
                .iter()
                .map(|row| row[..size].to_vec())
                .collect();
            let mut right = vec!["0".to_string(); size];
            right[size - 1] = "1".to_string();
            let minor = read(&symbols, minor);
            let solved =
                linform_solver::solve(&system(&block, &right, &symbols), &Unlimited).unwrap();
            let Outcome::Unique(x) = solved.outcome else {
                panic!("the minor {} is not 0", symbols.format(&minor));
            };
            let expected = Fraction::new(before, minor.clone(), &Unlimited).unwrap();
            assert_eq!(Some(&x[size - 1]), expected.as_ref());
            before = minor;
        }
    }
}
