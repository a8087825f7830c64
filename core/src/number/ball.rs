//! [`Ball`]: a pair of doubles with a running error radius.

use super::counted::Counted;
use super::enclosure::{Enclosure, Quality};
use super::rational::Rational;
use super::round::{UNIT, add_down, add_up, fast_two_sum, in_range, power_of_two, sqrt, two_product, two_sum};
use super::traits::{Decided, Positive, Semifield};
use core::ops::{Add, Div, Mul, Neg, Sub};

/// A real number within `radius` of head + tail: about 30 digits, and a bound that is computed along.
///
/// It proves formulas with subtraction, at a point. Every rounding error that is not recovered by an error-free transform is
/// bounded by u times the magnitude of the rounded result and added to the radius.
///
/// ```
/// use endwall::number::{Ball, Semifield};
/// let tiny = Ball::from(1e-20);
/// let one = Ball::whole(1);
/// let recovered = (one + tiny) - one;
/// assert!(recovered.enclosure().contains(1e-20));
/// assert!(recovered.enclosure().width() < 1e-31);
/// ```
#[derive(Clone, Copy, Debug)]
pub struct Ball {
    head: f64,
    tail: f64,
    radius: f64,
}

/// Added wherever a rounding may have underflowed: products here are at least 2⁻⁹⁶⁰, their tails' errors at most 2⁻¹⁰⁷⁴ each.
const TINY: f64 = f64::from_bits(1 << 52);

/// u times a sum of magnitudes of rounded results, rounded up, with what may have underflowed; 0 only where nothing was rounded.
#[inline(always)]
fn roundings(magnitudes: f64, nothing_rounded: bool) -> f64 {
    if nothing_rounded { 0.0 } else { up(magnitudes * UNIT) + 64.0 * TINY }
}

/// True if both magnitudes lie from 2⁻²⁵⁶ up to 2²⁵⁶, where their product, their quotient and the errors of these are in range: one test for nearly all
/// numbers that occur.
#[inline(always)]
fn are_moderate(a: f64, b: f64) -> bool {
    // Without the sign bit the exponent is the top eleven bits; of its distance from the least one the top two have to be zero.
    let above = |x: f64| (x.to_bits() << 1).wrapping_sub((1023 - 256) << 53);
    (above(a) | above(b)) >> 62 == 0
}

/// Covers the at most 2⁶ roundings by which a sum of non-negative terms may be too small.
#[inline(always)]
fn up(radius: f64) -> f64 {
    radius * (1.0 + 64.0 * f64::EPSILON)
}

/// a·b of non-negative bounds, rounded up; 0 only if one is 0.
#[inline(always)]
fn product_up(a: f64, b: f64) -> f64 {
    if a == 0.0 || b == 0.0 { 0.0 } else { up(a * b) + TINY }
}

impl From<f64> for Ball {
    /// The exact number x.
    #[inline(always)]
    fn from(x: f64) -> Self {
        Self::computed(x, 0.0, 0.0)
    }
}

impl From<Counted> for Ball {
    #[inline(always)]
    fn from(x: Counted) -> Self {
        let (head, tail) = x.pair();
        Self::computed(head, tail, x.error_bound())
    }
}

impl From<Rational> for Ball {
    /// An exact rational number within 2^±900, else unknown.
    fn from(x: Rational) -> Self {
        if let Some(exact) = x.as_double() {
            return Self::from(exact);
        }
        let nearest = x.to_f64();
        if Rational::from(nearest) == x {
            return Self::from(nearest);
        }
        let magnitude = Counted::from_rational(x, -900, 900).map_or(Self::UNKNOWN, Self::from);
        if x.is_negative() { -magnitude } else { magnitude }
    }
}

impl Ball {
    /// 2⁻²⁰⁰, the least value that enters a relation.
    pub const SMALLEST_ENTRY: f64 = power_of_two(-200);
    /// 2²⁰⁰, the greatest.
    pub const LARGEST_ENTRY: f64 = power_of_two(200);

    /// Nothing is known.
    pub(crate) const UNKNOWN: Self = Self { head: 0.0, tail: 0.0, radius: f64::INFINITY };

    /// head + tail ± radius, brought into normal form; unknown if it is not finite.
    #[inline(always)]
    fn computed(head: f64, tail: f64, radius: f64) -> Self {
        let (head, tail) = two_sum(head, tail);
        // Of a head that is not finite the tail is not a number, and that fails the comparison as a radius does that is not one.
        if tail.abs() + radius < f64::INFINITY { Self { head, tail, radius } } else { Self::UNKNOWN }
    }

    /// The same where |head| ≥ |tail| or the head is zero.
    #[inline(always)]
    fn ordered(head: f64, tail: f64, radius: f64) -> Self {
        let (head, tail) = fast_two_sum(head, tail);
        if tail.abs() + radius < f64::INFINITY { Self { head, tail, radius } } else { Self::UNKNOWN }
    }

    /// A double that lies on the same side of every double as the number, as far as the ball tells: the nearest one, or the next one above if the number
    /// is certainly greater.
    pub(crate) fn side(self) -> f64 {
        if (self - Self::from(self.head)).is_certainly_positive() { self.head.next_up() } else { self.head }
    }

    /// head + tail with a radius.
    #[inline(always)]
    pub(super) fn pair(head: f64, tail: f64, radius: f64) -> Self {
        Self::computed(head, tail, radius)
    }

    /// The ball of all numbers in the enclosure.
    pub fn around(x: Enclosure) -> Self {
        let middle = x.middle();
        let radius = add_up(x.high(), -middle).max(add_up(middle, -x.low()));
        Self::computed(middle, 0.0, radius)
    }

    /// The same ball, larger by a non-negative amount.
    #[inline(always)]
    pub(crate) fn widened(self, by: f64) -> Self {
        Self::computed(self.head, self.tail, up(self.radius + by))
    }

    /// The double nearest to the middle.
    #[inline(always)]
    pub fn nearest(self) -> f64 {
        self.head
    }

    /// A bound on the distance between the number and the nearest double.
    #[inline(always)]
    pub(super) fn radius_about_nearest(self) -> f64 {
        up(self.tail.abs() + self.radius)
    }

    /// The bound on the distance between the number and the middle.
    pub fn radius(self) -> f64 {
        self.radius
    }

    /// 2ⁿ·x, exact but for a tail that underflows; unknown for |n| above 1000.
    #[inline(always)]
    pub(crate) fn scaled(self, n: i32) -> Self {
        if !(-1000..=1000).contains(&n) {
            return Self::UNKNOWN;
        }
        let factor = power_of_two(n);
        let tail = self.tail * factor;
        let lost = if tail * power_of_two(-n) == self.tail { 0.0 } else { TINY };
        let scaled = Self { head: self.head * factor, tail, radius: product_up(self.radius, factor) + lost };
        if scaled.head == 0.0 && self.head == 0.0 || in_range(scaled.head) { scaled } else { Self::UNKNOWN }
    }

    /// The best enclosure of the ball.
    #[inline(always)]
    pub fn enclosure(self) -> Enclosure {
        if self.radius == f64::INFINITY {
            return Enclosure::UNKNOWN;
        }
        let (low, high) = (add_down(self.head, add_down(self.tail, -self.radius)), add_up(self.head, add_up(self.tail, self.radius)));
        // A bound beyond the largest double is infinite, and marked so.
        Enclosure::computed(low, high, Quality::Proven)
    }

    /// A bound on |x| from above.
    #[inline(always)]
    pub(crate) fn magnitude(self) -> f64 {
        up(self.head.abs() + self.tail.abs() + self.radius)
    }

    /// A product of factors that are not moderate: they may be zero, and the result may leave the range of error-free products.
    #[cold]
    fn product_at_the_ends(self, other: Self) -> Self {
        if self.head == 0.0 || other.head == 0.0 {
            // Zero times what is not known, and may have no value, is not zero.
            if self.radius.max(other.radius) == f64::INFINITY {
                return Self::UNKNOWN;
            }
            // A zero head means a zero middle: all that is left is the spread.
            return Self::computed(0.0, 0.0, up(product_up(self.magnitude(), other.radius) + product_up(other.magnitude(), self.radius)));
        }
        if !(in_range(self.head * other.head) && in_range(self.head) && in_range(other.head)) {
            return Self::UNKNOWN;
        }
        // By powers of two into the middle and back.
        let exponent = |x: f64| ((x.to_bits() >> 52) & 0x7ff) as i32 - 1023;
        let (n, m) = (exponent(self.head), exponent(other.head));
        (self.scaled(-n) * other.scaled(-m)).scaled(n).scaled(m)
    }

    /// A positive bound on |x| from below, or something ≤ 0.
    #[inline(always)]
    fn mignitude(self) -> f64 {
        let inner = self.head.abs() - self.tail.abs() - self.radius;
        // Both roundings are at most u·|head| each; where they cancel, relative to what is left they are not small.
        inner - self.head.abs() * (8.0 * f64::EPSILON)
    }

    /// True if every number of the ball is positive.
    pub fn is_certainly_positive(self) -> bool {
        self.head > 0.0 && self.mignitude() > 0.0
    }

    /// True if every number of the ball is negative.
    pub fn is_certainly_negative(self) -> bool {
        (-self).is_certainly_positive()
    }
}

impl Semifield for Ball {
    #[inline(always)]
    fn whole(n: u32) -> Self {
        Self { head: f64::from(n), tail: 0.0, radius: 0.0 }
    }

    #[inline(always)]
    fn doubled(self) -> Self {
        Self::ordered(self.head + self.head, self.tail + self.tail, self.radius + self.radius)
    }

    #[inline(always)]
    fn halved(self) -> Self {
        // Only a subnormal loses a bit; a single double in range is none.
        let lost = if self.tail == 0.0 && self.radius == 0.0 && (self.head == 0.0 || in_range(self.head)) { 0.0 } else { TINY };
        Self::ordered(self.head * 0.5, self.tail * 0.5, self.radius * 0.5 + lost)
    }
}

impl Add for Ball {
    type Output = Self;
    #[inline(always)]
    fn add(self, other: Self) -> Self {
        let (head, error) = two_sum(self.head, other.head);
        let (tails, first) = two_sum(self.tail, other.tail);
        let (tail, second) = two_sum(error, tails);
        // Sums of doubles never underflow inexactly, so the errors themselves are known and are added to the radius as they are.
        Self::computed(head, tail, up(self.radius + other.radius + first.abs() + second.abs()))
    }
}

impl Neg for Ball {
    type Output = Self;
    #[inline(always)]
    fn neg(self) -> Self {
        Self { head: -self.head, tail: -self.tail, radius: self.radius }
    }
}

impl Sub for Ball {
    type Output = Self;
    #[inline(always)]
    fn sub(self, other: Self) -> Self {
        self + -other
    }
}

impl Mul for Ball {
    type Output = Self;
    /// head·head exactly as two doubles, plus both cross products; what is dropped, tail·tail, is at most u times a cross product.
    #[inline(always)]
    fn mul(self, other: Self) -> Self {
        if !are_moderate(self.head, other.head) {
            return self.product_at_the_ends(other);
        }
        let (head, error) = two_product(self.head, other.head);
        let first = self.head * other.tail;
        let second = self.tail * other.head;
        let tail = error + (first + second);
        // |tail| ≤ u·|head|, which `up` covers.
        let spread = self.head.abs() * other.radius + (other.head.abs() + other.radius) * self.radius;
        // Each cross product, their sum and its sum with the error are rounded.
        let lost = ((first.abs() + second.abs()) * 3.0 + tail.abs()) * UNIT;
        let inexact = self.tail.abs() + other.tail.abs() + self.radius + other.radius;
        Self::ordered(head, tail, if inexact == 0.0 { 0.0 } else { up(spread + lost) + 64.0 * TINY })
    }
}

impl Div for Ball {
    type Output = Self;
    /// q = RN(head/head) with its exact remainder r; A/B − q = (r + a.tail − q·b.tail + …)/B.
    #[inline(always)]
    fn div(self, other: Self) -> Self {
        let divisor = other.head.abs() * (1.0 - 8.0 * f64::EPSILON) - other.radius;
        // A divisor that is not a number, or that may be zero, fails here.
        if !(divisor > 0.0 && divisor < f64::INFINITY) {
            return Self::UNKNOWN;
        }
        if self.head == 0.0 {
            let radius = self.radius / divisor;
            return Self::computed(0.0, 0.0, if self.radius == 0.0 { 0.0 } else { up(radius) + TINY });
        }
        let quotient = self.head / other.head;
        if !(are_moderate(self.head, other.head) || in_range(quotient) && in_range(self.head) && in_range(other.head)) {
            return Self::UNKNOWN;
        }
        let (p, error) = two_product(quotient, other.head);
        let remainder = (self.head - p) - error;
        let shift = quotient * other.tail;
        let numerator = remainder + (self.tail - shift);
        let tail = numerator / other.head;
        // The shift, its difference from the tail and the sum with the remainder are rounded.
        let lost = (shift.abs() * 2.0 + self.tail.abs() + numerator.abs()) * UNIT;
        // Divided by head instead of by the true divisor.
        let other_divisor = tail.abs() * (other.tail.abs() + other.radius);
        let spread = (self.radius + quotient.abs() * other.radius + lost + other_divisor + 64.0 * TINY) / divisor;
        // The quotient of the remainder is exact only if there is none.
        let inexact = self.radius + other.radius + other.tail.abs() + numerator.abs();
        Self::ordered(quotient, tail, if inexact == 0.0 { 0.0 } else { up(spread + tail.abs() * UNIT) + 64.0 * TINY })
    }
}

impl Positive for Ball {
    /// s = RN(√head) with its exact remainder; √X = s + Δ/2s − Δ²/(2s(s + √X)²), Δ = X − s².
    #[inline(always)]
    fn sqrt(self) -> Self {
        if self.head == 0.0 && self.radius == 0.0 {
            return self;
        }
        if !self.is_certainly_positive() || !in_range(self.head) {
            return Self::UNKNOWN;
        }
        let root = sqrt(self.head);
        let (p, error) = two_product(root, root);
        let remainder = (self.head - p) - error;
        let (numerator, first) = two_sum(remainder, self.tail);
        let tail = numerator / (root + root);
        let distance = up(remainder.abs() + self.tail.abs() + self.radius);
        let curvature = product_up(distance, distance / root) / (2.0 * root * root);
        let spread = up(self.radius + first.abs()) / (root + root) + curvature;
        let spread = if spread == 0.0 { 0.0 } else { up(spread) + TINY };
        Self::computed(root, tail, up(spread + roundings(tail.abs(), numerator == 0.0)))
    }
}

impl Decided for Ball {
    fn is_positive(self) -> bool {
        self.is_certainly_positive()
    }

    fn is_zero(self) -> bool {
        self.magnitude() == 0.0
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::number::Elementary;

    /// A tail whose product, quotient or root underflows whole still counts.
    #[test]
    fn what_underflows_is_not_forgotten() {
        let x = Ball::from(1.0) + Ball::from(power_of_two(-1000));
        let small = power_of_two(-100);
        for y in [x * Ball::from(small), Ball::from(small) * x, x / Ball::from(1.0 / small), Ball::from(small) / x, x.scaled(-100)] {
            assert_eq!(y.head, small);
            assert!(y.radius > 0.0, "{y:?}");
        }
        let large = Ball::from(power_of_two(900)) + Ball::from(power_of_two(-700));
        assert!(large.sqrt().radius > 0.0);
        assert!(Ball::from(1e-300).exp().radius > 0.0);
        // What is exact stays exact.
        assert_eq!((Ball::from(0.1) * Ball::from(3.0)).radius, 0.0);
        assert_eq!((Ball::from(6.0) / Ball::from(3.0)).radius, 0.0);
        assert_eq!(Ball::from(9.0).sqrt().radius, 0.0);
    }

    /// The least number of this ball is 2⁻⁵⁴: head less tail rounds to the head.
    #[test]
    fn the_least_magnitude_survives_cancellation() {
        let ball = Ball { head: 1.0, tail: -power_of_two(-54), radius: 1.0 - power_of_two(-53) };
        assert!(ball.mignitude() <= power_of_two(-54), "{}", ball.mignitude());
        let reciprocal = (Ball::whole(1) / ball).enclosure();
        assert!(reciprocal.high() >= power_of_two(54), "{reciprocal:?}");
    }

    #[test]
    fn zero_times_unknown_is_unknown() {
        let undefined = Ball::from(-1.0).ln();
        assert!(!(Ball::from(0.0) * undefined).enclosure().is_proven());
        assert!(!(undefined * Ball::from(0.0)).enclosure().is_proven());
    }

    #[test]
    fn an_infinite_bound_is_not_proven() {
        let wide = Ball::around(Enclosure::ordered(0.0, f64::MAX)).doubled().enclosure();
        assert_eq!((wide.high(), wide.quality()), (f64::INFINITY, Quality::Unbounded));
    }
}
