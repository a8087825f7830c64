//! `endwall table`: the shock relations over a range of Mach numbers.

use std::fmt::Write;
use std::fs;

use clap::Args;
use endwall::gas::{Fill, Gas, HeatCapacityRatio, InputError};
use endwall::number::{Enclosure, Rational};
use endwall::record::{ErrorKind, Shot};
use endwall::shock::{Entry, Incident, Output};
use serde_json::json;

use crate::failure::Failure;
use crate::output;
use crate::progress::Bar;

/// A table for people; a computer that wants more should call the library.
const MOST_ROWS: u64 = 100_000;
/// With these a Mach number has at most 15 digits, which a double holds and prints back.
const MOST_DECIMALS: usize = 12;
const LARGEST_MACH: i64 = 999;

/// Table of the shock relations over a range of Mach numbers
///
/// Prints ratios across the incident and the reflected shock, as they follow from the Mach number of the incident shock alone: ideal gas of
/// constant heat capacity, normal shock, rigid end wall, gas at rest before the shock. All columns are dimensionless.
#[derive(Args)]
pub struct Arguments {
    /// Heat capacity ratio: 5/3 for atoms, 7/5 for diatomic molecules at room temperature
    #[arg(long, value_name = "RATIO", allow_hyphen_values = true)]
    heat_capacity_ratio: String,
    /// First Mach number, above 1
    #[arg(long, value_name = "MACH", allow_hyphen_values = true)]
    from: String,
    /// Last Mach number at most
    #[arg(long, value_name = "MACH", allow_hyphen_values = true)]
    to: String,
    /// Step of the Mach number; decimals are added exactly
    #[arg(long, value_name = "MACH", allow_hyphen_values = true)]
    step: String,
    /// Write comma-separated values with a header line to FILE, or to standard output with -
    #[arg(long, value_name = "FILE")]
    csv: Option<String>,
    /// Digits of each number
    #[arg(long, value_name = "N", default_value_t = 6, value_parser = clap::value_parser!(u8).range(1..=15))]
    digits: u8,
    /// Answers "yes, I mean it" to the question about a doubtful value
    #[arg(long, value_name = "OPTION", value_parser = ["heat-capacity-ratio"])]
    confirm: Vec<String>,
}

const HEADER: [&str; 12] = ["M", "p2/p1", "T2/T1", "rho2/rho1", "u2/a1", "M2", "pt2/pt1", "M_R", "p5/p1", "T5/T1", "rho5/rho1", "U_R/a1"];

/// The columns behind M: those before the total pressure, which is no output of its own kind, and those after it.
const INCIDENT: [Output; 5] =
    [Output::PressureRatio, Output::TemperatureRatio, Output::DensityRatio, Output::GasSpeedRatio, Output::MachBehind];
const REFLECTED: [Output; 5] = [
    Output::ReflectedMach,
    Output::ReflectedPressureRatio,
    Output::ReflectedTemperatureRatio,
    Output::ReflectedDensityRatio,
    Output::ReflectedSpeedRatio,
];

/// Runs it.
pub fn run(arguments: &Arguments) -> Result<(), Failure> {
    let rows = rows(arguments)?;
    match arguments.csv.as_deref() {
        None => output::print(&text(arguments, rows)),
        Some("-") => output::print(&csv(&rows)),
        Some(file) => fs::write(file, csv(&rows)).map_err(|error| Failure::unwritten(file, &error)),
    }
}

fn rows(arguments: &Arguments) -> Result<Vec<Vec<String>>, Failure> {
    let Arguments { heat_capacity_ratio, from, to, step, .. } = arguments;
    let ratio = |typed: &str| typed.parse::<Rational>();
    let gamma = ratio(heat_capacity_ratio)
        .map_err(|error| Failure::option("heat-capacity-ratio", error, heat_capacity_ratio, "write a ratio like 5/3, 7/5 or 1.29"))?;
    let refused =
        |error: InputError| Failure::option("heat-capacity-ratio", error, heat_capacity_ratio, "write a ratio like 5/3, 7/5 or 1.29");
    // No column depends on molar mass, pressure or temperature.
    let fill = HeatCapacityRatio::new(gamma).and_then(|gamma| Fill::new(Gas::new(gamma, 1.0)?, 1.0, 1.0)).map_err(refused)?;
    doubt(arguments)?;
    let (first, last, difference) = (mach("from", from)?, mach("to", to)?, mach("step", step)?);
    if !exceeds(first, Rational::ONE) {
        return Err(Failure::option("from", "a Mach number of 1 or less has no shock", from, "begin above 1, for example at 1.1"));
    }
    if !difference.is_positive() {
        return Err(Failure::option("step", "a step is above zero", step, "write it like 0.1"));
    }
    if exceeds(first, last) {
        return Err(Failure::option("to", format!("the table ends before it begins at {from}"), to, "give a larger number"));
    }
    let too_many = Rational::from(MOST_ROWS as f64).checked_mul(difference).and_then(|span| first.checked_add(span));
    if too_many.is_none_or(|end| !exceeds(end, last)) {
        return Err(Failure::option("step", format!("the table has more than {MOST_ROWS} rows"), step, "take a larger step"));
    }
    let decimals = decimals(from).max(decimals(step));
    let steps = last.checked_sub(first).and_then(|span| span.checked_div(difference));
    // For the bar alone, so that a rounding error of the quotient does no harm.
    let number = steps.map_or(MOST_ROWS, |steps| steps.to_f64() as u64 + 1);
    let mut rows = Vec::new();
    let mut bar = Bar::new("rows");
    let mut next = Some(first);
    while let Some(mach) = next.filter(|mach| !exceeds(*mach, last)) {
        let shock = Incident::new(&fill, Entry::Mach, mach)
            .map_err(|error| Failure::option("from", error, from, "choose Mach numbers inside these limits"))?;
        let mut row = vec![format!("{:.decimals$}", mach.to_f64())];
        let columns = |outputs: [Output; 5]| outputs.map(|output| printed(shock.output(output), arguments.digits));
        row.extend(columns(INCIDENT));
        row.push(printed(shock.total_pressure_ratio(), arguments.digits));
        row.extend(columns(REFLECTED));
        rows.push(row);
        bar.show(rows.len() as u64, number);
        next = mach.checked_add(difference);
    }
    Ok(rows)
}

/// Asks about a ratio like 1.667 as the reader of records does, through a record that holds nothing else of interest.
fn doubt(arguments: &Arguments) -> Result<(), Failure> {
    let record = json!({
        "record": "shot/1",
        "gas": { "heat_capacity_ratio": arguments.heat_capacity_ratio, "molar_mass": "30 g/mol" },
        "fill": { "pressure": "10 kPa", "temperature": "300 K" },
        "shock_speed": "1000 m/s",
    });
    match Shot::read(record.to_string().as_bytes()) {
        Err(error) if error.kind == ErrorKind::Doubtful && arguments.confirm.is_empty() => {
            let remedy = "correct it, or state that it is right with --confirm heat-capacity-ratio";
            Err(Failure::option("heat-capacity-ratio", error.wrong, &arguments.heat_capacity_ratio, remedy))
        }
        _ => Ok(()),
    }
}

/// A Mach number or a step as an exact decimal, short enough that the doubles nearest to its multiples print as it was typed.
fn mach(option: &str, typed: &str) -> Result<Rational, Failure> {
    let refuse = |wrong: &dyn std::fmt::Display| Failure::option(option, wrong, typed, "write a decimal like 1.25");
    let number: Rational = typed.parse().map_err(|error| refuse(&error))?;
    if typed.contains(['/', 'e', 'E']) || decimals(typed) > MOST_DECIMALS {
        return Err(refuse(&format!("a decimal number with at most {MOST_DECIMALS} decimals is wanted")));
    }
    if exceeds(number, Rational::integer(LARGEST_MACH)) {
        return Err(refuse(&format!("the table goes to {LARGEST_MACH}")));
    }
    Ok(number)
}

fn decimals(typed: &str) -> usize {
    typed.trim().split_once('.').map_or(0, |(_, decimals)| decimals.len())
}

fn exceeds(a: Rational, b: Rational) -> bool {
    a.compare(b) == Some(std::cmp::Ordering::Greater)
}

fn printed(value: Enclosure, digits: u8) -> String {
    format!("{:.*}", usize::from(digits), value.proven_digits())
}

fn text(arguments: &Arguments, mut rows: Vec<Vec<String>>) -> String {
    let mut page =
        format!("Shock relations, heat capacity ratio {}; all columns are dimensionless\n", arguments.heat_capacity_ratio.trim());
    for line in [
        "Model: ideal gas of constant heat capacity, normal shock into gas at rest, reflected from a rigid wall. Source: the normal-shock \
         relations of NACA Report 1135 (1953); those of the reflected shock follow from them by exact algebra.",
        "M incident Mach number; 1 before, 2 behind the incident shock, 5 behind the reflected one; p pressure, T temperature, rho density, \
         u2 gas speed and U_R reflected shock speed in the laboratory, a1 sound speed of gas 1, M2 Mach number of gas 2 and pt2/pt1 ratio \
         of total pressures, both in the frame of the incident shock, M_R Mach number of the reflected shock relative to gas 2.",
        "Arithmetic: the exact answer for the printed M, rounded to as many digits as are printed, is proven to give these. It is the answer of \
         the model; a gas whose molecules vibrate departs from it.",
    ] {
        // A String takes every text.
        let _ = writeln!(page, "{}", output::paragraph(line));
    }
    rows.insert(0, HEADER.map(String::from).to_vec());
    page.push('\n');
    page + &output::columns(&rows)
}

fn csv(rows: &[Vec<String>]) -> String {
    let mut text = HEADER.join(",") + "\n";
    for row in rows {
        text.push_str(&row.join(","));
        text.push('\n');
    }
    text
}
