//! How a law is tried on generated cases.

use super::cases;
use proptest::prelude::Strategy;
use proptest::test_runner::{Config, RngAlgorithm, TestCaseError, TestError, TestRng, TestRunner};

/// Runs a property on `count` cases (a hundred times as many in a long run) from a fixed seed.
pub fn check<S: Strategy>(seed: u8, count: u32, strategy: &S, property: impl Fn(S::Value) -> Result<(), TestCaseError>) {
    println!("seed {seed}");
    let count = cases(count as usize, 100 * count as usize) as u32;
    let config = Config { cases: count, failure_persistence: None, max_shrink_iters: 2_000, ..Config::default() };
    let mut runner = TestRunner::new_with_rng(config, TestRng::from_seed(RngAlgorithm::ChaCha, &[seed; 32]));
    match runner.run(strategy, property) {
        Ok(()) => {}
        Err(TestError::Fail(reason, value)) => panic!("seed {seed}: {reason}\nsmallest case: {value:?}"),
        Err(error) => panic!("seed {seed}: {error}"),
    }
}
