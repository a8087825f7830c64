//! Slopes of the outputs with respect to the inputs, by the implicit function rule.

use super::flow::{Ranges, ThermalFlow, reflected_stage};
use super::plain::PlainShock;
use super::setting::Setting;
use super::shock::ThermalFill;
use super::stage::{GivenSpeed, Stage, residual};
use crate::gas::{GasSlopes, HeatCapacity, HeatCapacityModel, MixtureChange};
use crate::number::{Ball, Dual, ElementarySlopes};

/// An input of a shock into a thermally perfect gas, along which a slope is taken; all others are held, the shock speed among them.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum ThermalInput {
    /// Shock speed.
    ShockSpeed,
    /// p1.
    FillPressure,
    /// T1, also where the heat capacity of the model is taken at it.
    FillTemperature,
    /// Velocity of the end wall.
    WallSpeed,
    /// Composition, or the data of the species.
    Mixture(MixtureChange),
}

/// One number with one slope.
type Variable = Dual<f64, 1>;

impl ThermalFill<'_> {
    /// The fill with slopes along one input.
    fn variable_setting(&self, plain: &Setting<f64>, input: ThermalInput) -> Option<Setting<Variable>> {
        let mut setting = plain.map(Variable::constant);
        let along = |value: f64| Variable::variable(value, 0);
        let temperature = Ball::from(plain.temperature);
        match input {
            ThermalInput::ShockSpeed => {}
            ThermalInput::FillPressure => setting.pressure = along(plain.pressure),
            ThermalInput::WallSpeed => setting.wall_speed = along(plain.wall_speed),
            ThermalInput::FillTemperature => {
                setting.temperature = along(plain.temperature);
                let full = self.gas().heat_capacity();
                let scaled = |of: Ball| of.nearest() / plain.temperature;
                let constant = |c: &HeatCapacity<f64>, slope: f64| {
                    HeatCapacity::constant(Variable::with_slopes(c.value(0, plain.temperature), [slope]))
                };
                match self.model() {
                    HeatCapacityModel::Equilibrium => {}
                    HeatCapacityModel::Constant => {
                        let slope = scaled(full.scaled_slope(full.index_at(plain.temperature), temperature));
                        setting.incident = constant(&plain.incident, slope);
                        setting.reflected = setting.incident;
                    }
                    HeatCapacityModel::Frozen => {
                        setting.incident = constant(&plain.incident, scaled(self.gas().frozen_scaled_slope(temperature)));
                        setting.reflected = setting.incident;
                    }
                    HeatCapacityModel::FrozenThenEquilibrium => {
                        setting.incident = constant(&plain.incident, scaled(self.gas().frozen_scaled_slope(temperature)));
                    }
                }
            }
            ThermalInput::Mixture(change) => {
                let GasSlopes { full, frozen, molar_mass } = self.gas().slopes(change, temperature)?.plain();
                setting.molar_mass = Variable::with_slopes(plain.molar_mass, [molar_mass]);
                let polynomial = |c: &HeatCapacity<f64>| c.with_slopes(&full);
                let constant = |c: &HeatCapacity<f64>, slope: f64| {
                    HeatCapacity::constant(Variable::with_slopes(c.value(0, plain.temperature), [slope]))
                };
                (setting.incident, setting.reflected) = match self.model() {
                    HeatCapacityModel::Equilibrium => (polynomial(&plain.incident), polynomial(&plain.reflected)),
                    HeatCapacityModel::Constant => {
                        let own = constant(&plain.incident, full.value(full.index_at(plain.temperature), plain.temperature));
                        (own, own)
                    }
                    HeatCapacityModel::Frozen => {
                        let own = constant(&plain.incident, frozen);
                        (own, own)
                    }
                    HeatCapacityModel::FrozenThenEquilibrium => (constant(&plain.incident, frozen), polynomial(&plain.reflected)),
                };
            }
        }
        Some(setting)
    }
}

/// A compression with its slopes, for a stage with slopes: those of the residual at fixed ε, over its slope in ε. `values` is the same stage without
/// slopes.
fn implicit<S: ElementarySlopes, const N: usize>(
    stage: &impl Stage<Dual<S, N>>,
    values: &impl Stage<Dual<S, 1>>,
    heat_capacity: &HeatCapacity<Dual<S, N>>,
    [from, to]: [usize; 2],
    temperature: Dual<S, N>,
    compression: S,
) -> Dual<S, N> {
    let fixed = Dual::constant(compression);
    let mean = heat_capacity.mean(from, temperature, stage.temperature_excess(fixed), to);
    let along = residual(stage, fixed, mean).slopes();
    let e = Dual::variable(compression, 0);
    let held = heat_capacity.map(|coefficient| Dual::<S, 1>::constant(coefficient.value()));
    let mean = held.mean(from, Dual::constant(temperature.value()), values.temperature_excess(e), to);
    let [slope] = residual(values, e, mean).slopes();
    Dual::with_slopes(compression, along.map(|own| -(own / slope)))
}

/// The flow with slopes of all outputs, from the compressions at the values of the inputs.
pub(super) fn flow_with_slopes<S: ElementarySlopes, const N: usize>(
    setting: &Setting<Dual<S, N>>,
    incident: &GivenSpeed<Dual<S, N>>,
    ranges: Ranges,
    [compression, reflected]: [S; 2],
) -> ThermalFlow<Dual<S, N>> {
    let value = |x: Dual<S, N>| Dual::<S, 1>::constant(x.value());
    let (heat_capacity, temperature) = (&setting.incident, setting.temperature);
    let along = [ranges.first, ranges.second];
    let compression = implicit(incident, &incident.map(value), heat_capacity, along, temperature, compression);
    let (stage, behind, _) = reflected_stage(setting, incident, ranges, compression);
    let along = [ranges.ahead, ranges.fifth];
    let reflected = implicit(&stage, &stage.map(value), &setting.reflected, along, behind, reflected);
    let mean = setting.reflected.mean(ranges.ahead, behind, stage.temperature_excess(reflected), ranges.fifth);
    ThermalFlow::new(setting, incident, ranges, compression, (reflected, mean))
}

impl ThermalFill<'_> {
    /// The flow at a shock speed with the slopes of all outputs along one input, in plain f64; `None` where the shock leaves the data.
    pub(crate) fn slopes(&self, speed: f64, wall_speed: f64, input: ThermalInput) -> Option<ThermalFlow<Variable>> {
        let plain = self.setting(Ball::from(wall_speed)).map(Ball::nearest);
        let shock = PlainShock::new(&plain, &plain.at_speed(speed))?;
        let setting = self.variable_setting(&plain, input)?;
        let own = if input == ThermalInput::ShockSpeed { Variable::variable(speed, 0) } else { Variable::constant(speed) };
        Some(flow_with_slopes(&setting, &setting.at_speed(own), shock.ranges, shock.compressions))
    }
}
