//! The test gas, as a driver sees it: what the shock into it leaves behind.

use super::driver_error::DriverError;
use super::side::ContactSide;
use super::thermal_side::ThermalSide;
use crate::gas::{Fill, Gamma};
use crate::number::{Ball, Enclosure, Known, Semifield};
use crate::shock::{Entry, Flow, Incident, Jump, Output, ThermalFill, ThermalShock};

/// A fill of the driven tube.
#[derive(Clone, Copy, Debug)]
pub enum TestGas<'a> {
    /// Of constant heat capacity.
    Constant(&'a Fill),
    /// Thermally perfect.
    Thermal(&'a ThermalFill<'a>),
}

impl<'a> From<&'a Fill> for TestGas<'a> {
    fn from(fill: &'a Fill) -> Self {
        Self::Constant(fill)
    }
}

impl<'a> From<&'a ThermalFill<'a>> for TestGas<'a> {
    fn from(fill: &'a ThermalFill<'a>) -> Self {
        Self::Thermal(fill)
    }
}

impl<'a> TestGas<'a> {
    /// p1, Pa.
    pub fn pressure(self) -> Known {
        match self {
            Self::Constant(fill) => fill.pressure(),
            Self::Thermal(fill) => fill.pressure(),
        }
    }

    /// The gas behind the shock for which the quantity `entry` has this value.
    ///
    /// # Errors
    /// [`DriverError`] as for [`Incident::new`] and [`ThermalShock::new`].
    pub fn behind(self, entry: Entry, value: impl Into<Known>) -> Result<BehindShock<'a>, DriverError> {
        let value = value.into();
        Ok(match self {
            Self::Constant(fill) => {
                let shock = Incident::new(fill, entry, value)?;
                BehindShock::of_constant(self, &shock)
            }
            Self::Thermal(fill) => {
                let shock = ThermalShock::new(fill, entry, value)?;
                BehindShock::of_thermal(self, &shock)
            }
        })
    }

    /// The same for M − 1 in a search: the direct relations in balls, without the integers by which [`Incident`] decides last bits.
    pub(super) fn behind_mach_excess(self, excess: f64) -> Result<BehindShock<'a>, DriverError> {
        let Self::Constant(fill) = self else { return self.behind(Entry::MachExcess, excess) };
        let gas = fill.gas();
        let gamma = Gamma::from_excess(gas.heat_capacity_ratio().excess().ball());
        let jump = Jump::from_mach_excess(gamma, Ball::from(excess));
        let flow = Flow::new(jump, gamma, fill.pressure().ball(), fill.temperature().ball(), gas.molar_mass().ball());
        Ok(BehindShock::new(self, |output| flow.evaluate(output)))
    }
}

/// What a driver must push, and what the contact surface needs to know: state 2 and the step of the reflected shock from a rigid wall, as balls, so that
/// no digit is lost on the way.
///
/// Made from an [`Incident`] or a [`ThermalShock`], by `From` or with [`TestGas::behind`]. For inputs with tolerances each quantity is enclosed on its own.
///
/// ```
/// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
/// use endwall::shock::{Entry, Incident};
/// use endwall::tube::BehindShock;
/// let nitrogen = Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.0280134)?;
/// let fill = Fill::new(nitrogen, 10e3, 295.0)?;
/// let shock = Incident::new(&fill, Entry::Mach, 2.0)?;
/// let behind = BehindShock::from(&shock);
/// assert!(behind.pressure().enclosure().encloses(shock.state_2().pressure)); // p2 is 45 kPa exactly
/// assert!(behind.heat_capacity_ratio().contains(1.4));
/// # Ok::<(), endwall::gas::InputError>(())
/// ```
#[derive(Clone, Copy, Debug)]
pub struct BehindShock<'a> {
    pub(super) gas: TestGas<'a>,
    pub(super) mach: Ball,
    pub(super) sound_speed_1: Ball,
    pub(super) pressure: Ball,
    pub(super) gas_speed: Ball,
    pub(super) density: Ball,
    pub(super) sound_speed: Ball,
    pub(super) shock_speed: Ball,
    pub(super) reflected_speed: Ball,
    pub(super) pressure_5: Ball,
    pub(super) sound_speed_5: Ball,
    pub(super) temperature_5: Ball,
    /// p5/p2 − 1.
    pub(super) reflected_excess: Ball,
}

impl<'a> BehindShock<'a> {
    fn of_constant(gas: TestGas<'a>, shock: &Incident) -> Self {
        let fill = shock.fill();
        let inputs =
            [shock.entry().1, fill.pressure(), fill.temperature(), fill.gas().molar_mass(), fill.gas().heat_capacity_ratio().known()];
        if inputs.iter().all(|input| input.exact().is_some()) {
            let flow = shock.ball_flow();
            Self::new(gas, |output| flow.evaluate(output))
        } else {
            Self::new(gas, |output| Ball::around(shock.output(output)))
        }
    }

    fn of_thermal(gas: TestGas<'a>, shock: &ThermalShock) -> Self {
        // At a point the ball has more digits than the enclosure; for a tolerance, or for two answers at a joint, only the enclosure holds all.
        Self::new(gas, |output| if shock.is_single() { shock.ball(output) } else { Ball::around(shock.output(output)) })
    }

    fn new(gas: TestGas<'a>, ball: impl Fn(Output) -> Ball) -> Self {
        let gas_speed = ball(Output::GasSpeed2);
        let (pressure, rise) = (ball(Output::Pressure2), ball(Output::PressureRise));
        let step = ball(Output::Step);
        Self {
            gas,
            mach: ball(Output::Mach),
            sound_speed_1: ball(Output::SoundSpeed1),
            pressure,
            gas_speed,
            density: ball(Output::Density2),
            sound_speed: ball(Output::SoundSpeed2),
            shock_speed: ball(Output::ShockSpeed),
            reflected_speed: ball(Output::ReflectedSpeed),
            pressure_5: ball(Output::Pressure5),
            sound_speed_5: ball(Output::SoundSpeed5),
            temperature_5: ball(Output::Temperature5),
            reflected_excess: (step - rise) / pressure,
        }
    }

    /// The test gas.
    pub fn test_gas(&self) -> TestGas<'a> {
        self.gas
    }

    /// M of the incident shock.
    pub fn mach(&self) -> Ball {
        self.mach
    }

    /// p2, Pa.
    pub fn pressure(&self) -> Ball {
        self.pressure
    }

    /// u2, m/s.
    pub fn gas_speed(&self) -> Ball {
        self.gas_speed
    }

    /// ρ2, kg/m³.
    pub fn density(&self) -> Ball {
        self.density
    }

    /// a2, m/s.
    pub fn sound_speed(&self) -> Ball {
        self.sound_speed
    }

    /// p5/p2 of the reflection from a rigid wall.
    pub fn reflected_over_incident_pressure(&self) -> Ball {
        Ball::whole(1) + self.reflected_excess
    }

    /// γ2 = ρ2 a2²/p2, of the heat capacity with which state 2 was computed.
    pub fn heat_capacity_ratio(&self) -> Enclosure {
        match self.gas {
            TestGas::Constant(fill) => fill.gas().heat_capacity_ratio().enclosure(),
            TestGas::Thermal(_) => (self.density * self.sound_speed.squared() / self.pressure).enclosure(),
        }
    }

    /// γ − 1, where it is constant.
    pub(super) fn constant_gamma(&self) -> Option<Gamma<Ball>> {
        match self.gas {
            TestGas::Constant(fill) => Some(Gamma::from_excess(fill.gas().heat_capacity_ratio().excess().ball())),
            TestGas::Thermal(_) => None,
        }
    }

    /// The gas in state 5, for the waves into it.
    pub(super) fn side_5(&self) -> ContactSide<'a> {
        let constant = |excess| ContactSide::Constant { gamma: Gamma::from_excess(excess), sound_speed: self.sound_speed_5 };
        match self.gas {
            TestGas::Constant(fill) => constant(fill.gas().heat_capacity_ratio().excess().ball()),
            TestGas::Thermal(fill) => match fill.constant_heat_capacity_5() {
                Some(c) => constant(Ball::whole(1) / (c - Ball::whole(1))),
                None => ContactSide::Thermal(ThermalSide::new(fill.gas(), self.temperature_5)),
            },
        }
    }
}

impl<'a> From<&'a Incident> for BehindShock<'a> {
    fn from(shock: &'a Incident) -> Self {
        Self::of_constant(TestGas::Constant(shock.fill()), shock)
    }
}

impl<'a> From<&'a ThermalShock<'a>> for BehindShock<'a> {
    fn from(shock: &'a ThermalShock<'a>) -> Self {
        Self::of_thermal(TestGas::Thermal(shock.fill()), shock)
    }
}
