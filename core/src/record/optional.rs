//! The optional fields of a shot, and the checks that several fields share.

use alloc::format;
use alloc::vec::Vec;

use super::error::{ErrorKind, RecordError};
use super::flag::Flag;
use super::gas::{self, GasRecord};
use super::observation;
use super::quantity::{Absolute, Mark, Quantity};
use super::read::{self, Fields, Reading};
use super::tree::Node;
use super::unit::Dimension;
use crate::gas::HeatCapacityModel;

/// An error that all positions share.
#[derive(Clone, Debug, PartialEq)]
pub enum Survey {
    /// Of the end wall against all stations, m.
    Offset(Quantity),
    /// Of the tape or of a tube at another temperature, relative.
    Scale(Quantity),
}

/// An end wall that is not rigid.
#[derive(Clone, Debug, PartialEq)]
pub enum Wall {
    /// It moves with this speed along the incident shock, m/s.
    Speed(Quantity),
    /// It yields as a massive elastic wall of this impedance, Pa s/m.
    Impedance(Quantity),
}

/// Measured values, absolute and in Pa, to be compared with the computed states.
#[derive(Clone, Debug, PartialEq)]
pub struct Measured {
    /// Behind the incident shock: as typed, and absolute.
    pub pressure_2: Option<(Quantity, Absolute)>,
    /// Behind the reflected shock: as typed, and absolute.
    pub pressure_5: Option<(Quantity, Absolute)>,
    /// The step p5 − p1.
    pub rise: Option<Quantity>,
    /// Change of the pressure at the end wall after the reflection, up to the time of interest, relative to p5.
    pub pressure_change: Option<Quantity>,
}

/// The tube; lengths in m, pressures absolute.
#[derive(Clone, Debug, PartialEq)]
pub struct Tube {
    /// Diaphragm to end wall.
    pub driven_length: Option<Quantity>,
    /// Length of the driver.
    pub driver_length: Option<Quantity>,
    /// Inner diameter of the driven section.
    pub driven_bore: Option<Quantity>,
    /// Inner diameter of the driver.
    pub driver_bore: Option<Quantity>,
    /// Distances of stations from the end wall.
    pub stations: Vec<Quantity>,
    /// Distance from the end wall of the place that is observed.
    pub observe: Option<Quantity>,
    /// Marked ratings of the parts.
    pub ratings: Vec<Rating>,
    /// Pressure at which the diaphragm bursts: as typed (marked), and absolute.
    pub burst_pressure: Option<(Quantity, Absolute)>,
}

/// The marked rating of a part of the tube.
#[derive(Clone, Debug, PartialEq)]
pub struct Rating {
    /// `driven`, `driver`, `window` or `sensor`.
    pub part: &'static str,
    /// As typed, and absolute in Pa.
    pub pressure: (Quantity, Absolute),
}

/// The parts that have ratings.
pub(super) const PARTS: [&str; 4] = ["driven", "driver", "window", "sensor"];

/// The driver.
#[derive(Clone, Debug, PartialEq)]
pub struct Driver {
    /// Its gas.
    pub gas: Option<GasRecord>,
    /// Its pressure: as typed (marked), and absolute.
    pub pressure: Option<(Quantity, Absolute)>,
    /// Its temperature, K.
    pub temperature: Option<Quantity>,
    /// Constant, or in equilibrium with the temperature; `None` where the record does not choose.
    pub heat_capacity: Option<HeatCapacityModel>,
}

/// The absolute pressure, greater than zero.
pub(super) fn absolute(pressure: &Quantity, path: &str, ambient: Option<&Quantity>) -> Result<Absolute, RecordError> {
    if pressure.mark() == Mark::Gauge && ambient.is_none() {
        let wrong = "a gauge pressure needs the ambient pressure";
        return Err(RecordError::new(
            ErrorKind::Field,
            path,
            pressure.typed(),
            wrong,
            "add \"ambient\": \"101.3 ± 0.1 kPa\", or type an absolute pressure",
        ));
    }
    let Some(absolute) = pressure.absolute(ambient) else {
        let wrong = "the sum with the ambient pressure has too many digits";
        return Err(RecordError::new(ErrorKind::Value, path, pressure.typed(), wrong, "type fewer digits"));
    };
    if !absolute.value.is_positive() {
        let remedy = if pressure.mark() == Mark::Gauge {
            "check the gauge and the ambient pressure"
        } else {
            "was a gauge pressure meant? Mark it, like kPa(g)"
        };
        return Err(RecordError::new(ErrorKind::Value, path, pressure.typed(), "an absolute pressure is greater than zero", remedy));
    }
    Ok(absolute)
}

/// Refuses an impossible temperature, and asks about one that looks like another scale.
pub(super) fn doubt_temperature(temperature: &Quantity, path: &str, reading: &mut Reading) -> Result<(), RecordError> {
    let kelvin = temperature.value().to_f64();
    let symbol = temperature.unit().symbol();
    let reading_typed = temperature.unit().reading(temperature.value());
    if kelvin <= 0.0 {
        return Err(RecordError::new(
            ErrorKind::Value,
            path,
            temperature.typed(),
            "a temperature is above 0 K",
            if temperature.unit().has_offset() {
                "check the sign and the unit".into()
            } else {
                format!("was degC meant instead of {symbol}?")
            },
        ));
    }
    if kelvin < 100.0 {
        let question = if temperature.unit().has_offset() {
            format!("{reading_typed} {symbol} is {kelvin} K, below the data range of every gas; is it right?")
        } else {
            format!("{kelvin} K is below the data range; was {kelvin} degC meant?")
        };
        return reading.ask(path, temperature.typed(), question);
    }
    if kelvin > 2000.0 {
        return reading.ask(path, temperature.typed(), format!("{kelvin} K is no usual fill; was degC or another unit meant?"));
    }
    if temperature.unit().has_offset() && (273.0..=330.0).contains(&reading_typed) && matches!(symbol, "degC" | "°C") {
        return reading.ask(path, temperature.typed(), format!("{reading_typed} degC is {kelvin} K; was {reading_typed} K meant?"));
    }
    Ok(())
}

/// Asks about an uncertainty that leaves nothing of the value: mostly another unit was meant, and no linear propagation holds there.
pub(super) fn doubt_uncertainty(
    value: f64,
    standard: Option<f64>,
    typed: &str,
    path: &str,
    reading: &mut Reading,
) -> Result<(), RecordError> {
    if standard.is_some_and(|standard| standard > value / 2.0) {
        let question = "the standard uncertainty is more than half of the value; are its digits and its unit right?";
        return reading.ask(path, typed, question);
    }
    Ok(())
}

pub(super) fn ambient(fields: Fields, reading: &mut Reading) -> Result<Option<Quantity>, RecordError> {
    let Some(ambient) = fields.quantity(reading, "ambient", Dimension::Pressure)? else { return Ok(None) };
    if ambient.mark() == Mark::Gauge {
        let wrong = "the ambient pressure is absolute";
        return Err(RecordError::new(
            ErrorKind::Value,
            "ambient",
            ambient.typed(),
            wrong,
            "type the reading of a barometer, like 101.3 kPa",
        ));
    }
    let pascals = ambient.value().to_f64();
    if pascals <= 0.0 {
        return Err(RecordError::new(
            ErrorKind::Value,
            "ambient",
            ambient.typed(),
            "an absolute pressure is greater than zero",
            "type the reading of a barometer",
        ));
    }
    if !(40_000.0..=115_000.0).contains(&pascals) {
        reading.ask("ambient", ambient.typed(), format!("no place on land has an air pressure of {pascals} Pa; is the unit right?"))?;
    }
    Ok(Some(ambient))
}

pub(super) fn attenuation(fields: Fields, reading: &mut Reading) -> Result<Option<Quantity>, RecordError> {
    let Some(allowance) = fields.quantity(reading, "attenuation", Dimension::PerLength)? else { return Ok(None) };
    let Some(standard) = allowance.standard_uncertainty().filter(|standard| *standard > 0.0) else {
        let wrong = "an attenuation allowance enters the fit as an observation and needs an uncertainty";
        return Err(RecordError::new(ErrorKind::Value, "attenuation", allowance.typed(), wrong, "write it like \"1.0 ± 0.6 %/m\""));
    };
    let value = allowance.value().to_f64();
    if value + 2.0 * standard < 0.0 {
        reading.ask("attenuation", allowance.typed(), "the allowance says that the shock gains speed; is the sign right?")?;
    }
    if value - 2.0 * standard > 0.05 {
        reading.ask("attenuation", allowance.typed(), "the allowance exceeds 5 %/m; is the unit right?")?;
    }
    Ok(Some(allowance))
}

pub(super) fn clock(fields: Fields, reading: &mut Reading) -> Result<Option<Quantity>, RecordError> {
    let Some(clock) = fields.quantity(reading, "clock", Dimension::Fraction)? else { return Ok(None) };
    only_uncertainty(&clock, "clock", "0 ± 20 ppm")?;
    Ok(Some(clock))
}

/// A length, or a fraction with its unit.
pub(super) fn survey(fields: Fields, reading: &mut Reading) -> Result<Option<Survey>, RecordError> {
    let relative = fields
        .get("survey")
        .is_some_and(|node| Quantity::parse(node.typed(), Dimension::Fraction).is_ok_and(|quantity| !quantity.unit().symbol().is_empty()));
    let dimension = if relative { Dimension::Fraction } else { Dimension::Length };
    let Some(survey) = fields.quantity(reading, "survey", dimension)? else { return Ok(None) };
    only_uncertainty(&survey, "survey", "0 ± 0.5 mm")?;
    Ok(Some(if relative { Survey::Scale(survey) } else { Survey::Offset(survey) }))
}

/// A known error is corrected before, not carried along: the value is zero, and its uncertainty is what counts.
fn only_uncertainty(quantity: &Quantity, path: &str, example: &str) -> Result<(), RecordError> {
    let fail = |wrong: &str| {
        let remedy = format!("correct the stations for a known error, and state what remains like \"{example}\"");
        RecordError::new(ErrorKind::Value, path, quantity.typed(), wrong, remedy)
    };
    if !quantity.value().is_zero() {
        return Err(fail("the value of a common error must be zero"));
    }
    if quantity.uncertainty().is_none() {
        return Err(fail("a common error without an uncertainty says nothing"));
    }
    Ok(())
}

pub(super) fn humidity(fields: Fields, reading: &mut Reading) -> Result<Option<Quantity>, RecordError> {
    let Some(humidity) = fields.quantity(reading, "humidity", Dimension::Fraction)? else { return Ok(None) };
    if !(0.0..=1.0).contains(&humidity.value().to_f64()) {
        let wrong = "a relative humidity lies between 0 and 100 %";
        return Err(RecordError::new(ErrorKind::Value, "humidity", humidity.typed(), wrong, "write it like \"45 ± 3 %\""));
    }
    Ok(Some(humidity))
}

pub(super) fn wall(fields: Fields, reading: &mut Reading) -> Result<Option<Wall>, RecordError> {
    let Some(node) = fields.get("wall") else { return Ok(None) };
    let inner = Fields::new(node, "wall")?;
    inner.allow(&["speed", "impedance"])?;
    let speed = inner.quantity(reading, "speed", Dimension::Speed)?;
    let impedance = inner.quantity(reading, "impedance", Dimension::Impedance)?;
    match (speed, impedance) {
        (Some(speed), None) => Ok(Some(Wall::Speed(speed))),
        (None, Some(impedance)) if impedance.value().is_positive() => Ok(Some(Wall::Impedance(impedance))),
        (None, Some(impedance)) => {
            let wrong = "an impedance is greater than zero";
            Err(RecordError::new(
                ErrorKind::Value,
                "wall.impedance",
                impedance.typed(),
                wrong,
                "density times wave speed; steel has about 40 MPa s/m",
            ))
        }
        (Some(_), Some(_)) => Err(RecordError::new(ErrorKind::Field, "wall", "", "speed and impedance are both given", "keep one")),
        (None, None) => Err(RecordError::new(
            ErrorKind::Field,
            "wall",
            "",
            "neither speed nor impedance is given",
            "leave the field out for a rigid wall",
        )),
    }
}

type Pressure = Option<(Quantity, Absolute)>;

pub(super) fn pressure(inner: Fields, key: &str, ambient: Option<&Quantity>, reading: &mut Reading) -> Result<Pressure, RecordError> {
    let Some(typed) = inner.quantity(reading, key, Dimension::Pressure)? else { return Ok(None) };
    let absolute = absolute(&typed, &inner.path_of(key), ambient)?;
    Ok(Some((typed, absolute)))
}

/// A pressure on which safety hangs: unmarked, it could be read as either.
pub(super) fn marked_pressure(
    inner: Fields,
    key: &str,
    ambient: Option<&Quantity>,
    reading: &mut Reading,
) -> Result<Pressure, RecordError> {
    let found = pressure(inner, key, ambient, reading)?;
    if let Some((typed, _)) = found.as_ref().filter(|(typed, _)| typed.mark() == Mark::Unmarked) {
        let wrong = "this pressure must be marked as gauge or absolute";
        let symbol = typed.unit().symbol();
        let remedy = format!("write {symbol}(g) or {symbol}(a)");
        return Err(RecordError::new(ErrorKind::Value, &inner.path_of(key), typed.typed(), wrong, remedy));
    }
    Ok(found)
}

pub(super) fn measured(fields: Fields, ambient: Option<&Quantity>, reading: &mut Reading) -> Result<Option<Measured>, RecordError> {
    let Some(node) = fields.get("measured") else { return Ok(None) };
    let inner = Fields::new(node, "measured")?;
    inner.allow(&["pressure_2", "pressure_5", "rise", "pressure_change"])?;
    let rise = inner.quantity(reading, "rise", Dimension::Pressure)?;
    if let Some(rise) = rise.as_ref().filter(|rise| rise.mark() != Mark::Unmarked) {
        let wrong = "a rise is a difference of pressures and is neither gauge nor absolute";
        return Err(RecordError::new(ErrorKind::Value, "measured.rise", rise.typed(), wrong, "leave the mark out"));
    }
    Ok(Some(Measured {
        pressure_2: pressure(inner, "pressure_2", ambient, reading)?,
        pressure_5: pressure(inner, "pressure_5", ambient, reading)?,
        rise,
        pressure_change: pressure_change(inner, reading)?,
    }))
}

fn pressure_change(measured: Fields, reading: &mut Reading) -> Result<Option<Quantity>, RecordError> {
    let Some(change) = measured.quantity(reading, "pressure_change", Dimension::Fraction)? else { return Ok(None) };
    let value = change.value().to_f64();
    if value <= -1.0 {
        let wrong = "the pressure cannot fall by all of it";
        let remedy = "write the change relative to p5, like \"6 ± 1 %\"";
        return Err(RecordError::new(ErrorKind::Value, "measured.pressure_change", change.typed(), wrong, remedy));
    }
    if !(-0.5..=1.0).contains(&value) {
        let question = "a change of the pressure this large is no drift of a plateau; is it right?";
        reading.ask("measured.pressure_change", change.typed(), question)?;
    }
    Ok(Some(change))
}

pub(super) fn tube(fields: Fields, ambient: Option<&Quantity>, reading: &mut Reading) -> Result<Option<Tube>, RecordError> {
    let Some(node) = fields.get("tube") else { return Ok(None) };
    let inner = Fields::new(node, "tube")?;
    let lengths = ["driven_length", "driver_length", "driven_bore", "driver_bore"];
    inner.allow(&["driven_length", "driver_length", "driven_bore", "driver_bore", "stations", "observe", "ratings", "burst_pressure"])?;
    let mut found = Vec::new();
    for key in lengths {
        let length = inner.quantity(reading, key, Dimension::Length)?;
        if let Some(length) = length.as_ref().filter(|length| !length.value().is_positive()) {
            return Err(RecordError::new(
                ErrorKind::Value,
                &inner.path_of(key),
                length.typed(),
                "a length is greater than zero",
                "type its size",
            ));
        }
        found.push(length);
    }
    let mut found = found.into_iter();
    let mut next = || found.next().flatten();
    let driven_length = next();
    Ok(Some(Tube {
        observe: observation::observe(inner, driven_length.as_ref(), reading)?,
        stations: tube_stations(inner, driven_length.as_ref(), reading)?,
        driven_length,
        driver_length: next(),
        driven_bore: next(),
        driver_bore: next(),
        ratings: ratings(inner, ambient, reading)?,
        burst_pressure: marked_pressure(inner, "burst_pressure", ambient, reading)?,
    }))
}

fn tube_stations(tube: Fields, driven_length: Option<&Quantity>, reading: &mut Reading) -> Result<Vec<Quantity>, RecordError> {
    let nodes = tube.list("stations")?.unwrap_or(&[]);
    let station = |(at, node)| {
        let path = format!("tube.stations[{at}]");
        observation::inside(read::quantity(reading, node, &path, Dimension::Length)?, &path, driven_length)
    };
    nodes.iter().enumerate().map(station).collect()
}

fn ratings(tube: Fields, ambient: Option<&Quantity>, reading: &mut Reading) -> Result<Vec<Rating>, RecordError> {
    let Some(node) = tube.get("ratings") else { return Ok(Vec::new()) };
    let inner = Fields::new(node, "tube.ratings")?;
    inner.allow(&PARTS)?;
    let mut found = Vec::new();
    for part in PARTS {
        if let Some(pressure) = marked_pressure(inner, part, ambient, reading)? {
            found.push(Rating { part, pressure });
        }
    }
    Ok(found)
}

pub(super) fn driver(
    fields: Fields,
    ambient: Option<&Quantity>,
    reading: &mut Reading,
    flags: &mut Vec<Flag>,
) -> Result<Option<Driver>, RecordError> {
    let Some(node) = fields.get("driver") else { return Ok(None) };
    let inner = Fields::new(node, "driver")?;
    inner.allow(&["gas", "pressure", "temperature", "heat_capacity"])?;
    let temperature = inner.quantity(reading, "temperature", Dimension::Temperature)?;
    if let Some(temperature) = &temperature {
        doubt_temperature(temperature, "driver.temperature", reading)?;
    }
    let gas = inner.get("gas").map(|node| gas::read(node, "driver.gas", reading, flags)).transpose()?;
    Ok(Some(Driver {
        heat_capacity: driver_heat_capacity(inner, gas.as_ref())?,
        gas,
        pressure: marked_pressure(inner, "pressure", ambient, reading)?,
        temperature,
    }))
}

fn driver_heat_capacity(driver: Fields, gas: Option<&GasRecord>) -> Result<Option<HeatCapacityModel>, RecordError> {
    let Some(typed) = driver.text("heat_capacity")? else { return Ok(None) };
    let refused = |wrong: &str, remedy: &str| Err(RecordError::new(ErrorKind::Value, "driver.heat_capacity", typed, wrong, remedy));
    match (typed, gas) {
        ("constant", _) => Ok(Some(HeatCapacityModel::Constant)),
        ("equilibrium", Some(GasRecord::Ratio { .. })) => refused(
            "a gas given by its heat capacity ratio has a constant heat capacity",
            "leave the field out or write \"constant\"; give species for \"equilibrium\"",
        ),
        ("equilibrium", _) => Ok(Some(HeatCapacityModel::Equilibrium)),
        _ => refused("this heat capacity is unknown for a driver", "write \"constant\" or \"equilibrium\""),
    }
}

/// `date` and `operator` are texts; `instruments` and `notes` may be lists of texts, `instruments` an object of texts.
/// They are carried into the report and never read.
pub(super) fn free_text(fields: Fields) -> Result<(), RecordError> {
    fields.text("date")?;
    fields.text("operator")?;
    for key in ["instruments", "notes"] {
        let path = fields.path_of(key);
        match fields.get(key) {
            None | Some(Node::Text(_)) => {}
            Some(Node::List(nodes)) => {
                for (at, node) in nodes.iter().enumerate() {
                    only_text(node, &format!("{path}[{at}]"))?;
                }
            }
            Some(Node::Object(entries)) if key == "instruments" => {
                for (name, node) in entries {
                    only_text(node, &super::tree::joined(&path, name))?;
                }
            }
            Some(other) => only_text(other, &path)?,
        }
    }
    Ok(())
}

fn only_text(node: &Node, path: &str) -> Result<(), RecordError> {
    match node {
        Node::Text(_) => Ok(()),
        other => {
            let wrong = format!("{} stands where a text is wanted", other.kind());
            Err(RecordError::new(ErrorKind::Field, path, other.typed(), wrong, "write it in quotes"))
        }
    }
}
