//! How long the gas behind the reflected shock stays as it is, and what ends it.

use super::input::{TubeInput, TubeInputError};
use super::waves::{ContactReturn, Tube};
use crate::gas::Rule;
use crate::number::{Ball, Enclosure};

/// What ends the time of uniform gas behind the reflected shock.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum Limit {
    /// The wave that the contact surface sends back.
    ContactReturn,
    /// The head of the expansion, reflected from the driver's end wall: a longer driver gives more time.
    ExpansionHead,
    /// The tail of the expansion, met by the shock that a tailored contact surface lets through: a longer driver gives no more uniform time. The
    /// pressure rises slowly from then on (by 1 % where a test ran it); the fall that the head brings comes later.
    FanTail,
    /// There is no such time: the head overtakes the incident shock before that reaches the end wall.
    IncidentOvertaken,
    /// There is no such time at this station: the contact surface stops the reflected shock before it gets there.
    ContactPassed,
    /// There is no such time at this station: the head passes it before the reflected shock does.
    ExpansionPassed,
    /// Two of these come so close together that the speeds as given do not tell which is first; the enclosure holds for either.
    Undecided,
}

impl Limit {
    /// What happens, in a sentence.
    pub const fn name(self) -> &'static str {
        match self {
            Self::ContactReturn => "the wave returned from the contact surface arrives",
            Self::ExpansionHead => "the head of the expansion arrives, reflected from the driver's end wall",
            Self::FanTail => "the transmitted shock has met the tail of the expansion",
            Self::IncidentOvertaken => "the expansion overtakes the incident shock before the end wall",
            Self::ContactPassed => "the contact surface stops the reflected shock before this station",
            Self::ExpansionPassed => "the expansion passes this station before the reflected shock",
            Self::Undecided => "two waves arrive at nearly the same time",
        }
    }
}

/// The time of uniform gas behind the reflected shock at a station, by the ideal wave diagram. Boundary layers shorten it.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct TestTime {
    /// Distance of the station from the end wall, m.
    pub from_end_wall: Enclosure,
    /// The reflected shock passes, s from the opening of the diaphragm.
    pub start: Enclosure,
    /// The uniform time ends, s from the opening of the diaphragm.
    pub end: Enclosure,
    /// How long it lasts, s; exactly 0 where there is none.
    pub duration: Enclosure,
    /// What ends it.
    pub limit: Limit,
}

/// Something that ends the time, and the duration until then: negative where it comes before the reflected shock.
type Ending = (Limit, Ball);

/// The earlier of two endings.
fn earlier(first: Ending, second: Ending) -> Ending {
    let lead = second.1 - first.1;
    if lead.is_certainly_positive() || is_exactly_zero(lead) {
        return first;
    }
    if lead.is_certainly_negative() {
        return second;
    }
    let (a, b) = (first.1.enclosure(), second.1.enclosure());
    (Limit::Undecided, around(a.low().min(b.low()), a.high().min(b.high())))
}

fn is_exactly_zero(x: Ball) -> bool {
    x.enclosure() == Enclosure::from(0.0)
}

/// The ball of all numbers between two; unknown where a bound is not finite.
fn around(low: f64, high: f64) -> Ball {
    Enclosure::new(low, high).map_or(Ball::UNKNOWN, Ball::around)
}

impl Tube {
    /// How long the gas behind the reflected shock stays uniform at a distance y from the end wall (0 for the end wall itself).
    ///
    /// It is the earlier of the contact surface's returned wave, (`d_m` − y)(1/`U_R` + 1/c), and the expansion, (`d_r` − y)(1/`U_R` + 1/a5). The head
    /// that comes to the contact surface after the reflected shock follows the returned wave, which is never slower. Where the contact surface is
    /// tailored, the expansion comes through the gas behind the transmitted shock. A contact surface that the head has passed before is treated as
    /// if it had not been disturbed; the head is earlier then unless the returned wave is a strong shock.
    ///
    /// At most 2 ulp wide for exact inputs, relative to the times of the diagram.
    pub(super) fn time_at(&self, from_end_wall: Ball) -> Result<TestTime, TubeInputError> {
        let place = from_end_wall.enclosure();
        if !place.is_proven() {
            return Err(TubeInput::FromEndWall.refuse(from_end_wall.nearest(), Rule::Finite));
        }
        let inside = (self.lengths.driven - from_end_wall).is_certainly_positive();
        if place.low() < 0.0 || !inside {
            let length = self.lengths.driven.nearest();
            return Err(TubeInput::FromEndWall.refuse(from_end_wall.nearest(), Rule::Between(0.0, length)));
        }
        let start = self.wall_time() + from_end_wall / self.speeds.reflected_shock;
        let (limit, duration) = self.ending(from_end_wall);
        let start_of_time = start.enclosure();
        if duration.is_certainly_positive() {
            let end = (start + duration).enclosure();
            return Ok(TestTime { from_end_wall: place, start: start_of_time, end, duration: duration.enclosure(), limit });
        }
        let none = self.reason_for_none(from_end_wall);
        if duration.is_certainly_negative() || is_exactly_zero(duration) {
            let duration = Enclosure::from(0.0);
            return Ok(TestTime { from_end_wall: place, start: start_of_time, end: start_of_time, duration, limit: none });
        }
        let duration = duration.enclosure().at_least_zero();
        let end = (start + around(0.0, duration.high())).enclosure();
        Ok(TestTime { from_end_wall: place, start: start_of_time, end, duration, limit: Limit::Undecided })
    }

    /// What ends the time at a station.
    fn ending(&self, from_end_wall: Ball) -> Ending {
        let sound_speed = self.speeds.sound_speed_5;
        let head = (Limit::ExpansionHead, self.station_duration(self.head_distance(), sound_speed, from_end_wall));
        match self.contact {
            // With the head later at the contact surface than the reflected shock, d_r > d_m and the first of both is the returned wave.
            ContactReturn::Wave { speed } => {
                earlier((Limit::ContactReturn, self.station_duration(self.contact_distance(), speed, from_end_wall)), head)
            }
            ContactReturn::Tailored { transmitted_shock, sound_speed: behind } => {
                let to_contact = self.station_duration(self.contact_distance(), sound_speed, from_end_wall);
                let late = |delay: Ball| to_contact + delay + transmitted_shock * delay / behind;
                let behind_reflected_shock = self.head_in_driver_gas_delay(transmitted_shock);
                let by_tail = (Limit::FanTail, late(self.tail_delay(transmitted_shock)));
                let through = earlier((Limit::ExpansionHead, late(behind_reflected_shock)), by_tail);
                // The head comes to the contact surface before or after the reflected shock; at once with it, both ways are the same.
                if behind_reflected_shock.is_certainly_positive() {
                    through
                } else if behind_reflected_shock.is_certainly_negative() {
                    head
                } else {
                    (Limit::ExpansionHead, Ball::around(head.1.enclosure().hull(through.1.enclosure())))
                }
            }
        }
    }

    /// Why a station has no uniform time.
    fn reason_for_none(&self, from_end_wall: Ball) -> Limit {
        if (from_end_wall - self.contact_distance()).is_certainly_positive() {
            Limit::ContactPassed
        } else if self.head_delay().is_certainly_negative() {
            Limit::IncidentOvertaken
        } else {
            Limit::ExpansionPassed
        }
    }
}
