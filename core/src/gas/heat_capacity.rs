//! Heat capacity of an ideal gas as polynomials over adjoining ranges of temperature.

use super::speed_integral::speed_rise;
use crate::number::{Ball, Dual, Elementary, Enclosure, Semifield, Signed};

/// Ranges, at most.
pub const RANGES: usize = 5;

/// One range: `c_p`/R as a polynomial, and what happens to h/R where it begins.
#[derive(Clone, Copy, Debug)]
struct Range<S> {
    low: f64,
    high: f64,
    /// The lower end as a number.
    start: S,
    /// h/R just above the start less h/R at the start, K: the polynomials of neighbouring ranges do not quite meet.
    jump: S,
    /// a1 … a7 of [`SpeciesRange`](super::species::SpeciesRange).
    a: [S; 7],
}

impl<S: Semifield> Range<S> {
    /// The same in another kind of number.
    #[inline(always)]
    fn map<T: Semifield>(&self, convert: impl Fn(S) -> T) -> Range<T> {
        Range { low: self.low, high: self.high, start: convert(self.start), jump: convert(self.jump), a: self.a.map(convert) }
    }
}

impl<S: Signed> Range<S> {
    /// `c_p`/R.
    #[inline(always)]
    fn value(&self, temperature: S) -> S {
        let [a1, a2, a3, a4, a5, a6, a7] = self.a;
        let t = temperature;
        (a1 / t + a2) / t + (a3 + t * (a4 + t * (a5 + t * (a6 + t * a7))))
    }

    /// T d(`c_p`/R)/dT.
    #[inline(always)]
    fn scaled_slope(&self, temperature: S) -> S {
        let [a1, a2, _, a4, a5, a6, a7] = self.a;
        let t = temperature;
        let rising = a5.doubled() + t * (S::whole(3) * a6 + t * a7.doubled().doubled());
        t * (a4 + t * rising) - (a1.doubled() / t + a2) / t
    }
}

impl<S: Elementary> Range<S> {
    /// The mean of `c_p`/R between T and `end` = T(1 + x), by divided differences: no term cancels as x goes to zero.
    #[inline(always)]
    fn mean(&self, temperature: S, excess: S, end: S) -> S {
        let [a1, a2, a3, a4, a5, a6, a7] = self.a;
        let t = temperature;
        let square = t.squared();
        let first = t + end;
        let second = square + end * first;
        let third = square * t + end * second;
        let fourth = square.squared() + end * third;
        let rational = (a1 / end + a2 * excess.log1p_ratio()) / t;
        let whole = S::whole;
        rational + (a3 + (a4 * first).halved() + a5 * second / whole(3) + (a6 * third).halved().halved() + a7 * fourth / whole(5))
    }

    /// ∫ `c_p`/R dT/T from T to T(1 + x), by divided differences: no term cancels as x goes to zero.
    #[inline(always)]
    fn entropy_rise(&self, temperature: S, excess: S) -> S {
        let [a1, a2, a3, a4, a5, a6, a7] = self.a;
        let t = temperature;
        let end = t + t * excess;
        let square = t.squared();
        let first = t + end;
        let second = square + end * first;
        let third = square * t + end * second;
        let whole = S::whole;
        let falling = (a1 * first / (t * end).doubled() + a2) / end;
        let rising = t * (a4 + a5 * first / whole(2) + a6 * second / whole(3) + a7 * third / whole(4));
        excess * (a3 * excess.log1p_ratio() + falling + rising)
    }
}

/// `c_p`/R of an ideal gas as a function of temperature, in one kind of number.
///
/// Where two ranges meet, the enthalpy jumps by what the data say (up to 9e-5 K at 1000 K, 5e-3 K at 6000 K in h/R); the joint belongs to the
/// lower range.
#[derive(Clone, Copy, Debug)]
pub struct HeatCapacity<S> {
    ranges: [Range<S>; RANGES],
    used: usize,
}

impl<S: Semifield> HeatCapacity<S> {
    /// The same in another kind of number.
    pub fn map<T: Semifield>(&self, convert: impl Fn(S) -> T) -> HeatCapacity<T> {
        HeatCapacity { ranges: self.ranges.map(|range| range.map(&convert)), used: self.used }
    }

    /// The temperatures between which it is known, K.
    pub fn range(&self) -> (f64, f64) {
        (self.at(0).low, self.at(self.used - 1).high)
    }

    /// The number of the range that a temperature belongs to, the first or the last for one outside.
    pub fn index_at(&self, temperature: f64) -> usize {
        self.used().iter().position(|range| temperature <= range.high).unwrap_or(self.used - 1)
    }

    /// The number of ranges.
    pub(crate) fn len(&self) -> usize {
        self.used
    }

    /// Both ends of a range, K.
    pub(crate) fn ends(&self, index: usize) -> [f64; 2] {
        [self.at(index).low, self.at(index).high]
    }

    /// Whether all of these temperatures are above the lower end of a range, and up to its upper one; a joint belongs to the range below it.
    pub(crate) fn within_ends(&self, index: usize, temperatures: Enclosure) -> [bool; 2] {
        let [low, high] = self.ends(index);
        [temperatures.low() > low || index == 0 && temperatures.low() == low, temperatures.high() <= high]
    }

    /// The temperatures at which a range begins where another ends, K.
    pub fn joints(&self) -> impl Iterator<Item = f64> + '_ {
        self.used().iter().skip(1).map(|range| range.low)
    }

    fn used(&self) -> &[Range<S>] {
        self.ranges.get(..self.used).unwrap_or(&self.ranges)
    }

    #[inline(always)]
    fn at(&self, index: usize) -> &Range<S> {
        // `used` is at least 1 and an index is always below it.
        let [first, ..] = &self.ranges;
        self.ranges.get(index).unwrap_or(first)
    }
}

impl<S: Signed> HeatCapacity<S> {
    /// The same at every positive temperature.
    pub fn constant(value: S) -> Self {
        let zero = S::whole(0);
        let range = Range { low: 0.0, high: f64::INFINITY, start: zero, jump: zero, a: [zero, zero, value, zero, zero, zero, zero] };
        Self { ranges: [range; RANGES], used: 1 }
    }

    /// `c_p`/R by the polynomial of one range.
    #[inline(always)]
    pub fn value(&self, index: usize, temperature: S) -> S {
        self.at(index).value(temperature)
    }

    /// `c_p`/R by the polynomial of one range, in another kind of number.
    #[inline(always)]
    pub(crate) fn value_as<T: Signed + From<S>>(&self, index: usize, temperature: T) -> T {
        self.at(index).map(T::from).value(temperature)
    }

    /// T d(`c_p`/R)/dT by the polynomial of one range.
    #[inline(always)]
    pub fn scaled_slope(&self, index: usize, temperature: S) -> S {
        self.at(index).scaled_slope(temperature)
    }
}

impl<S: Elementary> HeatCapacity<S> {
    /// The mean heat capacity (h(T(1 + x)) − h(T))/(R T x) between a temperature T in range `from` and T(1 + x) in range `to`, continuous at x = 0.
    ///
    /// Across joints it is the sum of the parts with the jumps of the enthalpy between them.
    pub fn mean(&self, from: usize, temperature: S, excess: S, to: usize) -> S {
        if from == to {
            self.at(from).mean(temperature, excess, temperature + temperature * excess)
        } else {
            self.rise(from, temperature, excess, to) / excess
        }
    }

    /// (h(T(1 + x)) − h(T))/(R T), the rise of the enthalpy, as [`HeatCapacity::mean`] times x.
    pub fn rise(&self, from: usize, temperature: S, excess: S, to: usize) -> S {
        let end = temperature + temperature * excess;
        if from == to {
            return excess * self.at(from).mean(temperature, excess, end);
        }
        if from > to {
            return -(self.rise(to, end, -(excess / (S::whole(1) + excess)), from) * (end / temperature));
        }
        let part = |range: &Range<S>, low: S, high: S| range.mean(low, (high - low) / low, high) * (high - low);
        let between = self.ranges.iter().zip(self.ranges.iter().skip(1)).enumerate().skip(from).take(to - from);
        let sum = between.fold(S::whole(0), |sum, (index, (range, next))| {
            let low = if index == from { temperature } else { range.start };
            sum + part(range, low, next.start) + next.jump
        });
        let last = self.at(to);
        (sum + part(last, last.start, end)) / temperature
    }

    /// [`HeatCapacity::mean`] in another kind of number.
    pub(crate) fn mean_as<T: Elementary + From<S>>(&self, from: usize, temperature: T, excess: T, to: usize) -> T {
        if from == to {
            self.at(from).map(T::from).mean(temperature, excess, temperature + temperature * excess)
        } else {
            self.map(T::from).mean(from, temperature, excess, to)
        }
    }

    /// [`HeatCapacity::rise`] in another kind of number.
    pub(crate) fn rise_as<T: Elementary + From<S>>(&self, from: usize, temperature: T, excess: T, to: usize) -> T {
        if from == to {
            excess * self.mean_as(from, temperature, excess, to)
        } else {
            self.map(T::from).rise(from, temperature, excess, to)
        }
    }

    /// (s(T(1 + x)) − s(T))/R = ∫ `c_p`/R dT/T at constant pressure, between a temperature T in range `from` and T(1 + x) in range `to`.
    ///
    /// Across joints it is the sum of the integrals of both polynomials, without a jump: continuous and, with `c_p`, increasing.
    pub fn entropy_rise(&self, from: usize, temperature: S, excess: S, to: usize) -> S {
        self.integral(from, temperature, excess, to, Range::entropy_rise)
    }

    /// An integral over temperature between T in range `from` and T(1 + x) in range `to`, given what it is inside one range.
    fn integral(&self, from: usize, temperature: S, excess: S, to: usize, own: impl Fn(&Range<S>, S, S) -> S + Copy) -> S {
        if from == to {
            return own(self.at(from), temperature, excess);
        }
        let end = temperature + temperature * excess;
        if from > to {
            return -self.integral(to, end, -(excess / (S::whole(1) + excess)), from, own);
        }
        let part = |range: &Range<S>, low: S, high: S| own(range, low, (high - low) / low);
        let between = self.ranges.iter().zip(self.ranges.iter().skip(1)).enumerate().skip(from).take(to - from);
        let sum = between.fold(S::whole(0), |sum, (index, (range, next))| {
            let low = if index == from { temperature } else { range.start };
            sum + part(range, low, next.start)
        });
        let last = self.at(to);
        sum + part(last, last.start, end)
    }
}

impl<const N: usize> HeatCapacity<Dual<Enclosure, N>> {
    /// The sum of the sizes of the jumps of `c_p`/R between two ranges, either way.
    pub(crate) fn kinks_between(&self, from: usize, to: usize) -> Enclosure {
        let (first, last) = (from.min(to), from.max(to));
        (first..last).fold(Enclosure::whole(0), |sum, index| {
            let joint = Dual::constant(Enclosure::from(self.at(index).high));
            let jump = (self.value(index + 1, joint) - self.value(index, joint)).value();
            sum + jump.hull(-jump)
        })
    }

    /// The sum of the jumps of h/R between two ranges, K.
    pub(crate) fn jumps_between(&self, from: usize, to: usize) -> Enclosure {
        let (first, last) = (from.min(to), from.max(to));
        let between = self.used().iter().skip(first + 1).take(last - first);
        let sum = between.fold(Enclosure::whole(0), |sum, range| sum + range.jump.value());
        if from <= to { sum } else { -sum }
    }
}

impl<S: Signed> HeatCapacity<S> {
    /// The same with the slopes of every coefficient with respect to one input.
    pub(crate) fn with_slopes(&self, slopes: &Self) -> HeatCapacity<Dual<S, 1>> {
        let mut all = self.map(Dual::constant);
        for (range, slope) in all.ranges.iter_mut().zip(&slopes.ranges) {
            for (coefficient, slope) in range.a.iter_mut().zip(slope.a) {
                *coefficient = Dual::with_slopes(coefficient.value(), [slope]);
            }
            range.jump = Dual::with_slopes(range.jump.value(), [slope.jump]);
        }
        all
    }

    /// The sum with a multiple of another one of the same ranges.
    pub(crate) fn plus(&self, other: &Self, times: S) -> Self {
        let mut sum = *self;
        for (range, other) in sum.ranges.iter_mut().zip(&other.ranges) {
            for (coefficient, other) in range.a.iter_mut().zip(other.a) {
                *coefficient = *coefficient + times * other;
            }
            range.jump = range.jump + times * other.jump;
        }
        sum
    }

    /// Less the same at every temperature.
    pub(super) fn less_constant(mut self, constant: S) -> Self {
        for range in &mut self.ranges {
            let [.., a3, _, _, _, _] = &mut range.a;
            *a3 = *a3 - constant;
        }
        self
    }
}

impl HeatCapacity<Ball> {
    /// ∫ √(c(c − 1)/T) dT with c = `c_p`/R, √K, between a temperature T in range `from` and T(1 + x) in range `to`, as [`HeatCapacity::entropy_rise`];
    /// unknown where c is not proven to exceed 1 on the way.
    pub(crate) fn speed_rise(&self, from: usize, temperature: Ball, excess: Ball, to: usize) -> Ball {
        self.integral(from, temperature, excess, to, |range, temperature, excess| speed_rise(&range.a, temperature, excess))
    }

    /// The jump of h/R where the range above this one begins, K.
    pub(crate) fn jump_above(&self, index: usize) -> Ball {
        self.at(index + 1).jump
    }

    /// An upper bound of the sum of all jumps of h/R, K.
    pub(crate) fn jumps(&self) -> f64 {
        self.used().iter().skip(1).map(|range| range.jump.magnitude()).sum::<f64>() * (1.0 + 1e-9)
    }

    /// One range of given coefficients.
    pub(super) fn range_of(low: f64, high: f64, jump: Ball, a: [Ball; 7]) -> Self {
        Self { ranges: [Range { low, high, start: Ball::from(low), jump, a }; RANGES], used: 1 }
    }

    /// With another range that begins where this ends; `None` if there is no place for it.
    pub(super) fn followed_by(mut self, next: &Self) -> Option<Self> {
        let [range, ..] = next.ranges;
        *self.ranges.get_mut(self.used)? = range;
        self.used += 1;
        Some(self)
    }
}
