//! Floor 5: a shot. Filling steps, arrival times to a shock speed, reduction to states, uncertainty, Monte Carlo.
mod arrival;
mod constant;
mod coverage;
mod coverage_interval;
mod estimate;
mod filling;
mod fit;
mod fit_error;
mod fit_lines;
mod fit_problem;
mod fit_result;
mod least_squares;
mod monte_carlo;
mod monte_carlo_result;
mod propagate;
mod random;
mod reduction;
mod sample;
mod station;
mod thermal;
mod validate;
mod validation;
pub use coverage::{CoverageError, LEVEL_TWO_SIGMA, coverage_factor, effective_degrees_of_freedom};
pub use coverage_interval::CoverageInterval;
pub use filling::{Filling, FillingStep};
pub use fit::{Allowance, FitSettings, fit};
pub use fit_error::{FitError, FitField};
pub use fit_result::{AllowanceFit, Fit, FitFlags, FitLine, FitMatrix, FitSource, Outlier, Refit, StationFit};
pub use monte_carlo::monte_carlo;
pub use monte_carlo_result::{
    MAX_OUTPUTS, MonteCarlo, MonteCarloError, MonteCarloSettings, OutputSummary, Progress, RECOMMENDED_BLOCK, Stop,
};
pub use propagate::{Inputs, PropagationError};
pub use random::Generator;
pub use reduction::{
    BudgetLine, Distribution, DrivenGas, EndWall, Estimate, MAX_CHANGES, Measured, Reduction, ReductionError, Shot, Solved, Source,
    SpeedSource, Uncertainty, reduce,
};
pub use sample::{Sample, SampleError};
pub use station::{MAX_STATIONS, Station, seconds_between};
pub use validation::{Validation, numerical_tolerance, validate_linear};
