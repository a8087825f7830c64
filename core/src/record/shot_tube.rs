//! What driver and tube add to a shot that was fired: uniform time, boundary layer, bifurcation.

use alloc::format;
use alloc::vec::Vec;

use super::driver::{assumed, no_driver, with_driver};
use super::flag::Flag;
use super::report::{Report, States};
use super::shot::Shot;
use super::uniform_time::{Found, Setting};
use super::wall_layer::{WallLayer, WallLayerCriterion, criterion};
use crate::shock::Entry;
use crate::shot::{EndWall, Reduction, Solved};
use crate::tube::{BehindShock, Contact, TestGas};

/// The gas that a reduction was computed for.
pub(super) fn test_gas<'a>(reduction: &'a Reduction<'a>) -> TestGas<'a> {
    match reduction.solved() {
        Solved::Constant(incident, _) => TestGas::from(incident.fill()),
        Solved::Thermal(shock) => TestGas::from(shock.fill()),
    }
}

/// What the boundary layer does.
#[derive(Default)]
pub(super) struct Layers {
    pub boundary_layer: Option<WallLayer>,
    pub bifurcation: Option<WallLayerCriterion>,
}

impl Shot {
    /// Puts what driver and tube add into the report, if the record has either.
    pub(super) fn add_tube(&self, reduction: &Reduction<'_>, report: &mut Report) {
        if self.tube.is_none() && self.driver.is_none() {
            return self.nothing_observed(false, &mut report.flags);
        }
        let mut flags = Vec::new();
        if let Ok(behind) = test_gas(reduction).behind(Entry::ShockSpeed, report.incident.speed.value) {
            let found = self.found(&behind, &report.states, &mut flags);
            let layers = self.layers(&behind, &report.states, found.as_ref(), &mut flags);
            report.test_time = found.map(|found| found.time);
            report.boundary_layer = layers.boundary_layer;
            report.bifurcation = layers.bifurcation;
        }
        let has_time = report.test_time.is_some();
        if self.driver.is_some() && !has_time {
            flags.push(Flag::not_used("driver"));
        }
        if self.tube.is_some() && !has_time && report.boundary_layer.is_none() {
            flags.push(Flag::not_used("tube"));
        }
        if !matches!(reduction.wall(), EndWall::Rigid) {
            flags.push(Flag::new(
                "rigid-wall-times",
                "uniform time, boundary layer and bifurcation are those of a shock that a rigid end wall reflects",
            ));
        }
        self.nothing_observed(has_time, &mut flags);
        report.flags.extend(flags);
    }

    /// Boundary layer and bifurcation, for plans and for shots.
    pub(super) fn layers(&self, behind: &BehindShock<'_>, states: &States, found: Option<&Found>, flags: &mut Vec<Flag>) -> Layers {
        let boundary_layer = self.tube.as_ref().and_then(|tube| self.wall_layer(tube, behind, states, found, flags));
        Layers { boundary_layer, bifurcation: criterion(behind, flags) }
    }

    /// Flags what the record says about a uniform time that is not computed.
    pub(super) fn nothing_observed(&self, has_time: bool, flags: &mut Vec<Flag>) {
        let place = self.tube.as_ref().and_then(|tube| tube.observe.as_ref());
        let stated = [("tube.observe", place), ("tolerance.disturbance", self.disturbance.as_ref())];
        for (path, _) in stated.iter().filter(|(_, stated)| !has_time && stated.is_some()) {
            let text = format!(
                "{path} is recorded but not used: a uniform time needs gas and temperature of a driver of the driven bore, and both lengths of the tube"
            );
            flags.push(Flag::new("not-used", text));
        }
    }

    /// A shot was fired whatever its driver: what a plan refuses is a flag here.
    fn found(&self, behind: &BehindShock<'_>, states: &States, flags: &mut Vec<Flag>) -> Option<Found> {
        let record = self.driver.as_ref()?;
        let found = with_driver(record, self.tube.as_ref(), |driver| {
            let drive = driver.for_shock(behind).map_err(|error| no_driver(&error))?;
            let contact = Contact::new(behind, &drive);
            let met = contact.meet().ok();
            let setting = Setting {
                behind,
                driver,
                contact: &contact,
                met: met.as_ref(),
                tube: self.tube.as_ref(),
                reflected_pressure: states.reflected.pressure.value,
                disturbance: self.disturbance.as_ref().map_or(0.0, |change| change.value().to_f64()),
            };
            setting.find(flags)
        });
        if found.as_ref().is_ok_and(Option::is_some) {
            flags.extend(assumed(record, self.tube.as_ref()));
        }
        found.unwrap_or_else(|error| {
            flags.push(Flag::new("no-test-time", format!("no uniform time: {} ({}); {}", error.wrong, error.path, error.remedy)));
            None
        })
    }
}

#[cfg(test)]
#[path = "shot_tube_tests.rs"]
mod tests;
