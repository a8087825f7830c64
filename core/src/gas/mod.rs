//! Floor 2: what a gas is. Constant heat capacity, mixtures, fills.
pub(crate) use constant::positive;
mod constant;
mod error;
mod fill;
pub(crate) mod heat_capacity;
mod mixture;
pub mod species;
mod thermally_perfect;
pub use constant::{Gamma, Gas, HeatCapacityRatio, SmallRatio, molar_gas_constant, sound_speed_squared};
pub use error::{InputError, Parameter, Rule};
pub use fill::Fill;
pub use heat_capacity::{HeatCapacity, RANGES};
pub use mixture::{Component, mixture};
pub use thermally_perfect::{HeatCapacityModel, Portion, ThermallyPerfectGas};
