//! A certified root of one function in a bracket.

use super::Ball;
use super::dual::Dual;
use super::enclosure::Enclosure;
use super::traits::Elementary;
use core::fmt;

/// A function written once for every kind of number, as [`root`] needs it.
///
/// Constants enter through [`Semifield::whole`](super::Semifield::whole) or are held as exact values in `self`.
pub trait Function {
    /// f(x).
    fn evaluate<S: Elementary>(&self, x: S) -> S;
}

/// Plain steps of the search, at most: one bisection for each binary digit that separates two doubles.
const PLAIN_STEPS: u32 = 2100;
/// Pieces of the bracket on which the slope is bounded, at most, and the depth of their subdivision.
const PIECES: u32 = 4096;
/// Halvings of the bracket for the slope, at most.
const DEPTH: usize = 40;

/// Which part of the proof of a root failed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum RootError {
    /// The bracket is not finite or not in order.
    Bracket {
        /// The lower end as given.
        low: f64,
        /// The upper end as given.
        high: f64,
    },
    /// The function is proven to have the same sign at both ends, or no sign could be proven at one of them.
    Existence {
        /// f at the lower end.
        at_low: Enclosure,
        /// f at the upper end.
        at_high: Enclosure,
    },
    /// On this piece of the bracket the slope could not be shown to keep its sign: there may be more than one root.
    Uniqueness {
        /// The piece.
        piece: Enclosure,
        /// The bounds found for the slope there.
        slope: Enclosure,
    },
    /// The root exists and is the only one, but the signs near it could be proven only this far apart.
    Width {
        /// An enclosure of the root, wider than 2 ulp.
        proven: Enclosure,
    },
}

impl fmt::Display for RootError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Bracket { low, high } => write!(f, "the bracket from {low} to {high} must be finite and in order"),
            Self::Existence { at_low, at_high } => {
                write!(
                    f,
                    "existence is not proven: the function must have opposite signs at both ends, but is {at_low:.6} and {at_high:.6}"
                )
            }
            Self::Uniqueness { piece, slope } => {
                write!(f, "uniqueness is not proven: on {piece:.6} the slope lies in {slope:.3}, which contains zero")
            }
            Self::Width { proven } => write!(f, "the root is proven only to lie in {proven}: the function is too uncertain near it"),
        }
    }
}

impl core::error::Error for RootError {}

/// The sign of f at a double, if it can be proven: −1, 0 or 1.
fn sign<F: Function>(f: &F, x: f64) -> Option<i32> {
    let value = f.evaluate(Ball::from(x)).enclosure();
    if value.low() > 0.0 {
        Some(1)
    } else if value.high() < 0.0 {
        Some(-1)
    } else if value.low() == 0.0 && value.high() == 0.0 {
        Some(0)
    } else {
        None
    }
}

/// The root of f in [low, high], as an enclosure of at most 2 ulp, with the proof that it exists and is the only one there.
///
/// Existence: f has proven opposite signs at both ends (or is exactly zero at one). Uniqueness: the slope, bounded by interval
/// arithmetic on pieces of the bracket, keeps one sign. Width: signs proven at neighbouring doubles. The search itself runs in
/// plain f64 and needs no proof. Work is bounded: 2100 plain steps (usually below 60), 4096 pieces, a few proven evaluations.
///
/// # Errors
/// [`RootError`] says which part of the proof failed, and with what numbers.
///
/// ```
/// use endwall::number::{Elementary, Function, RootError, root};
/// struct Cube;
/// impl Function for Cube {
///     fn evaluate<S: Elementary>(&self, x: S) -> S {
///         x * x.squared() - S::whole(2)
///     }
/// }
/// let third_root_of_two = root(&Cube, 1.0, 2.0)?;
/// assert!(third_root_of_two.contains(1.2599210498948732));
/// assert!(third_root_of_two.width_in_ulp() <= 2);
/// assert!(matches!(root(&Cube, 2.0, 3.0), Err(RootError::Existence { .. })));
/// # Ok::<(), RootError>(())
/// ```
pub fn root<F: Function>(f: &F, low: f64, high: f64) -> Result<Enclosure, RootError> {
    let bracket = Enclosure::new(low, high).ok_or(RootError::Bracket { low, high })?;
    let no_sign =
        || RootError::Existence { at_low: f.evaluate(Ball::from(low)).enclosure(), at_high: f.evaluate(Ball::from(high)).enclosure() };
    let at_low = sign(f, low).ok_or_else(no_sign)?;
    let at_high = sign(f, high).ok_or_else(no_sign)?;
    if at_low * at_high > 0 || (at_low == 0 && at_high == 0) {
        return Err(no_sign());
    }
    one_sign_of_slope(f, bracket)?;
    if at_low == 0 {
        return Ok(Enclosure::from(low));
    }
    if at_high == 0 {
        return Ok(Enclosure::from(high));
    }
    close_in(f, bracket, search(f, low, high, at_high), at_high)
}

/// Bounds the slope on pieces of the bracket until each keeps its sign.
fn one_sign_of_slope<F: Function>(f: &F, bracket: Enclosure) -> Result<(), RootError> {
    // The pieces still to be looked at: the last one first, each half as wide as the one before.
    let mut ends = [0.0; DEPTH];
    let mut waiting = 0;
    let mut piece = bracket;
    let mut first_sign = None;
    for _ in 0..PIECES {
        let [slope] = f.evaluate(Dual::<Enclosure, 1>::variable(piece, 0)).slopes();
        let own = if slope.is_proven() && slope.low() > 0.0 {
            Some(1)
        } else if slope.is_proven() && slope.high() < 0.0 {
            Some(-1)
        } else {
            None
        };
        if own.is_some() && (first_sign.is_none() || own == first_sign) {
            first_sign = own;
            if waiting == 0 {
                return Ok(());
            }
            waiting -= 1;
            let next = ends.get(waiting).copied().unwrap_or(bracket.high());
            piece = Enclosure::ordered(piece.high(), next);
            continue;
        }
        let middle = piece.middle();
        let (Some(end), false) = (ends.get_mut(waiting), middle <= piece.low() || middle >= piece.high() || own.is_some()) else {
            return Err(RootError::Uniqueness { piece, slope });
        };
        *end = piece.high();
        waiting += 1;
        piece = Enclosure::ordered(piece.low(), middle);
    }
    Err(RootError::Uniqueness { piece, slope: Enclosure::UNKNOWN })
}

/// A double near the root by bisection and the secant rule in plain arithmetic; no proof.
fn search<F: Function>(f: &F, low: f64, high: f64, sign_at_high: i32) -> f64 {
    let (mut low, mut high) = (low, high);
    let (mut f_low, mut f_high) = (f.evaluate(low), f.evaluate(high));
    for step in 0..PLAIN_STEPS {
        let secant = low - f_low * ((high - low) / (f_high - f_low));
        let middle = low / 2.0 + high / 2.0;
        // Every third step halves the bracket, so that the work is bounded for every function.
        let next = if step % 3 == 2 || !(secant > low && secant < high) { middle } else { secant };
        if !(next > low && next < high) {
            return next.clamp(low, high);
        }
        let value = f.evaluate(next);
        if value == 0.0 {
            return next;
        }
        if (value > 0.0) == (sign_at_high > 0) {
            (high, f_high) = (next, value);
        } else {
            (low, f_low) = (next, value);
        }
    }
    low / 2.0 + high / 2.0
}

/// Proven signs on both sides of the approximation, as near as they can be had.
fn close_in<F: Function>(f: &F, bracket: Enclosure, near: f64, sign_at_high: i32) -> Result<Enclosure, RootError> {
    let (mut low, mut high) = (bracket.low(), bracket.high());
    // Steps of 0, 1, 2, 4, … doubles away from the approximation, until signs on both sides are proven.
    let mut step = 0u64;
    for _ in 0..64 {
        for at in [stepped(near, -(step as i64)), stepped(near, step as i64)] {
            if at <= low || at >= high {
                continue;
            }
            match sign(f, at) {
                Some(0) => return Ok(Enclosure::from(at)),
                Some(sign) if sign == sign_at_high => high = at,
                Some(_) => low = at,
                None => {}
            }
        }
        let proven = Enclosure::ordered(low, high);
        if proven.width_in_ulp() <= 1 {
            return Ok(proven);
        }
        if low > bracket.low() && high < bracket.high() {
            break;
        }
        step = if step == 0 { 1 } else { step.saturating_mul(2) };
    }
    // Between them by bisection on the doubles.
    for _ in 0..64 {
        let proven = Enclosure::ordered(low, high);
        let width = proven.width_in_ulp();
        if width <= 1 {
            return Ok(proven);
        }
        let at = stepped(low, (width / 2) as i64);
        match sign(f, at) {
            Some(0) => return Ok(Enclosure::from(at)),
            Some(sign) if sign == sign_at_high => high = at,
            Some(_) => low = at,
            None if width == 2 => return Ok(proven),
            None => return tighten(f, low, at, high, sign_at_high),
        }
    }
    Err(RootError::Width { proven: Enclosure::ordered(low, high) })
}

/// The sign at `middle` cannot be proven: the nearest doubles on both sides where it can.
fn tighten<F: Function>(f: &F, low: f64, middle: f64, high: f64, sign_at_high: i32) -> Result<Enclosure, RootError> {
    let below = stepped(middle, -1);
    let above = stepped(middle, 1);
    let low = if sign(f, below) == Some(-sign_at_high) { below.max(low) } else { low };
    let high = if sign(f, above) == Some(sign_at_high) { above.min(high) } else { high };
    let proven = Enclosure::ordered(low, high);
    if proven.width_in_ulp() <= 2 { Ok(proven) } else { Err(RootError::Width { proven }) }
}

/// The double that is so many places up or down.
fn stepped(x: f64, by: i64) -> f64 {
    let bits = x.to_bits() as i64;
    let place = if bits < 0 { i64::MIN.wrapping_sub(bits) } else { bits };
    let limit = f64::MAX.to_bits() as i64;
    let target = place.saturating_add(by).clamp(-limit, limit);
    f64::from_bits((if target < 0 { i64::MIN.wrapping_sub(target) } else { target }) as u64)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::number::Rational;

    struct Polynomial;
    impl Function for Polynomial {
        // x³ − 3x + 1: three roots, slope zero at ±1.
        fn evaluate<S: Elementary>(&self, x: S) -> S {
            x * x.squared() - S::whole(3) * x + S::whole(1)
        }
    }

    struct LogarithmMinus(u32);
    impl Function for LogarithmMinus {
        fn evaluate<S: Elementary>(&self, x: S) -> S {
            x.ln() - S::whole(self.0)
        }
    }

    struct Square;
    impl Function for Square {
        fn evaluate<S: Elementary>(&self, x: S) -> S {
            x.squared() - S::whole(1)
        }
    }

    #[test]
    fn roots_are_found_and_proven() {
        let least = root(&Polynomial, 0.0, 0.9).unwrap();
        // 2 cos(4π/9), from trigonometry.
        assert!(least.contains(0.347_296_355_333_860_7) && least.width_in_ulp() <= 2, "{least}");
        let e = root(&LogarithmMinus(1), 1.0, 10.0).unwrap();
        assert!(e.contains(core::f64::consts::E) && e.width_in_ulp() <= 2);
        assert!(root(&LogarithmMinus(100), 1.0, 1e60).unwrap().width_in_ulp() <= 2);
        assert_eq!(root(&Square, 0.5, 2.0).unwrap(), Enclosure::from(1.0));
        assert_eq!(root(&Square, 1.0, 2.0).unwrap(), Enclosure::from(1.0));
    }

    #[test]
    fn each_failure_names_the_part_of_the_proof() {
        assert!(matches!(root(&Polynomial, 0.5, 1.2), Err(RootError::Existence { .. })));
        assert!(matches!(root(&Polynomial, -2.0, 2.0), Err(RootError::Uniqueness { .. })));
        assert!(matches!(root(&Polynomial, 1.0, f64::NAN), Err(RootError::Bracket { .. })));
        assert!(matches!(root(&Polynomial, 2.0, 1.0), Err(RootError::Bracket { .. })));
        assert!(matches!(root(&LogarithmMinus(1), -1.0, 10.0), Err(RootError::Existence { .. })));
    }

    /// A linear function with an irrational-looking exact root.
    struct Line(Rational);
    impl Function for Line {
        fn evaluate<S: Elementary>(&self, x: S) -> S {
            x * S::whole(7) - S::whole(5)
        }
    }

    #[test]
    fn a_root_that_is_no_double_lies_between_two() {
        let line = Line(Rational::ratio(5, 7).unwrap());
        let found = root(&line, 0.0, 1.0).unwrap();
        assert_eq!(found, Enclosure::from(line.0));
    }
}
