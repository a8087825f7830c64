//! Uniform time, boundary layer and bifurcation as rows of a table; for plans and for shots.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::format::significant;
use super::page::row;
use super::uniform_time::{ReturnedWave, UniformTime, signed};
use super::wall_layer::{LayerRange, WallLayer, WallLayerCriterion};

fn milliseconds(seconds: f64) -> String {
    format!("{} ms", significant(seconds * 1e3, 3))
}

/// All rows for what is there.
pub(super) fn rows(time: Option<&UniformTime>, layer: Option<&WallLayer>, bifurcation: Option<&WallLayerCriterion>) -> Vec<Vec<String>> {
    let mut rows = Vec::new();
    if let Some(time) = time {
        rows.push(row(["Uniform time at the end wall", &ended(time.end_wall.value, &time.cause)]));
        if let Some(length) = time.shortest_driver {
            rows.push(row(["Shortest driver that does not limit it", &format!("{} m", significant(length, 3))]));
        }
        if let Some(observed) = &time.observed {
            let place = format!("Uniform time {} mm from the end wall", significant(observed.from_end_wall * 1e3, 3));
            rows.push(row([&place, &ended(observed.time.value, &observed.cause)]));
        }
        if let Some(wave) = &time.returned_wave {
            rows.push(row(["Wave returned from the contact surface", &returned(wave, time.disturbance_tolerance)]));
        }
    }
    if let Some(layer) = layer {
        if let Some([low, high]) = layer.uniform_time {
            let band = format!("{} to {}", milliseconds(low), milliseconds(high));
            rows.push(row(["Uniform time at the end wall with a boundary layer", &band]));
        }
        rows.push(row(["  a wave from the contact surface comes after", &range(&layer.contact_wave, 1e3, "ms")]));
        rows.push(row(["  separation of shock and contact surface", &range(&layer.separation, 1.0, "m")]));
    }
    if let Some(found) = bifurcation {
        rows.push(row(["Bifurcation of the reflected shock", &verdict(found)]));
    }
    rows
}

fn ended(seconds: f64, cause: &str) -> String {
    if seconds == 0.0 { format!("none: {cause}") } else { format!("{}, ended when {cause}", milliseconds(seconds)) }
}

fn returned(wave: &ReturnedWave, tolerance: f64) -> String {
    let kind = if wave.kind == "shock" { "a shock" } else { "an expansion" };
    let limit = if tolerance > 0.0 { format!("more than {} %", significant(tolerance * 100.0, 2)) } else { "every wave".to_string() };
    let counts = match (wave.pressure_change, wave.counts) {
        (None, _) => "of unknown strength, so that it counts".to_string(),
        (Some(change), true) => format!("changes p5 by {} % at the end wall and counts ({limit} does)", signed(change * 100.0)),
        (Some(change), false) => format!("changes p5 by {} % at the end wall and does not count ({limit} does)", signed(change * 100.0)),
    };
    format!("{kind}, {} after the reflection; {counts}", milliseconds(wave.arrival))
}

fn range(range: &LayerRange, scale: f64, unit: &str) -> String {
    let pair = |[low, high]: [f64; 2]| format!("{} to {} {unit}", significant(low * scale, 2), significant(high * scale, 2));
    format!(
        "{} laminar, {} turbulent ({} {unit} without)",
        pair(range.laminar),
        pair(range.turbulent),
        significant(range.without * scale, 3)
    )
}

fn verdict(found: &WallLayerCriterion) -> String {
    let said = match found.bifurcates {
        Some(true) => "yes",
        Some(false) => "no",
        None => "not decided",
    };
    format!(
        "{said}, by Mark's criterion: the wall layer stagnates at {} of p5, at a Mach number of {}",
        significant(found.stagnation_over_reflected, 3),
        significant(found.wall_layer_mach, 3)
    )
}

/// What stands behind the rows.
pub(super) fn remarks(layer: Option<&WallLayer>, bifurcation: Option<&WallLayerCriterion>) -> Option<String> {
    let bands = layer.map(|layer| {
        let [fill, incident] = [layer.viscosity.fill, layer.viscosity.incident].map(|viscosity| significant(viscosity * 1e6, 3));
        format!(
            "Boundary layer: theory of the limiting separation, empirical. Laminar is known to about 27 % of that limit, turbulent for a film between T1 and T2; which of both the layer is, is not known. Viscosity {fill} uPa s at T1 and {incident} uPa s at T2, {}.",
            layer.viscosity.source
        )
    });
    let criterion =
        bifurcation.map(|_| "Bifurcation: a model of the wall layer, empirical; within 3 % of p5 it decides nothing.".to_string());
    match (bands, criterion) {
        (Some(bands), Some(criterion)) => Some(format!("{bands} {criterion}")),
        (bands, criterion) => bands.or(criterion),
    }
}
