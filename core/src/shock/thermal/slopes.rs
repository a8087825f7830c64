//! Slopes of the outputs with respect to the inputs, by the implicit function rule.

use super::flow::{Ranges, ThermalFlow, reflected_stage};
use super::plain::{PlainFill, PlainShock};
use super::setting::Setting;
use super::shock::ThermalFill;
use super::stage::{GivenSpeed, Stage, residual};
use crate::gas::{GasSlopes, HeatCapacity, MixtureChange, molar_gas_constant};
use crate::number::{Ball, Dual, ElementarySlopes, Semifield};

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
    fn variable_fill(&self, input: ThermalInput) -> Option<PlainFill<Variable>> {
        let plain = self.plain(|x| x);
        let mut fill = self.plain(Variable::constant);
        let temperature = Ball::from(plain.temperature);
        match input {
            ThermalInput::ShockSpeed | ThermalInput::WallSpeed => {}
            ThermalInput::FillPressure => fill.pressure = Variable::variable(plain.pressure, 0),
            ThermalInput::FillTemperature => {
                fill.temperature = Variable::variable(plain.temperature, 0);
                let slope = self.gas().frozen_scaled_slope(temperature).nearest() / plain.temperature;
                fill.frozen = Variable::with_slopes(plain.frozen, [slope]);
            }
            ThermalInput::Mixture(change) => {
                let GasSlopes { full, frozen, molar_mass } = self.gas().slopes(change, temperature)?.plain();
                // d(R/W) = −(R/W)²/R dW.
                let slope = -plain.gas_constant.squared() / molar_gas_constant::<f64>() * molar_mass;
                fill.gas_constant = Variable::with_slopes(plain.gas_constant, [slope]);
                fill.full = plain.full.with_slopes(&full);
                fill.frozen = Variable::with_slopes(plain.frozen, [frozen]);
            }
        }
        Some(fill)
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
        let own = |value, of| if input == of { Variable::variable(value, 0) } else { Variable::constant(value) };
        let fill = self.variable_fill(input)?;
        let setting = fill.setting(self.balls().temperature.side(), own(wall_speed, ThermalInput::WallSpeed));
        let incident = setting.at_speed(own(speed, ThermalInput::ShockSpeed));
        Some(flow_with_slopes(&setting, &incident, shock.ranges, shock.compressions))
    }
}
