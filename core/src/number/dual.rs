//! [`Dual`]: a value with its slopes, for sensitivities.

use super::traits::{Elementary, ElementarySlopes, Positive, Semifield, Signed};
use core::array;
use core::ops::{Add, Div, Mul, Neg, Sub};

/// A value and its partial derivatives with respect to N inputs, by the chain rule (forward differentiation).
///
/// Over `f64` for uncertainty budgets and over [`Ball`](crate::number::Ball) for proven slopes.
///
/// ```
/// use endwall::number::{Dual, Positive};
/// let x = Dual::<f64, 1>::variable(9.0, 0);
/// let root = x.sqrt();
/// assert_eq!((root.value(), root.slopes()), (3.0, [1.0 / 6.0]));
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Dual<S, const N: usize> {
    value: S,
    slopes: [S; N],
}

impl<S: Semifield, const N: usize> Dual<S, N> {
    /// A value with known slopes, such as those of the implicit function rule.
    pub fn with_slopes(value: S, slopes: [S; N]) -> Self {
        Self { value, slopes }
    }

    /// The value.
    pub fn value(self) -> S {
        self.value
    }

    /// The slopes, in the order of the inputs.
    pub fn slopes(self) -> [S; N] {
        self.slopes
    }
}

impl<S: Signed, const N: usize> Dual<S, N> {
    /// A number that depends on none of the inputs.
    pub fn constant(value: S) -> Self {
        Self { value, slopes: [S::whole(0); N] }
    }

    /// The input number `index`: its slope with respect to itself is 1. An index of N or more gives a constant.
    pub fn variable(value: S, index: usize) -> Self {
        Self { value, slopes: array::from_fn(|at| S::whole(u32::from(at == index))) }
    }

    /// f(x) by the chain rule, given f and f′ at x.
    #[inline(always)]
    fn chain(self, value: S, slope: S) -> Self {
        Self { value, slopes: self.slopes.map(|own| slope * own) }
    }

    #[inline(always)]
    fn combined(self, other: Self, value: S, slope: impl Fn(S, S) -> S) -> Self {
        let mut slopes = self.slopes;
        for (own, theirs) in slopes.iter_mut().zip(other.slopes) {
            *own = slope(*own, theirs);
        }
        Self { value, slopes }
    }
}

impl<S: Signed, const N: usize> Semifield for Dual<S, N> {
    fn whole(n: u32) -> Self {
        Self::constant(S::whole(n))
    }
    fn doubled(self) -> Self {
        Self { value: self.value.doubled(), slopes: self.slopes.map(S::doubled) }
    }
    /// x² with the tighter square of the value.
    fn squared(self) -> Self {
        self.chain(self.value.squared(), self.value.doubled())
    }
}

impl<S: Signed, const N: usize> Add for Dual<S, N> {
    type Output = Self;
    fn add(self, other: Self) -> Self {
        self.combined(other, self.value + other.value, |a, b| a + b)
    }
}

impl<S: Signed, const N: usize> Sub for Dual<S, N> {
    type Output = Self;
    fn sub(self, other: Self) -> Self {
        self.combined(other, self.value - other.value, |a, b| a - b)
    }
}

impl<S: Signed, const N: usize> Neg for Dual<S, N> {
    type Output = Self;
    fn neg(self) -> Self {
        Self { value: -self.value, slopes: self.slopes.map(|slope| -slope) }
    }
}

#[expect(clippy::suspicious_arithmetic_impl, reason = "the product rule")]
impl<S: Signed, const N: usize> Mul for Dual<S, N> {
    type Output = Self;
    fn mul(self, other: Self) -> Self {
        self.combined(other, self.value * other.value, |a, b| a * other.value + self.value * b)
    }
}

#[expect(clippy::suspicious_arithmetic_impl, reason = "the quotient rule")]
impl<S: Signed, const N: usize> Div for Dual<S, N> {
    type Output = Self;
    fn div(self, other: Self) -> Self {
        let quotient = self.value / other.value;
        self.combined(other, quotient, |a, b| (a - quotient * b) / other.value)
    }
}

impl<S: Signed, const N: usize> Positive for Dual<S, N> {
    fn sqrt(self) -> Self {
        let root = self.value.sqrt();
        self.chain(root, S::whole(1) / root.doubled())
    }
}

impl<S: ElementarySlopes, const N: usize> Elementary for Dual<S, N> {
    fn ln(self) -> Self {
        self.chain(self.value.ln(), S::whole(1) / self.value)
    }
    fn exp(self) -> Self {
        let value = self.value.exp();
        self.chain(value, value)
    }
    fn log1p_ratio(self) -> Self {
        self.chain(self.value.log1p_ratio(), self.value.log1p_ratio_slope())
    }
    fn expm1_ratio(self) -> Self {
        self.chain(self.value.expm1_ratio(), self.value.expm1_ratio_slope())
    }
}
