//! Reflection from a massive elastic wall, which yields under the step.

use super::incident::Incident;
use super::output::Output;
use super::wall::WallReflection;
use crate::gas::{InputError, Parameter, positive};
use crate::number::{Ball, Enclosure, Known};

/// Bisections of the wall speed: enough to reach neighbouring doubles from any bracket.
const STEPS: u32 = 1100;

impl Incident {
    /// Reflection from an elastic wall of acoustic impedance Z = `ρ_s`·`c_s` in Pa·s/m (kg/(m² s)), at rest and at the fill pressure before: its
    /// face moves with V = (p5 − p1)/Z until the wave in the wall returns from its back face (7 µs for 20 mm of steel).
    ///
    /// V is enclosed between two doubles at which the sign of Z·V − (p5(V) − p1), which increases with V, is proven; the state follows for all
    /// of them. Steel has about 4e7 Pa·s/m (from memory): then V is a few hundredths of a metre per second.
    ///
    /// # Errors
    /// [`InputError`] for an impedance that is not positive or beyond 2^±200.
    ///
    /// ```
    /// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
    /// use endwall::shock::{Entry, Incident};
    /// let gas = Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.0289652)?;
    /// let shock = Incident::new(&Fill::new(gas, 100e3, 295.0)?, Entry::Mach, 2.0)?;
    /// let steel = shock.reflected_from_yielding_wall(4e7)?;
    /// assert!((steel.state.gas_speed.middle() - 1.4e6 / 4e7).abs() < 1e-4);
    /// assert!(steel.state.pressure.certainly_less(1.5e6.into()));
    /// # Ok::<(), endwall::gas::InputError>(())
    /// ```
    pub fn reflected_from_yielding_wall(&self, impedance: impl Into<Known>) -> Result<WallReflection, InputError> {
        let impedance = impedance.into();
        positive(Parameter::WallImpedance, impedance)?;
        // At V = 0 the sign is negative; at the speed that the rigid wall's step would give, or at u2 where no wave returns, it is positive.
        let rigid = self.output(Output::Step) / impedance.enclosure();
        let limit = self.output(Output::GasSpeed2).high().min(rigid.high());
        let least = self.boundary(impedance, 0.0, limit, |imbalance| imbalance.high() < 0.0).0;
        let greatest = self.boundary(impedance, least, limit, |imbalance| imbalance.low() <= 0.0).1;
        Ok(self.at_wall(Known::from(Enclosure::ordered(least, greatest))))
    }

    /// Bisects the wall speed to the neighbouring doubles below the lower of which a condition on the imbalance holds.
    fn boundary(&self, impedance: Known, low: f64, high: f64, below: impl Fn(Enclosure) -> bool) -> (f64, f64) {
        let (mut low, mut high) = (low, high);
        for _ in 0..STEPS {
            let middle = low + (high - low) / 2.0;
            if !(middle > low && middle < high) {
                break;
            }
            if below(self.imbalance(impedance, middle)) { low = middle } else { high = middle }
        }
        (low, high)
    }

    /// Z·V − (p5(V) − p1).
    fn imbalance(&self, impedance: Known, wall_speed: f64) -> Enclosure {
        if let (true, Some(exact)) = (self.is_exact(), impedance.exact()) {
            let speed = Ball::from(wall_speed);
            return (Ball::from(exact) * speed - self.wall_ball(speed, Output::Step, true)).enclosure();
        }
        let step = self.at_wall(Known::from(wall_speed)).state.pressure - self.fill().pressure().enclosure();
        impedance.enclosure() * Enclosure::from(wall_speed) - step
    }
}
