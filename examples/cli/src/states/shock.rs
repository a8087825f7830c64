//! The shock behind an answer, for either kind of gas.

use endwall::gas::{Fill, Gas, HeatCapacityRatio};
use endwall::number::{Enclosure, Known};
use endwall::shock::{Incident, Output, State, ThermalFill, ThermalShock, WallReflection};
use endwall::shot::DrivenGas;

use super::input::{Input, Wall};
use crate::failure::Failure;
use crate::options;

/// A shock that is solved.
#[expect(clippy::large_enum_variant, reason = "there is one of them")]
pub enum Shock<'g> {
    /// Into a gas of constant heat capacity; the reflection where the wall is not rigid.
    Constant(Incident, Option<WallReflection>),
    /// Into a gas whose heat capacity depends on temperature, with its wall.
    Thermal(ThermalShock<'g>),
}

impl Shock<'_> {
    /// An output, which for a constant heat capacity belongs to a rigid wall.
    pub fn output(&self, output: Output) -> Enclosure {
        match self {
            Self::Constant(incident, _) => incident.output(output),
            Self::Thermal(shock) => shock.output(output),
        }
    }

    /// The double nearest to it.
    pub fn nearest(&self, output: Output) -> f64 {
        match self {
            Self::Constant(incident, _) => incident.nearest(output),
            Self::Thermal(shock) => shock.nearest(output),
        }
    }

    /// The fill.
    pub fn state_1(&self) -> State {
        match self {
            Self::Constant(incident, _) => incident.state_1(),
            Self::Thermal(shock) => shock.state_1(),
        }
    }
}

impl Input<'_> {
    /// Solves the shock and calls a function with it and the source of the gas data.
    pub fn with_shock<T>(&self, compute: impl FnOnce(&Shock<'_>, &str) -> Result<T, Failure>) -> Result<T, Failure> {
        if let Some(gas) = &self.constant {
            return compute(&self.constant_shock(gas.heat_capacity_ratio, gas.molar_mass)?, gas.source);
        }
        let computed = self.shot.with_driven_gas(|gas, notes| {
            let DrivenGas::ThermallyPerfect { gas, model, .. } = gas else {
                return Err(Failure::plain("the gas has a constant heat capacity", "leave --heat-capacity out"));
            };
            let fill = ThermalFill::new(gas, model, self.pressure, self.temperature).map_err(|error| self.refused(error))?;
            let shock = ThermalShock::new(&fill, self.entry, self.value).map_err(|error| self.unproven(error))?;
            let shock = match self.wall {
                None => Ok(shock),
                Some(Wall::Speed(speed)) => shock.reflected_from_wall(speed),
                Some(Wall::Impedance(impedance)) => shock.reflected_from_yielding_wall(impedance),
            };
            let shock = shock.map_err(|error| self.unproven(error))?;
            compute(&Shock::Thermal(shock), &notes.source)
        });
        computed.map_err(|error| options::refused(&error, &self.arguments.gas.typed()))?
    }

    fn constant_shock(&self, ratio: Known, mass: Known) -> Result<Shock<'static>, Failure> {
        let refused = |error| self.refused(error);
        let gas = HeatCapacityRatio::new(ratio).and_then(|ratio| Gas::new(ratio, mass)).map_err(refused)?;
        let fill = Fill::new(gas, self.pressure, self.temperature).map_err(refused)?;
        let incident = Incident::new(&fill, self.entry, self.value).map_err(refused)?;
        let reflection = match self.wall {
            None => return Ok(Shock::Constant(incident, None)),
            Some(Wall::Speed(speed)) => incident.reflected_from_wall(speed),
            Some(Wall::Impedance(impedance)) => incident.reflected_from_yielding_wall(impedance),
        };
        Ok(Shock::Constant(incident, Some(reflection.map_err(refused)?)))
    }
}
