//! The proof of a compression: existence and uniqueness, and an enclosure far narrower than a double.

use super::ThermalError;
use super::stage::{ProvenStage, Stage, residual, residual_slope};
use crate::gas::HeatCapacity;
use crate::number::{Ball, Decided, Elementary, Estimate};

/// Newton steps with proof, at most.
const STEPS: u32 = 9;
/// A compression that is known this well, relative, gives outputs of one or two units in the last place.
const NARROW: f64 = 1e-21;
/// Below this temperature excess the slope is computed in balls: c − c̄, of the order of x, loses too many digits of an estimate.
const WEAK: f64 = 1e-3;

/// A proven compression.
#[derive(Clone, Copy, Debug)]
pub(super) struct Root {
    pub compression: Ball,
    /// x at it.
    pub excess: Ball,
    /// The temperature behind.
    pub behind: Ball,
    /// c̄ at it.
    pub mean: Ball,
    /// The range whose polynomial gave it.
    pub to: usize,
}

/// A shock into gas of a temperature, by its stage and the heat capacity, in balls.
pub(super) struct Problem<'c, T: ProvenStage> {
    pub stage: T,
    pub heat_capacity: &'c HeatCapacity<Ball>,
    pub from: usize,
    pub temperature: Ball,
}

/// x, c̄ and the residual at a point.
#[derive(Clone, Copy)]
struct Point {
    excess: Ball,
    mean: Ball,
    value: Ball,
}

/// How far the root is from a point, and how much more x and c̄ are there.
struct Change {
    compression: Ball,
    excess: Ball,
    mean: Ball,
}

impl<T: ProvenStage> Problem<'_, T> {
    /// Interval Newton from an approximate root, with the polynomial of range `to`, extended beyond its ends where need be: ε − F(ε)/F′(E), where E
    /// is an interval about ε. If the result lies inside E, it holds the only root in E.
    ///
    /// F(ε) takes all digits of balls. F′(E) is as wide as E anyway, and x and c̄ at the root follow from those at ε by the mean-value theorem, so estimates
    /// do for them.
    pub(super) fn newton(&self, approximate: f64, to: usize) -> Option<Root> {
        let mut e = approximate;
        let mut wanted = 0.0;
        for step in 0..STEPS {
            let at = Ball::from(e);
            let excess = self.stage.temperature_excess(at);
            let mean = self.heat_capacity.mean(self.from, self.temperature, excess, to);
            let point = Point { excess, mean, value: residual(&self.stage, at, mean) };
            // First 2⁻⁴⁶, later wide enough for what the step before found.
            let reach = (e.abs() * f64::from_bits((1023 - 46) << 52)).max(wanted);
            let change = if excess.nearest().abs() > WEAK {
                self.change(&self.stage.rough(), &point, Estimate::from(e).widened(reach), to)
            } else {
                self.change(&self.stage, &point, at.widened(reach), to)
            };
            let found = at + change.compression;
            if change.compression.magnitude() < reach && (found.radius() <= NARROW * e.abs() || step + 1 == STEPS) {
                let excess = excess + change.excess;
                let behind = self.temperature + self.temperature * excess;
                return Some(Root { compression: found, excess, behind, mean: mean + change.mean, to });
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

    /// From a point to the root: −F(ε)/F′(E), and the slopes of x and c̄ over E times that.
    #[inline(always)]
    fn change<S: Elementary + From<Ball>>(&self, stage: &impl Stage<S>, point: &Point, around: S, to: usize) -> Change
    where
        Ball: From<S>,
    {
        let temperature = S::from(self.temperature);
        let (excess, mean) = (S::from(point.excess), S::from(point.mean));
        let over = stage.temperature_excess(around);
        let c = self.heat_capacity.value_as(to, temperature + temperature * over);
        // c̄ over E from c̄ at ε: the integral grows by c times the step. For weak shocks that loses too much.
        let mean_over = if point.excess.nearest().abs() > WEAK {
            mean + (c - mean) * (over - excess) / over
        } else {
            self.heat_capacity.mean_as(self.from, temperature, over, to)
        };
        let mean_slope = (c - mean_over) / over;
        let compression = -(S::from(point.value) / residual_slope(stage, around, mean_over, mean_slope));
        let [_, _, excess_slope] = stage.slopes(around);
        let excess = excess_slope * compression;
        Change { compression: compression.into(), excess: excess.into(), mean: (mean_slope * excess).into() }
    }

    /// The roots: one, or where the temperature behind is so near a joint of two polynomials that the jump of the enthalpy decides, the root of
    /// either polynomial: the model's answer lies in the hull of both.
    ///
    /// Existence is by interval Newton with the polynomial in whose range the temperature behind then lies. Uniqueness: between joints the energy that
    /// the gas behind lacks is monotone in ε where it can vanish (derived in [`how_it_is_proven`](crate::how_it_is_proven)), so it suffices that its
    /// sign on both sides of every joint is the one of the side of the root.
    pub(super) fn roots(&self, approximate: f64, to: usize) -> Result<[Option<Root>; 2], ThermalError> {
        let missing = || {
            let excess = self.stage.temperature_excess(Ball::from(approximate));
            ThermalError::Existence { temperature: (self.temperature + self.temperature * excess).nearest() }
        };
        let mut first = self.newton(approximate, to).ok_or_else(missing)?;
        let mut second = None;
        if let Some(other) = self.neighbour(&first) {
            let moved = self.newton(first.compression.nearest(), other).ok_or_else(missing)?;
            // Out of its own range, and not the other way round: the answer. Else nobody can tell, or the jump itself is the answer.
            if self.neighbour(&moved).is_none() && self.is_outside(&first) { first = moved } else { second = Some(moved) }
        }
        let far = self.far();
        for (index, joint) in self.heat_capacity.joints().enumerate() {
            if (first.behind.nearest() - joint).abs() > far
                || second.is_some_and(|second: Root| index == first.to.min(second.to))
                || self.is_beside(index, joint, first.compression)?
            {
                continue;
            }
            let near = (first.behind.nearest() - joint).abs() < 1.0 && (first.to == index || first.to == index + 1);
            let other = if first.to == index { index + 1 } else { index };
            let also = if near && second.is_none() { self.newton(first.compression.nearest(), other) } else { None };
            let also = also.ok_or(ThermalError::Uniqueness { temperature: joint })?;
            // For a given speed the jump may hide further roots, unless both lie on either side of it.
            let over = |root: &Root| root.behind - Ball::from(joint);
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

    /// How far from a joint, K, the slope of the energy alone keeps the sign there, whatever the jumps: see [`Stage::least_slope`].
    fn far(&self) -> f64 {
        // Twice, so that the rounding of these doubles and of the distance does not matter.
        self.stage.least_slope().map_or(f64::INFINITY, |least| 2.0 * self.heat_capacity.jumps() / least)
    }

    /// The range next to that of a root whose temperature behind is not certainly inside its own; a joint belongs to the lower range.
    fn neighbour(&self, root: &Root) -> Option<usize> {
        let [low, high] = self.heat_capacity.ends(root.to);
        let behind = root.behind.nearest();
        // The ball is narrower by far than this.
        if root.behind.radius() < 1e-9 * behind && low < behind * (1.0 - 1e-6) && behind * (1.0 + 1e-6) < high {
            return None;
        }
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
        self.heat_capacity.ends(root.to).map(|end| root.behind - Ball::from(end))
    }

    /// Whether a joint is certainly no matter, by estimates, or where they do not tell, by balls.
    fn is_beside(&self, below: usize, joint: f64, root: Ball) -> Result<bool, ThermalError> {
        let roughly = self.is_clear_of(&self.stage.rough(), below, joint, Estimate::from(root));
        if roughly == Ok(true) { roughly } else { self.is_clear_of(&self.stage, below, joint, root) }
    }

    /// Whether the residual, with the polynomial below the joint and with the one above, has the sign that belongs to its side of the root, wherever
    /// the temperature behind passes the joint.
    fn is_clear_of<S: Decided + From<Ball> + From<f64>>(
        &self,
        stage: &impl Stage<S>,
        below: usize,
        joint: f64,
        root: S,
    ) -> Result<bool, ThermalError> {
        let temperature = S::from(self.temperature);
        let excess = (S::from(joint) - temperature) / temperature;
        let discriminant = stage.discriminant(excess);
        if discriminant.is_negative() {
            return Ok(true);
        }
        if !discriminant.is_positive() {
            return Err(ThermalError::Uniqueness { temperature: joint });
        }
        // With the polynomials up to the joint and with the one beyond it, which differ by the jump.
        let near = if self.from <= below { below } else { below + 1 };
        let rise = self.heat_capacity.rise_as(self.from, temperature, excess, near);
        let jump = S::from(self.heat_capacity.jump_above(below)) / temperature;
        let rises = [rise, if near == below { rise + jump } else { rise - jump }];
        let one = S::whole(1);
        for crossing in stage.compressions_at(excess).into_iter().flatten() {
            if (-crossing).is_positive() || (crossing - one).is_positive() {
                continue;
            }
            let before = (root - crossing).is_positive();
            let after = (crossing - root).is_positive();
            // Behind the root the energy must fall on both sides of the joint, or it could rise to a second root.
            let falls = |index| {
                let c = self.heat_capacity.value_as(index, S::from(joint));
                stage.falling(crossing, c).is_positive()
            };
            if after && !(falls(below) && falls(below + 1)) {
                return Err(ThermalError::Uniqueness { temperature: joint });
            }
            for rise in rises {
                let value = stage.lacking(crossing, rise);
                let at_start = crossing.is_zero() && value.is_zero();
                if !(before && (value.is_positive() || at_start) || after && value.is_negative()) {
                    return Ok(false);
                }
            }
        }
        Ok(true)
    }
}
