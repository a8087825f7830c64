//! What is wrong with an input of a relation: the parameter, its value, and the rule that it broke.

use core::fmt;

/// The inputs of gases, shocks and shots, by their trade names.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum Parameter {
    /// Heat-capacity ratio γ.
    HeatCapacityRatio,
    /// Molar mass W.
    MolarMass,
    /// Mole fraction of a component.
    MoleFraction,
    /// Driven fill pressure p1.
    FillPressure,
    /// Driven fill temperature T1.
    FillTemperature,
    /// Incident shock speed.
    ShockSpeed,
    /// Incident shock Mach number M.
    Mach,
    /// M − 1.
    MachExcess,
    /// p2/p1.
    PressureRatio,
    /// p2 − p1.
    PressureRise,
    /// ρ2/ρ1.
    DensityRatio,
    /// T2/T1.
    TemperatureRatio,
    /// Speed of the gas behind the incident shock.
    GasSpeed,
    /// p5/p1.
    ReflectedPressureRatio,
    /// p5.
    ReflectedPressure,
    /// p5 − p1.
    Step,
    /// T5/T1.
    ReflectedTemperatureRatio,
    /// T5.
    ReflectedTemperature,
    /// Velocity of the end wall along the incident direction.
    WallSpeed,
    /// Acoustic impedance of the end wall.
    WallImpedance,
    /// Speed of the gas ahead of a shock.
    UpstreamSpeed,
    /// Temperature T2 behind the incident shock.
    Temperature2,
    /// Lowest temperature for which the heat capacities of all species are known.
    DataRange,
    /// A temperature of no particular state.
    Temperature,
    /// A pressure of no particular state.
    Pressure,
    /// Factor by which the pressure changes.
    PressureFactor,
    /// Relative humidity.
    RelativeHumidity,
    /// What a pump left in a vessel before it is filled.
    ResidualPressure,
}

impl Parameter {
    /// The name in a sentence.
    pub const fn name(self) -> &'static str {
        match self {
            Self::HeatCapacityRatio => "heat-capacity ratio",
            Self::MolarMass => "molar mass",
            Self::MoleFraction => "mole fraction",
            Self::FillPressure => "fill pressure",
            Self::FillTemperature => "fill temperature",
            Self::ShockSpeed => "shock speed",
            Self::Mach => "Mach number",
            Self::MachExcess => "Mach number excess M − 1",
            Self::PressureRatio => "pressure ratio p2/p1",
            Self::PressureRise => "pressure rise p2 − p1",
            Self::DensityRatio => "density ratio ρ2/ρ1",
            Self::TemperatureRatio => "temperature ratio T2/T1",
            Self::GasSpeed => "gas speed behind the shock",
            Self::ReflectedPressureRatio => "pressure ratio p5/p1",
            Self::ReflectedPressure => "pressure p5",
            Self::Step => "pressure step p5 − p1",
            Self::ReflectedTemperatureRatio => "temperature ratio T5/T1",
            Self::ReflectedTemperature => "temperature T5",
            Self::WallSpeed => "wall velocity",
            Self::WallImpedance => "acoustic impedance of the wall",
            Self::UpstreamSpeed => "gas speed ahead of the shock",
            Self::Temperature2 => "temperature T2",
            Self::DataRange => "lowest temperature with data for every species",
            Self::Temperature => "temperature",
            Self::Pressure => "pressure",
            Self::PressureFactor => "pressure factor",
            Self::RelativeHumidity => "relative humidity",
            Self::ResidualPressure => "residual pressure",
        }
    }

    /// The SI unit, empty for a ratio.
    pub const fn unit(self) -> &'static str {
        match self {
            Self::MolarMass => " kg/mol",
            Self::FillPressure | Self::PressureRise | Self::ReflectedPressure | Self::Step | Self::Pressure | Self::ResidualPressure => {
                " Pa"
            }
            Self::FillTemperature | Self::Temperature2 | Self::ReflectedTemperature | Self::DataRange | Self::Temperature => " K",
            Self::ShockSpeed | Self::GasSpeed | Self::WallSpeed | Self::UpstreamSpeed => " m/s",
            Self::WallImpedance => " Pa s/m",
            _ => "",
        }
    }
}

/// The rule that an input broke.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum Rule {
    /// It must be a finite number.
    Finite,
    /// It must be greater than this.
    Above(f64),
    /// It must be less than this.
    Below(f64),
    /// It must lie between these two.
    Between(f64, f64),
    /// The shock speed must exceed the sound speed of the fill, which is this.
    AboveSoundSpeed(f64),
    /// The mole fractions must sum to one; they sum to this.
    SumToOne(f64),
    /// It has more digits than exact arithmetic holds (38).
    Digits,
    /// The heat capacity is known between these two temperatures only, K; nothing is extrapolated.
    DataRange(f64, f64),
    /// It heats the gas beyond the temperatures between which its heat capacity is known, K.
    HeatsBeyondData(f64, f64),
    /// It must be exact: a tolerance is not taken here where the heat capacity depends on temperature.
    Exact,
    /// The heat capacities of the species change their polynomials at too many temperatures.
    Ranges,
}

/// A refused input.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct InputError {
    /// Which input.
    pub parameter: Parameter,
    /// Its value in SI units (the nearest double, or the middle of a tolerance).
    pub value: f64,
    /// What would be right.
    pub rule: Rule,
}

impl fmt::Display for InputError {
    /// One sentence with the parameter, its value and the remedy.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let (name, value, unit) = (self.parameter.name(), self.value, self.parameter.unit());
        write!(f, "{name} {value}{unit} ")?;
        match self.rule {
            Rule::Finite => write!(f, "is not a finite number"),
            Rule::Above(limit) => write!(f, "must be greater than {limit}{unit}"),
            Rule::Below(limit) => write!(f, "must be less than {limit}{unit}"),
            Rule::Between(low, high) => write!(f, "must lie between {low}{unit} and {high}{unit}"),
            Rule::AboveSoundSpeed(sound) => {
                write!(f, "must be greater than the sound speed of the fill, {sound}{unit}: a slower wave is no shock")
            }
            Rule::SumToOne(sum) => write!(f, "does not fit: the mole fractions must sum to 1, but sum to {sum}"),
            Rule::DataRange(low, high) => {
                write!(
                    f,
                    "lies outside the data of this gas, {low} K to {high} K: its heat capacity is not known there and is not extrapolated"
                )
            }
            Rule::HeatsBeyondData(low, high) => {
                write!(
                    f,
                    "takes the gas outside its data, {low} K to {high} K: its heat capacity is not known there and is not extrapolated"
                )
            }
            Rule::Exact => {
                write!(
                    f,
                    "is a tolerance, which is not taken for this problem where the heat capacity depends on temperature: give one exact value"
                )
            }
            Rule::Ranges => {
                write!(f, "begins more ranges than a mixture can hold: the species change their polynomials at too many temperatures")
            }
            Rule::Digits => write!(f, "has too many digits: at most 38 are kept exactly"),
        }
    }
}

impl core::error::Error for InputError {}
