//! Laws that hold in every differential ring, run on every ring of a list.

mod laws;
mod rings;

use laws::LAWS;
use linform_scalar::SplitMix;
use rings::{element, rings};

/// The rounds on each ring; the environment variable `LINFORM_ROUNDS` multiplies them.
fn rounds() -> u64 {
    let factor = std::env::var("LINFORM_ROUNDS").ok();
    8 * factor.and_then(|text| text.parse().ok()).unwrap_or(1)
}

fn every_law_holds_on(name: &str) {
    let (_, ring) = rings().into_iter().find(|(n, _)| *n == name).unwrap();
    for seed in 0..rounds() {
        let mut source = SplitMix::new(seed);
        let mut random = || element(&ring, &mut source);
        let operands = [random(), random(), random()];
        for (law, holds) in LAWS {
            if !holds(&ring, &operands) {
                let [a, b, c] = operands.map(|p| ring.symbols().format(&p));
                panic!(
                    "in the ring `{name}`, round {seed}: {law} fails for\n a = {a}\n b = {b}\n c = {c}"
                );
            }
        }
    }
}

macro_rules! on_rings {
    ($($test:ident: $name:expr;)*) => {
        $( #[test] fn $test() { every_law_holds_on($name); } )*

        #[test]
        fn the_list_of_rings_is_the_list_of_tests() {
            let names: Vec<_> = rings().into_iter().map(|(name, _)| name).collect();
            assert_eq!(names, [$($name),*]);
        }
    };
}

on_rings! {
    laws_hold_for_painleve_two: "Painlevé II";
    laws_hold_for_painleve_two_with_parameter: "Painlevé II with its parameter";
    laws_hold_for_weierstrass_functions: "Weierstrass";
    laws_hold_for_eisenstein_series: "Eisenstein series";
    laws_hold_for_products_of_airy_functions: "products of Airy functions";
    laws_hold_for_polynomials_in_the_variable: "polynomials in the variable";
    laws_hold_for_the_rational_numbers: "rational numbers";
    laws_hold_for_forty_symbols: "forty symbols";
}
