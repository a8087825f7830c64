//! [`Enclosure`]: an ordered pair of doubles that contains the exact answer.

use super::round::{add_down, add_up, divide_down, divide_up, multiply_down, multiply_up, sqrt_down, sqrt_up};
use super::traits::{Positive, Semifield};
use core::cmp::Ordering;
use core::ops::{Add, Div, Mul, Neg, Sub};

/// How far an enclosure can be relied on. The mark is sticky: a result carries the worst of its operands'.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum Quality {
    /// The enclosure contains the exact answer, and both bounds are finite.
    Proven,
    /// It contains the exact answer, but a bound is infinite: overflow, division by an enclosure with zero inside, or a proof that
    /// did not close.
    Unbounded,
    /// Part of an argument lay outside the domain of a function (the root or the logarithm of a negative number); the enclosure holds
    /// for the part inside.
    PartlyUndefined,
    /// Nothing of an argument lay inside the domain, or it was not a number: there is no answer.
    Undefined,
}

/// An enclosure [low, high] that contains the exact answer, with a quality mark.
///
/// Arithmetic rounds outward: each bound of a result is the optimal double for the bounds of the operands. There is no order: ask
/// [`Enclosure::certainly_less`] or [`Enclosure::possibly_less`].
///
/// ```
/// use endwall::number::{Enclosure, Positive};
/// let two = Enclosure::from(2.0);
/// let root = two.sqrt();
/// assert!(root.low() < root.high() && root.contains(std::f64::consts::SQRT_2));
/// assert!((root * root).contains(2.0));
/// assert_eq!(Enclosure::from(9.0).sqrt(), Enclosure::from(3.0)); // exact answers have no width
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Enclosure {
    low: f64,
    high: f64,
    quality: Quality,
}

impl From<f64> for Enclosure {
    /// The exact number x; without an answer where x is not finite.
    #[inline(always)]
    fn from(x: f64) -> Self {
        if x.is_finite() { Self::ordered(x, x) } else { Self::UNDEFINED }
    }
}

impl From<super::Rational> for Enclosure {
    /// The optimal enclosure of the exact number.
    fn from(x: super::Rational) -> Self {
        if let Some(exact) = x.as_double() {
            return Self::from(exact);
        }
        let nearest = x.to_f64();
        if !nearest.is_finite() {
            return if x.is_finite() { Self::UNKNOWN } else { Self::UNDEFINED };
        }
        let error = super::Exact::from(x).compare(&super::Exact::from(nearest));
        let outward = if x.is_negative() { error.map(Ordering::reverse) } else { error };
        let split = Self::ordered(nearest.next_down(), nearest.next_up()).split_at(nearest, outward);
        Self::computed(split.low, split.high, split.quality)
    }
}

impl Enclosure {
    /// The whole line: nothing is known.
    pub const UNKNOWN: Self = Self { low: f64::NEG_INFINITY, high: f64::INFINITY, quality: Quality::Unbounded };
    /// No answer exists.
    pub const UNDEFINED: Self = Self { low: f64::NEG_INFINITY, high: f64::INFINITY, quality: Quality::Undefined };

    /// The enclosure between two finite bounds; `None` if one is not finite or they are not in order.
    ///
    /// ```
    /// use endwall::number::Enclosure;
    /// assert!(Enclosure::new(1.0, 2.0).is_some());
    /// assert!(Enclosure::new(2.0, 1.0).is_none());
    /// ```
    pub fn new(low: f64, high: f64) -> Option<Self> {
        (low.is_finite() && high.is_finite() && low <= high).then_some(Self { low, high, quality: Quality::Proven })
    }

    /// Bounds that the caller knows to be in order and finite.
    #[inline(always)]
    pub(crate) const fn ordered(low: f64, high: f64) -> Self {
        Self { low, high, quality: Quality::Proven }
    }

    /// Bounds of a computed result, with the mark of its operands and an own one for infinite bounds.
    #[inline(always)]
    pub(super) fn computed(low: f64, high: f64, quality: Quality) -> Self {
        let own = if low > f64::NEG_INFINITY && high < f64::INFINITY { Quality::Proven } else { Quality::Unbounded };
        Self { low, high, quality: quality.max(own) }
    }

    /// The same bounds with a mark at least as bad as this.
    pub(crate) fn marked(self, quality: Quality) -> Self {
        Self { quality: self.quality.max(quality), ..self }
    }

    /// The lower bound.
    #[inline(always)]
    pub const fn low(self) -> f64 {
        self.low
    }

    /// The upper bound.
    #[inline(always)]
    pub const fn high(self) -> f64 {
        self.high
    }

    /// The quality mark.
    pub const fn quality(self) -> Quality {
        self.quality
    }

    /// True if it is proven to contain the exact answer with finite bounds.
    pub fn is_proven(self) -> bool {
        self.quality == Quality::Proven
    }

    /// True if both bounds are finite.
    pub fn is_bounded(self) -> bool {
        self.low.is_finite() && self.high.is_finite()
    }

    /// True if it is a single double.
    pub fn is_exact(self) -> bool {
        self.low == self.high
    }

    /// high − low, rounded up.
    pub fn width(self) -> f64 {
        add_up(self.high, -self.low)
    }

    /// A double near the middle, inside the enclosure. Of two neighbouring doubles it is the one with the even last bit.
    pub fn middle(self) -> f64 {
        let middle = self.low / 2.0 + self.high / 2.0;
        if middle.is_nan() { 0.0 } else { middle.clamp(self.low, self.high) }
    }

    /// The number of doubles from the lower to the upper bound: 0 for an exact answer, 1 for two neighbours.
    pub fn width_in_ulp(self) -> u64 {
        let place = |x: f64| {
            let bits = x.to_bits() as i64;
            if bits < 0 { i64::MIN - bits } else { bits }
        };
        place(self.low).abs_diff(place(self.high))
    }

    /// True if x lies in the enclosure.
    pub fn contains(self, x: f64) -> bool {
        self.low <= x && x <= self.high
    }

    /// True if the other enclosure lies in this one.
    pub fn encloses(self, other: Self) -> bool {
        self.low <= other.low && other.high <= self.high
    }

    /// True if both have a number in common; two enclosures of the same quantity must.
    pub fn overlaps(self, other: Self) -> bool {
        self.low <= other.high && other.low <= self.high
    }

    /// True if every number of this one is less than every number of the other.
    pub fn certainly_less(self, other: Self) -> bool {
        self.high < other.low
    }

    /// True if some number of this one is less than some number of the other.
    pub fn possibly_less(self, other: Self) -> bool {
        self.low < other.high
    }

    /// True if the other enclosure is proven and lies between the bounds of this one without touching them: what a step of interval Newton has to show.
    pub(crate) fn encloses_strictly(self, other: Self) -> bool {
        other.is_proven() && self.low < other.low && other.high < self.high
    }

    /// The largest |x| in it.
    pub(crate) fn magnitude(self) -> f64 {
        self.low.abs().max(self.high.abs())
    }

    /// The smallest enclosure that contains both.
    pub fn hull(self, other: Self) -> Self {
        Self { low: self.low.min(other.low), high: self.high.max(other.high), quality: self.quality.max(other.quality) }
    }

    /// The part that is not negative, for a quantity that is known not to be.
    pub(crate) fn at_least_zero(self) -> Self {
        Self { low: self.low.max(0.0), ..self }
    }

    /// The part of the enclosure on the side of `middle` where the exact answer is, given their order.
    pub(crate) fn split_at(self, middle: f64, order: Option<Ordering>) -> Self {
        match order {
            Some(Ordering::Equal) => Self { low: middle, high: middle, ..self },
            Some(Ordering::Greater) => Self { low: middle, ..self },
            Some(Ordering::Less) => Self { high: middle, ..self },
            None => self,
        }
    }

    /// What both have in common; `None` if nothing.
    pub fn intersection(self, other: Self) -> Option<Self> {
        let (low, high) = (self.low.max(other.low), self.high.min(other.high));
        (low <= high).then_some(Self { low, high, quality: self.quality.max(other.quality) })
    }
}

impl Semifield for Enclosure {
    #[inline(always)]
    fn whole(n: u32) -> Self {
        Self::ordered(f64::from(n), f64::from(n))
    }

    #[inline(always)]
    fn doubled(self) -> Self {
        Self::computed(self.low + self.low, self.high + self.high, self.quality)
    }

    /// x², tighter than x·x where x contains zero.
    fn squared(self) -> Self {
        let (least, greatest) = (self.low.abs().min(self.high.abs()), self.low.abs().max(self.high.abs()));
        let inner = if self.contains(0.0) { 0.0 } else { multiply_down(least, least) };
        Self::computed(inner, multiply_up(greatest, greatest), self.quality)
    }
}

impl Add for Enclosure {
    type Output = Self;
    #[inline(always)]
    fn add(self, other: Self) -> Self {
        Self::computed(add_down(self.low, other.low), add_up(self.high, other.high), self.quality.max(other.quality))
    }
}

impl Sub for Enclosure {
    type Output = Self;
    #[inline(always)]
    fn sub(self, other: Self) -> Self {
        self + -other
    }
}

impl Neg for Enclosure {
    type Output = Self;
    #[inline(always)]
    fn neg(self) -> Self {
        Self { low: -self.high, high: -self.low, quality: self.quality }
    }
}

impl Mul for Enclosure {
    type Output = Self;
    #[inline(always)]
    fn mul(self, other: Self) -> Self {
        let (a, b, c, d) = (self.low, self.high, other.low, other.high);
        let (low, high) = if a >= 0.0 && c >= 0.0 {
            (multiply_down(a, c), multiply_up(b, d))
        } else {
            (
                multiply_down(a, c).min(multiply_down(a, d)).min(multiply_down(b, c)).min(multiply_down(b, d)),
                multiply_up(a, c).max(multiply_up(a, d)).max(multiply_up(b, c)).max(multiply_up(b, d)),
            )
        };
        Self::computed(low, high, self.quality.max(other.quality))
    }
}

impl Div for Enclosure {
    type Output = Self;
    /// Unbounded where the divisor contains zero.
    #[inline(always)]
    fn div(self, other: Self) -> Self {
        let quality = self.quality.max(other.quality);
        if other.contains(0.0) {
            let own = if other.low == 0.0 && other.high == 0.0 { Quality::Undefined } else { Quality::Unbounded };
            return Self::UNKNOWN.marked(quality.max(own));
        }
        if !self.is_bounded() || !other.is_bounded() {
            // Quotients of infinite bounds are not worth a case distinction: what is unbounded stays so.
            return Self::UNKNOWN.marked(quality);
        }
        let (a, b, c, d) = (self.low, self.high, other.low, other.high);
        let (low, high) = if a >= 0.0 && c > 0.0 {
            (divide_down(a, d), divide_up(b, c))
        } else {
            (
                divide_down(a, c).min(divide_down(a, d)).min(divide_down(b, c)).min(divide_down(b, d)),
                divide_up(a, c).max(divide_up(a, d)).max(divide_up(b, c)).max(divide_up(b, d)),
            )
        };
        Self::computed(low, high, quality)
    }
}

impl Positive for Enclosure {
    #[inline(always)]
    fn sqrt(self) -> Self {
        if self.high < 0.0 {
            return Self::UNDEFINED;
        }
        let own = if self.low < 0.0 { Quality::PartlyUndefined } else { Quality::Proven };
        Self::computed(sqrt_down(self.low.max(0.0)), sqrt_up(self.high), self.quality.max(own))
    }
}

#[cfg(feature = "serde")]
impl serde::Serialize for Enclosure {
    /// `[low, high]`, each printed so that it reads back to the same double; the quality mark is not part of it.
    fn serialize<S: serde::Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        [self.low, self.high].serialize(serializer)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::number::Rational;

    fn enclosure(low: f64, high: f64) -> Enclosure {
        Enclosure::new(low, high).unwrap()
    }

    #[test]
    fn every_sign_of_product_and_quotient_is_bounded() {
        let samples = [-3.0, -0.7, 0.0, 0.3, 2.0];
        for a in samples {
            for b in samples.into_iter().filter(|b| *b >= a) {
                for c in samples {
                    for d in samples.into_iter().filter(|d| *d >= c) {
                        let (x, y) = (enclosure(a, b), enclosure(c, d));
                        for (p, q) in [(a, c), (a, d), (b, c), (b, d), (f64::midpoint(a, b), f64::midpoint(c, d))] {
                            assert!((x * y).contains(p * q) && (x + y).contains(p + q) && (x - y).contains(p - q));
                            assert!(q == 0.0 || (x / y).contains(p / q), "{x:?} {y:?}");
                            assert!(x.squared().contains(p * p));
                        }
                    }
                }
            }
        }
    }

    #[test]
    fn marks_are_sticky() {
        let negative = enclosure(-1.0, 4.0).sqrt();
        assert_eq!(negative.quality(), Quality::PartlyUndefined);
        assert_eq!((negative + Enclosure::whole(1)).quality(), Quality::PartlyUndefined);
        assert_eq!(enclosure(-2.0, -1.0).sqrt().quality(), Quality::Undefined);
        assert_eq!((Enclosure::whole(1) / enclosure(-1.0, 1.0)).quality(), Quality::Unbounded);
        assert_eq!((Enclosure::whole(1) / Enclosure::whole(0)).quality(), Quality::Undefined);
        assert_eq!((enclosure(1e200, 1e300) * enclosure(1e200, 1e300)).quality(), Quality::Unbounded);
        assert_eq!(Enclosure::from(f64::NAN).quality(), Quality::Undefined);
        // A little more than the largest double, though that is the nearest one.
        let more = Rational::from(1.0).checked_add(Rational::from(2f64.powi(-60))).unwrap();
        let beyond = Enclosure::from(Rational::from(f64::MAX).checked_mul(more).unwrap());
        assert_eq!((beyond.low(), beyond.quality()), (f64::MAX, Quality::Unbounded));
    }

    #[test]
    fn width_is_counted_in_doubles() {
        assert_eq!(enclosure(1.0, 1.0f64.next_up()).width_in_ulp(), 1);
        assert_eq!(enclosure(-5e-324, 5e-324).width_in_ulp(), 2);
        assert_eq!(enclosure(-0.0, 0.0).width_in_ulp(), 0);
    }
}
