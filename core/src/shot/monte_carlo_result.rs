//! Settings, results and refusals of the Monte Carlo procedure.

use super::coverage_interval::CoverageInterval;
use core::fmt;

/// Largest number of outputs of one model.
pub const MAX_OUTPUTS: usize = 8;

/// Trials of one block that JCGM 101, 7.9.4 b) recommends for a level of 95 %.
pub const RECOMMENDED_BLOCK: usize = 10_000;

/// How to run.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct MonteCarloSettings {
    /// Coverage probability of the interval, 0.5 to 0.999.
    pub level: f64,
    /// Kind of interval.
    pub interval: CoverageInterval,
    /// Significant decimal digits of the standard uncertainty that should settle, 1 to 4.
    pub digits: u8,
    /// The tolerance in units of that of JCGM 101, 7.9.2, above 0 to 1: 1 for a result in its own right, 0.2 to validate the linear result
    /// (JCGM 101, 8.2, from memory).
    pub tolerance: f64,
    /// No new block is begun when it would exceed this number of trials. At least two blocks are always run.
    pub max_trials: u64,
}

impl Default for MonteCarloSettings {
    /// 95 %, symmetric, two digits, at most a million trials.
    fn default() -> Self {
        Self { level: 0.95, interval: CoverageInterval::Symmetric, digits: 2, tolerance: 1.0, max_trials: 1_000_000 }
    }
}

/// Why a run ended.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum Stop {
    /// Mean, standard uncertainty and both ends of the interval have settled for every output (JCGM 101, 7.9.4 k).
    Converged,
    /// The cap on trials was reached first: the spread between blocks tells how far it got.
    Cap,
    /// The progress callback asked to stop.
    Cancelled,
}

/// Result of one output.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct OutputSummary {
    /// Mean of all trials.
    pub mean: f64,
    /// Standard deviation of all trials.
    pub standard_uncertainty: f64,
    /// Lower end of the coverage interval: the mean over blocks of the end of each block.
    pub low: f64,
    /// Upper end, likewise.
    pub high: f64,
    /// Standard deviation of that mean for `low` and `high`, from the spread between blocks (JCGM 101, 7.9.4 g, h); zero after one block.
    pub end_uncertainty: (f64, f64),
}

/// Result of a run.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct MonteCarlo {
    /// Number of trials that gave a result.
    pub trials: u64,
    /// Number of draws for which the model had no result; they were replaced. Any such draw biases the result: show it.
    pub refused: u64,
    /// Number of blocks.
    pub blocks: u64,
    /// Why the run ended.
    pub stop: Stop,
    pub(super) count: usize,
    pub(super) outputs: [OutputSummary; MAX_OUTPUTS],
    pub(super) covariance: [[f64; MAX_OUTPUTS]; MAX_OUTPUTS],
}

impl MonteCarlo {
    /// Results, one for each output.
    #[must_use]
    pub fn outputs(&self) -> &[OutputSummary] {
        self.outputs.get(..self.count).unwrap_or(&self.outputs)
    }

    /// Covariance of two outputs over all trials; zero for an output that does not exist.
    #[must_use]
    pub fn covariance(&self, first: usize, second: usize) -> f64 {
        // The two halves of the matrix differ in their last bits: one of them serves both.
        self.covariance.get(first.min(second)).and_then(|row| row.get(first.max(second))).copied().unwrap_or(0.0)
    }

    /// Correlation of two outputs; `None` when one of them does not vary.
    #[must_use]
    pub fn correlation(&self, first: usize, second: usize) -> Option<f64> {
        let product = libm::sqrt(self.covariance(first, first)) * libm::sqrt(self.covariance(second, second));
        (product > 0.0).then(|| (self.covariance(first, second) / product).clamp(-1.0, 1.0))
    }
}

/// How far a run has got, after each block.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Progress {
    /// Trials so far.
    pub trials: u64,
    /// The cap on trials.
    pub max_trials: u64,
    /// Largest of twice the standard deviations of JCGM 101, 7.9.4 k), in units of the tolerance: below one means settled; infinite after one block.
    pub unsettled: f64,
}

/// Why a run could not be made.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub enum MonteCarloError {
    /// No output, or more than [`MAX_OUTPUTS`].
    Outputs {
        /// Number of outputs.
        outputs: usize,
    },
    /// The level is outside 0.5 to 0.999.
    Level {
        /// Its value.
        value: f64,
    },
    /// The digits are outside 1 to 4.
    Digits {
        /// Their number.
        value: u8,
    },
    /// The tolerance is outside (0, 1].
    Tolerance {
        /// Its value.
        value: f64,
    },
    /// The buffer holds fewer trials of all outputs than `100/(1 - level)` (JCGM 101, 7.9.4 b).
    Buffer {
        /// Length of the buffer.
        length: usize,
        /// Length that is needed at least.
        needed: usize,
    },
    /// The model had no result, or none that is finite, for more draws of one block than the block is long.
    Refused {
        /// Draws of this run that were refused.
        refused: u64,
        /// Trials that gave a result.
        trials: u64,
    },
}

impl fmt::Display for MonteCarloError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match *self {
            Self::Outputs { outputs } => {
                write!(f, "{outputs} outputs: 1 to {MAX_OUTPUTS} can be evaluated")
            }
            Self::Level { value } => {
                write!(f, "coverage probability {value}: 0.5 to 0.999 is needed")
            }
            Self::Digits { value } => write!(f, "{value} significant digits: 1 to 4 are possible"),
            Self::Tolerance { value } => write!(f, "tolerance {value}: above 0 to 1 is needed"),
            Self::Buffer { length, needed } => write!(f, "the buffer holds {length} numbers, at least {needed} are needed"),
            Self::Refused { refused, trials } => {
                write!(f, "the model has no result for {refused} of the draws ({trials} had one): the inputs reach outside its domain")
            }
        }
    }
}

impl core::error::Error for MonteCarloError {}
