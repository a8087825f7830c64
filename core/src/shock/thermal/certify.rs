//! The proof of a compression: existence and uniqueness, and an enclosure far narrower than a double.

use super::ThermalError;
use super::stage::{Stage, residual, residual_slope};
use crate::gas::HeatCapacity;
use crate::number::{Ball, Semifield};

/// Newton steps with proof, at most.
const STEPS: u32 = 9;
/// A compression that is known this well, relative, gives outputs of one or two units in the last place.
const NARROW: f64 = 1e-21;

/// A proven compression.
#[derive(Clone, Copy, Debug)]
pub(super) struct Root {
    pub compression: Ball,
    /// c̄ at it.
    pub mean: Ball,
    /// The range whose polynomial gave it.
    pub to: usize,
}

/// A shock into gas of a temperature, by its stage and the heat capacity, in balls.
pub(super) struct Problem<'c, T: Stage<Ball>> {
    pub stage: T,
    pub heat_capacity: &'c HeatCapacity<Ball>,
    pub from: usize,
    pub temperature: Ball,
}

impl<T: Stage<Ball>> Problem<'_, T> {
    /// Interval Newton from an approximate root, with the polynomial of range `to`, extended beyond its ends where need be: ε − F(ε)/F′(E), where E
    /// is an interval about ε. If the result lies inside E, it holds the only root in E.
    pub(super) fn newton(&self, approximate: f64, to: usize) -> Option<Root> {
        let mut e = approximate;
        let mut wanted = 0.0;
        for step in 0..STEPS {
            let at = Ball::from(e);
            let excess = self.stage.temperature_excess(at);
            let mean = self.heat_capacity.mean(self.from, self.temperature, excess, to);
            let value = residual(&self.stage, at, mean);
            // First 2⁻⁴⁶, later wide enough for what the step before found.
            let reach = (e.abs() * f64::from_bits((1023 - 46) << 52)).max(wanted);
            let around = at.widened(reach);
            let over = self.stage.temperature_excess(around);
            let behind = self.temperature + self.temperature * over;
            let c = self.heat_capacity.value(to, behind);
            // c̄ over E from c̄ at ε: the integral grows by c times the step. For weak shocks that loses too much.
            let mean_over = if excess.nearest().abs() > 1e-3 {
                mean + (c - mean) * (over - excess) / over
            } else {
                self.heat_capacity.mean(self.from, self.temperature, over, to)
            };
            let slope = residual_slope(&self.stage, around, mean_over, (c - mean_over) / over);
            let found = at - value / slope;
            if around.enclosure().encloses_strictly(found.enclosure()) && (found.radius() <= NARROW * e.abs() || step + 1 == STEPS) {
                let there = self.stage.temperature_excess(found);
                let mean = mean + (c - mean) * (there - excess) / there;
                return Some(Root { compression: found, mean, to });
            }
            wanted = 4.0 * (found.nearest() - e).abs() + 4.0 * found.radius();
            // A reach that is not a number ends here too.
            if wanted >= 0.1 * e.abs() || wanted.is_nan() {
                return None;
            }
            e = found.nearest();
        }
        None
    }

    /// The temperature behind.
    pub(super) fn behind(&self, compression: Ball) -> Ball {
        self.temperature + self.temperature * self.stage.temperature_excess(compression)
    }

    /// The roots: one, or where the temperature behind is so near a joint of two polynomials that the jump of the enthalpy decides, the root of
    /// either polynomial: the model's answer lies in the hull of both.
    ///
    /// Existence is by interval Newton with the polynomial in whose range the temperature behind then lies. Uniqueness: between joints the energy that
    /// the gas behind lacks is monotone in ε where it can vanish (derived in [`how_it_is_proven`](crate::how_it_is_proven)), so it suffices that its
    /// sign on both sides of every joint is the one of the side of the root.
    pub(super) fn roots(&self, approximate: f64, to: usize) -> Result<[Option<Root>; 2], ThermalError> {
        let missing = || ThermalError::Existence { temperature: self.behind(Ball::from(approximate)).nearest() };
        let mut first = self.newton(approximate, to).ok_or_else(missing)?;
        let mut second = None;
        if let Some(other) = self.neighbour(&first) {
            let moved = self.newton(first.compression.nearest(), other).ok_or_else(missing)?;
            // Out of its own range, and not the other way round: the answer. Else nobody can tell, or the jump itself is the answer.
            if self.neighbour(&moved).is_none() && self.is_outside(&first) { first = moved } else { second = Some(moved) }
        }
        for (index, joint) in self.heat_capacity.joints().enumerate() {
            if self.is_far_from(joint, &first)
                || second.is_some_and(|second: Root| index == first.to.min(second.to))
                || self.is_clear_of(index, joint, first.compression)?
            {
                continue;
            }
            let near = (self.behind(first.compression).nearest() - joint).abs() < 1.0 && (first.to == index || first.to == index + 1);
            let other = if first.to == index { index + 1 } else { index };
            let also = if near && second.is_none() { self.newton(first.compression.nearest(), other) } else { None };
            let also = also.ok_or(ThermalError::Uniqueness { temperature: joint })?;
            // For a given speed the jump may hide further roots, unless both lie on either side of it.
            let over = |root: &Root| self.behind(root.compression) - Ball::from(joint);
            let (one, other) = (over(&first), over(&also));
            let apart = one.is_certainly_positive() && other.is_certainly_negative()
                || one.is_certainly_negative() && other.is_certainly_positive();
            if self.stage.least_slope().is_none() && !apart {
                return Err(ThermalError::Uniqueness { temperature: joint });
            }
            second = Some(also);
        }
        Ok([Some(first), second])
    }

    /// True if the slope of the energy alone keeps the sign at a joint: see [`Stage::least_slope`].
    fn is_far_from(&self, joint: f64, root: &Root) -> bool {
        let Some(least) = self.stage.least_slope() else { return false };
        let distance = (self.behind(root.compression).nearest() - joint).abs();
        // Twice, so that the rounding of these three doubles does not matter.
        distance * least > 2.0 * self.heat_capacity.jumps()
    }

    /// The range next to that of a root whose temperature behind is not certainly inside its own; a joint belongs to the lower range.
    fn neighbour(&self, root: &Root) -> Option<usize> {
        let [over_low, over_high] = self.over_ends(root);
        if root.to + 1 < self.heat_capacity.len() && !over_high.is_certainly_negative() {
            Some(root.to + 1)
        } else if root.to > 0 && !over_low.is_certainly_positive() {
            Some(root.to - 1)
        } else {
            None
        }
    }

    /// True if the temperature behind is certainly outside the range of a root.
    fn is_outside(&self, root: &Root) -> bool {
        let [over_low, over_high] = self.over_ends(root);
        over_high.is_certainly_positive() || over_low.is_certainly_negative()
    }

    /// The temperature behind less both ends of the range of a root: in balls, which tell sides apart that doubles do not.
    fn over_ends(&self, root: &Root) -> [Ball; 2] {
        let behind = self.behind(root.compression);
        self.heat_capacity.ends(root.to).map(|end| behind - Ball::from(end))
    }

    /// Whether the residual, with the polynomial below the joint and with the one above, has the sign that belongs to its side of the root, wherever
    /// the temperature behind passes the joint.
    fn is_clear_of(&self, below: usize, joint: f64, root: Ball) -> Result<bool, ThermalError> {
        let excess = (Ball::from(joint) - self.temperature) / self.temperature;
        let discriminant = self.stage.discriminant(excess);
        if discriminant.is_certainly_negative() {
            return Ok(true);
        }
        if !discriminant.is_certainly_positive() {
            return Err(ThermalError::Uniqueness { temperature: joint });
        }
        // With the polynomials up to the joint and with the one beyond it, which differ by the jump.
        let near = if self.from <= below { below } else { below + 1 };
        let rise = self.heat_capacity.rise(self.from, self.temperature, excess, near);
        let jump = self.heat_capacity.jump_above(below) / self.temperature;
        let rises = [rise, if near == below { rise + jump } else { rise - jump }];
        let one = Ball::whole(1);
        for crossing in self.stage.compressions_at(excess).into_iter().flatten() {
            if (-crossing).is_certainly_positive() || (crossing - one).is_certainly_positive() {
                continue;
            }
            let before = (root - crossing).is_certainly_positive();
            let after = (crossing - root).is_certainly_positive();
            // Behind the root the energy must fall on both sides of the joint, or it could rise to a second root.
            let falls = |index| {
                let c = self.heat_capacity.value(index, Ball::from(joint));
                self.stage.falling(crossing, c).is_certainly_positive()
            };
            if after && !(falls(below) && falls(below + 1)) {
                return Err(ThermalError::Uniqueness { temperature: joint });
            }
            for rise in rises {
                let value = self.stage.lacking(crossing, rise);
                let at_start = crossing.magnitude() == 0.0 && value.magnitude() == 0.0;
                if !(before && (value.is_certainly_positive() || at_start) || after && value.is_certainly_negative()) {
                    return Ok(false);
                }
            }
        }
        Ok(true)
    }
}
