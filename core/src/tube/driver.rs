//! The driver: the pressure that it needs, and the driver gas behind the contact surface.

use super::area_change::{Expanded, expand, sonic};
use super::driver_error::{DriverError, DriverInput};
use super::side::ContactSide;
use super::test_gas::{BehindShock, TestGas};
use super::waves::TubeSpeeds;
use crate::gas::{Gamma, Gas, Rule, molar_gas_constant, sound_speed_squared};
use crate::number::{Ball, Elementary, Enclosure, Known, Positive, Rational, Semifield};
use crate::shock::{Entry, Output, State, ThermalShock};

/// Areas of driver and driven tube differ by less than this.
const LARGEST_AREA_RATIO: f64 = 1e6;
/// ln 2²⁰⁰, the logarithm of the greatest pressure: an entry of the relations.
const LARGEST_LOGARITHM: f64 = 200.0 * core::f64::consts::LN_2;

/// A driver: a gas of constant heat capacity at rest at T4 (K), in a tube of the area of the driven tube or a larger one.
///
/// Model: a diaphragm that vanishes at once, an ideal gas, isentropic expansion, one dimension, the pressure and speed of the test gas at the contact
/// surface. A real tube reaches less: see [`Efficiency`](super::Efficiency).
///
/// ```
/// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
/// use endwall::number::Rational;
/// use endwall::shock::{Entry, Incident};
/// use endwall::tube::{BehindShock, Driver, DriverError};
/// let helium = Gas::new(HeatCapacityRatio::ratio(5, 3)?, "0.004002602".parse::<Rational>()?)?;
/// let nitrogen = Gas::new(HeatCapacityRatio::ratio(7, 5)?, "0.0280134".parse::<Rational>()?)?;
/// let fill = Fill::new(nitrogen, 10e3, 295.0)?;
/// let driver = Driver::new(helium, 295.0)?;
/// let shock = Incident::new(&fill, Entry::Mach, 2.0)?;
/// let drive = driver.for_shock(&BehindShock::from(&shock))?;
/// assert!((drive.pressure_ratio.middle() - 9.8).abs() < 0.05); // p4/p1
/// assert!(drive.pressure.width_in_ulp() <= 2);
/// // No driver pressure is enough for Mach 11.
/// let fast = Incident::new(&fill, Entry::Mach, 11.0)?;
/// let Err(DriverError::TooFast { greatest_mach: Some(limit), .. }) = driver.for_shock(&BehindShock::from(&fast)) else { panic!() };
/// assert!(limit > 10.4 && limit < 10.6);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
#[derive(Clone, Copy, Debug)]
pub struct Driver {
    gas: Gas,
    temperature: Known,
    /// `None` for equal areas.
    area_ratio: Option<Known>,
}

/// What a driver does for one shock.
///
/// Enclosures of at most 2 ulp for exact inputs. For tolerances they are the hull over the box of p2, u2, T4, W4 and A4/A1, each taken on its own (every
/// output is monotone in each of them); a tolerance of γ4 adds its enclosure, which is wider than the range.
#[derive(Clone, Copy, Debug)]
pub struct Drive {
    /// p4, Pa, absolute.
    pub pressure: Enclosure,
    /// p4/p1.
    pub pressure_ratio: Enclosure,
    /// State 3: the driver gas behind the contact surface.
    pub state_3: State,
    /// M3 = u3/a3, the Mach number of the expanded driver gas.
    pub mach_3: Enclosure,
    /// Mach number ahead of the change of area; `None` for equal areas.
    pub mach_before_change: Option<Enclosure>,
    /// Whether the driver gas is sonic at the diaphragm, so that a part of the expansion runs downstream.
    pub is_sonic: bool,
    /// The gas in state 3, for the waves into it.
    pub(super) side_3: ContactSide<'static>,
}

/// A driver and a contact surface, at one point of the tolerances.
#[derive(Clone, Copy)]
pub(super) struct Point {
    pub gamma: Gamma<Ball>,
    pub temperature: Ball,
    pub molar_mass: Ball,
    pub area_ratio: Option<Ball>,
    /// p2, Pa.
    pub pressure: Ball,
    /// u2, m/s.
    pub gas_speed: Ball,
}

impl Point {
    /// h = (γ4 − 1)/2.
    fn half_excess(&self) -> Ball {
        self.gamma.d / self.gamma.q.doubled()
    }

    /// a4, m/s.
    pub fn sound_speed(&self) -> Ball {
        sound_speed_squared(self.gamma, self.temperature, self.molar_mass).sqrt()
    }

    fn expanded(&self) -> Result<Expanded, DriverError> {
        Ok(expand(self.half_excess(), self.gas_speed / self.sound_speed(), self.area_ratio)?)
    }

    /// The gas speed that the driver gas reaches when it expands to vacuum, g·a4/h, m/s.
    fn greatest_gas_speed(&self) -> Option<Ball> {
        let h = self.half_excess();
        let g = match self.area_ratio {
            Some(area_ratio) => sonic(h, area_ratio)?.0,
            None => Ball::whole(1),
        };
        Some(g * self.sound_speed() / h)
    }

    /// ln(p4/p2) = −(2γ4/(γ4 − 1)) ln(a3/a4).
    fn logarithm_of_expansion(&self, sound_speed_ratio: Ball) -> Ball {
        -(sound_speed_ratio.ln() * self.gamma.ratio().doubled() / self.gamma.d)
    }
}

/// One end of a ball that stands for a tolerance; a ball of a point is taken as it is.
fn end(ball: Ball, upper: bool) -> Ball {
    if ball.radius() <= ball.nearest().abs() * 1e-20 {
        return ball;
    }
    let bounds = ball.enclosure();
    Ball::from(if upper { bounds.high() } else { bounds.low() })
}

impl Driver {
    /// A driver of the area of the driven tube.
    ///
    /// # Errors
    /// [`DriverError::Driver`] for a temperature that is not positive or beyond 2^±200.
    pub fn new(gas: Gas, temperature: impl Into<Known>) -> Result<Self, DriverError> {
        let temperature = temperature.into();
        check(DriverInput::Temperature, temperature)?;
        Ok(Self { gas, temperature, area_ratio: None })
    }

    /// The same driver in a tube whose area is A4/A1 times that of the driven tube, 1 to 10⁶; for round tubes the square of the ratio of diameters.
    ///
    /// # Errors
    /// [`DriverError::Driver`] for a ratio outside that: a driver smaller than the driven tube is another flow.
    ///
    /// ```
    /// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
    /// use endwall::shock::{Entry, Incident};
    /// use endwall::tube::{BehindShock, Driver};
    /// let helium = Gas::new(HeatCapacityRatio::ratio(5, 3)?, 0.004002602)?;
    /// let fill = Fill::new(Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.0280134)?, 10e3, 295.0)?;
    /// let shock = Incident::new(&fill, Entry::Mach, 3.0)?;
    /// let same = Driver::new(helium, 295.0)?;
    /// let larger = same.with_area_ratio(4.0)?;
    /// let behind = BehindShock::from(&shock);
    /// assert!(larger.for_shock(&behind)?.pressure.certainly_less(same.for_shock(&behind)?.pressure));
    /// assert!(same.with_area_ratio(0.5).is_err());
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn with_area_ratio(self, area_ratio: impl Into<Known>) -> Result<Self, DriverError> {
        let area_ratio = area_ratio.into();
        check(DriverInput::AreaRatio, area_ratio)?;
        let bounds = area_ratio.enclosure();
        if bounds.low() < 1.0 || bounds.high() > LARGEST_AREA_RATIO {
            let rule = Rule::Between(1.0, LARGEST_AREA_RATIO);
            return Err(DriverError::Driver { input: DriverInput::AreaRatio, value: area_ratio.nominal(), rule });
        }
        let is_one = area_ratio.exact() == Some(Rational::ONE);
        Ok(Self { area_ratio: if is_one { None } else { Some(area_ratio) }, ..self })
    }

    /// The gas.
    pub fn gas(&self) -> Gas {
        self.gas
    }

    /// T4, K.
    pub fn temperature(&self) -> Known {
        self.temperature
    }

    /// A4/A1.
    pub fn area_ratio(&self) -> Known {
        self.area_ratio.unwrap_or(Known::from(Rational::ONE))
    }

    /// γ4.
    pub(super) fn gamma(&self) -> Gamma<Ball> {
        Gamma::from_excess(self.gas.heat_capacity_ratio().excess().ball())
    }

    /// a4, m/s.
    pub(super) fn sound_speed(&self) -> Ball {
        sound_speed_squared(self.gamma(), self.temperature.ball(), self.gas.molar_mass().ball()).sqrt()
    }

    /// The corner of the tolerances at which p4 is least or greatest: p4 and ρ3 rise with p2, u2 and W4 and fall with T4 and A4/A1, T3 and a3 the other way
    /// round (T3 is no function of p2).
    ///
    /// With σ(w, α) of `area_change` and w = u2/a4: σ falls with w and rises with α (the implicit function rule on its relations); p4 = p2 σ^(−2γ/(γ−1)),
    /// a3 = a4 σ, T3 = T4 σ², ρ3 = p2 W/(R T3).
    pub(super) fn corner(&self, behind: &BehindShock, greatest: bool) -> Point {
        Point {
            gamma: self.gamma(),
            temperature: self.temperature.end(!greatest).ball(),
            molar_mass: self.gas.molar_mass().end(greatest).ball(),
            area_ratio: self.area_ratio.map(|ratio| ratio.end(!greatest).ball()),
            pressure: end(behind.pressure, greatest),
            gas_speed: end(behind.gas_speed, greatest),
        }
    }

    /// What the driver does for this shock.
    ///
    /// > p4 = p2 [1 − (γ4 − 1)u2/(2a4)]^(−2γ4/(γ4 − 1))
    ///
    /// for equal areas: isentropic expansion of the driver gas from rest to p3 = p2, u3 = u2. For a larger driver the relations of R. A. Alpher and
    /// D. R. White, J. Fluid Mech. 3 (1958) 457 (from memory), with M3 < 1 solved as such. With a thermally perfect test gas p2 and u2 are its own.
    ///
    /// Domain: u2 below 2a4/(γ4 − 1) (equal areas), p4 below 2²⁰⁰ Pa.
    ///
    /// # Errors
    /// [`DriverError::TooFast`] and [`DriverError::PressureBeyondRange`] name the greatest Mach number of this driver in this test gas;
    /// [`DriverError::NotProven`] for a flow through the change of area that is sonic to all digits, or nearly no change of area.
    pub fn for_shock(&self, behind: &BehindShock) -> Result<Drive, DriverError> {
        let [least, greatest] = [false, true].map(|upper| self.corner(behind, upper));
        let [(low, low_logarithm), (high, high_logarithm)] = [self.expansion(&least, behind)?, self.expansion(&greatest, behind)?];
        let fill = behind.gas.pressure();
        let pressure_of = |point: &Point, logarithm: Ball| point.pressure * logarithm.exp();
        let (low_pressure, high_pressure) = (pressure_of(&least, low_logarithm), pressure_of(&greatest, high_logarithm));
        // p2/p1 does not depend on p1.
        let ratio = (low_pressure / fill.end(true).ball()).enclosure().hull((high_pressure / fill.end(false).ball()).enclosure());
        let sound_speed_3 = |point: &Point, expanded: &Expanded| point.sound_speed() * expanded.sound_speed_ratio;
        let temperature_3 = |point: &Point, expanded: &Expanded| point.temperature * expanded.sound_speed_ratio.squared();
        let density_3 = |point: &Point, expanded: &Expanded| {
            point.pressure * point.molar_mass / (molar_gas_constant::<Ball>() * temperature_3(point, expanded))
        };
        let mach_3 = |point: &Point, expanded: &Expanded| point.gas_speed / sound_speed_3(point, expanded);
        let hull = |f: &dyn Fn(&Point, &Expanded) -> Ball| f(&least, &low).enclosure().hull(f(&greatest, &high).enclosure());
        let sound_speed = hull(&sound_speed_3);
        let before = |expanded: &Expanded| expanded.mach_before.map(Ball::enclosure);
        let a3 = sound_speed_3(&least, &low);
        Ok(Drive {
            pressure: low_pressure.enclosure().hull(high_pressure.enclosure()),
            pressure_ratio: ratio,
            state_3: State {
                pressure: behind.pressure.enclosure(),
                temperature: hull(&temperature_3),
                density: hull(&density_3),
                sound_speed,
                gas_speed: behind.gas_speed.enclosure(),
            },
            mach_3: hull(&mach_3),
            mach_before_change: before(&low).zip(before(&high)).map(|(low, high)| low.hull(high)),
            is_sonic: low.is_sonic && high.is_sonic,
            side_3: ContactSide::Constant {
                gamma: least.gamma,
                sound_speed: if a3.enclosure().encloses(sound_speed) { a3 } else { Ball::around(sound_speed) },
            },
        })
    }

    /// The expansion and ln(p4/p2) at one point of the tolerances.
    fn expansion(&self, point: &Point, behind: &BehindShock) -> Result<(Expanded, Ball), DriverError> {
        let expanded = point.expanded()?;
        if !expanded.sound_speed_ratio.is_certainly_positive() {
            let limit = point.greatest_gas_speed().map_or(f64::NAN, Ball::nearest);
            let greatest_mach = self.greatest_mach(behind.gas);
            return Err(DriverError::TooFast { gas_speed: point.gas_speed.nearest(), limit, greatest_mach });
        }
        let logarithm = point.logarithm_of_expansion(expanded.sound_speed_ratio);
        let of_pressure = (logarithm + point.pressure.ln()).enclosure();
        if !(of_pressure.is_proven() && of_pressure.high() <= LARGEST_LOGARITHM) {
            let decimal_logarithm = of_pressure.middle() / core::f64::consts::LN_10;
            return Err(DriverError::PressureBeyondRange { decimal_logarithm, greatest_mach: self.greatest_mach(behind.gas) });
        }
        Ok((expanded, logarithm))
    }

    /// ln(p4/p1) at the point of a shock; `None` where no driver pressure is enough.
    pub(super) fn logarithm_of_pressure_ratio(&self, behind: &BehindShock) -> Result<Option<Ball>, DriverError> {
        let point = self.corner(behind, false);
        let ratio = point.expanded()?.sound_speed_ratio;
        let of_expansion = || point.logarithm_of_expansion(ratio) + (point.pressure / behind.gas.pressure().ball()).ln();
        Ok(ratio.is_certainly_positive().then(of_expansion))
    }

    /// State 3 at the point of a shock; `None` where no driver pressure is enough.
    pub(super) fn side_3(&self, behind: &BehindShock) -> Result<Option<ContactSide<'static>>, DriverError> {
        let point = self.corner(behind, false);
        let ratio = point.expanded()?.sound_speed_ratio;
        let side = || ContactSide::Constant { gamma: point.gamma, sound_speed: ratio * point.sound_speed() };
        Ok(ratio.is_certainly_positive().then(side))
    }

    /// The speeds of the wave diagram of this driver and this shock, for a driver of the area of the driven tube.
    ///
    /// # Errors
    /// [`DriverError::Driver`] for a larger driver, whose waves are others.
    ///
    /// ```
    /// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
    /// use endwall::shock::{Entry, Incident};
    /// use endwall::tube::{BehindShock, Driver};
    /// let helium = Gas::new(HeatCapacityRatio::ratio(5, 3)?, 0.004002602)?;
    /// let fill = Fill::new(Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.0280134)?, 10e3, 295.0)?;
    /// let shock = Incident::new(&fill, Entry::Mach, 2.0)?;
    /// let speeds = Driver::new(helium, 295.0)?.speeds(&BehindShock::from(&shock))?;
    /// // For γ 7/5 and Mach 2 the reflected shock is as fast as sound in the fill, and half as fast as the incident one.
    /// assert!((speeds.incident_shock.nearest() / speeds.reflected_shock.nearest() - 2.0).abs() < 1e-15);
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn speeds(&self, behind: &BehindShock) -> Result<TubeSpeeds, DriverError> {
        if let Some(area_ratio) = self.area_ratio {
            let rule = Rule::Between(1.0, 1.0);
            return Err(DriverError::Driver { input: DriverInput::AreaRatio, value: area_ratio.nominal(), rule });
        }
        Ok(TubeSpeeds {
            incident_shock: behind.shock_speed,
            gas_speed: behind.gas_speed,
            sound_speed_2: behind.sound_speed,
            reflected_shock: behind.reflected_speed,
            sound_speed_5: behind.sound_speed_5,
            sound_speed_4: self.sound_speed(),
            driver_gamma: self.gamma(),
        })
    }

    /// The Mach number that this driver reaches in this test gas at infinite pressure, where the driver gas expands to vacuum:
    ///
    /// > u2 = 2a4/(γ4 − 1) for equal areas; in a gas of constant heat capacity M − 1/M = (γ1 + 1)/(γ4 − 1) · a4/a1.
    ///
    /// The double nearest to it, at nominal inputs; `None` where the data of the test gas end before it.
    pub fn greatest_mach(&self, gas: TestGas) -> Option<f64> {
        let point = Point {
            gamma: self.gamma(),
            temperature: self.temperature.ball(),
            molar_mass: self.gas.molar_mass().ball(),
            area_ratio: self.area_ratio.map(Known::ball),
            pressure: Ball::whole(1),
            gas_speed: Ball::whole(0),
        };
        let speed = point.greatest_gas_speed()?;
        match gas {
            TestGas::Constant(fill) => {
                let gas = fill.gas();
                let gamma = Gamma::from_excess(gas.heat_capacity_ratio().excess().ball());
                let a1 = sound_speed_squared(gamma, fill.temperature().ball(), gas.molar_mass().ball()).sqrt();
                // M = s + √(1 + s²) with s = (γ1 + 1)u2/(4a1).
                let s = gamma.plus_one() * speed / (Ball::whole(4) * gamma.q * a1);
                Some((s + (Ball::whole(1) + s.squared()).sqrt()).nearest())
            }
            TestGas::Thermal(fill) => {
                ThermalShock::new(fill, Entry::GasSpeed, speed.nearest()).ok().map(|shock| shock.nearest(Output::Mach))
            }
        }
    }
}

/// Positive and within 2^±200.
pub(super) fn check(input: DriverInput, value: Known) -> Result<(), DriverError> {
    let bounds = value.enclosure();
    let refuse = |rule| Err(DriverError::Driver { input, value: value.nominal(), rule });
    if !bounds.is_proven() {
        refuse(Rule::Finite)
    } else if bounds.low() <= 0.0 {
        refuse(Rule::Above(0.0))
    } else if !value.is_within_domain() {
        refuse(Rule::Between(Ball::SMALLEST_ENTRY, Ball::LARGEST_ENTRY))
    } else {
        Ok(())
    }
}

#[cfg(test)]
#[path = "driver_tests.rs"]
mod tests;
