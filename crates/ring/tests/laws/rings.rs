//! The rings and their random elements.

use linform_ring::{Monomial, Polynomial, Ring, Symbols};
use linform_scalar::{Integer, Rational, SplitMix};

fn ring(generators: &[&str], variable: Option<&str>, constants: &[&str], rules: &[&str]) -> Ring {
    let names = |list: &[&str]| list.iter().map(|s| s.to_string()).collect::<Vec<_>>();
    let symbols = Symbols::new(
        names(generators),
        variable.map(str::to_string),
        names(constants),
    );
    let rules = rules
        .iter()
        .map(|rule| symbols.parse(rule).unwrap())
        .collect();
    Ring::new(symbols, rules).unwrap()
}

/// Every ring with its name.
pub(crate) fn rings() -> Vec<(&'static str, Ring)> {
    vec![
        (
            "Painlevé II",
            ring(&["q", "q'"], Some("t"), &[], &["q'", "t*q + 2*q^3"]),
        ),
        (
            "Painlevé II with its parameter",
            ring(
                &["q", "q'"],
                Some("t"),
                &["alpha"],
                &["q'", "t*q + 2*q^3 - alpha"],
            ),
        ),
        (
            "Weierstrass",
            ring(&["P", "P'"], None, &["g2", "g3"], &["P'", "6*P^2 - g2/2"]),
        ),
        (
            "Eisenstein series",
            ring(
                &["E2", "E4", "E6"],
                None,
                &[],
                &["(E2^2 - E4)/12", "(E2*E4 - E6)/3", "(E2*E6 - E4^2)/2"],
            ),
        ),
        (
            "products of Airy functions",
            ring(
                &["A", "B", "C"],
                Some("t"),
                &[],
                &["2*B", "t*A + C", "2*t*B"],
            ),
        ),
        (
            "polynomials in the variable",
            ring(&[], Some("t"), &[], &[]),
        ),
        ("rational numbers", ring(&[], None, &[], &[])),
        ("forty symbols", forty()),
    ]
}

/// A chain in which every generator's derivative is the next one times a constant.
fn forty() -> Ring {
    let generators: Vec<String> = (0..30).map(|i| format!("y{i}")).collect();
    let constants: Vec<String> = (0..9).map(|i| format!("c{i}")).collect();
    let symbols = Symbols::new(generators, Some("x".into()), constants);
    let rule = |i: usize| format!("c{}*y{} - x*y{}*y0 + 1/{}", i % 9, (i + 1) % 30, i, i + 1);
    let rules = (0..30).map(|i| symbols.parse(&rule(i)).unwrap()).collect();
    Ring::new(symbols, rules).unwrap()
}

/// A random element, with a liking for 0, for single terms and for coefficients around the ends of a word.
pub(crate) fn element(ring: &Ring, source: &mut SplitMix) -> Polynomial {
    let mut below = |bound: u64| source.next_word() % bound;
    let terms = [0, 1, 2, 5, 9, 14][below(6) as usize];
    let symbols = ring.symbols().len();
    Polynomial::from_terms((0..terms).map(|_| {
        let mut exponents = vec![0u16; symbols];
        for _ in 0..below(4).min(symbols as u64) {
            let symbol = below(symbols as u64) as usize;
            exponents[symbol] = [1, 1, 2, 3, 5][below(5) as usize];
        }
        let numerator = match below(4) {
            0 => Integer::from(i64::MIN),
            1 => Integer::from(below(1 << 62)).pow(3),
            _ => Integer::from(below(11)) - Integer::from(5),
        };
        let denominator = Integer::from(1 + below(6));
        let monomial = Monomial::from_exponents(&exponents).unwrap();
        (monomial, Rational::new(numerator, denominator).unwrap())
    }))
}
