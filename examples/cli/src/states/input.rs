//! From the texts of the command line to a shock.
//!
//! The options are a record without a file: the reader of records checks them, so that the same doubts are asked in both places. A range
//! makes two records, one of its lower and one of its upper ends.

use endwall::gas::HeatCapacityModel;
use endwall::gas::{Fill, Gas, HeatCapacityRatio, InputError, Parameter};
use endwall::number::{Enclosure, Known, Rational};
use endwall::record::{Dimension, ErrorKind, Mark, Quantity, RecordError, Shot};
use endwall::shock::{Entry, Incident, WallReflection};
use serde_json::{Value, json};

use super::Arguments;
use super::entry::Given;
use crate::failure::Failure;

/// What can be confirmed: the option and the field of the record that it stands for.
pub const CONFIRMED: [(&str, &str); 5] = [
    ("heat-capacity-ratio", "gas.heat_capacity_ratio"),
    ("molar-mass", "gas.molar_mass"),
    ("pressure", "fill.pressure"),
    ("temperature", "fill.temperature"),
    ("shock-speed", "shock_speed"),
];

/// Names for the species that the record knows.
const GASES: [(&str, &str); 3] = [("argon", "Ar"), ("helium", "He"), ("neon", "Ne")];

/// The species of a gas by its name or symbol.
fn species(name: &str) -> Option<&'static str> {
    GASES.iter().find(|(known, symbol)| known.eq_ignore_ascii_case(name) || *symbol == name).map(|(_, symbol)| *symbol)
}

/// A record needs some speed; only gas and fill are taken from it where another quantity is given.
const ANY_SPEED: &str = "1000 m/s";

/// A shock, and what the answer says about its input.
pub struct Input<'a> {
    /// The shock with its fill.
    pub incident: Incident,
    /// The end wall, if it is not rigid.
    pub wall: Option<Wall>,
    /// Where the gas data come from.
    pub gas_data: &'static str,
    /// The fill as a record read it, at the lower ends of ranges.
    pub shot: Shot,
    arguments: &'a Arguments,
}

/// An end wall that is not rigid.
#[derive(Clone, Copy)]
pub enum Wall {
    /// It moves with this velocity, m/s.
    Speed(Known),
    /// It yields as elastic material of this impedance, Pa s/m.
    Impedance(Known),
}

/// The ends of what was typed: both are the same text where it is no range.
struct Ends {
    low: String,
    high: String,
}

impl Ends {
    fn of(typed: &str) -> Self {
        let Some((low, high)) = typed.split_once("..") else {
            return Self { low: typed.into(), high: typed.into() };
        };
        let (low, high) = (low.trim(), high.trim());
        // The unit stands once, behind the second number, or twice.
        let unit = high.split_once(char::is_whitespace).map_or("", |(_, unit)| unit.trim());
        let low = if unit.is_empty() || low.contains(char::is_whitespace) { low.to_string() } else { format!("{low} {unit}") };
        Self { low, high: high.to_string() }
    }
}

impl<'a> Input<'a> {
    /// Reads and checks all options.
    pub fn read(arguments: &'a Arguments) -> Result<Self, Failure> {
        let low = shot(arguments, |typed| Ends::of(typed).low)?;
        let high = shot(arguments, |typed| Ends::of(typed).high)?;
        let gas = |shot: &Shot| shot.gas.constant(HeatCapacityModel::Constant).map_err(|error| failure(arguments, error));
        let (low_gas, high_gas) = (gas(&low)?, gas(&high)?);
        let between = |option: &str, typed: Option<&str>, low, high| range(option, typed.unwrap_or(""), low, high);
        let ratio = between(
            "heat-capacity-ratio",
            arguments.heat_capacity_ratio.as_deref(),
            low_gas.heat_capacity_ratio,
            high_gas.heat_capacity_ratio,
        )?;
        let mass = between("molar-mass", arguments.molar_mass.as_deref(), low_gas.molar_mass, high_gas.molar_mass)?;
        let pressure = between("pressure", Some(&arguments.pressure), low.fill.absolute.value, high.fill.absolute.value)?;
        let temperature =
            between("temperature", Some(&arguments.temperature), low.fill.temperature.value(), high.fill.temperature.value())?;
        let refused = |error| refused(arguments, error);
        let gas = HeatCapacityRatio::new(ratio).and_then(|ratio| Gas::new(ratio, mass)).map_err(refused)?;
        let fill = Fill::new(gas, pressure, temperature).map_err(refused)?;
        let Some(given) = arguments.entry.given() else {
            return Err(Failure::plain(
                "nothing fixes the strength of the shock",
                "add one of its quantities, like --shock-speed \"950 m/s\" or --mach 3: see --help",
            ));
        };
        let value = quantity(given.option, given.typed, |typed| entry_value(&given, typed, low.ambient.as_ref()))?;
        let incident = Incident::new(&fill, given.entry, value).map_err(refused)?;
        let of_wall = |option: &str, typed: &str, dimension| quantity(option, typed, |typed| Ok(exact(option, typed, dimension)?.value()));
        let wall = match (&arguments.wall_speed, &arguments.wall_impedance) {
            (Some(speed), _) => Some(Wall::Speed(of_wall("wall-speed", speed, Dimension::Speed)?)),
            (None, Some(impedance)) => Some(Wall::Impedance(of_wall("wall-impedance", impedance, Dimension::Impedance)?)),
            (None, None) => None,
        };
        Ok(Self { incident, wall, gas_data: low_gas.source, shot: low, arguments })
    }

    /// The state at the wall, if it is not rigid.
    pub fn reflection(&self) -> Result<Option<WallReflection>, Failure> {
        let reflection = match self.wall {
            None => return Ok(None),
            Some(Wall::Speed(speed)) => self.incident.reflected_from_wall(speed),
            Some(Wall::Impedance(impedance)) => self.incident.reflected_from_yielding_wall(impedance),
        };
        reflection.map(Some).map_err(|error| refused(self.arguments, error))
    }

    /// The flags of the record, and those of its model at this shock speed.
    pub fn flags(&self, shock_speed: f64) -> Vec<endwall::record::Flag> {
        let mut flags: Vec<_> = self.shot.flags.iter().filter(|flag| flag.code != "missing-uncertainty").cloned().collect();
        let mut record = record(self.arguments, |typed| Ends::of(typed).low);
        record["shock_speed"] = Value::from(format!("{shock_speed} m/s"));
        record["confirm"] =
            json!(CONFIRMED.map(|(_, path)| path).iter().filter(|path| record.pointer(&pointer(path)).is_some()).collect::<Vec<_>>());
        // A shock so weak that its speed is that of sound to the last digit cannot be reduced again, and has no limit of validity to flag.
        let report = Shot::read(record.to_string().as_bytes()).and_then(|shot| shot.reduce());
        let model = ["constant-heat-capacity", "ionisation", "real-gas", "wall-moves"];
        flags.extend(report.map_or(Vec::new(), |report| report.flags).into_iter().filter(|flag| model.contains(&flag.code.as_str())));
        flags
    }
}

fn pointer(path: &str) -> String {
    format!("/{}", path.replace('.', "/"))
}

/// The options as a record, each text picked from what was typed.
fn record(arguments: &Arguments, pick: impl Fn(&str) -> String) -> Value {
    let gas = match (&arguments.gas, &arguments.heat_capacity_ratio, &arguments.molar_mass) {
        (None, Some(ratio), Some(mass)) => json!({ "heat_capacity_ratio": pick(ratio), "molar_mass": pick(mass) }),
        (name, ..) => json!({ name.as_deref().and_then(species).unwrap_or(""): "1" }),
    };
    let speed = arguments.entry.shock_speed.as_deref().map_or(ANY_SPEED.to_string(), &pick);
    let mut record = json!({
        "record": "shot/1",
        "gas": gas,
        "heat_capacity": "constant",
        "fill": { "pressure": pick(&arguments.pressure), "temperature": pick(&arguments.temperature) },
        "shock_speed": speed,
    });
    if let Some(ambient) = &arguments.ambient {
        record["ambient"] = Value::from(pick(ambient));
    }
    if let Some(speed) = &arguments.wall_speed {
        record["wall"] = json!({ "speed": pick(speed) });
    }
    if let Some(impedance) = &arguments.wall_impedance {
        record["wall"] = json!({ "impedance": pick(impedance) });
    }
    let confirmed: Vec<&str> =
        arguments.confirm.iter().filter_map(|name| CONFIRMED.iter().find(|(option, _)| option == name)).map(|(_, path)| *path).collect();
    if !confirmed.is_empty() {
        record["confirm"] = json!(confirmed);
    }
    record
}

fn shot(arguments: &Arguments, pick: impl Fn(&str) -> String) -> Result<Shot, Failure> {
    if let Some(name) = arguments.gas.as_deref().filter(|name| species(name).is_none()) {
        let remedy = "argon, helium and neon are known by name, since their heat capacity is constant. For any other gas give its ratio and molar \
            mass: --heat-capacity-ratio 7/5 --molar-mass \"28.0134 g/mol\" (its heat capacity is then taken as constant)";
        return Err(Failure::option("gas", "this gas is not known by name", name, remedy));
    }
    let shot = Shot::read(record(arguments, pick).to_string().as_bytes()).map_err(|error| failure(arguments, error))?;
    if let Some(entry) = shot.entries.iter().find(|entry| entry.quantity.as_ref().is_some_and(|quantity| quantity.uncertainty().is_some()))
    {
        return Err(uncertain(option_of(&entry.path), &entry.typed));
    }
    Ok(shot)
}

fn uncertain(option: &str, typed: &str) -> Failure {
    let remedy = "leave the uncertainty out, type a range like \"7.9..8.1 kPa\", or write a record and use endwall reduce";
    Failure::option(option, "a quick look takes no uncertainty", typed, remedy)
}

/// The option that stands for a field of the record.
fn option_of(path: &str) -> &str {
    match path {
        "ambient" => "ambient",
        "wall.speed" => "wall-speed",
        "wall.impedance" => "wall-impedance",
        _ if path.starts_with("gas.") && !CONFIRMED.iter().any(|(_, known)| *known == path) => "gas",
        _ => CONFIRMED.iter().find(|(_, known)| *known == path).map_or(path, |(option, _)| option),
    }
}

/// An error of the reader of records, in the words of the command line.
fn failure(arguments: &Arguments, error: RecordError) -> Failure {
    let option = option_of(&error.path);
    let remedy = match error.kind {
        ErrorKind::Doubtful => format!("correct it, or state that it is right with --confirm {option}"),
        _ if error.remedy.contains("\"ambient\"") => "add --ambient \"101.3 kPa\", or type the pressure absolute".to_string(),
        _ => error.remedy,
    };
    let typed = if option == "gas" { arguments.gas.as_deref().unwrap_or("") } else { error.typed.as_str() };
    Failure::option(option, error.wrong, typed, remedy)
}

fn refused(arguments: &Arguments, error: InputError) -> Failure {
    let given = arguments.entry.given();
    let (option, typed) = match error.parameter {
        Parameter::HeatCapacityRatio => ("heat-capacity-ratio", arguments.heat_capacity_ratio.as_deref()),
        Parameter::MolarMass => ("molar-mass", arguments.molar_mass.as_deref()),
        Parameter::FillPressure => ("pressure", Some(arguments.pressure.as_str())),
        Parameter::FillTemperature => ("temperature", Some(arguments.temperature.as_str())),
        Parameter::WallSpeed => ("wall-speed", arguments.wall_speed.as_deref()),
        Parameter::WallImpedance => ("wall-impedance", arguments.wall_impedance.as_deref()),
        _ => given.map_or(("mach", None), |given| (given.option, Some(given.typed))),
    };
    Failure::option(option, error, typed.unwrap_or(""), "correct it, or the inputs that it is compared with")
}

/// A value, or the enclosure of a range, from a reader of single texts.
fn quantity(option: &str, typed: &str, read: impl Fn(&str) -> Result<Rational, Failure>) -> Result<Known, Failure> {
    let ends = Ends::of(typed);
    range(option, typed, read(&ends.low)?, read(&ends.high)?)
}

fn range(option: &str, typed: &str, low: Rational, high: Rational) -> Result<Known, Failure> {
    if low == high {
        return Ok(Known::from(low));
    }
    if low.compare(high) == Some(std::cmp::Ordering::Less) {
        return Ok(Known::from(Enclosure::from(low).hull(Enclosure::from(high))));
    }
    Err(Failure::option(option, "the range ends below its beginning", typed, "type the smaller number first"))
}

fn exact(option: &str, typed: &str, dimension: Dimension) -> Result<Quantity, Failure> {
    let quantity = Quantity::parse(typed, dimension).map_err(|error| {
        let error = error.at("");
        Failure::option(option, error.wrong, typed, error.remedy)
    })?;
    if quantity.uncertainty().is_some() { Err(uncertain(option, typed)) } else { Ok(quantity) }
}

fn entry_value(given: &Given, typed: &str, ambient: Option<&Quantity>) -> Result<Rational, Failure> {
    let quantity = exact(given.option, typed, given.dimension)?;
    if quantity.mark() == Mark::Gauge && given.entry != Entry::ReflectedPressure {
        return Err(Failure::option(given.option, "a difference of pressures is neither gauge nor absolute", typed, "leave (g) out"));
    }
    let absolute = quantity.absolute(ambient).map(|absolute| absolute.value);
    absolute
        .ok_or_else(|| Failure::option(given.option, "a gauge pressure needs the ambient pressure", typed, "add --ambient \"101.3 kPa\""))
}
