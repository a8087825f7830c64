//! The forms of the library on a general-purpose interval arithmetic (the crate `inari`).

use super::{Answer, BATCH, Case, Way};
use core::ops::{Add, Div, Mul};
use endwall::gas::Gamma;
use endwall::number::Semifield;
use endwall::shock::nine_ratios;

/// Its interval, so that the formulas take it.
#[derive(Clone, Copy, Debug)]
pub struct Interval(inari::Interval);

impl Interval {
    fn exact(x: f64) -> Self {
        Self(inari::interval!(x, x).expect("a finite number"))
    }
}

impl Add for Interval {
    type Output = Self;
    #[inline(always)]
    fn add(self, other: Self) -> Self {
        Self(self.0 + other.0)
    }
}

impl Mul for Interval {
    type Output = Self;
    #[inline(always)]
    fn mul(self, other: Self) -> Self {
        Self(self.0 * other.0)
    }
}

impl Div for Interval {
    type Output = Self;
    #[inline(always)]
    fn div(self, other: Self) -> Self {
        Self(self.0 / other.0)
    }
}

impl Semifield for Interval {
    #[inline(always)]
    fn whole(n: u32) -> Self {
        Self::exact(f64::from(n))
    }
    #[inline(always)]
    fn doubled(self) -> Self {
        self + self
    }
}

/// The forms of the library on these intervals.
#[derive(Clone, Copy, Debug)]
pub struct General;

impl Way for General {
    type Ratios = [Interval; 9];
    #[inline(always)]
    fn ratios(self, case: Case) -> [Interval; 9] {
        let gamma = Gamma { d: Interval::exact(case.gamma.d), q: Interval::exact(case.gamma.q) };
        let mut ratios = nine_ratios(gamma, Interval::exact(case.mach_excess));
        ratios[4] = Interval(ratios[4].0.sqrt());
        ratios
    }

    type Batch = [[Interval; 9]; BATCH];
    #[inline(always)]
    fn batch(self, gas: Case, strengths: &[f64; BATCH]) -> Self::Batch {
        let mut batch = [self.ratios(gas); BATCH];
        for (answer, strength) in batch.iter_mut().zip(strengths) {
            *answer = self.ratios(gas.at(*strength));
        }
        batch
    }
}

impl Answer for [Interval; 9] {
    #[inline(always)]
    fn fold(&self) -> u64 {
        self.iter().fold(0, |sum, x| sum ^ x.0.inf().to_bits() ^ x.0.sup().to_bits().rotate_left(1))
    }
}
