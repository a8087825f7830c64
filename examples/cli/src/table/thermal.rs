//! The relations for a gas given by its species: they depend on the temperature of the fill too.

use endwall::gas::{Fill, Gas, HeatCapacityRatio};
use endwall::number::{Enclosure, Rational};
use endwall::shock::{Entry, Incident, Output, ThermalError, ThermalFill, ThermalShock};
use endwall::shot::DrivenGas;
use serde_json::json;

use super::range::Range;
use super::{Arguments, REFLECTED, Table, printed};
use crate::failure::Failure;
use crate::gas::Mixture;
use crate::options::{self, CONFIRMED};

const HEADER: [&str; 12] = ["U_S/(m/s)", "M", "p2/p1", "T2/T1", "rho2/rho1", "u2/a1", "M2", "M_R", "p5/p1", "T5/T1", "rho5/rho1", "U_R/a1"];

const INCIDENT: [Output; 5] =
    [Output::PressureRatio, Output::TemperatureRatio, Output::DensityRatio, Output::GasSpeedRatio, Output::MachBehind];

/// Pa. No column depends on the pressure of an ideal gas.
const PRESSURE: f64 = 10e3;

pub fn table(arguments: &Arguments, mixture: &Mixture) -> Result<Table, Failure> {
    let Some(temperature) = &arguments.temperature else {
        let remedy = "add --temperature \"296 K\", or take a constant heat capacity with --heat-capacity-ratio";
        return Err(Failure::plain("--gas needs the temperature of the fill: the heat capacity depends on it", remedy));
    };
    let range = Range::read(arguments)?;
    let mut record = json!({
        "record": "shot/1",
        "fill": { "pressure": "10 kPa", "temperature": temperature },
        "shock_speed": "1000 m/s",
    });
    arguments.gas.put_into(mixture, &mut record);
    let confirmed = |option: &&str| arguments.confirm.iter().any(|confirmed| confirmed == option);
    let paths: Vec<&str> = CONFIRMED.iter().filter(|(option, _)| confirmed(option)).map(|(_, path)| *path).collect();
    record["confirm"] = json!(paths);
    let typed = arguments.gas.typed();
    let shot = options::read(&record, &typed)?;
    let temperature_of_fill = shot.fill.temperature.value();
    let refused = |error| Failure::option("temperature", error, temperature, "choose a temperature inside the data of the gas");
    let computed = shot.with_driven_gas(|gas, _| match gas {
        DrivenGas::ThermallyPerfect { gas, model, .. } => {
            let fill = ThermalFill::new(gas, model, PRESSURE, temperature_of_fill).map_err(refused)?;
            rows(arguments, &range, |entry, value| ThermalShock::new(&fill, entry, value), ThermalShock::output)
        }
        DrivenGas::ConstantHeatCapacity { heat_capacity_ratio, molar_mass } => {
            let ratio = HeatCapacityRatio::new(heat_capacity_ratio.value);
            let gas = ratio.and_then(|ratio| Gas::new(ratio, molar_mass.value)).map_err(refused)?;
            let fill = Fill::new(gas, PRESSURE, temperature_of_fill).map_err(refused)?;
            rows(arguments, &range, |entry, value| Ok(Incident::new(&fill, entry, value)?), Incident::output)
        }
    });
    let rows = computed.map_err(|error| options::refused(&error, &typed))??;
    let title =
        format!("Shock relations, {typed} at {temperature}, heat capacity {}; dimensionless but for U_S", shot.heat_capacity.name());
    let caution = shot.flags.iter().find(|flag| flag.code == "can-burn").map(|flag| format!("Caution: {}.", flag.text));
    Ok(Table { title, legend: LEGEND, caution, header: &HEADER, rows })
}

fn rows<S>(
    arguments: &Arguments,
    range: &Range,
    solve: impl Fn(Entry, Rational) -> Result<S, ThermalError>,
    output: impl Fn(&S, Output) -> Enclosure,
) -> Result<Vec<Vec<String>>, Failure> {
    range.rows(|value, text, is_first| {
        let shock = solve(range.kind.entry, value).map_err(|error| refused(arguments, range, &text, is_first, error))?;
        let number = |of| printed(output(&shock, of), arguments.digits);
        let (speed, mach) = match range.kind.entry {
            Entry::ShockSpeed => (text, number(Output::Mach)),
            _ => (number(Output::ShockSpeed), text),
        };
        let mut row = vec![speed, mach];
        row.extend(INCIDENT.map(number));
        row.extend(REFLECTED.map(number));
        Ok(row)
    })
}

/// The row at which the table cannot go on.
fn refused(arguments: &Arguments, range: &Range, text: &str, is_first: bool, error: ThermalError) -> Failure {
    let (option, typed) = if is_first { ("from", &arguments.from) } else { ("to", &arguments.to) };
    let remedy = if is_first { "choose another beginning".to_string() } else { format!("end the table below {text}{}", range.kind.unit) };
    Failure::option(option, error, typed, remedy)
}

const LEGEND: &[&str] = &[
    "Model: ideal gas with the heat capacity named above (data: NASA/TP-2002-211556), normal shock into gas at rest, reflected from a rigid \
     wall; composition fixed. No column depends on the pressure of the fill.",
    "U_S speed and M Mach number of the incident shock; 1 before, 2 behind the incident shock, 5 behind the reflected one; p pressure, T \
     temperature, rho density, u2 gas speed and U_R reflected shock speed in the laboratory, a1 sound speed of gas 1, M2 Mach number of gas 2 \
     in the frame of the incident shock, M_R Mach number of the reflected shock relative to gas 2.",
    "Arithmetic: the exact answer of the equations for the U_S or M that was asked for, rounded to as many digits as are printed, is proven to give these. It \
     says nothing about the gas in a tube.",
];
