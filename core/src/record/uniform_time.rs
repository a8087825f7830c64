//! How long the state behind the reflected shock lasts in an ideal tube, and what ends it; for plans and for shots.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use serde::Serialize;

use super::error::{ErrorKind, RecordError};
use super::flag::Flag;
use super::format::significant;
use super::optional::Tube as TubeRecord;
use super::report::{ReportQuantity, computed};
use crate::number::{Ball, Enclosure, Rational};
use crate::tube::{
    BehindShock, Contact, ContactReturn, ContactWaves, Driver, DriverGas, Interaction, Lengths, Limit, Tailoring, TestTime, Tube,
    TubeInputError, WaveDiagram, WaveName,
};

/// How long the state at the end wall lasts in an ideal tube, and what ends it.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct UniformTime {
    /// s.
    pub end_wall: ReportQuantity,
    /// What ends it.
    pub cause: String,
    /// The shortest driver that does not limit it, m.
    pub shortest_driver: Option<f64>,
    /// The same at the place that the record observes; `None` where it names none.
    pub observed: Option<ObservedTime>,
    /// The change of pressure, relative to p5, up to which a wave from the contact surface does not count; 0 where every first wave counts.
    pub disturbance_tolerance: f64,
    /// The wave that the contact surface sends back; `None` for a tailored one, and where the expansion comes to the contact surface before.
    pub returned_wave: Option<ReturnedWave>,
}

/// The uniform time at a distance from the end wall.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct ObservedTime {
    /// The distance, m.
    pub from_end_wall: f64,
    /// From the reflected shock on, s.
    pub time: ReportQuantity,
    /// What ends it.
    pub cause: String,
}

/// The wave that comes back from the contact surface.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct ReturnedWave {
    /// `shock` or `expansion`.
    pub kind: &'static str,
    /// It comes to the end wall so long after the reflection, s.
    pub arrival: f64,
    /// What it changes the pressure at the end wall by, relative to p5; `None` where its strength is not known.
    pub pressure_change: Option<f64>,
    /// Whether it ends the uniform time: true for one beyond the tolerance, and for one of unknown strength.
    pub counts: bool,
}

/// A shock with its driver in a tube.
pub(super) struct Setting<'a> {
    pub behind: &'a BehindShock<'a>,
    pub driver: &'a Driver<'a>,
    pub contact: &'a Contact<'a>,
    /// What follows there; `None` where it is not proven.
    pub met: Option<&'a ContactWaves>,
    pub tube: Option<&'a TubeRecord>,
    /// p5, Pa.
    pub reflected_pressure: f64,
    /// The change of p5 that does not count.
    pub disturbance: f64,
}

/// What is found.
pub(super) struct Found {
    pub time: UniformTime,
    /// With every wave, also those that do not count.
    pub diagram: WaveDiagram,
    /// Whether a wave from the contact surface ends the time where nothing comes before.
    pub contact_counts: bool,
    /// Speed of that wave toward the end wall, m/s; `None` for a tailored contact surface.
    pub returned_speed: Option<f64>,
}

impl Setting<'_> {
    /// The time and its diagram; `None` without both lengths and for a driver whose waves are not known.
    ///
    /// A returned wave that does not count leaves the contact surface at rest within the tolerance: what comes next comes through it as through a
    /// tailored one.
    pub fn find(&self, flags: &mut Vec<Flag>) -> Result<Option<Found>, RecordError> {
        let lengths = self.tube.and_then(|tube| Some((tube.driven_length.as_ref()?.value(), tube.driver_length.as_ref()?.value())));
        let Some((driven, driver_length)) = lengths else { return Ok(None) };
        // The diagram knows the fan of a constant heat capacity only.
        let follows_temperature = matches!(self.driver.gas(), DriverGas::Thermal(_));
        let speeds = match self.driver.with_constant_heat_capacity().and_then(|driver| driver.speeds(self.behind)) {
            Ok(speeds) => speeds,
            Err(error) => {
                let why = if self.driver.area_ratio().exact() == Some(Rational::ONE) {
                    format!("{error}")
                } else {
                    "it is drawn for a driver as wide as the driven section only".to_string()
                };
                flags.push(Flag::new("no-wave-diagram", format!("no wave diagram and no uniform time: {why}")));
                return Ok(None);
            }
        };
        if follows_temperature {
            let text = "the expansion in the driver is drawn with the heat capacity at the temperature of the driver: the times that it ends are approximate";
            flags.push(Flag::new("driver-expansion", text));
        }
        let met = self.met.map(ContactWaves::interaction);
        let contact = if let Some(met) = self.met {
            met.contact_return()
        } else {
            let text = "the wave that comes back from the contact surface is taken as a sound wave, since its strength is not computed; a returned shock would be faster";
            flags.push(Flag::new("returned-wave", text));
            ContactReturn::Wave { speed: speeds.sound_speed_5 }
        };
        let lengths = Lengths { driven: Ball::from(driven), driver: Ball::from(driver_length) };
        let diagram = WaveDiagram::new(Tube { speeds, lengths, contact }).map_err(refused)?;
        let returned_speed = match contact {
            ContactReturn::Wave { speed } => Some(speed),
            ContactReturn::Tailored { .. } => None,
        };
        let change = met.as_ref().map(|met| met.end_wall_pressure.middle() / self.reflected_pressure - 1.0);
        let weak = met.as_ref().zip(change).filter(|(_, change)| returned_speed.is_some() && change.abs() <= self.disturbance);
        let timed = match weak {
            Some((met, _)) => WaveDiagram::new(Tube { speeds, lengths, contact: tailored(met) }).map_err(refused)?,
            None => diagram,
        };
        let returned_wave = returned_speed.filter(|_| diagram.wave(WaveName::ReturnedWave).is_some()).and_then(|speed| {
            let tube = diagram.tube();
            Some(ReturnedWave {
                kind: match self.contact.tailoring() {
                    Tailoring::Expansion => "expansion",
                    Tailoring::Shock => "shock",
                    Tailoring::Tailored => return None,
                },
                arrival: tube.station_duration(tube.contact_distance(), speed, Ball::from(0.0)).nearest(),
                pressure_change: change,
                counts: weak.is_none(),
            })
        });
        // Through a contact surface that is only nearly at rest the digits of a tailored one prove nothing.
        let is_proven = weak.is_none() && !follows_temperature;
        let figure = |time: TestTime| computed(time.duration.middle(), "s", Some(time.duration).filter(|_| is_proven));
        let at_wall = timed.test_time(0.0).map_err(refused)?;
        let observed = self.tube.and_then(|tube| tube.observe.as_ref()).map(|place| {
            let time = timed.test_time(place.value()).map_err(refused)?;
            Ok::<_, RecordError>(ObservedTime {
                from_end_wall: place.value().to_f64(),
                time: figure(time),
                cause: time.limit.name().to_string(),
            })
        });
        let time = UniformTime {
            end_wall: figure(at_wall),
            cause: at_wall.limit.name().to_string(),
            shortest_driver: timed.shortest_driver(0.0).ok().filter(|length| length.is_proven()).map(Enclosure::middle),
            observed: observed.transpose()?,
            disturbance_tolerance: self.disturbance,
            returned_wave,
        };
        if at_wall.limit == Limit::IncidentOvertaken {
            flags.push(overtaken(&diagram));
        }
        flags.extend(time.returned_wave.as_ref().and_then(|wave| weak_wave(wave, self.disturbance)));
        flags.push(ideal(self.disturbance));
        let contact_counts = returned_speed.is_some() && weak.is_none();
        Ok(Some(Found { time, diagram, contact_counts, returned_speed: returned_speed.map(Ball::nearest) }))
    }
}

/// A contact surface that stays nearly at rest, as one that does.
fn tailored(met: &Interaction) -> ContactReturn {
    ContactReturn::Tailored {
        transmitted_shock: Ball::around(met.transmitted_speed),
        sound_speed: Ball::around(met.transmitted_sound_speed),
    }
}

fn refused(error: TubeInputError) -> RecordError {
    RecordError::new(ErrorKind::Value, "tube", "", format!("{error}"), "check the lengths of the tube")
}

fn overtaken(diagram: &WaveDiagram) -> Flag {
    let place = diagram.wave(WaveName::IncidentShock).map_or(f64::NAN, |shock| shock.to.position.middle());
    let length = diagram.tube().shortest_driver_without_overtaking().nearest();
    let text = format!(
        "the expansion overtakes the incident shock {} m from the diaphragm, before the end wall: the shock decays from there on and does not reach the end wall with the speed and the states of this report; a driver longer than {} m avoids it",
        significant(place, 3),
        significant(length, 3)
    );
    Flag::new("incident-overtaken", text)
}

/// The flag for a wave that is there and does not count.
fn weak_wave(wave: &ReturnedWave, tolerance: f64) -> Option<Flag> {
    let change = wave.pressure_change.filter(|_| !wave.counts)?;
    let text = format!(
        "{} comes back from the contact surface {} ms after the reflection and changes the pressure at the end wall by {} %: within the tolerance of {} %, so that it does not end the uniform time. The times are those of a contact surface that stays at rest",
        if wave.kind == "shock" { "a shock" } else { "an expansion" },
        significant(wave.arrival * 1e3, 3),
        signed(change * 100.0),
        significant(tolerance * 100.0, 2)
    );
    Some(Flag::new("weak-disturbance", text))
}

/// With its sign, to two figures.
pub(super) fn signed(value: f64) -> String {
    let sign = if value < 0.0 { "" } else { "+" };
    format!("{sign}{}", significant(value, 2))
}

fn ideal(tolerance: f64) -> Flag {
    let counts = if tolerance > 0.0 {
        format!(
            "A wave from the contact surface counts if it changes p5 by more than {} %, the expansion from its first wave",
            significant(tolerance * 100.0, 2)
        )
    } else {
        "A disturbance counts from its first wave".to_string()
    };
    let text = format!(
        "ideal tube: the diaphragm opens at once, without boundary layers, the shock keeps its speed; what is different in a real tube shortens the uniform time. {counts}"
    );
    Flag::new("ideal-waves", text)
}
