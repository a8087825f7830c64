//! The reflected shock meets the contact surface: the waves that follow, constant heat capacities on both sides.

use super::contact::{Contact, Tailoring};
use super::driver_error::{DriverError, Unproven};
use super::proven_root::{newton, search};
use super::waves::ContactReturn;
use crate::gas::Gamma;
use crate::number::{Ball, Dual, Elementary, Enclosure, Positive, Semifield};
use crate::shock::Jump;

/// Doublings of p/p5 in search of the pressure at the contact surface, at most.
const DOUBLINGS: u32 = 100;

/// What follows when the reflected shock meets the contact surface. Enclosures of at most 2 ulp for exact inputs (measured), but
/// for the contact speed of a wave so weak that its strength is a rounding of the Mach number.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Interaction {
    /// What comes back from the contact surface.
    pub returned: Tailoring,
    /// The pressure on both sides of the contact surface, behind the returned wave, Pa.
    pub pressure: Enclosure,
    /// Speed of the contact surface afterwards, m/s, positive toward the end wall.
    pub contact_speed: Enclosure,
    /// Mach number of the shock into the driver gas, relative to that gas ahead of it.
    pub transmitted_mach: Enclosure,
    /// Its speed in the laboratory, away from the end wall, m/s.
    pub transmitted_speed: Enclosure,
    /// Sound speed in the driver gas behind it, m/s.
    pub transmitted_sound_speed: Enclosure,
    /// Mach number of the returned shock, relative to the gas in state 5; 1 for an expansion.
    pub returned_mach: Enclosure,
    /// Speed of the returned wave's front toward the end wall, m/s: the shock, or the head of the expansion.
    pub returned_speed: Enclosure,
    /// The pressure at the end wall after the returned wave has reflected there (for an expansion: all of it), Pa.
    pub end_wall_pressure: Enclosure,
}

/// The speeds that both gases take up with the pressure p5(1 + y), in one kind of number.
///
/// > `f_3` = a3 (P(1 + y) − 1) √(2/(γ3[(γ3 + 1)P(1 + y) + γ3 − 1])): a shock stops the driver gas of speed u2;
/// > `f_5` = a5 y √(2/(γ[2γ + (γ + 1)y])) for a shock into state 5, (2a5/(γ − 1))((1 + y)^((γ−1)/(2γ)) − 1) for an expansion.
///
/// The root of `f_3` + `f_5` − u2, which increases with y, is the only one; for y = p2/p5 − 1 it is negative.
#[derive(Clone, Copy)]
struct Meeting<S> {
    gamma: Gamma<S>,
    gamma_3: Gamma<S>,
    sound_speed_5: S,
    sound_speed_3: S,
    gas_speed: S,
    /// P − 1.
    reflected_excess: S,
}

impl<S: Semifield> Meeting<S> {
    fn map<T: Semifield>(&self, convert: impl Fn(S) -> T + Copy) -> Meeting<T> {
        let gamma = |Gamma { d, q }: Gamma<S>| Gamma { d: convert(d), q: convert(q) };
        Meeting {
            gamma: gamma(self.gamma),
            gamma_3: gamma(self.gamma_3),
            sound_speed_5: convert(self.sound_speed_5),
            sound_speed_3: convert(self.sound_speed_3),
            gas_speed: convert(self.gas_speed),
            reflected_excess: convert(self.reflected_excess),
        }
    }
}

impl<S: Elementary> Meeting<S> {
    /// p/p2 − 1 at the contact surface.
    fn transmitted_excess(&self, y: S) -> S {
        self.reflected_excess + (S::whole(1) + self.reflected_excess) * y
    }

    /// √(2/(γ[2γ + (γ + 1)x])) with x the excess of a pressure ratio.
    fn stopping(gamma: Gamma<S>, excess: S) -> S {
        let sum = gamma.ratio().doubled() + gamma.plus_one() * excess;
        (gamma.q.squared().doubled() / (gamma.ratio() * sum)).sqrt()
    }

    /// β = a/a5 behind an expansion, less 1.
    fn expanded_excess(&self, y: S) -> S {
        let exponent = y * y.log1p_ratio() * self.gamma.d / self.gamma.ratio().doubled();
        exponent * exponent.expm1_ratio()
    }

    /// `f_5`, the speed of the contact surface.
    fn contact_speed(&self, y: S, is_shock: bool) -> S {
        if is_shock {
            self.sound_speed_5 * y * Self::stopping(self.gamma, y)
        } else {
            self.sound_speed_5 * self.expanded_excess(y) * self.gamma.q.doubled() / self.gamma.d
        }
    }

    fn evaluate(&self, y: S, is_shock: bool) -> S {
        let x = self.transmitted_excess(y);
        let stopped = self.sound_speed_3 * x * Self::stopping(self.gamma_3, x);
        (stopped - self.gas_speed + self.contact_speed(y, is_shock)) / self.gas_speed
    }
}

/// The fields of [`Interaction`] as balls.
#[derive(Clone, Copy)]
struct Waves {
    pressure: Ball,
    contact_speed: Ball,
    transmitted_mach: Ball,
    transmitted_speed: Ball,
    transmitted_sound_speed: Ball,
    returned_mach: Ball,
    returned_speed: Ball,
    end_wall_pressure: Ball,
}

/// M² − 1 of a shock with this excess of the pressure ratio.
fn mach_squared_excess(gamma: Gamma<Ball>, excess: Ball) -> Ball {
    excess * gamma.plus_one() / gamma.ratio().doubled()
}

fn mach_of(gamma: Gamma<Ball>, excess: Ball) -> Ball {
    (Ball::whole(1) + mach_squared_excess(gamma, excess)).sqrt()
}

impl Contact<'_> {
    /// The kind of wave that comes back, and the waves with either kind where it cannot be told.
    fn both(&self) -> Result<(Tailoring, [Waves; 2]), DriverError> {
        let behind = &self.behind;
        let gamma = behind.constant_gamma().ok_or(DriverError::ConstantOnly)?;
        let meeting = Meeting {
            gamma,
            gamma_3: self.gamma_3,
            sound_speed_5: behind.sound_speed_5,
            sound_speed_3: self.sound_speed_3,
            gas_speed: behind.gas_speed,
            reflected_excess: behind.reflected_excess,
        };
        let returned = self.tailoring();
        let waves = |is_shock| self.after(&meeting, is_shock);
        let [first, second] = match returned {
            Tailoring::Shock => [waves(true)?; 2],
            Tailoring::Expansion => [waves(false)?; 2],
            // Too weak to tell: the answer is one of both.
            Tailoring::Tailored => [waves(true)?, waves(false)?],
        };
        Ok((returned, [first, second]))
    }

    /// The waves that follow when the reflected shock meets the contact surface: a shock into the driver gas, and what comes back.
    ///
    /// Pressure and speed are the same on both sides of the contact surface (a Riemann problem between state 3 and state 5). Model: constant heat
    /// capacities, a sharp contact surface.
    ///
    /// # Errors
    /// [`DriverError::ConstantOnly`] for a thermally perfect test gas; [`DriverError::NotProven`] where tolerances are too wide.
    pub fn interaction(&self) -> Result<Interaction, DriverError> {
        let (returned, [first, second]) = self.both()?;
        let hull = |field: fn(&Waves) -> Ball| field(&first).enclosure().hull(field(&second).enclosure());
        Ok(Interaction {
            returned,
            pressure: hull(|waves| waves.pressure),
            contact_speed: hull(|waves| waves.contact_speed),
            transmitted_mach: hull(|waves| waves.transmitted_mach),
            transmitted_speed: hull(|waves| waves.transmitted_speed),
            transmitted_sound_speed: hull(|waves| waves.transmitted_sound_speed),
            returned_mach: hull(|waves| waves.returned_mach),
            returned_speed: hull(|waves| waves.returned_speed),
            end_wall_pressure: hull(|waves| waves.end_wall_pressure),
        })
    }

    /// The same for the wave diagram.
    ///
    /// # Errors
    /// As for [`Contact::interaction`].
    pub fn contact_return(&self) -> Result<ContactReturn, DriverError> {
        let (returned, [first, second]) = self.both()?;
        let both = |field: fn(&Waves) -> Ball| match returned {
            Tailoring::Tailored => Ball::around(field(&first).enclosure().hull(field(&second).enclosure())),
            _ => field(&first),
        };
        Ok(match returned {
            Tailoring::Tailored => ContactReturn::Tailored {
                transmitted_shock: both(|waves| waves.transmitted_speed),
                sound_speed: both(|waves| waves.transmitted_sound_speed),
            },
            _ => ContactReturn::Wave { speed: both(|waves| waves.returned_speed) },
        })
    }

    /// With a returned wave of this kind.
    fn after(&self, meeting: &Meeting<Ball>, is_shock: bool) -> Result<Waves, DriverError> {
        let one = Ball::whole(1);
        let y = root(meeting, is_shock)?;
        let behind = &self.behind;
        let Meeting { gamma, gamma_3, sound_speed_5, sound_speed_3, gas_speed, .. } = *meeting;
        let pressure = behind.pressure_5 * (one + y);
        let contact_speed = meeting.contact_speed(y, is_shock);
        let transmitted_mach = mach_of(gamma_3, meeting.transmitted_excess(y));
        let (returned_mach, end_wall_pressure) = if is_shock {
            let sound_speed = sound_speed_5 * Jump::new(gamma, mach_squared_excess(gamma, y)).temperature_ratio().sqrt();
            // The gas that follows the shock is stopped at the wall: as for a moving wall, M = s + √(1 + s²).
            let s = gamma.plus_one() * contact_speed / (Ball::whole(4) * gamma.q * sound_speed);
            let mach = s + (one + s.squared()).sqrt();
            (mach_of(gamma, y), pressure * Jump::new(gamma, (s * mach).doubled()).pressure_ratio())
        } else {
            // The expansion loses as much sound speed again at the wall: a = a5(1 + 2(β − 1)).
            let exponent = gamma.ratio().doubled() / gamma.d;
            let ratio = one + meeting.expanded_excess(y).doubled();
            (one, behind.pressure_5 * ratio.pow(exponent))
        };
        let behind_transmitted = Jump::new(gamma_3, mach_squared_excess(gamma_3, meeting.transmitted_excess(y)));
        Ok(Waves {
            pressure,
            contact_speed,
            transmitted_mach,
            transmitted_speed: transmitted_mach * sound_speed_3 - gas_speed,
            transmitted_sound_speed: sound_speed_3 * behind_transmitted.temperature_ratio().sqrt(),
            returned_mach,
            returned_speed: returned_mach * sound_speed_5,
            end_wall_pressure,
        })
    }
}

/// y = p/p5 − 1 at the contact surface.
fn root(meeting: &Meeting<Ball>, is_shock: bool) -> Result<Ball, DriverError> {
    let plain = meeting.map(Ball::nearest);
    let residual = |y: f64| plain.evaluate(y, is_shock);
    // p2 from below; from above by doubling.
    let low = -plain.reflected_excess / (1.0 + plain.reflected_excess);
    let mut high = 1.0;
    for _ in 0..DOUBLINGS {
        if residual(high) > 0.0 {
            break;
        }
        high *= 2.0;
    }
    let constant = meeting.map(Dual::constant);
    newton(|y| constant.evaluate(y, is_shock), search(residual, low, high)).ok_or(DriverError::NotProven(Unproven::ContactPressure))
}

#[cfg(test)]
#[path = "interaction_tests.rs"]
mod tests;
