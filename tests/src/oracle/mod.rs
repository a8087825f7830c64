//! Reference answers in exact and arbitrary-precision arithmetic.
//!
//! Written from the textbook relations, not from the rearranged forms of the library, and on purpose with their
//! subtractions. A shock in a gas of constant heat capacity leaves only ratios and square roots, so nearly every
//! answer here is exact; the rest carries hundreds of right bits and knows how many.

mod arithmetic;
mod compare;
mod driver;
pub mod elementary;
mod inverse;
mod normal_shock;
mod real;
mod reflection;
mod root;
mod shot;
pub mod thermal;

pub use compare::{Histogram, contains, optimal, ulp_error, ulp_width};
pub use dashu_ratio::RBig;
pub use driver::{Driver, Expanded, contact_balance, driver_pressure_ratio};
pub use inverse::{Known, Measured, Strength, compare_mach, compare_mach_excess, mach_from};
pub use normal_shock::{Jump, jump, total_pressure_loss, total_pressure_ratio};
pub use real::{Float, PRECISION, Real, WORKING, exact, float, parse, power_of_two, ratio, rational_root};
pub use reflection::{Incident, Reflected, incident, reflected, reflected_from_moving_wall, reflected_from_yielding_wall};
pub use shot::{Fill, Shot, State, molar_gas_constant};
