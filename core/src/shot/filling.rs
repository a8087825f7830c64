//! Filling a mixture gas by gas: the reading of the gauge after each, and how well the readings fix the fractions.

use crate::gas::{InputError, Parameter, Rule, positive};
use crate::number::{Ball, Dual, Enclosure, Exact, Known, Rational, Semifield, Signed};

/// One gas filled up to a reading. Each pair is the double nearest to the exact answer, and the enclosure of it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FillingStep {
    /// What this gas adds to the pressure, Pa.
    pub partial_pressure: (f64, Enclosure),
    /// The pressure after it, Pa, absolute.
    pub reading: (f64, Enclosure),
    /// Its mole fraction in the vessel, with what the pump left counted in.
    pub fraction: (f64, Enclosure),
}

/// A mixture made in one vessel by partial pressures (Dalton), all readings at one temperature:
///
/// > p(j) = r (1 − s(j)) + p s(j), s(j) = x(1) + … + x(j)
///
/// with the mole fractions x of the wanted mixture in the order of filling, the final pressure p and the residual pressure r that the pump left. Gas j adds
/// x(j)(p − r), and its fraction in the vessel is x(j)(p − r)/p; the residual gas has r/p. Ideal gas; the temperature cancels where it is the same at
/// each reading, so each gas must be given time to come to that of the vessel.
///
/// Enclosures are the exact answer if it is a double, else mostly the two doubles that bracket it, and 2 ulp wide at most, for exact inputs.
///
/// ```
/// use endwall::number::Rational;
/// use endwall::shot::Filling;
/// let [methane, argon] = ["0.004", "0.996"].map(|x| x.parse::<Rational>().unwrap());
/// let fractions = [methane, argon];
/// let filling = Filling::new(Rational::ZERO, Rational::from(200_000), &fractions)?;
/// let first = filling.step(0).unwrap();
/// assert_eq!(first.reading.0, 800.0); // Pa
/// assert!(first.reading.1.is_exact());
/// // Readings good to 4 Pa each: the fraction of methane to √2 times 4 Pa in 200 kPa.
/// let uncertainty = filling.standard_uncertainty(0, |_, _| 4.0).unwrap();
/// assert!((uncertainty - 2.83e-5).abs() < 1e-7);
/// # Ok::<(), endwall::gas::InputError>(())
/// ```
#[derive(Clone, Copy, Debug)]
pub struct Filling<'a> {
    residual: Known,
    pressure: Known,
    /// p − r, formed once.
    added: Known,
    fractions: &'a [Rational],
}

/// Σ x over the gases that are in and over those that are not, as weights.
#[inline(always)]
fn reading<S: Semifield>([residual, pressure]: [S; 2], [filled, rest]: [S; 2]) -> S {
    residual * rest + pressure * filled
}

#[inline(always)]
fn share<S: Semifield>(fraction: S, added: S, pressure: S) -> S {
    fraction * added / pressure
}

/// The fraction that three readings say: before and after the gas, and at the end.
#[inline(always)]
fn measured<S: Signed>(before: S, after: S, last: S) -> S {
    (after - before) / last
}

impl<'a> Filling<'a> {
    /// A filling from the residual pressure and the final pressure (Pa, absolute) and the mole fractions in the order of filling.
    ///
    /// # Errors
    /// [`InputError`] for a final pressure that is not positive, a residual pressure that is negative or not below it, a fraction that is negative,
    /// fractions that do not sum exactly to one, and ones with too many digits for exact sums.
    pub fn new(residual: impl Into<Known>, pressure: impl Into<Known>, fractions: &'a [Rational]) -> Result<Self, InputError> {
        let (residual, pressure) = (residual.into(), pressure.into());
        positive(Parameter::Pressure, pressure)?;
        let left = residual.enclosure();
        let refused = |rule| Err(InputError { parameter: Parameter::ResidualPressure, value: residual.nominal(), rule });
        if !left.is_proven() {
            return refused(Rule::Finite);
        }
        if !left.certainly_less(pressure.enclosure()) || left.low() < 0.0 {
            return refused(Rule::Between(0.0, pressure.nominal()));
        }
        let mut sum = Rational::ZERO;
        for fraction in fractions {
            let fail = |rule| InputError { parameter: Parameter::MoleFraction, value: fraction.to_f64(), rule };
            if !fraction.is_finite() {
                return Err(fail(Rule::Finite));
            }
            if fraction.is_negative() {
                return Err(fail(Rule::Between(0.0, 1.0)));
            }
            sum = sum.checked_add(*fraction).ok_or(fail(Rule::Digits))?;
        }
        if sum != Rational::ONE {
            return Err(InputError { parameter: Parameter::MoleFraction, value: sum.to_f64(), rule: Rule::SumToOne(sum.to_f64()) });
        }
        let exact = pressure.exact().zip(residual.exact()).and_then(|(pressure, residual)| pressure.checked_sub(residual));
        let added = exact.map_or_else(|| Known::from((pressure.ball() - residual.ball()).enclosure()), Known::from);
        Ok(Self { residual, pressure, added, fractions })
    }

    /// The step of this number, from 0; `None` beyond the last.
    pub fn step(&self, number: usize) -> Option<FillingStep> {
        let fraction = Known::from(*self.fractions.get(number)?);
        let [pressure, added] = [self.pressure, self.added].map(Known::ball);
        let one = Known::from(1);
        let partial = share(fraction.ball(), added, one.ball());
        let exactly = |divisor: Known| {
            let [fraction, added, divisor] = [fraction, self.added, divisor].map(exact);
            share(fraction, added, divisor)
        };
        Some(FillingStep {
            partial_pressure: best(partial, &exactly(one)),
            reading: self.reading(number + 1)?,
            fraction: best(share(fraction.ball(), added, pressure), &exactly(self.pressure)),
        })
    }

    /// The fraction of the residual gas in the vessel.
    pub fn residual_fraction(&self) -> (f64, Enclosure) {
        let [residual, one, pressure] = [self.residual, Known::from(1), self.pressure];
        let ball = share(residual.ball(), one.ball(), pressure.ball());
        best(ball, &share(exact(residual), exact(one), exact(pressure)))
    }

    /// The pressure with this many gases in.
    fn reading(&self, count: usize) -> Option<(f64, Enclosure)> {
        let filled = self.fractions.get(..count)?.iter().try_fold(Rational::ZERO, |sum, x| sum.checked_add(*x))?;
        let ends = [self.residual, self.pressure];
        let weights = [filled, Rational::ONE.checked_sub(filled)?].map(Known::from);
        Some(best(reading(ends.map(Known::ball), weights.map(Known::ball)), &reading(ends.map(exact), weights.map(exact))))
    }

    /// Standard uncertainty of the fraction that the gas of this step has in the vessel, from those of the readings: given the number of a reading (0 before
    /// the first gas) and its pressure in Pa, the function answers with the standard uncertainty in Pa. `None` beyond the last step.
    ///
    /// First order (JCGM 100:2008, equation (10)) in the three readings that x = (p(j) − p(j−1))/p(n) takes, which are independent; neighbouring fractions
    /// share a reading and are correlated. An error that all readings have in proportion cancels, and so has no place in the function.
    pub fn standard_uncertainty(&self, number: usize, uncertainty: impl Fn(usize, f64) -> f64) -> Option<f64> {
        let count = self.fractions.len();
        let taken = [number, number.checked_add(1)?, count];
        let [before, after, last] = [self.reading(taken[0])?.0, self.reading(taken[1])?.0, self.reading(count)?.0];
        let variable = Dual::<f64, 3>::variable;
        // The last gas is read once: its own reading is the final one.
        let own = if taken[1] == count { 2 } else { 1 };
        let slopes = measured(variable(before, 0), variable(after, own), variable(last, 2)).slopes();
        Some(combined(slopes, taken, [before, after, last], uncertainty))
    }

    /// Standard uncertainty of [`residual_fraction`](Self::residual_fraction), like that of a step.
    pub fn residual_uncertainty(&self, uncertainty: impl Fn(usize, f64) -> f64) -> f64 {
        let (residual, last) = (self.residual.nominal(), self.pressure.nominal());
        let slopes = (Dual::<f64, 2>::variable(residual, 0) / Dual::variable(last, 1)).slopes();
        combined(slopes, [0, self.fractions.len()], [residual, last], uncertainty)
    }
}

/// √Σ (c u)².
fn combined<const N: usize>(slopes: [f64; N], taken: [usize; N], readings: [f64; N], uncertainty: impl Fn(usize, f64) -> f64) -> f64 {
    let parts = slopes.iter().zip(taken).zip(readings).map(|((slope, number), reading)| slope * uncertainty(number, reading));
    libm::sqrt(parts.map(|part| part * part).sum())
}

/// The input as a fraction of integers; indefinite for a tolerance.
fn exact(input: Known) -> Exact {
    input.exact().map_or(Exact::INDEFINITE, Exact::from)
}

/// The nearest double, and the exact number itself as its enclosure where it is that double.
fn best(ball: Ball, exact: &Exact) -> (f64, Enclosure) {
    let nearest = ball.nearest();
    let met = exact.compare_double(nearest) == Some(core::cmp::Ordering::Equal);
    (nearest, if met { Enclosure::from(nearest) } else { ball.enclosure() })
}

#[cfg(test)]
#[path = "filling_tests.rs"]
mod tests;
