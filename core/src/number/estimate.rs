//! [`Estimate`]: one double with a running error radius.

use super::ball::Ball;
use super::constants::{LN_2, LOGARITHM};
use super::round::{UNIT, power_of_two, sqrt};
use super::traits::{Decided, Elementary, Positive, Semifield};
use core::ops::{Add, Div, Mul, Neg, Sub};

/// A real number within `radius` of `middle`: what a [`Ball`] is, to 15 digits, at a few times the cost of a plain double.
///
/// For what a proof needs only roughly: the sign of something that is far from zero, the slope in a step of interval Newton. A radius that is infinite or
/// not a number says that nothing is known; it stays so, and no sign is certain.
///
/// Every rounding error is at most u times the rounded result (J. H. Wilkinson, Rounding Errors in Algebraic Processes, 1963, chapter 1, from memory).
#[derive(Clone, Copy, Debug)]
pub(crate) struct Estimate {
    middle: f64,
    radius: f64,
}

/// Covers the at most ten roundings of a sum of non-negative terms.
const SLACK: f64 = 1.0 + 16.0 * f64::EPSILON;

/// Added wherever something may have underflowed: more than 2⁻¹⁰⁷⁴ over a divisor, see [`LEAST`].
const TINY: f64 = power_of_two(-700);

/// Divisors and arguments of a root below this are not treated.
const LEAST: f64 = power_of_two(-300);

/// Up to this the ratio ln(1 + x)/x is a series.
const NEAR_ZERO: f64 = power_of_two(-4);

impl From<f64> for Estimate {
    /// The exact number x.
    #[inline(always)]
    fn from(x: f64) -> Self {
        Self { middle: x, radius: 0.0 }
    }
}

impl From<Ball> for Estimate {
    #[inline(always)]
    fn from(x: Ball) -> Self {
        Self { middle: x.nearest(), radius: x.radius_about_nearest() }
    }
}

impl From<Estimate> for Ball {
    #[inline(always)]
    fn from(x: Estimate) -> Self {
        // A radius that is not a number becomes infinite.
        Self::from(x.middle).widened(if x.radius < f64::INFINITY { x.radius } else { f64::INFINITY })
    }
}

impl Estimate {
    /// The same, larger by a non-negative amount.
    #[inline(always)]
    pub(crate) fn widened(self, by: f64) -> Self {
        Self { radius: (self.radius + by) * SLACK, ..self }
    }

    /// A computed middle with a radius where the condition holds, else nothing.
    #[inline(always)]
    fn only_if(known: bool, middle: f64, radius: f64) -> Self {
        Self { middle, radius: if known { radius } else { f64::INFINITY } }
    }

    /// Σ qⁿ/(2n + 1) for q ≤ 1/961, the series of artanh(s)/s in q = s²: the terms after n = 4 sum to less than 2⁻⁵²; the sum of five terms has an error
    /// below 2⁻⁵¹, and a slope below 1/2.
    #[inline(always)]
    fn artanh_ratio(q: Self) -> Self {
        let x = q.middle;
        let sum = 1.0 + x * (1.0 / 3.0 + x * (1.0 / 5.0 + x * (1.0 / 7.0 + x * (1.0 / 9.0))));
        Self { middle: sum, radius: power_of_two(-50) + q.radius }
    }
}

impl Semifield for Estimate {
    #[inline(always)]
    fn whole(n: u32) -> Self {
        Self::from(f64::from(n))
    }

    #[inline(always)]
    fn doubled(self) -> Self {
        Self { middle: self.middle + self.middle, radius: self.radius + self.radius }
    }

    #[inline(always)]
    fn halved(self) -> Self {
        Self { middle: self.middle * 0.5, radius: self.radius * 0.5 + TINY }
    }
}

impl Add for Estimate {
    type Output = Self;
    /// A sum of doubles never underflows inexactly.
    #[inline(always)]
    fn add(self, other: Self) -> Self {
        let middle = self.middle + other.middle;
        Self { middle, radius: (self.radius + other.radius + middle.abs() * UNIT) * SLACK }
    }
}

impl Neg for Estimate {
    type Output = Self;
    #[inline(always)]
    fn neg(self) -> Self {
        Self { middle: -self.middle, ..self }
    }
}

impl Sub for Estimate {
    type Output = Self;
    #[inline(always)]
    fn sub(self, other: Self) -> Self {
        self + -other
    }
}

impl Mul for Estimate {
    type Output = Self;
    /// |AB − ab| ≤ |a|s + (|b| + s)r with the radii r and s.
    #[inline(always)]
    fn mul(self, other: Self) -> Self {
        let middle = self.middle * other.middle;
        let spread = self.middle.abs() * other.radius + (other.middle.abs() + other.radius) * self.radius;
        Self { middle, radius: (spread + middle.abs() * UNIT) * SLACK + TINY }
    }
}

impl Div for Estimate {
    type Output = Self;
    /// |A/B − a/b| ≤ (r + |a/b|s)/(|b| − s) with the radii r and s.
    #[inline(always)]
    fn div(self, other: Self) -> Self {
        let size = other.middle.abs();
        let middle = self.middle / other.middle;
        let spread = (self.radius + middle.abs() * other.radius) / (size - other.radius);
        // At most half of the divisor is unknown, so that what underflows in the numerator stays below 2⁻⁷⁷².
        let known = other.radius <= size * 0.5 && size >= LEAST;
        Self::only_if(known, middle, (spread + middle.abs() * UNIT) * SLACK + TINY)
    }
}

impl Positive for Estimate {
    /// |√X − √x| ≤ r/√x.
    #[inline(always)]
    fn sqrt(self) -> Self {
        let root = sqrt(self.middle);
        let known = self.middle > self.radius && self.middle >= LEAST;
        Self::only_if(known, root, (self.radius / root + root * UNIT) * SLACK + TINY)
    }
}

impl Elementary for Estimate {
    /// x = c·f·2ⁿ with c from the table: n·ln 2 + ln c + 2·artanh(s), s = (f − 1)/(f + 1) below 2⁻⁸.
    ///
    /// Errors in units of u: 1.4 for each factor of n·ln 2 (its constant and the product), 0.5 for the table, less than 0.1 for the series (six roundings of a
    /// term below 2⁻⁷, and s⁷/3.5 < 2⁻⁵⁷ left out), and 0.7·(|n| + 1) for each of two sums: less than 8·(|n| + 1).
    fn ln(self) -> Self {
        let known = self.radius <= self.middle * 0.5 && self.middle >= LEAST && self.middle <= 1.0 / LEAST;
        let exponent = ((self.middle.to_bits() >> 52) & 0x7ff) as i32 - 1023;
        let mantissa = f64::from_bits(self.middle.to_bits() & ((1 << 52) - 1) | (1023 << 52));
        let index = ((mantissa - 1.0) * 64.0) as usize;
        let Some((logarithm, _)) = LOGARITHM.get(index) else { return Self::only_if(false, 0.0, 0.0) };
        let c = 1.0 + (2 * index + 1) as f64 / 128.0;
        let s = (mantissa - c) / (mantissa + c);
        let q = s * s;
        let trace = 2.0 * s * (1.0 + q * (1.0 / 3.0 + q * (1.0 / 5.0)));
        let n = f64::from(exponent);
        let spread = self.radius / (self.middle - self.radius);
        Self::only_if(known, n * LN_2.0 + (logarithm + trace), (spread + (n.abs() + 1.0) * 8.0 * UNIT) * SLACK)
    }

    fn exp(self) -> Self {
        Ball::from(self).exp().into()
    }

    /// (2/(2 + x))·artanh(s)/s with s = x/(2 + x) for |x| ≤ 1/16; elsewhere by the quotient.
    fn log1p_ratio(self) -> Self {
        if self.middle.abs() + self.radius <= NEAR_ZERO {
            let below = Self::whole(2) + self;
            let s = self / below;
            return Self::whole(2) / below * Self::artanh_ratio(s * s);
        }
        (Self::whole(1) + self).ln() / self
    }

    fn expm1_ratio(self) -> Self {
        Ball::from(self).expm1_ratio().into()
    }
}

impl Decided for Estimate {
    #[inline(always)]
    fn is_positive(self) -> bool {
        self.middle > self.radius
    }

    fn is_zero(self) -> bool {
        self.middle == 0.0 && self.radius == 0.0
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A double between 2⁻³⁰ and 2³⁰ of either sign, and the next state.
    fn drawn(state: &mut u64) -> f64 {
        *state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        let mantissa = 1.0 + (*state >> 12) as f64 * power_of_two(-52);
        let exponent = ((*state >> 3) % 61) as i32 - 30;
        mantissa * power_of_two(exponent) * if *state & 1 == 0 { 1.0 } else { -1.0 }
    }

    /// True if the estimate holds what the ball holds, and is narrow.
    fn holds(estimate: Estimate, ball: Ball, relative: f64) -> bool {
        let apart = ball - Ball::from(estimate.middle);
        apart.magnitude() <= estimate.radius && estimate.radius <= relative * ball.magnitude() + 2.0 * TINY
    }

    #[test]
    fn every_operation_holds_the_ball() {
        let mut state = 7;
        for _ in 0..20_000 {
            let (x, y) = (drawn(&mut state), drawn(&mut state));
            let (a, b) = (Ball::from(x) / Ball::whole(3), Ball::from(y) / Ball::whole(7));
            let (e, f) = (Estimate::from(a), Estimate::from(b));
            assert!(holds(e * f, a * b, 1e-15), "{x} {y}");
            assert!(holds(e / f, a / b, 1e-15), "{x} {y}");
            assert!(holds(e + f, a + b, 1e-15) || (x < 0.0) != (y < 0.0), "{x} {y}");
            let apart = (a - b) - Ball::from((e - f).middle);
            assert!(apart.magnitude() <= (e - f).radius, "{x} {y}");
            let (size, magnitude) = if x < 0.0 { (-e, -a) } else { (e, a) };
            assert!(holds(size.sqrt(), magnitude.sqrt(), 1e-15), "{x}");
            let near_one = magnitude.nearest() > 0.9 && magnitude.nearest() < 1.1;
            assert!(holds(size.ln(), magnitude.ln(), if near_one { 1.0 } else { 1e-13 }), "{x} {:?}", size.ln());
            assert!(holds(size.log1p_ratio(), magnitude.log1p_ratio(), 1e-13), "{x} {:?}", size.log1p_ratio());
            let fraction = a / (Ball::whole(2) * magnitude + Ball::whole(1));
            assert!(holds(Estimate::from(fraction).log1p_ratio(), fraction.log1p_ratio(), 1e-13), "{x}");
        }
    }

    #[test]
    fn what_is_wide_stays_inside() {
        let mut state = 11;
        for _ in 0..5_000 {
            let (x, y) = (drawn(&mut state).abs(), drawn(&mut state));
            let (reach, other) = (x * 0.1, y.abs() * 0.1);
            let (e, f) = (Estimate::from(x).widened(reach), Estimate::from(y).widened(other));
            for (u, v) in [(-0.999, -0.999), (-0.999, 0.999), (0.999, -0.999), (0.999, 0.999), (0.3, 0.0)] {
                let (a, b) = (Ball::from(x + u * reach), Ball::from(y + v * other));
                let inside = |estimate: Estimate, ball: Ball| (ball - Ball::from(estimate.middle)).magnitude() <= estimate.radius;
                assert!(inside(e + f, a + b) && inside(e * f, a * b) && inside(e / f, a / b), "{x} {y}");
                assert!(inside(e.sqrt(), a.sqrt()) && inside(e.ln(), a.ln()) && inside(e.log1p_ratio(), a.log1p_ratio()), "{x}");
                assert!(inside(e - f, a - b), "{x} {y}");
            }
        }
    }

    #[test]
    fn what_is_not_known_has_no_sign() {
        let zero = Estimate::from(0.0);
        let one = Estimate::whole(1);
        let unknown =
            [one / zero, (-one).sqrt(), zero.ln(), (-one).ln(), one / Estimate::from(1.0).widened(0.6), Estimate::from(Ball::UNKNOWN)];
        for x in unknown {
            for y in [x, x * zero, zero * x, x - x, x + one, -x, one / x, x.ln(), x.log1p_ratio(), x.sqrt()] {
                assert!(!y.is_positive() && !y.is_negative() && !y.is_zero(), "{y:?}");
                assert!(!Ball::from(y).enclosure().is_bounded(), "{y:?}");
            }
        }
        assert!(zero.is_zero() && one.is_positive() && (-one).is_negative());
    }
}
