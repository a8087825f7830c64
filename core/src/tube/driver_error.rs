//! Why a driver has no answer.

use crate::gas::{InputError, Rule};
use crate::shock::ThermalError;
use core::fmt;

/// The inputs of a driver, by their trade names.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum DriverInput {
    /// Driver temperature T4, K.
    Temperature,
    /// Area of the driver over that of the driven tube, A4/A1.
    AreaRatio,
    /// Driver pressure p4, Pa.
    Pressure,
    /// Measured over ideal Mach number.
    Efficiency,
    /// Standard uncertainty of that.
    EfficiencyUncertainty,
}

impl DriverInput {
    /// The name in a sentence.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Temperature => "driver temperature",
            Self::AreaRatio => "driver area over driven area",
            Self::Pressure => "driver pressure",
            Self::Efficiency => "measured over ideal Mach number",
            Self::EfficiencyUncertainty => "standard uncertainty of the measured over ideal Mach number",
        }
    }

    /// The SI unit, empty for a ratio.
    pub const fn unit(self) -> &'static str {
        match self {
            Self::Temperature => " K",
            Self::Pressure => " Pa",
            Self::AreaRatio | Self::Efficiency | Self::EfficiencyUncertainty => "",
        }
    }
}

/// Which part of a proof failed.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum Unproven {
    /// Whether the flow through the change of area is sonic: it is so to all digits of the inputs.
    Choking,
    /// The state at the change of area.
    AreaChange,
    /// The Mach number of the shock: too weak for the digits of the inputs, or a tolerance too wide.
    Mach,
    /// That no other blend is tailored.
    OnlyTailoredBlend,
    /// The common pressure at the contact surface.
    ContactPressure,
}

/// Why there is no answer.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum DriverError {
    /// An input of the test gas, of the shock into it or of a gas was refused.
    Gas(InputError),
    /// The shock into a thermally perfect gas has no answer.
    Shock(ThermalError),
    /// An input of the driver was refused.
    Driver {
        /// Which.
        input: DriverInput,
        /// Its value in SI units (the nearest double, or the middle of a tolerance).
        value: f64,
        /// What would be right.
        rule: Rule,
    },
    /// The test gas behind the shock is as fast as this driver gas becomes when it expands to vacuum, or faster: no driver pressure is enough.
    TooFast {
        /// u2, m/s.
        gas_speed: f64,
        /// What this driver reaches at infinite pressure, 2a4/(γ4 − 1) for equal areas, m/s.
        limit: f64,
        /// The Mach number that this driver reaches in this test gas at infinite pressure; `None` where the data of the test gas end before.
        greatest_mach: Option<f64>,
    },
    /// The driver gas would expand below the temperature at which its data begin; its heat capacity is not extrapolated.
    ExpandsBeyondData {
        /// Where the data begin, K.
        coldest: f64,
        /// u2, m/s.
        gas_speed: f64,
        /// The speed of the driver gas at the lowest temperature of its data, m/s.
        limit: f64,
        /// The Mach number of that speed in this test gas; `None` where the data of the test gas end before.
        greatest_mach: Option<f64>,
    },
    /// The driver pressure is beyond 2²⁰⁰ Pa: the shock is close to the limit of this driver.
    PressureBeyondRange {
        /// log10(p4/Pa).
        decimal_logarithm: f64,
        /// The Mach number that this driver reaches in this test gas at infinite pressure; `None` where the data of the test gas end before.
        greatest_mach: Option<f64>,
    },
    /// The driver gas is too slow, relative to the test gas, for any tailored Mach number: a4/a1 must exceed γ4/γ1.
    NeverTailored {
        /// a4/a1.
        sound_speed_ratio: f64,
        /// γ4/γ1.
        limit: f64,
    },
    /// No blend of the two driver gases is tailored: both alone return the same kind of wave, a shock where the numbers are positive, else an expansion.
    NoTailoredBlend {
        /// What remains of the condition for the first gas alone, m/s.
        first: f64,
        /// For the second gas alone, m/s.
        second: f64,
    },
    /// The heat capacity of the driver gas must be constant for this: a change of area, a wave diagram.
    ConstantOnly,
    /// A part of the proof failed.
    NotProven(Unproven),
}

/// The greatest Mach number as a clause.
struct Greatest(Option<f64>);

impl fmt::Display for Greatest {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self.0 {
            Some(mach) => write!(f, "this driver reaches Mach {mach:.4} in this test gas at most, at infinite pressure"),
            None => write!(f, "this driver has a limit beyond the data of the test gas"),
        }
    }
}

impl fmt::Display for Unproven {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Self::Choking => {
                "whether the flow through the change of area is sonic is not proven: change the Mach number in its last digits"
            }
            Self::AreaChange => "the flow through the change of area is not proven: narrow the tolerances, or keep the area ratio off 1",
            Self::Mach => "the Mach number is not proven: the shock is too weak, or a tolerance too wide",
            Self::OnlyTailoredBlend => "that only one blend is tailored is not proven for these gases",
            Self::ContactPressure => "the pressure at the contact surface is not proven: narrow the tolerances",
        })
    }
}

impl fmt::Display for DriverError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Gas(error) => error.fmt(f),
            Self::Shock(error) => error.fmt(f),
            Self::Driver { input, value, rule } => {
                let (name, unit) = (input.name(), input.unit());
                write!(f, "{name} {value}{unit} ")?;
                match rule {
                    Rule::Above(limit) => write!(f, "must be greater than {limit}{unit}"),
                    Rule::Below(limit) => write!(f, "must be less than {limit}{unit}"),
                    Rule::Between(low, high) => write!(f, "must lie between {low}{unit} and {high}{unit}"),
                    Rule::Exact => write!(f, "must be exact: a tolerance is not taken here"),
                    _ => write!(f, "is not a finite number"),
                }
            }
            Self::TooFast { gas_speed, limit, greatest_mach } => {
                let greatest = Greatest(*greatest_mach);
                write!(
                    f,
                    "the gas behind the shock moves at {gas_speed:.1} m/s, and the driver gas reaches {limit:.1} m/s when it expands to vacuum: {greatest}"
                )
            }
            Self::ExpandsBeyondData { coldest, gas_speed, limit, greatest_mach } => {
                write!(
                    f,
                    "the gas behind the shock moves at {gas_speed:.1} m/s, and the driver gas, whose heat capacity is known down to {coldest} K, reaches {limit:.1} m/s there"
                )?;
                match greatest_mach {
                    Some(mach) => write!(f, ": Mach {mach:.4} in this test gas; with constant heat capacity there is no such end"),
                    None => Ok(()),
                }
            }
            Self::PressureBeyondRange { decimal_logarithm, greatest_mach } => {
                let greatest = Greatest(*greatest_mach);
                write!(f, "the driver pressure would be 10^{decimal_logarithm:.1} Pa: {greatest}")
            }
            Self::NeverTailored { sound_speed_ratio, limit } => write!(
                f,
                "no Mach number is tailored: the sound speed of the driver gas over that of the test gas, {sound_speed_ratio:.4}, must be greater than the ratio of their heat-capacity ratios, {limit:.4}"
            ),
            Self::NoTailoredBlend { first, .. } => {
                let (wave, remedy) =
                    if *first > 0.0 { ("a shock", "a lighter gas is needed") } else { ("an expansion", "a heavier gas is needed") };
                write!(f, "no blend of these driver gases is tailored for this shock: each of them alone returns {wave}; {remedy}")
            }
            Self::ConstantOnly => {
                write!(f, "a change of area and the wave diagram are computed for a driver gas of constant heat capacity only")
            }
            Self::NotProven(part) => part.fmt(f),
        }
    }
}

impl core::error::Error for DriverError {}

impl From<InputError> for DriverError {
    fn from(error: InputError) -> Self {
        Self::Gas(error)
    }
}

impl From<ThermalError> for DriverError {
    fn from(error: ThermalError) -> Self {
        match error {
            ThermalError::Input(error) => Self::Gas(error),
            other => Self::Shock(other),
        }
    }
}

impl From<Unproven> for DriverError {
    fn from(part: Unproven) -> Self {
        Self::NotProven(part)
    }
}
