//! The relations for a gas of constant heat capacity, which depend on the Mach number alone.

use endwall::gas::{Fill, Gas, HeatCapacityRatio, InputError};
use endwall::number::Rational;
use endwall::record::{ErrorKind, Shot};
use endwall::shock::{Entry, Incident, Output};
use serde_json::json;

use super::range::Range;
use super::{Arguments, REFLECTED, Table, printed};
use crate::failure::Failure;

const HEADER: [&str; 12] = ["M", "p2/p1", "T2/T1", "rho2/rho1", "u2/a1", "M2", "pt2/pt1", "M_R", "p5/p1", "T5/T1", "rho5/rho1", "U_R/a1"];

/// The columns before the total pressure, which is no output of its own kind.
const INCIDENT: [Output; 5] =
    [Output::PressureRatio, Output::TemperatureRatio, Output::DensityRatio, Output::GasSpeedRatio, Output::MachBehind];

const REMEDY: &str = "write a ratio like 5/3, 7/5 or 1.29";

pub fn table(arguments: &Arguments, typed: &str) -> Result<Table, Failure> {
    let gamma = typed.parse::<Rational>().map_err(|error| Failure::option("heat-capacity-ratio", error, typed, REMEDY))?;
    let refused = |error: InputError| Failure::option("heat-capacity-ratio", error, typed, REMEDY);
    // No column depends on molar mass, pressure or temperature.
    let fill = HeatCapacityRatio::new(gamma).and_then(|gamma| Fill::new(Gas::new(gamma, 1.0)?, 1.0, 1.0)).map_err(refused)?;
    doubt(arguments, typed)?;
    let range = Range::read(arguments)?;
    if range.kind.entry != Entry::Mach {
        let remedy = "give Mach numbers, or the gas with --gas and --temperature";
        return Err(Failure::option("from", "a heat capacity ratio alone does not fix the sound speed", &arguments.from, remedy));
    }
    let rows = range.rows(|mach, text, _| {
        let shock = Incident::new(&fill, Entry::Mach, mach)
            .map_err(|error| Failure::option("from", error, &arguments.from, "choose Mach numbers inside these limits"))?;
        let mut row = vec![text];
        let columns = |outputs: [Output; 5]| outputs.map(|output| printed(shock.output(output), arguments.digits));
        row.extend(columns(INCIDENT));
        row.push(printed(shock.total_pressure_ratio(), arguments.digits));
        row.extend(columns(REFLECTED));
        Ok(row)
    })?;
    let title = format!("Shock relations, heat capacity ratio {}; all columns are dimensionless", typed.trim());
    Ok(Table { title, legend: LEGEND, caution: None, header: &HEADER, rows })
}

const LEGEND: &[&str] = &[
    "Model: ideal gas of constant heat capacity, normal shock into gas at rest, reflected from a rigid wall. Source: the normal-shock \
     relations of NACA Report 1135 (1953); those of the reflected shock follow from them by exact algebra.",
    "M incident Mach number; 1 before, 2 behind the incident shock, 5 behind the reflected one; p pressure, T temperature, rho density, \
     u2 gas speed and U_R reflected shock speed in the laboratory, a1 sound speed of gas 1, M2 Mach number of gas 2 and pt2/pt1 ratio \
     of total pressures, both in the frame of the incident shock, M_R Mach number of the reflected shock relative to gas 2.",
    "Arithmetic: the exact answer for the printed M, rounded to as many digits as are printed, is proven to give these. It is the answer of \
     the model; a gas whose molecules vibrate departs from it.",
];

/// Asks about a ratio like 1.667 as the reader of records does, through a record that holds nothing else of interest.
fn doubt(arguments: &Arguments, typed: &str) -> Result<(), Failure> {
    let record = json!({
        "record": "shot/1",
        "gas": { "heat_capacity_ratio": typed, "molar_mass": "30 g/mol" },
        "fill": { "pressure": "10 kPa", "temperature": "300 K" },
        "shock_speed": "1000 m/s",
    });
    let confirmed = arguments.confirm.iter().any(|option| option == "heat-capacity-ratio");
    match Shot::read(record.to_string().as_bytes()) {
        Err(error) if error.kind == ErrorKind::Doubtful && !confirmed => {
            let remedy = "correct it, or state that it is right with --confirm heat-capacity-ratio";
            Err(Failure::option("heat-capacity-ratio", error.wrong, typed, remedy))
        }
        _ => Ok(()),
    }
}
