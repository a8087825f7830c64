//! Proven logarithm and exponential: [`Ball`] by reduction and series, [`Enclosure`] by monotonicity at both ends.
//!
//! The first terms of a series are summed as balls, the rest in plain f64 with a bound for its rounding: it is so much smaller that this costs
//! no digit that matters.

use super::ball::Ball;
use super::constants::{FACTORIAL, LN_2, LOGARITHM, ODD};
use super::enclosure::{Enclosure, Quality};
use super::round::{in_range, power_of_two};
use super::traits::{Elementary, ElementarySlopes, Semifield};

/// Terms of a series are added until the next one is below 2⁻¹¹⁰ of the sum.
const SMALL: f64 = power_of_two(-110);

/// The exponential's argument is halved this often before its series; each halving costs one squaring and one bit.
const HALVINGS: i32 = 6;

/// Up to this distance from 1 the logarithm is a series in it; beyond it what cancels between the terms of the other form is four bits at most.
const NEAR_ONE: f64 = power_of_two(-4);

/// A constant of the table, good to 2⁻¹⁰⁶ of its value; exact where nothing is left for the tail.
#[inline(always)]
fn constant((head, tail): (f64, f64)) -> Ball {
    Ball::pair(head, tail, if tail == 0.0 { 0.0 } else { head.abs() * power_of_two(-106) })
}

/// eʳ for |r| ≤ 0.36: (Taylor series at r/2⁶)^(2⁶).
///
/// With |s| ≤ 0.36/64 < 2⁻⁷: the terms s⁷/7! to s¹¹/11! in plain f64 have a relative error below 2⁻⁴⁸, and what follows is below 2⁻²⁵ of their last bit;
/// together less than |s|⁷·2⁻⁵⁸.
fn exp_reduced(r: Ball) -> Ball {
    let s = r.scaled(-HALVINGS);
    let x = s.nearest();
    let power = x * x * x * x * x * x * x;
    let rest = power * (1.0 + x / 8.0 * (1.0 + x / 9.0 * (1.0 + x / 10.0 * (1.0 + x / 11.0)))) / 5040.0;
    let [head @ .., last] = FACTORIAL;
    let start = constant(last);
    let series = head.iter().rev().fold(start, |sum, term| constant(*term) + s * sum);
    // The rest moves by less than the radius of s times |s|⁶/6!.
    let series = (series + Ball::from(rest)).widened(power.abs() * power_of_two(-58) + s.radius() * power_of_two(-50));
    (0..HALVINGS).fold(series, |power, _| power * power)
}

/// The doubles nearest 1/(2n + 1).
const ODD_NEAREST: [f64; 16] = {
    let mut table = [0.0; 16];
    let mut n = 0;
    while n < table.len() {
        table[n] = 1.0 / (2 * n + 1) as f64;
        n += 1;
    }
    table
};

/// The terms of artanh(s)/s = Σ qⁿ/(2n + 1), q = s², before the term `FIRST` as balls, that one and those before the term `END` in plain f64.
///
/// The plain part is q times a sum below 1/4 for `FIRST` ≥ 2. Of its roundings those of the first coefficient, of the last sum, of q and of the product count,
/// u each, those before weigh q times as much: less than 2⁻⁵²·q. It moves with q by less than 64 times. What is left out,
/// q^(`END` − `FIRST` + 1)/(2·`END` + 1)/(1 − q), has to be less than 2⁻⁵²·q.
#[inline(always)]
fn artanh_ratio<const FIRST: usize, const END: usize>(s: Ball) -> Ball {
    let q = s * s;
    let x = q.nearest();
    let plain = x * ODD_NEAREST[FIRST..END].iter().rev().fold(0.0, |sum, term| sum * x + term);
    let rest = Ball::from(plain).widened(x * power_of_two(-50) + q.radius() * 64.0);
    let start = constant(ODD[FIRST - 1]) + rest;
    ODD[..FIRST - 1].iter().rev().fold(start, |sum, term| constant(*term) + q * sum)
}

/// artanh(s)/s for |s| ≤ 1/31: q < 2⁻⁹·⁹, so q⁵ < 2⁻⁴⁹, and q⁶ < 2⁻⁵⁹ is left out.
fn artanh_ratio_of_fraction(s: Ball) -> Ball {
    artanh_ratio::<5, 11>(s)
}

/// artanh(s)/s for |s| ≤ 2⁻⁸ (1 + 2⁻²⁰): q² < 2⁻³¹, and q⁴ < 2⁻⁶³ is left out.
fn artanh_ratio_of_trace(s: Ball) -> Ball {
    artanh_ratio::<2, 6>(s)
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

/// ln x of a narrow ball of positive numbers, with an error relative to 1: x = m·2ⁿ with m in [1, 2).
fn ln_by_table(x: Ball) -> Ball {
    // From the ends of the range, where a double may be subnormal, by 2^±200 into the middle.
    let moved = if in_range(x.nearest()) {
        0
    } else if x.nearest() < 1.0 {
        200
    } else {
        -200
    };
    let centred = if moved == 0 { x } else { x.scaled(moved) };
    let exponent = ((centred.nearest().to_bits() >> 52) & 0x7ff) as i32 - 1023;
    let mantissa = centred.nearest() * power_of_two((-exponent).clamp(-1000, 1000));
    let (m, n) = (centred.scaled(-exponent), exponent - moved);
    // ln m = ln c + 2·artanh((m − c)/(m + c)), c the middle of the 64th of [1, 2) in which m lies.
    let index = ((mantissa - 1.0) * 64.0) as u32;
    let Some(logarithm) = LOGARITHM.get(index as usize) else { return Ball::UNKNOWN };
    let c = Ball::from(1.0 + f64::from(2 * index + 1) / 128.0);
    let s = (m - c) / (m + c);
    let of_m = constant(*logarithm) + (s * artanh_ratio_of_trace(s)).doubled();
    Ball::from(f64::from(n)) * constant(LN_2) + of_m
}

impl Elementary for Ball {
    /// Near 1 by ln(1+x)/x, whose relative error stays small.
    fn ln(self) -> Self {
        if !self.is_certainly_positive() {
            return Self::UNKNOWN;
        }
        if !is_narrow(self) {
            return by_ends(self, Self::ln);
        }
        let one = Self::whole(1);
        let from_one = self - one;
        if from_one.magnitude() <= NEAR_ONE {
            return from_one * from_one.log1p_ratio();
        }
        ln_by_table(self)
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
        let r = self - Self::from(n) * constant(LN_2);
        exp_reduced(r).scaled(n as i32)
    }

    /// 2·artanh(s)/x with s = x/(2+x), that is (2/(2+x))·artanh(s)/s, for |x| ≤ 1/16; elsewhere by the quotient.
    fn log1p_ratio(self) -> Self {
        if is_tiny(self) {
            return linear(Self::whole(1), -self.halved(), self);
        }
        if !is_narrow(self) && self.radius() > power_of_two(-60) {
            return by_ends(self, Self::log1p_ratio);
        }
        if self.magnitude() <= NEAR_ONE {
            let below = Self::whole(2) + self;
            return (Self::whole(2) / below) * artanh_ratio_of_fraction(self / below);
        }
        let whole = Self::whole(1) + self;
        if whole.is_certainly_positive() && is_narrow(whole) {
            return ln_by_table(whole) / self;
        }
        whole.ln() / self
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

    /// artanh(s)/s, s = n/d < 1/3, by a series of whole numbers, to 2⁻¹⁰⁸.
    fn artanh_of(n: u32, d: u32) -> Ball {
        let q = (Ball::whole(n) / Ball::whole(d)).squared();
        let sum = (0..=40).rev().fold(Ball::from(0.0), |sum, n| sum * q + Ball::whole(1) / Ball::whole(2 * n + 1));
        sum.widened(power_of_two(-120))
    }

    #[test]
    fn the_constants_are_what_they_are_called() {
        // Both balls hold the true constant, and neither is wider than 2⁻¹⁰⁰ of it.
        let agrees = |table: (f64, f64), derived: Ball| {
            let difference = constant(table) - derived;
            assert!(difference.enclosure().contains(0.0), "{table:?}");
            assert!(difference.radius() < table.0 * power_of_two(-100), "{table:?}");
        };
        let ratio = |n: u32, d: u32| Ball::whole(n) / Ball::whole(d);
        agrees(LN_2, ratio(2, 3) * artanh_of(1, 3));
        for (n, odd) in ODD.into_iter().enumerate() {
            agrees(odd, ratio(1, 2 * n as u32 + 1));
        }
        for (n, factorial) in FACTORIAL.into_iter().enumerate() {
            agrees(factorial, (1..=n as u32).fold(Ball::whole(1), |product, n| product / Ball::whole(n)));
        }
        for (i, logarithm) in LOGARITHM.into_iter().enumerate() {
            // ln c = 2·artanh((c − 1)/(c + 1)), c − 1 = n/128.
            let n = 2 * i as u32 + 1;
            agrees(logarithm, ratio(2 * n, 256 + n) * artanh_of(n, 256 + n));
        }
    }

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
