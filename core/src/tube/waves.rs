//! The lines of the wave diagram and their crossings, each written once for every kind of number.

use super::event::Event;
use super::input::{TubeInput, TubeInputError};
use crate::gas::{Gamma, Rule};
use crate::number::{Ball, Elementary, Semifield};

/// Speeds (m/s) of the waves and gases of an ideal tube: a diaphragm that opens at once, a driver of the bore of the driven section, whose gas has
/// constant heat capacity.
///
/// Speeds of the driven gas may come from any gas model.
#[derive(Clone, Copy, Debug)]
pub struct TubeSpeeds<S = Ball> {
    /// Incident shock, `U_S`.
    pub incident_shock: S,
    /// Gas behind it and contact surface, u2 = u3.
    pub gas_speed: S,
    /// Sound speed behind it, a2.
    pub sound_speed_2: S,
    /// Reflected shock in the laboratory, `U_R`, away from the end wall.
    pub reflected_shock: S,
    /// Sound speed behind it, a5.
    pub sound_speed_5: S,
    /// Sound speed of the driver fill, a4.
    pub sound_speed_4: S,
    /// γ4 of the driver gas.
    pub driver_gamma: Gamma<S>,
}

/// Lengths of the tube, m.
#[derive(Clone, Copy, Debug)]
pub struct Lengths<S = Ball> {
    /// L1, from the diaphragm to the end wall of the driven section.
    pub driven: S,
    /// L4, from the diaphragm to the end wall of the driver section.
    pub driver: S,
}

/// What the contact surface does when the reflected shock meets it.
#[derive(Clone, Copy, Debug)]
pub enum ContactReturn<S = Ball> {
    /// It sends a wave back to the end wall: a5 for an expansion or a weak wave, more for a shock.
    Wave {
        /// Speed of the wave toward the end wall, m/s.
        speed: S,
    },
    /// It sends nothing back and stays where it is: a tailored contact surface.
    Tailored {
        /// Speed in the laboratory of the shock that goes on into the driver gas, away from the end wall, m/s.
        transmitted_shock: S,
        /// Sound speed behind that shock, m/s.
        sound_speed: S,
    },
}

/// A tube in which the waves run: the formulas of its diagram, with the diaphragm at x = 0, the end wall at x = L1 and t = 0 at the opening.
///
/// Each is exact for an ideal tube as long as no other wave was met before; [`WaveDiagram`](super::WaveDiagram) says which of them apply. In
/// `Dual<f64, N>` they give the slopes for an uncertainty budget. Source: one-dimensional gas dynamics by the method of characteristics; a centred
/// simple wave crossed by the head reflected from the wall behind it (H. W. Liepmann and A. Roshko, Elements of Gasdynamics, 1957, chapter 3, from
/// memory; a test integrates the path).
#[derive(Clone, Copy, Debug)]
pub struct Tube<S = Ball> {
    /// Speeds.
    pub speeds: TubeSpeeds<S>,
    /// Lengths.
    pub lengths: Lengths<S>,
    /// What the contact surface does.
    pub contact: ContactReturn<S>,
}

impl<S: Elementary> TubeSpeeds<S> {
    /// v = (γ4 − 1)u2/(2a4): the share of its sound speed that the driver gas loses in the expansion.
    fn loss(&self) -> S {
        let gamma = self.driver_gamma;
        gamma.d * self.gas_speed / (gamma.q * self.sound_speed_4).doubled()
    }

    /// Sound speed of the expanded driver gas, a3 = a4 − (γ4 − 1)u2/2, m/s.
    pub fn sound_speed_3(&self) -> S {
        let gamma = self.driver_gamma;
        self.sound_speed_4 - gamma.d * self.gas_speed / gamma.q.doubled()
    }

    /// λ = ln(`t_f`·a4/L4) = (γ4+1)/(2(γ4−1))·ln(a4/a3) = (γ4+1)u2/(4a4)·[−ln(1−v)/v], without a difference where γ4 is near 1.
    pub(super) fn fan_logarithm(&self) -> S {
        let gamma = self.driver_gamma;
        let rate = gamma.plus_one() * self.gas_speed / (S::whole(4) * gamma.q * self.sound_speed_4);
        rate * (-self.loss()).log1p_ratio()
    }

    /// u2 + a2 − `U_S`: how much faster than the incident shock a sound wave behind it is, m/s.
    fn overtaking_speed(&self) -> S {
        self.gas_speed + self.sound_speed_2 - self.incident_shock
    }
}

impl<S: Elementary> Tube<S> {
    /// `t_w` = L1/`U_S`: the incident shock meets the end wall.
    pub fn wall_time(&self) -> S {
        self.lengths.driven / self.speeds.incident_shock
    }

    /// `t_m` − `t_w` = L1(1 − u2/`U_S`)/(u2 + `U_R`).
    pub fn contact_delay(&self) -> S {
        let TubeSpeeds { incident_shock, gas_speed, reflected_shock, .. } = self.speeds;
        self.lengths.driven * (incident_shock - gas_speed) / (incident_shock * (gas_speed + reflected_shock))
    }

    /// `d_m` = `U_R`(`t_m` − `t_w`): distance from the end wall at which the reflected shock meets the contact surface.
    pub fn contact_distance(&self) -> S {
        self.speeds.reflected_shock * self.contact_delay()
    }

    /// The reflected shock meets the contact surface: `t_m` = L1(1 + `U_R`/`U_S`)/(u2 + `U_R`), `x_m` = u2·`t_m`.
    pub fn contact_meeting(&self) -> Event<S> {
        let TubeSpeeds { incident_shock, gas_speed, reflected_shock, .. } = self.speeds;
        let time = self.lengths.driven * (incident_shock + reflected_shock) / (incident_shock * (gas_speed + reflected_shock));
        Event { position: gas_speed * time, time }
    }

    /// The expansion's head meets the driver's end wall: (−L4, L4/a4).
    pub fn head_at_driver_wall(&self) -> Event<S> {
        Event { position: -self.lengths.driver, time: self.lengths.driver / self.speeds.sound_speed_4 }
    }

    /// The reflected head in the fan, `logarithm` = ln(t·a4/L4) after its reflection: a = a4(t·a4/L4)^(−2(γ4−1)/(γ4+1)), u = 2(a4 − a)/(γ4−1),
    /// x = (u − a)t.
    pub(super) fn head_in_fan(&self, logarithm: S) -> Event<S> {
        let (gamma, a4) = (self.speeds.driver_gamma, self.speeds.sound_speed_4);
        let fall = -(gamma.d.doubled() / gamma.plus_one() * logarithm);
        let gas_speed = S::whole(4) * gamma.q / gamma.plus_one() * a4 * logarithm * fall.expm1_ratio();
        let time = self.head_at_driver_wall().time * logarithm.exp();
        Event { position: (gas_speed - a4 * fall.exp()) * time, time }
    }

    /// The reflected head leaves the fan: `t_f` = (L4/a4)(a3/a4)^(−(γ4+1)/(2(γ4−1))), `x_f` = (u2 − a3)`t_f`.
    pub fn head_leaves_fan(&self) -> Event<S> {
        let time = self.head_at_driver_wall().time * self.speeds.fan_logarithm().exp();
        Event { position: (self.speeds.gas_speed - self.speeds.sound_speed_3()) * time, time }
    }

    /// The reflected head meets the contact surface, at twice the time at which it leaves the fan: (2u2·`t_f`, 2`t_f`).
    pub fn head_meets_contact(&self) -> Event<S> {
        let time = self.head_leaves_fan().time.doubled();
        Event { position: self.speeds.gas_speed * time, time }
    }

    /// `t_r` − `t_w` = (2a2·`t_f` − (u2 + a2 − `U_S`)`t_w`)/(u2 + a2 + `U_R`): the reflected head, having passed the contact surface, meets the
    /// reflected shock so long after that left the end wall. Negative where it overtakes the incident shock before.
    pub fn head_delay(&self) -> S {
        let TubeSpeeds { gas_speed, sound_speed_2, reflected_shock, .. } = self.speeds;
        let lead = sound_speed_2 * self.head_meets_contact().time - self.speeds.overtaking_speed() * self.wall_time();
        lead / (gas_speed + sound_speed_2 + reflected_shock)
    }

    /// `d_r` = `U_R`(`t_r` − `t_w`): distance from the end wall at which the reflected head meets the reflected shock.
    pub fn head_distance(&self) -> S {
        self.speeds.reflected_shock * self.head_delay()
    }

    /// The reflected head, having passed the contact surface, meets the reflected shock.
    pub fn head_meets_reflected_shock(&self) -> Event<S> {
        Event { position: self.lengths.driven - self.head_distance(), time: self.wall_time() + self.head_delay() }
    }

    /// The reflected head overtakes the incident shock: `t_o` = 2a2·`t_f`/(u2 + a2 − `U_S`), `x_o` = `U_S`·`t_o`.
    pub fn head_overtakes_incident_shock(&self) -> Event<S> {
        let time = self.speeds.sound_speed_2 * self.head_meets_contact().time / self.speeds.overtaking_speed();
        Event { position: self.speeds.incident_shock * time, time }
    }

    /// The transmitted shock of a tailored contact surface meets the fan's tail, so long after `t_m`: `t_m`·a3/(u2 − a3 + `U_T`).
    pub(super) fn tail_delay(&self, transmitted_shock: S) -> S {
        let a3 = self.speeds.sound_speed_3();
        self.contact_meeting().time * a3 / (self.speeds.gas_speed - a3 + transmitted_shock)
    }

    /// It meets the reflected head in the expanded driver gas, so long after `t_m`: a3(2`t_f` − `t_m`)/(u2 + a3 + `U_T`).
    pub(super) fn head_in_driver_gas_delay(&self, transmitted_shock: S) -> S {
        let a3 = self.speeds.sound_speed_3();
        let late = self.head_meets_contact().time - self.contact_meeting().time;
        a3 * late / (self.speeds.gas_speed + a3 + transmitted_shock)
    }

    /// How long a station at a distance y from the end wall sees the gas behind the reflected shock until a wave comes that left the path of that
    /// shock at a distance `d` and runs with speed `c` to the end wall: (d − y)(1/`U_R` + 1/c).
    pub fn station_duration(&self, distance: S, speed: S, from_end_wall: S) -> S {
        let one = S::whole(1);
        (distance - from_end_wall) * (one / self.speeds.reflected_shock + one / speed)
    }

    /// Length of a driver from whose end wall the head leaves the fan at a time: L4 = `t_f`·a4·(a3/a4)^((γ4+1)/(2(γ4−1))).
    fn driver_for_fan_exit(&self, time: S) -> S {
        time * self.speeds.sound_speed_4 * (-self.speeds.fan_logarithm()).exp()
    }

    /// The shortest driver whose expansion does not overtake the incident shock on its way to the end wall, m:
    /// 2a2·`t_f` = (u2 + a2 − `U_S`)`t_w`.
    pub fn shortest_driver_without_overtaking(&self) -> S {
        self.driver_for_fan_exit(self.speeds.overtaking_speed() * self.wall_time() / self.speeds.sound_speed_2.doubled())
    }

    /// The shortest driver whose length does not limit the uniform time at a station, m; in closed form.
    ///
    /// Where the contact surface returns a wave of speed c: (d − y)(1/`U_R` + 1/a5) = (`d_m` − y)(1/`U_R` + 1/c) gives the distance d at which the
    /// head may meet the reflected shock, and 2a2·`t_f` = (u2 + a2 + `U_R`)d/`U_R` + (u2 + a2 − `U_S`)`t_w`. Where it is tailored: the head leaves the
    /// fan as the transmitted shock gets there, `t_f` = `t_m`(u2 + `U_T`)/(u2 − a3 + `U_T`); a longer driver is limited by the fan's tail.
    ///
    /// For stations nearer to the end wall than [`Tube::contact_distance`].
    pub fn shortest_driver(&self, from_end_wall: S) -> S {
        let TubeSpeeds { gas_speed, sound_speed_2, reflected_shock, sound_speed_5, .. } = self.speeds;
        match self.contact {
            ContactReturn::Wave { speed } => {
                let one = S::whole(1);
                let duration = self.station_duration(self.contact_distance(), speed, from_end_wall);
                let distance = from_end_wall + duration / (one / reflected_shock + one / sound_speed_5);
                let way = (gas_speed + sound_speed_2 + reflected_shock) * distance / reflected_shock;
                self.driver_for_fan_exit((way + self.speeds.overtaking_speed() * self.wall_time()) / sound_speed_2.doubled())
            }
            ContactReturn::Tailored { transmitted_shock, .. } => {
                self.driver_for_fan_exit(self.contact_meeting().time + self.tail_delay(transmitted_shock))
            }
        }
    }
}

impl Tube {
    /// Checks that the speeds are those of a tube.
    pub(super) fn check(&self) -> Result<(), TubeInputError> {
        let speeds = &self.speeds;
        let gamma_excess = speeds.driver_gamma.d / speeds.driver_gamma.q;
        let positive = [
            (TubeInput::DrivenLength, self.lengths.driven),
            (TubeInput::DriverLength, self.lengths.driver),
            (TubeInput::IncidentShock, speeds.incident_shock),
            (TubeInput::GasSpeed2, speeds.gas_speed),
            (TubeInput::SoundSpeed2, speeds.sound_speed_2),
            (TubeInput::ReflectedShock, speeds.reflected_shock),
            (TubeInput::SoundSpeed5, speeds.sound_speed_5),
            (TubeInput::SoundSpeed4, speeds.sound_speed_4),
            (TubeInput::DriverHeatCapacityRatio, gamma_excess),
        ];
        for (input, value) in positive {
            input.positive_ball(value)?;
        }
        // The gas behind a shock is slower than the shock, which is subsonic relative to it.
        exceeds(TubeInput::IncidentShock, speeds.incident_shock, speeds.gas_speed)?;
        exceeds(TubeInput::SoundSpeed2, speeds.sound_speed_2, speeds.incident_shock - speeds.gas_speed)?;
        // Driver gas expands to no more than 2a4/(γ4 − 1).
        let limit = speeds.sound_speed_4.doubled() / gamma_excess;
        if !(limit - speeds.gas_speed).is_certainly_positive() {
            return Err(TubeInput::GasSpeed2.refuse(speeds.gas_speed.nearest(), Rule::Below(limit.nearest())));
        }
        match self.contact {
            ContactReturn::Wave { speed } => {
                TubeInput::ReturnedWave.positive_ball(speed)?;
                // A wave of any strength runs into gas at rest at the speed of sound or faster.
                if (speeds.sound_speed_5 - speed).is_certainly_positive() {
                    return Err(TubeInput::ReturnedWave.refuse(speed.nearest(), Rule::Above(speeds.sound_speed_5.nearest())));
                }
            }
            ContactReturn::Tailored { transmitted_shock, sound_speed } => {
                TubeInput::TransmittedShock.positive_ball(transmitted_shock)?;
                TubeInput::SoundSpeedBehindTransmitted.positive_ball(sound_speed)?;
                exceeds(TubeInput::TransmittedShock, transmitted_shock, speeds.sound_speed_3() - speeds.gas_speed)?;
            }
        }
        // Beyond e^650 the head's way through the fan is not computed.
        let leaves = TubeInput::DriverLength.positive_ball(self.head_leaves_fan().time);
        leaves.map_err(|_| TubeInput::GasSpeed2.refuse(speeds.gas_speed.nearest(), Rule::Below(limit.nearest())))
    }
}

/// Checks that one ball certainly exceeds another.
fn exceeds(input: TubeInput, value: Ball, limit: Ball) -> Result<(), TubeInputError> {
    if (value - limit).is_certainly_positive() { Ok(()) } else { Err(input.refuse(value.nearest(), Rule::Above(limit.nearest()))) }
}
