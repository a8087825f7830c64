//! Monte Carlo check of a reduction (JCGM 101:2008).

use super::monte_carlo::monte_carlo;
use super::monte_carlo_result::{MonteCarlo, MonteCarloError, MonteCarloSettings, Progress};
use super::random::Generator;
use super::reduction::{BudgetLine, Distribution, EndWall, LINES, Reduction, Solved, Source};
use crate::gas::GasSlopes;
use crate::number::Positive;
use crate::shock::{Approach, Entry, Flow, Incident, Jump, Output, PlainFill, Problem, ThermalShock};

impl Reduction<'_> {
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
    /// use endwall::shot::{DrivenGas, EndWall, Measured, MonteCarloSettings, Shot, SpeedSource, reduce};
    /// let shot = Shot {
    ///     gas: DrivenGas::ConstantHeatCapacity { heat_capacity_ratio: Measured::exact(1.4), molar_mass: Measured::exact(0.028) },
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
        let mut generator = Generator::new(seed);
        match self.solved() {
            Solved::Constant(incident, reflection) => {
                let (moving, wall) = (reflection.is_some(), self.wall());
                let model = ConstantModel { incident, moving, wall, budget: self.budget() };
                let mut trial = |generator: &mut Generator, results: &mut [f64]| model.trial(generator, outputs, results);
                monte_carlo(&mut generator, outputs.len(), &mut trial, settings, buffer, progress)
            }
            Solved::Thermal(shock) => {
                let model = ThermalModel::new(shock, self.wall(), self.budget());
                let mut trial = |generator: &mut Generator, results: &mut [f64]| model.trial(generator, outputs, results);
                monte_carlo(&mut generator, outputs.len(), &mut trial, settings, buffer, progress)
            }
        }
    }
}

/// The nominal velocity or impedance of the wall.
fn nominal(wall: &EndWall) -> f64 {
    match wall {
        EndWall::Rigid => 0.0,
        EndWall::Moving(measured) | EndWall::Yielding(measured) => measured.value.nominal(),
    }
}

/// How far a draw of a line lies from its nominal value, in the unit of the line; zero where nothing is known.
fn deviation(line: &BudgetLine, generator: &mut Generator) -> f64 {
    let Some(stated) = line.uncertainty.filter(|stated| stated.standard > 0.0) else { return 0.0 };
    let deviate = match stated.distribution {
        Distribution::Normal => generator.normal(),
        Distribution::Rectangular => (2.0 * generator.uniform() - 1.0) * Positive::sqrt(3.0),
    };
    deviate * stated.standard
}

/// The speed of a yielding wall: where Z·V reaches the step, which falls with V. By bisection: a fixed number of steps, to the last bit.
fn yielding(impedance: f64, gas_speed: f64, step: impl Fn(f64) -> f64) -> f64 {
    let (mut low, mut high) = (0.0, gas_speed);
    for _ in 0..60 {
        let middle = low + (high - low) / 2.0;
        if impedance * middle < step(middle) { low = middle } else { high = middle }
    }
    low
}

/// Draws for a gas of constant heat capacity.
struct ConstantModel<'r> {
    incident: &'r Incident,
    /// Whether the wall moves.
    moving: bool,
    wall: &'r EndWall,
    budget: &'r [BudgetLine],
}

impl ConstantModel<'_> {
    fn trial(&self, generator: &mut Generator, outputs: &[Output], results: &mut [f64]) -> bool {
        let (problem, wall) = self.drawn(generator);
        let z = problem.mach_squared_excess(Entry::ShockSpeed, self.incident.branch());
        let flow = Flow::new(Jump::new(problem.gamma, z), problem.gamma, problem.pressure, problem.temperature, problem.molar_mass);
        let approach = self.moving.then(|| self.approach(&problem, z, wall));
        for (result, output) in results.iter_mut().zip(outputs) {
            let at_wall = approach.as_ref().and_then(|(approach, shock)| behind(approach, *output, *shock, problem.pressure));
            *result = at_wall.unwrap_or_else(|| flow.evaluate(*output));
        }
        let physical = [problem.gamma.d, problem.pressure, problem.temperature, problem.molar_mass, z];
        physical.iter().all(|value| *value > 0.0)
    }

    /// The gas before the wall in one draw, and whether a shock runs back.
    fn approach(&self, problem: &Problem<f64>, z: f64, wall: f64) -> (Approach<f64>, bool) {
        let still = Approach::new(problem, z, 0.0);
        if !matches!(self.wall, EndWall::Yielding(_)) {
            return (Approach::new(problem, z, wall), still.closing_speed() > wall);
        }
        let step = |speed: f64| Approach::new(problem, z, speed).evaluate(Output::Step, true).unwrap_or(0.0);
        (Approach::new(problem, z, yielding(wall, still.closing_speed(), step)), true)
    }

    /// One draw of all inputs, and of the wall's velocity or impedance.
    fn drawn(&self, generator: &mut Generator) -> (Problem<f64>, f64) {
        let mut problem = self.incident.nominal();
        let mut wall = nominal(self.wall);
        for line in self.budget {
            let by = deviation(line, generator);
            match line.source {
                Source::Fit(_) | Source::ShockSpeed => problem.entry += by,
                Source::HeatCapacityRatio => problem.gamma.d += by,
                Source::FillPressure => problem.pressure += by,
                Source::FillTemperature => problem.temperature += by,
                Source::MolarMass => problem.molar_mass += by,
                Source::EndWall => wall += by,
                Source::Mixture(_) => {}
            }
        }
        (problem, wall)
    }
}

/// Draws for a thermally perfect gas.
struct ThermalModel<'r> {
    fill: PlainFill<f64>,
    speed: f64,
    wall: &'r EndWall,
    budget: &'r [BudgetLine],
    /// For each line what a change of the mixture does.
    changes: [Option<GasSlopes<f64>>; LINES],
}

impl<'r> ThermalModel<'r> {
    fn new(shock: &ThermalShock<'_>, wall: &'r EndWall, budget: &'r [BudgetLine]) -> Self {
        let fill = shock.fill();
        let mut changes = [None; LINES];
        for (place, line) in changes.iter_mut().zip(budget) {
            if let Source::Mixture(change) = line.source {
                *place = fill.gas().slopes(change, fill.temperature().ball()).map(|slopes| slopes.plain());
            }
        }
        Self { fill: fill.plain(|x| x), speed: shock.nearest(Output::ShockSpeed), wall, budget, changes }
    }

    fn trial(&self, generator: &mut Generator, outputs: &[Output], results: &mut [f64]) -> bool {
        let (mut speed, mut wall, mut fill) = (self.speed, nominal(self.wall), self.fill);
        for (line, change) in self.budget.iter().zip(&self.changes) {
            let by = deviation(line, generator);
            match line.source {
                Source::Fit(_) | Source::ShockSpeed => speed += by,
                Source::FillPressure => fill = fill.warmer(by, 0.0),
                Source::FillTemperature => fill = fill.warmer(0.0, by),
                Source::EndWall => wall += by,
                Source::Mixture(_) => fill = change.as_ref().map_or(fill, |slopes| fill.changed(slopes, by)),
                Source::HeatCapacityRatio | Source::MolarMass => {}
            }
        }
        let wall_speed = match self.wall {
            EndWall::Yielding(_) => {
                let Some(rigid) = fill.reflected(speed, 0.0) else { return false };
                let step = |moving: f64| fill.reflected(speed, moving).map_or(0.0, |shock| shock.flow().evaluate(Output::Step));
                yielding(wall, rigid.flow().evaluate(Output::GasSpeed2), step)
            }
            EndWall::Rigid | EndWall::Moving(_) => wall,
        };
        let Some(shock) = fill.reflected(speed, wall_speed) else { return false };
        for (result, output) in results.iter_mut().zip(outputs) {
            *result = shock.flow().evaluate(*output);
        }
        true
    }
}

/// An output at the wall. Where the gas cannot follow the wall the sound speed of the expansion comes out negative: that is a vacuum.
fn behind(approach: &Approach<f64>, output: Output, shock: bool, fill_pressure: f64) -> Option<f64> {
    let vacuum = !shock && approach.evaluate(Output::SoundSpeed5, false).is_some_and(|speed| speed <= 0.0);
    match output {
        Output::Pressure5 | Output::Temperature5 | Output::Density5 | Output::SoundSpeed5 if vacuum => Some(0.0),
        Output::Step if vacuum => Some(-fill_pressure),
        _ => approach.evaluate(output, shock),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    extern crate std;
    use crate::gas::species::table;
    use crate::gas::{Group, HeatCapacityModel, MixtureChange, Portion, ThermallyPerfectGas};
    use crate::number::Rational;
    use crate::shot::{DrivenGas, Measured, Shot, SpeedSource, Uncertainty, reduce};

    fn shot(speed: Measured, wall: EndWall) -> Shot<'static, 'static> {
        Shot {
            gas: DrivenGas::ConstantHeatCapacity { heat_capacity_ratio: Measured::exact(1.4), molar_mass: Measured::exact(0.028) },
            pressure: Measured::new(10e3, 20.0),
            temperature: Measured::exact(296.0),
            speed: SpeedSource::Given(speed),
            wall,
        }
    }

    /// A wall that outruns the gas leaves a vacuum in every draw.
    #[test]
    fn a_vacuum_is_drawn_as_one() {
        let reduction = reduce(&shot(Measured::new(800.0, 3.0), EndWall::Moving(Measured::new(6000.0, 1.0)))).unwrap();
        let outputs = [Output::Pressure5, Output::Temperature5, Output::Density5, Output::SoundSpeed5, Output::Step];
        let mut buffer = std::vec![0.0; 5 * 2000];
        let run = reduction.monte_carlo(&outputs, 5, &MonteCarloSettings::default(), &mut buffer, &mut |_| true).unwrap();
        let (step, state) = run.outputs().split_last().unwrap();
        assert!(state.iter().all(|output| (output.mean, output.standard_uncertainty) == (0.0, 0.0)), "{state:?}");
        assert!((step.mean + 10e3).abs() < 2.0 && (step.standard_uncertainty / 20.0 - 1.0).abs() < 0.1, "{step:?}");
        assert_eq!(run.refused, 0);
    }

    /// Degrees of freedom below one are not taken for infinitely many.
    #[test]
    fn impossible_degrees_of_freedom_give_no_uncertainty() {
        for degrees_of_freedom in [0.5, -3.0, f64::NAN] {
            let uncertainty = Some(Uncertainty { degrees_of_freedom, ..Uncertainty::standard(3.0) });
            let estimate =
                reduce(&shot(Measured { value: 800.0.into(), uncertainty }, EndWall::Rigid)).unwrap().estimate(Output::Temperature5);
            assert_eq!((estimate.expanded, estimate.coverage_factor), (None, None));
        }
    }

    /// Linear and Monte Carlo uncertainties agree, so the slopes are right, the implicit ones among them.
    fn agrees(gas: &DrivenGas<'_>, wall: EndWall) {
        let shot = Shot {
            gas: *gas,
            pressure: Measured::new(10e3, 20.0),
            temperature: Measured::new(296.0, 2.0),
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

    /// An impedance that is absurdly low, so that the wall matters.
    const SOFT: f64 = 3e3;

    #[test]
    fn linear_uncertainty_agrees_for_every_wall() {
        let gas = DrivenGas::ConstantHeatCapacity { heat_capacity_ratio: Measured::new(1.4, 0.002), molar_mass: Measured::exact(0.028) };
        for wall in [
            EndWall::Rigid,
            EndWall::Moving(Measured::new(80.0, 4.0)),
            EndWall::Moving(Measured::new(900.0, 4.0)),
            EndWall::Yielding(Measured::new(SOFT, 90.0)),
        ] {
            agrees(&gas, wall);
        }
    }

    #[test]
    fn linear_uncertainty_agrees_for_every_heat_capacity() {
        let exact = |text: &str| text.parse::<Rational>().unwrap();
        let portions = [
            Portion { species: &table::CO2, fraction: exact("0.3") },
            Portion { species: &table::H2, fraction: exact("0.2") },
            Portion { species: &table::AR, fraction: exact("0.5") },
        ];
        let gas = ThermallyPerfectGas::new(&portions).unwrap();
        // Each large enough to matter beside the others.
        let changes = [
            (MixtureChange::Exchange { more: Group::one(0), less: Group::one(2) }, Uncertainty::standard(0.01)),
            (MixtureChange::Addition(Group { first: 0, count: 2 }), Uncertainty::standard(0.01)),
            (MixtureChange::Data, Uncertainty::standard(0.05)),
        ];
        for model in HeatCapacityModel::ALL {
            for change in &changes {
                agrees(&DrivenGas::ThermallyPerfect { gas, model, changes: core::slice::from_ref(change) }, EndWall::Rigid);
            }
            for wall in [EndWall::Moving(Measured::new(80.0, 4.0)), EndWall::Yielding(Measured::new(SOFT, 90.0))] {
                agrees(&DrivenGas::ThermallyPerfect { gas, model, changes: &changes }, wall);
            }
        }
    }
}
