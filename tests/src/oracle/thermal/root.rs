//! Where the conservation laws hold: a search over the temperature behind the shock, piece by piece of the heat capacity.

use super::super::real::{Float, exponent};
use super::gas::Law;

/// What a search found.
#[derive(Clone, Debug, Default)]
pub struct Candidates {
    /// Solutions at which the residual rises through zero, each with the piece of its heat capacity, in rising temperature. More than one where the
    /// enthalpy of the data jumps down.
    pub solutions: Vec<(usize, Float)>,
    /// Where there is none because the enthalpy jumps up past it: the solutions of both neighbouring polynomials, extended a little.
    pub extended: Vec<(usize, Float)>,
    /// Whether the residual also falls through zero: behind such a jump the gas is faster than sound (it takes up the energy that the data lack at a
    /// joint), so that it is no shock.
    pub falls: bool,
    /// Whether the residual is still too low at the highest temperature of the data.
    pub beyond: bool,
}

impl Candidates {
    /// All that an enclosure has to hold.
    pub fn all(&self) -> impl Iterator<Item = &(usize, Float)> {
        self.solutions.iter().chain(&self.extended)
    }
}

/// A residual that is negative for too low a temperature behind the shock and positive for too high a one, by the polynomial of a piece.
pub type Residual<'a> = &'a dyn Fn(&Law, usize, &Float) -> Float;

fn is_negative(value: &Float) -> bool {
    *value < Float::ZERO
}

/// 2^exponent.
fn power(exponent: isize) -> Float {
    Float::from_parts(1.into(), exponent)
}

/// How closely a search looks.
#[derive(Clone, Copy, Debug)]
pub struct Look {
    /// The first temperature is above the start of a piece by 2^-this of its length; the next ones follow at a constant ratio of that distance.
    pub nearest: isize,
    /// Whether to tell two solutions that are close: by a ratio of two. Otherwise it is 2⁸, and beyond the first piece only the ends are looked at.
    pub closely: bool,
    /// Each solution is proven by the signs of the residual at T(1 ± 2^-this).
    pub proven: isize,
}

/// All temperatures above `start` (in piece `first`, but not at `start`, where the trivial solution may be) at which the residual changes sign.
///
/// `coarse` and `fine` are the same heat capacity in few and in all digits.
#[must_use]
pub fn search(coarse: &Law, fine: &Law, first: usize, start: &Float, residual: Residual, look: Look) -> Candidates {
    let mut found = Candidates::default();
    let mut before: Option<bool> = None;
    for piece in first..coarse.pieces() {
        let (low, high) = coarse.ends(piece);
        let low = if piece == first { start.clone() } else { low.clone() };
        let at = |t: Float| {
            let value = residual(coarse, piece, &t);
            (t, value)
        };
        let high = high.cloned().unwrap_or_else(|| {
            // No end: far enough.
            let mut high = &low * Float::from(2);
            while is_negative(&at(high.clone()).1) {
                high *= Float::from(2);
            }
            high
        });
        if low >= high {
            // The fill is at the upper end of its piece, and all above belongs to the next.
            continue;
        }
        let length = &high - &low;
        let point = |distance: isize| at(if distance == 0 { high.clone() } else { &low + &length * power(-distance) });
        // The start is no solution that is looked for; a joint is a point like others.
        let mut last = if piece == first { point(look.nearest) } else { at(low.clone()) };
        if before == Some(true) && !is_negative(&last.1) {
            let width = &low * power(-10);
            for (piece, beyond) in [(piece - 1, &low + &width), (piece, start.max(&(&low - &width)).clone())] {
                found.extended.extend(extended(coarse, fine, piece, [&low, &beyond], residual, look.proven).map(|t| (piece, t)));
            }
        }
        let step = if look.closely {
            1
        } else if piece == first {
            8
        } else {
            look.nearest
        };
        for distance in (0..look.nearest).rev().filter(|distance| distance % step == 0) {
            let next = point(distance);
            found.falls |= !is_negative(&last.1) && is_negative(&next.1);
            if is_negative(&last.1) && !is_negative(&next.1) {
                found
                    .solutions
                    .push((piece, refine(fine, piece, rough(coarse, piece, &low, [last, next.clone()], residual), residual, look.proven)));
            }
            last = next;
        }
        before = Some(is_negative(&last.1));
    }
    found.beyond = before == Some(true);
    found
}

/// The solution of a polynomial between the joint where it ends and a temperature beyond; `None` where there is none.
fn extended(coarse: &Law, fine: &Law, piece: usize, ends: [&Float; 2], residual: Residual, proven: isize) -> Option<Float> {
    let bracket = ends.map(|t| (t.clone(), residual(coarse, piece, t)));
    if is_negative(&bracket[0].1) == is_negative(&bracket[1].1) {
        return None;
    }
    Some(refine(fine, piece, rough(coarse, piece, ends[0], bracket, residual), residual, proven))
}

/// The solution near the second of two estimates: the secant method, and the signs beside its end.
fn refine(law: &Law, piece: usize, estimates: [Float; 2], residual: Residual, proven: isize) -> Float {
    let at = |t: &Float| residual(law, piece, t);
    let [mut old, mut new] = estimates.map(|t| t.with_precision(law.precision()).value());
    let mut old_value = at(&old);
    for _ in 0..12 {
        let value = at(&new);
        let difference = &value - &old_value;
        if value.repr().is_zero() || difference.repr().is_zero() {
            break;
        }
        let step = &value * (&new - &old) / difference;
        let next = &new - &step;
        (old, old_value, new) = (new, value, next);
        if step.repr().is_zero() || exponent(&step) < exponent(&new) - proven as i64 - 10 {
            break;
        }
    }
    let signs = [-1, 1].map(|side| is_negative(&at(&(&new + &new * power(-proven) * Float::from(side)))));
    assert!(signs[0] != signs[1], "no change of sign at {new:?}");
    new
}

/// Two estimates of the solution in a bracket, good to some 60 bits of its distance from `origin`.
///
/// False position, halving the weight of an end that stays (Dowell and Jarratt, BIT 11 (1971) 168, from memory).
fn rough(law: &Law, piece: usize, origin: &Float, [mut low, mut high]: [(Float, Float); 2], residual: Residual) -> [Float; 2] {
    let negative = is_negative(&low.1);
    let (mut last, mut before) = (0, high.0.clone());
    for _ in 0..300 {
        let middle = &high.0 - &high.1 * (&high.0 - &low.0) / (&high.1 - &low.1);
        let value = residual(law, piece, &middle);
        let (moved, distance) = (&middle - &before, &middle - origin);
        let near = &middle + &distance * power(-50);
        if value.repr().is_zero() || moved.repr().is_zero() || exponent(&moved) < exponent(&distance) - 60 {
            return [near, middle];
        }
        before.clone_from(&middle);
        let side = if is_negative(&value) == negative { -1 } else { 1 };
        if side < 0 {
            low = (middle, value);
            if last < 0 {
                high.1 /= Float::from(2);
            }
        } else {
            high = (middle, value);
            if last > 0 {
                low.1 /= Float::from(2);
            }
        }
        last = side;
    }
    panic!("the bracket does not shrink");
}
