//! What can be asked of a shock, and how each answer follows from the relations.

use super::relations::{Jump, mach_excess};
use crate::gas::{Gamma, molar_gas_constant, sound_speed_squared};
use crate::number::{Positive, Semifield};

/// The outputs of an incident shock and of its reflection from a rigid wall. SI units; ratios are dimensionless.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum Output {
    /// Incident shock speed, m/s.
    ShockSpeed,
    /// M, the shock speed over the sound speed of the fill.
    Mach,
    /// M − 1.
    MachExcess,
    /// ρ1, kg/m³.
    Density1,
    /// a1, m/s.
    SoundSpeed1,
    /// p2/p1.
    PressureRatio,
    /// p2/p1 − 1.
    PressureExcess,
    /// p2, Pa.
    Pressure2,
    /// p2 − p1, Pa.
    PressureRise,
    /// ρ2/ρ1.
    DensityRatio,
    /// ρ2/ρ1 − 1.
    DensityExcess,
    /// ρ2, kg/m³.
    Density2,
    /// T2/T1.
    TemperatureRatio,
    /// T2/T1 − 1.
    TemperatureExcess,
    /// T2, K.
    Temperature2,
    /// a2, m/s.
    SoundSpeed2,
    /// u2, m/s, where the gas ahead is at rest.
    GasSpeed2,
    /// u2/a1.
    GasSpeedRatio,
    /// M2, the gas speed behind the shock over the sound speed there, in the frame of the shock.
    MachBehind,
    /// Gas speed behind the shock in the frame of the shock, U − u2, m/s.
    ShockFrameSpeed2,
    /// p5/p2.
    ReflectedOverIncidentPressure,
    /// p5/p1.
    ReflectedPressureRatio,
    /// p5/p1 − 1.
    ReflectedPressureExcess,
    /// p5, Pa.
    Pressure5,
    /// p5 − p1, Pa.
    Step,
    /// The reflected-pressure coefficient (p5 − p1)/(p2 − p1).
    ReflectionCoefficient,
    /// ρ5/ρ1.
    ReflectedDensityRatio,
    /// ρ5/ρ1 − 1.
    ReflectedDensityExcess,
    /// ρ5, kg/m³.
    Density5,
    /// T5/T1.
    ReflectedTemperatureRatio,
    /// T5/T1 − 1.
    ReflectedTemperatureExcess,
    /// T5, K.
    Temperature5,
    /// a5, m/s.
    SoundSpeed5,
    /// Reflected shock speed in the laboratory, away from the wall, m/s.
    ReflectedSpeed,
    /// Reflected shock speed over a1.
    ReflectedSpeedRatio,
    /// Mach number of the reflected shock relative to the gas ahead of it.
    ReflectedMach,
    /// That Mach number less 1.
    ReflectedMachExcess,
}

impl Output {
    /// Every output, in the order of the states.
    pub const ALL: [Self; 37] = [
        Self::ShockSpeed,
        Self::Mach,
        Self::MachExcess,
        Self::Density1,
        Self::SoundSpeed1,
        Self::PressureRatio,
        Self::PressureExcess,
        Self::Pressure2,
        Self::PressureRise,
        Self::DensityRatio,
        Self::DensityExcess,
        Self::Density2,
        Self::TemperatureRatio,
        Self::TemperatureExcess,
        Self::Temperature2,
        Self::SoundSpeed2,
        Self::GasSpeed2,
        Self::GasSpeedRatio,
        Self::MachBehind,
        Self::ShockFrameSpeed2,
        Self::ReflectedOverIncidentPressure,
        Self::ReflectedPressureRatio,
        Self::ReflectedPressureExcess,
        Self::Pressure5,
        Self::Step,
        Self::ReflectionCoefficient,
        Self::ReflectedDensityRatio,
        Self::ReflectedDensityExcess,
        Self::Density5,
        Self::ReflectedTemperatureRatio,
        Self::ReflectedTemperatureExcess,
        Self::Temperature5,
        Self::SoundSpeed5,
        Self::ReflectedSpeed,
        Self::ReflectedSpeedRatio,
        Self::ReflectedMach,
        Self::ReflectedMachExcess,
    ];
}

/// An output as a rational function of the inputs, so that integers can decide its last bit.
#[derive(Clone, Copy, Debug)]
pub enum Form<S> {
    /// The output itself.
    Value(S),
    /// The output is the square root of this.
    Root(S),
    /// The output is √(1 + x) − 1, x being this.
    RootExcess(S),
}

impl<S: Positive> Form<S> {
    /// The output.
    #[inline(always)]
    pub fn evaluate(self) -> S {
        match self {
            Self::Value(x) => x,
            Self::Root(x) => x.sqrt(),
            Self::RootExcess(x) => mach_excess(x),
        }
    }
}

/// A shock into a fill, in one kind of number.
#[derive(Clone, Copy, Debug)]
pub struct Flow<S> {
    jump: Jump<S>,
    pressure: S,
    temperature: S,
    density: S,
    sound_speed_squared: S,
}

impl<S: Semifield> Flow<S> {
    /// A jump into a fill of pressure p1 (Pa), temperature T1 (K) and molar mass W (kg/mol): ρ1 = p1·W/(R·T1), a1² = γ·R·T1/W.
    #[inline(always)]
    pub fn new(jump: Jump<S>, gamma: Gamma<S>, pressure: S, temperature: S, molar_mass: S) -> Self {
        Self {
            jump,
            pressure,
            temperature,
            density: pressure * molar_mass / (molar_gas_constant::<S>() * temperature),
            sound_speed_squared: sound_speed_squared(gamma, temperature, molar_mass),
        }
    }

    /// The output in the form in which it is rational in the inputs.
    #[inline(always)]
    pub fn form(&self, output: Output) -> Form<S> {
        use Form::{Root, RootExcess, Value};
        let jump = &self.jump;
        match output {
            Output::ShockSpeed => Root(jump.mach_squared() * self.sound_speed_squared),
            Output::Mach => Root(jump.mach_squared()),
            Output::MachExcess => RootExcess(jump.mach_squared_excess()),
            Output::Density1 => Value(self.density),
            Output::SoundSpeed1 => Root(self.sound_speed_squared),
            Output::PressureRatio => Value(jump.pressure_ratio()),
            Output::PressureExcess => Value(jump.pressure_excess()),
            Output::Pressure2 => Value(self.pressure * jump.pressure_ratio()),
            Output::PressureRise => Value(self.pressure * jump.pressure_excess()),
            Output::DensityRatio => Value(jump.density_ratio()),
            Output::DensityExcess => Value(jump.density_excess()),
            Output::Density2 => Value(self.density * jump.density_ratio()),
            Output::TemperatureRatio => Value(jump.temperature_ratio()),
            Output::TemperatureExcess => Value(jump.temperature_excess()),
            Output::Temperature2 => Value(self.temperature * jump.temperature_ratio()),
            Output::SoundSpeed2 => Root(self.sound_speed_squared * jump.temperature_ratio()),
            Output::GasSpeed2 => Root(self.sound_speed_squared * jump.gas_speed_squared()),
            Output::GasSpeedRatio => Root(jump.gas_speed_squared()),
            Output::MachBehind => Root(jump.mach_behind_squared()),
            Output::ShockFrameSpeed2 => Root(self.sound_speed_squared * jump.shock_frame_speed_squared()),
            Output::ReflectedOverIncidentPressure => Value(jump.reflected_over_incident_pressure()),
            Output::ReflectedPressureRatio => Value(jump.reflected_pressure_ratio()),
            Output::ReflectedPressureExcess => Value(jump.reflected_pressure_excess()),
            Output::Pressure5 => Value(self.pressure * jump.reflected_pressure_ratio()),
            Output::Step => Value(self.pressure * jump.reflected_pressure_excess()),
            Output::ReflectionCoefficient => Value(jump.reflection_coefficient()),
            Output::ReflectedDensityRatio => Value(jump.reflected_density_ratio()),
            Output::ReflectedDensityExcess => Value(jump.reflected_density_excess()),
            Output::Density5 => Value(self.density * jump.reflected_density_ratio()),
            Output::ReflectedTemperatureRatio => Value(jump.reflected_temperature_ratio()),
            Output::ReflectedTemperatureExcess => Value(jump.reflected_temperature_excess()),
            Output::Temperature5 => Value(self.temperature * jump.reflected_temperature_ratio()),
            Output::SoundSpeed5 => Root(self.sound_speed_squared * jump.reflected_temperature_ratio()),
            Output::ReflectedSpeed => Root(self.sound_speed_squared * jump.reflected_speed_squared()),
            Output::ReflectedSpeedRatio => Root(jump.reflected_speed_squared()),
            Output::ReflectedMach => Root(jump.reflected_mach_squared()),
            Output::ReflectedMachExcess => RootExcess(jump.reflected_mach_squared_excess()),
        }
    }
}

impl<S: Positive> Flow<S> {
    /// The output.
    #[inline(always)]
    pub fn evaluate(&self, output: Output) -> S {
        self.form(output).evaluate()
    }
}
