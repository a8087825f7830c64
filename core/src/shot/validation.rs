//! The numerical tolerance of JCGM 101:2008, 7.9.2, and the comparison of a linear result with a Monte Carlo run (8.1); both from memory.

use super::monte_carlo_result::OutputSummary;

/// Numerical tolerance of a standard uncertainty `u` given to `digits` significant digits: half a unit of the last of them
/// (JCGM 101:2008, 7.9.2), in the unit of `u`.
///
/// With `u = c 10^l`, `c` a whole number of `digits` digits, it is `10^l/2`. Zero when `u` is zero, negative or not finite, or when `digits`
/// is zero. One ulp of error.
///
/// ```
/// use endwall::shot::numerical_tolerance;
/// assert_eq!(numerical_tolerance(0.000_35, 2), 0.000_005);
/// assert_eq!(numerical_tolerance(2.0, 1), 0.5);
/// ```
#[must_use]
pub fn numerical_tolerance(u: f64, digits: u8) -> f64 {
    if !(u > 0.0 && u.is_finite()) || digits == 0 {
        return 0.0;
    }
    // u = mantissa 10^exponent with 1 <= mantissa < 10; the range of a double bounds the steps.
    let mut exponent = libm::floor(libm::log10(u)) as i32;
    let digits = i32::from(digits.min(15));
    // Rounding to the digits may carry into the next power of ten (9.96 to two digits is 10).
    let last = exponent.saturating_sub(digits.saturating_sub(1));
    if libm::round(scale_by_ten(u, last.saturating_neg())) >= scale_by_ten(1.0, digits) {
        exponent = exponent.saturating_add(1);
    }
    scale_by_ten(0.5, exponent.saturating_sub(digits.saturating_sub(1)))
}

/// `x 10^n`, by one product or quotient with a power formed by squaring (exact up to 10^22).
fn scale_by_ten(x: f64, n: i32) -> f64 {
    let mut rest = n.unsigned_abs();
    let (mut power, mut factor) = (1.0, 10.0);
    while rest > 0 {
        if rest & 1 == 1 {
            power *= factor;
        }
        factor *= factor;
        rest >>= 1;
    }
    if n < 0 { x / power } else { x * power }
}

/// Outcome of the comparison of JCGM 101:2008, 8.1.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Validation {
    /// `|y - U - y_low|`, in the unit of the output.
    pub low_difference: f64,
    /// `|y + U - y_high|`.
    pub high_difference: f64,
    /// The numerical tolerance of `u(y)`.
    pub tolerance: f64,
}

impl Validation {
    /// Whether the linear result stands in this case: both differences are within the tolerance.
    #[must_use]
    pub fn validated(&self) -> bool {
        self.low_difference <= self.tolerance && self.high_difference <= self.tolerance
    }
}

/// Compares the interval `y - U` to `y + U` of the law of propagation with the interval of a Monte Carlo run (JCGM 101:2008, 8.1).
///
/// `value` and `standard_uncertainty` are those of the linear result, `expanded` its `U` at the same level; `digits` are those that the
/// standard uncertainty is meant to carry. Run the Monte Carlo with a tolerance of 0.2 for this purpose.
///
/// ```
/// use endwall::shot::{OutputSummary, validate_linear};
/// let run = OutputSummary { mean: 0.0, standard_uncertainty: 2.0, low: -3.92, high: 3.91, ..OutputSummary::default() };
/// assert!(validate_linear(0.0, 2.0, 3.92, &run, 2).validated());
/// assert!(!validate_linear(0.0, 2.0, 4.20, &run, 2).validated());
/// ```
#[must_use]
pub fn validate_linear(value: f64, standard_uncertainty: f64, expanded: f64, run: &OutputSummary, digits: u8) -> Validation {
    Validation {
        low_difference: libm::fabs(value - expanded - run.low),
        high_difference: libm::fabs(value + expanded - run.high),
        tolerance: numerical_tolerance(standard_uncertainty, digits),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn tolerance_of_digits() {
        for (u, digits, want) in [
            (0.35, 2, 0.005),
            (0.0994, 2, 0.0005),
            (0.0996, 2, 0.005),
            (9.4, 1, 0.5),
            (9.6, 1, 5.0),
            (10.0, 2, 0.5),
            (1234.0, 2, 50.0),
            (1e-300, 1, 0.5e-300),
            (0.0, 2, 0.0),
        ] {
            let got = numerical_tolerance(u, digits);
            assert!((got - want).abs() <= 1e-12 * want, "{u} {digits}: {got} {want}");
        }
    }
}
