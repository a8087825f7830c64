//! Shocks into air with temperature-dependent heat capacity: with proof, in plain doubles, and with constant heat capacity.

use endwall::gas::{DRY_AIR, Fill, Gas, HeatCapacityModel, HeatCapacityRatio, ThermallyPerfectGas};
use endwall::shock::{Entry, Incident, Output, PlainFill, ThermalFill, ThermalShock};

/// p1, Pa, and T1, K.
const FILL: (f64, f64) = (10e3, 295.0);

/// A shock speed, m/s, for every turn: Mach 1.5 to 5.
pub fn speed(turn: usize) -> f64 {
    500.0 + ((turn * 7919) % 1024) as f64 * 1.2
}

/// The fill.
pub fn fill() -> ThermalFill<'static> {
    let gas = ThermallyPerfectGas::new(&DRY_AIR).expect("air");
    ThermalFill::new(gas, HeatCapacityModel::Equilibrium, FILL.0, FILL.1).expect("a fill")
}

/// T5 with proof, both shocks solved.
pub fn proven(fill: &ThermalFill<'_>, speed: f64) -> f64 {
    ThermalShock::new(fill, Entry::ShockSpeed, speed).expect("a shock").output(Output::Temperature5).low()
}

/// T5 by Newton's iteration in plain doubles.
pub fn plain(fill: &PlainFill<f64>, speed: f64) -> f64 {
    fill.reflected(speed, 0.0).expect("a shock").flow().evaluate(Output::Temperature5)
}

/// The fill with γ = 7/5.
pub fn constant_fill() -> Fill {
    let gas = Gas::new(HeatCapacityRatio::ratio(7, 5).expect("a ratio"), 0.028_965).expect("a gas");
    Fill::new(gas, FILL.0, FILL.1).expect("a fill")
}

/// T5 for constant heat capacity, with proof.
pub fn constant(fill: &Fill, speed: f64) -> f64 {
    Incident::new(fill, Entry::ShockSpeed, speed).expect("a shock").output(Output::Temperature5).low()
}

/// Plain Newton steps of both shocks together, at most.
pub fn most_steps(fill: &ThermalFill<'_>) -> u32 {
    let steps = (0..1024).map(|turn| ThermalShock::new(fill, Entry::ShockSpeed, speed(turn)).expect("a shock").steps());
    steps.map(|[incident, reflected]| incident + reflected).max().unwrap_or(0)
}
