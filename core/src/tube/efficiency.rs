//! A laboratory's own ratio of measured to ideal Mach number.

use super::driver::Driver;
use super::driver_error::{DriverError, DriverInput};
use super::test_gas::TestGas;
use crate::gas::Rule;
use crate::shock::Entry;

/// The Mach number that a tube reaches over the ideal one for the same pressures, with its standard uncertainty: dimensionless, measured by the
/// laboratory in its own tube. Not proven: it stands for diaphragm opening, boundary layer and mixing.
///
/// 0.85 to 0.95 are common practice (no source).
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Efficiency {
    value: f64,
    standard_uncertainty: f64,
}

/// The driver pressure to set for a wanted Mach number, from a measured efficiency. Plain numbers, not proven.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct DriverPressureBand {
    /// The ideal Mach number for which the driver is filled.
    pub ideal_mach: f64,
    /// p4 at the efficiency plus its standard uncertainty, Pa.
    pub low: f64,
    /// p4 at the efficiency, Pa.
    pub pressure: f64,
    /// p4 at the efficiency less its standard uncertainty, Pa: what ratings are compared with.
    pub high: f64,
}

impl Efficiency {
    /// From the ratio, 0.1 to 2, and its standard uncertainty, below half of it.
    ///
    /// # Errors
    /// [`DriverError::Driver`] for values outside that.
    pub fn new(value: f64, standard_uncertainty: f64) -> Result<Self, DriverError> {
        let check = |input, value: f64, low: f64, high: f64| {
            if value >= low && value <= high { Ok(()) } else { Err(DriverError::Driver { input, value, rule: Rule::Between(low, high) }) }
        };
        check(DriverInput::Efficiency, value, 0.1, 2.0)?;
        check(DriverInput::EfficiencyUncertainty, standard_uncertainty, 0.0, value / 2.0)?;
        Ok(Self { value, standard_uncertainty })
    }

    /// Measured over ideal Mach number.
    pub fn value(self) -> f64 {
        self.value
    }

    /// Its standard uncertainty.
    pub fn standard_uncertainty(self) -> f64 {
        self.standard_uncertainty
    }

    /// The Mach number to be expected for an ideal one, with the standard uncertainty that the efficiency gives it.
    pub fn expected_mach(self, ideal_mach: f64) -> (f64, f64) {
        (self.value * ideal_mach, self.standard_uncertainty * ideal_mach)
    }
}

impl Driver<'_> {
    /// The driver pressure to set so that a tube of this efficiency reaches a Mach number: p4 of the ideal Mach number M/η, with the band that one
    /// standard uncertainty of η leaves.
    ///
    /// # Errors
    /// As for [`Driver::for_shock`], also where only the upper end of the band is out of reach.
    ///
    /// ```
    /// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
    /// use endwall::tube::{Driver, Efficiency, TestGas};
    /// let helium = Gas::new(HeatCapacityRatio::ratio(5, 3)?, 0.004002602)?;
    /// let fill = Fill::new(Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.0280134)?, 10e3, 295.0)?;
    /// let driver = Driver::new(helium, 295.0)?;
    /// let band = driver.pressure_for_mach(TestGas::from(&fill), 2.0, Efficiency::new(0.9, 0.02)?)?;
    /// assert!((band.ideal_mach - 2.2222).abs() < 1e-4);
    /// assert!(band.low < band.pressure && band.pressure < band.high);
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn pressure_for_mach(&self, gas: TestGas, mach: f64, efficiency: Efficiency) -> Result<DriverPressureBand, DriverError> {
        let Efficiency { value, standard_uncertainty } = efficiency;
        let at = |efficiency: f64| {
            let ideal = mach / efficiency;
            // The direct relations know no shock that is none.
            let behind = if ideal > 1.0 { gas.behind_mach_excess(ideal - 1.0) } else { gas.behind(Entry::Mach, ideal) };
            Ok::<_, DriverError>(self.for_shock(&behind?)?.pressure.middle())
        };
        let pressure = at(value)?;
        let end = |change: f64| if change == 0.0 { Ok(pressure) } else { at(value + change) };
        Ok(DriverPressureBand { ideal_mach: mach / value, low: end(standard_uncertainty)?, pressure, high: end(-standard_uncertainty)? })
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::gas::{Fill, Gas, HeatCapacityRatio};

    #[test]
    fn a_lossless_tube_takes_the_ideal_pressure() {
        let helium = Gas::new(HeatCapacityRatio::ratio(5, 3).unwrap(), 0.004_002_602).unwrap();
        let nitrogen = Gas::new(HeatCapacityRatio::ratio(7, 5).unwrap(), 0.028_013_4).unwrap();
        let fill = Fill::new(nitrogen, 10e3, 295.0).unwrap();
        let gas = TestGas::from(&fill);
        let driver = Driver::new(helium, 295.0).unwrap();
        let ideal = |mach: f64| driver.for_shock(&gas.behind(Entry::Mach, mach).unwrap()).unwrap().pressure.middle();
        let band = |efficiency| driver.pressure_for_mach(gas, 2.0, efficiency);
        let lossless = band(Efficiency::new(1.0, 0.0).unwrap()).unwrap();
        assert_eq!([lossless.low, lossless.pressure, lossless.high], [ideal(2.0); 3]);
        let measured = Efficiency::new(0.75, 0.125).unwrap();
        let (low, pressure, high) = (ideal(2.0 / 0.875), ideal(2.0 / 0.75), ideal(2.0 / 0.625));
        let expected = DriverPressureBand { ideal_mach: 2.0 / 0.75, low, pressure, high };
        assert_eq!(band(measured).unwrap(), expected);
        // What the fill is set for is what is to be expected.
        assert_eq!(measured.expected_mach(2.0 / 0.75), (2.0, 1.0 / 3.0));
        // Helium at 295 K reaches Mach 10.5 at most: here only the upper end of the band is beyond.
        assert!(matches!(band(Efficiency::new(0.2, 0.02).unwrap()), Err(DriverError::TooFast { .. })));
        for (value, uncertainty) in [(0.0, 0.0), (2.1, 0.1), (0.9, -0.1), (0.9, 0.5), (f64::NAN, 0.1), (0.9, f64::NAN)] {
            assert!(Efficiency::new(value, uncertainty).is_err());
        }
    }
}
