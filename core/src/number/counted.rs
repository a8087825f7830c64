//! [`Counted`]: a pair of doubles whose error is counted, not computed.
//!
//! A positive real X is held as head + tail with two counts,
//!
//! > |tail| ≤ k·u·head and |X − (head + tail)| ≤ e·u²·head, u = 2⁻⁵³,
//!
//! and with two whole numbers low ≤ log₂ head ≤ high that prove the absence of overflow and underflow. In a formula
//! without subtraction the counts and ranges of a result follow from those of the operands alone, never from the values:
//! the same generic code that computes the value derives its error bound, and once the formula is inlined the compiler
//! folds all of it into constants. Nothing of the proof is left at run time but one comparison at the end.
//!
//! The rules (derived at each operation below) use only error-free transforms; the algorithms are the sloppy sum, product and quotient of
//! double words without renormalisation, cf. M. Joldeş, J.-M. Muller, V. Popescu, ACM TOMS 44 (2017) 15res (algorithms
//! 4, 10 and 15 renormalise), and for the square root V. Lefèvre, N. Louvet, J.-M. Muller, J. Picot, L. Rideau, ACM TOMS
//! 49 (2023). Since the pairs here are not renormalised, their bounds do not carry over and are derived anew.
//!
//! Ranges: rounding is monotone and powers of two are doubles, so the bounds of a rounded result are those of the exact one.
//!
//! Throughout, counts stay below [`LIMIT`], so that a product such as k·u is below 2⁻²⁹ and every factor (1 + n·u) of second
//! order is covered by the whole units by which each rule rounds up.

use super::enclosure::Enclosure;
use super::exact::Exact;
use super::rational::Rational;
use super::round::{UNIT, fast_two_sum, power_of_two, sqrt, two_product, two_sum};
use super::traits::{Positive, Semifield};
use core::cmp::Ordering;
use core::ops::{Add, Div, Mul};

/// Beyond this count, or beyond 2^±[`WIDEST`], a value is unknown: saturated counts are never taken for a proof.
const LIMIT: u32 = 1 << 24;
/// The range within which error-free products and quotients hold, see `round`.
const WIDEST: i32 = 950;

/// A positive real number as a pair of doubles with counted error.
///
/// It has no `−`: a formula that could cancel does not compile for it.
///
/// ```compile_fail
/// use endwall::number::{Counted, Semifield};
/// let difference = Counted::whole(3) - Counted::whole(2);
/// ```
///
/// ```
/// use endwall::number::{Counted, Semifield};
/// let third = Counted::whole(1) / Counted::whole(3);
/// let enclosure = third.enclosure();
/// assert!(enclosure.low() < enclosure.high());
/// assert_eq!(enclosure.low().next_up(), enclosure.high());
/// assert!(third.error_count() <= 10); // in units of 2⁻¹⁰⁶ of the value
/// ```
#[derive(Clone, Copy, Debug)]
pub struct Counted {
    head: f64,
    tail: f64,
    tail_count: u32,
    error_count: u32,
    low: i32,
    high: i32,
}

impl Counted {
    /// The bound on every value that enters: 2^±200.
    pub const ENTRY: i32 = 200;

    /// A value about which nothing is known; its enclosure is everything.
    const UNKNOWN: Self = Self { head: 1.0, tail: 0.0, tail_count: u32::MAX, error_count: u32::MAX, low: 0, high: 0 };

    /// The exact double `x`, where 2^low ≤ x ≤ 2^high; `None` elsewhere, and for bounds beyond 2^±950, outside of which products are not exact.
    ///
    /// ```
    /// use endwall::number::Counted;
    /// assert!(Counted::exactly(1.5, 0, 1).is_some());
    /// assert!(Counted::exactly(1.5, 1, 2).is_none());
    /// assert!(Counted::exactly(1.0, 0, i32::MAX).is_none());
    /// assert!(Counted::exactly(0.0, -1023, 0).is_none());
    /// ```
    #[inline(always)]
    pub fn exactly(x: f64, low: i32, high: i32) -> Option<Self> {
        let usable = -WIDEST <= low && low <= high && high <= WIDEST;
        (usable && Self::is_within(x, low, high)).then_some(Self::inside(x, low, high))
    }

    /// 2^low ≤ x ≤ 2^high.
    #[inline(always)]
    pub(crate) fn is_within(x: f64, low: i32, high: i32) -> bool {
        x >= power_of_two(low) && x <= power_of_two(high)
    }

    /// The exact double `x`, of which the caller knows that it [is within](Self::is_within) the bounds.
    #[inline(always)]
    pub(crate) fn inside(x: f64, low: i32, high: i32) -> Self {
        Self { head: x, tail: 0.0, tail_count: 0, error_count: 0, low, high }
    }

    /// An exact rational number, where 2^low ≤ |x| ≤ 2^high; `None` elsewhere.
    #[inline(always)]
    pub fn from_rational(x: Rational, low: i32, high: i32) -> Option<Self> {
        let (n, d, exponent) = x.parts();
        if n == 0 || d == 0 {
            return None;
        }
        let (up, down) = (n.leading_zeros(), d.leading_zeros());
        Self::from_quotient(n << up, d << down, exponent.checked_sub(up as i32)?.checked_add(down as i32)?, low, high)
    }

    /// n/d·2^exponent, where n and d have their first bit set and may each have been cut off from a longer number, and
    /// where the result is within 2^low and 2^high; `None` elsewhere.
    #[inline(always)]
    pub(crate) fn from_quotient(n: u128, d: u128, exponent: i32, low: i32, high: i32) -> Option<Self> {
        let ratio = leading_pair(n) / leading_pair(d);
        if !(-900..=900).contains(&exponent) {
            return None;
        }
        // Powers of two are exact; in two factors, so that neither leaves the range of a double.
        let half = exponent / 2;
        let (first, second) = (power_of_two(half), power_of_two(exponent - half));
        let head = ratio.head * first * second;
        let entry = Self::exactly(head, low, high)?;
        Some(Self { tail: ratio.tail * first * second, tail_count: ratio.tail_count, error_count: ratio.error_count, ..entry })
    }

    /// Applies the limits: a result whose counts or range leave them is unknown.
    #[inline(always)]
    fn checked(self) -> Self {
        if self.tail_count > LIMIT || self.error_count > LIMIT || self.low < -WIDEST || self.high > WIDEST { Self::UNKNOWN } else { self }
    }

    /// k, the bound on the tail in units of u·head.
    pub fn tail_count(&self) -> u32 {
        self.tail_count
    }

    /// e, the bound on the error in units of u²·head; `u32::MAX` if nothing is proven.
    pub fn error_count(&self) -> u32 {
        self.error_count
    }

    /// The exponents of two that are proven to bracket the value.
    pub fn range(&self) -> (i32, i32) {
        (self.low, self.high)
    }

    /// The head and the tail.
    #[inline(always)]
    pub(crate) fn pair(self) -> (f64, f64) {
        (self.head, self.tail)
    }

    /// e·u²·head rounded up; 0 for an exact value.
    #[inline(always)]
    pub(crate) fn error_bound(self) -> f64 {
        if self.error_count == 0 {
            0.0
        } else if self.error_count > LIMIT {
            f64::INFINITY
        } else {
            // One unit more covers the rounding of the product.
            self.head * (f64::from(self.error_count + 1) * (UNIT * UNIT))
        }
    }

    /// The double nearest to head + tail, what is left of them, and whether the true value is certainly not that double.
    #[inline(always)]
    fn rounded(self) -> (f64, f64, f64) {
        // |tail| ≤ k·u·head < head, so the short form is exact.
        let (nearest, rest) = fast_two_sum(self.head, self.tail);
        (nearest, rest, self.error_bound())
    }

    /// An enclosure of at most 2 ulp: two neighbouring doubles, or three where the value is too close to the middle one to
    /// be told from it. An unknown value gives an unbounded enclosure.
    ///
    /// Proof: X = nearest + rest ± r. |rest| is at most half the gap to the neighbour on its side, and r less than a quarter
    /// of it since e·u² < 2⁻⁸²; so X lies between the neighbours, and on the side of `rest` if |rest| > r.
    #[inline(always)]
    pub fn enclosure(self) -> Enclosure {
        if self.error_count > LIMIT {
            return Enclosure::UNKNOWN;
        }
        let (nearest, rest, bound) = self.rounded();
        let bits = nearest.to_bits();
        let (above, below) = if self.error_count == 0 { (rest >= 0.0, rest <= 0.0) } else { (rest > bound, -rest > bound) };
        // Positive and far from both ends of the range: neighbours by their bits.
        let low = f64::from_bits(bits - u64::from(!above));
        let high = f64::from_bits(bits + u64::from(!below));
        Enclosure::ordered(low, high)
    }

    /// The optimal enclosure: the exact double, or the two neighbours of the exact value. Where the pair cannot tell the value
    /// from a double, `exact` gives the value as a fraction and integers decide; where these overflow the pair's enclosure stands.
    #[inline(always)]
    pub fn optimal(self, exact: impl FnOnce() -> Exact) -> Enclosure {
        self.optimal_by(|middle| exact().compare_double(middle))
    }

    /// As [`Counted::optimal`], for a value whose square is the exact fraction.
    #[inline(always)]
    pub fn optimal_root(self, exact_square: impl FnOnce() -> Exact) -> Enclosure {
        self.optimal_by(|middle| exact_square().compare(&Exact::from(middle).squared()))
    }

    /// The two neighbouring doubles that bracket the value, and whether they are proven to: not where the value is too close to a double, or
    /// one, for the pair to tell. Without a branch, for loops over many values.
    ///
    /// Proof as for [`Counted::enclosure`]: |rest| > r puts the value strictly between `nearest` and its neighbour on the side of `rest`.
    #[inline(always)]
    pub(crate) fn neighbours(self) -> (f64, f64, bool) {
        let (nearest, rest, bound) = self.rounded();
        // Positive and far from both ends of the range: the neighbour below by the sign bit of `rest`, the one above is next to it.
        let low = nearest.to_bits() - (rest.to_bits() >> 63);
        (f64::from_bits(low), f64::from_bits(low + 1), rest.abs() > bound)
    }

    /// The enclosure, decided by `order` of the exact value against the middle of three doubles where the pair leaves three.
    #[inline(always)]
    pub(crate) fn optimal_by(self, order: impl FnOnce(f64) -> Option<Ordering>) -> Enclosure {
        let (low, high, proven) = self.neighbours();
        if proven {
            return Enclosure::ordered(low, high);
        }
        settle_cold(self.enclosure(), self.rounded().0, order)
    }

    /// The order of this value and another where the pairs can tell.
    #[inline(always)]
    pub fn compare(self, other: Self) -> Option<Ordering> {
        let (difference, rest) = two_sum(self.head, -other.head);
        let low_order = rest + (self.tail - other.tail);
        let total = difference + low_order;
        // Rounding of the three sums: each at most u of its result.
        let slack =
            (self.error_bound() + other.error_bound()) + 4.0 * UNIT * (self.tail.abs() + other.tail.abs() + low_order.abs() + total.abs());
        if total > slack {
            Some(Ordering::Greater)
        } else if -total > slack {
            Some(Ordering::Less)
        } else {
            None
        }
    }
}

/// A 128-bit integer with its first bit set, scaled to [1, 2), as a pair.
///
/// head = RN(n), |n − head| ≤ u·head; what is left has at most 76 bits and is rounded with a relative error of u: at most u²·head. A
/// longer number cut off after these bits differs by less than 2⁻¹²⁷. Together less than 2·u²·head.
#[inline(always)]
fn leading_pair(n: u128) -> Counted {
    let head = n as f64;
    // RN(n) may be 2¹²⁸, which no 128-bit integer holds; the difference then wraps to the right (negative) value all the same.
    let rest = n.wrapping_sub(head_bits(head)) as i128;
    let scale = power_of_two(-127);
    Counted { head: head * scale, tail: rest as f64 * scale, tail_count: 1, error_count: 2, low: 0, high: 1 }
}

/// The double as an integer modulo 2¹²⁸.
#[inline(always)]
fn head_bits(head: f64) -> u128 {
    if head >= power_of_two(127) * 2.0 { 0 } else { head as u128 }
}

/// The rare end of [`Counted::optimal`], kept out of the fast path.
#[cold]
fn settle_cold(three: Enclosure, middle: f64, order: impl FnOnce(f64) -> Option<Ordering>) -> Enclosure {
    if three.width_in_ulp() == 2 { three.split_at(middle, order(middle)) } else { three }
}

impl Semifield for Counted {
    #[inline(always)]
    fn whole(n: u32) -> Self {
        if n == 0 {
            return Self::UNKNOWN;
        }
        let bits = n.ilog2() as i32;
        Self { head: f64::from(n), tail: 0.0, tail_count: 0, error_count: 0, low: bits, high: bits + 1 }
    }

    #[inline(always)]
    fn doubled(self) -> Self {
        Self { head: self.head + self.head, tail: self.tail + self.tail, low: self.low + 1, high: self.high + 1, ..self }.checked()
    }
}

impl Add for Counted {
    type Output = Self;

    /// head + ε = RN sum of the heads exactly; tail = RN(ε + RN(a.tail + b.tail)).
    ///
    /// With k = max(k₁, k₂) and s the new head: |ε| ≤ u·s and |a.tail + b.tail| ≤ k·u·(a.head + b.head) ≤ k·u·s(1+u), so
    /// |tail| ≤ (k + 1 + …)·u·s ≤ (k+2)·u·s. The two roundings of the tail err by at most u·(k·u·s) + u·(k+1)·u·s, thus
    /// e = max(e₁, e₂) + 2k + 2. Positive terms: the sum is at least the larger term and at most twice it.
    #[inline(always)]
    fn add(self, other: Self) -> Self {
        let exact_tails = self.tail_count == 0 && other.tail_count == 0;
        let k = self.tail_count.max(other.tail_count);
        // Heads are positive, so their order is that of their magnitudes: a choice and three operations instead of six.
        let (greater, less) = if self.head < other.head { (other.head, self.head) } else { (self.head, other.head) };
        let (head, error) = fast_two_sum(greater, less);
        let (tail, rounding) = if exact_tails {
            (error, 0)
        } else if other.tail_count == 0 {
            (error + self.tail, k.saturating_add(2))
        } else if self.tail_count == 0 {
            (error + other.tail, k.saturating_add(2))
        } else {
            (error + (self.tail + other.tail), k.saturating_mul(2).saturating_add(2))
        };
        Self {
            head,
            tail,
            tail_count: k.saturating_add(if exact_tails { 1 } else { 2 }),
            error_count: self.error_count.max(other.error_count).saturating_add(rounding),
            low: self.low.max(other.low),
            high: self.high.max(other.high) + 1,
        }
        .checked()
    }
}

impl Mul for Counted {
    type Output = Self;

    /// p + π = a.head·b.head exactly; tail = RN(π + RN(RN(a.head·b.tail) + RN(a.tail·b.head))).
    ///
    /// Relative to P = a.head·b.head ≤ p(1+u), in units of u²: dropped a.tail·b.tail ≤ k₁k₂; errors of the operands e₁ + e₂;
    /// rounding of the two products k₁ + k₂, of their sum k₁ + k₂, of the last sum 1 + k₁ + k₂. All second-order factors together
    /// stay below 2, so e = e₁ + e₂ + k₁k₂ + 3(k₁+k₂) + 3, and |tail| ≤ (1 + k₁ + k₂ + …)·u·p ≤ (k₁+k₂+2)·u·p.
    #[inline(always)]
    fn mul(self, other: Self) -> Self {
        let (k1, k2) = (self.tail_count, other.tail_count);
        let (head, error) = two_product(self.head, other.head);
        let (tail, tail_count, rounding) = if k1 == 0 && k2 == 0 {
            (error, 1, 0)
        } else if k2 == 0 {
            (error + self.tail * other.head, k1.saturating_add(2), k1.saturating_mul(2).saturating_add(2))
        } else if k1 == 0 {
            (error + self.head * other.tail, k2.saturating_add(2), k2.saturating_mul(2).saturating_add(2))
        } else {
            let cross = self.head * other.tail + self.tail * other.head;
            let sum = k1.saturating_add(k2);
            (error + cross, sum.saturating_add(2), k1.saturating_mul(k2).saturating_add(sum.saturating_mul(3)).saturating_add(3))
        };
        Self {
            head,
            tail,
            tail_count,
            error_count: self.error_count.saturating_add(other.error_count).saturating_add(rounding),
            low: self.low + other.low,
            high: self.high + other.high,
        }
        .checked()
    }
}

impl Div for Counted {
    type Output = Self;

    /// y = RN(1/b.head), q = RN(a.head·y); r = RN(a.head − q·b.head); tail = RN(RN(r + RN(a.tail − RN(q·b.tail)))·y).
    ///
    /// One hardware division instead of two, and quotients by the same divisor share it.
    ///
    /// y and q each have one rounding, so |a.head − q·b.head| ≤ (2u + …)·q·b.head. The rounded product is then within 3u of a.head, their
    /// difference exact by Sterbenz's lemma, and r has one rounding, of at most u·2u·q·b.head.
    ///
    /// Exactly, A/B − q = (r + a.tail − q·b.tail + δa − q·δb)/B. In units of u²·q: δa and δb give e₁ + e₂; dividing by b.head
    /// instead of B gives k₂(k₁+k₂+2); the roundings of r, the product, the difference and the sum give 2, k₂, k₁+k₂ and 2+k₁+k₂; the error of
    /// y and the rounding of the last product give 2(2+k₁+k₂). All second-order factors together stay below 2:
    /// e = e₁ + e₂ + k₂(k₁+k₂+2) + 4k₁ + 5k₂ + 10. |tail| ≤ (2+k₁+k₂+…)·u·q ≤ (k₁+k₂+3)·u·q.
    #[inline(always)]
    fn div(self, other: Self) -> Self {
        let (k1, k2) = (self.tail_count, other.tail_count);
        let reciprocal = 1.0 / other.head;
        let head = self.head * reciprocal;
        let (p, error) = two_product(head, other.head);
        let remainder = (self.head - p) - error;
        let tails = if k2 == 0 { self.tail } else { self.tail - head * other.tail };
        let numerator = if k1 == 0 && k2 == 0 { remainder } else { remainder + tails };
        let sum = k1.saturating_add(k2);
        let rounding = k2
            .saturating_mul(sum.saturating_add(2))
            .saturating_add(k1.saturating_mul(4))
            .saturating_add(k2.saturating_mul(5))
            .saturating_add(10);
        Self {
            head,
            tail: numerator * reciprocal,
            tail_count: sum.saturating_add(3),
            error_count: self.error_count.saturating_add(other.error_count).saturating_add(rounding),
            low: self.low - other.high,
            high: self.high - other.low,
        }
        .checked()
    }
}

impl Positive for Counted {
    /// s = RN(√head); r = head − s² is a double (Lefèvre et al. 2023, section 2, from memory; it is the exact remainder of the
    /// square root); y = RN(s·RN(1/(2·head))); tail = RN(RN(r + a.tail)·y).
    ///
    /// y stands for 1/2s, and the division need not wait for the root: s² is within 2u of head and y has two roundings, so y·2s is within 4u + …
    /// of 1.
    ///
    /// √X = s + (X − s²)/(s + √X), and |X − s²| ≤ (2 + k + …)·u·s². In units of u²·s: δ gives e/2; replacing s + √X by 2s gives at
    /// most (2+k)²/8; the rounding of the sum gives (2+k)/2, y and the last product 5(2+k)/2. So e' = ⌈e/2⌉ + ⌈(2+k)²/8⌉ + 3(2+k) + 2 and
    /// |tail| ≤ (k/2 + 1 + …)·u·s ≤ (⌈k/2⌉ + 2)·u·s.
    #[inline(always)]
    fn sqrt(self) -> Self {
        let k = self.tail_count;
        let head = sqrt(self.head);
        let (p, error) = two_product(head, head);
        let remainder = (self.head - p) - error;
        let numerator = if k == 0 { remainder } else { remainder + self.tail };
        let k_plus = k.saturating_add(2);
        Self {
            head,
            tail: numerator * (head * (0.5 / self.head)),
            tail_count: k.div_ceil(2).saturating_add(2),
            error_count: self
                .error_count
                .div_ceil(2)
                .saturating_add(k_plus.saturating_mul(k_plus).div_ceil(8))
                .saturating_add(k_plus.saturating_mul(3))
                .saturating_add(2),
            // Rounded outward to whole exponents.
            low: self.low.div_euclid(2),
            high: -(-self.high).div_euclid(2),
        }
        .checked()
    }
}
