//! The driver of a tube of one cross-section: expansion of the driver gas to the pressure and speed of state 2.

use dashu_ratio::RBig;

use super::real::{Real, WORKING};
use super::reflection::{Incident, Reflected};

/// A driver gas of constant heat capacity.
#[derive(Clone, Debug)]
pub struct Driver {
    /// Heat capacity ratio γ4.
    pub heat_capacity_ratio: RBig,
    /// Sound speed a4/a1; [`Real::sqrt`] of γ4 T4 W1/(γ1 T1 W4).
    pub sound_speed: Real,
}

/// State 3 in units of state 4.
#[derive(Clone, Debug)]
pub struct Expanded {
    /// a3/a4
    pub sound_speed: Real,
    /// p3/p4
    pub pressure: Real,
    /// ρ3/ρ4
    pub density: Real,
}

impl Driver {
    /// State 3 behind an expansion to the gas speed `gas_speed` = u2/a1; `None` when the driver gas cannot run so fast.
    ///
    /// The simple wave keeps `u + 2a/(γ−1)` and the entropy (Courant and Friedrichs, Supersonic Flow and Shock Waves,
    /// 1948, chapter III, from memory).
    #[must_use]
    pub fn expand(&self, gas_speed: &Real) -> Option<Expanded> {
        let minus = &self.heat_capacity_ratio - RBig::ONE;
        let slowed = &self.sound_speed - Real::Rational(&minus / RBig::from(2)) * gas_speed;
        if slowed.signum() <= 0 {
            return None;
        }
        let sound_speed = slowed / &self.sound_speed;
        let temperature = sound_speed.square();
        Some(Expanded {
            pressure: temperature.pow(&(&self.heat_capacity_ratio / &minus), 2 * WORKING),
            density: temperature.pow(&(RBig::ONE / &minus), 2 * WORKING),
            sound_speed,
        })
    }
}

/// p4/p1 for the incident shock; `None` beyond the limiting Mach number of the driver.
#[must_use]
pub fn driver_pressure_ratio(driver: &Driver, ahead: &Incident) -> Option<Real> {
    Some(&ahead.pressure / driver.expand(&ahead.gas_speed)?.pressure)
}

/// Pressure that the driver gas takes when the shock of strength p5/p2 runs on into it, compared with what the contact
/// needs to stand still: `(u2/a3)² γ3 ((γ3+1)P + γ3−1) − 2 (P−1)²` with `P = p5/p2`.
///
/// Zero when tailored. Positive when the gas of the driver would have to be shocked harder to come to rest, so that
/// a shock returns; negative when an expansion returns.
#[must_use]
pub fn contact_balance(driver: &Driver, ahead: &Incident, back: &Reflected) -> Option<Real> {
    let expanded = driver.expand(&ahead.gas_speed)?;
    let speed = &ahead.gas_speed / (expanded.sound_speed * &driver.sound_speed);
    let gamma = Real::Rational(driver.heat_capacity_ratio.clone());
    let one = Real::int(1);
    let ratio = &back.pressure_over_2;
    let needed = speed.square() * &gamma * ((&gamma + &one) * ratio + &gamma - &one);
    Some(needed - Real::int(2) * (ratio - &one).square())
}
