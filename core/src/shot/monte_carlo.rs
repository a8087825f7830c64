//! Propagation of distributions by an adaptive Monte Carlo procedure (JCGM 101:2008, 7.9; clause numbers from memory), in memory that the caller lends.

use super::coverage_interval::{heap_sort, interval};
use super::monte_carlo_result::{MAX_OUTPUTS, MonteCarlo, MonteCarloError, MonteCarloSettings, OutputSummary, Progress, Stop};
use super::random::Generator;
use super::validation::numerical_tolerance;
use core::num::NonZeroUsize;

/// Mean and sum of squared deviations, updated value by value (Welford).
#[derive(Clone, Copy, Default)]
struct Running {
    mean: f64,
    squares: f64,
}

impl Running {
    /// Takes in the `number`-th value.
    fn add(&mut self, value: f64, number: f64) {
        let from_old = value - self.mean;
        self.mean += from_old / number;
        self.squares += from_old * (value - self.mean);
    }

    /// Standard deviation of the mean of `number` values (JCGM 101, 7.9.4 g).
    fn of_mean(&self, number: f64) -> f64 {
        if number < 2.0 { 0.0 } else { libm::sqrt(self.squares / (number * (number - 1.0))) }
    }
}

/// Moments of all trials.
struct Moments {
    number: u64,
    mean: [f64; MAX_OUTPUTS],
    products: [[f64; MAX_OUTPUTS]; MAX_OUTPUTS],
}

impl Moments {
    fn new() -> Self {
        Self { number: 0, mean: [0.0; MAX_OUTPUTS], products: [[0.0; MAX_OUTPUTS]; MAX_OUTPUTS] }
    }

    fn add(&mut self, values: &[f64; MAX_OUTPUTS]) {
        self.number = self.number.saturating_add(1);
        let number = self.number as f64;
        let mut from_old = *values;
        for (difference, mean) in from_old.iter_mut().zip(&mut self.mean) {
            *difference -= *mean;
            *mean += *difference / number;
        }
        for (row, d) in self.products.iter_mut().zip(&from_old) {
            for ((cell, value), mean) in row.iter_mut().zip(values).zip(&self.mean) {
                *cell += d * (value - mean);
            }
        }
    }

    /// Covariance matrix of the trials.
    fn covariance(&self) -> [[f64; MAX_OUTPUTS]; MAX_OUTPUTS] {
        let free = self.number.saturating_sub(1).max(1) as f64;
        self.products.map(|row| row.map(|cell| cell / free))
    }
}

/// Mean, standard deviation and the ends of the interval of one output, block by block.
#[derive(Clone, Copy, Default)]
struct Blocks {
    mean: Running,
    deviation: Running,
    low: Running,
    high: Running,
}

/// Runs a model on random inputs until mean, standard uncertainty and coverage interval of every output have settled, or the cap is reached
/// (adaptive procedure of JCGM 101:2008, 7.9.4).
///
/// `trial` draws the inputs from the generator, writes `outputs` results and returns whether there are any; results that are not finite
/// count as none. `buffer` holds the results of one block, output by output, each sorted when the block is complete: a block is
/// `buffer.len()/outputs` trials, at least `100/(1 - level)`; [`RECOMMENDED_BLOCK`](super::RECOMMENDED_BLOCK) is what the guide wants. `progress` is called after each
/// block and returns whether to go on.
///
/// Mean, standard uncertainty and covariance are of all trials. The ends of the interval are means over blocks, since not all trials are
/// kept: for `M` trials in a block they carry a bias of the order of `1/M`, far below the tolerance. Work is bounded by the cap (each block
/// redraws at most as many refused draws as it is long). The same seed, settings and buffer length give the same bits on every machine as
/// long as the model does.
///
/// # Errors
/// [`MonteCarloError`].
///
/// ```
/// use endwall::shot::{Generator, MonteCarloSettings, monte_carlo};
/// let mut buffer = [0.0; 4000];
/// let run = monte_carlo(
///     &mut Generator::new(7),
///     1,
///     &mut |generator, results| {
///         results[0] = 10.0 + 0.5 * generator.normal();
///         true
///     },
///     &MonteCarloSettings::default(),
///     &mut buffer,
///     &mut |_| true,
/// )?;
/// assert!((run.outputs()[0].standard_uncertainty - 0.5).abs() < 0.01);
/// # Ok::<(), endwall::shot::MonteCarloError>(())
/// ```
pub fn monte_carlo(
    generator: &mut Generator,
    outputs: usize,
    trial: &mut dyn FnMut(&mut Generator, &mut [f64]) -> bool,
    settings: &MonteCarloSettings,
    buffer: &mut [f64],
    progress: &mut dyn FnMut(Progress) -> bool,
) -> Result<MonteCarlo, MonteCarloError> {
    let block = block_length(outputs, settings, buffer.len())?;
    let mut moments = Moments::new();
    let mut blocks = [Blocks::default(); MAX_OUTPUTS];
    let (mut refused, mut number) = (0_u64, 0_u64);
    let stop = loop {
        refused =
            refused.saturating_add(fill(generator, outputs, trial, buffer, block, &mut moments).map_err(|more| {
                MonteCarloError::Refused { refused: refused.saturating_add(more), trials: complete_trials(number, block) }
            })?);
        number = number.saturating_add(1);
        for (summary, values) in blocks.iter_mut().zip(buffer.chunks_exact_mut(block.get())).take(outputs) {
            summarise(summary, values, number as f64, settings);
        }
        let unsettled = unsettled(&moments, &blocks, outputs, number, settings);
        let go_on = progress(Progress { trials: moments.number, max_trials: settings.max_trials, unsettled });
        if unsettled <= 1.0 {
            break Stop::Converged;
        }
        if !go_on {
            break Stop::Cancelled;
        }
        if number >= 2 && moments.number.saturating_add(block.get() as u64) > settings.max_trials {
            break Stop::Cap;
        }
    };
    Ok(report(&moments, &blocks, outputs, number, refused, stop))
}

/// Trials of complete blocks.
fn complete_trials(blocks: u64, block: NonZeroUsize) -> u64 {
    blocks.saturating_mul(block.get() as u64)
}

/// Checks the request; the number of trials in a block.
fn block_length(outputs: usize, settings: &MonteCarloSettings, length: usize) -> Result<NonZeroUsize, MonteCarloError> {
    if outputs == 0 || outputs > MAX_OUTPUTS {
        return Err(MonteCarloError::Outputs { outputs });
    }
    if !(0.5..=0.999).contains(&settings.level) {
        return Err(MonteCarloError::Level { value: settings.level });
    }
    if !(1..=4).contains(&settings.digits) {
        return Err(MonteCarloError::Digits { value: settings.digits });
    }
    if !(settings.tolerance > 0.0 && settings.tolerance <= 1.0) {
        return Err(MonteCarloError::Tolerance { value: settings.tolerance });
    }
    // A rounding error of the quotient must not ask for one more; at the highest level it is 100 000.
    let fewest = libm::ceil(100.0 / (1.0 - settings.level) - 1e-6) as usize;
    let block = length.checked_div(outputs).and_then(NonZeroUsize::new);
    block.filter(|block| block.get() >= fewest).ok_or(MonteCarloError::Buffer { length, needed: fewest.saturating_mul(outputs) })
}

/// Fills the buffer with one block, and takes it into the moments. Number of refused draws, as an error when there are too many.
fn fill(
    generator: &mut Generator,
    outputs: usize,
    trial: &mut dyn FnMut(&mut Generator, &mut [f64]) -> bool,
    buffer: &mut [f64],
    block: NonZeroUsize,
    moments: &mut Moments,
) -> Result<u64, u64> {
    let mut refused = 0_u64;
    let mut place = 0_usize;
    while place < block.get() {
        let mut results = [0.0; MAX_OUTPUTS];
        let accepted = results.get_mut(..outputs).is_some_and(|r| trial(generator, r) && r.iter().all(|x| x.is_finite()));
        if !accepted {
            refused = refused.saturating_add(1);
            if refused > block.get() as u64 {
                return Err(refused);
            }
            continue;
        }
        for (values, result) in buffer.chunks_exact_mut(block.get()).zip(&results).take(outputs) {
            if let Some(cell) = values.get_mut(place) {
                *cell = *result;
            }
        }
        moments.add(&results);
        place = place.saturating_add(1);
    }
    Ok(refused)
}

/// Sorts the values of one output and takes their mean, standard deviation and interval into the spread between blocks.
fn summarise(summary: &mut Blocks, values: &mut [f64], number: f64, settings: &MonteCarloSettings) {
    let mut all = Running::default();
    let mut count = 0.0;
    for &value in values.iter() {
        count += 1.0;
        all.add(value, count);
    }
    heap_sort(values);
    let (low, high) = interval(values, settings.level, settings.interval);
    summary.mean.add(all.mean, number);
    summary.deviation.add(libm::sqrt(all.squares / (count - 1.0)), number);
    summary.low.add(low, number);
    summary.high.add(high, number);
}

/// Largest of twice the standard deviations of the means over blocks, in units of the tolerance (JCGM 101, 7.9.4 g to k).
fn unsettled(moments: &Moments, blocks: &[Blocks; MAX_OUTPUTS], outputs: usize, number: u64, settings: &MonteCarloSettings) -> f64 {
    if number < 2 {
        return f64::INFINITY;
    }
    let number = number as f64;
    let covariance = moments.covariance();
    let mut largest = 0.0;
    for (index, block) in blocks.iter().enumerate().take(outputs) {
        let variance = covariance.get(index).and_then(|row| row.get(index)).copied().unwrap_or(0.0);
        let tolerance = settings.tolerance * numerical_tolerance(libm::sqrt(variance), settings.digits);
        for running in [block.mean, block.deviation, block.low, block.high] {
            let twice = 2.0 * running.of_mean(number);
            // An output that does not vary has settled.
            if twice > 0.0 {
                largest = (twice / tolerance).max(largest);
            }
        }
    }
    largest
}

/// Gathers the result.
fn report(moments: &Moments, blocks: &[Blocks; MAX_OUTPUTS], count: usize, number: u64, refused: u64, stop: Stop) -> MonteCarlo {
    let covariance = moments.covariance();
    let mut outputs = [OutputSummary::default(); MAX_OUTPUTS];
    let rows = outputs.iter_mut().zip(blocks).zip(&moments.mean).zip(&covariance);
    for (index, (((output, block), mean), row)) in rows.enumerate().take(count) {
        *output = OutputSummary {
            mean: *mean,
            standard_uncertainty: libm::sqrt(row.get(index).copied().unwrap_or(0.0)),
            low: block.low.mean,
            high: block.high.mean,
            end_uncertainty: (block.low.of_mean(number as f64), block.high.of_mean(number as f64)),
        };
    }
    MonteCarlo { trials: moments.number, refused, blocks: number, stop, count, outputs, covariance }
}

#[cfg(test)]
#[path = "monte_carlo_tests.rs"]
mod tests;
