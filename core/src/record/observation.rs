//! Where the gas behind the reflected shock is observed, and which disturbances count there.

use alloc::format;

use super::error::{ErrorKind, RecordError};
use super::quantity::Quantity;
use super::read::{Fields, Reading};
use super::unit::Dimension;

/// `tube.observe`: a distance from the end wall inside the driven section.
pub(super) fn observe(tube: Fields, driven_length: Option<&Quantity>, reading: &mut Reading) -> Result<Option<Quantity>, RecordError> {
    let place = tube.quantity(reading, "observe", Dimension::Length)?;
    place.map(|place| inside(place, &tube.path_of("observe"), driven_length)).transpose()
}

/// A distance from the end wall that lies in the driven section.
pub(super) fn inside(place: Quantity, path: &str, driven_length: Option<&Quantity>) -> Result<Quantity, RecordError> {
    let refuse = |wrong: &str, remedy: &str| Err(RecordError::new(ErrorKind::Value, path, place.typed(), wrong, remedy));
    if place.value().is_negative() {
        return refuse("a distance from the end wall is not negative", "type its size, like \"20 mm\"");
    }
    match driven_length {
        Some(length) if place.value().to_f64() >= length.value().to_f64() => {
            let wrong = format!("the driven section is only {} long", length.typed());
            refuse(&wrong, "type the distance from the end wall, like \"20 mm\"")
        }
        _ => Ok(place),
    }
}

/// `tolerance.disturbance`: relative to p5.
pub(super) fn disturbance(tolerance: Fields, reading: &mut Reading) -> Result<Option<Quantity>, RecordError> {
    let Some(change) = tolerance.quantity(reading, "disturbance", Dimension::Fraction)? else { return Ok(None) };
    if (0.0..=0.2).contains(&change.value().to_f64()) {
        return Ok(Some(change));
    }
    let wrong = "a change of p5 that is no disturbance lies between 0 and 20 %";
    Err(RecordError::new(ErrorKind::Value, &tolerance.path_of("disturbance"), change.typed(), wrong, "write it like \"1 %\""))
}

/// `tolerance` of a shot, which is not set any more: only that of a disturbance.
pub(super) fn of_shot(fields: Fields, reading: &mut Reading) -> Result<Option<Quantity>, RecordError> {
    let Some(node) = fields.get("tolerance") else { return Ok(None) };
    let inner = Fields::new(node, "tolerance")?;
    inner.allow(&["disturbance"])?;
    disturbance(inner, reading)
}
