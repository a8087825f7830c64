//! Reflection from a wall that moves: a yielding plate, a piston.

use super::entry::Problem;
use super::incident::Incident;
use super::output::{Flow, Output};
use super::relations::Jump;
use super::state::State;
use crate::gas::{Gamma, InputError, Parameter, Rule};
use crate::number::{Ball, Dual, Elementary, Enclosure, Known, Semifield, bounds};

/// What runs back from the wall.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum Wave {
    /// The wall is slower than the gas: a shock.
    Shock,
    /// The wall recedes faster than the gas: an expansion.
    Expansion,
    /// The wall recedes so fast that the gas cannot follow: an expansion to vacuum.
    Vacuum,
    /// The wall speed cannot be told from the gas speed: the enclosures cover a weak wave of either kind.
    Weak,
}

/// The state between the wall and the wave that runs back from it.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct WallReflection {
    /// What runs back.
    pub wave: Wave,
    /// The state at the wall; the gas moves with it. For [`Wave::Vacuum`] pressure, temperature, density and sound speed are zero.
    pub state: State,
    /// Speed of the wave's front in the laboratory, away from the wall's rest position, m/s: the shock, or the head of the expansion.
    pub front_speed: Enclosure,
    /// Mach number of the shock relative to the gas ahead of it; 1 for an expansion.
    pub mach: Enclosure,
}

/// State 2 and the speed of the gas toward the wall, in one kind of number.
#[derive(Clone, Copy, Debug)]
pub struct Approach<S> {
    gamma: Gamma<S>,
    flow: Flow<S>,
    fill_pressure: S,
    /// u2 − V.
    closing_speed: S,
}

impl<S: Elementary> Approach<S> {
    /// The gas behind the shock of a problem with z = M² − 1, and a wall of velocity V along the incident direction.
    pub fn new(problem: &Problem<S>, z: S, wall_speed: S) -> Self {
        let flow = Flow::new(Jump::new(problem.gamma, z), problem.gamma, problem.pressure, problem.temperature, problem.molar_mass);
        let closing_speed = flow.evaluate(Output::GasSpeed2) - wall_speed;
        Self { gamma: problem.gamma, flow, fill_pressure: problem.pressure, closing_speed }
    }

    /// u2 − V: a shock runs back if it is positive, an expansion if it is negative.
    pub fn closing_speed(&self) -> S {
        self.closing_speed
    }

    /// An output of state 5 or of the reflected wave, where a shock or an expansion runs back; outputs that the wall does not change are those
    /// of the incident shock, and ratios of state 5 are not offered (`None`).
    pub fn evaluate(&self, output: Output, shock: bool) -> Option<S> {
        match output {
            Output::Step => Some(self.evaluate(Output::Pressure5, shock)? - self.fill_pressure),
            Output::ReflectedMachExcess => Some(self.evaluate(Output::ReflectedMach, shock)? - S::whole(1)),
            _ if shock => self.shock(output),
            _ => self.expansion(output),
        }
    }

    /// With s = (γ+1)(u2 − V)/(4a2): `M_R` = s + √(1 + s²), `M_R`² − 1 = 2s·`M_R`; the jump across the reflected shock is the stationary one.
    ///
    /// From the relation between the gas speed behind a shock and its Mach number, u = 2a(M² − 1)/((γ+1)M), solved for M.
    fn shock(&self, output: Output) -> Option<S> {
        let sound_speed = self.flow.evaluate(Output::SoundSpeed2);
        let s = self.gamma.plus_one() * self.closing_speed / (S::whole(4) * self.gamma.q * sound_speed);
        let mach = s + (S::whole(1) + s.squared()).sqrt();
        let jump = Jump::new(self.gamma, (s * mach).doubled());
        Some(match output {
            Output::Pressure5 => self.flow.evaluate(Output::Pressure2) * jump.pressure_ratio(),
            Output::Temperature5 => self.flow.evaluate(Output::Temperature2) * jump.temperature_ratio(),
            Output::Density5 => self.flow.evaluate(Output::Density2) * jump.density_ratio(),
            Output::SoundSpeed5 => sound_speed * jump.temperature_ratio().sqrt(),
            Output::ReflectedSpeed => mach * sound_speed - self.flow.evaluate(Output::GasSpeed2),
            Output::ReflectedMach => mach,
            _ => return None,
        })
    }

    /// Isentropic, with β = a5/a2: T5/T2 = β², ρ5/ρ2 = β^(2/(γ−1)), p5/p2 = β^(2γ/(γ−1)).
    fn expansion(&self, output: Output) -> Option<S> {
        let sound_speed = self.flow.evaluate(Output::SoundSpeed2);
        // From the invariant along the characteristic that crosses the expansion: β = 1 + (γ−1)(u2 − V)/(2a2).
        let beta = S::whole(1) + self.gamma.d * self.closing_speed / (self.gamma.q * sound_speed).doubled();
        let exponent = self.gamma.q.doubled() / self.gamma.d;
        Some(match output {
            Output::Pressure5 => self.flow.evaluate(Output::Pressure2) * beta.pow(exponent * self.gamma.value()),
            Output::Temperature5 => self.flow.evaluate(Output::Temperature2) * beta.squared(),
            Output::Density5 => self.flow.evaluate(Output::Density2) * beta.pow(exponent),
            Output::SoundSpeed5 => sound_speed * beta,
            Output::ReflectedSpeed => sound_speed - self.flow.evaluate(Output::GasSpeed2),
            Output::ReflectedMach => S::whole(1),
            _ => return None,
        })
    }
}

impl Incident {
    /// Reflection from an end wall that moves with a constant velocity V along the incident direction (positive: it recedes; m/s).
    ///
    /// For V < u2 a shock runs back, for V > u2 an expansion, and for V ≥ u2 + 2a2/(γ−1) the gas cannot follow: vacuum. Enclosures of at most
    /// 2 ulp for exact inputs, the range for tolerances. V = 0 is the rigid wall, for which [`Incident::state_5`] is optimal.
    ///
    /// # Errors
    /// [`InputError`] for a velocity that is not finite or beyond 2^±200.
    ///
    /// ```
    /// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
    /// use endwall::shock::{Entry, Incident, Wave};
    /// let gas = Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.0289652)?;
    /// let shock = Incident::new(&Fill::new(gas, 100e3, 295.0)?, Entry::Mach, 2.0)?;
    /// let rigid = shock.reflected_from_wall(0.0)?;
    /// assert!(rigid.state.pressure.contains(1.5e6) && rigid.wave == Wave::Shock);
    /// let yielding = shock.reflected_from_wall(100.0)?;
    /// assert!(yielding.state.pressure.certainly_less(rigid.state.pressure));
    /// assert_eq!(shock.reflected_from_wall(600.0)?.wave, Wave::Expansion);
    /// assert_eq!(shock.reflected_from_wall(4000.0)?.wave, Wave::Vacuum);
    /// # Ok::<(), endwall::gas::InputError>(())
    /// ```
    pub fn reflected_from_wall(&self, wall_speed: impl Into<Known>) -> Result<WallReflection, InputError> {
        let wall_speed = wall_speed.into();
        let velocity = wall_speed.enclosure();
        if !velocity.is_proven() || velocity.magnitude() > Ball::LARGEST_ENTRY {
            let rule = Rule::Between(-Ball::LARGEST_ENTRY, Ball::LARGEST_ENTRY);
            return Err(InputError { parameter: Parameter::WallSpeed, value: wall_speed.nominal(), rule });
        }
        Ok(self.at_wall(wall_speed))
    }

    /// Reflection from a wall whose velocity has been checked.
    pub(super) fn at_wall(&self, wall_speed: Known) -> WallReflection {
        let velocity = wall_speed.enclosure();
        let wave = self.wave(velocity);
        let answer = |output| match (wave, output) {
            (Wave::Shock, _) => self.wall_output(wall_speed, output, true),
            (Wave::Weak, _) => self.wall_output(wall_speed, output, true).hull(self.wall_output(wall_speed, output, false)),
            (Wave::Expansion, _) | (Wave::Vacuum, Output::ReflectedSpeed | Output::ReflectedMach) => {
                self.wall_output(wall_speed, output, false)
            }
            (Wave::Vacuum, _) => Enclosure::whole(0),
        };
        WallReflection {
            wave,
            state: State {
                pressure: answer(Output::Pressure5),
                temperature: answer(Output::Temperature5),
                density: answer(Output::Density5),
                sound_speed: answer(Output::SoundSpeed5),
                gas_speed: velocity,
            },
            front_speed: answer(Output::ReflectedSpeed),
            mach: answer(Output::ReflectedMach),
        }
    }

    /// The kind of wave, from proven bounds on u2 − V and on β.
    fn wave(&self, velocity: Enclosure) -> Wave {
        let closing_speed = self.output(Output::GasSpeed2) - velocity;
        let excess = self.fill().gas().heat_capacity_ratio().excess().enclosure();
        let beta = Enclosure::whole(1) + excess * closing_speed / self.output(Output::SoundSpeed2).doubled();
        if closing_speed.low() > 0.0 {
            Wave::Shock
        } else if closing_speed.high() >= 0.0 {
            Wave::Weak
        } else if beta.low() > 0.0 {
            Wave::Expansion
        } else {
            // A tolerance that reaches vacuum is reported as vacuum at its far end only where all of it is.
            if beta.high() <= 0.0 { Wave::Vacuum } else { Wave::Expansion }
        }
    }

    fn wall_output(&self, wall_speed: Known, output: Output, shock: bool) -> Enclosure {
        if self.is_exact() && wall_speed.exact().is_some() {
            return self.wall_ball(wall_speed.ball(), output, shock).enclosure();
        }
        let slopes = |[value, excess, pressure, temperature, molar_mass, wall_speed]: [Dual<Enclosure, 6>; 6]| {
            let (problem, z) = self.over_box([value, excess, pressure, temperature, molar_mass]);
            let over_box = Approach::new(&problem, z, wall_speed).evaluate(output, shock);
            over_box.unwrap_or(Dual::with_slopes(Enclosure::UNKNOWN, [Enclosure::UNKNOWN; 6]))
        };
        let [value, excess, pressure, temperature, molar_mass] = self.inputs();
        bounds([value, excess, pressure, temperature, molar_mass, wall_speed], slopes, |inputs| {
            let [value, excess, pressure, temperature, molar_mass, wall_speed] = inputs;
            let point = self.at([value, excess, pressure, temperature, molar_mass]);
            point.map_or(Enclosure::UNKNOWN, |point| point.wall_ball(wall_speed.ball(), output, shock).enclosure())
        })
    }

    /// At a point.
    pub(super) fn wall_ball(&self, wall_speed: Ball, output: Output, shock: bool) -> Ball {
        Approach::new(&self.ball_problem(), self.z(), wall_speed).evaluate(output, shock).unwrap_or(Ball::UNKNOWN)
    }
}
