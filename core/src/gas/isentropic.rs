//! Temperature after an isentropic change of pressure.
//!
//! > ∫ from T to T′ of (`c_p`/R) dT/T = ln(p′/p)
//!
//! The left side is continuous in T′, also across joints of two polynomials, and increasing, since `c_p` > 0:
//! [`Species::check`](super::species::Species::check) proves that `c_p`/R > 1. So its sign at the ends of each range, less ln(p′/p), proves in which
//! range T′ lies, that it exists and that there is no other.

use super::constant::{HeatCapacityRatio, positive};
use super::error::{InputError, Parameter, Rule};
use super::heat_capacity::HeatCapacity;
use super::thermally_perfect::ThermallyPerfectGas;
use crate::number::{Ball, Elementary, Enclosure, Known, Semifield};
use core::cmp::Ordering;

/// Newton steps in f64, at most: 3 to 5 are taken.
const PLAIN_STEPS: u32 = 60;
/// Newton steps with proof, at most.
const STEPS: u32 = 3;
/// A relative change of temperature that is known this well gives a temperature of one or two units in the last place.
const NARROW: f64 = 1e-21;
/// 2⁻⁴⁶, the first reach of the interval Newton step: what the plain solution is nearly always good to.
const REACH: f64 = f64::from_bits((1023 - 46) << 52);

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
        let inverse = |excess: Known| one / (one + one / excess.ball());
        let (low, high) = (inverse(self.excess().end(false)), inverse(self.excess().end(true)));
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
            return Some(with_constant(temperature, logarithm, Ball::whole(1) / self.value(0, temperature)));
        }
        let bounds = temperature.enclosure();
        if logarithm.magnitude() == 0.0 {
            return Some(bounds);
        }
        // A decimal next to a joint can belong to either range.
        let (first, last) = (self.index_at(bounds.low()), self.index_at(bounds.high()));
        let found = self.starting_in(first, temperature, logarithm)?;
        if first == last { Some(found) } else { Some(found.hull(self.starting_in(last, temperature, logarithm)?)) }
    }

    /// T′ for a T in this range: the hull of the answers of all ranges in which T′ is not proven not to be (two where it lies on a joint).
    fn starting_in(&self, from: usize, temperature: Ball, logarithm: Ball) -> Option<Enclosure> {
        let (coldest, hottest) = self.range();
        // Positive where T′ is greater than this temperature, which is an end of the range.
        let lacking = |end: f64, to: usize| {
            let excess = (Ball::from(end) - temperature) / temperature;
            logarithm - self.entropy_rise(from, temperature, excess, to)
        };
        let mut low = coldest;
        let mut below = lacking(low, 0);
        if !below.is_certainly_positive() {
            return None;
        }
        let mut found: Option<Enclosure> = None;
        for (to, high) in self.joints().chain([hottest]).enumerate() {
            let above = lacking(high, to);
            if !below.is_certainly_negative() && !above.is_certainly_positive() {
                // From the joint by which the change enters the range: as differences from a T beyond it, small changes would lose their digits.
                let (start, rise) = match to.cmp(&from) {
                    Ordering::Less => (Ball::from(high), above),
                    Ordering::Equal => (temperature, logarithm),
                    Ordering::Greater => (Ball::from(low), below),
                };
                let own = Problem { heat_capacity: self, range: to, start, rise }.solve(low, high);
                found = Some(found.map_or(own, |other| other.hull(own)));
            }
            (low, below) = (high, above);
        }
        found.filter(|_| below.is_certainly_negative())
    }
}

/// T′ = T exp(ln(p′/p)/c).
fn with_constant(temperature: Ball, logarithm: Ball, inverse_heat_capacity: Ball) -> Enclosure {
    (temperature * (logarithm * inverse_heat_capacity).exp()).enclosure()
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

/// A change inside one range, or from its joint with another one.
struct Problem<'c> {
    heat_capacity: &'c HeatCapacity<Ball>,
    range: usize,
    /// T, from which the change starts.
    start: Ball,
    /// The integral from there to T′.
    rise: Ball,
}

impl Problem<'_> {
    /// T′, which is proven to lie between these two temperatures.
    fn solve(&self, low: f64, high: f64) -> Enclosure {
        let excess = self.newton(self.approximate(low, high));
        // Where Newton's proof does not close, what is proven is the range.
        excess.map_or(Enclosure::ordered(low, high), |excess| (self.start + self.start * excess).enclosure())
    }

    /// x = T′/T − 1 in f64, by Newton's iteration inside a bracket that is halved where a step would leave it.
    fn approximate(&self, low: f64, high: f64) -> f64 {
        let (start, rise) = (self.start.nearest(), self.rise.nearest());
        let heat_capacity = self.heat_capacity.map(Ball::nearest);
        let (mut low, mut high) = ((low - start) / start, (high - start) / start);
        // The answer for constant heat capacity.
        let exponent = rise / heat_capacity.value(self.range, start);
        let mut x = (exponent * exponent.expm1_ratio()).clamp(low, high);
        for _ in 0..PLAIN_STEPS {
            let value = heat_capacity.entropy_rise(self.range, start, x, self.range) - rise;
            let c = heat_capacity.value(self.range, start + start * x);
            let next = x - value * (1.0 + x) / c;
            // Newton's next step would be its square.
            if (next - x).abs() <= 1e-9 * x.abs() {
                return next;
            }
            (low, high) = if value > 0.0 { (low, x) } else { (x, high) };
            x = if next >= low && next <= high { next } else { f64::midpoint(low, high) };
        }
        x
    }

    /// Interval Newton in x = T′/T − 1: F(x) = ∫ − rise has the slope c(T′)/(1 + x). If x − F(x)/F′(X) lies inside an interval X about x, it holds the
    /// only root in X.
    fn newton(&self, approximate: f64) -> Option<Ball> {
        let mut x = approximate;
        let mut wanted = 0.0;
        for step in 0..STEPS {
            let at = Ball::from(x);
            let value = self.heat_capacity.entropy_rise(self.range, self.start, at, self.range) - self.rise;
            let reach = (x.abs() * REACH).max(wanted);
            let ratio = Ball::whole(1) + at.widened(reach);
            let correction = value * ratio / self.heat_capacity.value(self.range, self.start * ratio);
            let found = at - correction;
            if correction.magnitude() < reach && (found.radius() <= NARROW || step + 1 == STEPS) {
                return Some(found);
            }
            wanted = 4.0 * correction.magnitude();
            if wanted.is_nan() || wanted >= 0.1 {
                return None;
            }
            x = found.nearest();
        }
        None
    }
}

#[cfg(test)]
#[path = "isentropic_tests.rs"]
mod tests;
