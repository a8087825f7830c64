//! Gases of constant heat capacity for the unit tests of driver and contact surface.

use crate::gas::{Gas, HeatCapacityRatio};
use crate::number::Rational;

pub(super) fn gas(n: u32, d: u32, molar_mass: &str) -> Gas {
    Gas::new(HeatCapacityRatio::ratio(n, d).unwrap(), molar_mass.parse::<Rational>().unwrap()).unwrap()
}

pub(super) fn helium() -> Gas {
    gas(5, 3, "0.004002602")
}

pub(super) fn hydrogen() -> Gas {
    gas(7, 5, "0.00201588")
}

pub(super) fn nitrogen() -> Gas {
    gas(7, 5, "0.0280134")
}

pub(super) fn argon() -> Gas {
    gas(5, 3, "0.039948")
}
