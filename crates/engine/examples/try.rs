#![allow(missing_docs, clippy::print_stdout)]
use linform_engine::*;
fn main() {
    for path in std::env::args().skip(1) {
        let text = std::fs::read_to_string(&path).unwrap();
        let start = std::time::Instant::now();
        let model = match linform_spec::parse(&path, text, &mut |p| {
            std::fs::read_to_string(p).map_err(|e| e.to_string())
        }) {
            Ok(m) => m,
            Err(f) => {
                println!("{f}");
                continue;
            }
        };
        let prepared = match prepare(model, None, PrepareLimits::default()) {
            Ok(m) => m,
            Err(f) => {
                println!("{f}");
                continue;
            }
        };
        println!(
            "{path} nodes {} instances {} {:?}",
            prepared.program.len(),
            prepared.instances.len(),
            start.elapsed()
        );
        let record = solve(
            &prepared,
            &vec![true; prepared.instances.len()],
            Options::default(),
            &linform_scalar::Unlimited,
            &Silent,
        );
        println!("solved {:?}", start.elapsed());
        for claim in &record.claims {
            let v = claim.finding.verdict();
            if v != claim.expected || std::env::var("ALL").is_ok() {
                println!(
                    "{} {:?} {:?} expected {:?} {:?}",
                    title(&claim.name, &claim.index),
                    v,
                    claim.system,
                    claim.expected,
                    claim.finding
                );
            }
        }
        let start = std::time::Instant::now();
        match verify(&record, &linform_scalar::Unlimited) {
            Ok(v) => {
                println!(
                    "verified {} {:?} {:?}",
                    v.is_confirmed(),
                    start.elapsed(),
                    v.problems
                );
                for c in &v.claims {
                    if matches!(c.outcome, CheckOutcome::Rejected(_)) {
                        println!("{c:?}")
                    }
                }
            }
            Err(f) => println!("{f}"),
        }
    }
}
