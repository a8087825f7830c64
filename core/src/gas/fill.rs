//! Driven fill: state 1, gas at rest before the shock.

use super::constant::{Gas, HeatCapacityRatio, positive};
use super::error::{InputError, Parameter};
use crate::number::Known;

/// A gas at rest with pressure p1 (Pa, absolute) and temperature T1 (K), each positive and within 2^±200.
///
/// ```
/// use endwall::gas::{Fill, Gas, HeatCapacityRatio, InputError, Parameter};
/// let gas = Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.028)?;
/// assert!(Fill::new(gas, 101_325.0, 295.0).is_ok());
/// assert_eq!(Fill::new(gas, -5.0, 295.0).unwrap_err().parameter, Parameter::FillPressure);
/// # Ok::<(), InputError>(())
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Fill {
    gas: Gas,
    pressure: Known,
    temperature: Known,
}

impl Fill {
    /// A fill from the gas, its absolute pressure in Pa and its temperature in K.
    ///
    /// # Errors
    /// [`InputError`] for a pressure or temperature that is not positive, not finite or beyond 2^±200.
    pub fn new(gas: Gas, pressure: impl Into<Known>, temperature: impl Into<Known>) -> Result<Self, InputError> {
        let (pressure, temperature) = (pressure.into(), temperature.into());
        positive(Parameter::FillPressure, pressure)?;
        positive(Parameter::FillTemperature, temperature)?;
        Ok(Self { gas, pressure, temperature })
    }

    /// A fill at one point of the tolerances of another.
    pub(crate) fn at(gamma_excess: Known, molar_mass: Known, pressure: Known, temperature: Known) -> Option<Self> {
        let gas = Gas::new(HeatCapacityRatio::from_excess(gamma_excess)?, molar_mass).ok()?;
        Some(Self { gas, pressure, temperature })
    }

    /// The gas.
    pub fn gas(&self) -> Gas {
        self.gas
    }

    /// p1 in Pa.
    pub fn pressure(&self) -> Known {
        self.pressure
    }

    /// T1 in K.
    pub fn temperature(&self) -> Known {
        self.temperature
    }
}
