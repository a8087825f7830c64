//! A leak of air into the fill before the shot.

use alloc::format;

use super::error::{ErrorKind, RecordError};
use super::quantity::Quantity;
use super::read::{self, Fields, Reading};
use super::tree::Node;
use super::unit::Dimension;

/// How much air leaked into the fill.
#[derive(Clone, Debug, PartialEq)]
#[expect(clippy::large_enum_variant, reason = "a record holds one of these")]
pub enum Leak {
    /// Its mole fraction in the gas at the time of the shot.
    Fraction(Quantity),
    /// Rise of pressure in the closed, evacuated tube (Pa/s), and the time between filling and shot (s).
    Rate {
        /// Pa/s.
        rate: Quantity,
        /// s.
        waiting: Quantity,
    },
}

impl Leak {
    /// The mole fraction of air in a fill of this pressure (Pa), and its standard uncertainty: the rise of pressure over the waiting time, over the
    /// pressure. A leak that is stated without an uncertainty is taken as exact.
    pub fn fraction(&self, fill_pressure: f64) -> (f64, f64) {
        let parts = |quantity: &Quantity| (quantity.value().to_f64(), quantity.standard_uncertainty().unwrap_or(0.0));
        match self {
            Self::Fraction(fraction) => parts(fraction),
            Self::Rate { rate, waiting } => {
                let ((r, u_r), (t, u_t)) = (parts(rate), parts(waiting));
                (r * t / fill_pressure, libm::hypot(u_r * t, r * u_t) / fill_pressure)
            }
        }
    }
}

/// Reads `leak`: a fraction as text, or an object with `rate` and `waiting`.
pub(super) fn read(fields: Fields, reading: &mut Reading) -> Result<Option<Leak>, RecordError> {
    let Some(node) = fields.get("leak") else { return Ok(None) };
    let example = "write \"0.10 ± 0.05 %\", or { \"rate\": \"0.5 ± 0.1 Pa/min\", \"waiting\": \"600 s\" }";
    let leak = if let Node::Object(_) = node {
        let inner = Fields::new(node, "leak")?;
        inner.allow(&["rate", "waiting"])?;
        let rate = inner.required_quantity(reading, "rate", Dimension::PressureRate, "0.5 ± 0.1 Pa/min")?;
        let waiting = inner.required_quantity(reading, "waiting", Dimension::Time, "600 s")?;
        Leak::Rate { rate, waiting }
    } else if Quantity::parse(node.typed(), Dimension::PressureRate).is_ok() {
        let wrong = "a rate without the waiting time does not say how much leaked in";
        return Err(RecordError::new(ErrorKind::Field, "leak", node.typed(), wrong, example));
    } else {
        Leak::Fraction(read::quantity(reading, node, "leak", Dimension::Fraction)?)
    };
    let typed = node.typed();
    match &leak {
        Leak::Fraction(fraction) if !(0.0..1.0).contains(&fraction.value().to_f64()) => {
            Err(RecordError::new(ErrorKind::Value, "leak", typed, "the fraction that leaked in lies between 0 and 100 %", example))
        }
        Leak::Rate { rate, waiting } if rate.value().is_negative() || waiting.value().is_negative() => {
            Err(RecordError::new(ErrorKind::Value, "leak", typed, "a rate and a waiting time are zero or more", example))
        }
        _ => Ok(Some(leak)),
    }
}

/// The leak as a flag says it.
pub(super) fn text(fraction: f64) -> alloc::string::String {
    format!("{} % of the driven gas is taken as air that leaked in", super::format::significant(fraction * 100.0, 3))
}
