//! Reflection from a massive elastic wall, which yields under the step.

use super::incident::Incident;
use super::output::Output;
use super::wall::WallReflection;
use crate::gas::{InputError, Parameter, Rule, positive};
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
    /// [`InputError`] for an impedance that is beyond 2^±200 or not proven to exceed ρ1·U, which every solid does by far: a softer wall would recede
    /// faster than the gas follows, and no shock would return.
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
        // At V = u2 the pressure is p2, and Z·u2 exceeds p2 − p1 = ρ1·U·u2 only for Z > ρ1·U.
        let least_impedance = self.output(Output::Density1) * self.output(Output::ShockSpeed);
        if !least_impedance.certainly_less(impedance.enclosure()) {
            let rule = Rule::Above(least_impedance.high());
            return Err(InputError { parameter: Parameter::WallImpedance, value: impedance.nominal(), rule });
        }
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

#[cfg(test)]
mod tests {
    use super::super::wall::Wave;
    use super::*;
    use crate::gas::{Fill, Gas, HeatCapacityRatio};
    use crate::shock::Entry;

    /// Below ρ1·U, here 79.8 Pa·s/m, an expansion would return, which the bracket from 0 to u2 does not hold.
    #[test]
    fn a_wall_softer_than_the_gas_is_refused() {
        let gas = Gas::new(HeatCapacityRatio::ratio(7, 5).unwrap(), 0.028).unwrap();
        let shock = Incident::new(&Fill::new(gas, 1e4, 296.0).unwrap(), Entry::Mach, 2.0).unwrap();
        for impedance in [1e-3, 60.0, 79.8] {
            let error = shock.reflected_from_yielding_wall(impedance).unwrap_err();
            assert_eq!(error.parameter, Parameter::WallImpedance);
            assert!(matches!(error.rule, Rule::Above(least) if (least - 79.82).abs() < 0.01), "{error:?}");
        }
        let soft = shock.reflected_from_yielding_wall(79.9).unwrap();
        assert_eq!(soft.wave, Wave::Shock);
        // The wall carries the step.
        assert!((79.9 * soft.state.gas_speed.middle() / (soft.state.pressure.middle() - 1e4) - 1.0).abs() < 1e-12);
    }
}
