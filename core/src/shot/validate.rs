//! Monte Carlo check of a reduction (JCGM 101:2008).

use super::monte_carlo::monte_carlo;
use super::monte_carlo_result::{MonteCarlo, MonteCarloError, MonteCarloSettings, Progress};
use super::random::Generator;
use super::reduction::{Distribution, EndWall, Reduction, Source};
use crate::gas::Gamma;
use crate::number::Positive;
use crate::shock::{Approach, Entry, Flow, Jump, Output, Problem};

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
    /// use endwall::shot::{EndWall, Measured, MonteCarloSettings, Shot, SpeedSource, reduce};
    /// let shot = Shot {
    ///     heat_capacity_ratio: Measured::exact(1.4),
    ///     molar_mass: Measured::exact(0.028),
    ///     pressure: Measured::new(10e3, 20.0),
    ///     temperature: Measured::new(296.0, 0.5),
    ///     speed: SpeedSource::Given(Measured::new(800.0, 3.0)),
    ///     wall: EndWall::Rigid,
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
            let (problem, wall) = self.drawn(generator);
            let z = problem.mach_squared_excess(Entry::ShockSpeed, self.incident().branch());
            let flow = Flow::new(Jump::new(problem.gamma, z), problem.gamma, problem.pressure, problem.temperature, problem.molar_mass);
            let approach = self.wall_reflection().map(|_| self.approach(&problem, z, wall));
            for (result, output) in results.iter_mut().zip(outputs) {
                let at_wall = approach.as_ref().and_then(|(approach, shock)| approach.evaluate(*output, *shock));
                *result = at_wall.unwrap_or_else(|| flow.evaluate(*output));
            }
            let physical = [problem.gamma.d, problem.pressure, problem.temperature, problem.molar_mass, z];
            physical.iter().all(|value| *value > 0.0)
        };
        monte_carlo(&mut Generator::new(seed), outputs.len(), &mut trial, settings, buffer, progress)
    }

    /// The gas before the wall in one draw, and whether a shock runs back. The speed of a yielding wall is found by bisection: a fixed number of
    /// steps, to the last bit.
    fn approach(&self, problem: &Problem<f64>, z: f64, wall: f64) -> (Approach<f64>, bool) {
        let still = Approach::new(problem, z, 0.0);
        if !matches!(self.wall(), EndWall::Yielding(_)) {
            return (Approach::new(problem, z, wall), still.closing_speed() > wall);
        }
        let (mut low, mut high) = (0.0, still.closing_speed());
        for _ in 0..60 {
            let middle = low + (high - low) / 2.0;
            let step = Approach::new(problem, z, middle).evaluate(Output::Step, true).unwrap_or(0.0);
            if wall * middle < step { low = middle } else { high = middle }
        }
        (Approach::new(problem, z, low), true)
    }

    /// One draw of all inputs, and of the wall's velocity or impedance.
    fn drawn(&self, generator: &mut Generator) -> (Problem<f64>, f64) {
        let nominal = self.incident().nominal();
        let mut problem = Problem { gamma: Gamma::from_excess(nominal.gamma.d), ..nominal };
        let mut wall = match self.wall() {
            EndWall::Rigid => 0.0,
            EndWall::Moving(measured) | EndWall::Yielding(measured) => measured.value.nominal(),
        };
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
                Source::EndWall => &mut wall,
            };
            *input += deviate * stated.standard;
        }
        (problem, wall)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    extern crate std;
    use crate::shot::{Measured, Shot, SpeedSource, reduce};

    /// Linear and Monte Carlo uncertainties agree for every kind of wall, so the slopes are right, the implicit ones among them.
    #[test]
    fn linear_uncertainty_agrees_for_every_wall() {
        // An impedance that is absurdly low, so that the wall matters.
        let walls = [
            EndWall::Rigid,
            EndWall::Moving(Measured::new(80.0, 4.0)),
            EndWall::Moving(Measured::new(900.0, 4.0)),
            EndWall::Yielding(Measured::new(3e3, 90.0)),
        ];
        for wall in walls {
            let shot = Shot {
                heat_capacity_ratio: Measured::new(1.4, 0.002),
                molar_mass: Measured::exact(0.028),
                pressure: Measured::new(10e3, 20.0),
                temperature: Measured::new(296.0, 0.5),
                speed: SpeedSource::Given(Measured::new(800.0, 3.0)),
                wall,
            };
            let reduction = reduce(&shot).unwrap();
            let outputs =
                [Output::Temperature5, Output::Pressure5, Output::Density5, Output::SoundSpeed5, Output::ReflectedSpeed, Output::Step];
            let settings = MonteCarloSettings { max_trials: 60_000, ..Default::default() };
            let mut buffer = std::vec![0.0; 6 * 5000];
            let run = reduction.monte_carlo(&outputs, 5, &settings, &mut buffer, &mut |_| true).unwrap();
            for (output, summary) in outputs.iter().zip(run.outputs()) {
                let estimate = reduction.estimate(*output);
                let linear = estimate.standard_uncertainty.unwrap();
                assert!((summary.standard_uncertainty / linear - 1.0).abs() < 0.03, "{wall:?} {output:?} {summary:?} {linear}");
                assert!((summary.mean - estimate.value).abs() < 0.05 * linear, "{wall:?} {output:?}");
            }
        }
    }
}
