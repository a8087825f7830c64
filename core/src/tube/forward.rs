//! The shock that a driver makes: from p4 and p1 to the Mach number.

use super::driver::{Driver, DriverGas, check};
use super::driver_error::{DriverError, DriverInput, Unproven};
use super::proven_root::{Side, increasing};
use super::test_gas::{BehindShock, TestGas};
use crate::gas::{Gas, InputError, Parameter, Rule};
use crate::number::{Elementary, Enclosure, Known};
use core::cell::Cell;

/// M − 1 from which the search begins.
const START: f64 = 1.0;

impl Driver<'_> {
    /// The Mach number of the shock that this driver, filled to p4 (Pa, absolute), drives into the test gas, less 1.
    ///
    /// The root of ln(p4(M)/p1) = ln(p4/p1), with p4(M) of [`Driver::for_shock`]. It is the only one: p2 and u2 rise with M (in a thermally perfect gas by
    /// the criterion of its species), and p4 with both. The enclosure lies between doubles at which the sign is proven: at most 2 ulp for exact inputs.
    /// For a tolerance of p4 it is the hull over it; tolerances of the fill and of the driver are refused. Then `Incident::new` with
    /// [`Entry::MachExcess`](crate::shock::Entry::MachExcess) gives the states, for the enclosure or for a double in it.
    ///
    /// # Errors
    /// [`DriverError::Driver`] for a driver pressure that is not above that of the fill; [`DriverError::Gas`] where the shock takes a thermally perfect gas
    /// outside its data, and for tolerances; [`DriverError::NotProven`] for a shock too weak for the digits of the inputs.
    ///
    /// ```
    /// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
    /// use endwall::shock::{Entry, Incident};
    /// use endwall::tube::{BehindShock, Driver, TestGas};
    /// let helium = Gas::new(HeatCapacityRatio::ratio(5, 3)?, 0.004002602)?;
    /// let fill = Fill::new(Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.0280134)?, 10e3, 295.0)?;
    /// let driver = Driver::new(helium, 295.0)?;
    /// let excess = driver.mach_excess(TestGas::from(&fill), 98.06e3)?;
    /// assert!((excess.middle() - 1.0).abs() < 1e-3);
    /// assert!(excess.width_in_ulp() <= 2);
    /// // There and back.
    /// let shock = Incident::new(&fill, Entry::MachExcess, excess.middle())?;
    /// let again = driver.for_shock(&BehindShock::from(&shock))?.pressure;
    /// assert!((again.middle() / 98.06e3 - 1.0).abs() < 1e-14);
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn mach_excess(&self, gas: TestGas, pressure: impl Into<Known>) -> Result<Enclosure, DriverError> {
        let pressure = pressure.into();
        check(DriverInput::Pressure, pressure)?;
        self.exact_for(gas)?;
        let low = self.mach_excess_at(gas, pressure.end(false))?;
        if pressure.exact().is_some() { Ok(low) } else { Ok(low.hull(self.mach_excess_at(gas, pressure.end(true))?)) }
    }

    /// The search needs a point.
    pub(super) fn exact_for(&self, gas: TestGas) -> Result<(), DriverError> {
        let own = [(DriverInput::Temperature, self.temperature()), (DriverInput::AreaRatio, self.area_ratio())];
        for (input, known) in own {
            if known.exact().is_none() {
                return Err(DriverError::Driver { input, value: known.nominal(), rule: Rule::Exact });
            }
        }
        let of_gas =
            |gas: Gas| [(Parameter::HeatCapacityRatio, gas.heat_capacity_ratio().known()), (Parameter::MolarMass, gas.molar_mass())];
        let (pressure, temperature) = match gas {
            TestGas::Constant(fill) => (fill.pressure(), fill.temperature()),
            TestGas::Thermal(fill) => (fill.pressure(), fill.temperature()),
        };
        let test_gas = if let TestGas::Constant(fill) = gas { Some(fill.gas()) } else { None };
        let driver_gas = if let DriverGas::Constant(gas) = self.gas() { Some(gas) } else { None };
        let fill = [(Parameter::FillPressure, pressure), (Parameter::FillTemperature, temperature)];
        for (parameter, known) in fill.into_iter().chain(test_gas.into_iter().chain(driver_gas).flat_map(of_gas)) {
            if known.exact().is_none() {
                return Err(InputError { parameter, value: known.nominal(), rule: Rule::Exact }.into());
            }
        }
        Ok(())
    }

    fn mach_excess_at(&self, gas: TestGas, pressure: Known) -> Result<Enclosure, DriverError> {
        let wanted = (pressure.ball() / gas.pressure().ball()).ln();
        if !wanted.is_certainly_positive() {
            let rule = Rule::Above(gas.pressure().nominal());
            return Err(DriverError::Driver { input: DriverInput::Pressure, value: pressure.nominal(), rule });
        }
        mach_excess_where(gas, |behind| {
            let logarithm = self.logarithm_of_pressure_ratio(behind)?;
            Ok(logarithm.map_or(Side::Beyond, |logarithm| Side::Value(logarithm - wanted)))
        })
    }
}

/// The M − 1 at which a quantity behind the shock that increases with M passes zero.
pub(super) fn mach_excess_where<'a>(
    gas: TestGas<'a>,
    quantity: impl Fn(&BehindShock<'a>) -> Result<Side, DriverError>,
) -> Result<Enclosure, DriverError> {
    // Where the data of a gas end nothing is known; if the search stops there, the error says so.
    let end_of_data = Cell::new(None);
    let over = |excess: f64| match gas.behind_mach_excess(excess).and_then(|behind| quantity(&behind)) {
        Err(error @ (DriverError::Gas(InputError { rule: Rule::HeatsBeyondData(..), .. }) | DriverError::ExpandsBeyondData { .. })) => {
            end_of_data.set(Some(error));
            Ok(Side::Unknown)
        }
        other => other,
    };
    let root = increasing(over, START)?;
    root.ok_or(end_of_data.get().unwrap_or(Unproven::Mach.into()))
}
