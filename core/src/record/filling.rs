//! How a plan's mixture is to be made: the record of it.

use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use super::error::{ErrorKind, RecordError};
use super::gas::{Component, GasRecord};
use super::optional;
use super::quantity::{Absolute, Mark, Quantity};
use super::read::{self, Fields, Reading};
use super::tree::Node;
use super::unit::Dimension;

/// Where the mixture is made.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Vessel {
    /// A vessel of its own, up to a pressure of its own.
    Mixing,
    /// The driven section, up to the planned fill pressure.
    Driven,
}

impl Vessel {
    /// Every choice.
    pub const ALL: [Self; 2] = [Self::Mixing, Self::Driven];

    /// As typed in a record.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Mixing => "mixing vessel",
            Self::Driven => "driven section",
        }
    }
}

/// Standard uncertainty of a reading, independent from one reading to the next.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Gauge {
    /// In proportion to the reading.
    pub relative: Option<Quantity>,
    /// The same at every reading, Pa.
    pub absolute: Option<Quantity>,
}

/// How the mixture is to be made.
#[derive(Clone, Debug, PartialEq)]
pub struct FillingRecord {
    /// Where.
    pub vessel: Vessel,
    /// The final pressure in a mixing vessel: as typed (marked), and absolute. `None` for the driven section.
    pub pressure: Option<(Quantity, Absolute)>,
    /// The temperature of the mixing vessel, K; `None` for that of the fill.
    pub temperature: Option<Quantity>,
    /// How much the temperature of the gas differs from one reading to the next, as a standard uncertainty, K.
    pub temperature_scatter: Option<Quantity>,
    /// The gases in the order in which they are let in; only those with a fraction above zero.
    pub order: Vec<Component>,
    /// What the pump left, as air: as typed, and absolute.
    pub residual: Option<(Quantity, Absolute)>,
    /// How well a reading is known.
    pub gauge: Gauge,
    /// The marked rating of a mixing vessel: as typed, and absolute. That of the driven section stands with those of the tube.
    pub rating: Option<(Quantity, Absolute)>,
    /// Vapour pressures (Pa, absolute) that the record states, at the temperature of the filling.
    pub vapour_pressures: Vec<(String, Quantity)>,
}

const FIELDS: [&str; 9] =
    ["vessel", "pressure", "temperature", "temperature_scatter", "order", "residual", "gauge", "rating", "vapour_pressures"];

const ORDER: &str = "\"order\": [\"CH4\", \"O2\", \"Ar\"]";

/// Reads `filling`.
pub(super) fn read(
    fields: Fields,
    gas: &GasRecord,
    ambient: Option<&Quantity>,
    reading: &mut Reading,
) -> Result<Option<FillingRecord>, RecordError> {
    let Some(node) = fields.get("filling") else { return Ok(None) };
    let inner = Fields::new(node, "filling")?;
    inner.allow(&FIELDS)?;
    let GasRecord::Mixture(components) = gas else {
        let wrong = "a gas given by its heat capacity ratio has no parts that could be let in one after another";
        return Err(RecordError::new(ErrorKind::Field, "filling", "", wrong, "give the gas by its species, or leave the field out"));
    };
    let vessel = vessel(inner)?;
    let pressure = optional::marked_pressure(inner, "pressure", ambient, reading)?;
    let temperature = inner.quantity(reading, "temperature", Dimension::Temperature)?;
    match (vessel, &pressure, &temperature) {
        (Vessel::Mixing, None, _) => {
            let remedy = "add \"pressure\": \"2.00 bar(a)\"";
            return Err(RecordError::new(
                ErrorKind::Field,
                "filling.pressure",
                "",
                "a mixing vessel is filled up to a pressure of its own",
                remedy,
            ));
        }
        (Vessel::Driven, Some((typed, _)), _) => {
            let wrong = "the driven section is filled up to the planned fill pressure";
            return Err(RecordError::new(ErrorKind::Field, "filling.pressure", typed.typed(), wrong, "leave it out"));
        }
        (Vessel::Driven, _, Some(typed)) => {
            let wrong = "the driven section is filled at the temperature of the fill";
            return Err(RecordError::new(ErrorKind::Field, "filling.temperature", typed.typed(), wrong, "leave it out"));
        }
        _ => {}
    }
    if let Some(temperature) = &temperature {
        optional::doubt_temperature(temperature, "filling.temperature", reading)?;
    }
    Ok(Some(FillingRecord {
        vessel,
        pressure,
        temperature,
        temperature_scatter: scatter(inner, reading)?,
        order: order(inner, components)?,
        residual: optional::pressure(inner, "residual", ambient, reading)?,
        gauge: gauge(inner, reading)?,
        rating: optional::marked_pressure(inner, "rating", ambient, reading)?,
        vapour_pressures: vapour_pressures(inner, components, reading)?,
    }))
}

fn vessel(filling: Fields) -> Result<Vessel, RecordError> {
    let choices = "write \"vessel\": \"mixing vessel\" or \"driven section\"";
    let Some(typed) = filling.text("vessel")? else {
        return Err(RecordError::new(ErrorKind::Field, "filling.vessel", "", "the vessel that is filled is not named", choices));
    };
    let found = Vessel::ALL.into_iter().find(|vessel| vessel.name() == typed);
    found.ok_or_else(|| RecordError::new(ErrorKind::Value, "filling.vessel", typed, "this vessel is unknown", choices))
}

fn scatter(filling: Fields, reading: &mut Reading) -> Result<Option<Quantity>, RecordError> {
    let Some(scatter) = filling.quantity(reading, "temperature_scatter", Dimension::Temperature)? else { return Ok(None) };
    if (0.0..20.0).contains(&scatter.value().to_f64()) && !scatter.unit().has_offset() {
        return Ok(Some(scatter));
    }
    let wrong = "how much the temperature differs from one reading to the next lies between 0 and 20 K";
    Err(RecordError::new(ErrorKind::Value, "filling.temperature_scatter", scatter.typed(), wrong, "write it in K, like \"0.2 K\""))
}

/// The order of the record, or that of the gas.
fn order(filling: Fields, components: &[Component]) -> Result<Vec<Component>, RecordError> {
    let present = || components.iter().filter(|component| component.fraction.is_positive());
    let Some(nodes) = filling.list("order")? else { return Ok(present().cloned().collect()) };
    let mut found: Vec<Component> = Vec::new();
    for (at, node) in nodes.iter().enumerate() {
        let path = format!("filling.order[{at}]");
        let fail = |wrong: &str, remedy: &str| Err(RecordError::new(ErrorKind::Value, &path, node.typed(), wrong, remedy));
        let Node::Text(name) = node else { return fail("the name of a gas is wanted here", &format!("write {ORDER}")) };
        if found.iter().any(|component| component.species == *name) {
            return fail("this gas is let in twice", "name each gas once");
        }
        match components.iter().find(|component| component.species == *name) {
            None => return fail("the gas of this plan does not hold it", "name the gases as in gas"),
            Some(component) if !component.fraction.is_positive() => return fail("its fraction is zero", "leave it out"),
            Some(component) => found.push(component.clone()),
        }
    }
    if let Some(missed) = present().find(|component| !found.contains(component)) {
        let wrong = format!("the order misses {}", missed.species);
        return Err(RecordError::new(ErrorKind::Value, "filling.order", "", wrong, format!("name every gas, like {ORDER}")));
    }
    Ok(found)
}

/// A text with % or a pressure, or an object with both.
fn gauge(filling: Fields, reading: &mut Reading) -> Result<Gauge, RecordError> {
    let path = "filling.gauge";
    let Some(node) = filling.get("gauge") else { return Ok(Gauge::default()) };
    if let Node::Object(_) = node {
        let inner = Fields::new(node, path)?;
        inner.allow(&["relative", "absolute"])?;
        let relative = inner.quantity(reading, "relative", Dimension::Fraction)?;
        let absolute = inner.quantity(reading, "absolute", Dimension::Pressure)?;
        return Ok(Gauge {
            relative: relative.map(|relative| proportion(relative, "filling.gauge.relative")).transpose()?,
            absolute: absolute.map(|absolute| difference(absolute, "filling.gauge.absolute")).transpose()?,
        });
    }
    let in_proportion = Quantity::parse(node.typed(), Dimension::Fraction).is_ok();
    Ok(if in_proportion {
        let relative = read::quantity(reading, node, path, Dimension::Fraction)?;
        Gauge { relative: Some(proportion(relative, path)?), absolute: None }
    } else {
        let absolute = read::quantity(reading, node, path, Dimension::Pressure)?;
        Gauge { relative: None, absolute: Some(difference(absolute, path)?) }
    })
}

const GAUGE: &str = "write \"0.1 %\", \"20 Pa\", or { \"relative\": \"0.1 %\", \"absolute\": \"20 Pa\" }";

fn proportion(relative: Quantity, path: &str) -> Result<Quantity, RecordError> {
    if (0.0..0.2).contains(&relative.value().to_f64()) {
        return Ok(relative);
    }
    let wrong = "the relative standard uncertainty of a reading lies between 0 and 20 %";
    Err(RecordError::new(ErrorKind::Value, path, relative.typed(), wrong, GAUGE))
}

fn difference(absolute: Quantity, path: &str) -> Result<Quantity, RecordError> {
    if absolute.mark() == Mark::Unmarked && !absolute.value().is_negative() {
        return Ok(absolute);
    }
    let wrong = "the standard uncertainty of a reading is zero or more, and neither gauge nor absolute";
    Err(RecordError::new(ErrorKind::Value, path, absolute.typed(), wrong, GAUGE))
}

fn vapour_pressures(filling: Fields, components: &[Component], reading: &mut Reading) -> Result<Vec<(String, Quantity)>, RecordError> {
    let Some(node) = filling.get("vapour_pressures") else { return Ok(Vec::new()) };
    let inner = Fields::new(node, "filling.vapour_pressures")?;
    let names: Vec<&str> = components.iter().map(|component| component.species.as_str()).collect();
    inner.allow(&names)?;
    let mut found = Vec::new();
    for (name, node) in inner.entries() {
        let path = inner.path_of(name);
        let pressure = read::quantity(reading, node, &path, Dimension::Pressure)?;
        if pressure.mark() == Mark::Gauge || !pressure.value().is_positive() {
            let wrong = "a vapour pressure is absolute and greater than zero";
            return Err(RecordError::new(ErrorKind::Value, &path, pressure.typed(), wrong, "write it like \"5.5 kPa\""));
        }
        found.push((name.clone(), pressure));
    }
    Ok(found)
}

#[cfg(test)]
#[path = "filling_tests.rs"]
mod tests;
