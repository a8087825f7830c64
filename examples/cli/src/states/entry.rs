//! The thirteen quantities of which one fixes the strength of the shock.

use clap::Args;
use endwall::record::Dimension;
use endwall::shock::Entry;

/// Exactly one of these fixes the strength of the shock.
#[derive(Args)]
#[group(id = "strength", multiple = false)]
#[command(next_help_heading = "Strength of the shock (exactly one)")]
pub struct Arguments {
    /// Mach number of the incident shock
    #[arg(long, value_name = "M", allow_hyphen_values = true)]
    mach: Option<String>,
    /// Mach number less 1, for weak shocks
    #[arg(long, value_name = "M-1", allow_hyphen_values = true)]
    mach_excess: Option<String>,
    /// Speed of the incident shock, like "950 m/s"
    #[arg(long, value_name = "SPEED", allow_hyphen_values = true)]
    pub(super) shock_speed: Option<String>,
    /// p2/p1
    #[arg(long, value_name = "RATIO", allow_hyphen_values = true)]
    pressure_ratio: Option<String>,
    /// p2 - p1
    #[arg(long, value_name = "PRESSURE", allow_hyphen_values = true)]
    pressure_rise: Option<String>,
    /// rho2/rho1
    #[arg(long, value_name = "RATIO", allow_hyphen_values = true)]
    density_ratio: Option<String>,
    /// T2/T1
    #[arg(long, value_name = "RATIO", allow_hyphen_values = true)]
    temperature_ratio: Option<String>,
    /// Speed of the gas behind the incident shock
    #[arg(long, value_name = "SPEED", allow_hyphen_values = true)]
    gas_speed: Option<String>,
    /// p5 behind the shock reflected from a rigid wall, like "150 kPa"
    #[arg(long, value_name = "PRESSURE", allow_hyphen_values = true)]
    reflected_pressure: Option<String>,
    /// p5/p1
    #[arg(long, value_name = "RATIO", allow_hyphen_values = true)]
    reflected_pressure_ratio: Option<String>,
    /// p5 - p1
    #[arg(long, value_name = "PRESSURE", allow_hyphen_values = true)]
    step: Option<String>,
    /// T5 behind the shock reflected from a rigid wall
    #[arg(long, value_name = "TEMPERATURE", allow_hyphen_values = true)]
    reflected_temperature: Option<String>,
    /// T5/T1
    #[arg(long, value_name = "RATIO", allow_hyphen_values = true)]
    reflected_temperature_ratio: Option<String>,
}

/// The quantity that was given.
pub struct Given<'a> {
    /// The name of its option.
    pub option: &'static str,
    /// Its text.
    pub typed: &'a str,
    /// What it is.
    pub entry: Entry,
    /// What it measures.
    pub dimension: Dimension,
}

impl Arguments {
    /// The one that was given; the parser of the command line sees to it that there are not two.
    pub fn given(&self) -> Option<Given<'_>> {
        use Dimension::{Pressure, Ratio, Speed, Temperature};
        let all = [
            ("mach", &self.mach, Entry::Mach, Ratio),
            ("mach-excess", &self.mach_excess, Entry::MachExcess, Ratio),
            ("shock-speed", &self.shock_speed, Entry::ShockSpeed, Speed),
            ("pressure-ratio", &self.pressure_ratio, Entry::PressureRatio, Ratio),
            ("pressure-rise", &self.pressure_rise, Entry::PressureRise, Pressure),
            ("density-ratio", &self.density_ratio, Entry::DensityRatio, Ratio),
            ("temperature-ratio", &self.temperature_ratio, Entry::TemperatureRatio, Ratio),
            ("gas-speed", &self.gas_speed, Entry::GasSpeed, Speed),
            ("reflected-pressure", &self.reflected_pressure, Entry::ReflectedPressure, Pressure),
            ("reflected-pressure-ratio", &self.reflected_pressure_ratio, Entry::ReflectedPressureRatio, Ratio),
            ("step", &self.step, Entry::Step, Pressure),
            ("reflected-temperature", &self.reflected_temperature, Entry::ReflectedTemperature, Temperature),
            ("reflected-temperature-ratio", &self.reflected_temperature_ratio, Entry::ReflectedTemperatureRatio, Ratio),
        ];
        all.into_iter().find_map(|(option, typed, entry, dimension)| Some(Given { option, typed: typed.as_deref()?, entry, dimension }))
    }
}
