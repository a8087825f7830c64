//! Exact decimals and ratios: a number as it was typed.

use super::round::power_of_two;
use core::cmp::Ordering;

/// An exact rational number ± numerator/denominator · 2ᵉ.
///
/// A typed decimal (`296.2`), a ratio (`5/3`) and a double are all of this form, so nothing is rounded on entry. The two
/// integers have 128 bits: about 38 significant digits, or powers of ten to 10^±38.
///
/// A double that is not a number is kept as an indefinite value, and is refused by the function that receives it.
///
/// ```
/// use endwall::number::Rational;
/// let temperature: Rational = "296.2".parse().unwrap();
/// assert_eq!(temperature, Rational::ratio(2962, 10).unwrap());
/// assert_ne!(temperature, Rational::from(296.2)); // the double nearest 296.2 is another number
/// assert_eq!(temperature.to_f64(), 296.2);
/// ```
#[derive(Clone, Copy, Debug)]
pub struct Rational {
    negative: bool,
    numerator: u128,
    denominator: u128,
    exponent: i32,
}

impl Rational {
    /// Zero.
    pub const ZERO: Self = Self::integer(0);
    /// One.
    pub const ONE: Self = Self::integer(1);

    /// A whole number.
    pub const fn integer(n: i64) -> Self {
        Self { negative: n < 0, numerator: n.unsigned_abs() as u128, denominator: 1, exponent: 0 }
    }

    /// numerator/denominator in lowest terms; `None` if the denominator is zero.
    pub const fn ratio(numerator: u128, denominator: u128) -> Option<Self> {
        if denominator == 0 {
            return None;
        }
        Some(Self { negative: false, numerator, denominator, exponent: 0 }.reduced())
    }

    /// ± mantissa·2ᵉ.
    pub(super) const fn scaled(negative: bool, mantissa: u128, exponent: i32) -> Self {
        Self { negative, numerator: mantissa, denominator: 1, exponent }.reduced()
    }

    /// The exact number that the double is.
    fn from_double(x: f64) -> Self {
        if !x.is_finite() {
            return Self { negative: x < 0.0, numerator: u128::from(!x.is_nan()), denominator: 0, exponent: 0 };
        }
        let bits = x.to_bits();
        let biased = ((bits >> 52) & 0x7ff) as i32;
        let fraction = bits & ((1 << 52) - 1);
        let mantissa = if biased == 0 { fraction } else { fraction | (1 << 52) };
        Self::scaled(x < 0.0, u128::from(mantissa), biased.max(1) - 1075)
    }

    /// In lowest terms, `None` where the power of two leaves ±2³⁰: then no sum of a few exponents leaves 32 bits.
    const fn limited(self) -> Option<Self> {
        const LIMIT: i32 = 1 << 30;
        if self.exponent < -LIMIT || self.exponent > LIMIT { None } else { Some(self.reduced()) }
    }

    /// Lowest terms: odd numerator and denominator (the powers of two in the exponent), no common factor; one form for each number.
    const fn reduced(mut self) -> Self {
        if self.denominator == 0 {
            return self;
        }
        if self.numerator == 0 {
            return Self { negative: false, numerator: 0, denominator: 1, exponent: 0 };
        }
        let up = self.numerator.trailing_zeros();
        let down = self.denominator.trailing_zeros();
        self.numerator >>= up;
        self.denominator >>= down;
        self.exponent += up as i32 - down as i32;
        let (mut a, mut b) = (self.numerator, self.denominator);
        while b != 0 {
            (a, b) = (b, a % b);
        }
        self.numerator /= a;
        self.denominator /= a;
        self
    }

    /// True unless it came from a double that is infinite or not a number.
    pub const fn is_finite(self) -> bool {
        self.denominator != 0
    }

    /// True if greater than zero.
    pub const fn is_positive(self) -> bool {
        self.is_finite() && self.numerator != 0 && !self.negative
    }

    /// True if equal to zero.
    pub const fn is_zero(self) -> bool {
        self.is_finite() && self.numerator == 0
    }

    /// True if less than zero.
    pub const fn is_negative(self) -> bool {
        self.is_finite() && self.negative
    }

    /// The absolute value.
    pub const fn abs(mut self) -> Self {
        self.negative = false;
        self
    }

    /// The number with its sign changed.
    pub const fn negated(mut self) -> Self {
        self.negative = !self.negative && self.numerator != 0;
        self
    }

    /// The numerator (odd or zero), the denominator (odd) and the power of two of |x|.
    pub(crate) const fn parts(self) -> (u128, u128, i32) {
        (self.numerator, self.denominator, self.exponent)
    }

    /// x·y, exactly; `None` where 128 bits do not hold it or an operand is not finite.
    pub fn checked_mul(self, other: Self) -> Option<Self> {
        if !self.is_finite() || !other.is_finite() {
            return None;
        }
        // Cross-cancelled first, so that a result that fits is found.
        let a = Self::ratio(self.numerator, other.denominator)?;
        let b = Self::ratio(other.numerator, self.denominator)?;
        Self {
            negative: self.negative != other.negative,
            numerator: a.numerator.checked_mul(b.numerator)?,
            denominator: a.denominator.checked_mul(b.denominator)?,
            exponent: self.exponent.checked_add(other.exponent)?.checked_add(a.exponent)?.checked_add(b.exponent)?,
        }
        .limited()
    }

    /// x/y, exactly; `None` where 128 bits do not hold it, y is zero or an operand is not finite.
    pub fn checked_div(self, other: Self) -> Option<Self> {
        if !other.is_finite() || other.numerator == 0 {
            return None;
        }
        self.checked_mul(Self {
            negative: other.negative,
            numerator: other.denominator,
            denominator: other.numerator,
            exponent: other.exponent.checked_neg()?,
        })
    }

    /// x + y, exactly; `None` where 128 bits do not hold it or an operand is not finite.
    pub fn checked_add(self, other: Self) -> Option<Self> {
        if !self.is_finite() || !other.is_finite() {
            return None;
        }
        let exponent = if self.numerator == 0 {
            other.exponent
        } else if other.numerator == 0 {
            self.exponent
        } else {
            self.exponent.min(other.exponent)
        };
        let common = {
            let (mut a, mut b) = (self.denominator, other.denominator);
            while b != 0 {
                (a, b) = (b, a % b);
            }
            a
        };
        let denominator = self.denominator.checked_mul(other.denominator / common)?;
        let scaled = |x: Self| -> Option<u128> {
            let shift = if x.numerator == 0 { 0 } else { u32::try_from(x.exponent.checked_sub(exponent)?).ok()? };
            let wide = x.numerator.checked_mul(denominator / x.denominator)?;
            (shift <= wide.leading_zeros()).then(|| wide.checked_shl(shift).unwrap_or(0))
        };
        let (a, b) = (scaled(self)?, scaled(other)?);
        let (negative, numerator) = if self.negative == other.negative {
            (self.negative, a.checked_add(b)?)
        } else if a >= b {
            (self.negative, a - b)
        } else {
            (other.negative, b - a)
        };
        Self { negative, numerator, denominator, exponent }.limited()
    }

    /// x − y, exactly; `None` where 128 bits do not hold it or an operand is not finite.
    pub fn checked_sub(self, other: Self) -> Option<Self> {
        self.checked_add(other.negated())
    }

    /// Order by value; `None` if one is not finite or 128 bits do not hold the difference.
    pub fn compare(self, other: Self) -> Option<Ordering> {
        if self.is_finite() && other.is_finite() && (self.is_positive() != other.is_positive() || self.negative != other.negative) {
            return Some(self.signum().cmp(&other.signum()));
        }
        let difference = self.checked_sub(other)?;
        Some(difference.signum().cmp(&0))
    }

    const fn signum(self) -> i32 {
        if self.numerator == 0 {
            0
        } else if self.negative {
            -1
        } else {
            1
        }
    }

    /// The integer, if it is one that fits.
    pub fn to_i64(self) -> Option<i64> {
        let shift = u32::try_from(self.exponent).ok()?;
        if self.denominator != 1 || shift > self.numerator.leading_zeros() {
            return None;
        }
        let magnitude = i128::try_from(self.numerator.checked_shl(shift).unwrap_or(0)).ok()?;
        i64::try_from(if self.negative { -magnitude } else { magnitude }).ok()
    }

    /// The double that the number is, where that shows without a division: a whole number of 53 bits times a power of two.
    pub(super) fn as_double(self) -> Option<f64> {
        let shows = self.denominator == 1 && self.numerator < 1 << 53 && self.exponent.abs() <= 900;
        let magnitude = |exponent| self.numerator as u64 as f64 * power_of_two(exponent);
        shows.then(|| if self.negative { -magnitude(self.exponent) } else { magnitude(self.exponent) })
    }

    /// The nearest double, ties to even; infinite beyond the range of a double.
    pub fn to_f64(self) -> f64 {
        if let Some(exact) = self.as_double() {
            return exact;
        }
        let magnitude = if self.denominator == 0 {
            if self.numerator == 0 { f64::NAN } else { f64::INFINITY }
        } else {
            nearest(self.numerator, self.denominator, self.exponent)
        };
        if self.negative { -magnitude } else { magnitude }
    }
}

/// RN(numerator/denominator·2ᵉ).
fn nearest(numerator: u128, denominator: u128, exponent: i32) -> f64 {
    if numerator == 0 {
        return 0.0;
    }
    // The quotient by long division: leading part, then bits one by one until 66 are known, with what is left as sticky.
    let mut quotient = numerator / denominator;
    let mut rest = numerator % denominator;
    let mut exponent = i64::from(exponent);
    while quotient >> 66 == 0 && rest != 0 {
        let twice_exceeds = rest >= denominator - rest;
        rest = if twice_exceeds { rest - (denominator - rest) } else { rest + rest };
        quotient = (quotient << 1) | u128::from(twice_exceeds);
        exponent -= 1;
    }
    let length = 128 - i64::from(quotient.leading_zeros());
    // Bits kept: 53, fewer where the result is subnormal.
    let lowest = (exponent + length - 53).max(-1074);
    let drop = lowest - exponent;
    if drop <= 0 {
        return times_power_of_two(quotient, exponent);
    }
    let mantissa = if drop > 128 {
        0
    } else {
        // All 128 bits may be dropped and still round up.
        let kept = quotient.checked_shr(drop as u32).unwrap_or(0);
        let lost = quotient - kept.checked_shl(drop as u32).unwrap_or(0);
        let half = 1 << (drop - 1);
        kept + u128::from(lost > half || (lost == half && (rest != 0 || kept & 1 == 1)))
    };
    times_power_of_two(mantissa, lowest)
}

/// m·2ⁿ where that is a double or overflows.
fn times_power_of_two(mantissa: u128, exponent: i64) -> f64 {
    libm::scalbn(mantissa as f64, exponent.clamp(-4000, 4000) as i32)
}

impl PartialEq for Rational {
    fn eq(&self, other: &Self) -> bool {
        self.is_finite()
            && other.is_finite()
            && (self.negative, self.numerator, self.denominator, self.exponent)
                == (other.negative, other.numerator, other.denominator, other.exponent)
    }
}

impl From<f64> for Rational {
    fn from(x: f64) -> Self {
        Self::from_double(x)
    }
}

impl From<u32> for Rational {
    fn from(n: u32) -> Self {
        Self::integer(i64::from(n))
    }
}

impl From<i32> for Rational {
    fn from(n: i32) -> Self {
        Self::integer(i64::from(n))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn doubles_go_in_and_come_back() {
        for x in [0.1, 1.0, 5e-324, 1.1e-310, f64::MAX, f64::MIN_POSITIVE, -3.25, 2f64.powi(200), 1.0 + f64::EPSILON] {
            assert_eq!(Rational::from(x).to_f64(), x);
        }
        // Just below the least double, with all 128 bits in use.
        let least = Rational::scaled(false, u128::MAX, -1202);
        assert_eq!(least.to_f64(), 5e-324);
        assert_eq!(Rational::scaled(false, 1 << 127, -1202).to_f64(), 0.0);
        assert!(Rational::from(f64::NAN).to_f64().is_nan());
        assert_eq!(Rational::from(f64::NEG_INFINITY).to_f64(), f64::NEG_INFINITY);
    }

    #[test]
    fn arithmetic_is_exact() {
        let r = |text: &str| text.parse::<Rational>().unwrap();
        assert_eq!(r("0.1").checked_add(r("0.2")), Some(r("0.3")));
        assert_eq!(r("5/3").checked_sub(r("1")), Some(r("2/3")));
        assert_eq!(r("1.5").checked_mul(r("-2/3")), Some(r("-1")));
        assert_eq!(r("1").checked_div(r("7")), Some(r("1/7")));
        assert_eq!(r("1/3").compare(r("0.3333333333333333")), Some(Ordering::Greater));
        assert_eq!(r("-1").compare(r("0")), Some(Ordering::Less));
    }

    /// Powers of two up to 2^(2³⁰) multiply and add without overflow of the exponent; beyond, nothing is returned.
    #[test]
    fn a_power_of_two_that_is_too_large_is_refused() {
        let mut power = Rational::from(2.0);
        for _ in 0..30 {
            power = power.checked_mul(power).unwrap();
        }
        assert_eq!(power.checked_mul(power), None);
        let twice = power.checked_add(power).unwrap();
        assert_eq!(twice.checked_add(twice), None);
        assert_eq!(power.checked_div(twice), Some(Rational::ratio(1, 2).unwrap()));
        assert_eq!(power.to_f64(), f64::INFINITY);
    }
}
