//! The nine ratios of the reflected shock (p21 T21 r21 u2/a1 `M_R` p51 T51 r51 `U_R`/a1), computed in every way that is compared.

#![allow(dead_code, reason = "each benchmark uses its own part")]

#[cfg(feature = "inari")]
pub mod interval;
pub mod inverse;
pub mod iterate;
pub mod plan;
pub mod record;
pub mod thermal;
pub mod timing;

use endwall::gas::{Gamma, HeatCapacityRatio, SmallRatio};
use endwall::number::Positive;
use endwall::shock::{Ratios, nine_ratios};
use endwall_tests::random::Random;
use std::sync::LazyLock;

/// Answers of one batch.
pub const BATCH: usize = 16;

/// One input: γ as every way wants it, and M − 1.
#[derive(Clone, Copy, Debug)]
pub struct Case {
    /// γ − 1 as a quotient of two exact doubles.
    pub small: SmallRatio,
    /// The same, for plain arithmetic.
    pub gamma: Gamma<f64>,
    /// γ as a double, for the textbook.
    pub heat_capacity_ratio: f64,
    /// M − 1.
    pub mach_excess: f64,
}

impl Case {
    /// The same gas at another strength.
    #[inline(always)]
    pub fn at(self, mach_excess: f64) -> Self {
        Self { mach_excess, ..self }
    }
}

/// Common gases at Mach numbers from 1.000001 to 17 whose last bits are random: 1024 cases, each gas for a batch at a time.
pub fn cases() -> &'static [Case] {
    static CASES: LazyLock<Vec<Case>> = LazyLock::new(|| {
        let mut random = Random::new(0xBE4C);
        let gases = [(7, 5), (5, 3), (9, 7), (4, 3), (13, 10), (1667, 1000)];
        let batch = |_| {
            let (numerator, denominator) = *random.pick(&gases);
            let small = HeatCapacityRatio::ratio(numerator, denominator).expect("a gas").small().expect("small integers");
            let (d, q) = small.parts();
            let case = Case { small, gamma: Gamma { d, q }, heat_capacity_ratio: 1.0 + d / q, mach_excess: 1.0 };
            core::array::from_fn::<_, BATCH, _>(|_| case.at(random.over_binades(-20, 4)))
        };
        (0..64).flat_map(batch).collect()
    });
    &CASES
}

/// A way to compute the nine ratios; a type and not a closure, so that it is inlined wherever it is used.
pub trait Way: Copy + 'static {
    /// The nine ratios.
    type Ratios: Answer;
    /// The nine ratios of a case.
    fn ratios(self, case: Case) -> Self::Ratios;

    /// A batch of answers.
    type Batch;

    /// The nine ratios of a batch of strengths in the gas of a case.
    fn batch(self, gas: Case, strengths: &[f64; BATCH]) -> Self::Batch;
}

/// A batch of a way that has nothing of its own for many shocks: ratio by ratio, as a compiler takes it best.
#[inline(always)]
fn plain_batch(way: impl Way<Ratios = [f64; 9]>, gas: Case, strengths: &[f64; BATCH]) -> [[f64; BATCH]; 9] {
    let mut batch = [[0.0; BATCH]; 9];
    for (place, strength) in strengths.iter().enumerate() {
        let one = way.ratios(gas.at(*strength));
        for (row, value) in batch.iter_mut().zip(one) {
            row[place] = value;
        }
    }
    batch
}

/// Proven: the optimal enclosures.
#[derive(Clone, Copy, Debug)]
pub struct Proven;

impl Way for Proven {
    type Ratios = Ratios;
    #[inline(always)]
    fn ratios(self, case: Case) -> Ratios {
        Ratios::from_mach_excess(case.small, case.mach_excess).expect("inside the domain")
    }
    type Batch = [[[f64; BATCH]; 9]; 2];
    #[inline(always)]
    fn batch(self, gas: Case, strengths: &[f64; BATCH]) -> Self::Batch {
        Ratios::bounds(gas.small, strengths).expect("inside the domain")
    }
}

/// Plain doubles in the forms of the library, which keep their digits. The reference of every comparison.
#[derive(Clone, Copy, Debug)]
pub struct Careful;

impl Way for Careful {
    type Ratios = [f64; 9];
    #[inline(always)]
    fn ratios(self, case: Case) -> [f64; 9] {
        let mut ratios = nine_ratios(case.gamma, case.mach_excess);
        ratios[4] = Positive::sqrt(ratios[4]);
        ratios
    }

    type Batch = [[f64; BATCH]; 9];
    #[inline(always)]
    fn batch(self, gas: Case, strengths: &[f64; BATCH]) -> Self::Batch {
        plain_batch(self, gas, strengths)
    }
}

/// Plain doubles in the forms of a textbook (J. D. Anderson, Modern Compressible Flow, chapters 3 and 7, from memory):
/// jump conditions from M, `M_R`/(`M_R`² − 1) = M/(M² − 1)·√(1 + 2(γ−1)/(γ+1)²·(M² − 1)(γ + 1/M²)), and the jump conditions again.
#[derive(Clone, Copy, Debug)]
pub struct Textbook;

impl Way for Textbook {
    type Ratios = [f64; 9];
    #[inline(always)]
    fn ratios(self, case: Case) -> [f64; 9] {
        let (g, mach) = (case.heat_capacity_ratio, 1.0 + case.mach_excess);
        let square = mach * mach;
        let (p21, r21) = jump(g, square);
        let t21 = p21 / r21;
        let gas_speed = 2.0 / (g + 1.0) * (mach - 1.0 / mach);
        let under = 1.0 + 2.0 * (g - 1.0) / ((g + 1.0) * (g + 1.0)) * (square - 1.0) * (g + 1.0 / square);
        let k = mach / (square - 1.0) * Positive::sqrt(under);
        let reflected = (1.0 + Positive::sqrt(1.0 + 4.0 * k * k)) / (2.0 * k);
        behind(g, p21, t21, r21, gas_speed, reflected)
    }

    type Batch = [[f64; BATCH]; 9];
    #[inline(always)]
    fn batch(self, gas: Case, strengths: &[f64; BATCH]) -> Self::Batch {
        plain_batch(self, gas, strengths)
    }
}

/// Pressure and density ratio of a normal shock from M².
#[inline(always)]
pub fn jump(g: f64, square: f64) -> (f64, f64) {
    (1.0 + 2.0 * g / (g + 1.0) * (square - 1.0), (g + 1.0) * square / ((g - 1.0) * square + 2.0))
}

/// The nine ratios, given state 2 and the Mach number of the reflected shock.
#[inline(always)]
pub fn behind(g: f64, p21: f64, t21: f64, r21: f64, gas_speed: f64, reflected: f64) -> [f64; 9] {
    let (p52, r52) = jump(g, reflected * reflected);
    [p21, t21, r21, gas_speed, reflected, p21 * p52, t21 * p52 / r52, r21 * r52, reflected * Positive::sqrt(t21) - gas_speed]
}

/// An answer whose bits can be folded together, so that no part of it can be left out and the next input waits for all.
pub trait Answer: Copy {
    /// All bits, folded.
    fn fold(&self) -> u64;
}

impl Answer for [f64; 9] {
    #[inline(always)]
    fn fold(&self) -> u64 {
        self.iter().fold(0, |sum, x| sum ^ x.to_bits())
    }
}

impl Answer for Ratios {
    #[inline(always)]
    fn fold(&self) -> u64 {
        let all = [
            self.pressure,
            self.temperature,
            self.density,
            self.gas_speed,
            self.reflected_mach,
            self.reflected_pressure,
            self.reflected_temperature,
            self.reflected_density,
            self.reflected_speed,
        ];
        all.iter().fold(0, |sum, x| sum ^ x.low().to_bits() ^ x.high().to_bits().rotate_left(1))
    }
}
