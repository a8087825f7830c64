//! Monte Carlo check of a reduction (JCGM 101:2008).

use super::monte_carlo::monte_carlo;
use super::monte_carlo_result::{MonteCarlo, MonteCarloError, MonteCarloSettings, Progress};
use super::random::Generator;
use super::reduction::{Distribution, Reduction, Source};
use crate::gas::Gamma;
use crate::number::Positive;
use crate::shock::{Entry, Flow, Jump, Output, Problem};

impl Reduction {
    /// Propagates the distributions of all inputs through the relations (JCGM 101:2008, 7) to the outputs asked for (at most eight), to validate
    /// the linear uncertainties. A fitted shock speed is drawn from the normal distribution that the fit hands out.
    ///
    /// A draw for which no shock exists (a speed below the sound speed) counts as refused. The buffer is lent by the caller, see
    /// [`monte_carlo`]; the same seed gives the same bits everywhere.
    ///
    /// # Errors
    /// [`MonteCarloError`], also where an input states no uncertainty (then there is nothing to draw from: its value is held).
    ///
    /// ```
    /// use endwall::shock::Output;
    /// use endwall::shot::{Measured, MonteCarloSettings, Shot, SpeedSource, reduce};
    /// let shot = Shot {
    ///     heat_capacity_ratio: Measured::exact(1.4),
    ///     molar_mass: Measured::exact(0.028),
    ///     pressure: Measured::new(10e3, 20.0),
    ///     temperature: Measured::new(296.0, 0.5),
    ///     speed: SpeedSource::Given(Measured::new(800.0, 3.0)),
    /// };
    /// let reduction = reduce(&shot)?;
    /// let mut buffer = [0.0; 20_000];
    /// let settings = MonteCarloSettings { max_trials: 100_000, ..Default::default() };
    /// let run = reduction.monte_carlo(&[Output::Temperature5], 1, &settings, &mut buffer, &mut |_| true).unwrap();
    /// let linear = reduction.estimate(Output::Temperature5).standard_uncertainty.unwrap();
    /// assert!((run.outputs()[0].standard_uncertainty / linear - 1.0).abs() < 0.02);
    /// # Ok::<(), endwall::shot::ReductionError>(())
    /// ```
    pub fn monte_carlo(
        &self,
        outputs: &[Output],
        seed: u64,
        settings: &MonteCarloSettings,
        buffer: &mut [f64],
        progress: &mut dyn FnMut(Progress) -> bool,
    ) -> Result<MonteCarlo, MonteCarloError> {
        let mut trial = |generator: &mut Generator, results: &mut [f64]| {
            let problem = self.drawn(generator);
            let z = problem.mach_squared_excess(Entry::ShockSpeed, self.incident().branch());
            let flow = Flow::new(Jump::new(problem.gamma, z), problem.gamma, problem.pressure, problem.temperature, problem.molar_mass);
            for (result, output) in results.iter_mut().zip(outputs) {
                *result = flow.evaluate(*output);
            }
            let physical = [problem.gamma.d, problem.pressure, problem.temperature, problem.molar_mass, z];
            physical.iter().all(|value| *value > 0.0)
        };
        monte_carlo(&mut Generator::new(seed), outputs.len(), &mut trial, settings, buffer, progress)
    }

    /// One draw of all inputs.
    fn drawn(&self, generator: &mut Generator) -> Problem<f64> {
        let nominal = self.incident().nominal();
        let mut problem = Problem { gamma: Gamma::from_excess(nominal.gamma.d), ..nominal };
        for line in self.budget() {
            let Some(stated) = line.uncertainty.filter(|stated| stated.standard > 0.0) else { continue };
            let deviate = match stated.distribution {
                Distribution::Normal => generator.normal(),
                Distribution::Rectangular => (2.0 * generator.uniform() - 1.0) * Positive::sqrt(3.0),
            };
            let input = match line.source {
                Source::Fit(_) | Source::ShockSpeed => &mut problem.entry,
                Source::HeatCapacityRatio => &mut problem.gamma.d,
                Source::FillPressure => &mut problem.pressure,
                Source::FillTemperature => &mut problem.temperature,
                Source::MolarMass => &mut problem.molar_mass,
            };
            *input += deviate * stated.standard;
        }
        problem
    }
}
