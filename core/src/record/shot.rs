//! The record of one shot.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::digest::input_digest;
use super::error::{ErrorKind, RecordError};
use super::flag::Flag;
use super::gas::{self, GasRecord};
use super::hazard;
use super::leak::{self, Leak};
use super::observation;
use super::optional::{self, Driver, Measured, Survey, Tube, Wall};
use super::plan::Plan;
use super::quantity::{Absolute, Mark, Quantity};
use super::read::{self, Entry, Fields, Reading};
use super::species::{self, OwnSpecies};
use super::station::{self, Station};
use super::tree::{self, Node};
use super::unit::Dimension;
use crate::gas::HeatCapacityModel;

/// The fill of the driven section.
#[derive(Clone, Debug, PartialEq)]
pub struct Fill {
    /// As typed; may be a gauge pressure.
    pub pressure: Quantity,
    /// The absolute pressure, Pa: with the ambient pressure added where it was typed as gauge.
    pub absolute: Absolute,
    /// K.
    pub temperature: Quantity,
}

/// Where the shock speed comes from.
#[derive(Clone, Debug, PartialEq)]
#[expect(clippy::large_enum_variant, reason = "a record holds one of these")]
pub enum Speed {
    /// Arrival times, in the order of the file.
    Stations(Vec<Station>),
    /// The speed at the end wall, m/s.
    Given(Quantity),
}

/// A shot as recorded: every quantity exact and in SI units, with its text.
#[derive(Clone, Debug, PartialEq)]
pub struct Shot {
    /// The name; empty where none was given.
    pub name: String,
    /// The test gas.
    pub gas: GasRecord,
    /// The heat capacity that the states are to be computed with.
    pub heat_capacity: HeatCapacityModel,
    /// Species that the record describes.
    pub species: Vec<OwnSpecies>,
    /// State 1.
    pub fill: Fill,
    /// Stations or a speed.
    pub speed: Speed,
    /// Attenuation allowance, 1/m; it always has a standard uncertainty.
    pub attenuation: Option<Quantity>,
    /// Relative error of the common clock: zero with its uncertainty.
    pub clock: Option<Quantity>,
    /// Common error of all positions: zero with its uncertainty.
    pub survey: Option<Survey>,
    /// Ambient pressure, Pa, absolute.
    pub ambient: Option<Quantity>,
    /// Relative humidity of the air in the gas, at the temperature of the fill and the ambient pressure.
    pub humidity: Option<Quantity>,
    /// Air that leaked into the fill.
    pub leak: Option<Leak>,
    /// An end wall that is not rigid.
    pub wall: Option<Wall>,
    /// Measured values, to be compared.
    pub measured: Option<Measured>,
    /// The tube.
    pub tube: Option<Tube>,
    /// The driver.
    pub driver: Option<Driver>,
    /// The change of p5 up to which a wave from the contact surface does not end the uniform time, relative; without it every first wave does.
    pub disturbance: Option<Quantity>,
    /// Doubtful values that the record confirms.
    pub confirmed: Vec<String>,
    /// What the reader of a report must know about the record.
    pub flags: Vec<Flag>,
    /// Every leaf of the file in its order, for the echo.
    pub entries: Vec<Entry>,
    /// Fingerprint of the file: see [`input_digest`].
    pub input_digest: String,
}

const FIELDS: [&str; 24] = [
    "record",
    "name",
    "gas",
    "heat_capacity",
    "species",
    "fill",
    "stations",
    "shock_speed",
    "attenuation",
    "clock",
    "survey",
    "ambient",
    "humidity",
    "leak",
    "wall",
    "measured",
    "tube",
    "driver",
    "tolerance",
    "date",
    "operator",
    "instruments",
    "notes",
    "confirm",
];

impl Shot {
    /// Reads a record `shot/1` from the bytes of a file.
    ///
    /// The file is UTF-8 JSON of at most 1 MiB and 128 levels. Typed numbers stay exact. Any input gives a record or an
    /// error; nothing panics.
    ///
    /// # Errors
    /// The first mistake found, with its full path, the text as typed and the remedy.
    ///
    /// ```
    /// let file = r#"{ "record": "shot/1", "name": "demo",
    ///   "gas": { "heat_capacity_ratio": "5/3", "molar_mass": "39.948 g/mol" },
    ///   "fill": { "pressure": "8.000 ± 0.020 kPa", "temperature": "296.2 ± 0.5 K" },
    ///   "shock_speed": "950.0 ± 1.0 m/s" }"#;
    /// let shot = endwall::record::Shot::read(file.as_bytes()).unwrap();
    /// assert_eq!(shot.fill.absolute.value, "8000".parse().unwrap());
    /// assert_eq!(shot.fill.absolute.standard_uncertainty, Some(20.0));
    /// ```
    pub fn read(file: &[u8]) -> Result<Self, RecordError> {
        let node = tree::parse(file)?;
        let fields = Fields::new(&node, "")?;
        kind(fields, "shot/1", "a shot has \"record\": \"shot/1\"")?;
        fields.allow(&FIELDS)?;
        let mut reading = Reading::new();
        reading.confirm = confirm(fields, &node)?;
        let mut flags = Vec::new();
        let name = fields.text("name")?.unwrap_or("").to_string();
        let example = "{ \"Ar\": \"98.5 %\", … }";
        let gas = gas::read(fields.required("gas", example)?, "gas", &mut reading, &mut flags)?;
        let heat_capacity = gas::heat_capacity(fields.text("heat_capacity")?, &gas, &mut flags)?;
        let species = species::read(fields, &mut reading)?;
        let ambient = optional::ambient(fields, &mut reading)?;
        let fill = fill(fields, ambient.as_ref(), &mut reading, &mut flags)?;
        let speed = speed(fields, &mut reading, &mut flags)?;
        let attenuation = optional::attenuation(fields, &mut reading)?;
        let clock = optional::clock(fields, &mut reading)?;
        let survey = optional::survey(fields, &mut reading)?;
        let humidity = optional::humidity(fields, &mut reading)?;
        let leak = leak::read(fields, &mut reading)?;
        let wall = optional::wall(fields, &mut reading)?;
        let measured = optional::measured(fields, ambient.as_ref(), &mut reading)?;
        let tube = optional::tube(fields, ambient.as_ref(), &mut reading)?;
        let driver = optional::driver(fields, ambient.as_ref(), &mut reading, &mut flags)?;
        let disturbance = observation::of_shot(fields, &mut reading)?;
        optional::free_text(fields)?;
        if matches!(speed, Speed::Given(_)) {
            for key in ["attenuation", "clock", "survey"].into_iter().filter(|key| fields.get(key).is_some()) {
                let text = format!("{key} is recorded but not used: it belongs to a fit of stations, and shock_speed is given");
                flags.push(Flag::new("not-used", text));
            }
        }
        flags.extend(left_to_plans(tube.as_ref(), driver.as_ref()));
        if let Some(flag) = hazard::can_burn(&gas, &species, driver.as_ref()) {
            flags.insert(0, flag);
        }
        let entries = read::entries(&node, &reading);
        confirmations(&reading, &entries, &mut flags);
        Ok(Self {
            name,
            gas,
            heat_capacity,
            species,
            fill,
            speed,
            attenuation,
            clock,
            survey,
            ambient,
            humidity,
            leak,
            wall,
            measured,
            tube,
            driver,
            disturbance,
            confirmed: reading.answered,
            flags,
            entries,
            input_digest: input_digest(file),
        })
    }

    /// A shot that a plan leads to, with nothing measured.
    pub(super) fn planned(plan: &Plan, pressure: Quantity, speed: Quantity) -> Self {
        let absolute = Absolute { value: pressure.value(), standard_uncertainty: pressure.standard_uncertainty() };
        Self {
            name: plan.name.clone(),
            gas: plan.gas.clone(),
            heat_capacity: plan.heat_capacity,
            species: plan.species.clone(),
            fill: Fill { pressure, absolute, temperature: plan.temperature.clone() },
            speed: Speed::Given(speed),
            attenuation: None,
            clock: None,
            survey: None,
            ambient: plan.ambient.clone(),
            humidity: None,
            leak: None,
            wall: None,
            measured: None,
            tube: plan.tube.clone(),
            driver: plan.driver.clone(),
            disturbance: plan.tolerance.disturbance.clone(),
            confirmed: plan.confirmed.clone(),
            flags: plan.flags.clone(),
            entries: plan.entries.clone(),
            input_digest: plan.input_digest.clone(),
        }
    }
}

/// Flags for what of tube and driver serves to plan a shot and not to reduce one.
fn left_to_plans(tube: Option<&Tube>, driver: Option<&Driver>) -> Vec<Flag> {
    let stated = [
        ("tube.stations", tube.is_some_and(|tube| !tube.stations.is_empty())),
        ("tube.ratings", tube.is_some_and(|tube| !tube.ratings.is_empty())),
        ("tube.burst_pressure", tube.is_some_and(|tube| tube.burst_pressure.is_some())),
        ("driver.pressure", driver.is_some_and(|driver| driver.pressure.is_some())),
    ];
    stated.into_iter().filter(|(_, stated)| *stated).map(|(path, _)| Flag::not_used(path)).collect()
}

/// Refuses a record of another kind than the wanted one.
pub(super) fn kind(fields: Fields, wanted: &str, remedy: &str) -> Result<(), RecordError> {
    fields.required("record", &format!("\"{wanted}\""))?;
    match fields.text("record")? {
        Some(kind) if kind == wanted => Ok(()),
        other => {
            let typed = other.unwrap_or("");
            Err(RecordError::new(ErrorKind::Value, "record", typed, "this kind of record is not read here", remedy))
        }
    }
}

/// A record that confirms more is not a record of doubts; the bound also keeps the work small.
const MOST_CONFIRMED: usize = 50;

/// The confirmed paths; each must exist, or a typo would confirm nothing.
pub(super) fn confirm(fields: Fields, node: &Node) -> Result<Vec<String>, RecordError> {
    let mut leaves = Vec::new();
    read::leaves(node, "", &mut |path, _| leaves.push(path.to_string()));
    let mut paths = Vec::new();
    let items = fields.list("confirm")?.unwrap_or(&[]);
    if items.len() > MOST_CONFIRMED {
        let wrong = format!("{} values are confirmed", items.len());
        return Err(RecordError::new(
            ErrorKind::Value,
            "confirm",
            "",
            wrong,
            format!("confirm {MOST_CONFIRMED} at most; look at the record again"),
        ));
    }
    for (at, item) in items.iter().enumerate() {
        let place = format!("confirm[{at}]");
        let Node::Text(path) = item else {
            let wrong = format!("{} stands where the path of a field is wanted", item.kind());
            return Err(RecordError::new(ErrorKind::Field, &place, item.typed(), wrong, "write it like \"fill.temperature\""));
        };
        let inside = |leaf: &String| leaf.strip_prefix(path.as_str()).is_some_and(|rest| rest.is_empty() || rest.starts_with(['.', '[']));
        if path.is_empty() || !leaves.iter().any(inside) {
            return Err(RecordError::new(
                ErrorKind::Value,
                &place,
                path,
                "the record has no such field",
                "write it like \"fill.temperature\"",
            ));
        }
        paths.push(path.clone());
    }
    Ok(paths)
}

pub(super) fn confirmations(reading: &Reading, entries: &[Entry], flags: &mut Vec<Flag>) {
    for path in &reading.confirm {
        let typed = entries.iter().find(|entry| entry.path == *path).map_or("", |entry| entry.typed.as_str());
        let value = if typed.is_empty() { String::new() } else { format!(" \"{}\"", super::error::printable(typed)) };
        let flag = if reading.answered.contains(path) {
            Flag::new("confirmed", format!("{path}{value} is doubtful and was confirmed in the record"))
        } else {
            Flag::new("confirmed-without-question", format!("{path}{value} is confirmed in the record, though nothing was asked about it"))
        };
        flags.push(flag);
    }
}

fn fill(fields: Fields, ambient: Option<&Quantity>, reading: &mut Reading, flags: &mut Vec<Flag>) -> Result<Fill, RecordError> {
    let example = "{ \"pressure\": \"8.000 ± 0.020 kPa\", \"temperature\": \"296.2 ± 0.5 K\" }";
    let inner = Fields::new(fields.required("fill", example)?, "fill")?;
    inner.allow(&["pressure", "temperature"])?;
    let pressure = inner.required_quantity(reading, "pressure", Dimension::Pressure, "8.000 ± 0.020 kPa")?;
    let absolute = optional::absolute(&pressure, "fill.pressure", ambient)?;
    let pascals = absolute.value.to_f64();
    if pascals < 1.0 {
        reading.ask("fill.pressure", pressure.typed(), format!("{pascals} Pa is less than 1 Pa; is the unit right?"))?;
    }
    if pascals > 2.0e6 {
        reading.ask(
            "fill.pressure",
            pressure.typed(),
            format!("a driven section is rarely filled to {pascals} Pa; was another unit meant?"),
        )?;
    }
    optional::doubt_uncertainty(pascals, absolute.standard_uncertainty, pressure.typed(), "fill.pressure", reading)?;
    let temperature = inner.required_quantity(reading, "temperature", Dimension::Temperature, "296.2 ± 0.5 K")?;
    optional::doubt_temperature(&temperature, "fill.temperature", reading)?;
    let kelvin = temperature.value().to_f64();
    optional::doubt_uncertainty(kelvin, temperature.standard_uncertainty(), temperature.typed(), "fill.temperature", reading)?;
    if pressure.mark() == Mark::Gauge {
        let text = format!("fill.pressure was typed as gauge; with the ambient pressure it is {pascals} Pa absolute");
        flags.push(Flag::new("gauge-pressure", text));
    }
    for (path, missing) in [
        ("fill.pressure", pressure.uncertainty().is_none()),
        ("fill.temperature", temperature.uncertainty().is_none()),
        ("ambient", pressure.mark() == Mark::Gauge && ambient.is_some_and(|ambient| ambient.uncertainty().is_none())),
    ] {
        if missing {
            flags.push(missing_uncertainty(path));
        }
    }
    Ok(Fill { pressure, absolute, temperature })
}

fn missing_uncertainty(path: &str) -> Flag {
    Flag::new("missing-uncertainty", format!("{path} has no uncertainty: the results carry none from it"))
}

fn speed(fields: Fields, reading: &mut Reading, flags: &mut Vec<Flag>) -> Result<Speed, RecordError> {
    let stations = fields.list("stations")?;
    let given = fields.quantity(reading, "shock_speed", Dimension::Speed)?;
    match (stations, given) {
        (Some(_), Some(given)) => {
            let wrong = "stations and shock_speed are both given";
            Err(RecordError::new(ErrorKind::Field, "shock_speed", given.typed(), wrong, "keep the one that the states are to follow from"))
        }
        (None, None) => {
            let wrong = "neither stations nor shock_speed is given";
            Err(RecordError::new(
                ErrorKind::Field,
                "stations",
                "",
                wrong,
                "add \"stations\": [ … ] or \"shock_speed\": \"950.0 ± 1.0 m/s\"",
            ))
        }
        (Some(nodes), None) => station::read(nodes, reading, flags).map(Speed::Stations),
        (None, Some(given)) => {
            let value = given.value().to_f64();
            if value <= 0.0 {
                return Err(RecordError::new(
                    ErrorKind::Value,
                    "shock_speed",
                    given.typed(),
                    "a shock speed is greater than zero",
                    "type its size",
                ));
            }
            if !(100.0..=20_000.0).contains(&value) {
                reading.ask("shock_speed", given.typed(), "no shock in a tube has this speed; is the unit right?")?;
            }
            optional::doubt_uncertainty(value, given.standard_uncertainty(), given.typed(), "shock_speed", reading)?;
            if given.uncertainty().is_none() {
                flags.push(missing_uncertainty("shock_speed"));
            }
            Ok(Speed::Given(given))
        }
    }
}

#[cfg(test)]
#[path = "shot_tests.rs"]
mod tests;
