//! Whether the data of a species are fit for the proofs.

use super::{Coefficient, Species, SpeciesRange};
use crate::gas::heat_capacity::HeatCapacity;
use crate::number::{Ball, Elementary, Enclosure, Semifield};
use core::fmt;

/// Why the data of a species are refused.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum SpeciesError {
    /// The ranges are none, more than [`RANGES`](crate::gas::RANGES), not in rising order, or one does not begin where the one before ends; at this
    /// temperature, K.
    Ranges(f64),
    /// A coefficient has an exponent beyond about ±38, in the range from this temperature, K.
    Coefficient(f64),
    /// The molar mass is not between 1e-4 and 10 kg/mol; it is this.
    MolarMass(f64),
    /// At a joint, K, the heat capacity or the enthalpy jumps by more than 1e-4 of `c_p` or of R T: the polynomials belong to different gases.
    Joint(f64),
    /// Near this temperature, K, the heat capacity is not proven to be that of a gas in which shocks are unique: `c_p`/R > 3/2 and
    /// T d(`c_p`/R)/dT < (47/2)(`c_p`/R) − 175/4.
    Shape(f64),
}

impl fmt::Display for SpeciesError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Ranges(at) => {
                write!(f, "the ranges of temperature must be one to five, in rising order and adjoining; see {at} K")
            }
            Self::Coefficient(at) => write!(f, "a coefficient of the range from {at} K has an exponent beyond ±38"),
            Self::MolarMass(mass) => write!(f, "molar mass {mass} kg/mol must lie between 0.0001 and 10 kg/mol"),
            Self::Joint(at) => {
                write!(f, "at {at} K the heat capacity or the enthalpy jumps by more than 0.01 %: check the coefficients of both ranges")
            }
            Self::Shape(at) => {
                write!(f, "near {at} K the polynomial is no heat capacity for which a shock is proven to be unique: check its coefficients")
            }
        }
    }
}

impl core::error::Error for SpeciesError {}

/// What two neighbouring ranges may differ by, relative.
const JOINT: f64 = 1e-4;
/// A polynomial is checked this far beyond both ends of its range, relative: tolerances near a joint are computed with both.
pub(crate) const EXTENSION: f64 = 0.02;
/// Parts into which a range is cut, in equal ratios of temperature.
const PARTS: u32 = 2048;

impl Species<'_> {
    /// Whether the proofs hold for this species, over all of its ranges.
    ///
    /// A shock into an ideal gas is unique if T dc/dT < c(c − 1)(2c − 1) with c = `c_p`/R > 1 (here 3/2 is asked, which no gas comes near), which says that the fundamental derivative of gas dynamics
    /// is positive (derived in [`how_it_is_proven`](crate::how_it_is_proven)). The right side is convex in c and its tangent at c = 5/2 is (47/2)c − 175/4. Since the tangent is
    /// linear, what holds for every species holds for every mixture. Proven by interval arithmetic on 2048 parts of each range, and for 2 % beyond both of its ends.
    ///
    /// # Errors
    /// [`SpeciesError`] names what is wrong and where. Every species of [`table`](super::table) passes (a test says so).
    ///
    /// ```
    /// use endwall::gas::species::{Coefficient, SpeciesError, SpeciesRange, table};
    /// let mut range = table::N2.ranges[0];
    /// range.heat_capacity[2] = Coefficient::new(-5, 0); // a sign that was typed wrongly
    /// let ranges = [range];
    /// let species = endwall::gas::species::Species { ranges: &ranges, ..table::N2 };
    /// assert!(matches!(species.check(), Err(SpeciesError::Shape(_))));
    /// ```
    pub fn check(&self) -> Result<(), SpeciesError> {
        let mass = self.molar_mass.to_f64();
        if !(1e-4..=10.0).contains(&mass) {
            return Err(SpeciesError::MolarMass(mass));
        }
        if self.ranges.is_empty() || self.ranges.len() > crate::gas::RANGES {
            return Err(SpeciesError::Ranges(0.0));
        }
        let mut end = 0.0;
        for range in self.ranges {
            let joined = if end == 0.0 { range.low > 0.0 } else { range.low == end };
            if !(joined && range.high > range.low && range.high.is_finite() && range.high <= 1e6) {
                return Err(SpeciesError::Ranges(range.low));
            }
            end = range.high;
            range.check()?;
        }
        let joints = self.ranges.iter().zip(self.ranges.iter().skip(1));
        joints.into_iter().try_for_each(|(below, above)| if below.meets(above) { Ok(()) } else { Err(SpeciesError::Joint(above.low)) })
    }
}

impl SpeciesRange {
    pub(crate) fn polynomial(&self, jump: Ball) -> HeatCapacity<Ball> {
        HeatCapacity::range_of(self.low, self.high, jump, self.heat_capacity.map(Coefficient::ball))
    }

    /// h/R by this range's polynomial, K.
    pub(crate) fn enthalpy_at(&self, temperature: Ball, logarithm: Ball) -> Ball {
        let [a1, a2, a3, a4, a5, a6, a7] = self.heat_capacity.map(Coefficient::ball);
        let whole = Ball::whole;
        let t = temperature;
        let rising = a4 / whole(2) + t * (a5 / whole(3) + t * (a6 / whole(4) + t * a7 / whole(5)));
        t * (a3 + t * rising) + a2 * logarithm - a1 / t + self.enthalpy.ball()
    }

    fn check(&self) -> Result<(), SpeciesError> {
        let known = |coefficient: &Coefficient| coefficient.rational().is_some();
        if !self.heat_capacity.iter().all(known) || !known(&self.enthalpy) {
            return Err(SpeciesError::Coefficient(self.low));
        }
        let polynomial = self.polynomial(Ball::whole(0)).map(Ball::enclosure);
        let whole = Enclosure::whole;
        let (least, greatest) = (self.low * (1.0 - EXTENSION), self.high * (1.0 + EXTENSION));
        let ratio = libm::pow(greatest / least, 1.0 / f64::from(PARTS));
        let mut low = least;
        for part in 1..=PARTS {
            let high = if part == PARTS { greatest } else { (low * ratio).min(greatest) };
            let temperature = Enclosure::ordered(low, high);
            let c = polynomial.value(0, temperature);
            let slope = polynomial.scaled_slope(0, temperature);
            let margin = whole(47) * c / whole(2) - whole(175) / whole(4) - slope;
            if !(c.low() > 1.5 && margin.low() > 0.0) {
                return Err(SpeciesError::Shape(temperature.middle()));
            }
            low = high;
        }
        Ok(())
    }

    fn meets(&self, above: &Self) -> bool {
        let joint = Ball::from(above.low);
        let value = |range: &Self| range.polynomial(Ball::whole(0)).value(0, joint).nearest();
        let logarithm = joint.ln();
        let enthalpy = |range: &Self| range.enthalpy_at(joint, logarithm).nearest();
        let (c, next) = (value(self), value(above));
        (next - c).abs() <= JOINT * c && (enthalpy(above) - enthalpy(self)).abs() <= JOINT * above.low
    }
}

#[cfg(test)]
mod tests {
    use super::super::{Shape, table};
    use super::*;

    #[test]
    fn every_species_of_the_table_passes() {
        for species in table::ALL {
            assert_eq!(species.check(), Ok(()), "{}", species.name);
        }
    }

    #[test]
    fn bad_data_are_named() {
        let good = table::CO2;
        let spoiled = |change: fn(&mut [SpeciesRange; 3])| {
            let mut ranges = [good.ranges[0], good.ranges[1], good.ranges[2]];
            change(&mut ranges);
            Species { ranges: &ranges, ..good }.check()
        };
        assert_eq!(spoiled(|_| ()), Ok(()));
        assert_eq!(spoiled(|ranges| ranges[1].low = 1001.0), Err(SpeciesError::Ranges(1001.0)));
        assert_eq!(spoiled(|ranges| ranges[1].enthalpy = Coefficient::new(0, 0)), Err(SpeciesError::Joint(1000.0)));
        assert_eq!(spoiled(|ranges| ranges[2].heat_capacity[0] = Coefficient::new(1, 99)), Err(SpeciesError::Coefficient(6000.0)));
        // A slope of the heat capacity too steep for the theorem: c = −3.1 + T/39.2 K is 1.9 at 196 K.
        let steep = |ranges: &mut [SpeciesRange; 3]| {
            ranges[0].heat_capacity = [0; 7].map(|a| Coefficient::new(a, 0));
            ranges[0].heat_capacity[2] = Coefficient::new(-31, -1);
            ranges[0].heat_capacity[3] = Coefficient::new(255, -4);
        };
        assert!(matches!(spoiled(steep), Err(SpeciesError::Shape(_))));
        let weightless = Species { molar_mass: Coefficient::new(0, 0), shape: Shape::Atom, ..good };
        assert_eq!(weightless.check(), Err(SpeciesError::MolarMass(0.0)));
        assert_eq!(Species { ranges: &[], ..good }.check(), Err(SpeciesError::Ranges(0.0)));
    }
}
