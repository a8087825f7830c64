//! The blend of two driver gases that tailors a wanted shock.

use super::driver::check;
use super::driver_error::{DriverError, DriverInput, Unproven};
use super::proven_root::{keeps_slope, newton, search};
use super::test_gas::BehindShock;
use crate::gas::{Gas, molar_gas_constant};
use crate::number::{Ball, Dual, Enclosure, Known, Semifield, Signed};

/// The condition in one kind of number. With s = 1/(γ − 1) and W linear in the mole fraction x of the first gas,
///
/// > F = u2 √(γ[(γ + 1)P + γ − 1]) − √2 (P − 1) a3, a3 = a4 − u2/(2s), γ = (1 + s)/s:
///
/// zero where tailored, positive where a shock comes back, also where the driver gas is too slow for the shock (a3 < 0).
#[derive(Clone, Copy)]
struct Condition<S> {
    /// 1/(γ − 1) of both gases.
    capacities: [S; 2],
    molar_masses: [S; 2],
    /// R T4.
    scale: S,
    gas_speed: S,
    /// P − 1.
    reflected_excess: S,
}

impl<S: Semifield> Condition<S> {
    fn map<T: Semifield>(&self, convert: impl Fn(S) -> T + Copy) -> Condition<T> {
        Condition {
            capacities: self.capacities.map(convert),
            molar_masses: self.molar_masses.map(convert),
            scale: convert(self.scale),
            gas_speed: convert(self.gas_speed),
            reflected_excess: convert(self.reflected_excess),
        }
    }
}

impl<S: Signed> Condition<S> {
    fn evaluate(&self, fraction: S) -> S {
        let one = S::whole(1);
        let between = |[first, second]: [S; 2]| second + fraction * (first - second);
        let (s, molar_mass) = (between(self.capacities), between(self.molar_masses));
        let gamma = one + one / s;
        let sound_speed_3 = (gamma * self.scale / molar_mass).sqrt() - self.gas_speed / s.doubled();
        // (γ + 1)P + γ − 1 = 2γ + (γ + 1)(P − 1).
        let factor = gamma.doubled() + (gamma + one) * self.reflected_excess;
        self.gas_speed * (gamma * factor).sqrt() - S::whole(2).sqrt() * self.reflected_excess * sound_speed_3
    }
}

/// The mole fraction of the first of two driver gases at T4 (K) with which their blend is tailored for this shock, equal areas: see
/// [`Contact`](super::Contact).
///
/// At most 2 ulp for exact inputs. That no other blend is tailored is proven for each call by bounds on the slope over all fractions.
/// Molar heat capacities add by mole fraction, as in [`mixture`](crate::gas::mixture), which makes the gas of the driver.
///
/// # Errors
/// [`DriverError::NoTailoredBlend`] where both gases alone return the same kind of wave; [`DriverError::NotProven`] where the slope changes its sign,
/// or the two gases hardly differ.
///
/// ```
/// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
/// use endwall::shock::{Entry, Incident};
/// use endwall::tube::{BehindShock, tailored_blend};
/// let monatomic = HeatCapacityRatio::ratio(5, 3)?;
/// let (helium, argon) = (Gas::new(monatomic, 0.004002602)?, Gas::new(monatomic, 0.039948)?);
/// let fill = Fill::new(argon, 10e3, 295.0)?;
/// let shock = Incident::new(&fill, Entry::Mach, 3.0)?;
/// let fraction = tailored_blend(&BehindShock::from(&shock), [helium, argon], 295.0)?;
/// assert!(fraction.low() > 0.9 && fraction.high() < 1.0);
/// assert!(fraction.width_in_ulp() <= 2);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn tailored_blend(behind: &BehindShock, gases: [Gas; 2], temperature: impl Into<Known>) -> Result<Enclosure, DriverError> {
    let temperature = temperature.into();
    check(DriverInput::Temperature, temperature)?;
    let condition = Condition {
        capacities: gases.map(|gas| Ball::whole(1) / gas.heat_capacity_ratio().excess().ball()),
        molar_masses: gases.map(|gas| gas.molar_mass().ball()),
        scale: molar_gas_constant::<Ball>() * temperature.ball(),
        gas_speed: behind.gas_speed,
        reflected_excess: behind.reflected_excess,
    };
    let [of_second, of_first] = [0, 1].map(|fraction| condition.evaluate(Ball::whole(fraction)));
    let rises = of_first.is_certainly_positive() && of_second.is_certainly_negative();
    let falls = of_first.is_certainly_negative() && of_second.is_certainly_positive();
    if !(rises || falls) {
        return Err(DriverError::NoTailoredBlend { first: of_first.nearest(), second: of_second.nearest() });
    }
    let enclosed = condition.map(|ball| Dual::constant(ball.enclosure()));
    if !keeps_slope(|fraction| enclosed.evaluate(fraction), 0.0, 1.0) {
        return Err(Unproven::OnlyTailoredBlend.into());
    }
    let plain = condition.map(Ball::nearest);
    let sign = if rises { 1.0 } else { -1.0 };
    let near = search(|fraction| sign * plain.evaluate(fraction), 0.0, 1.0);
    let constant = condition.map(Dual::constant);
    let fraction = newton(|fraction| constant.evaluate(fraction), near).ok_or(Unproven::OnlyTailoredBlend)?;
    Ok(fraction.enclosure())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::gas::{Component, Fill, HeatCapacityRatio, mixture};
    use crate::number::Rational;
    use crate::shock::{Entry, Incident};
    use crate::tube::{Contact, Driver};

    fn gas(n: u32, d: u32, molar_mass: f64) -> Gas {
        Gas::new(HeatCapacityRatio::ratio(n, d).unwrap(), molar_mass).unwrap()
    }

    #[test]
    fn the_blend_is_tailored() {
        let (helium, nitrogen, argon) = (gas(5, 3, 0.004_002_602), gas(7, 5, 0.028_013_4), gas(5, 3, 0.039_948));
        for (test_gas, mach, gases) in [
            (nitrogen, 2.5, [helium, nitrogen]),
            (nitrogen, 2.5, [nitrogen, helium]),
            (argon, 3.0, [helium, argon]),
            (nitrogen, 3.2, [helium, argon]),
        ] {
            let fill = Fill::new(test_gas, 10e3, 295.0).unwrap();
            let shock = Incident::new(&fill, Entry::Mach, mach).unwrap();
            let behind = BehindShock::from(&shock);
            let fraction = tailored_blend(&behind, gases, 295.0).unwrap();
            assert!(fraction.width_in_ulp() <= 2, "{fraction:?}");
            // The blend as a gas of its own, on both sides of the answer.
            let mismatch = |fraction: f64| {
                let first = Rational::from(fraction);
                let second = Rational::ONE.checked_sub(first).unwrap();
                let parts = [(gases[0], first), (gases[1], second)].map(|(gas, x)| Component { gas, fraction: x.into() });
                let driver = Driver::new(mixture(&parts).unwrap(), 295.0).unwrap();
                Contact::new(&behind, &driver.for_shock(&behind).unwrap()).mismatch().nearest()
            };
            // Doubles with few digits, so that the mixture stays exact.
            let near = libm::floor(fraction.middle() * 1e6) / 1_048_576.0 * 1.048_576;
            let (below, above) = (mismatch(libm::floor(near * 4096.0) / 4096.0), mismatch(libm::ceil(near * 4096.0) / 4096.0));
            assert!(below * above < 0.0, "{below} {above}");
        }
    }

    #[test]
    fn gases_on_one_side_are_refused() {
        let (helium, argon) = (gas(5, 3, 0.004_002_602), gas(5, 3, 0.039_948));
        let fill = Fill::new(argon, 10e3, 295.0).unwrap();
        // Tailored helium into argon is Mach 3.74: above that both return a shock.
        let shock = Incident::new(&fill, Entry::Mach, 4.0).unwrap();
        let error = tailored_blend(&BehindShock::from(&shock), [helium, argon], 295.0).unwrap_err();
        assert!(matches!(error, DriverError::NoTailoredBlend { first, second } if first > 0.0 && second > 0.0));
    }
}
