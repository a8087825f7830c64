//! Isentropic changes of state, by integrals over temperature that increase with it.
//!
//! The integrand is positive, since `c_p`/R > 1: [`Species::check`](super::species::Species::check) proves it. So the sign of an integral at the ends of
//! each range, less the value that it is to have, proves in which range the temperature lies, that it exists and that there is no other.

use super::heat_capacity::HeatCapacity;
use crate::number::{Ball, Elementary, Positive, Semifield};
use core::cmp::Ordering;

/// Newton steps without proof, at most: 3 to 5 are taken.
const PLAIN_STEPS: u32 = 60;
/// Newton steps with proof, at most.
const STEPS: u32 = 3;
/// A relative change of temperature that is known this well gives a temperature of one or two units in the last place.
const NARROW: f64 = 1e-21;
/// 2⁻⁴⁶, the first reach of the interval Newton step: what the plain solution is nearly always good to.
const REACH: f64 = f64::from_bits((1023 - 46) << 52);

/// An integral over temperature that belongs to an isentropic change.
pub(crate) trait Integral {
    /// From T in range `from` to T(1 + x) in range `to`.
    fn rise(heat_capacity: &HeatCapacity<Ball>, from: usize, temperature: Ball, excess: Ball, to: usize) -> Ball;
    /// Its derivative with respect to x, given T, 1 + x and `c_p`/R there.
    fn slope(temperature: Ball, ratio: Ball, heat_capacity: Ball) -> Ball;
    /// x for constant `c_p`/R.
    fn excess<S: Elementary>(temperature: S, heat_capacity: S, rise: S) -> S;
}

/// ln(p′/p) = ∫ `c_p`/R dT/T.
pub(crate) struct Pressure;

impl Integral for Pressure {
    fn rise(heat_capacity: &HeatCapacity<Ball>, from: usize, temperature: Ball, excess: Ball, to: usize) -> Ball {
        heat_capacity.entropy_rise(from, temperature, excess, to)
    }

    fn slope(_: Ball, ratio: Ball, heat_capacity: Ball) -> Ball {
        heat_capacity / ratio
    }

    fn excess<S: Elementary>(_: S, heat_capacity: S, rise: S) -> S {
        let exponent = rise / heat_capacity;
        exponent * exponent.expm1_ratio()
    }
}

/// The gas speed that a simple wave changes by, over √(R/W): ∫ √(c(c − 1)/T) dT with c = `c_p`/R, in √K. It is ∫ dh/a, as h and a are functions of T.
pub(crate) struct Speed;

impl Integral for Speed {
    fn rise(heat_capacity: &HeatCapacity<Ball>, from: usize, temperature: Ball, excess: Ball, to: usize) -> Ball {
        heat_capacity.speed_rise(from, temperature, excess, to)
    }

    fn slope(temperature: Ball, ratio: Ball, c: Ball) -> Ball {
        (c * (c - Ball::whole(1)) * temperature / ratio).sqrt()
    }

    /// (1 + h)² − 1 with h = rise/(2√(c(c − 1)T)); at h = −1 the gas has expanded to vacuum.
    fn excess<S: Elementary>(temperature: S, c: S, rise: S) -> S {
        let h = rise / (c * (c - S::whole(1)) * temperature).sqrt().doubled();
        h * (S::whole(2) + h)
    }
}

/// A temperature T(1 + x) after a change, and the range whose polynomial gave it.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Change {
    /// x.
    pub excess: Ball,
    /// The range.
    pub to: usize,
}

/// One change, or the two of which one is true: where the temperature is so near a joint that nobody can tell its side, each polynomial gives one.
pub(crate) type Changes = [Option<Change>; 2];

impl HeatCapacity<Ball> {
    /// The change from T in this range by which an integral rises so much; none where it is not proven to stay within the data.
    pub(crate) fn changed_by<I: Integral>(&self, from: usize, temperature: Ball, rise: Ball) -> Changes {
        let one = |excess: Ball, to| [Some(Change { excess, to }), None];
        let (coldest, hottest) = self.range();
        if (coldest, hottest) == (0.0, f64::INFINITY) {
            return one(I::excess(temperature, self.value(0, temperature), rise), 0);
        }
        if rise.magnitude() == 0.0 {
            return one(Ball::whole(0), from);
        }
        // Positive where T′ is greater than this temperature, which is an end of the range. Where the change leads away from the end the integral to it has the
        // other sign than the rise, which then says all that is asked.
        let lacking = |end: f64, to: usize| {
            let distance = Ball::from(end) - temperature;
            let leads_away = distance.is_certainly_positive() && rise.is_certainly_negative()
                || distance.is_certainly_negative() && rise.is_certainly_positive();
            if leads_away { rise } else { rise - I::rise(self, from, temperature, distance / temperature, to) }
        };
        let mut low = coldest;
        let mut below = lacking(low, 0);
        if !below.is_certainly_positive() {
            return [None; 2];
        }
        let mut found = [None; 2];
        let mut places = found.iter_mut();
        for (to, high) in self.joints().chain([hottest]).enumerate() {
            let above = lacking(high, to);
            if !below.is_certainly_negative() && !above.is_certainly_positive() {
                // From the joint by which the change enters the range: as differences from a T beyond it, small changes would lose their digits.
                let (start, rise) = match to.cmp(&from) {
                    Ordering::Less => (Ball::from(high), above),
                    Ordering::Equal => (temperature, rise),
                    Ordering::Greater => (Ball::from(low), below),
                };
                let own = Problem { heat_capacity: self, range: to, start, rise }.solve::<I>(low, high);
                let excess = if to == from { own } else { (start + start * own - temperature) / temperature };
                let Some(place) = places.next() else { return [None; 2] };
                *place = Some(Change { excess, to });
            }
            (low, below) = (high, above);
        }
        if below.is_certainly_negative() { found } else { [None; 2] }
    }
}

/// A change inside one range, or from its joint with another one.
struct Problem<'c> {
    heat_capacity: &'c HeatCapacity<Ball>,
    range: usize,
    /// T, from which the change starts.
    start: Ball,
    /// The integral from there to T′.
    rise: Ball,
}

impl Problem<'_> {
    /// x = T′/T − 1, where T′ is proven to lie between these two temperatures.
    fn solve<I: Integral>(&self, low: f64, high: f64) -> Ball {
        // Where Newton's proof does not close, what is proven is the range.
        let range = || (Ball::around(crate::number::Enclosure::ordered(low, high)) - self.start) / self.start;
        self.newton::<I>(self.approximate::<I>(low, high)).unwrap_or_else(range)
    }

    /// The integral to T(1 + x).
    fn integral<I: Integral>(&self, excess: Ball) -> Ball {
        I::rise(self.heat_capacity, self.range, self.start, excess, self.range)
    }

    /// d/dx of it.
    fn slope<I: Integral>(&self, ratio: Ball) -> Ball {
        I::slope(self.start, ratio, self.heat_capacity.value(self.range, self.start * ratio))
    }

    /// x without proof, by Newton's iteration inside a bracket that is halved where a step would leave it.
    fn approximate<I: Integral>(&self, low: f64, high: f64) -> f64 {
        let (start, rise) = (self.start.nearest(), self.rise.nearest());
        let (mut low, mut high) = ((low - start) / start, (high - start) / start);
        let c = self.heat_capacity.value(self.range, self.start).nearest();
        let mut x = I::excess(start, c, rise).clamp(low, high);
        for _ in 0..PLAIN_STEPS {
            let value = self.integral::<I>(Ball::from(x)).nearest() - rise;
            let next = x - value / self.slope::<I>(Ball::whole(1) + Ball::from(x)).nearest();
            // Newton's next step would be its square.
            if (next - x).abs() <= 1e-9 * x.abs() {
                return next;
            }
            (low, high) = if value > 0.0 { (low, x) } else { (x, high) };
            x = if next >= low && next <= high { next } else { f64::midpoint(low, high) };
        }
        x
    }

    /// Interval Newton in x: if x − F(x)/F′(X) lies inside an interval X about x, it holds the only root in X of F, the integral less what it has to be.
    fn newton<I: Integral>(&self, approximate: f64) -> Option<Ball> {
        let mut x = approximate;
        let mut wanted = 0.0;
        for step in 0..STEPS {
            let at = Ball::from(x);
            let reach = (x.abs() * REACH).max(wanted);
            let correction = (self.integral::<I>(at) - self.rise) / self.slope::<I>(Ball::whole(1) + at.widened(reach));
            let found = at - correction;
            if correction.magnitude() < reach && (found.radius() <= NARROW || step + 1 == STEPS) {
                return Some(found);
            }
            wanted = 4.0 * correction.magnitude();
            if wanted.is_nan() || wanted >= 0.1 {
                return None;
            }
            x = found.nearest();
        }
        None
    }
}

#[cfg(test)]
#[path = "isentropic_change_tests.rs"]
mod tests;
