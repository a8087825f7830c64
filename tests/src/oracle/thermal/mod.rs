//! Shocks into gas whose heat capacity depends on temperature, in arbitrary precision.
//!
//! The conservation laws in their original form, with the enthalpy of the data (integration constants and all) and with the trivial solution left in:
//! the temperature behind each shock is searched for where the laws hold. Nothing is divided out, and digits make up for what cancels.

mod gas;
mod root;
mod shot;

pub use gas::{Law, ThermalGas};
pub use root::{Candidates, Look, search};
pub use shot::{ThermalAnswer, ThermalModel, ThermalProblem, ThermalRefusal, ThermalShot};
