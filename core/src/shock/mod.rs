//! Floor 3: the stationary jump, the incident and the reflected shock.
mod entry;
mod incident;
mod moving;
mod output;
mod ratios;
mod relations;
mod state;
mod total_pressure;
mod wall;
mod yielding;
pub use entry::{Branch, Entry, Problem};
pub use incident::Incident;
pub use moving::MovingShock;
pub use output::{Flow, Form, Output};
pub use ratios::{Ratios, error_counts, nine_ratios};
pub use relations::{Jump, Quadratic, from_density_excess, from_gas_speed_squared, from_pressure_excess, from_shock_speed, mach_excess};
pub use state::State;
pub use wall::{Approach, WallReflection, Wave};
