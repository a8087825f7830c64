//! `endwall table`: the shock relations over a range of Mach numbers or shock speeds.

mod constant;
mod range;
mod thermal;

use std::fmt::Write;
use std::fs;

use clap::Args;
use endwall::number::Enclosure;
use endwall::shock::Output;

use crate::failure::Failure;
use crate::{gas, output};

/// Table of the shock relations over a range of Mach numbers or shock speeds
///
/// Prints ratios across the incident and the reflected shock: ideal gas, normal shock, rigid end wall, gas at rest before the shock. For a gas
/// of constant heat capacity they follow from the Mach number alone. For a gas given by its species the heat capacity depends on
/// temperature, and the range may be one of shock speeds: --from "600 m/s" --to "1200 m/s" --step "50 m/s".
#[derive(Args)]
pub struct Arguments {
    /// Constant heat capacity ratio: 5/3 for atoms, 7/5 for diatomic molecules at room temperature
    #[arg(long, value_name = "RATIO", allow_hyphen_values = true, conflicts_with = "temperature")]
    heat_capacity_ratio: Option<String>,
    #[command(flatten)]
    gas: gas::Arguments,
    /// Temperature of the fill, like "296 K"; needed with --gas, whose heat capacity depends on it
    #[arg(long, value_name = "TEMPERATURE", requires = "gas", allow_hyphen_values = true)]
    temperature: Option<String>,
    /// First Mach number, above 1; with --gas also a shock speed with its unit, like "600 m/s"
    #[arg(long, value_name = "VALUE", allow_hyphen_values = true)]
    from: String,
    /// Last Mach number or shock speed at most
    #[arg(long, value_name = "VALUE", allow_hyphen_values = true)]
    to: String,
    /// Step of the Mach number or of the shock speed; decimals are added exactly
    #[arg(long, value_name = "VALUE", allow_hyphen_values = true)]
    step: String,
    /// Write comma-separated values with a header line to FILE, or to standard output with -
    #[arg(long, value_name = "FILE")]
    csv: Option<String>,
    /// Digits of each number
    #[arg(long, value_name = "N", default_value_t = 6, value_parser = clap::value_parser!(u8).range(1..=15))]
    digits: u8,
    /// Answers "yes, I mean it" to the question about a doubtful value
    #[arg(long, value_name = "OPTION", value_parser = ["heat-capacity-ratio", "temperature"])]
    confirm: Vec<String>,
}

/// The columns of the reflected shock.
const REFLECTED: [Output; 5] = [
    Output::ReflectedMach,
    Output::ReflectedPressureRatio,
    Output::ReflectedTemperatureRatio,
    Output::ReflectedDensityRatio,
    Output::ReflectedSpeedRatio,
];

/// A table with what a reader must know.
struct Table {
    title: String,
    legend: &'static [&'static str],
    /// What must stand beside every pressure.
    caution: Option<String>,
    header: &'static [&'static str],
    rows: Vec<Vec<String>>,
}

/// Runs it.
pub fn run(arguments: &Arguments) -> Result<(), Failure> {
    let table = match (&arguments.heat_capacity_ratio, arguments.gas.mixture()?) {
        (Some(ratio), _) => constant::table(arguments, ratio)?,
        (None, Some(mixture)) => thermal::table(arguments, &mixture)?,
        (None, None) => {
            let remedy = "add --heat-capacity-ratio 7/5, or --gas \"CH4 0.5 %, O2 1 %, Ar balance\" --temperature \"296 K\"";
            return Err(Failure::plain("no gas is given", remedy));
        }
    };
    match arguments.csv.as_deref() {
        None => output::print(&table.text()),
        Some("-") => output::print(&table.csv()),
        Some(file) => fs::write(file, table.csv()).map_err(|error| Failure::unwritten(file, &error)),
    }
}

fn printed(value: Enclosure, digits: u8) -> String {
    format!("{:.*}", usize::from(digits), value.proven_digits())
}

impl Table {
    fn text(mut self) -> String {
        let mut page = self.title + "\n";
        for line in self.caution.iter().map(String::as_str).chain(self.legend.iter().copied()) {
            // A String takes every text.
            let _ = writeln!(page, "{}", output::paragraph(line));
        }
        self.rows.insert(0, self.header.iter().map(ToString::to_string).collect());
        page.push('\n');
        page + &output::columns(&self.rows)
    }

    fn csv(&self) -> String {
        let mut text = self.header.join(",") + "\n";
        for row in &self.rows {
            text.push_str(&row.join(","));
            text.push('\n');
        }
        text
    }
}
