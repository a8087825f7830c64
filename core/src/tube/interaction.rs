//! The reflected shock meets the contact surface: the waves that follow.

use super::contact::{Contact, Tailoring};
use super::driver_error::{DriverError, Unproven};
use super::proven_root::{newton, polished, search};
use super::side::{ContactSide, expansion_speed, shock_speed};
use super::test_gas::BehindShock;
use super::waves::ContactReturn;
use crate::gas::Gamma;
use crate::number::{Ball, Dual, Enclosure, Semifield};

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

/// The contact surface between both gases.
///
/// Both take up the same speed with the pressure p5(1 + y) if the change of speed across the shock that stops the driver gas, `f_3`, and that across the
/// wave into state 5, `f_5`, meet: `f_3` + `f_5` = u2. Both increase with y, so the root is the only one; for y = p2/p5 − 1 the sum falls short.
struct Meeting<'a> {
    side_5: ContactSide<'a>,
    side_3: ContactSide<'a>,
    gas_speed: Ball,
    /// P − 1.
    reflected_excess: Ball,
}

/// p/p2 − 1 at the contact surface.
fn transmitted_excess<S: Semifield>(reflected_excess: S, y: S) -> S {
    reflected_excess + (S::whole(1) + reflected_excess) * y
}

impl Meeting<'_> {
    /// (`f_3` + `f_5` − u2)/u2.
    fn residual(&self, y: Dual<Ball, 1>, is_shock: bool) -> Dual<Ball, 1> {
        let [gas_speed, reflected_excess] = [self.gas_speed, self.reflected_excess].map(Dual::constant);
        let stopped = self.side_3.speed(transmitted_excess(reflected_excess, y), true);
        (stopped - gas_speed + self.side_5.speed(y, is_shock)) / gas_speed
    }

    /// The same without proof, with the heat capacities at T3 and T5.
    fn plain(&self, y: f64, is_shock: bool) -> f64 {
        let gamma = |side: &ContactSide<'_>| Gamma { d: side.gamma().d.nearest(), q: side.gamma().q.nearest() };
        let excess = transmitted_excess(self.reflected_excess.nearest(), y);
        let stopped = shock_speed(gamma(&self.side_3), self.side_3.sound_speed().nearest(), excess);
        let wave = if is_shock { shock_speed } else { expansion_speed };
        let gas_speed = self.gas_speed.nearest();
        (stopped - gas_speed + wave(gamma(&self.side_5), self.side_5.sound_speed().nearest(), y)) / gas_speed
    }

    /// y = p/p5 − 1 at the contact surface.
    fn root(&self, is_shock: bool) -> Option<Ball> {
        // p2 from below; from above by doubling.
        let reflected_excess = self.reflected_excess.nearest();
        let low = -reflected_excess / (1.0 + reflected_excess);
        let mut high = 1.0;
        for _ in 0..DOUBLINGS {
            if self.plain(high, is_shock) > 0.0 {
                break;
            }
            high *= 2.0;
        }
        let near = search(|y| self.plain(y, is_shock), low, high);
        let residual = |y| self.residual(y, is_shock);
        let both_constant = [self.side_3, self.side_5].iter().all(|side| matches!(side, ContactSide::Constant { .. }));
        newton(residual, if both_constant { near } else { polished(residual, near) })
    }
}

/// The fields of [`Interaction`] as balls.
#[derive(Clone, Copy, Debug)]
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

/// What follows when the reflected shock meets the contact surface, in all its digits: see [`Contact::meet`].
#[derive(Clone, Copy, Debug)]
pub struct ContactWaves {
    returned: Tailoring,
    /// Where the kind of wave cannot be told, one of both is the answer.
    either: [Waves; 2],
}

impl ContactWaves {
    /// Pressures, speeds and Mach numbers.
    pub fn interaction(&self) -> Interaction {
        let [first, second] = &self.either;
        let hull = |field: fn(&Waves) -> Ball| field(first).enclosure().hull(field(second).enclosure());
        Interaction {
            returned: self.returned,
            pressure: hull(|waves| waves.pressure),
            contact_speed: hull(|waves| waves.contact_speed),
            transmitted_mach: hull(|waves| waves.transmitted_mach),
            transmitted_speed: hull(|waves| waves.transmitted_speed),
            transmitted_sound_speed: hull(|waves| waves.transmitted_sound_speed),
            returned_mach: hull(|waves| waves.returned_mach),
            returned_speed: hull(|waves| waves.returned_speed),
            end_wall_pressure: hull(|waves| waves.end_wall_pressure),
        }
    }

    /// What the wave diagram needs of it.
    pub fn contact_return(&self) -> ContactReturn {
        let [first, second] = &self.either;
        let both = |field: fn(&Waves) -> Ball| Ball::around(field(first).enclosure().hull(field(second).enclosure()));
        match self.returned {
            Tailoring::Tailored => ContactReturn::Tailored {
                transmitted_shock: both(|waves| waves.transmitted_speed),
                sound_speed: both(|waves| waves.transmitted_sound_speed),
            },
            Tailoring::Expansion | Tailoring::Shock => ContactReturn::Wave { speed: first.returned_speed },
        }
    }
}

impl Contact<'_> {
    /// The waves that follow when the reflected shock meets the contact surface: a shock into the driver gas, and what comes back.
    ///
    /// Pressure and speed are the same on both sides of the contact surface (a Riemann problem between state 3 and state 5). Model: a sharp contact
    /// surface; in a thermally perfect gas every wave has the heat capacity of state 5, in equilibrium where that is.
    ///
    /// # Errors
    /// [`DriverError::NotProven`] where tolerances are too wide, where a wave takes a thermally perfect gas outside its data, and where its temperature
    /// comes so near a joint of the data that the jump of the enthalpy there matters.
    pub fn meet(&self) -> Result<ContactWaves, DriverError> {
        let BehindShock { gas_speed, reflected_excess, .. } = self.behind;
        let meeting = Meeting { side_5: self.behind.side_5(), side_3: self.side_3, gas_speed, reflected_excess };
        let returned = self.tailoring();
        let waves = |is_shock| self.after(&meeting, is_shock);
        let either = match returned {
            Tailoring::Shock => [waves(true)?; 2],
            Tailoring::Expansion => [waves(false)?; 2],
            // Too weak to tell: the answer is one of both.
            Tailoring::Tailored => [waves(true)?, waves(false)?],
        };
        Ok(ContactWaves { returned, either })
    }

    /// Pressures, speeds and Mach numbers of [`Contact::meet`].
    ///
    /// # Errors
    /// As there.
    pub fn interaction(&self) -> Result<Interaction, DriverError> {
        self.meet().map(|waves| waves.interaction())
    }

    /// What the wave diagram needs of [`Contact::meet`].
    ///
    /// # Errors
    /// As there.
    pub fn contact_return(&self) -> Result<ContactReturn, DriverError> {
        self.meet().map(|waves| waves.contact_return())
    }

    /// With a returned wave of this kind.
    fn after(&self, meeting: &Meeting<'_>, is_shock: bool) -> Result<Waves, DriverError> {
        self.waves(meeting, is_shock).ok_or(DriverError::NotProven(Unproven::ContactPressure))
    }

    fn waves(&self, meeting: &Meeting<'_>, is_shock: bool) -> Option<Waves> {
        let Meeting { side_5, side_3, gas_speed, reflected_excess } = meeting;
        let y = meeting.root(is_shock)?;
        let pressure = self.behind.pressure_5 * (Ball::whole(1) + y);
        let contact_speed = side_5.speed(Dual::constant(y), is_shock).value();
        let (transmitted, behind_transmitted) = side_3.behind_shock(transmitted_excess(*reflected_excess, y))?;
        let (returned_speed, end_wall_pressure) = if is_shock {
            // The gas that follows the shock is stopped at the wall.
            let (speed, behind) = side_5.behind_shock(y)?;
            (speed, pressure * behind.stopped(contact_speed)?)
        } else {
            (side_5.sound_speed(), self.behind.pressure_5 * side_5.expanded_twice(y)?)
        };
        Some(Waves {
            pressure,
            contact_speed,
            transmitted_mach: transmitted / side_3.sound_speed(),
            transmitted_speed: transmitted - *gas_speed,
            transmitted_sound_speed: behind_transmitted.sound_speed(),
            returned_mach: if is_shock { returned_speed / side_5.sound_speed() } else { Ball::whole(1) },
            returned_speed,
            end_wall_pressure,
        })
    }
}

#[cfg(test)]
#[path = "interaction_tests.rs"]
mod tests;
