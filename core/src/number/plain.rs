//! `f64` and `f32`: fast, no proof. f32 computes in f32: the nine ratios of a shock are within 8 units of 2⁻²⁴ (a test says so), for M − 1 from
//! 1e-6 to 29.
//!
//! Elementary functions come from `libm`, the same software on every target, so that results have the same bits there.

use super::round;
use super::traits::{Elementary, ElementarySlopes, Positive, Semifield};

impl Semifield for f64 {
    #[inline(always)]
    fn whole(n: u32) -> Self {
        f64::from(n)
    }
    #[inline(always)]
    fn doubled(self) -> Self {
        self + self
    }
}

impl Positive for f64 {
    #[inline(always)]
    fn sqrt(self) -> Self {
        round::sqrt(self)
    }
}

impl Elementary for f64 {
    fn ln(self) -> Self {
        libm::log(self)
    }
    fn exp(self) -> Self {
        libm::exp(self)
    }
    fn log1p_ratio(self) -> Self {
        if self == 0.0 { 1.0 } else { libm::log1p(self) / self }
    }
    fn expm1_ratio(self) -> Self {
        if self == 0.0 { 1.0 } else { libm::expm1(self) / self }
    }
}

impl ElementarySlopes for f64 {
    fn log1p_ratio_slope(self) -> Self {
        if self.abs() < 1e-2 {
            // Σ (−1)ⁿ n xⁿ⁻¹/(n+1), n ≥ 1: nine terms leave less than 1e-18.
            (1..=9).rev().fold(0.0, |sum, n| {
                let term = f64::from(n) / f64::from(n + 1);
                sum * self + if n % 2 == 0 { term } else { -term }
            })
        } else {
            (1.0 / (1.0 + self) - self.log1p_ratio()) / self
        }
    }
    fn expm1_ratio_slope(self) -> Self {
        if self.abs() < 0.1 {
            // Σ n xⁿ⁻¹/(n+1)!, n ≥ 1: eleven terms leave less than 1e-19.
            let mut factorial = 1.0;
            let mut power = 1.0;
            let mut sum = 0.0;
            for n in 1..=11 {
                factorial *= f64::from(n + 1);
                sum += f64::from(n) * power / factorial;
                power *= self;
            }
            sum
        } else {
            (libm::exp(self) - self.expm1_ratio()) / self
        }
    }
}

impl Semifield for f32 {
    #[inline(always)]
    fn whole(n: u32) -> Self {
        n as f32
    }
    #[inline(always)]
    fn doubled(self) -> Self {
        self + self
    }
}

impl Positive for f32 {
    #[inline(always)]
    fn sqrt(self) -> Self {
        libm::sqrtf(self)
    }
}

impl Elementary for f32 {
    fn ln(self) -> Self {
        libm::logf(self)
    }
    fn exp(self) -> Self {
        libm::expf(self)
    }
    fn log1p_ratio(self) -> Self {
        if self == 0.0 { 1.0 } else { libm::log1pf(self) / self }
    }
    fn expm1_ratio(self) -> Self {
        if self == 0.0 { 1.0 } else { libm::expm1f(self) / self }
    }
}
