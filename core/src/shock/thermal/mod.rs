//! Shocks into gas whose heat capacity depends on temperature.
mod approximate;
mod certify;
mod error;
mod flow;
mod inverse;
mod plain;
mod setting;
mod shock;
mod slopes;
mod stage;
mod tolerance;
pub use error::ThermalError;
pub use flow::ThermalFlow;
pub use plain::{PlainFill, PlainShock};
pub use shock::{ThermalFill, ThermalShock};
pub use slopes::ThermalInput;
