//! What is wrong with an input of the tube: which, its value, and what would be right.

use crate::gas::Rule;
use crate::number::{Ball, Enclosure};
use core::fmt;

/// The inputs of this floor, by their trade names.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum TubeInput {
    /// Length of the driven section, diaphragm to end wall.
    DrivenLength,
    /// Length of the driver section, diaphragm to its end wall.
    DriverLength,
    /// Inner diameter of the driven section.
    Diameter,
    /// Diameter of the seal on which the pressure acts.
    SealDiameter,
    /// Volume of the driver section.
    DriverVolume,
    /// Distance from the end wall.
    FromEndWall,
    /// Speed of the incident shock.
    IncidentShock,
    /// Speed u2 of the gas behind the incident shock.
    GasSpeed2,
    /// Sound speed a2.
    SoundSpeed2,
    /// Speed of the reflected shock in the laboratory.
    ReflectedShock,
    /// Sound speed a5.
    SoundSpeed5,
    /// Sound speed a4 of the driver fill.
    SoundSpeed4,
    /// γ4 − 1 of the driver gas.
    DriverHeatCapacityRatio,
    /// Speed of the wave that returns from the contact surface.
    ReturnedWave,
    /// Speed of the shock that the contact surface lets through.
    TransmittedShock,
    /// Sound speed behind the transmitted shock.
    SoundSpeedBehindTransmitted,
    /// Density of the driven fill.
    FillDensity,
    /// Pressure ratio p2/p1.
    PressureRatio,
    /// Density ratio ρ2/ρ1.
    DensityRatio,
    /// Viscosity.
    Viscosity,
    /// Mach number of the incident shock.
    Mach,
    /// Mach number of the wall layer in the frame of the reflected shock.
    WallLayerMach,
    /// Pressure ratio p5/p2.
    ReflectedOverIncidentPressure,
    /// Heat-capacity ratio of the driven gas, as an exact ratio of integers.
    HeatCapacityRatio,
    /// Absolute pressure on the end flange.
    LoadPressure,
    /// Absolute pressure of the driver fill.
    DriverPressure,
    /// Absolute pressure outside the tube.
    AmbientPressure,
    /// Rated pressure of a section.
    Rating,
    /// Upper end of the band of a pressure.
    UpperEnd,
}

impl TubeInput {
    /// The name in a sentence.
    pub const fn name(self) -> &'static str {
        match self {
            Self::DrivenLength => "length of the driven section",
            Self::DriverLength => "length of the driver section",
            Self::Diameter => "inner diameter",
            Self::SealDiameter => "seal diameter",
            Self::DriverVolume => "driver volume",
            Self::FromEndWall => "distance from the end wall",
            Self::IncidentShock => "speed of the incident shock",
            Self::GasSpeed2 => "gas speed u2",
            Self::SoundSpeed2 => "sound speed a2",
            Self::ReflectedShock => "speed of the reflected shock",
            Self::SoundSpeed5 => "sound speed a5",
            Self::SoundSpeed4 => "sound speed a4",
            Self::DriverHeatCapacityRatio => "γ4 − 1 of the driver gas",
            Self::ReturnedWave => "speed of the wave returned from the contact surface",
            Self::TransmittedShock => "speed of the transmitted shock",
            Self::SoundSpeedBehindTransmitted => "sound speed behind the transmitted shock",
            Self::FillDensity => "density of the driven fill",
            Self::PressureRatio => "pressure ratio p2/p1",
            Self::DensityRatio => "density ratio ρ2/ρ1",
            Self::Viscosity => "viscosity",
            Self::Mach => "Mach number",
            Self::WallLayerMach => "Mach number of the wall layer",
            Self::ReflectedOverIncidentPressure => "pressure ratio p5/p2",
            Self::HeatCapacityRatio => "heat-capacity ratio",
            Self::LoadPressure => "pressure on the end flange",
            Self::DriverPressure => "driver pressure",
            Self::AmbientPressure => "ambient pressure",
            Self::Rating => "rated pressure",
            Self::UpperEnd => "upper end of the pressure",
        }
    }

    /// The SI unit with a leading space, empty for a ratio.
    pub const fn unit(self) -> &'static str {
        match self {
            Self::DrivenLength | Self::DriverLength | Self::Diameter | Self::SealDiameter | Self::FromEndWall => " m",
            Self::DriverVolume => " m³",
            Self::FillDensity => " kg/m³",
            Self::Viscosity => " Pa s",
            Self::LoadPressure | Self::DriverPressure | Self::AmbientPressure | Self::Rating | Self::UpperEnd => " Pa",
            Self::PressureRatio
            | Self::DensityRatio
            | Self::DriverHeatCapacityRatio
            | Self::Mach
            | Self::WallLayerMach
            | Self::ReflectedOverIncidentPressure
            | Self::HeatCapacityRatio => "",
            _ => " m/s",
        }
    }

    /// The refusal of a value.
    pub(super) const fn refuse(self, value: f64, rule: Rule) -> TubeInputError {
        TubeInputError { input: self, value, rule }
    }

    /// Checks that a plain value is positive and finite.
    pub(super) fn positive(self, value: f64) -> Result<(), TubeInputError> {
        self.above(value, 0.0)
    }

    /// Checks that a plain value is finite and exceeds a limit.
    pub(super) fn above(self, value: f64, limit: f64) -> Result<(), TubeInputError> {
        if !value.is_finite() {
            return Err(self.refuse(value, Rule::Finite));
        }
        if value > limit { Ok(()) } else { Err(self.refuse(value, Rule::Above(limit))) }
    }

    /// Checks that a ball is certainly positive and inside the domain of every entry, 2^±200.
    pub(super) fn positive_ball(self, value: Ball) -> Result<(), TubeInputError> {
        let bounds = value.enclosure();
        if !bounds.is_proven() {
            return Err(self.refuse(value.nearest(), Rule::Finite));
        }
        if bounds.low() <= 0.0 {
            return Err(self.refuse(value.nearest(), Rule::Above(0.0)));
        }
        if Enclosure::ordered(Ball::SMALLEST_ENTRY, Ball::LARGEST_ENTRY).encloses(bounds) {
            Ok(())
        } else {
            Err(self.refuse(value.nearest(), Rule::Between(Ball::SMALLEST_ENTRY, Ball::LARGEST_ENTRY)))
        }
    }
}

/// A refused input of the tube.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct TubeInputError {
    /// Which input.
    pub input: TubeInput,
    /// Its value in SI units (the double nearest the middle).
    pub value: f64,
    /// What would be right.
    pub rule: Rule,
}

impl fmt::Display for TubeInputError {
    /// One sentence with the input, its value and the remedy.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let (name, value, unit) = (self.input.name(), self.value, self.input.unit());
        match self.rule {
            Rule::Above(limit) => write!(f, "{name} {value}{unit} must be greater than {limit}{unit}"),
            Rule::Below(limit) => write!(f, "{name} {value}{unit} must be less than {limit}{unit}"),
            Rule::Between(low, high) => write!(f, "{name} {value}{unit} must lie between {low}{unit} and {high}{unit}"),
            Rule::Digits => write!(f, "{name} {value}{unit} is no exact ratio of integers below 2⁵³: give it as one"),
            // No other rule is used here.
            _ => write!(f, "{name} {value}{unit} is not a finite number"),
        }
    }
}

impl core::error::Error for TubeInputError {}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use std::string::ToString;

    #[test]
    fn a_refusal_names_input_value_and_remedy() {
        let error = TubeInput::DrivenLength.positive(-2.0).unwrap_err();
        assert_eq!(error.to_string(), "length of the driven section -2 m must be greater than 0 m");
        let error = TubeInput::Rating.positive(f64::NAN).unwrap_err();
        assert_eq!(error.to_string(), "rated pressure NaN Pa is not a finite number");
        let error = TubeInput::PressureRatio.positive_ball(Ball::from(1e200)).unwrap_err();
        assert!(matches!(error.rule, Rule::Between(..)), "{error}");
    }
}
