//! Proven logarithm and exponential: [`Ball`] by reduction and series, [`Enclosure`] by monotonicity at both ends.
//!
//! No tables. Every constant is derived here from whole numbers, so that there is none to trust.

use super::ball::Ball;
use super::enclosure::{Enclosure, Quality};
use super::round::{in_range, power_of_two};
use super::traits::{Elementary, ElementarySlopes, Semifield};

/// Terms of a series are added until the next one is below 2⁻¹¹⁰ of the sum.
const SMALL: f64 = f64::from_bits((1023 - 110) << 52);

/// The exponential's argument is halved this often before its series; each halving costs one squaring and one bit.
const HALVINGS: i32 = 6;

/// eʳ for |r| ≤ 0.36: (Taylor series at r/2⁶)^(2⁶).
///
/// With |s| ≤ 0.36/64 = 0.005625, the terms after s¹³/13! sum to less than s¹⁴/14!·(1 + s) < 2⁻¹⁴⁰.
fn exp_reduced(r: Ball) -> Ball {
    let s = r.scaled(-HALVINGS);
    let one = Ball::whole(1);
    let series = (1..=13).rev().fold(one, |sum, n| one + s * sum / Ball::whole(n));
    (0..HALVINGS).fold(series.widened(SMALL * power_of_two(-30)), |power, _| power * power)
}

/// ln 2 = 2·artanh(1/3) = (2/3)·Σ 9⁻ⁿ/(2n+1); the terms after n = 36 sum to less than 9⁻³⁷ < 2⁻¹¹⁷.
fn ln_2() -> Ball {
    let (one, nine) = (Ball::whole(1), Ball::whole(9));
    let sum = (0..=36).rev().fold(Ball::from(0.0), |sum, n| sum / nine + one / Ball::whole(2 * n + 1));
    (sum + sum).widened(SMALL * power_of_two(-6)) / Ball::whole(3)
}

/// artanh(s)/s = Σ s²ⁿ/(2n+1) for |s| ≤ 1/5: the terms after n = 23 sum to less than 25⁻²⁴ < 2⁻¹¹¹.
fn artanh_ratio(s: Ball) -> Ball {
    let square = s * s;
    let sum = (0..=23).rev().fold(Ball::from(0.0), |sum, n| sum * square + Ball::whole(1) / Ball::whole(2 * n + 1));
    sum.widened(SMALL)
}

/// True where two terms of a Taylor series leave less than 2⁻²⁴⁰, and products could leave the range of error-free transforms.
fn is_tiny(x: Ball) -> bool {
    x.magnitude() <= power_of_two(-120)
}

/// The first two terms of a series in tiny x whose rest is below x² < 2⁻¹²⁰·|x|.
fn linear(first: Ball, term: Ball, x: Ball) -> Ball {
    let magnitude = x.magnitude();
    // The bound may itself underflow.
    let rest = if magnitude == 0.0 { 0.0 } else { magnitude * power_of_two(-120) + power_of_two(-1000) };
    (first + term).widened(rest)
}

/// A ball for which the bounds of the series are small; a wider one is treated by its ends.
fn is_narrow(x: Ball) -> bool {
    x.radius() <= x.nearest().abs() * power_of_two(-20)
}

/// The ball around the hull of a monotone function's values at both ends of a wide ball.
fn by_ends(x: Ball, f: impl Fn(Ball) -> Ball) -> Ball {
    let ends = x.enclosure();
    if !ends.is_bounded() {
        return Ball::UNKNOWN;
    }
    let (low, high) = (f(Ball::from(ends.low())), f(Ball::from(ends.high())));
    let hull = low.enclosure().hull(high.enclosure());
    if hull.is_bounded() { Ball::around(hull) } else { Ball::UNKNOWN }
}

impl Elementary for Ball {
    /// Near 1 by ln(1+x)/x, whose relative error stays small. Elsewhere x = m·2ⁿ with m within √2 of 1; an approximate logarithm y of m is corrected by ln(m·e⁻ʸ), whose argument is within 2⁻⁴⁰ of 1.
    fn ln(self) -> Self {
        if !self.is_certainly_positive() {
            return Self::UNKNOWN;
        }
        if !is_narrow(self) {
            return by_ends(self, Self::ln);
        }
        let one = Self::whole(1);
        let from_one = self - one;
        if from_one.magnitude() <= 0.25 {
            return from_one * from_one.log1p_ratio();
        }
        // From the ends of the range, where a double may be subnormal, by 2^±200 into the middle.
        let moved = if in_range(self.nearest()) {
            0
        } else if self.nearest() < 1.0 {
            200
        } else {
            -200
        };
        let centred = self.scaled(moved);
        let exponent = ((centred.nearest().to_bits() >> 52) & 0x7ff) as i32 - 1023;
        let mantissa = centred.nearest() * power_of_two((-exponent).clamp(-1000, 1000));
        let of_mantissa = if mantissa > core::f64::consts::SQRT_2 { exponent + 1 } else { exponent };
        let (m, n) = (centred.scaled(-of_mantissa), of_mantissa - moved);
        let y = libm::log(m.nearest());
        let d = m * exp_reduced(Self::from(-y)) - one;
        let distance = d.magnitude();
        if distance > power_of_two(-15) {
            return Self::UNKNOWN;
        }
        // ln(1 + d) = d − d²/2 + d³/3 − d⁴/4 ± …: what follows the fourth term is below |d|⁵/(5(1 − |d|)).
        let quarter = Self::whole(1) / Self::whole(4);
        let third = Self::whole(1) / Self::whole(3);
        let series = d * (one - d * (one.halved() - d * (third - d * quarter)));
        let rest = distance * distance * distance * distance * distance;
        let whole = Self::from(f64::from(n)) * ln_2();
        (whole + (Self::from(y) + series)).widened(rest + power_of_two(-1000))
    }

    /// x = n·ln 2 + r.
    fn exp(self) -> Self {
        let x = self.nearest();
        if self.radius() > power_of_two(-10) && self.enclosure().is_bounded() {
            return by_ends(self, Self::exp);
        }
        if is_tiny(self) {
            return linear(Self::whole(1), self, self);
        }
        // Below this the result is positive and less than 2⁻⁹³⁶.
        if x < -650.0 && self.radius() <= power_of_two(-10) {
            return Self::from(0.0).widened(power_of_two(-936));
        }
        // Beyond this it leaves the range of error-free products.
        if !(x.abs() <= 650.0 && self.radius() <= power_of_two(-10)) {
            return Self::UNKNOWN;
        }
        let n = libm::round(x / core::f64::consts::LN_2);
        let r = self - Self::from(n) * ln_2();
        exp_reduced(r).scaled(n as i32)
    }

    /// 2·artanh(s)/x with s = x/(2+x), that is (2/(2+x))·artanh(s)/s, for x near zero; elsewhere by the quotient.
    fn log1p_ratio(self) -> Self {
        let x = self.nearest();
        if is_tiny(self) {
            return linear(Self::whole(1), -self.halved(), self);
        }
        if !is_narrow(self) && self.radius() > power_of_two(-60) {
            return by_ends(self, Self::log1p_ratio);
        }
        if x.abs() <= 0.25 && self.radius() <= power_of_two(-10) {
            let below = Self::whole(2) + self;
            return (Self::whole(2) / below) * artanh_ratio(self / below);
        }
        (Self::whole(1) + self).ln() / self
    }

    /// Taylor series Σ xⁿ/(n+1)! for |x| ≤ 0.51: the terms after n = 24 sum to less than 2⁻¹¹³; elsewhere by the quotient.
    fn expm1_ratio(self) -> Self {
        if is_tiny(self) {
            return linear(Self::whole(1), self.halved(), self);
        }
        if !is_narrow(self) && self.radius() > power_of_two(-60) {
            return by_ends(self, Self::expm1_ratio);
        }
        if self.nearest().abs() <= 0.5 && self.radius() <= power_of_two(-10) {
            let one = Self::whole(1);
            let sum = (2..=25).rev().fold(one, |sum, n| one + self * sum / Self::whole(n));
            return sum.widened(SMALL);
        }
        (self.exp() - Self::whole(1)) / self
    }
}

impl ElementarySlopes for Ball {
    /// −Σ n(−x)ⁿ⁻¹/(n+1) for |x| ≤ 1/8: the terms after n = 40 sum to less than 2⁻¹¹⁹; elsewhere by the quotient rule.
    fn log1p_ratio_slope(self) -> Self {
        if is_tiny(self) {
            return (-Self::whole(1).halved()).widened(self.magnitude());
        }
        if self.magnitude() <= 0.125 {
            let sum = (1..=40).rev().fold(Self::from(0.0), |sum, n| Self::whole(n) / Self::whole(n + 1) - self * sum);
            return -(sum.widened(SMALL));
        }
        (Self::whole(1) / (Self::whole(1) + self) - self.log1p_ratio()) / self
    }

    /// Σ n·xⁿ⁻¹/(n+1)! for |x| ≤ 1/2: the terms after n = 25 sum to less than 2⁻¹¹⁰; elsewhere by the quotient rule.
    fn expm1_ratio_slope(self) -> Self {
        if is_tiny(self) {
            return Self::whole(1).halved().widened(self.magnitude());
        }
        if self.magnitude() <= 0.5 {
            // 1/2 + x(2/6 + x(3/24 + …)): the ratio of neighbouring coefficients is (n+1)/(n(n+2)).
            let one = Self::whole(1);
            let sum = (1..=25).rev().fold(one, |sum, n| one + self * sum * Self::whole(n + 1) / (Self::whole(n) * Self::whole(n + 2)));
            return sum.widened(SMALL).halved();
        }
        (self.exp() - self.expm1_ratio()) / self
    }
}

/// f at both ends for an increasing f, with the sticky mark of the argument.
fn increasing(x: Enclosure, f: impl Fn(Ball) -> Ball) -> Enclosure {
    if !x.is_bounded() {
        return Enclosure::UNKNOWN.marked(x.quality());
    }
    let low = f(Ball::from(x.low())).enclosure();
    let high = if x.is_exact() { low } else { f(Ball::from(x.high())).enclosure() };
    low.hull(high).marked(x.quality())
}

/// f at both ends for a decreasing f.
fn decreasing(x: Enclosure, f: impl Fn(Ball) -> Ball) -> Enclosure {
    -increasing(x, |end| -f(end))
}

/// The part of an argument above a pole of a logarithm, and the mark for what was cut off.
fn above(x: Enclosure, pole: f64) -> Option<(Enclosure, Quality)> {
    if x.high() <= pole {
        None
    } else if x.low() <= pole {
        Some((Enclosure::UNKNOWN, Quality::PartlyUndefined))
    } else {
        Some((x, x.quality()))
    }
}

impl Elementary for Enclosure {
    fn ln(self) -> Self {
        above(self, 0.0).map_or(Self::UNDEFINED, |(x, mark)| increasing(x, Ball::ln).marked(mark))
    }

    fn exp(self) -> Self {
        // eˣ > 0 whatever else is unknown.
        increasing(self, Ball::exp).at_least_zero()
    }

    fn log1p_ratio(self) -> Self {
        above(self, -1.0).map_or(Self::UNDEFINED, |(x, mark)| decreasing(x, Ball::log1p_ratio).marked(mark))
    }

    fn expm1_ratio(self) -> Self {
        increasing(self, Ball::expm1_ratio)
    }
}

impl ElementarySlopes for Enclosure {
    fn log1p_ratio_slope(self) -> Self {
        above(self, -1.0).map_or(Self::UNDEFINED, |(x, mark)| increasing(x, Ball::log1p_ratio_slope).marked(mark))
    }

    fn expm1_ratio_slope(self) -> Self {
        increasing(self, Ball::expm1_ratio_slope)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn known_values_are_exact_or_neighbours() {
        assert_eq!(Enclosure::from(1.0).ln(), Enclosure::from(0.0));
        assert_eq!(Enclosure::from(0.0).exp(), Enclosure::from(1.0));
        assert!(Enclosure::from(2.0).ln().contains(core::f64::consts::LN_2));
        assert!(Enclosure::from(1.0).exp().contains(core::f64::consts::E));
        assert_eq!(Enclosure::from(0.0).log1p_ratio(), Enclosure::from(1.0));
        assert_eq!(Enclosure::from(1e-200).exp(), Enclosure::new(1.0, 1.0f64.next_up()).unwrap());
    }

    #[test]
    fn a_pair_of_inverses_meets() {
        let mut x = 1e-250;
        while x < 1e250 {
            let logarithm = Enclosure::from(x).ln();
            assert!(logarithm.width_in_ulp() <= 2, "{x} {logarithm:?}");
            assert!(logarithm.exp().contains(x));
            x *= 7.3;
        }
        for x in [-600.0, -20.0, -1e-3, -1e-12, 1e-300, 1e-9, 0.3, 0.5, 0.6, 2.0, 88.0, 640.0] {
            let power = Enclosure::from(x).exp();
            assert!(power.width_in_ulp() <= 2, "{x} {power:?}");
            assert!(power.ln().contains(x), "{x} {power:?} {:?}", power.ln());
        }
    }

    /// At both ends of the range of doubles, subnormal numbers among them.
    #[test]
    fn the_logarithm_holds_for_every_double() {
        for x in [5e-324, 1e-310, f64::MIN_POSITIVE, 1e-305, 1e-301, 1e-289, 1e289, 1e301, 1e302, 1e305, f64::MAX] {
            let value = Enclosure::from(x).ln();
            assert!(value.width_in_ulp() <= 2, "{x} {value:?}");
            // libm is within one ulp.
            assert!((value.middle() - libm::log(x)).abs() <= 2e-13, "{x} {value:?} {}", libm::log(x));
            let ratio = Enclosure::from(x).log1p_ratio();
            // A quotient at the upper end of the range is unknown, never wrong.
            assert!(!ratio.is_proven() || (ratio.middle() / x.log1p_ratio() - 1.0).abs() < 1e-14, "{x} {ratio:?}");
        }
    }

    #[test]
    fn ratios_and_slopes_agree_across_their_branches() {
        for x in [-0.9, -0.3, -0.26, -0.24, -0.13, -0.1, -1e-9, 1e-30, 1e-5, 0.12, 0.13, 0.24, 0.26, 0.49, 0.51, 3.0, 40.0] {
            let point = Enclosure::from(x);
            for f in [Enclosure::log1p_ratio, Enclosure::expm1_ratio, Enclosure::log1p_ratio_slope, Enclosure::expm1_ratio_slope] {
                let value = f(point);
                assert!(value.width_in_ulp() <= 2, "{x} {value:?}");
            }
            let plain = [x.log1p_ratio(), x.expm1_ratio(), x.log1p_ratio_slope(), x.expm1_ratio_slope()];
            let proven = [point.log1p_ratio(), point.expm1_ratio(), point.log1p_ratio_slope(), point.expm1_ratio_slope()];
            for (plain, proven) in plain.into_iter().zip(proven) {
                assert!((plain - proven.middle()).abs() <= 2e-14 * plain.abs(), "{x} {plain} {proven:?}");
            }
        }
    }

    #[test]
    fn outside_the_domain_says_so() {
        assert_eq!(Enclosure::from(-1.0).ln().quality(), Quality::Undefined);
        assert_eq!(Enclosure::new(-1.0, 1.0).unwrap().ln().quality(), Quality::PartlyUndefined);
        assert_eq!(Enclosure::from(-1.0).log1p_ratio().quality(), Quality::Undefined);
        assert!(Enclosure::from(1e4).exp().quality() == Quality::Unbounded);
    }
}
