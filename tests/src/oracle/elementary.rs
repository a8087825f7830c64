//! Reference values of the elementary functions at exact arguments.
//!
//! Results that are rational (the logarithm of one, powers of perfect powers) stay exact; by the theorem of
//! Lindemann all other logarithms and exponentials of rational numbers are irrational, so an undecided comparison
//! with a double is a matter of precision and never of equality.

use dashu_ratio::RBig;

use super::real::{Float, Real, WORKING, exponent, float};

/// Bits for an argument at this distance from the exact case: a tiny one needs more, since `exp(x) ≈ 1 + x`.
fn working(distance: &Float) -> usize {
    let small = usize::try_from((-exponent(distance)).max(0)).expect("not negative");
    WORKING + 4 * small
}

fn result(value: Float, bits: usize) -> Real {
    Real::approximate(value, i64::try_from(bits).expect("small") - 16)
}

/// `ln x` for positive `x`.
#[must_use]
pub fn ln(x: &RBig) -> Real {
    assert!(*x > RBig::ZERO, "logarithm of {x}");
    if x.is_one() {
        return Real::int(0);
    }
    let distance = float(&(x - RBig::ONE), WORKING);
    let bits = working(&distance);
    // What the logarithm loses next to one is added to the argument beforehand.
    let guard = usize::try_from((-exponent(&distance)).max(0)).expect("not negative");
    result(float(x, bits + 2 * guard + 32).ln(), bits)
}

/// `e^x`.
#[must_use]
pub fn exp(x: &RBig) -> Real {
    if x.is_zero() {
        return Real::int(1);
    }
    let bits = working(&float(x, WORKING));
    let size = usize::try_from(exponent(&float(x, WORKING)).max(0)).expect("not negative");
    result(float(x, bits + size + 32).exp(), bits)
}

/// `ln(1+x)/x` for `x > −1`, 1 at `x = 0`.
#[must_use]
pub fn log1p_over(x: &RBig) -> Real {
    if x.is_zero() {
        return Real::int(1);
    }
    ln(&(x + RBig::ONE)) / Real::Rational(x.clone())
}

/// `(e^x − 1)/x`, 1 at `x = 0`.
#[must_use]
pub fn expm1_over(x: &RBig) -> Real {
    if x.is_zero() {
        return Real::int(1);
    }
    (exp(x) - Real::int(1)) / Real::Rational(x.clone())
}

/// `x^y` for positive `x`.
#[must_use]
pub fn pow(x: &RBig, y: &RBig) -> Real {
    let distance = float(x, WORKING) - Float::ONE;
    let extra = if distance.repr().is_zero() || y.is_zero() {
        0
    } else {
        let size = exponent(&distance).min(0) + exponent(&float(y, WORKING)).min(0);
        4 * usize::try_from(-size).expect("not negative")
    };
    Real::Rational(x.clone()).pow(y, WORKING + extra)
}
