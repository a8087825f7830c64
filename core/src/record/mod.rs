//! Floor 6: quantities with units, record files and reports.
//!
//! A record is JSON that a person types; a [`Shot`] is what it says, with every typed number exact and in SI units.
//! [`Shot::read`] never guesses: whatever is unknown, missing, impossible or doubtful is a [`RecordError`] with the full
//! path, the text as typed and the remedy.

mod alternatives;
mod check;
mod digest;
mod driven;
mod error;
mod flag;
mod format;
mod gas;
mod hazard;
mod input;
mod leak;
mod monte_carlo;
mod optional;
mod page;
mod plan;
mod plan_report;
mod plan_text;
mod plan_tube;
mod planning;
mod quantity;
mod quantity_text;
mod read;
mod reduce;
mod report;
mod shot;
mod species;
mod station;
mod text;
mod text_choices;
mod tree;
mod unit;

pub use digest::input_digest;
pub use driven::{GAS_DATA, GasNotes};
pub use error::{ErrorKind, RecordError};
pub use flag::Flag;
pub use format::value_with_uncertainty;
pub use gas::{Component, ConstantGas, GasRecord};
pub use leak::Leak;
pub use optional::{Driver, Measured, Rating, Survey, Tube, Wall};
pub use plan::{Plan, Target, Tolerance};
pub use plan_report::{LimitLine, PlanReport, PlannedFill, PlannedTime, PlannedWave};
pub use planning::Planned;
pub use quantity::{Absolute, Coverage, Mark, Quantity, QuantityError, Uncertainty};
pub use read::Entry;
pub use report::{
    Alternative, BudgetLine, Correlation, Fit, FitLine, HeatCapacityChoice, Incident, LeftOut, MadeBy, Reflected, Relaxation, Report,
    ReportQuantity, ReportState, Share, States,
};
pub use shot::{Fill, Shot, Speed};
pub use species::OwnSpecies;
pub use station::Station;
pub use unit::{Dimension, Unit};
