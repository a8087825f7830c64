//! A shock into gas that is itself in motion.

use super::entry::Entry;
use super::incident::Incident;
use super::output::Output;
use super::state::State;
use crate::gas::{Fill, InputError, Parameter, Rule};
use crate::number::{Ball, Enclosure, Known};

/// A shock that runs into gas in motion, in the laboratory and in its own frame.
///
/// Speeds are positive in the direction in which the shock runs. Only the change of frame is added to [`Incident`]: the shock sees gas that
/// approaches at U − u1.
///
/// ```
/// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
/// use endwall::shock::MovingShock;
/// let gas = Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.028)?;
/// let fill = Fill::new(gas, 50e3, 300.0)?;
/// let still = MovingShock::new(&fill, 0.0, 800.0)?;
/// let windy = MovingShock::new(&fill, -50.0, 750.0)?; // the same shock, seen from a frame that moves
/// assert_eq!(still.state_behind().pressure, windy.state_behind().pressure);
/// assert!((windy.state_behind().gas_speed + 50.0.into()).overlaps(still.state_behind().gas_speed));
/// # Ok::<(), endwall::gas::InputError>(())
/// ```
#[derive(Clone, Copy, Debug)]
pub struct MovingShock {
    shock: Incident,
    upstream_speed: Known,
}

impl MovingShock {
    /// The shock of speed `shock_speed` in the laboratory into the gas of `fill` that moves with `upstream_speed` (m/s).
    ///
    /// # Errors
    /// [`InputError`] as for [`Incident::new`], with the relative speed; for an upstream speed that is not finite.
    pub fn new(fill: &Fill, upstream_speed: impl Into<Known>, shock_speed: impl Into<Known>) -> Result<Self, InputError> {
        let (upstream_speed, shock_speed) = (upstream_speed.into(), shock_speed.into());
        let bounds = upstream_speed.enclosure();
        if !bounds.is_proven() || bounds.magnitude() > Ball::LARGEST_ENTRY {
            let rule = Rule::Between(-Ball::LARGEST_ENTRY, Ball::LARGEST_ENTRY);
            return Err(InputError { parameter: Parameter::UpstreamSpeed, value: upstream_speed.nominal(), rule });
        }
        let exact = || shock_speed.exact()?.checked_sub(upstream_speed.exact()?);
        let relative = exact().map_or_else(|| Known::from(shock_speed.enclosure() - bounds), Known::Exactly);
        Ok(Self { shock: Incident::new(fill, Entry::ShockSpeed, relative)?, upstream_speed })
    }

    /// The same shock in the frame in which the gas ahead is at rest.
    pub fn relative(&self) -> &Incident {
        &self.shock
    }

    /// The state behind, with the gas speed in the laboratory.
    pub fn state_behind(&self) -> State {
        let state = self.shock.state_2();
        // Two speeds of opposite sign cancel: by balls where the inputs are exact.
        let gas_speed = if self.shock.is_exact() && self.upstream_speed.exact().is_some() {
            (self.upstream_speed.ball() + self.shock.ball(Output::GasSpeed2)).enclosure()
        } else {
            self.upstream_speed.enclosure() + state.gas_speed
        };
        State { gas_speed, ..state }
    }

    /// Gas speeds ahead of and behind the shock in the frame of the shock, both toward it and away from it positive, m/s.
    pub fn speeds_in_shock_frame(&self) -> [Enclosure; 2] {
        [self.shock.output(Output::ShockSpeed), self.shock.output(Output::ShockFrameSpeed2)]
    }
}
