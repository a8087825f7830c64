//! Gases for the unit tests of driver and contact surface.

use crate::gas::species::Species;
use crate::gas::{Gas, HeatCapacityRatio, Portion};
use crate::number::Rational;

pub(super) fn exact(text: &str) -> Rational {
    text.parse().unwrap()
}

/// One species, of which a thermally perfect gas is made.
pub(super) fn pure<'a>(species: &'a Species<'a>) -> [Portion<'a>; 1] {
    [Portion { species, fraction: Rational::ONE }]
}

pub(super) fn gas(n: u32, d: u32, molar_mass: &str) -> Gas {
    Gas::new(HeatCapacityRatio::ratio(n, d).unwrap(), exact(molar_mass)).unwrap()
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
