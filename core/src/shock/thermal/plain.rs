//! The same shocks without proof, in f64 or f32.

use super::approximate::{Approximation, approximate};
use super::flow::{Ranges, ThermalFlow, reflected_stage_at};
use super::setting::Setting;
use super::stage::{GivenSpeed, GivenSpeedChange};
use crate::gas::{GasSlopes, HeatCapacity, HeatCapacityModel, molar_gas_constant};
use crate::number::{Ball, Elementary, Semifield};

/// A fill of thermally perfect gas in plain f64 or f32: no proof, no tolerance, fast. Made by [`ThermalFill::plain`](super::ThermalFill::plain).
///
/// In f64 outputs are within a few units in the last place times the condition of the problem. In f32, for every species of the table, every model and
/// Mach 1.02 to 6, T5 and p5 are within 1e-6, relative: temperatures follow from the energy, which sums positive terms, and not from the momentum. Above
/// 6000 K T5 is within 6e-6 and p5 within 3e-6, since the polynomials there are sums of terms up to a hundred times as large as the heat capacity
/// (measured; a test says so).
#[derive(Clone, Copy, Debug)]
pub struct PlainFill<S> {
    pub(super) model: HeatCapacityModel,
    pub(super) pressure: S,
    pub(super) temperature: S,
    /// R/W, J/(kg K).
    pub(super) gas_constant: S,
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
    /// assert!((f64::from(t5_single) / t5 - 1.0).abs() < 1e-6);
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn reflected(&self, speed: S, wall_speed: S) -> Option<PlainShock<S>> {
        let setting = self.setting(self.temperature.into(), wall_speed);
        PlainShock::new(&setting, &setting.at_speed(speed))
    }
}

impl<S: Elementary> PlainFill<S> {
    /// `c_p`/R at T1 across the incident shock; T1 also as the double that chooses its range.
    pub(super) fn heat_capacity(&self, kelvin: f64) -> S {
        match self.model {
            HeatCapacityModel::Constant | HeatCapacityModel::Equilibrium => self.full.value(self.full.index_at(kelvin), self.temperature),
            HeatCapacityModel::Frozen | HeatCapacityModel::FrozenThenEquilibrium => self.frozen,
        }
    }

    /// The heat capacities of the model.
    pub(super) fn setting(&self, kelvin: f64, wall_speed: S) -> Setting<S> {
        self.setting_with(kelvin, self.heat_capacity(kelvin), wall_speed)
    }

    /// The same where that at T1 is known.
    pub(super) fn setting_with(&self, kelvin: f64, heat_capacity: S, wall_speed: S) -> Setting<S> {
        let first = self.full.index_at(kelvin);
        let frozen = || HeatCapacity::constant(self.frozen);
        let (incident, reflected) = match self.model {
            HeatCapacityModel::Constant => {
                let constant = HeatCapacity::constant(heat_capacity);
                (constant, constant)
            }
            HeatCapacityModel::Equilibrium => (self.full, self.full),
            HeatCapacityModel::Frozen => (frozen(), frozen()),
            HeatCapacityModel::FrozenThenEquilibrium => (frozen(), self.full),
        };
        let lagging = (self.model == HeatCapacityModel::FrozenThenEquilibrium).then_some(first);
        let Self { pressure, temperature, .. } = *self;
        let scale = self.gas_constant * temperature;
        Setting { pressure, temperature, scale, heat_capacity, wall_speed, incident, reflected, lagging }
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
            gas_constant: molar_gas_constant::<f64>() / (molar_gas_constant::<f64>() / self.gas_constant + by * slopes.molar_mass),
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

/// Both shocks as the iteration finds them.
pub(super) struct PlainRoots<S> {
    incident: Approximation<S>,
    reflected: Approximation<S>,
    pub(super) ranges: Ranges,
    /// The stage of the reflected shock.
    stage: GivenSpeedChange<S>,
    /// T2.
    behind: S,
    /// u2 − V.
    closing_speed: S,
}

impl<S: Elementary + Into<f64>> PlainRoots<S> {
    /// `None` where there is no shock or a temperature leaves the data.
    pub(super) fn new(setting: &Setting<S>, incident: &GivenSpeed<S>) -> Option<Self> {
        let first = setting.incident.index_at(setting.temperature.into());
        let start = incident.with_constant(setting.heat_capacity);
        let found = approximate(incident, &setting.incident, first, setting.temperature, start)?;
        let behind = setting.temperature + setting.temperature * found.excess;
        let ahead = setting.reflected.index_at(behind.into());
        let ranges = Ranges { first, second: found.to, ahead, fifth: 0 };
        let (stage, closing_speed) = reflected_stage_at(setting, incident, ranges, found.compression, found.excess);
        let closing: f64 = closing_speed.into();
        if closing <= 0.0 || closing.is_nan() {
            return None;
        }
        let start = stage.with_constant(setting.reflected.value(ahead, behind));
        let reflected = approximate(&stage, &setting.reflected, ahead, behind, start)?;
        let ranges = Ranges { fifth: reflected.to, ..ranges };
        Some(Self { incident: found, reflected, ranges, stage, behind, closing_speed })
    }

    pub(super) fn compressions(&self) -> [S; 2] {
        [self.incident.compression, self.reflected.compression]
    }

    /// Newton steps of both shocks.
    pub(super) fn steps(&self) -> [u32; 2] {
        [self.incident.steps, self.reflected.steps]
    }
}

impl<S: Elementary + Into<f64>> PlainShock<S> {
    /// `None` where there is no shock or a temperature leaves the data.
    pub(super) fn new(setting: &Setting<S>, incident: &GivenSpeed<S>) -> Option<Self> {
        let roots = PlainRoots::new(setting, incident)?;
        let both = [&roots.incident, &roots.reflected].map(|found| (found.compression, found.excess));
        let ahead = (roots.behind, roots.closing_speed, roots.reflected.mean);
        let flow = ThermalFlow::from_parts(setting, incident, &roots.stage, roots.ranges, both, ahead);
        Some(Self { flow, compressions: roots.compressions(), ranges: roots.ranges, steps: roots.steps() })
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
            gas_constant: plain(balls.gas_constant),
            full: balls.full.map(plain),
            frozen: plain(balls.frozen),
        }
    }
}
