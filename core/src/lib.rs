//! States behind the incident and the reflected shock of a shock tube, as enclosures that provably contain the model's exact answer, with the
//! uncertainty that the measured inputs give them.
//!
//! ```
//! use endwall::gas::{Fill, Gas, HeatCapacityRatio};
//! use endwall::number::Rational;
//! use endwall::shock::{Entry, Incident};
//!
//! let exact = |text: &str| text.parse::<Rational>();
//! let argon = Gas::new(HeatCapacityRatio::ratio(5, 3)?, exact("0.039948")?)?;
//! let fill = Fill::new(argon, exact("8000")?, exact("296.2")?)?;
//! let end_wall = Incident::new(&fill, Entry::ShockSpeed, exact("950")?)?.state_5();
//! assert_eq!(format!("{:.7}", end_wall.temperature.proven_digits()), "2090.954");
//! assert_eq!(end_wall.temperature.width_in_ulp(), 1); // the two doubles that bracket the exact answer
//! # Ok::<(), Box<dyn std::error::Error>>(())
//! ```
//!
//! # Floors
//!
//! One direction only: each module knows those above it in this table.
//!
//! | module | what lives there |
//! |---|---|
//! | [`number`] | the kinds of number and their traits, exact decimals, certified roots; the only place that knows rounding |
//! | [`gas`] | heat capacity, mixtures, fills; the only place that knows what a gas is |
//! | [`shock`] | stationary, incident and reflected shock, moving wall, inverses |
//! | [`tube`] | driver, contact surface and tailoring, wave diagram and test time, boundary layer, bifurcation, loads |
//! | [`shot`] | filling steps, arrival times to shock speed, reduction, uncertainty budget, Monte Carlo |
//! | `record` | (feature `record`) quantities with units, record files, reports |
//!
//! # Units
//!
//! SI throughout: Pa (absolute), K, kg/m³, m/s, s, m, kg/mol, 1/m; ratios are dimensionless. Other units exist only in `record`.
//! Distances to sensors are measured from the end wall. States: 1 driven fill, 2 behind the incident shock, 5 behind the reflected shock.
//!
//! # What is proven, and what is not
//!
//! "Proven" is said of the arithmetic: the enclosure holds the exact answer of the stated model (ideal gas, constant heat capacity,
//! one-dimensional shocks) for the inputs as given. How well the model and the inputs describe an experiment is a different question, which
//! the uncertainties in [`shot`] answer as far as they were stated. See [`how_it_is_proven`].
//!
//! # Features
//!
//! None by default: `no_std`, no heap, no panic, no unsafe code, bounded work. `std` swaps the square root and, in builds with a
//! fused multiply-add, the exact product for the hardware's: the same bits, faster. `serde` serialises value types. `record` needs an allocator.
#![no_std]
#[cfg(feature = "record")]
extern crate alloc;
#[cfg(feature = "std")]
extern crate std;

pub mod gas;
pub mod number;
#[cfg(feature = "record")]
pub mod record;
pub mod shock;
pub mod shot;
pub mod tube;

#[doc = include_str!("how_it_is_proven.md")]
pub mod how_it_is_proven {}
