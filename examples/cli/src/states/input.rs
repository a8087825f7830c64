//! From the texts of the command line to a shock.
//!
//! The options are a record without a file: the reader of records checks them, so that the same doubts are asked in both places. A range
//! makes two records, one of its lower and one of its upper ends.

use endwall::gas::{InputError, Parameter};
use endwall::number::{Enclosure, Known, Rational};
use endwall::record::{Dimension, Mark, Quantity, Report, Shot};
use endwall::shock::{Entry, ThermalError};
use serde_json::{Value, json};

use super::Arguments;
use super::entry::Given;
use crate::failure::Failure;
use crate::gas::Mixture;
use crate::options::{self, CONFIRMED, exact};

/// A record needs some speed; only gas and fill are taken from it where another quantity is given.
const ANY_SPEED: &str = "1000 m/s";

/// What was typed, read and checked.
pub struct Input<'a> {
    /// The gas, if its heat capacity is constant.
    pub constant: Option<Constant>,
    /// p1, Pa.
    pub pressure: Known,
    /// T1, K.
    pub temperature: Known,
    /// What fixes the strength of the shock.
    pub entry: Entry,
    /// Its value, in SI units.
    pub value: Known,
    /// The end wall, if it is not rigid.
    pub wall: Option<Wall>,
    /// The fill as a record read it, at the lower ends of ranges.
    pub shot: Shot,
    /// The options.
    pub arguments: &'a Arguments,
    mixture: Option<Mixture>,
}

/// A gas of constant heat capacity.
pub struct Constant {
    /// γ.
    pub heat_capacity_ratio: Known,
    /// kg/mol.
    pub molar_mass: Known,
    /// Where the two numbers come from.
    pub source: &'static str,
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
        let mixture = arguments.gas.mixture()?;
        let shot = |pick: &dyn Fn(&str) -> String| options::read(&record(arguments, mixture.as_ref(), pick)?, &arguments.gas.typed());
        let low = shot(&|typed| Ends::of(typed).low)?;
        let high = shot(&|typed| Ends::of(typed).high)?;
        let between = |option: &str, typed: Option<&str>, low, high| range(option, typed.unwrap_or(""), low, high);
        let constant_of = |shot: &Shot| shot.gas.constant(shot.heat_capacity).ok();
        let constant = match constant_of(&low).zip(constant_of(&high)) {
            None => None,
            Some((low, high)) => Some(Constant {
                heat_capacity_ratio: between(
                    "heat-capacity-ratio",
                    arguments.heat_capacity_ratio.as_deref(),
                    low.heat_capacity_ratio,
                    high.heat_capacity_ratio,
                )?,
                molar_mass: between("molar-mass", arguments.molar_mass.as_deref(), low.molar_mass, high.molar_mass)?,
                source: low.source,
            }),
        };
        let pressure = between("pressure", Some(&arguments.pressure), low.fill.absolute.value, high.fill.absolute.value)?;
        let temperature =
            between("temperature", Some(&arguments.temperature), low.fill.temperature.value(), high.fill.temperature.value())?;
        let Some(given) = arguments.entry.given() else {
            return Err(Failure::plain(
                "nothing fixes the strength of the shock",
                "add one of its quantities, like --shock-speed \"950 m/s\" or --mach 3: see --help",
            ));
        };
        let value = quantity(given.option, given.typed, |typed| entry_value(&given, typed, low.ambient.as_ref()))?;
        let of_wall = |option: &str, typed: &str, dimension| quantity(option, typed, |typed| Ok(exact(option, typed, dimension)?.value()));
        let wall = match (&arguments.wall_speed, &arguments.wall_impedance) {
            (Some(speed), _) => Some(Wall::Speed(of_wall("wall-speed", speed, Dimension::Speed)?)),
            (None, Some(impedance)) => Some(Wall::Impedance(of_wall("wall-impedance", impedance, Dimension::Impedance)?)),
            (None, None) => None,
        };
        Ok(Self { constant, pressure, temperature, entry: given.entry, value, wall, shot: low, arguments, mixture })
    }

    /// True if some input is a range.
    pub fn has_range(&self) -> bool {
        let of_gas = self.constant.iter().flat_map(|gas| [gas.heat_capacity_ratio, gas.molar_mass]);
        let of_wall = self.wall.iter().map(|wall| match wall {
            Wall::Speed(known) | Wall::Impedance(known) => *known,
        });
        let mut all = [self.pressure, self.temperature, self.value].into_iter().chain(of_gas).chain(of_wall);
        all.any(|known| known.exact().is_none())
    }

    /// The report of a record with this shock speed, for the flags of the model and the other choices of heat capacity.
    ///
    /// `None` for a shock so weak that its speed is that of sound to the last digit: it has no limit of validity to flag.
    pub fn report(&self, shock_speed: f64) -> Option<Report> {
        let mut record = record(self.arguments, self.mixture.as_ref(), &|typed| Ends::of(typed).low).ok()?;
        record["shock_speed"] = Value::from(format!("{shock_speed} m/s"));
        record["confirm"] =
            json!(CONFIRMED.map(|(_, path)| path).iter().filter(|path| record.pointer(&pointer(path)).is_some()).collect::<Vec<_>>());
        Shot::read(record.to_string().as_bytes()).and_then(|shot| shot.reduce()).ok()
    }

    /// An input that a relation refused.
    pub fn refused(&self, error: InputError) -> Failure {
        let arguments = self.arguments;
        let given = arguments.entry.given();
        let gas = arguments.gas.typed();
        let (option, typed) = match error.parameter {
            Parameter::HeatCapacityRatio => ("heat-capacity-ratio", arguments.heat_capacity_ratio.as_deref()),
            Parameter::MolarMass => ("molar-mass", arguments.molar_mass.as_deref()),
            Parameter::MoleFraction | Parameter::DataRange => ("gas", Some(gas.as_str())),
            Parameter::FillPressure => ("pressure", Some(arguments.pressure.as_str())),
            Parameter::FillTemperature => ("temperature", Some(arguments.temperature.as_str())),
            Parameter::WallSpeed => ("wall-speed", arguments.wall_speed.as_deref()),
            Parameter::WallImpedance => ("wall-impedance", arguments.wall_impedance.as_deref()),
            _ => given.map_or(("mach", None), |given| (given.option, Some(given.typed))),
        };
        Failure::option(option, error, typed.unwrap_or(""), "correct it, or the inputs that it is compared with")
    }

    /// A shock without an answer.
    pub fn unproven(&self, error: ThermalError) -> Failure {
        match (error, self.arguments.entry.given()) {
            (ThermalError::Input(error), _) => self.refused(error),
            (other, Some(given)) => Failure::option(given.option, other, given.typed, "choose another strength of the shock"),
            (other, None) => Failure::plain(&other.to_string(), "choose another strength of the shock"),
        }
    }
}

fn pointer(path: &str) -> String {
    format!("/{}", path.replace('.', "/"))
}

/// The options as a record, each text picked from what was typed.
fn record(arguments: &Arguments, mixture: Option<&Mixture>, pick: &dyn Fn(&str) -> String) -> Result<Value, Failure> {
    let mut record = json!({
        "record": "shot/1",
        "fill": { "pressure": pick(&arguments.pressure), "temperature": pick(&arguments.temperature) },
        "shock_speed": arguments.entry.shock_speed.as_deref().map_or(ANY_SPEED.to_string(), pick),
    });
    match (mixture, &arguments.heat_capacity_ratio, &arguments.molar_mass) {
        (Some(mixture), ..) => arguments.gas.put_into(mixture, &mut record),
        (None, Some(ratio), Some(mass)) => {
            record["gas"] = json!({ "heat_capacity_ratio": pick(ratio), "molar_mass": pick(mass) });
        }
        (None, ..) => {
            let remedy =
                "add --gas \"CH4 0.5 %, O2 1 %, Ar balance\", --gas argon, or --heat-capacity-ratio 7/5 --molar-mass \"28.0134 g/mol\"";
            return Err(Failure::plain("no gas is given", remedy));
        }
    }
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
    Ok(record)
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

fn entry_value(given: &Given, typed: &str, ambient: Option<&Quantity>) -> Result<Rational, Failure> {
    let quantity = exact(given.option, typed, given.dimension)?;
    if quantity.mark() == Mark::Gauge && given.entry != Entry::ReflectedPressure {
        return Err(Failure::option(given.option, "a difference of pressures is neither gauge nor absolute", typed, "leave (g) out"));
    }
    let absolute = quantity.absolute(ambient).map(|absolute| absolute.value);
    absolute
        .ok_or_else(|| Failure::option(given.option, "a gauge pressure needs the ambient pressure", typed, "add --ambient \"101.3 kPa\""))
}
