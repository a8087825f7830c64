//! Outside checks of the `endwall` library: reference answers in exact arithmetic, a solution of the Euler equations
//! on a grid, published values, and generated cases. Not published.

#![allow(clippy::missing_panics_doc, reason = "a check panics when it fails, and the oracle when it cannot know")]

pub mod data;
pub mod euler;
pub mod glenn;
pub mod lagrangian;
pub mod oracle;
pub mod plain_plan;
pub mod random;
pub mod same_bits;
pub mod tolerances;
