//! `endwall states`: one shock, without a file.

mod answer;
mod entry;
mod input;
mod page;
mod shock;

use clap::Args;

use crate::failure::Failure;
use crate::options::CONFIRMED;
use crate::{gas, output};
use answer::Answer;
use input::Input;

/// Quick look at one shock without a file: states 1, 2 and 5
///
/// Prints states 1, 2 and 5 for a gas, a fill, and one quantity that fixes the strength of the shock. For a gas whose heat capacity depends
/// on temperature, what the other choices of heat capacity would give stands beside.
///
/// Every quantity is taken as exact, digit by digit as typed, and the answer has no measurement uncertainty: for that, write a record and
/// use `endwall reduce`. A range of values may be typed as "7.9..8.1 kPa"; then the answer is the range of every output. For a gas whose
/// heat capacity depends on temperature, ranges are taken for the fill, the shock speed and the Mach number, with a rigid wall.
#[derive(Args)]
#[command(override_usage = "endwall states --gas GAS --pressure PRESSURE --temperature TEMPERATURE STRENGTH [OPTIONS]\n       \
    endwall states --heat-capacity-ratio RATIO --molar-mass MASS --pressure PRESSURE --temperature TEMPERATURE STRENGTH [OPTIONS]")]
pub struct Arguments {
    #[command(flatten)]
    gas: gas::Arguments,
    /// Heat capacity ratio of a gas of constant heat capacity, like 5/3 or 7/5; needs --molar-mass
    #[arg(long, value_name = "RATIO", requires = "molar_mass", allow_hyphen_values = true)]
    heat_capacity_ratio: Option<String>,
    /// Molar mass of the gas, like "28.0134 g/mol"; needs --heat-capacity-ratio
    #[arg(long, value_name = "MASS", requires = "heat_capacity_ratio", allow_hyphen_values = true)]
    molar_mass: Option<String>,
    /// Fill pressure, like "8 kPa" (absolute), "60 Torr" or "0.2 bar(g)"
    #[arg(long, value_name = "PRESSURE", allow_hyphen_values = true)]
    pressure: String,
    /// Fill temperature, like "296.2 K" or "23.0 degC"
    #[arg(long, value_name = "TEMPERATURE", allow_hyphen_values = true)]
    temperature: String,
    /// Ambient pressure, needed where a pressure is marked (g)
    #[arg(long, value_name = "PRESSURE", allow_hyphen_values = true)]
    ambient: Option<String>,
    /// Velocity of the end wall if it is not rigid; positive where it recedes from the gas
    #[arg(long, value_name = "SPEED", allow_hyphen_values = true)]
    wall_speed: Option<String>,
    /// Acoustic impedance of an elastic end wall that yields under the step, like "3.95e7 Pa s/m" for steel: density times wave speed
    #[arg(long, value_name = "IMPEDANCE", allow_hyphen_values = true, conflicts_with = "wall_speed")]
    wall_impedance: Option<String>,
    /// Answers "yes, I mean it" to the question about a doubtful value
    #[arg(long, value_name = "OPTION", value_parser = CONFIRMED.map(|(name, _)| name))]
    confirm: Vec<String>,
    /// Digits of each number at most
    #[arg(long, value_name = "N", default_value_t = 10, value_parser = clap::value_parser!(u8).range(1..=17))]
    digits: u8,
    /// Print one JSON object with all numbers in SI units instead of the table
    #[arg(long)]
    json: bool,
    #[command(flatten)]
    entry: entry::Arguments,
}

/// Runs it.
pub fn run(arguments: &Arguments) -> Result<(), Failure> {
    let input = Input::read(arguments)?;
    let answer = Answer::new(&input)?;
    let text = if arguments.json { answer.to_json()? } else { page::render(&answer, &input, usize::from(arguments.digits)) };
    output::print(&text)
}
