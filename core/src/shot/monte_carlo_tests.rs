//! Checks of the Monte Carlo procedure against published examples and closed forms. Every seed is fixed.

extern crate std;
use super::*;
use crate::shot::coverage_interval::CoverageInterval;
use crate::shot::monte_carlo_result::RECOMMENDED_BLOCK;
use crate::shot::validation::{numerical_tolerance, validate_linear};
use std::vec;
use std::vec::Vec;

fn run_one(seed: u64, settings: &MonteCarloSettings, model: impl Fn(&mut Generator) -> f64) -> MonteCarlo {
    let mut buffer = vec![0.0; RECOMMENDED_BLOCK];
    let mut trial = |generator: &mut Generator, results: &mut [f64]| {
        results[0] = model(generator);
        true
    };
    monte_carlo(&mut Generator::new(seed), 1, &mut trial, settings, &mut buffer, &mut |_| true).unwrap()
}

/// JCGM 101:2008, 9.2.2 (values from memory): the sum of four standard normal inputs has u = 2.0 and a 95 % interval of -3.92 to 3.92.
#[test]
fn sum_of_four_normal_inputs() {
    let settings = MonteCarloSettings { digits: 2, ..MonteCarloSettings::default() };
    let run = run_one(11, &settings, |g| g.normal() + g.normal() + g.normal() + g.normal());
    let y = run.outputs()[0];
    assert_eq!(run.stop, Stop::Converged);
    assert!(run.blocks >= 2 && run.trials == run.blocks * RECOMMENDED_BLOCK as u64);
    let tolerance = numerical_tolerance(2.0, 2);
    assert!(y.mean.abs() < tolerance && (y.standard_uncertainty - 2.0).abs() < tolerance);
    assert!((y.low + 3.92).abs() < tolerance && (y.high - 3.92).abs() < tolerance);
    let linear = validate_linear(0.0, 2.0, 1.959_964 * 2.0, &y, 2);
    assert!(linear.validated());
}

/// JCGM 101:2008, 9.2.3 (values from memory): four rectangular inputs with unit standard deviation, u = 2.0, 95 % interval -3.88 to 3.88:
/// the linear result with 3.92 is then not validated when three digits are meant.
#[test]
fn sum_of_four_rectangular_inputs() {
    let half = 3.0_f64.sqrt();
    let settings = MonteCarloSettings { digits: 3, max_trials: 20_000_000, ..MonteCarloSettings::default() };
    let run = run_one(12, &settings, |g| (0..4).map(|_| half * (2.0 * g.uniform() - 1.0)).sum());
    let y = run.outputs()[0];
    assert_eq!(run.stop, Stop::Converged);
    assert!((y.low + 3.88).abs() < 0.01 && (y.high - 3.88).abs() < 0.01, "{y:?}");
    assert!((y.standard_uncertainty - 2.0).abs() < 0.005);
    assert!(!validate_linear(0.0, 2.0, 3.92, &y, 3).validated());
}

/// The exponential distribution: its shortest 95 % interval is 0 to -ln 0.05, its symmetric one -ln 0.975 to -ln 0.025.
#[test]
fn shortest_and_symmetric_interval_of_an_exponential() {
    let model = |g: &mut Generator| -libm::log(g.uniform());
    let mut settings = MonteCarloSettings { interval: CoverageInterval::Shortest, ..MonteCarloSettings::default() };
    let shortest = run_one(13, &settings, model).outputs()[0];
    assert!(shortest.low < 0.01 && (shortest.high + libm::log(0.05)).abs() < 0.05, "{shortest:?}");
    settings.interval = CoverageInterval::Symmetric;
    let symmetric = run_one(14, &settings, model).outputs()[0];
    assert!((symmetric.low + libm::log(0.975)).abs() < 0.05 && (symmetric.high + libm::log(0.025)).abs() < 0.06);
    assert!((symmetric.mean - 1.0).abs() < 0.05 && (symmetric.standard_uncertainty - 1.0).abs() < 0.05);
}

/// Two outputs that share an input: covariance and correlation in closed form.
#[test]
fn covariance_of_two_outputs() {
    let mut buffer = vec![0.0; 2 * RECOMMENDED_BLOCK];
    let mut trial = |g: &mut Generator, results: &mut [f64]| {
        let shared = g.normal();
        results.copy_from_slice(&[3.0 * shared, 5.0 - 2.0 * shared + g.normal()]);
        true
    };
    let settings = MonteCarloSettings::default();
    let run = monte_carlo(&mut Generator::new(15), 2, &mut trial, &settings, &mut buffer, &mut |_| true).unwrap();
    assert!((run.covariance(0, 1) + 6.0).abs() < 0.1);
    assert!((run.correlation(0, 1).unwrap() + 2.0 / 5.0_f64.sqrt()).abs() < 0.005);
    assert_eq!(run.covariance(0, 1), run.covariance(1, 0));
    assert_eq!(run.covariance(0, 2), 0.0);
}

#[test]
fn same_seed_same_bits() {
    let settings = MonteCarloSettings::default();
    let model = |g: &mut Generator| g.normal() * g.uniform();
    assert_eq!(run_one(16, &settings, model), run_one(16, &settings, model));
    assert_ne!(run_one(16, &settings, model), run_one(17, &settings, model));
}

#[test]
fn cap_cancel_and_refusals() {
    let settings = MonteCarloSettings { digits: 4, max_trials: 30_000, ..MonteCarloSettings::default() };
    let capped = run_one(18, &settings, Generator::normal);
    assert_eq!((capped.stop, capped.trials), (Stop::Cap, 30_000));

    let mut buffer = vec![0.0; 2000];
    let mut seen = Vec::new();
    let mut normal = |g: &mut Generator, r: &mut [f64]| {
        r[0] = g.normal();
        true
    };
    let mut watch = |p: Progress| {
        seen.push(p);
        seen.len() < 3
    };
    let run = monte_carlo(&mut Generator::new(19), 1, &mut normal, &settings, &mut buffer, &mut watch).unwrap();
    assert_eq!((run.stop, run.blocks), (Stop::Cancelled, 3));
    assert!(seen[0].unsettled.is_infinite() && seen[2].unsettled > 1.0 && seen[2].trials == 6000);

    // A tenth of the draws has no result.
    let mut partial = |g: &mut Generator, r: &mut [f64]| {
        r[0] = g.uniform();
        r[0] > 0.1
    };
    let go = &mut |_: Progress| true;
    let run = monte_carlo(&mut Generator::new(20), 1, &mut partial, &settings, &mut buffer, go).unwrap();
    let share = run.refused as f64 / (run.refused + run.trials) as f64;
    assert!((share - 0.1).abs() < 0.01, "{share}");

    let mut never = |_: &mut Generator, r: &mut [f64]| {
        r[0] = f64::NAN;
        true
    };
    let refused = monte_carlo(&mut Generator::new(21), 1, &mut never, &settings, &mut buffer, go);
    assert_eq!(refused.err(), Some(MonteCarloError::Refused { refused: 2001, trials: 0 }));
    let short = monte_carlo(&mut Generator::new(21), 2, &mut never, &settings, &mut buffer, go);
    assert_eq!(short.err(), Some(MonteCarloError::Buffer { length: 2000, needed: 4000 }));
}

/// An output that does not vary settles at once.
#[test]
fn a_constant_converges() {
    let run = run_one(22, &MonteCarloSettings::default(), |_| 7.25);
    let y = run.outputs()[0];
    assert_eq!((run.stop, run.blocks), (Stop::Converged, 2));
    assert_eq!((y.mean, y.standard_uncertainty, y.low, y.high), (7.25, 0.0, 7.25, 7.25));
    assert_eq!(run.correlation(0, 0), None);
}
