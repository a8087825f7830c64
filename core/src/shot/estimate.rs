//! Results of a reduction with their uncertainties: the law of propagation (JCGM 100:2008, 5.1) with slopes at fixed shock speed.

use super::constant::Constant;
use super::coverage::{LEVEL_TWO_SIGMA, coverage_factor, effective_degrees_of_freedom};
use super::propagate::Inputs;
use super::reduction::{Estimate, LINES, Reduction, Solved, Source, VARIABLES};
use super::thermal::Thermal;
use crate::number::{Enclosure, Known};
use crate::shock::Output;

/// The shocks with what gives them slopes.
enum Parts<'r> {
    Constant(Constant<'r>),
    Thermal(Thermal<'r>),
}

impl Reduction<'_> {
    /// Sensitivity of an output to each line of the budget: the slope with respect to the input on which the line acts.
    pub fn sensitivities(&self, output: Output) -> [f64; LINES] {
        let [own] = self.all_sensitivities([output]);
        own
    }

    /// The same for several outputs, which is faster than one after the other where the heat capacity depends on temperature.
    fn all_sensitivities<const N: usize>(&self, outputs: [Output; N]) -> [[f64; LINES]; N] {
        match self.parts() {
            Parts::Constant(constant) => outputs.map(|output| self.per_line(constant.slopes(output))),
            Parts::Thermal(thermal) => {
                let mut all = [[0.0; LINES]; N];
                for (at, line) in self.budget().iter().enumerate() {
                    for (row, slope) in all.iter_mut().zip(thermal.slopes(line.source, outputs)) {
                        if let Some(sensitivity) = row.get_mut(at) {
                            *sensitivity = slope;
                        }
                    }
                }
                all
            }
        }
    }

    fn per_line(&self, slopes: [f64; VARIABLES]) -> [f64; LINES] {
        self.each_line(|source| slopes.get(source.variable()).copied().unwrap_or(0.0))
    }

    fn each_line(&self, slope: impl Fn(Source) -> f64) -> [f64; LINES] {
        let mut sensitivities = [0.0; LINES];
        for (sensitivity, line) in sensitivities.iter_mut().zip(self.budget()) {
            *sensitivity = slope(line.source);
        }
        sensitivities
    }

    fn parts(&self) -> Parts<'_> {
        match self.solved() {
            Solved::Constant(incident, reflection) => {
                Parts::Constant(Constant { incident, reflection: reflection.as_ref(), wall: self.wall() })
            }
            Solved::Thermal(shock) => Parts::Thermal(Thermal { shock, wall: self.wall() }),
        }
    }

    /// Standard uncertainties of all lines, if every line to which one of the sensitivities is not zero states one.
    fn uncertainties(&self, sensitivities: &[[f64; LINES]]) -> Option<[f64; LINES]> {
        let mut uncertainties = [0.0; LINES];
        for (at, (uncertainty, line)) in uncertainties.iter_mut().zip(self.budget()).enumerate() {
            let matters = sensitivities.iter().any(|row| row.get(at).is_some_and(|c| *c != 0.0));
            *uncertainty = match line.uncertainty {
                Some(stated) => stated.standard,
                None if matters => return None,
                None => 0.0,
            };
        }
        Some(uncertainties)
    }

    /// An output with its proof and its uncertainty.
    pub fn estimate(&self, output: Output) -> Estimate {
        let [own] = self.estimates([output]);
        own
    }

    /// Several outputs with their proofs and uncertainties, faster than one after the other.
    ///
    /// ```
    /// # use endwall::gas::species::table;
    /// # use endwall::gas::{HeatCapacityModel, Portion, ThermallyPerfectGas};
    /// # use endwall::shot::{DrivenGas, EndWall, Measured, Shot, SpeedSource, reduce};
    /// use endwall::shock::Output;
    /// # let portions = [Portion { species: &table::N2, fraction: "1".parse()? }];
    /// # let gas = ThermallyPerfectGas::new(&portions)?;
    /// # let gas = DrivenGas::ThermallyPerfect { gas, model: HeatCapacityModel::Equilibrium, changes: &[] };
    /// # let shot = Shot { speed: SpeedSource::Given(Measured::new(1050.0, 2.0)), gas, pressure: Measured::new(1e4, 10.0),
    /// #   temperature: Measured::new(295.0, 0.5), wall: EndWall::Rigid };
    /// let reduction = reduce(&shot)?;
    /// let [temperature, pressure] = reduction.estimates([Output::Temperature5, Output::Pressure5]);
    /// assert_eq!(temperature, reduction.estimate(Output::Temperature5));
    /// assert_eq!(pressure, reduction.estimate(Output::Pressure5));
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn estimates<const N: usize>(&self, outputs: [Output; N]) -> [Estimate; N] {
        let mut sensitivities = self.all_sensitivities(outputs).into_iter();
        outputs.map(|output| self.estimate_with(output, sensitivities.next().unwrap_or([f64::NAN; LINES])))
    }

    fn estimate_with(&self, output: Output, sensitivities: [f64; LINES]) -> Estimate {
        let (value, enclosure) = match self.parts() {
            Parts::Constant(constant) => match constant.at_wall(output) {
                Some(enclosure) => (enclosure.middle(), enclosure),
                None => (constant.incident.nearest(output), constant.incident.output(output)),
            },
            Parts::Thermal(thermal) => (thermal.shock.nearest(output), thermal.shock.output(output)),
        };
        let proven = (output != Output::ShockSpeed || self.fit().is_none()).then_some(enclosure);
        self.estimated(value, proven, sensitivities)
    }

    /// The gas speed of state 5: the wall's velocity, exactly zero for a rigid wall.
    pub fn wall_velocity(&self) -> Estimate {
        let (enclosure, sensitivities) = match self.parts() {
            Parts::Constant(constant) => {
                let (enclosure, slopes) = constant.wall_velocity();
                (enclosure, self.per_line(slopes))
            }
            Parts::Thermal(thermal) => (thermal.shock.wall_speed(), self.each_line(|source| thermal.wall_slope(source))),
        };
        self.estimated(enclosure.middle(), Some(enclosure), sensitivities)
    }

    /// p1 as an estimate; its own uncertainty is the only line.
    pub fn fill_pressure(&self) -> Estimate {
        self.input(self.fill()[0], Source::FillPressure)
    }

    /// T1 as an estimate.
    pub fn fill_temperature(&self) -> Estimate {
        self.input(self.fill()[1], Source::FillTemperature)
    }

    /// p1 and T1.
    pub fn fill(&self) -> [Known; 2] {
        match self.solved() {
            Solved::Constant(incident, _) => [incident.fill().pressure(), incident.fill().temperature()],
            Solved::Thermal(shock) => [shock.fill().pressure(), shock.fill().temperature()],
        }
    }

    fn input(&self, value: Known, own: Source) -> Estimate {
        let sensitivities = self.each_line(|source| if source == own { 1.0 } else { 0.0 });
        self.estimated(value.nominal(), Some(value.enclosure()), sensitivities)
    }

    fn estimated(&self, value: f64, proven: Option<Enclosure>, sensitivities: [f64; LINES]) -> Estimate {
        let combined = || {
            let uncertainties = self.uncertainties(&[sensitivities])?;
            let standard = Inputs::new(&uncertainties, None).ok()?.standard_uncertainty(&sensitivities).ok()?;
            let mut components = [(0.0, f64::INFINITY); LINES];
            for ((component, line), (c, u)) in components.iter_mut().zip(self.budget()).zip(sensitivities.iter().zip(uncertainties)) {
                let degrees = line.uncertainty.map_or(f64::INFINITY, |stated| stated.degrees_of_freedom);
                *component = ((c * u).abs(), degrees);
            }
            let degrees = effective_degrees_of_freedom(&components).ok()?;
            // The level is that of two standard deviations of a normal distribution.
            let factor = if degrees == f64::INFINITY { 2.0 } else { coverage_factor(LEVEL_TWO_SIGMA, degrees).ok()? };
            Some((standard, degrees, factor))
        };
        let known = combined();
        Estimate {
            value,
            proven,
            standard_uncertainty: known.map(|(standard, ..)| standard),
            degrees_of_freedom: known.map(|(_, degrees, _)| degrees),
            coverage_factor: known.map(|(.., factor)| factor),
            expanded: known.map(|(standard, _, factor)| standard * factor),
        }
    }

    /// Share of each line in the variance of an output, in the order of [`Reduction::budget`]; `None` if the uncertainty is not known or zero.
    pub fn shares(&self, output: Output) -> Option<[f64; LINES]> {
        let sensitivities = self.sensitivities(output);
        let uncertainties = self.uncertainties(&[sensitivities])?;
        let mut shares = [0.0; LINES];
        let inputs = Inputs::new(&uncertainties, None).ok()?;
        inputs.shares(&sensitivities, &mut shares).ok()?;
        shares.iter().all(|share| share.is_finite()).then_some(shares)
    }

    /// Correlation of two outputs from the inputs that they share (JCGM 102:2011, 6.2).
    pub fn correlation(&self, first: Output, second: Output) -> Option<f64> {
        let rows = self.all_sensitivities([first, second]);
        let uncertainties = self.uncertainties(&rows)?;
        let [c, d] = rows;
        Inputs::new(&uncertainties, None).ok()?.correlation(&c, &d).ok()?
    }
}
