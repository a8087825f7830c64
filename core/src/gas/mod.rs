//! Floor 2: what a gas is. Constant heat capacity, mixtures, fills.
pub(crate) use constant::positive;
mod constant;
mod error;
mod fill;
mod mixture;
pub use constant::{Gamma, Gas, HeatCapacityRatio, SmallRatio, molar_gas_constant, sound_speed_squared};
pub use error::{InputError, Parameter, Rule};
pub use fill::Fill;
pub use mixture::{Component, mixture};
