//! Shock Mach number from a state, by root bracketing on the forward relation; no closed form is used.
//!
//! The unknown is M − 1. First its power of two is found by bisection, then the Illinois rule shrinks the bracket,
//! and in the end the forward relation must change sign within `2^-450` of the answer. When the nearest double to
//! M − 1 or to M solves the relation exactly, the answer is that number, exactly.

use core::cmp::Ordering;

use dashu_ratio::RBig;

use super::real::{Float, Real, WORKING, power_of_two};
use super::reflection::{incident, reflected};
use super::root::{difference, illinois};
use super::shot::Fill;

/// What is known of the shot; the target is the value of this quantity. All grow with M.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Known {
    /// p2/p1
    PressureRatio2,
    /// p2/p1 − 1
    PressureExcess2,
    /// ρ2/ρ1
    DensityRatio2,
    /// T2/T1
    TemperatureRatio2,
    /// u2/a1
    GasSpeed2,
    /// p5/p1
    PressureRatio5,
    /// p5/p1 − 1
    PressureExcess5,
    /// T5/T1
    TemperatureRatio5,
    /// T5/T1 − 1
    TemperatureExcess5,
}

/// The answer of an inverse problem.
#[derive(Clone, Debug)]
pub struct Strength {
    /// Shock Mach number M.
    pub mach: Real,
    /// M − 1.
    pub mach_excess: Real,
}

impl Known {
    /// All kinds.
    pub const ALL: [Self; 9] = [
        Self::PressureRatio2,
        Self::PressureExcess2,
        Self::DensityRatio2,
        Self::TemperatureRatio2,
        Self::GasSpeed2,
        Self::PressureRatio5,
        Self::PressureExcess5,
        Self::TemperatureRatio5,
        Self::TemperatureExcess5,
    ];

    /// The forward relation.
    #[must_use]
    pub fn at(self, heat_capacity_ratio: &RBig, mach: &Real) -> Real {
        let ahead = incident(heat_capacity_ratio, mach);
        match self {
            Self::PressureRatio2 => return ahead.pressure,
            Self::PressureExcess2 => return ahead.pressure_excess,
            Self::DensityRatio2 => return ahead.density,
            Self::TemperatureRatio2 => return ahead.temperature,
            Self::GasSpeed2 => return ahead.gas_speed,
            _ => {}
        }
        let back = reflected(heat_capacity_ratio, &ahead);
        match self {
            Self::PressureRatio5 => back.pressure,
            Self::PressureExcess5 => back.pressure_excess,
            Self::TemperatureRatio5 => back.temperature,
            _ => back.temperature_excess,
        }
    }
}

/// How the true M − 1 compares with a trial value, by the exact forward relation alone: no root is computed, since
/// every relation grows with M. The quick and rigorous judge of an enclosure of an inverse.
#[must_use]
pub fn compare_mach_excess(known: Known, heat_capacity_ratio: &RBig, target: &Real, trial: &RBig) -> Ordering {
    if *trial <= RBig::ZERO {
        return Ordering::Greater;
    }
    let found = known.at(heat_capacity_ratio, &Real::Rational(trial + RBig::ONE));
    (target - found).signum().cmp(&0)
}

/// How the true M compares with a trial value; see [`compare_mach_excess`].
#[must_use]
pub fn compare_mach(known: Known, heat_capacity_ratio: &RBig, target: &Real, trial: &RBig) -> Ordering {
    compare_mach_excess(known, heat_capacity_ratio, target, &(trial - RBig::ONE))
}

/// Largest and smallest power of two that is tried for M − 1.
const POWERS: core::ops::Range<i64> = -400..400;

/// M and M − 1 at which `known` has the value `target`.
///
/// Panics when there is no such shock (a density ratio beyond its limit, a ratio not above one).
#[must_use]
pub fn mach_from(known: Known, heat_capacity_ratio: &RBig, target: &Real) -> Strength {
    let one = Real::int(1);
    let miss = |excess: &Real| known.at(heat_capacity_ratio, &(excess + &one)) - target;
    let sign = |excess: &Real| miss(excess).signum();

    let power = |exponent: i64| Real::Rational(power_of_two(exponent));
    let (mut low, mut high) = (POWERS.start, POWERS.end);
    assert!(sign(&power(low)) < 0 && sign(&power(high)) > 0, "{known:?}: no shock has {target:?}");
    while high - low > 1 {
        let middle = (low + high).div_euclid(2);
        match sign(&power(middle)).cmp(&0) {
            Ordering::Less => low = middle,
            Ordering::Equal => return exactly(power_of_two(middle)),
            Ordering::Greater => high = middle,
        }
    }
    // The textbook forms subtract numbers of order one that differ by M − 1 (or of order M² when it is large).
    let working = WORKING + 8 * usize::try_from(low.unsigned_abs()).expect("small");
    let approximate =
        |value: &Float| Real::approximate(value.clone().with_precision(working).value(), i64::try_from(working).expect("small"));
    // How far a trial value misses the target; `None` where no digit tells them apart.
    let miss_of = |trial: &Float| {
        let found = known.at(heat_capacity_ratio, &(approximate(trial) + &one));
        difference(&found, target, working)
    };
    let root = illinois(&miss_of, power(low).to_float(working).0, power(high).to_float(working).0);

    // An answer that a double can hold is tried in the exact relation, as M − 1 and as M.
    let found = approximate(&root);
    let candidates = [Real::from_f64(found.to_f64()), Real::from_f64((&found + &one).to_f64()) - &one];
    for candidate in candidates {
        let exact = !matches!(target, Real::Approximate { .. }) && candidate.signum() > 0;
        if exact && miss(&candidate).as_rational() == Some(&RBig::ZERO) {
            return exactly(candidate.as_rational().expect("a double is rational").clone());
        }
    }

    let slack = Real::Rational(power_of_two(-450));
    let (below, above) = (&found * (&one - &slack), &found * (&one + &slack));
    assert!(sign(&below) < 0 && sign(&above) > 0, "{known:?}: the root is not where it was found");
    let mach_excess = Real::approximate(root, 448);
    Strength { mach: &mach_excess + &one, mach_excess }
}

fn exactly(excess: RBig) -> Strength {
    Strength { mach: Real::Rational(&excess + RBig::ONE), mach_excess: Real::Rational(excess) }
}

/// What was measured with its unit, for an inverse with a known fill.
#[derive(Clone, Debug)]
pub enum Measured {
    /// p2 in Pa.
    Pressure2(RBig),
    /// p2 − p1 in Pa.
    PressureStep2(RBig),
    /// T2 in K.
    Temperature2(RBig),
    /// u2 in m/s.
    GasSpeed2(RBig),
    /// p5 in Pa.
    Pressure5(RBig),
    /// p5 − p1 in Pa.
    PressureStep5(RBig),
    /// T5 in K.
    Temperature5(RBig),
}

impl Fill {
    /// M and M − 1 of the shot that has the measured value.
    #[must_use]
    pub fn mach_from(&self, measured: &Measured) -> Strength {
        let over = |value: &RBig, unit: &RBig| Real::Rational(value / unit);
        let (known, target) = match measured {
            Measured::Pressure2(value) => (Known::PressureRatio2, over(value, &self.pressure)),
            Measured::PressureStep2(value) => (Known::PressureExcess2, over(value, &self.pressure)),
            Measured::Temperature2(value) => (Known::TemperatureRatio2, over(value, &self.temperature)),
            Measured::GasSpeed2(value) => (Known::GasSpeed2, Real::Rational(value.clone()) / self.sound_speed()),
            Measured::Pressure5(value) => (Known::PressureRatio5, over(value, &self.pressure)),
            Measured::PressureStep5(value) => (Known::PressureExcess5, over(value, &self.pressure)),
            Measured::Temperature5(value) => (Known::TemperatureRatio5, over(value, &self.temperature)),
        };
        mach_from(known, &self.heat_capacity_ratio, &target)
    }
}
