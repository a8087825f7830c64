//! The same shocks without proof, in f64 or f32.

use super::approximate::approximate;
use super::flow::{Ranges, ThermalFlow, reflected_stage};
use super::setting::Setting;
use super::stage::GivenSpeed;
use crate::number::Elementary;

/// A shock and its reflection in plain f64 or f32, with the number of Newton steps that both took.
#[derive(Clone, Copy, Debug)]
pub struct PlainShock<S> {
    flow: ThermalFlow<S>,
    pub(super) compressions: [S; 2],
    pub(super) ranges: Ranges,
    steps: [u32; 2],
}

impl<S: Elementary + Into<f64>> PlainShock<S> {
    /// `None` where a temperature leaves the data.
    pub(super) fn new(setting: &Setting<S>, incident: &GivenSpeed<S>) -> Option<Self> {
        let kelvin: f64 = setting.temperature.into();
        let first = setting.incident.index_at(kelvin);
        let start = incident.with_constant(setting.incident.value(first, setting.temperature));
        let (compression, second, incident_steps) = approximate(incident, &setting.incident, first, setting.temperature, start)?;
        let mut ranges = Ranges { first, second, ahead: 0, fifth: 0 };
        let behind: f64 = {
            use super::stage::Stage;
            (setting.temperature + setting.temperature * incident.temperature_excess(compression)).into()
        };
        ranges.ahead = setting.reflected.index_at(behind);
        let (reflected, behind, _) = reflected_stage(setting, incident, ranges, compression);
        let start = reflected.with_constant(setting.reflected.value(ranges.ahead, behind));
        let (reflected_compression, fifth, reflected_steps) = approximate(&reflected, &setting.reflected, ranges.ahead, behind, start)?;
        ranges.fifth = fifth;
        Some(Self {
            flow: ThermalFlow::new(setting, incident, ranges, compression, reflected_compression),
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
