//! The stationary normal shock in a gas of constant heat capacity, in the textbook form.
//!
//! NACA Report 1135 (1953), equations 93 to 96 and 99 (numbers from memory), written in `M²` with the subtractions
//! that the textbook has. Exact arithmetic makes them harmless, and makes them independent of any rearranged form.

use dashu_ratio::RBig;

use super::real::{Real, WORKING};

/// Ratios across a stationary normal shock; 1 ahead of it, 2 behind it.
#[derive(Clone, Debug)]
pub struct Jump {
    /// p2/p1
    pub pressure: Real,
    /// ρ2/ρ1
    pub density: Real,
    /// T2/T1
    pub temperature: Real,
    /// M2², the square of the Mach number behind the shock, relative to it.
    pub mach_behind_squared: Real,
}

/// The jump at the square of the shock Mach number, for the heat capacity ratio γ.
#[must_use]
pub fn jump(heat_capacity_ratio: &RBig, mach_squared: &Real) -> Jump {
    let gamma = Real::Rational(heat_capacity_ratio.clone());
    let (one, two) = (Real::int(1), Real::int(2));
    let minus = &gamma - &one;
    let plus = &gamma + &one;
    let momentum = &two * &gamma * mach_squared - &minus;
    let energy = &minus * mach_squared + &two;
    let pressure = &momentum / &plus;
    let density = &plus * mach_squared / &energy;
    Jump { temperature: &pressure / &density, mach_behind_squared: &energy / &momentum, pressure, density }
}

/// Ratio of the total pressures pt2/pt1, each from its own side by the isentropic relation
/// `pt/p = (1 + (γ−1)/2 M²)^(γ/(γ−1))` (NACA Report 1135, equation 44, from memory).
#[must_use]
pub fn total_pressure_ratio(heat_capacity_ratio: &RBig, mach_squared: &Real) -> Real {
    total_pressure_ratio_with(heat_capacity_ratio, mach_squared, WORKING)
}

/// Loss of total pressure 1 − pt2/pt1, which falls with the third power of M − 1.
///
/// The precision is raised by what the subtraction takes, so that [`WORKING`] bits survive.
#[must_use]
pub fn total_pressure_loss(heat_capacity_ratio: &RBig, mach_squared: &Real) -> Real {
    let strength = (mach_squared - &Real::int(1)).to_f64();
    let small = if strength < 1.0 { -strength.log2().floor() } else { 0.0 };
    let bits = WORKING + 4 * (small as usize) + 128;
    Real::int(1) - total_pressure_ratio_with(heat_capacity_ratio, mach_squared, bits)
}

fn total_pressure_ratio_with(heat_capacity_ratio: &RBig, mach_squared: &Real, bits: usize) -> Real {
    let across = jump(heat_capacity_ratio, mach_squared);
    let half = Real::Rational((heat_capacity_ratio - RBig::ONE) / RBig::from(2));
    let total = |mach_squared: &Real| Real::int(1) + &half * mach_squared;
    let power = heat_capacity_ratio / (heat_capacity_ratio - RBig::ONE);
    let sides = total(&across.mach_behind_squared) / total(mach_squared);
    across.pressure * sides.pow(&power, bits)
}
