//! A gas state.

use super::output::Output;
use crate::number::Enclosure;

/// Pressure (Pa, absolute), temperature (K), density (kg/m³), sound speed (m/s) and gas speed in the laboratory (m/s, positive toward the
/// end wall), each as an enclosure.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct State {
    /// Absolute pressure, Pa.
    pub pressure: Enclosure,
    /// Temperature, K.
    pub temperature: Enclosure,
    /// Density, kg/m³.
    pub density: Enclosure,
    /// Sound speed, m/s.
    pub sound_speed: Enclosure,
    /// Gas speed in the laboratory, m/s.
    pub gas_speed: Enclosure,
}

impl State {
    /// State 2 from the outputs of a shock.
    pub(super) fn behind_incident_shock(output: impl Fn(Output) -> Enclosure) -> Self {
        Self {
            pressure: output(Output::Pressure2),
            temperature: output(Output::Temperature2),
            density: output(Output::Density2),
            sound_speed: output(Output::SoundSpeed2),
            gas_speed: output(Output::GasSpeed2),
        }
    }

    /// State 5 from the outputs of a shock; the gas moves with the wall.
    pub(super) fn behind_reflected_shock(output: impl Fn(Output) -> Enclosure, wall_speed: Enclosure) -> Self {
        Self {
            pressure: output(Output::Pressure5),
            temperature: output(Output::Temperature5),
            density: output(Output::Density5),
            sound_speed: output(Output::SoundSpeed5),
            gas_speed: wall_speed,
        }
    }
}
