//! Species: what is known of a pure ideal gas.

mod check;
mod coefficient;
pub mod table;

pub(crate) use check::EXTENSION;
pub use check::SpeciesError;
pub use coefficient::Coefficient;

/// How many ways a molecule has to turn, which fixes the heat capacity that it keeps when its vibration is frozen.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum Shape {
    /// An atom: `c_p`/R = 5/2.
    Atom,
    /// A linear molecule: `c_p`/R = 7/2.
    Linear,
    /// Any other molecule: `c_p`/R = 4.
    Other,
}

impl Shape {
    /// Twice the heat capacity `c_p`/R of translation and rotation: 5, 7 or 8 (equipartition).
    pub const fn twice_frozen_heat_capacity(self) -> u32 {
        match self {
            Self::Atom => 5,
            Self::Linear => 7,
            Self::Other => 8,
        }
    }
}

/// The polynomials of one range of temperature:
///
/// > `c_p`/R = a1 T⁻² + a2 T⁻¹ + a3 + a4 T + a5 T² + a6 T³ + a7 T⁴
/// >
/// > h/R = −a1 T⁻¹ + a2 ln T + a3 T + a4 T²/2 + a5 T³/3 + a6 T⁴/4 + a7 T⁵/5 + b1
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SpeciesRange {
    /// From this temperature, K.
    pub low: f64,
    /// Up to and with this temperature, K.
    pub high: f64,
    /// a1 … a7.
    pub heat_capacity: [Coefficient; 7],
    /// b1, K.
    pub enthalpy: Coefficient,
}

/// A species: its molar mass, its shape and its heat capacity over adjoining ranges of temperature.
///
/// The ones of [`table`] come from B. J. `McBride`, M. J. Zehe, S. Gordon, NASA/TP-2002-211556 (2002). Each is a static of its own, so that a
/// program carries those that it names. A species of your own is a value of this type; [`Species::check`] says whether the proofs hold for it.
///
/// ```
/// use endwall::gas::species::{Shape, table};
/// assert_eq!(table::N2.name, "N2");
/// assert_eq!(table::N2.shape, Shape::Linear);
/// assert_eq!(table::N2.molar_mass.to_f64(), 0.0280134); // kg/mol
/// assert_eq!(table::N2.range(), (200.0, 20_000.0)); // K
/// assert!(table::N2.check().is_ok());
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Species<'a> {
    /// The formula.
    pub name: &'a str,
    /// Molar mass, kg/mol.
    pub molar_mass: Coefficient,
    /// Shape of the molecule.
    pub shape: Shape,
    /// Ranges of temperature in rising order, each beginning where the one before ends.
    pub ranges: &'a [SpeciesRange],
}

impl Species<'_> {
    /// The temperatures between which the heat capacity is known, K; (0, 0) where there is no range.
    pub fn range(&self) -> (f64, f64) {
        match (self.ranges.first(), self.ranges.last()) {
            (Some(first), Some(last)) => (first.low, last.high),
            _ => (0.0, 0.0),
        }
    }
}

/// The species of the table with this name.
///
/// ```
/// use endwall::gas::species;
/// assert_eq!(species::named("CO2").unwrap().molar_mass.to_f64(), 0.0440095);
/// assert!(species::named("co2").is_none()); // Co would be cobalt
/// ```
pub fn named(name: &str) -> Option<&'static Species<'static>> {
    table::ALL.into_iter().find(|species| species.name == name)
}
