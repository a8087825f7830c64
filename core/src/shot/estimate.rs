//! Results of a reduction with their uncertainties: the law of propagation (JCGM 100:2008, 5.1) with slopes at fixed shock speed.

use super::coverage::{LEVEL_TWO_SIGMA, coverage_factor, effective_degrees_of_freedom};
use super::propagate::Inputs;
use super::reduction::{EndWall, Estimate, LINES, Reduction, VARIABLES};
use crate::gas::Gamma;
use crate::number::{Dual, Enclosure};
use crate::shock::{Approach, Entry, Flow, Jump, Output, Problem, Wave};

/// A value with its slopes with respect to all inputs.
type Variable = Dual<f64, VARIABLES>;

impl Reduction {
    /// Slopes of an output with respect to shock speed, γ, p1, T1, W and the wall, at fixed shock speed.
    fn slopes(&self, output: Output) -> [f64; VARIABLES] {
        let problem = self.problem();
        match output {
            // An input itself.
            Output::ShockSpeed => problem.entry.slopes(),
            output => self.evaluate(&problem, output).slopes(),
        }
    }

    /// The nominal inputs as variables.
    fn problem(&self) -> Problem<Variable> {
        let nominal = self.incident().nominal();
        Problem {
            gamma: Gamma::from_excess(Variable::variable(nominal.gamma.d, 1)),
            entry: Variable::variable(nominal.entry, 0),
            pressure: Variable::variable(nominal.pressure, 2),
            temperature: Variable::variable(nominal.temperature, 3),
            molar_mass: Variable::variable(nominal.molar_mass, 4),
        }
    }

    fn evaluate(&self, problem: &Problem<Variable>, output: Output) -> Variable {
        let z = problem.mach_squared_excess(Entry::ShockSpeed, self.incident().branch());
        let rigid = || {
            let jump = Jump::new(problem.gamma, z);
            Flow::new(jump, problem.gamma, problem.pressure, problem.temperature, problem.molar_mass).evaluate(output)
        };
        match self.wall_reflection().map(|reflection| reflection.wave) {
            None => rigid(),
            // A vacuum depends on nothing.
            Some(Wave::Vacuum) if self.at_wall(output).is_some() => Variable::constant(0.0),
            Some(wave) => {
                let approach = Approach::new(problem, z, self.wall_speed(problem, z));
                approach.evaluate(output, wave == Wave::Shock).unwrap_or_else(rigid)
            }
        }
    }

    /// The wall's velocity as a variable. For a yielding wall by the implicit function rule: with f = Z·V − (p5(V) − p1) = 0, the slopes of V are
    /// those of −f at fixed V over ∂f/∂V, which a second differentiation along V gives.
    fn wall_speed(&self, problem: &Problem<Variable>, z: Variable) -> Variable {
        let speed = self.wall_reflection().map_or(0.0, |reflection| reflection.state.gas_speed.middle());
        match self.wall() {
            EndWall::Rigid => Variable::constant(0.0),
            EndWall::Moving(_) => Variable::variable(speed, 5),
            EndWall::Yielding(impedance) => {
                let impedance = Variable::variable(impedance.value.nominal(), 5);
                let step = |speed: Variable| Approach::new(problem, z, speed).evaluate(Output::Step, true);
                let residual = |speed: Variable| step(speed).map_or(Variable::constant(0.0), |step| impedance * speed - step);
                let fixed = residual(Variable::constant(speed)).slopes();
                // With V as one more variable in the place of Z, the slope there grows by ∂f/∂V.
                let ([.., without], [.., with]) = (fixed, residual(Variable::variable(speed, 5)).slopes());
                Variable::with_slopes(speed, fixed.map(|own| -own / (with - without)))
            }
        }
    }

    /// Sensitivity of an output to each line of the budget: the slope with respect to the input on which the line acts.
    pub fn sensitivities(&self, output: Output) -> [f64; LINES] {
        self.per_line(self.slopes(output))
    }

    fn per_line(&self, slopes: [f64; VARIABLES]) -> [f64; LINES] {
        let mut sensitivities = [0.0; LINES];
        for (sensitivity, line) in sensitivities.iter_mut().zip(self.budget()) {
            *sensitivity = slopes.get(line.source.variable()).copied().unwrap_or(0.0);
        }
        sensitivities
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
        let proven = (output != Output::ShockSpeed || self.fit().is_none()).then(|| self.enclosure(output));
        let value = match (self.at_wall(output), proven) {
            (Some(enclosure), _) => enclosure.middle(),
            _ => self.incident().nearest(output),
        };
        self.estimated(value, proven, self.slopes(output))
    }

    /// The enclosure of an output at the nominal inputs.
    fn enclosure(&self, output: Output) -> Enclosure {
        self.at_wall(output).unwrap_or_else(|| self.incident().output(output))
    }

    /// The enclosure of an output that a moving wall changes.
    fn at_wall(&self, output: Output) -> Option<Enclosure> {
        let reflection = self.wall_reflection()?;
        match output {
            Output::Pressure5 => Some(reflection.state.pressure),
            Output::Temperature5 => Some(reflection.state.temperature),
            Output::Density5 => Some(reflection.state.density),
            Output::SoundSpeed5 => Some(reflection.state.sound_speed),
            Output::ReflectedSpeed => Some(reflection.front_speed),
            Output::ReflectedMach => Some(reflection.mach),
            Output::Step => Some(reflection.state.pressure - self.incident().fill().pressure().enclosure()),
            _ => None,
        }
    }

    /// The gas speed of state 5: the wall's velocity, exactly zero for a rigid wall.
    pub fn wall_velocity(&self) -> Estimate {
        let problem = self.problem();
        let z = problem.mach_squared_excess(Entry::ShockSpeed, self.incident().branch());
        let enclosure = self.wall_reflection().map_or(Enclosure::from(0.0), |reflection| reflection.state.gas_speed);
        self.estimated(enclosure.middle(), Some(enclosure), self.wall_speed(&problem, z).slopes())
    }

    /// p1 as an estimate; its own uncertainty is the only line.
    pub fn fill_pressure(&self) -> Estimate {
        let fill = self.incident().fill();
        self.estimated(fill.pressure().nominal(), Some(fill.pressure().enclosure()), [0.0, 0.0, 1.0, 0.0, 0.0, 0.0])
    }

    /// T1 as an estimate.
    pub fn fill_temperature(&self) -> Estimate {
        let fill = self.incident().fill();
        self.estimated(fill.temperature().nominal(), Some(fill.temperature().enclosure()), [0.0, 0.0, 0.0, 1.0, 0.0, 0.0])
    }

    fn estimated(&self, value: f64, proven: Option<Enclosure>, slopes: [f64; VARIABLES]) -> Estimate {
        let sensitivities = self.per_line(slopes);
        let combined = || {
            let uncertainties = self.uncertainties(&[sensitivities])?;
            let standard = Inputs::new(&uncertainties, None).ok()?.standard_uncertainty(&sensitivities).ok()?;
            let mut components = [(0.0, f64::INFINITY); LINES];
            for ((component, line), (c, u)) in components.iter_mut().zip(self.budget()).zip(sensitivities.iter().zip(uncertainties)) {
                let degrees = line.uncertainty.map_or(f64::INFINITY, |stated| stated.degrees_of_freedom);
                *component = ((c * u).abs(), degrees);
            }
            let degrees = effective_degrees_of_freedom(&components).unwrap_or(f64::INFINITY);
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
        let rows = [self.sensitivities(first), self.sensitivities(second)];
        let uncertainties = self.uncertainties(&rows)?;
        let [c, d] = rows;
        Inputs::new(&uncertainties, None).ok()?.correlation(&c, &d).ok()?
    }
}
