//! What a formula may ask of a number: four small traits, each adding to the one before.
//!
//! A formula asks for the lowest that it needs. One that asks for [`Semifield`] or [`Positive`] cannot subtract, so it
//! cannot lose digits by cancellation and runs on [`Counted`](crate::number::Counted), whose proof costs nothing at run time.

use core::ops::{Add, Div, Mul, Neg, Sub};

/// Numbers with `+`, `×`, `÷`, small whole numbers and doubling; no subtraction.
pub trait Semifield: Copy + Add<Output = Self> + Mul<Output = Self> + Div<Output = Self> {
    /// The whole number `n`, exactly. Constants enter formulas this way (or as ratios of two of these), never as decimal
    /// literals, which would silently void a proof.
    fn whole(n: u32) -> Self;

    /// 2·x; exact in every binary kind of number.
    fn doubled(self) -> Self;

    /// x/2; exact in every binary kind but for what underflows.
    #[inline(always)]
    fn halved(self) -> Self {
        self / Self::whole(2)
    }

    /// x².
    #[inline(always)]
    fn squared(self) -> Self {
        self * self
    }
}

/// [`Semifield`] with the square root.
pub trait Positive: Semifield {
    /// √x for x ≥ 0.
    fn sqrt(self) -> Self;
}

/// [`Positive`] with subtraction and negation.
pub trait Signed: Positive + Sub<Output = Self> + Neg<Output = Self> {}

impl<T: Positive + Sub<Output = T> + Neg<Output = T>> Signed for T {}

/// [`Signed`] with logarithm and exponential, each also in the form that keeps its digits near the point where it
/// degenerates. Branches and series live inside these, never in a formula.
pub trait Elementary: Signed {
    /// ln x for x > 0.
    fn ln(self) -> Self;

    /// eˣ.
    fn exp(self) -> Self;

    /// ln(1 + x)/x for x > −1, and 1 at x = 0; decreasing.
    fn log1p_ratio(self) -> Self;

    /// (eˣ − 1)/x, and 1 at x = 0; increasing.
    fn expm1_ratio(self) -> Self;

    /// xʸ = exp(y·ln x) for x > 0.
    #[inline]
    fn pow(self, exponent: Self) -> Self {
        (self.ln() * exponent).exp()
    }
}

/// [`Elementary`] numbers that come with a bound of their error, so that a sign is certain or not.
pub(crate) trait Decided: Elementary {
    /// True if the number is certainly positive.
    fn is_positive(self) -> bool;

    /// True if the number is certainly negative.
    fn is_negative(self) -> bool {
        (-self).is_positive()
    }

    /// True if the number is certainly zero.
    fn is_zero(self) -> bool;
}

/// The slopes of the two ratios of [`Elementary`], which a [`Dual`](crate::number::Dual) over this kind needs.
///
/// They are separate because the quotient rule cancels near x = 0, where a series must be used.
pub trait ElementarySlopes: Elementary {
    /// d/dx of ln(1 + x)/x, that is (1/(1 + x) − ln(1 + x)/x)/x, and −1/2 at x = 0; increasing, negative.
    fn log1p_ratio_slope(self) -> Self;

    /// d/dx of (eˣ − 1)/x, that is (eˣ − (eˣ − 1)/x)/x, and 1/2 at x = 0; increasing, positive.
    fn expm1_ratio_slope(self) -> Self;
}
