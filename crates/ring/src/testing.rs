//! What the tests of this crate share.

use proptest::test_runner::{Config, RngSeed};

/// Property tests with a fixed seed; the environment variable `LINFORM_ROUNDS` multiplies the cases.
pub(crate) fn cases(count: u32) -> Config {
    let factor = std::env::var("LINFORM_ROUNDS").ok();
    let factor: u32 = factor.and_then(|text| text.parse().ok()).unwrap_or(1);
    Config {
        cases: count * factor,
        rng_seed: RngSeed::Fixed(u64::from(factor)),
        failure_persistence: None,
        ..Config::default()
    }
}
