//! The incident shock and its reflection, in units of state 1: `p1`, `T1`, `ρ1` and the sound speed `a1`.
//!
//! The incident shock is the stationary one seen by an observer who rests in the gas ahead. The reflected shock is
//! found from the condition that the gas behind it moves with the wall: with `k = (γ+1)/2 · (u2 − V)/a2` the condition
//! `a2 · 2/(γ+1) · (M_R − 1/M_R) = u2 − V` is the quadratic `M_R² − k M_R − 1 = 0`.

use dashu_ratio::RBig;

use super::normal_shock::jump;
use super::real::{Float, Real, WORKING, power_of_two};
use super::root::{difference, illinois};

/// State 2 in units of state 1.
#[derive(Clone, Debug)]
pub struct Incident {
    /// Shock Mach number `M = U_S/a1`.
    pub mach: Real,
    /// p2/p1
    pub pressure: Real,
    /// T2/T1
    pub temperature: Real,
    /// ρ2/ρ1
    pub density: Real,
    /// a2/a1
    pub sound_speed: Real,
    /// u2/a1 in the laboratory frame
    pub gas_speed: Real,
    /// p2/p1 − 1
    pub pressure_excess: Real,
    /// T2/T1 − 1
    pub temperature_excess: Real,
    /// ρ2/ρ1 − 1
    pub density_excess: Real,
}

/// The wave that runs back from the wall, and state 5, in units of state 1.
#[derive(Clone, Debug)]
pub struct Reflected {
    /// Mach number relative to the gas ahead (state 2); `None` when an expansion runs back.
    pub mach: Option<Real>,
    /// `M_R − 1`; `None` when an expansion runs back.
    pub mach_excess: Option<Real>,
    /// Laboratory speed away from the wall divided by a1: of the shock, or of the head of the expansion.
    pub speed: Real,
    /// p5/p1
    pub pressure: Real,
    /// T5/T1
    pub temperature: Real,
    /// ρ5/ρ1
    pub density: Real,
    /// a5/a1
    pub sound_speed: Real,
    /// p5/p1 − 1: the step in units of p1
    pub pressure_excess: Real,
    /// T5/T1 − 1
    pub temperature_excess: Real,
    /// p5/p2
    pub pressure_over_2: Real,
    /// T5/T2
    pub temperature_over_2: Real,
    /// ρ5/ρ2
    pub density_over_2: Real,
}

/// State 2 for the shock Mach number `mach` (any [`Real`] above 1).
#[must_use]
pub fn incident(heat_capacity_ratio: &RBig, mach: &Real) -> Incident {
    let one = Real::int(1);
    let across = jump(heat_capacity_ratio, &mach.square());
    Incident {
        // In the frame of the shock the gas leaves with M·ρ1/ρ2; seen from the gas ahead it follows with the rest.
        gas_speed: mach * (&one - &one / &across.density),
        sound_speed: across.temperature.sqrt(),
        pressure_excess: &across.pressure - &one,
        temperature_excess: &across.temperature - &one,
        density_excess: &across.density - &one,
        mach: mach.clone(),
        pressure: across.pressure,
        temperature: across.temperature,
        density: across.density,
    }
}

/// Reflection from a rigid wall at rest.
#[must_use]
pub fn reflected(heat_capacity_ratio: &RBig, ahead: &Incident) -> Reflected {
    reflected_from_moving_wall(heat_capacity_ratio, ahead, &Real::int(0))
}

/// Reflection from a wall that moves with `wall_speed` (in units of a1) along the incident direction: a shock when the
/// wall is slower than the gas of state 2, an expansion when it is faster.
///
/// A wall exactly as fast as the gas sends no wave: all ratios to state 2 are then one and the Mach number is 1.
#[must_use]
pub fn reflected_from_moving_wall(heat_capacity_ratio: &RBig, ahead: &Incident, wall_speed: &Real) -> Reflected {
    let difference = &ahead.gas_speed - wall_speed;
    if difference.signum() < 0 {
        return expansion(heat_capacity_ratio, ahead, &difference);
    }
    let one = Real::int(1);
    let half = Real::int(2);
    let plus = Real::Rational(heat_capacity_ratio + RBig::ONE);
    let half_k = plus * &difference / (&half * &half * &ahead.sound_speed);
    let mach = &half_k + (half_k.square() + &one).sqrt();
    let across = jump(heat_capacity_ratio, &mach.square());
    let speed = &mach * &ahead.sound_speed - &ahead.gas_speed;
    let mach_excess = &mach - &one;
    assemble(ahead, across.pressure, across.temperature, across.density, speed, Some((mach, mach_excess)))
}

/// Reflection from a massive elastic wall that yields with `V = (p5 − p1)/Z`, until a wave returns from its back.
///
/// `impedance` is `Z a1/p1`, with `Z = ρ_s c_s` of the wall, so that V/a1 = (p5/p1 − 1)/impedance. Gives V/a1, right to
/// `2^-450`, and the reflected wave. The load falls with V and the need grows with it, so that the root is single; a
/// light wall outruns the gas, and an expansion then runs back.
#[must_use]
pub fn reflected_from_yielding_wall(heat_capacity_ratio: &RBig, ahead: &Incident, impedance: &RBig) -> (Real, Reflected) {
    let wave = |speed: &Real| reflected_from_moving_wall(heat_capacity_ratio, ahead, speed);
    let impedance = Real::Rational(impedance.clone());
    let digits = |value: &Float| Real::approximate(value.clone(), WORKING as i64);
    let excess = |speed: &Real| &impedance * speed - wave(speed).pressure_excess;
    let miss = |trial: &Float| {
        let trial = digits(trial);
        difference(&(&impedance * &trial), &wave(&trial).pressure_excess, WORKING)
    };
    // A wall as fast as the gas parts shock and expansion; no gas follows beyond the escape speed.
    let near = Real::Rational(power_of_two(-60));
    let one = Real::int(1);
    let fan = Real::Rational(RBig::from(2) / (heat_capacity_ratio - RBig::ONE)) * &ahead.sound_speed;
    let is_shock = (&impedance * &ahead.gas_speed - &ahead.pressure_excess).signum() > 0;
    let (low, high) = if is_shock {
        (&ahead.gas_speed * &near, &ahead.gas_speed * (&one - &near))
    } else {
        (&ahead.gas_speed * (&one + &near), &ahead.gas_speed + fan * (&one - &near))
    };
    let root = illinois(&miss, low.to_float(WORKING).0, high.to_float(WORKING).0);
    let found = digits(&root);
    let slack = Real::Rational(power_of_two(-450));
    let beside = [&found * (&one - &slack), &found * (&one + &slack)].map(|speed| excess(&speed).signum());
    assert!(beside == [-1, 1], "the speed of the wall is not where it was found");
    let speed = Real::approximate(root, 450);
    let reflected = wave(&speed);
    (speed, reflected)
}

/// Simple wave that runs against the gas: `u + 2a/(γ−1)` is the same on both sides of it and the flow is isentropic
/// (Courant and Friedrichs, Supersonic Flow and Shock Waves, 1948, chapter III, from memory).
fn expansion(heat_capacity_ratio: &RBig, ahead: &Incident, difference: &Real) -> Reflected {
    let minus = heat_capacity_ratio - RBig::ONE;
    let half = Real::Rational(&minus / RBig::from(2));
    let sound_speed = &ahead.sound_speed + half * difference;
    assert!(sound_speed.signum() > 0, "the wall outruns the gas: there is a vacuum");
    let temperature = (sound_speed / &ahead.sound_speed).square();
    let density = temperature.pow(&(RBig::ONE / &minus), WORKING);
    let pressure = temperature.pow(&(heat_capacity_ratio / &minus), WORKING);
    let head = &ahead.sound_speed - &ahead.gas_speed;
    assemble(ahead, pressure, temperature, density, head, None)
}

fn assemble(
    ahead: &Incident,
    pressure_over_2: Real,
    temperature_over_2: Real,
    density_over_2: Real,
    speed: Real,
    mach: Option<(Real, Real)>,
) -> Reflected {
    let one = Real::int(1);
    let pressure = &ahead.pressure * &pressure_over_2;
    let temperature = &ahead.temperature * &temperature_over_2;
    let (mach, mach_excess) = mach.unzip();
    Reflected {
        mach,
        mach_excess,
        speed,
        density: &ahead.density * &density_over_2,
        sound_speed: temperature.sqrt(),
        pressure_excess: &pressure - &one,
        temperature_excess: &temperature - &one,
        pressure,
        temperature,
        pressure_over_2,
        temperature_over_2,
        density_over_2,
    }
}
