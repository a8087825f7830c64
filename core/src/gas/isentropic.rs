//! Temperature after an isentropic change of pressure.
//!
//! > ∫ from T to T′ of (`c_p`/R) dT/T = ln(p′/p)
//!
//! The left side is continuous in T′, also across joints of two polynomials, and increasing.

use super::constant::{HeatCapacityRatio, positive};
use super::error::{InputError, Parameter, Rule};
use super::heat_capacity::HeatCapacity;
use super::isentropic_change::Pressure;
use super::thermally_perfect::ThermallyPerfectGas;
use crate::number::{Ball, Elementary, Enclosure, Known, Semifield};

impl ThermallyPerfectGas<'_> {
    /// Temperature T′, K, after an isentropic change of pressure by the factor p′/p from a temperature T, K, with the full heat capacity:
    ///
    /// > ∫ from T to T′ of (`c_p`/R) dT/T = ln(p′/p).
    ///
    /// Domain: T and T′ within the data of the gas. The enclosure is at most two units in the last place wide for exact inputs, near p′/p = 1 as
    /// elsewhere; for tolerances it is the hull. With vibration frozen use [`HeatCapacity::isentropic_temperature`].
    ///
    /// Source: constant entropy of an ideal gas (first and second law).
    ///
    /// # Errors
    /// [`InputError`] for a temperature outside the data, a factor that is not positive or beyond 2^±200, and a factor that takes the gas outside the
    /// data or so near their end that it is not proven to stay inside.
    ///
    /// ```
    /// use endwall::gas::species::table;
    /// use endwall::gas::{Portion, ThermallyPerfectGas};
    /// let nitrogen = [Portion { species: &table::N2, fraction: "1".parse()? }];
    /// let gas = ThermallyPerfectGas::new(&nitrogen)?;
    /// // A pressure measured 6 % above p5: the gas is 19.8 K hotter than T5.
    /// let corrected = gas.isentropic_temperature(1400.0, 1.06)?;
    /// assert!((corrected.middle() - 1419.8).abs() < 0.05);
    /// assert!(corrected.width_in_ulp() <= 2);
    /// assert!(gas.isentropic_temperature(1400.0, 1e9).is_err());
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn isentropic_temperature(
        &self,
        temperature: impl Into<Known>,
        pressure_factor: impl Into<Known>,
    ) -> Result<Enclosure, InputError> {
        self.heat_capacity().isentropic_temperature(temperature, pressure_factor)
    }
}

impl HeatCapacityRatio {
    /// Temperature T′, K, after an isentropic change of pressure by the factor p′/p from a temperature T, K, with constant heat capacity:
    ///
    /// > T′ = T (p′/p)^((γ − 1)/γ).
    ///
    /// Domain: T and p′/p within 2^±200. The enclosure is at most two units in the last place wide for exact inputs; for tolerances it is the hull. Where γ
    /// changes with temperature, take it at T, not at the fill.
    ///
    /// Source: constant entropy of an ideal gas; NACA Report 1135 (1953), isentropic relations (from memory).
    ///
    /// # Errors
    /// [`InputError`] for a temperature or a factor that is not positive or beyond 2^±200.
    ///
    /// ```
    /// use endwall::gas::HeatCapacityRatio;
    /// let argon = HeatCapacityRatio::ratio(5, 3)?;
    /// let corrected = argon.isentropic_temperature(1400.0, 1.06)?;
    /// assert!((corrected.middle() - 1433.0).abs() < 0.05);
    /// assert!(argon.isentropic_temperature(1400.0, -1.0).is_err());
    /// # Ok::<(), endwall::gas::InputError>(())
    /// ```
    pub fn isentropic_temperature(self, temperature: impl Into<Known>, pressure_factor: impl Into<Known>) -> Result<Enclosure, InputError> {
        let one = Ball::whole(1);
        let heat_capacity = |excess: Known| one + one / excess.ball();
        let (low, high) = (heat_capacity(self.excess().end(false)), heat_capacity(self.excess().end(true)));
        // Increasing in T and p′/p; in γ for p′ > p, else decreasing.
        over_ends(temperature.into(), pressure_factor.into(), |t, logarithm| {
            Ok(with_constant(t, logarithm, low).hull(with_constant(t, logarithm, high)))
        })
    }
}

impl HeatCapacity<Ball> {
    /// Temperature T′, K, after an isentropic change of pressure by the factor p′/p from a temperature T, K: see
    /// [`ThermallyPerfectGas::isentropic_temperature`], for any heat capacity.
    ///
    /// # Errors
    /// As there.
    ///
    /// ```
    /// use endwall::gas::HeatCapacity;
    /// use endwall::number::{Ball, Semifield};
    /// let frozen = HeatCapacity::constant(Ball::whole(7) / Ball::whole(2));
    /// let hotter = frozen.isentropic_temperature(300.0, 128.0)?; // 2⁷, to the power 2/7
    /// assert!(hotter.contains(1200.0) && hotter.width_in_ulp() <= 2);
    /// # Ok::<(), endwall::gas::InputError>(())
    /// ```
    pub fn isentropic_temperature(
        &self,
        temperature: impl Into<Known>,
        pressure_factor: impl Into<Known>,
    ) -> Result<Enclosure, InputError> {
        let (temperature, pressure_factor) = (temperature.into(), pressure_factor.into());
        let (coldest, hottest) = self.range();
        let bounds = temperature.enclosure();
        if bounds.is_proven() && !(bounds.low() >= coldest && bounds.high() <= hottest) {
            let rule = Rule::DataRange(coldest, hottest);
            return Err(InputError { parameter: Parameter::Temperature, value: temperature.nominal(), rule });
        }
        // Increasing in both: dT′/dT = (T′/T) c(T)/c(T′).
        over_ends(temperature, pressure_factor, |t, logarithm| {
            self.at_end(t, logarithm).ok_or(InputError {
                parameter: Parameter::PressureFactor,
                value: pressure_factor.nominal(),
                rule: Rule::HeatsBeyondData(coldest, hottest),
            })
        })
    }

    /// T′ for one T, whichever range it is in; `None` where T′ is not proven to lie in the data.
    fn at_end(&self, temperature: Ball, logarithm: Ball) -> Option<Enclosure> {
        if self.range() == (0.0, f64::INFINITY) {
            return Some(with_constant(temperature, logarithm, self.value(0, temperature)));
        }
        let bounds = temperature.enclosure();
        // A decimal next to a joint can belong to either range.
        let (first, last) = (self.index_at(bounds.low()), self.index_at(bounds.high()));
        let starting_in = |from| {
            let changes = self.changed_by::<Pressure>(from, temperature, logarithm);
            let after = changes.into_iter().flatten().map(|change| (temperature + temperature * change.excess).enclosure());
            after.reduce(Enclosure::hull)
        };
        let found = starting_in(first)?;
        if first == last { Some(found) } else { Some(found.hull(starting_in(last)?)) }
    }
}

/// T′ = T exp(ln(p′/p)/c).
fn with_constant(temperature: Ball, logarithm: Ball, heat_capacity: Ball) -> Enclosure {
    (temperature * (logarithm / heat_capacity).exp()).enclosure()
}

/// The hull over both ends of tolerances, for an answer that increases in T and in p′/p.
fn over_ends(
    temperature: Known,
    pressure_factor: Known,
    answer: impl Fn(Ball, Ball) -> Result<Enclosure, InputError>,
) -> Result<Enclosure, InputError> {
    positive(Parameter::Temperature, temperature)?;
    positive(Parameter::PressureFactor, pressure_factor)?;
    let at = |upper| answer(temperature.end(upper).ball(), pressure_factor.end(upper).ball().ln());
    let low = at(false)?;
    if temperature.exact().is_some() && pressure_factor.exact().is_some() { Ok(low) } else { Ok(low.hull(at(true)?)) }
}

#[cfg(test)]
#[path = "isentropic_tests.rs"]
mod tests;
