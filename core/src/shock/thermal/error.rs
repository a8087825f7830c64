//! Why a shock into a thermally perfect gas has no proven answer.

use crate::gas::{InputError, Parameter};
use core::fmt;

/// Why there is no answer.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum ThermalError {
    /// An input was refused, or a temperature lies outside the data.
    Input(InputError),
    /// This quantity does not fix one shock: in a gas whose heat capacity depends on temperature two shocks can share it.
    NotUnique(Parameter),
    /// Existence of the shock is not proven near this temperature behind it, K.
    Existence {
        /// Temperature, K.
        temperature: f64,
    },
    /// Uniqueness is not proven: the enthalpy jumps at this joint of two polynomials, K, and a second solution is not excluded.
    Uniqueness {
        /// Temperature of the joint, K.
        temperature: f64,
    },
}

impl fmt::Display for ThermalError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Input(error) => error.fmt(f),
            Self::NotUnique(parameter) => write!(
                f,
                "the {} does not fix one shock in a gas whose heat capacity depends on temperature: give the shock speed, or a pressure or temperature behind it",
                parameter.name()
            ),
            Self::Existence { temperature } => {
                write!(
                    f,
                    "existence of the shock is not proven near {temperature} K: the shock is too weak for the digits of the inputs, or too near a joint of the data"
                )
            }
            Self::Uniqueness { temperature } => write!(
                f,
                "uniqueness of the shock is not proven: the enthalpy of the data jumps at {temperature} K and allows a second answer; move the temperature away from it"
            ),
        }
    }
}

impl core::error::Error for ThermalError {}

impl From<InputError> for ThermalError {
    fn from(error: InputError) -> Self {
        Self::Input(error)
    }
}
