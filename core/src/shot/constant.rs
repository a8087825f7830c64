//! Slopes of the outputs for a gas of constant heat capacity, at fixed shock speed.

use super::reduction::{EndWall, VARIABLES};
use crate::gas::Gamma;
use crate::number::{Dual, Enclosure};
use crate::shock::{Approach, Entry, Flow, Incident, Jump, Output, Problem, WallReflection, Wave};

/// A value with its slopes with respect to all inputs.
type Variable = Dual<f64, VARIABLES>;

/// The shock of a reduction with its wall.
pub(super) struct Constant<'r> {
    pub incident: &'r Incident,
    pub reflection: Option<&'r WallReflection>,
    pub wall: &'r EndWall,
}

impl Constant<'_> {
    /// Slopes of an output with respect to shock speed, γ, p1, T1, W and the wall, at fixed shock speed.
    pub(super) fn slopes(&self, output: Output) -> [f64; VARIABLES] {
        let problem = self.problem();
        match output {
            // An input itself.
            Output::ShockSpeed => problem.entry.slopes(),
            output => self.evaluate(&problem, output).slopes(),
        }
    }

    /// The nominal inputs as variables.
    fn problem(&self) -> Problem<Variable> {
        let nominal = self.incident.nominal();
        Problem {
            gamma: Gamma::from_excess(Variable::variable(nominal.gamma.d, 1)),
            entry: Variable::variable(nominal.entry, 0),
            pressure: Variable::variable(nominal.pressure, 2),
            temperature: Variable::variable(nominal.temperature, 3),
            molar_mass: Variable::variable(nominal.molar_mass, 4),
        }
    }

    fn evaluate(&self, problem: &Problem<Variable>, output: Output) -> Variable {
        let z = problem.mach_squared_excess(Entry::ShockSpeed, self.incident.branch());
        let rigid = || {
            let jump = Jump::new(problem.gamma, z);
            Flow::new(jump, problem.gamma, problem.pressure, problem.temperature, problem.molar_mass).evaluate(output)
        };
        match self.reflection.map(|reflection| reflection.wave) {
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
        let speed = self.reflection.map_or(0.0, |reflection| reflection.state.gas_speed.middle());
        match self.wall {
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

    /// The enclosure of an output that a moving wall changes.
    pub(super) fn at_wall(&self, output: Output) -> Option<Enclosure> {
        let reflection = self.reflection?;
        match output {
            Output::Pressure5 => Some(reflection.state.pressure),
            Output::Temperature5 => Some(reflection.state.temperature),
            Output::Density5 => Some(reflection.state.density),
            Output::SoundSpeed5 => Some(reflection.state.sound_speed),
            Output::ReflectedSpeed => Some(reflection.front_speed),
            Output::ReflectedMach => Some(reflection.mach),
            Output::Step => Some(reflection.state.pressure - self.incident.fill().pressure().enclosure()),
            _ => None,
        }
    }

    /// Velocity of the wall, and its slopes.
    pub(super) fn wall_velocity(&self) -> (Enclosure, [f64; VARIABLES]) {
        let problem = self.problem();
        let z = problem.mach_squared_excess(Entry::ShockSpeed, self.incident.branch());
        let enclosure = self.reflection.map_or(Enclosure::from(0.0), |reflection| reflection.state.gas_speed);
        (enclosure, self.wall_speed(&problem, z).slopes())
    }
}
