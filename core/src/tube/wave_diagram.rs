//! The wave diagram of a tube, wave by wave.

use super::event::{Event, Wave, WaveName};
use super::input::{TubeInput, TubeInputError};
use super::test_time::TestTime;
use super::waves::{ContactReturn, Tube};
use crate::gas::Rule;
use crate::number::{Ball, Elementary, Enclosure, Known};

/// Waves of a diagram, at most.
const WAVES: usize = 12;

/// The wave diagram of an ideal tube: every crossing as an enclosure of the model's exact answer for the speeds and lengths as given.
///
/// Where the reflected head and the reflected shock reach the contact surface one soon after the other, what follows is another problem; the
/// diagram ends its waves there. Waves in the driver gas are drawn until the reflected shock, or the transmitted one where its speed was given,
/// can have changed that gas.
///
/// ```
/// use endwall::gas::Gamma;
/// use endwall::number::{Ball, Semifield};
/// use endwall::tube::{ContactReturn, Lengths, Limit, Tube, TubeSpeeds, WaveDiagram, WaveName};
/// // Helium at 1000 m/s into a gas of γ 7/5 at M 2, in units of its sound speed of 400 m/s: u2 = 5/4, U_R = 1, a5 about 1.58.
/// let speed = |x: f64| Ball::from(x);
/// let speeds = TubeSpeeds {
///     incident_shock: speed(800.0),
///     gas_speed: speed(500.0),
///     sound_speed_2: speed(519.6),
///     reflected_shock: speed(400.0),
///     sound_speed_5: speed(632.5),
///     sound_speed_4: speed(1000.0),
///     driver_gamma: Gamma { d: Ball::whole(2), q: Ball::whole(3) },
/// };
/// let lengths = Lengths { driven: speed(6.0), driver: speed(4.0) };
/// let diagram = WaveDiagram::new(Tube { speeds, lengths, contact: ContactReturn::Wave { speed: speed(632.5) } })?;
/// // t_m = L1(1 + U_R/U_S)/(u2 + U_R) = 10 ms, at 5 m from the diaphragm.
/// let meeting = diagram.wave(WaveName::ContactSurface).unwrap().to;
/// assert!(meeting.time.contains(0.010) && meeting.position.contains(5.0));
/// let at_wall = diagram.test_time(0.0)?;
/// assert_eq!(at_wall.limit, Limit::ContactReturn);
/// // (1/U_R + 1/a5)·1 m.
/// assert!((at_wall.duration.middle() - (1.0 / 400.0 + 1.0 / 632.5)).abs() < 1e-15);
/// assert!(at_wall.duration.width_in_ulp() <= 2);
/// // A driver shorter than this would end it earlier.
/// assert!(diagram.shortest_driver(0.0)?.contains(125.0 / 36.0));
/// # Ok::<(), endwall::tube::TubeInputError>(())
/// ```
#[derive(Clone, Copy, Debug)]
pub struct WaveDiagram {
    tube: Tube,
}

impl WaveDiagram {
    /// The diagram of a tube.
    ///
    /// # Errors
    /// [`TubeInputError`] for a speed or a length that is not positive and within 2^±200, for speeds that no shock has (u2 ≥ `U_S`, or a shock that
    /// is not subsonic relative to the gas behind it), for gas faster than the driver gas can expand, 2a4/(γ4−1), for a returned wave slower than a5
    /// and for a transmitted shock that is no shock.
    pub fn new(tube: Tube) -> Result<Self, TubeInputError> {
        tube.check().map(|()| Self { tube })
    }

    /// The tube.
    pub fn tube(&self) -> &Tube {
        &self.tube
    }

    /// The uniform time behind the reflected shock at a distance from the end wall (m; 0 at the end wall), and what ends it.
    ///
    /// # Errors
    /// [`TubeInputError`] unless the distance lies between 0 and L1.
    pub fn test_time(&self, from_end_wall: impl Into<Known>) -> Result<TestTime, TubeInputError> {
        self.tube.time_at(from_end_wall.into().ball())
    }

    /// The shortest driver whose length does not limit that time, m.
    ///
    /// # Errors
    /// [`TubeInputError`] unless the distance lies between 0 and that at which the reflected shock meets the contact surface.
    pub fn shortest_driver(&self, from_end_wall: impl Into<Known>) -> Result<Enclosure, TubeInputError> {
        let place = from_end_wall.into().ball();
        let limit = self.tube.contact_distance();
        if place.enclosure().low() < 0.0 || !(limit - place).is_certainly_positive() {
            let rule = Rule::Between(0.0, limit.nearest());
            return Err(TubeInput::FromEndWall.refuse(place.nearest(), rule));
        }
        Ok(self.tube.shortest_driver(place).enclosure())
    }

    /// A point of the curve by which the reflected head crosses the expansion: `part` 0 is the driver's end wall, 1 the expansion's tail, and what is
    /// between is even in the logarithm of time. Clamped to that range.
    pub fn fan_point(&self, part: f64) -> Event {
        let part = Ball::from(if part >= 0.0 { part.min(1.0) } else { 0.0 });
        self.tube.head_in_fan(part * self.tube.speeds.fan_logarithm()).enclosure()
    }

    /// One wave; `None` if the diagram has none of this name.
    pub fn wave(&self, name: WaveName) -> Option<Wave> {
        self.waves().into_iter().flatten().find(|wave| wave.name == name)
    }

    /// All waves, in the order of [`WaveName`]; `None` for those that the diagram does not have.
    pub fn waves(&self) -> [Option<Wave>; WAVES] {
        let tube = &self.tube;
        let line = |name, from: Event<Ball>, to: Event<Ball>| Some(Wave { name, from: from.enclosure(), to: to.enclosure() });
        let origin = Event { position: Ball::from(0.0), time: Ball::from(0.0) };
        let at_wall = |time| Event { position: tube.lengths.driven, time };
        let (meeting, leaves, at_contact) = (tube.contact_meeting(), tube.head_leaves_fan(), tube.head_meets_contact());
        let overtaken = tube.head_delay().is_certainly_negative();
        let head_first = is_certainly_before(at_contact, meeting);
        let through = if head_first { None } else { self.after_tailored_contact(meeting, leaves) };
        let horizon = through.map_or(meeting, |after| after.change);
        let wall = at_wall(tube.wall_time());
        let (shock_end, head_end) = if overtaken {
            let overtaking = tube.head_overtakes_incident_shock();
            (overtaking, overtaking)
        } else {
            (wall, tube.head_meets_reflected_shock())
        };
        let start_of_return = tube.head_at_driver_wall();
        let a4 = tube.speeds.sound_speed_4;
        let head_at = |time: Ball| Event { position: -(a4 * time), time };
        let tail_at = |time: Ball| Event { position: (tube.speeds.gas_speed - tube.speeds.sound_speed_3()) * time, time };
        let until =
            |end: Event<Ball>, at: &dyn Fn(Ball) -> Event<Ball>| if is_certainly_before(horizon, end) { at(horizon.time) } else { end };
        let after = |earlier: Event<Ball>| !is_certainly_before(horizon, earlier);
        let in_driver_gas = |time: Ball| Event {
            position: leaves.position + (tube.speeds.gas_speed + tube.speeds.sound_speed_3()) * (time - leaves.time),
            time,
        };
        let in_fan = |_: Ball| tube.head_in_fan((horizon.time / start_of_return.time).ln());
        let end_in_driver_gas = match through {
            Some(after) => after.change,
            None => until(at_contact, &in_driver_gas),
        };
        let shock_meets = if head_first { head_end } else { meeting };
        let arrival = |from: Event<Ball>, speed: Ball| at_wall(from.time + (tube.lengths.driven - from.position) / speed);
        let a5 = tube.speeds.sound_speed_5;
        let returned = match tube.contact {
            ContactReturn::Wave { speed } if !head_first => line(WaveName::ReturnedWave, meeting, arrival(meeting, speed)),
            _ => None,
        };
        let last = through.map_or(head_end, |after| after.at_contact);
        [
            line(WaveName::IncidentShock, origin, shock_end),
            line(WaveName::ContactSurface, origin, if head_first { at_contact } else { meeting }),
            line(WaveName::ExpansionHead, origin, until(start_of_return, &head_at)),
            line(WaveName::ExpansionTail, origin, until(leaves, &tail_at)),
            after(start_of_return).then(|| line(WaveName::HeadInFan, start_of_return, until(leaves, &in_fan))).flatten(),
            after(leaves).then(|| line(WaveName::HeadInDriverGas, leaves, end_in_driver_gas)).flatten(),
            if head_first { line(WaveName::HeadInDrivenGas, at_contact, head_end) } else { None },
            if overtaken { None } else { line(WaveName::ReflectedShock, wall, shock_meets) },
            returned,
            through.and_then(|after| line(WaveName::TransmittedShock, meeting, after.change)),
            through.and_then(|after| line(WaveName::DisturbanceToContact, after.change, after.at_contact)),
            if overtaken || !(head_first || through.is_some()) {
                None
            } else {
                line(WaveName::DisturbanceToEndWall, last, arrival(last, a5))
            },
        ]
    }

    /// What follows a tailored contact surface: the transmitted shock meets the reflected head or the fan's tail, and a weak wave comes back.
    fn after_tailored_contact(&self, meeting: Event<Ball>, leaves: Event<Ball>) -> Option<AfterContact> {
        let ContactReturn::Tailored { transmitted_shock, sound_speed } = self.tube.contact else { return None };
        let by_tail = self.tube.tail_delay(transmitted_shock);
        let head_left = (meeting.time + by_tail - leaves.time).is_certainly_positive();
        let delay = if head_left { self.tube.head_in_driver_gas_delay(transmitted_shock) } else { by_tail };
        let change = Event { position: meeting.position - transmitted_shock * delay, time: meeting.time + delay };
        let at_contact = Event { position: meeting.position, time: change.time + transmitted_shock * delay / sound_speed };
        Some(AfterContact { change, at_contact })
    }
}

/// Events behind a tailored contact surface.
#[derive(Clone, Copy)]
struct AfterContact {
    /// The transmitted shock meets the expansion.
    change: Event<Ball>,
    /// What that sends back comes to the contact surface.
    at_contact: Event<Ball>,
}

/// True if one event is proven to come before another.
fn is_certainly_before(first: Event<Ball>, second: Event<Ball>) -> bool {
    (second.time - first.time).is_certainly_positive()
}

#[cfg(test)]
#[path = "wave_diagram_tests.rs"]
mod tests;
