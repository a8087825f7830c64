//! The same shocks without proof, in f64 or f32.

use super::approximate::approximate;
use super::flow::{Ranges, ThermalFlow, reflected_stage};
use super::setting::Setting;
use super::stage::{GivenSpeed, Stage};
use crate::gas::{GasSlopes, HeatCapacity, HeatCapacityModel};
use crate::number::{Ball, Elementary, Semifield};

/// A fill of thermally perfect gas in plain f64 or f32: no proof, no tolerance, fast. Made by [`ThermalFill::plain`](super::ThermalFill::plain).
///
/// In f64 outputs are within a few units in the last place times the condition of the problem. In f32, for every species of the table, every model and
/// Mach 1.02 to 6, T5 is within 2e-6 and p5 within 2.5e-6, relative; above 6000 K T5 is within 6e-6, since the polynomials there are sums of much
/// larger terms (measured; a test says so).
#[derive(Clone, Copy, Debug)]
pub struct PlainFill<S> {
    pub(super) model: HeatCapacityModel,
    pub(super) pressure: S,
    pub(super) temperature: S,
    pub(super) molar_mass: S,
    pub(super) full: HeatCapacity<S>,
    pub(super) frozen: S,
}

impl<S: Elementary + Into<f64>> PlainFill<S> {
    /// The shock of this speed, m/s, and its reflection from a wall of this velocity, m/s; `None` where the speed is not above the sound speed or a
    /// temperature leaves the data.
    ///
    /// ```
    /// use endwall::gas::species::table;
    /// use endwall::gas::{HeatCapacityModel, Portion, ThermallyPerfectGas};
    /// use endwall::shock::{Output, ThermalFill};
    /// let nitrogen = [Portion { species: &table::N2, fraction: "1".parse()? }];
    /// let gas = ThermallyPerfectGas::new(&nitrogen)?;
    /// let fill = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 10e3, 295.0)?;
    /// let double = fill.plain(|x| x).reflected(1050.0, 0.0).unwrap();
    /// let single = fill.plain(|x| x as f32).reflected(1050.0, 0.0).unwrap();
    /// let (t5, t5_single) = (double.flow().evaluate(Output::Temperature5), single.flow().evaluate(Output::Temperature5));
    /// assert!((f64::from(t5_single) / t5 - 1.0).abs() < 2e-6);
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn reflected(&self, speed: S, wall_speed: S) -> Option<PlainShock<S>> {
        let setting = self.setting(self.temperature.into(), wall_speed);
        PlainShock::new(&setting, &setting.at_speed(speed))
    }
}

impl<S: Elementary> PlainFill<S> {
    /// The heat capacities of the model; T1 also as the double that chooses its range.
    pub(super) fn setting(&self, kelvin: f64, wall_speed: S) -> Setting<S> {
        let first = self.full.index_at(kelvin);
        let frozen = || HeatCapacity::constant(self.frozen);
        let (incident, reflected) = match self.model {
            HeatCapacityModel::Constant => {
                let constant = HeatCapacity::constant(self.full.value(first, self.temperature));
                (constant, constant)
            }
            HeatCapacityModel::Equilibrium => (self.full, self.full),
            HeatCapacityModel::Frozen => (frozen(), frozen()),
            HeatCapacityModel::FrozenThenEquilibrium => (frozen(), self.full),
        };
        let lagging = (self.model == HeatCapacityModel::FrozenThenEquilibrium).then_some(first);
        let Self { pressure, temperature, molar_mass, .. } = *self;
        let scale = ThermalFlow::scale_of(temperature, molar_mass);
        Setting { pressure, temperature, molar_mass, scale, wall_speed, incident, reflected, lagging }
    }
}

impl PlainFill<f64> {
    /// The fill with more pressure, Pa, and a higher temperature, K, for a Monte Carlo run.
    pub(crate) fn warmer(self, pressure: f64, temperature: f64) -> Self {
        Self { pressure: self.pressure + pressure, temperature: self.temperature + temperature, ..self }
    }

    /// The fill with its mixture changed by this much of a change.
    pub(crate) fn changed(&self, slopes: &GasSlopes<f64>, by: f64) -> Self {
        Self {
            full: self.full.plus(&slopes.full, by),
            frozen: self.frozen + by * slopes.frozen,
            molar_mass: self.molar_mass + by * slopes.molar_mass,
            ..*self
        }
    }
}

/// A shock and its reflection in plain f64 or f32, with the number of Newton steps that both took.
#[derive(Clone, Copy, Debug)]
pub struct PlainShock<S> {
    flow: ThermalFlow<S>,
    pub(super) compressions: [S; 2],
    pub(super) ranges: Ranges,
    steps: [u32; 2],
}

impl<S: Elementary + Into<f64>> PlainShock<S> {
    /// `None` where there is no shock or a temperature leaves the data.
    pub(super) fn new(setting: &Setting<S>, incident: &GivenSpeed<S>) -> Option<Self> {
        let first = setting.incident.index_at(setting.temperature.into());
        let start = incident.with_constant(setting.incident.value(first, setting.temperature));
        let (compression, second, incident_steps) = approximate(incident, &setting.incident, first, setting.temperature, start)?;
        let behind = setting.temperature + setting.temperature * incident.temperature_excess(compression);
        let ahead = setting.reflected.index_at(behind.into());
        let ranges = Ranges { first, second, ahead, fifth: 0 };
        let (reflected, behind, closing_speed) = reflected_stage(setting, incident, ranges, compression);
        let closing: f64 = closing_speed.into();
        if closing <= 0.0 || closing.is_nan() {
            return None;
        }
        let start = reflected.with_constant(setting.reflected.value(ahead, behind));
        let (reflected_compression, fifth, reflected_steps) = approximate(&reflected, &setting.reflected, ahead, behind, start)?;
        let ranges = Ranges { fifth, ..ranges };
        let mean = setting.reflected.mean(ahead, behind, reflected.temperature_excess(reflected_compression), fifth);
        Some(Self {
            flow: ThermalFlow::new(setting, incident, ranges, compression, (reflected_compression, mean)),
            compressions: [compression, reflected_compression],
            ranges,
            steps: [incident_steps, reflected_steps],
        })
    }
}

impl<S> PlainShock<S> {
    /// The outputs.
    pub fn flow(&self) -> &ThermalFlow<S> {
        &self.flow
    }

    /// Newton steps of the incident and of the reflected shock.
    pub fn steps(&self) -> [u32; 2] {
        self.steps
    }
}

impl super::ThermalFill<'_> {
    /// The nominal fill in plain numbers, each made from the nearest double.
    pub fn plain<S: Semifield>(&self, convert: impl Fn(f64) -> S + Copy) -> PlainFill<S> {
        let balls = self.balls();
        let plain = |x: Ball| convert(x.nearest());
        PlainFill {
            model: balls.model,
            pressure: plain(balls.pressure),
            temperature: plain(balls.temperature),
            molar_mass: plain(balls.molar_mass),
            full: balls.full.map(plain),
            frozen: plain(balls.frozen),
        }
    }
}
