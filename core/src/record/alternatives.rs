//! The choices of heat capacity side by side, and how long vibration takes.

use alloc::string::ToString;
use alloc::vec::Vec;

use super::reduce::figures;
use super::report::{Alternative, HeatCapacityChoice, Relaxation};
use super::shot::Shot;
use crate::gas::{HeatCapacityModel, ThermallyPerfectGas, relaxation_times};
use crate::shock::Output;
use crate::shot::Reduction;

/// Mole fraction below which what a molecule does inside does not matter to the states.
pub(super) const MATTERS: f64 = 1e-3;

/// Mole fraction of a species by its name; air that leaked in brings a species in twice.
pub(super) fn share(gas: &ThermallyPerfectGas<'_>, species: &str) -> f64 {
    gas.portions().iter().filter(|portion| portion.species.name == species).map(|portion| portion.fraction.to_f64()).sum()
}

/// All choices at the same shock speed. For a gas without species there is one only.
pub(super) fn alternatives(shot: &Shot, reduction: &Reduction<'_>) -> HeatCapacityChoice {
    let chosen = shot.heat_capacity.name();
    let Some(shock) = reduction.thermal() else {
        return HeatCapacityChoice { chosen, beside: Vec::new(), relaxation: Vec::new() };
    };
    let beside = HeatCapacityModel::ALL.map(|model| {
        let outputs = |reduction: &Reduction<'_>| {
            figures(reduction, [(Output::Temperature2, "K"), (Output::Temperature5, "K"), (Output::Pressure5, "Pa")]).map(Some)
        };
        let [temperature_2, temperature, pressure] = if model == shot.heat_capacity {
            outputs(reduction)
        } else {
            shot.with_model(model, |other, _| outputs(other)).unwrap_or([const { None }; 3])
        };
        Alternative { heat_capacity: model.name(), temperature_2, temperature, pressure }
    });
    let gas = shock.fill().gas();
    let at = |temperature, pressure| {
        let times = relaxation_times(gas, shock.nearest(temperature), shock.nearest(pressure));
        times.map(Iterator::collect::<Vec<_>>).unwrap_or_default()
    };
    let (incident, reflected) = (at(Output::Temperature2, Output::Pressure2), at(Output::Temperature5, Output::Pressure5));
    let mut relaxation: Vec<Relaxation> = Vec::new();
    for time in reflected.iter().filter(|time| share(gas, time.species) >= MATTERS) {
        // A species that comes twice is listed once.
        if relaxation.iter().all(|other| other.species != time.species) {
            let before = incident.iter().find(|other| other.species == time.species).map(|other| other.time);
            let species = time.species.to_string();
            relaxation.push(Relaxation { species, incident: before, reflected: Some(time.time), factor: time.factor });
        }
    }
    HeatCapacityChoice { chosen, beside: beside.to_vec(), relaxation }
}

#[cfg(test)]
#[path = "alternatives_tests.rs"]
mod tests;
