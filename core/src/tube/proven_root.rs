//! Proven roots of relations that hold balls: interval Newton for a smooth one, proven signs at doubles for a monotone one.

use crate::number::{Ball, Dual, Enclosure};

/// Plain steps of a search, at most; about 12 are taken.
const PLAIN_STEPS: u32 = 200;
/// Newton steps without proof, at most; two to five are taken.
const POLISHING_STEPS: u32 = 40;
/// Newton steps with proof, at most.
const NEWTON_STEPS: u32 = 6;
/// 2⁻⁴⁴, relative: what a plain search is nearly always good to, and so narrow that the slope over it leaves about 2⁻⁹⁰.
const REACH: f64 = f64::from_bits((1023 - 44) << 52);
/// Widenings of the signs about a plain root, at most: each doubles the distance in doubles.
const WIDENINGS: u32 = 40;
/// Pieces on which a slope is bounded, at most.
const PIECES: u32 = 4096;
/// Halvings of a bracket, at most.
const DEPTH: usize = 40;

/// A root of an increasing f between two doubles, in plain arithmetic: no proof. What is not a number counts as too high.
pub(super) fn search(f: impl Fn(f64) -> f64, low: f64, high: f64) -> f64 {
    let (mut low, mut high) = (low, high);
    let (mut f_low, mut f_high) = (f64::NAN, f64::NAN);
    for step in 0..PLAIN_STEPS {
        let secant = low - f_low * ((high - low) / (f_high - f_low));
        // Every third step halves the bracket, so that the work is bounded for every function.
        let next = if step % 3 != 2 && secant > low && secant < high { secant } else { f64::midpoint(low, high) };
        if !(next > low && next < high) {
            break;
        }
        let value = f(next);
        if value == 0.0 {
            return next;
        }
        if value < 0.0 { (low, f_low) = (next, value) } else { (high, f_high) = (next, value) }
    }
    // The end whose residual is smaller.
    if f_low.abs() < f_high.abs() { low } else { high }
}

/// A root by Newton's method without proof, from a start that is nearly good.
pub(super) fn polished(f: impl Fn(Dual<Ball, 1>) -> Dual<Ball, 1>, start: f64) -> f64 {
    let mut y = start;
    for _ in 0..POLISHING_STEPS {
        let value = f(Dual::variable(Ball::from(y), 0));
        let [slope] = value.slopes();
        let step = value.value().nearest() / slope.nearest();
        if step.is_nan() {
            break;
        }
        y -= step;
        if step.abs() <= 1e-12 * y.abs() {
            break;
        }
    }
    y
}

/// The root of f near an approximation, by interval Newton: N = x − f(x)/f′(X) inside X holds a root, and X holds no other.
///
/// Source: R. E. Moore, Interval Analysis (1966), from memory; the statement is the mean-value theorem. `None` where the proof does not close.
pub(super) fn newton(f: impl Fn(Dual<Ball, 1>) -> Dual<Ball, 1>, approximate: f64) -> Option<Ball> {
    let mut x = approximate;
    let mut reach = x.abs() * REACH;
    for _ in 0..NEWTON_STEPS {
        let at = Ball::from(x);
        let value = f(Dual::constant(at)).value();
        let [slope] = f(Dual::variable(at.widened(reach), 0)).slopes();
        let correction = value / slope;
        let found = at - correction;
        if correction.magnitude() < reach {
            return Some(found);
        }
        if !found.enclosure().is_proven() {
            return None;
        }
        x = found.nearest();
        // What the digits of the relation allow, where they do not allow more.
        reach = (x.abs() * REACH).max(4.0 * found.radius());
    }
    None
}

/// What is known of an increasing function at a double.
#[derive(Clone, Copy, Debug)]
pub(super) enum Side {
    /// Its value.
    Value(Ball),
    /// The double lies beyond the domain of the function, on the upper side: the root is below.
    Beyond,
    /// Nothing is known there; the search goes on below.
    Unknown,
}

impl Side {
    /// Plain.
    fn nearest(self) -> f64 {
        match self {
            Self::Value(value) => value.nearest(),
            Self::Beyond | Self::Unknown => f64::NAN,
        }
    }
}

/// The root of a function that increases on the positive numbers, between doubles at which its sign is proven; usually neighbours.
///
/// Existence: proven signs and continuity. That it is the only one is the caller's proof that the function increases. `Ok(None)` where no sign
/// change is found.
pub(super) fn increasing<E>(f: impl Fn(f64) -> Result<Side, E>, start: f64) -> Result<Option<Enclosure>, E> {
    // By factors of four away from the start, up or down.
    let is_low = |x: f64| Ok(f(x)?.nearest() < 0.0);
    let rises = is_low(start)?;
    let factor = if rises { 4.0 } else { 0.25 };
    let mut last = start;
    let mut steps = 0;
    while is_low(last * factor)? == rises {
        last *= factor;
        steps += 1;
        if steps == PLAIN_STEPS {
            return Ok(None);
        }
    }
    let (low, high) = if rises { (last, last * factor) } else { (last * factor, last) };
    let near = search(|x| f(x).map_or(f64::NAN, Side::nearest), low, high);
    let proven_below = |side| matches!(side, Side::Value(value) if value.is_certainly_negative());
    let proven_above = |side| match side {
        Side::Value(value) => value.is_certainly_positive(),
        Side::Beyond => true,
        Side::Unknown => false,
    };
    let (mut below, mut above) = (None, None);
    let mut step = 0u64;
    for _ in 0..WIDENINGS {
        let (down, up) = (f64::from_bits(near.to_bits().saturating_sub(step)), f64::from_bits(near.to_bits().saturating_add(step)));
        for at in [down, up] {
            let side = f(at)?;
            if proven_below(side) {
                below = Some(below.map_or(at, |known: f64| known.max(at)));
            } else if proven_above(side) {
                above = Some(above.map_or(at, |known: f64| known.min(at)));
            } else if matches!(side, Side::Value(value) if value.magnitude() == 0.0) {
                return Ok(Some(Enclosure::from(at)));
            }
        }
        if let (Some(below), Some(above)) = (below, above) {
            // Signs in the wrong order prove nothing: the function does not increase.
            if below >= above {
                return Ok(None);
            }
            return Ok(Some(shrunk(&f, below, above, proven_below, proven_above)?));
        }
        step = (2 * step).max(1);
    }
    Ok(None)
}

/// Bisects between proven signs down to neighbouring doubles, or as far as signs can be proven.
fn shrunk<E>(
    f: &impl Fn(f64) -> Result<Side, E>,
    below: f64,
    above: f64,
    proven_below: impl Fn(Side) -> bool,
    proven_above: impl Fn(Side) -> bool,
) -> Result<Enclosure, E> {
    let (mut below, mut above) = (below, above);
    loop {
        let distance = above.to_bits().saturating_sub(below.to_bits());
        if distance <= 1 {
            break;
        }
        let middle = f64::from_bits(below.to_bits() + distance / 2);
        let side = f(middle)?;
        if proven_below(side) {
            below = middle;
        } else if proven_above(side) {
            above = middle;
        } else {
            break;
        }
    }
    Ok(Enclosure::ordered(below, above))
}

/// True if the slope of f is proven to keep one sign on the bracket, by interval arithmetic on pieces of it.
pub(super) fn keeps_slope(f: impl Fn(Dual<Enclosure, 1>) -> Dual<Enclosure, 1>, low: f64, high: f64) -> bool {
    // The ends of the pieces still to be looked at.
    let mut ends = [0.0; DEPTH];
    let mut waiting = 0;
    let mut piece = Enclosure::ordered(low, high);
    let mut rises = None;
    for _ in 0..PIECES {
        let [slope] = f(Dual::variable(piece, 0)).slopes();
        let own = if slope.is_proven() && !slope.contains(0.0) { Some(slope.low() > 0.0) } else { None };
        if own.is_some() && (rises.is_none() || own == rises) {
            rises = own;
            if waiting == 0 {
                return true;
            }
            waiting -= 1;
            piece = Enclosure::ordered(piece.high(), ends.get(waiting).copied().unwrap_or(high));
            continue;
        }
        let middle = piece.middle();
        let splits = own.is_none() && middle > piece.low() && middle < piece.high();
        let (Some(end), true) = (ends.get_mut(waiting), splits) else { return false };
        *end = piece.high();
        waiting += 1;
        piece = Enclosure::ordered(piece.low(), middle);
    }
    false
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::number::{Elementary, Positive, Semifield};
    use core::convert::Infallible;

    fn cube<S: Elementary>(x: S) -> S {
        x * x.squared() - S::whole(2)
    }

    #[test]
    fn newton_proves_more_digits_than_a_double_holds() {
        let root = newton(cube, 1.26).or_else(|| newton(cube, 1.259_921_049_894_873)).unwrap();
        assert!(cube(root).enclosure().contains(0.0));
        assert!(root.radius() < 1e-28, "{root:?}");
        // No root near, no proof.
        assert!(newton(|x| x.squared() + Dual::whole(1), 0.5).is_none());
    }

    #[test]
    fn signs_close_in_from_far_away() {
        for start in [1e-9, 0.7, 1.3, 1e12] {
            let root = increasing(|x| Ok::<_, Infallible>(Side::Value(cube(Ball::from(x)))), start).unwrap().unwrap();
            assert!(root.contains(1.259_921_049_894_873_2) && root.width_in_ulp() == 1, "{root:?}");
        }
        // A root that is a double is found as it is.
        let exact = |x: f64| Ok::<_, Infallible>(Side::Value(Ball::from(x) - Ball::from(0.375)));
        assert_eq!(increasing(exact, 1.0).unwrap(), Some(Enclosure::from(0.375)));
        // The end of the domain is no root.
        let beyond = |x: f64| Ok::<_, Infallible>(if x > 3.0 { Side::Beyond } else { Side::Value(Ball::from(x).sqrt() - Ball::from(1.5)) });
        assert_eq!(increasing(beyond, 1.0).unwrap(), Some(Enclosure::from(2.25)));
        assert_eq!(increasing(|_| Ok::<_, Infallible>(Side::Value(Ball::whole(1))), 1.0).unwrap(), None);
    }

    /// From signs that are far apart to neighbouring doubles, or to where signs end.
    #[test]
    fn signs_are_brought_together() {
        let proven = |f: &dyn Fn(Ball) -> Ball| {
            let side = |x: f64| Ok::<_, Infallible>(Side::Value(f(Ball::from(x))));
            let below = |side| matches!(side, Side::Value(value) if value.is_certainly_negative());
            let above = |side| matches!(side, Side::Value(value) if value.is_certainly_positive());
            shrunk(&side, 1.0, 2.0, below, above).unwrap()
        };
        let sharp = proven(&cube);
        assert!(sharp.contains(1.259_921_049_894_873_2) && sharp.width_in_ulp() == 1, "{sharp:?}");
        let blurred = proven(&|x| cube(x).widened(1e-6));
        assert!(blurred.contains(1.259_921_049_894_873_2) && blurred.width() > 1e-7, "{blurred:?}");
    }

    #[test]
    fn a_slope_that_changes_sign_is_seen() {
        let parabola = |x: Dual<Enclosure, 1>| x.squared() - x;
        assert!(keeps_slope(parabola, 0.5001, 9.0));
        assert!(!keeps_slope(parabola, 0.4, 9.0));
    }
}
