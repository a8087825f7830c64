//! The reflected shock meets the contact surface: tailoring.

use super::driver::{Drive, Driver};
use super::driver_error::DriverError;
use super::forward::mach_excess_where;
use super::proven_root::Side;
use super::side::ContactSide;
use super::test_gas::{BehindShock, TestGas};
use crate::gas::{Gamma, sound_speed_squared};
use crate::number::{Ball, Dual, Enclosure, Positive, Semifield};
use crate::shock::Entry;

/// What comes back from the contact surface after the reflected shock has met it.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum Tailoring {
    /// Under-tailored: the driver gas yields, an expansion comes back and the pressure at the end wall falls.
    Expansion,
    /// Tailored to all digits of the inputs: nothing comes back, or a weak wave of either kind.
    Tailored,
    /// Over-tailored: a shock comes back and the pressure at the end wall rises.
    Shock,
}

/// The contact surface, between the test gas behind the reflected shock and the driver gas in state 3.
///
/// It stays at rest behind the reflected shock if the driver gas is stopped by the same pressure p5:
///
/// > ρ2[(γ2 + 1)P + γ2 − 1] = ρ3[(γ3 + 1)P + γ3 − 1], P = p5/p2,
///
/// each side being 2 p2(P − 1)²/(Δu)² of a shock from p2 to p5 (Rankine–Hugoniot). If the right side is smaller an expansion comes back, if it is
/// larger a shock. With a thermally perfect test gas the left side is 2 p2(P − 1)²/u2² of its own reflected shock.
///
/// The answer is ideal: a measured tailored Mach number differs, since the contact surface is a mixing zone and the driver is not ideal.
///
/// ```
/// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
/// use endwall::shock::{Entry, Incident};
/// use endwall::tube::{BehindShock, Contact, Driver, Tailoring};
/// let helium = Gas::new(HeatCapacityRatio::ratio(5, 3)?, 0.004002602)?;
/// let fill = Fill::new(Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.0280134)?, 10e3, 295.0)?;
/// let driver = Driver::new(helium, 295.0)?;
/// for (mach, wave) in [(3.0, Tailoring::Expansion), (3.7, Tailoring::Shock)] {
///     let shock = Incident::new(&fill, Entry::Mach, mach)?;
///     let behind = BehindShock::from(&shock);
///     let contact = Contact::new(&behind, &driver.for_shock(&behind)?);
///     assert_eq!(contact.tailoring(), wave);
///     let met = contact.interaction()?;
///     let falls = met.pressure.certainly_less(shock.state_5().pressure);
///     assert_eq!(falls, wave == Tailoring::Expansion);
/// }
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
#[derive(Clone, Copy, Debug)]
pub struct Contact<'a> {
    pub(super) behind: BehindShock<'a>,
    pub(super) side_3: ContactSide<'a>,
}

/// A tailored Mach number.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct TailoredMach {
    /// M − 1.
    pub mach_excess: Enclosure,
    /// M.
    pub mach: Enclosure,
    /// Whether it is proven that no other Mach number is tailored; for a thermally perfect test gas it is not.
    pub is_only: bool,
}

impl<'a> Contact<'a> {
    /// Between the test gas of a shock and the driver gas that drives it.
    pub fn new(behind: &BehindShock<'a>, drive: &Drive<'a>) -> Self {
        Self { behind: *behind, side_3: drive.side_3 }
    }

    /// Δu/(P − 1) of a shock from p2 to p5 into the driver gas, m/s: a3 √(2/(γ3[(γ3 + 1)P + γ3 − 1])) for constant heat capacity.
    fn stopping(&self) -> Ball {
        let excess = self.behind.reflected_excess;
        self.side_3.speed(Dual::constant(excess), true).value() / excess
    }

    /// Left and right side of the condition, kg/m³.
    pub fn sides(&self) -> [Enclosure; 2] {
        let BehindShock { pressure, gas_speed, reflected_excess, .. } = self.behind;
        let test_gas = pressure.doubled() * (reflected_excess / gas_speed).squared();
        let driver_gas = pressure.doubled() / self.stopping().squared();
        [test_gas.enclosure(), driver_gas.enclosure()]
    }

    /// Right over left side, less 1: dimensionless, zero where tailored, negative where an expansion comes back.
    ///
    /// > (u2/Δu)² − 1 = γ3 u2²[(γ3 + 1)P + γ3 − 1]/(2 a3²(P − 1)²) − 1,
    ///
    /// Δu that of a shock from p2 to p5 into the driver gas, the last form for constant heat capacity.
    pub fn mismatch(&self) -> Ball {
        let BehindShock { gas_speed, reflected_excess, .. } = self.behind;
        (gas_speed / (self.stopping() * reflected_excess)).squared() - Ball::whole(1)
    }

    /// What comes back.
    pub fn tailoring(&self) -> Tailoring {
        let mismatch = self.mismatch();
        if mismatch.is_certainly_negative() {
            Tailoring::Expansion
        } else if mismatch.is_certainly_positive() {
            Tailoring::Shock
        } else {
            Tailoring::Tailored
        }
    }
}

impl Driver<'_> {
    /// The Mach number that is tailored with this driver in this test gas: see [`Contact`]. It does not depend on the pressures.
    ///
    /// Domain: a4/a1 > γ4/γ1, the limit of the condition for weak shocks. The enclosure lies between doubles at which the sign of the mismatch is proven.
    ///
    /// There is no other for a test gas of constant heat capacity with 3(γ1 − 1)(γ4 + 1) ≥ (γ4 − 1)(3 − γ1): tailored is
    /// a3² = a2² γ3[(γ3 + 1)P + γ3 − 1]/(γ1[(γ1 + 1)P + γ1 − 1]); the left side falls with M, and the right side does not. With z = M² − 1, G = γ1 + 1, A, B, C of
    /// [`Jump`](crate::shock::Jump) and μ = (γ − 1)/(γ + 1) the logarithm of the right side has the slope
    ///
    /// > 2(γ1 − 1)(G + 2γ1 z + γ1 z²)/(A B(1 + z)) − G²(μ3 − μ1)/(A(C + μ3 B)),
    ///
    /// and brought over one denominator each power of z has a coefficient that is not negative if 2(γ1 − 1)(1 + μ3) ≥ G(μ3 − μ1), which is the condition.
    ///
    /// # Errors
    /// [`DriverError::NeverTailored`] outside the domain; [`DriverError::Gas`] for tolerances, and where a thermally perfect gas leaves its data before.
    ///
    /// ```
    /// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
    /// use endwall::tube::{Driver, TestGas};
    /// let helium = Gas::new(HeatCapacityRatio::ratio(5, 3)?, 0.004002602)?;
    /// let fill = Fill::new(Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.0280134)?, 10e3, 295.0)?;
    /// let tailored = Driver::new(helium, 295.0)?.tailored_mach(TestGas::from(&fill))?;
    /// assert!((tailored.mach.middle() - 3.342).abs() < 5e-4);
    /// assert!(tailored.is_only && tailored.mach_excess.width_in_ulp() <= 2);
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn tailored_mach(&self, gas: TestGas) -> Result<TailoredMach, DriverError> {
        self.exact_for(gas)?;
        let one = Ball::whole(1);
        let gamma_4 = self.gamma();
        let (a1_squared, gamma_1, is_constant) = match gas {
            TestGas::Constant(fill) => {
                let gamma = Gamma::from_excess(fill.gas().heat_capacity_ratio().excess().ball());
                (sound_speed_squared(gamma, fill.temperature().ball(), fill.gas().molar_mass().ball()), gamma.value(), true)
            }
            TestGas::Thermal(fill) => {
                let setting = gas.behind(Entry::Mach, 2.0)?;
                let isothermal =
                    sound_speed_squared(Gamma { d: Ball::from(0.0), q: one }, fill.temperature().ball(), fill.gas().molar_mass());
                let square = setting.sound_speed_1.squared();
                (square, square / isothermal, false)
            }
        };
        // Weak shocks: a4/γ4 against a1/γ1.
        let over = self.sound_speed() / a1_squared.sqrt();
        let limit = gamma_4.value() / gamma_1;
        if !(over - limit).is_certainly_positive() {
            return Err(DriverError::NeverTailored { sound_speed_ratio: over.nearest(), limit: limit.nearest() });
        }
        let mach_excess = mach_excess_where(gas, |behind| {
            let side_3 = self.side_3(behind)?;
            let mismatch = |side_3| Contact { behind: *behind, side_3 }.mismatch();
            Ok(side_3.map_or(Side::Beyond, |side_3| Side::Value(mismatch(side_3))))
        })?;
        let (below, above) = ((gamma_1 - one) * gamma_4.plus_one() * Ball::whole(3), gamma_4.d * (Ball::whole(3) - gamma_1));
        let is_only = is_constant && (above - below).enclosure().high() <= 0.0;
        Ok(TailoredMach { mach_excess, mach: Enclosure::whole(1) + mach_excess, is_only })
    }
}
