//! The sensors that time the shock.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;
use core::cmp::Ordering;

use super::error::{ErrorKind, RecordError};
use super::flag::Flag;
use super::gas::compare;
use super::quantity::Quantity;
use super::read::{Fields, Reading};
use super::tree::Node;
use super::unit::Dimension;
use crate::number::Rational;

/// One station.
#[derive(Clone, Debug, PartialEq)]
pub struct Station {
    /// Its name; names differ.
    pub name: String,
    /// Distance from the end wall, m, zero or more.
    pub from_end_wall: Quantity,
    /// Arrival of the shock, s.
    pub arrival: Quantity,
    /// Delay of the channel, s, to be taken off the arrival.
    pub delay: Option<Quantity>,
    /// False where the record leaves the station out of the fit.
    pub used: bool,
    /// Why it is left out.
    pub reason: Option<String>,
    /// Arrival less delay, s, exact.
    pub time: Rational,
    /// Standard uncertainty of [`time`](Self::time): those of arrival and delay in quadrature; `None` where neither was stated.
    pub time_uncertainty: Option<f64>,
}

/// Farther than this from the wall, the speed at the wall is an extrapolation.
const FAR_FROM_WALL: f64 = 0.3;

pub(super) fn read(nodes: &[Node], reading: &mut Reading, flags: &mut Vec<Flag>) -> Result<Vec<Station>, RecordError> {
    let mut stations = Vec::new();
    for (at, node) in nodes.iter().enumerate() {
        let station = one(node, &format!("stations[{at}]"), reading)?;
        if let Some(reason) = station.reason.as_ref().filter(|_| !station.used) {
            flags.push(Flag::new("station-left-out", format!("station {} is left out of the fit: {reason}", station.name)));
        }
        stations.push(station);
    }
    names_differ(&stations)?;
    let used: Vec<&Station> = stations.iter().filter(|station| station.used).collect();
    if used.len() < 2 {
        let wrong = format!("{} of {} stations can be used, and a speed needs two", used.len(), stations.len());
        return Err(RecordError::new(ErrorKind::Value, "stations", "", wrong, "add stations, or give \"shock_speed\""));
    }
    in_order(&used, reading)?;
    uncertainties(&stations, flags)?;
    let nearest = used.iter().map(|station| station.from_end_wall.value().to_f64()).fold(f64::INFINITY, f64::min);
    if nearest > FAR_FROM_WALL {
        let text = format!(
            "the last station in use is {nearest} m from the end wall: the speed at the wall is extrapolated over more than {FAR_FROM_WALL} m"
        );
        flags.push(Flag::new("far-station", text));
    }
    Ok(stations)
}

fn one(node: &Node, path: &str, reading: &mut Reading) -> Result<Station, RecordError> {
    let fields = Fields::new(node, path)?;
    fields.allow(&["name", "from_end_wall", "arrival", "delay", "use", "reason"])?;
    fields.required("name", "\"S1\"")?;
    let name = fields.text("name")?.unwrap_or("").trim().to_string();
    if name.is_empty() {
        return Err(RecordError::new(ErrorKind::Value, &fields.path_of("name"), "", "the name is empty", "name it, like \"S1\""));
    }
    let from_end_wall = fields.required_quantity(reading, "from_end_wall", Dimension::Length, "1.250 ± 0.0003 m")?;
    if from_end_wall.value().is_negative() {
        let wrong = "a distance from the end wall is zero or more";
        let remedy = "measure from the end wall towards the driver";
        return Err(RecordError::new(ErrorKind::Value, &fields.path_of("from_end_wall"), from_end_wall.typed(), wrong, remedy));
    }
    let arrival = fields.required_quantity(reading, "arrival", Dimension::Time, "413.9 ± 0.3 us")?;
    let delay = fields.quantity(reading, "delay", Dimension::Time)?;
    let time = match &delay {
        None => arrival.value(),
        Some(delay) => arrival.value().checked_sub(delay.value()).ok_or_else(|| {
            RecordError::new(
                ErrorKind::Value,
                &fields.path_of("delay"),
                delay.typed(),
                "the delay has too many digits",
                "type fewer digits",
            )
        })?,
    };
    let time_uncertainty = match (arrival.standard_uncertainty(), delay.as_ref().and_then(Quantity::standard_uncertainty)) {
        (Some(a), Some(b)) => Some(libm::hypot(a, b)),
        (one, other) => one.or(other),
    };
    let used = fields.truth("use")?.unwrap_or(true);
    let reason = fields.text("reason")?.map(ToString::to_string);
    if !used && reason.as_ref().is_none_or(|reason| reason.trim().is_empty()) {
        let remedy = "add \"reason\": why the station is left out";
        return Err(RecordError::new(ErrorKind::Field, &fields.path_of("reason"), "", "a station that is left out needs a reason", remedy));
    }
    Ok(Station { name, from_end_wall, arrival, delay, used, reason, time, time_uncertainty })
}

fn names_differ(stations: &[Station]) -> Result<(), RecordError> {
    let mut seen = alloc::collections::BTreeSet::new();
    for (at, station) in stations.iter().enumerate() {
        if !seen.insert(station.name.as_str()) {
            let path = format!("stations[{at}].name");
            return Err(RecordError::new(ErrorKind::Value, &path, &station.name, "another station has this name", "give each its own"));
        }
    }
    Ok(())
}

/// The nearer to the wall, the later; and the mean speed is one that a shock can have.
fn in_order(used: &[&Station], reading: &mut Reading) -> Result<(), RecordError> {
    let mut order = used.to_vec();
    order.sort_by(|a, b| compare(b.from_end_wall.value(), a.from_end_wall.value()).then(compare(a.time, b.time)));
    for (first, second) in order.iter().zip(order.iter().skip(1)) {
        if compare(first.from_end_wall.value(), second.from_end_wall.value()) == Ordering::Equal {
            let wrong = format!("stations {} and {} are at the same distance from the end wall", first.name, second.name);
            let remedy = "leave one out with \"use\": false and a reason";
            return Err(RecordError::new(ErrorKind::Value, "stations", second.from_end_wall.typed(), wrong, remedy));
        }
        if compare(second.time, first.time) != Ordering::Greater {
            let wrong = format!(
                "stations {} and {} contradict each other: {} is nearer to the end wall, but the shock does not arrive there later",
                first.name, second.name, second.name
            );
            let remedy = "were two stations swapped, or were distances measured from the diaphragm?";
            return Err(RecordError::new(ErrorKind::Value, "stations", &first_and_second(first, second), wrong, remedy));
        }
    }
    if let (Some(first), Some(last)) = (order.first(), order.last()) {
        let distance = first.from_end_wall.value().to_f64() - last.from_end_wall.value().to_f64();
        let duration = last.time.to_f64() - first.time.to_f64();
        let speed = distance / duration;
        if !(100.0..=20_000.0).contains(&speed) {
            let question = format!(
                "the mean speed from {} to {} is {speed:.4} m/s, which no shock in a tube has; are the units of distance and time right?",
                first.name, last.name
            );
            reading.ask("stations", "", question)?;
        }
    }
    Ok(())
}

fn first_and_second(first: &Station, second: &Station) -> String {
    format!("{}, {}; {}, {}", first.from_end_wall.typed(), first.arrival.typed(), second.from_end_wall.typed(), second.arrival.typed())
}

/// Weights need an uncertainty of every station in use, or of none.
fn uncertainties(stations: &[Station], flags: &mut Vec<Flag>) -> Result<(), RecordError> {
    let spread = |station: &Station| station.time_uncertainty.unwrap_or(0.0) + station.from_end_wall.standard_uncertainty().unwrap_or(0.0);
    let used = || stations.iter().enumerate().filter(|(_, station)| station.used);
    let Some((_, some)) = used().find(|(_, station)| spread(station) > 0.0) else {
        let text = "no station states an uncertainty of arrival or distance: the shock speed has no uncertainty";
        flags.push(Flag::new("missing-uncertainty", text));
        return Ok(());
    };
    if let Some((at, none)) = used().find(|(_, station)| spread(station) == 0.0) {
        let path = format!("stations[{at}].arrival");
        let wrong = format!("station {} has no uncertainty while {} has one, so they cannot be weighed", none.name, some.name);
        return Err(RecordError::new(ErrorKind::Value, &path, none.arrival.typed(), wrong, "state an uncertainty for every station"));
    }
    for (at, station) in used() {
        for (field, stated) in
            [("arrival", station.time_uncertainty.is_some()), ("from_end_wall", station.from_end_wall.uncertainty().is_some())]
        {
            if !stated {
                let text = format!("stations[{at}].{field} has no uncertainty: it counts as exact");
                flags.push(Flag::new("missing-uncertainty", text));
            }
        }
    }
    Ok(())
}
