//! Floor 6: quantities with units, record files and reports.
//!
//! A record is JSON that a person types; a [`Shot`] is what it says, with every typed number exact and in SI units.
//! [`Shot::read`] never guesses: whatever is unknown, missing, impossible or doubtful is a [`RecordError`] with the full
//! path, the text as typed and the remedy.
//!
//! # Shots, `shot/1`
//!
//! Needed: `record`, `gas`, `fill` (`pressure`, `temperature`), and `stations` or `shock_speed`. Optional: `name`, `heat_capacity` (`constant`,
//! `equilibrium`, `frozen`, `frozen then equilibrium`), `species` (polynomials of your own), `attenuation`, `clock`, `survey`, `ambient`, `humidity`, `leak`
//! (a fraction, or `rate` and `waiting`), `wall` (`speed` or `impedance`), `measured` (`pressure_2`, `pressure_5`, `rise`, `pressure_change`), `tube`,
//! `driver`, `tolerance` (`disturbance`), `confirm`, and for the audit `date`, `operator`, `instruments`, `notes`. See [`Shot::read`], [`Shot::reduce`] and [`Report`].
//!
//! `tube` and `driver` are those of a plan, below: with gas and temperature of the driver and both lengths the report has the uniform time with its cause,
//! with bore and length of the driven section what the boundary layer leaves of it, and with either field whether the reflected shock bifurcates.
//!
//! # Plans, `plan/1`
//!
//! Needed: `record`, `gas`, `temperature` (of the fill) and `target`: `temperature` with `pressure`, or `step` with `fill_pressure`, or
//! `reflected_overpressure` with `ambient` or `fill_pressure`. Optional: `name`, `heat_capacity`, `species`, `driver` (`gas`, `temperature`,
//! `heat_capacity`: `constant`, that at its temperature, or `equilibrium`), `tube` (`driven_length`,
//! `driver_length`, `driven_bore`, `driver_bore`, `stations`, `observe`, `ratings` of `driven`, `driver`, `window`, `sensor`, `burst_pressure`), `attenuation`,
//! `efficiency` (measured over ideal Mach number of past shots), `tolerance` (`fill`, `speed`: relative standard uncertainties of what this laboratory
//! sets; `disturbance`), `filling`, `ambient`, `confirm` and the fields for the audit. See [`Plan::read`], [`Plan::report`] and [`PlanReport`].
//!
//! `tube.observe` is a distance from the end wall, `"20 mm"`, at which the uniform time is reported too. `tolerance.disturbance`, `"1 %"`, is the change of p5
//! up to which a wave that comes back from the contact surface does not end it; such a wave is named and flagged. Without the field every first wave
//! counts; the expansion always counts from its first wave. See [`UniformTime`], [`WallLayer`] and [`WallLayerCriterion`].
//!
//! A rating must be marked, and a gauge value needs `ambient`. Compared are p5 with its upper end, a shock that comes back from an over-tailored contact
//! surface in proportion, p4 at the upper end of its band, which stands in the driver where the diaphragm does not burst, and `burst_pressure`.
//!
//! `filling` asks for the steps in which the mixture is made by partial pressures. Needed: `vessel` (`mixing vessel`, or `driven section`, which is filled up to
//! the planned fill pressure at its temperature), in a mixing vessel `pressure` (final, marked), and for a mixture that can burn `rating` (marked; that of the driven
//! section stands in `tube.ratings`). Optional: `temperature` (of a mixing vessel), `order` (otherwise that of `gas`), `residual` (pressure that the pump left,
//! taken as air), `gauge` (standard uncertainty of a reading, `"0.1 %"` or `"20 Pa"`, or both as `{ "relative": …, "absolute": … }`, independent from one
//! reading to the next), `temperature_scatter` (standard uncertainty by which the gas misses the temperature of the vessel at a reading, `"0.2 K"`),
//! `vapour_pressures` (of species that are not built in, at the temperature of the filling: `{ "heptane": "5.3 kPa" }`). See [`FillingRecord`] and
//! [`FillingReport`]. A gas above its vapour pressure is refused, in the vessel and in every planned fill.
//!
//! # Past shots against a plan
//!
//! A [`Comparison`] takes a plan and shots. From a shot it needs, beside what a reduction takes, `driver.pressure` at the moment of firing for the efficiency (`driver.gas` and
//! `driver.temperature` where they are not those of the plan) and `stations` without an `attenuation` for the attenuation; `tube` tells that it is the
//! plan's. The efficiency is the measured over the ideal Mach number at the end wall, as a plan uses it. Its [`CompareReport`] holds values for the fields
//! `efficiency`, `attenuation` and `tolerance` of the plan.

mod alternatives;
mod check;
mod compare;
mod compare_report;
mod compare_same;
mod compare_shot;
mod compare_text;
mod digest;
mod driven;
mod driver;
mod error;
mod filling;
mod filling_flags;
mod filling_report;
mod filling_text;
mod flag;
mod format;
mod gas;
mod hazard;
mod input;
mod leak;
mod monte_carlo;
mod observation;
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
mod shot_tube;
mod species;
mod station;
mod tailoring;
mod text;
mod text_choices;
mod time_text;
mod tree;
mod uniform_time;
mod unit;
mod wall_layer;

pub use compare::Comparison;
pub use compare_report::{CompareReport, Counted, Departure, PastShot, Ready, ReadyTolerance, Spread, Wanted};
pub use digest::input_digest;
pub use driven::{GAS_DATA, GasNotes};
pub use error::{ErrorKind, RecordError};
pub use filling::{FillingRecord, Gauge, Vessel};
pub use filling_report::{FillingLine, FillingReport, FillingResidual};
pub use flag::Flag;
pub use format::value_with_uncertainty;
pub use gas::{Component, ConstantGas, GasRecord};
pub use leak::Leak;
pub use optional::{Driver, Measured, Rating, Survey, Tube, Wall};
pub use plan::{Plan, Target, Tolerance};
pub use plan_report::{LimitLine, PlanReport, PlannedFill, PlannedWave};
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
pub use tailoring::{PlannedTailoring, TailoredBlend};
pub use uniform_time::{ObservedTime, ReturnedWave, UniformTime};
pub use unit::{Dimension, Unit};
pub use wall_layer::{LayerRange, LayerViscosity, WallLayer, WallLayerCriterion};
