//! The four operations, square root and powers of [`Real`]: exact results stay exact, and approximated ones keep
//! count of their right bits.

use core::ops::{Add, Div, Mul, Neg, Sub};

use dashu_base::{Abs, BitTest, SquareRoot};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

use super::real::{Float, Real, WORKING, exponent, float, rational_root};

/// Precision with which two values meet when at least one is approximated.
fn common(a: &Real, b: &Real) -> (Float, i64, Float, i64) {
    let precision = |value: &Real| match value {
        Real::Approximate { value, .. } => value.precision(),
        _ => WORKING,
    };
    let bits = precision(a).max(precision(b));
    let ((x, x_bits), (y, y_bits)) = (a.to_float(bits), b.to_float(bits));
    (x, x_bits, y, y_bits)
}

fn add(a: &Real, b: &Real) -> Real {
    match (a, b) {
        (Real::Rational(x), Real::Rational(y)) => return Real::Rational(x + y),
        (Real::Rational(x), other) | (other, Real::Rational(x)) if *x == RBig::ZERO => {
            return other.clone();
        }
        (Real::Rational(x), Real::Surd { shift, radicand, negative }) | (Real::Surd { shift, radicand, negative }, Real::Rational(x)) => {
            return Real::Surd { shift: x + shift, radicand: radicand.clone(), negative: *negative };
        }
        (Real::Surd { shift: s, radicand: p, negative: m }, Real::Surd { shift: t, radicand: q, negative: n }) => {
            // √p ± √q is again a root when p/q is the square of a ratio.
            if let Some(root) = rational_root(&(p / q)) {
                let signed = |negative: bool, value: RBig| if negative { -value } else { value };
                let factor = signed(*m, root) + signed(*n, RBig::ONE);
                let shift = s + t;
                if factor == RBig::ZERO {
                    return Real::Rational(shift);
                }
                return Real::surd(shift, &factor * &factor * q, factor < RBig::ZERO);
            }
        }
        _ => {}
    }
    let (x, x_bits, y, y_bits) = common(a, b);
    let wrong = (exponent(&x) - x_bits).max(exponent(&y) - y_bits) + 3;
    let sum = x + y;
    let bits = exponent(&sum) - wrong;
    Real::approximate(sum, bits)
}

fn mul(a: &Real, b: &Real) -> Real {
    match (a, b) {
        (Real::Rational(x), Real::Rational(y)) => return Real::Rational(x * y),
        (Real::Rational(x), Real::Surd { shift, radicand, negative }) | (Real::Surd { shift, radicand, negative }, Real::Rational(x)) => {
            if *x == RBig::ZERO {
                return Real::Rational(RBig::ZERO);
            }
            return Real::Surd { shift: x * shift, radicand: x * x * radicand, negative: *negative != (*x < RBig::ZERO) };
        }
        (Real::Surd { shift: s, radicand: p, negative: m }, Real::Surd { shift: t, radicand: q, negative: n })
            if *s == RBig::ZERO && *t == RBig::ZERO =>
        {
            return Real::surd(RBig::ZERO, p * q, m != n);
        }
        _ => {}
    }
    let (x, x_bits, y, y_bits) = common(a, b);
    Real::approximate(x * y, x_bits.min(y_bits) - 2)
}

fn reciprocal(a: &Real) -> Real {
    match a {
        Real::Rational(x) => Real::Rational(RBig::ONE / x),
        Real::Surd { shift, radicand, negative } => {
            // 1/(s ± √q) = (s ∓ √q)/(s² − q)
            let norm = shift * shift - radicand;
            let conjugate = Real::Surd { shift: shift.clone(), radicand: radicand.clone(), negative: !negative };
            mul(&conjugate, &Real::Rational(RBig::ONE / norm))
        }
        Real::Approximate { value, bits } => Real::approximate(Float::ONE / value, bits - 2),
    }
}

impl Real {
    /// Square root of a value that is not negative.
    #[must_use]
    pub fn sqrt(&self) -> Self {
        if let Self::Rational(value) = self {
            return Self::surd(RBig::ZERO, value.clone(), false);
        }
        let (value, bits) = self.to_float(WORKING);
        Self::approximate(value.sqrt(), bits - 1)
    }

    /// Square of the value.
    #[must_use]
    pub fn square(&self) -> Self {
        self * self
    }

    /// Positive value to the power `power`, with at least `bits` right bits where the value allows.
    ///
    /// A rational result is found and stays exact: `x^(n/d)` is rational exactly when `x` is a perfect `d`-th power.
    #[must_use]
    pub fn pow(&self, power: &RBig, bits: usize) -> Self {
        assert!(self.signum() > 0, "power of a number that is not positive");
        if let Self::Rational(base) = self {
            if *base == RBig::ONE || *power == RBig::ZERO {
                return Self::int(1);
            }
            if let Some(result) = rational_power(base, power) {
                return Self::Rational(result);
            }
            if *power.denominator() == UBig::from(2u8) {
                if let Some(result) = rational_power(base, &RBig::from(power.numerator().clone())) {
                    return Self::surd(RBig::ZERO, result, false);
                }
            }
        }
        let slack = 64 + power.numerator().bit_len();
        let (base, base_bits) = self.to_float(bits + slack);
        // Near one the logarithm is small and as uncertain as the base; far from one it is large and costs bits.
        let logarithm = base.clone().with_precision(bits + 2 * slack).value().ln();
        let size = exponent(&logarithm);
        let product = logarithm * float(power, bits + slack);
        let exact_base = matches!(self, Self::Rational(_) | Self::Surd { .. });
        let lost = exponent(&product).max(0) + if exact_base { 0 } else { (exponent(&product) - size).max(0) };
        let result = product.exp();
        Self::approximate(result, base_bits.min(i64::try_from(bits).expect("small")) - lost - 8)
    }
}

/// `base^power` when that is rational and of reasonable size.
fn rational_power(base: &RBig, power: &RBig) -> Option<RBig> {
    let degree = usize::try_from(power.denominator()).ok()?;
    let (top, bottom) = (UBig::try_from(base.numerator().clone()).ok()?, base.denominator().clone());
    if degree > top.bit_len().max(bottom.bit_len()) {
        return None;
    }
    let root = |value: &UBig| {
        let root = value.nth_root(degree);
        (root.pow(degree) == *value).then_some(root)
    };
    let (top, bottom) = (root(&top)?, root(&bottom)?);
    let times = usize::try_from(UBig::try_from(power.numerator().clone().abs()).ok()?).ok()?;
    assert!(times < 1 << 16, "exact power of {times}: use an approximated base");
    let result = RBig::from_parts(IBig::from(top.pow(times)), bottom.pow(times));
    Some(if *power < RBig::ZERO { RBig::ONE / result } else { result })
}

impl Neg for &Real {
    type Output = Real;
    fn neg(self) -> Real {
        mul(&Real::int(-1), self)
    }
}

macro_rules! operator {
    ($trait:ident, $name:ident, |$a:ident, $b:ident| $body:expr) => {
        impl $trait<&Real> for &Real {
            type Output = Real;
            fn $name(self, other: &Real) -> Real {
                let ($a, $b) = (self, other);
                $body
            }
        }
        impl $trait<Real> for Real {
            type Output = Real;
            fn $name(self, other: Real) -> Real {
                $trait::$name(&self, &other)
            }
        }
        impl $trait<&Real> for Real {
            type Output = Real;
            fn $name(self, other: &Real) -> Real {
                $trait::$name(&self, other)
            }
        }
        impl $trait<Real> for &Real {
            type Output = Real;
            fn $name(self, other: Real) -> Real {
                $trait::$name(self, &other)
            }
        }
    };
}

operator!(Add, add, |a, b| add(a, b));
operator!(Sub, sub, |a, b| add(a, &-b));
operator!(Mul, mul, |a, b| mul(a, b));
operator!(Div, div, |a, b| mul(a, &reciprocal(b)));
