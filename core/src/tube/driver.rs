//! The driver: the pressure that it needs, and the driver gas behind the contact surface.

use super::driver_error::{DriverError, DriverInput};
use super::driver_point::{Expansion, Point, PointGas};
use super::side::ContactSide;
use super::test_gas::{BehindShock, TestGas};
use super::waves::TubeSpeeds;
use crate::gas::{Gamma, Gas, HeatCapacityRatio, Parameter, Rule, ThermallyPerfectGas, sound_speed_squared};
use crate::number::{Ball, Elementary, Enclosure, Known, Positive, Rational, Semifield};
use crate::shock::{Entry, Output, State, ThermalShock};

/// Areas of driver and driven tube differ by less than this.
const LARGEST_AREA_RATIO: f64 = 1e6;
/// ln 2²⁰⁰, the logarithm of the greatest pressure: an entry of the relations.
const LARGEST_LOGARITHM: f64 = 200.0 * core::f64::consts::LN_2;

/// A driver: a gas at rest at T4 (K), in a tube of the area of the driven tube or, for a gas of constant heat capacity, a larger one.
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
pub struct Driver<'a> {
    gas: DriverGas<'a>,
    temperature: Known,
    /// `None` for equal areas.
    area_ratio: Option<Known>,
}

/// The gas of a driver.
#[derive(Clone, Copy, Debug)]
pub enum DriverGas<'a> {
    /// Of constant heat capacity.
    Constant(Gas),
    /// Thermally perfect.
    Thermal(&'a ThermallyPerfectGas<'a>),
}

/// What a driver does for one shock.
///
/// Enclosures of at most 2 ulp for exact inputs. For tolerances they are the hull over the box of p2, u2, T4, W4 and A4/A1, each taken on its own (every
/// output is monotone in each of them); a tolerance of γ4 adds its enclosure, which is wider than the range.
#[derive(Clone, Copy, Debug)]
pub struct Drive<'a> {
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
    pub(super) side_3: ContactSide<'a>,
}

/// One end of a ball that stands for a tolerance; a ball of a point is taken as it is.
fn end(ball: Ball, upper: bool) -> Ball {
    if ball.radius() <= ball.nearest().abs() * 1e-20 {
        return ball;
    }
    let bounds = ball.enclosure();
    Ball::from(if upper { bounds.high() } else { bounds.low() })
}

impl<'a> Driver<'a> {
    /// A driver of the area of the driven tube.
    ///
    /// # Errors
    /// [`DriverError::Driver`] for a temperature that is not positive or beyond 2^±200.
    pub fn new(gas: Gas, temperature: impl Into<Known>) -> Result<Self, DriverError> {
        let temperature = temperature.into();
        check(DriverInput::Temperature, temperature)?;
        Ok(Self { gas: DriverGas::Constant(gas), temperature, area_ratio: None })
    }

    /// A driver of the area of the driven tube whose gas has a heat capacity that depends on temperature. The expansion is isentropic, by proven
    /// integrals over temperature:
    ///
    /// > u2 = ∫ from T3 to T4 of dh/a, ln(p4/p2) = ∫ from T3 to T4 of `c_p`/R dT/T.
    ///
    /// T3 must not fall below the data (200 K mostly), which a cold driver gas does soon: its heat capacity hardly changes there, and [`Driver::new`] with
    /// that at T4 is the way.
    ///
    /// # Errors
    /// [`DriverError::Driver`] for a temperature that is a tolerance, [`DriverError::Gas`] for one outside the data of the gas.
    ///
    /// ```
    /// use endwall::gas::species::table;
    /// use endwall::gas::{Fill, Gas, HeatCapacityRatio, Portion, ThermallyPerfectGas};
    /// use endwall::shock::{Entry, Incident};
    /// use endwall::tube::{BehindShock, Driver};
    /// let portions = [Portion { species: &table::N2, fraction: "1".parse()? }];
    /// let nitrogen = ThermallyPerfectGas::new(&portions)?;
    /// let fill = Fill::new(Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.0280134)?, 100e3, 295.0)?;
    /// let shock = Incident::new(&fill, Entry::Mach, 2.0)?;
    /// let behind = BehindShock::from(&shock);
    /// // Nitrogen at 1200 K has γ = 1.33 in the driver, and more as it expands.
    /// let drive = Driver::thermally_perfect(&nitrogen, 1200.0)?.for_shock(&behind)?;
    /// assert!(drive.pressure.width_in_ulp() <= 2);
    /// let hot = Gas::new(HeatCapacityRatio::new("1.334".parse::<endwall::number::Rational>()?)?, 0.0280134)?;
    /// let constant = Driver::new(hot, 1200.0)?.for_shock(&behind)?;
    /// assert!((drive.pressure.middle() / constant.pressure.middle() - 1.0).abs() < 0.01);
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn thermally_perfect(gas: &'a ThermallyPerfectGas<'a>, temperature: impl Into<Known>) -> Result<Self, DriverError> {
        Self { gas: DriverGas::Thermal(gas), temperature: Known::from(Rational::ONE), area_ratio: None }.with_temperature(temperature)
    }

    /// The same driver at another temperature T4, K.
    ///
    /// # Errors
    /// As for [`Driver::new`] and [`Driver::thermally_perfect`].
    pub fn with_temperature(self, temperature: impl Into<Known>) -> Result<Self, DriverError> {
        let temperature = temperature.into();
        check(DriverInput::Temperature, temperature)?;
        if let DriverGas::Thermal(gas) = self.gas {
            if temperature.exact().is_none() {
                return Err(DriverError::Driver { input: DriverInput::Temperature, value: temperature.nominal(), rule: Rule::Exact });
            }
            gas.check_temperature(Parameter::Temperature, temperature.nominal())?;
        }
        Ok(Self { temperature, ..self })
    }

    /// The same driver with the heat capacity that its gas has at T4, and the area of the driven tube for a thermally perfect one.
    ///
    /// # Errors
    /// [`DriverError::Gas`] for a heat capacity ratio outside what a gas may have.
    pub fn with_constant_heat_capacity(&self) -> Result<Driver<'static>, DriverError> {
        let gas = match self.gas {
            DriverGas::Constant(gas) => gas,
            DriverGas::Thermal(gas) => Gas::new(HeatCapacityRatio::new(self.heat_capacity_ratio())?, gas.molar_mass().enclosure())?,
        };
        Ok(Driver { gas: DriverGas::Constant(gas), temperature: self.temperature, area_ratio: self.area_ratio })
    }

    /// The same driver in a tube whose area is A4/A1 times that of the driven tube, 1 to 10⁶; for round tubes the square of the ratio of diameters.
    ///
    /// # Errors
    /// [`DriverError::Driver`] for a ratio outside that: a driver smaller than the driven tube is another flow; [`DriverError::ConstantOnly`] for a
    /// thermally perfect gas.
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
        if matches!(self.gas, DriverGas::Thermal(_)) && !is_one {
            return Err(DriverError::ConstantOnly);
        }
        Ok(Self { area_ratio: if is_one { None } else { Some(area_ratio) }, ..self })
    }

    /// The gas.
    pub fn gas(&self) -> DriverGas<'a> {
        self.gas
    }

    /// γ4, at T4.
    pub fn heat_capacity_ratio(&self) -> Enclosure {
        match self.gas {
            DriverGas::Constant(gas) => gas.heat_capacity_ratio().enclosure(),
            DriverGas::Thermal(_) => self.gamma().value().enclosure(),
        }
    }

    /// T4, K.
    pub fn temperature(&self) -> Known {
        self.temperature
    }

    /// A4/A1.
    pub fn area_ratio(&self) -> Known {
        self.area_ratio.unwrap_or(Known::from(Rational::ONE))
    }

    /// γ4, at T4.
    pub(super) fn gamma(&self) -> Gamma<Ball> {
        self.at_rest().gamma()
    }

    /// a4, m/s.
    pub(super) fn sound_speed(&self) -> Ball {
        self.at_rest().sound_speed()
    }

    /// The driver alone, with its tolerances as balls.
    fn at_rest(&self) -> Point<'a> {
        let gas = match self.gas {
            DriverGas::Constant(gas) => {
                let gamma = Gamma::from_excess(gas.heat_capacity_ratio().excess().ball());
                PointGas::Constant { gamma, molar_mass: gas.molar_mass().ball() }
            }
            DriverGas::Thermal(gas) => PointGas::Thermal(gas),
        };
        Point {
            gas,
            temperature: self.temperature.ball(),
            area_ratio: self.area_ratio.map(Known::ball),
            pressure: Ball::whole(1),
            gas_speed: Ball::whole(0),
        }
    }

    /// The corner of the tolerances at which p4 is least or greatest: p4 and ρ3 rise with p2, u2 and W4 and fall with T4 and A4/A1, T3 and a3 the other way
    /// round (T3 is no function of p2).
    ///
    /// With σ(w, α) of `area_change` and w = u2/a4: σ falls with w and rises with α (the implicit function rule on its relations); p4 = p2 σ^(−2γ/(γ−1)),
    /// a3 = a4 σ, T3 = T4 σ², ρ3 = p2 W/(R T3). A thermally perfect driver is exact but for p2 and u2.
    fn corner(&self, behind: &BehindShock, greatest: bool) -> Point<'a> {
        let point = self.at_rest();
        let gas = match (self.gas, point.gas) {
            (DriverGas::Constant(gas), PointGas::Constant { gamma, .. }) => {
                PointGas::Constant { gamma, molar_mass: gas.molar_mass().end(greatest).ball() }
            }
            (_, gas) => gas,
        };
        Point {
            gas,
            temperature: self.temperature.end(!greatest).ball(),
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
    /// [`DriverError::TooFast`], [`DriverError::ExpandsBeyondData`] and [`DriverError::PressureBeyondRange`] name the greatest Mach number of this driver in
    /// this test gas;
    /// [`DriverError::NotProven`] for a flow through the change of area that is sonic to all digits, or nearly no change of area.
    pub fn for_shock(&self, behind: &BehindShock) -> Result<Drive<'a>, DriverError> {
        let [least, greatest] = [false, true].map(|upper| self.corner(behind, upper));
        let [low, high] = [self.expansion(&least, behind)?, self.expansion(&greatest, behind)?];
        let fill = behind.gas.pressure();
        let [low_pressure, high_pressure] = [(&least, &low), (&greatest, &high)].map(|(point, own)| point.pressure * own.logarithm.exp());
        // p2/p1 does not depend on p1.
        let ratio = (low_pressure / fill.end(true).ball()).enclosure().hull((high_pressure / fill.end(false).ball()).enclosure());
        let hull = |f: &dyn Fn(&Point<'a>, &Expansion<'a>) -> Ball| f(&least, &low).enclosure().hull(f(&greatest, &high).enclosure());
        let sound_speed = hull(&|_, own| own.sound_speed());
        let temperature = hull(&|_, own| own.temperature);
        // At a point the ball has more digits than the enclosure.
        let of = |ball: Ball, bounds: Enclosure| if ball.enclosure().encloses(bounds) { ball } else { Ball::around(bounds) };
        let side_3 = match low.side {
            ContactSide::Constant { gamma, sound_speed: own } => ContactSide::Constant { gamma, sound_speed: of(own, sound_speed) },
            ContactSide::Thermal(side) => ContactSide::Thermal(side.with_temperature(of(side.temperature(), temperature))),
        };
        Ok(Drive {
            pressure: low_pressure.enclosure().hull(high_pressure.enclosure()),
            pressure_ratio: ratio,
            state_3: State {
                pressure: behind.pressure.enclosure(),
                temperature,
                density: hull(&|point, own| own.density(point)),
                sound_speed,
                gas_speed: behind.gas_speed.enclosure(),
            },
            mach_3: hull(&|point, own| point.gas_speed / own.sound_speed()),
            mach_before_change: low.mach_before.zip(high.mach_before).map(|(low, high)| low.enclosure().hull(high.enclosure())),
            is_sonic: low.is_sonic && high.is_sonic,
            side_3,
        })
    }

    /// The expansion at one point of the tolerances.
    fn expansion(&self, point: &Point<'a>, behind: &BehindShock) -> Result<Expansion<'a>, DriverError> {
        let expansion = point.expand()?.ok_or_else(|| self.too_fast(point, behind.gas))?;
        let of_pressure = (expansion.logarithm + point.pressure.ln()).enclosure();
        if !(of_pressure.is_proven() && of_pressure.high() <= LARGEST_LOGARITHM) {
            let decimal_logarithm = of_pressure.middle() / core::f64::consts::LN_10;
            return Err(DriverError::PressureBeyondRange { decimal_logarithm, greatest_mach: self.greatest_mach(behind.gas) });
        }
        Ok(expansion)
    }

    /// What the refusal of a shock says that is too fast for this driver.
    fn too_fast(&self, point: &Point<'a>, gas: TestGas) -> DriverError {
        let gas_speed = point.gas_speed.nearest();
        let limit = point.greatest_gas_speed().map_or(f64::NAN, Ball::nearest);
        let greatest_mach = self.greatest_mach(gas);
        match self.gas {
            DriverGas::Constant(_) => DriverError::TooFast { gas_speed, limit, greatest_mach },
            DriverGas::Thermal(own) => DriverError::ExpandsBeyondData { coldest: own.range().0, gas_speed, limit, greatest_mach },
        }
    }

    /// The expansion at the point of a shock; `None` where no driver pressure is enough.
    fn reached(&self, behind: &BehindShock) -> Result<Option<(Point<'a>, Expansion<'a>)>, DriverError> {
        let point = self.corner(behind, false);
        match (point.expand()?, self.gas) {
            (Some(expansion), _) => Ok(Some((point, expansion))),
            (None, DriverGas::Constant(_)) => Ok(None),
            (None, DriverGas::Thermal(_)) => Err(self.too_fast(&point, behind.gas)),
        }
    }

    /// ln(p4/p1) at the point of a shock; `None` where no driver pressure is enough.
    pub(super) fn logarithm_of_pressure_ratio(&self, behind: &BehindShock) -> Result<Option<Ball>, DriverError> {
        let logarithm = |(point, own): (Point<'a>, Expansion<'a>)| own.logarithm + (point.pressure / behind.gas.pressure().ball()).ln();
        Ok(self.reached(behind)?.map(logarithm))
    }

    /// State 3 at the point of a shock; `None` where no driver pressure is enough.
    pub(super) fn side_3(&self, behind: &BehindShock) -> Result<Option<ContactSide<'a>>, DriverError> {
        Ok(self.reached(behind)?.map(|(_, own)| own.side))
    }

    /// The speeds of the wave diagram of this driver and this shock, for a driver of the area of the driven tube.
    ///
    /// # Errors
    /// [`DriverError::Driver`] for a larger driver, whose waves are others; [`DriverError::ConstantOnly`] for a thermally perfect driver gas.
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
        if matches!(self.gas, DriverGas::Thermal(_)) {
            return Err(DriverError::ConstantOnly);
        }
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

    /// The Mach number that this driver reaches in this test gas at infinite pressure, where the driver gas expands to vacuum (a thermally perfect one: to
    /// the lowest temperature of its data):
    ///
    /// > u2 = 2a4/(γ4 − 1) for equal areas; in a gas of constant heat capacity M − 1/M = (γ1 + 1)/(γ4 − 1) · a4/a1.
    ///
    /// The double nearest to it, at nominal inputs; `None` where the data of the test gas end before it.
    pub fn greatest_mach(&self, gas: TestGas) -> Option<f64> {
        let speed = self.at_rest().greatest_gas_speed()?;
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
