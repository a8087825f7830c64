//! Guess and iterate: the Mach number of the reflected shock at which the gas comes to rest, to a relative 1e-12.

use super::{BATCH, Case, Way, behind, jump, plain_batch};
use endwall::number::Positive;

const TOLERANCE: f64 = 1e-12;
/// More steps than either search takes.
const MOST: u32 = 200;

/// The nine ratios with a search for the Mach number of the reflected shock between 1 and M, and the steps that it took.
#[inline(always)]
fn solved(case: Case, search: impl Search) -> ([f64; 9], u32) {
    let (g, mach) = (case.heat_capacity_ratio, 1.0 + case.mach_excess);
    let (p21, r21) = jump(g, mach * mach);
    let t21 = p21 / r21;
    let gas_speed = 2.0 / (g + 1.0) * (mach - 1.0 / mach);
    let target = gas_speed / Positive::sqrt(t21);
    // The gas speed that the reflected shock takes away, less the one that is there.
    let left_over = |reflected: f64| 2.0 / (g + 1.0) * (reflected - 1.0 / reflected) - target;
    let (reflected, steps) = search.from(left_over, mach);
    (behind(g, p21, t21, r21, gas_speed, reflected), steps)
}

/// A search for a zero between 1 and M.
pub trait Search: Copy + 'static {
    /// The zero of f, and the steps taken.
    fn from(self, f: impl Fn(f64) -> f64, mach: f64) -> (f64, u32);
}

/// Guess and iterate with this search.
#[derive(Clone, Copy, Debug)]
pub struct Iterate<S>(pub S);

impl<S: Search> Iterate<S> {
    /// The steps of the search.
    pub fn steps(self, case: Case) -> u32 {
        solved(case, self.0).1
    }
}

impl<S: Search> Way for Iterate<S> {
    type Ratios = [f64; 9];
    #[inline(always)]
    fn ratios(self, case: Case) -> [f64; 9] {
        solved(case, self.0).0
    }

    type Batch = [[f64; BATCH]; 9];
    #[inline(always)]
    fn batch(self, gas: Case, strengths: &[f64; BATCH]) -> Self::Batch {
        plain_batch(self, gas, strengths)
    }
}

/// The secant rule, from M and a little less.
#[derive(Clone, Copy, Debug)]
pub struct Secant;

impl Search for Secant {
    #[inline(always)]
    fn from(self, f: impl Fn(f64) -> f64, mach: f64) -> (f64, u32) {
        let (mut before, mut now) = (mach, 1.0 + 0.9 * (mach - 1.0));
        let (mut f_before, mut f_now) = (f(before), f(now));
        for step in 1..=MOST {
            let next = now - f_now * ((now - before) / (f_now - f_before));
            // Not a number where two values are equal: nothing more can be gained.
            if next.is_nan() || (next - now).abs() <= TOLERANCE * now {
                return (if next.is_nan() { now } else { next }, step);
            }
            (before, f_before) = (now, f_now);
            (now, f_now) = (next, f(next));
        }
        (now, MOST)
    }
}

/// Bisection between 1 and M.
#[derive(Clone, Copy, Debug)]
pub struct Bisection;

impl Search for Bisection {
    #[inline(always)]
    fn from(self, f: impl Fn(f64) -> f64, mach: f64) -> (f64, u32) {
        let (mut low, mut high) = (1.0, mach);
        for step in 1..=MOST {
            let middle = 0.5 * (low + high);
            if high - low <= TOLERANCE * middle {
                return (middle, step);
            }
            if f(middle) > 0.0 {
                high = middle;
            } else {
                low = middle;
            }
        }
        (low, MOST)
    }
}
