//! A gas state.

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
