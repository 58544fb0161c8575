//! The time from the text of a ready spec to its decided claims.

use divan::{Bencher, black_box};
use linform_tests::solve_named;

fn main() {
    divan::main();
}

#[divan::bench(args = ["airy-traces", "tracy-widom-factors", "weierstrass", "airy-products"])]
fn decide(bencher: Bencher, name: &str) {
    bencher.bench_local(|| {
        let record = solve_named(black_box(name));
        for claim in &record.claims {
            assert_eq!(claim.finding.verdict(), claim.expected, "{}", claim.name);
        }
        record
    });
}
