//! Inputs for the tests of the shock: listed cases, edges, evenly spaced and random ones with a printed seed.

use crate::oracle::{RBig, exact, parse, power_of_two, ratio};

/// The splitmix64 generator (G. L. Steele, D. Lea and C. H. Flood, OOPSLA 2014, from memory).
#[derive(Clone, Debug)]
pub struct Random {
    state: u64,
}

impl Random {
    /// A generator that always gives the same numbers for the same seed; says the seed, which a failed test shows.
    #[must_use]
    pub fn new(seed: u64) -> Self {
        println!("seed {seed:#x}");
        Self { state: seed }
    }

    /// The next 64 random bits.
    pub fn bits(&mut self) -> u64 {
        self.state = self.state.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mut z = self.state;
        z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        z ^ (z >> 31)
    }

    /// A whole number below `bound` (which is small, so that the bias does not matter).
    pub fn below(&mut self, bound: u64) -> u64 {
        self.bits() % bound
    }

    /// A double in [0, 1).
    pub fn unit(&mut self) -> f64 {
        (self.bits() >> 11) as f64 / 9_007_199_254_740_992.0
    }

    /// A double between `low` and `high`.
    pub fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * self.unit()
    }

    /// A double between two to the power `low` and two to the power `high`, evenly over the powers, all bits random.
    pub fn over_binades(&mut self, low: i32, high: i32) -> f64 {
        let span = u64::from(high.abs_diff(low));
        let exponent = low + i32::try_from(self.below(span)).expect("a few hundred binades");
        (1.0 + self.unit()) * 2f64.powi(exponent)
    }

    /// One of the choices.
    pub fn pick<'a, T>(&mut self, choices: &'a [T]) -> &'a T {
        let place = self.below(choices.len() as u64);
        &choices[usize::try_from(place).expect("a place in a slice")]
    }
}

/// A number in the form in which a user gives it; each form is one exact number.
#[derive(Clone, Debug, PartialEq)]
pub enum Input {
    /// A ratio of whole numbers.
    Ratio(u64, u64),
    /// A double, taken exactly.
    Double(f64),
    /// A decimal as typed.
    Decimal(String),
}

impl Input {
    /// The exact number.
    #[must_use]
    pub fn exact(&self) -> RBig {
        match self {
            Self::Ratio(numerator, denominator) => RBig::from(*numerator) / RBig::from(*denominator),
            Self::Double(value) => exact(*value),
            Self::Decimal(text) => parse(text),
        }
    }

    /// The nearest double.
    #[must_use]
    pub fn to_f64(&self) -> f64 {
        self.exact().to_f64().value()
    }
}

/// A shock: heat capacity ratio γ and strength M − 1.
#[derive(Clone, Debug, PartialEq)]
pub struct Case {
    /// γ, above 1.
    pub heat_capacity_ratio: Input,
    /// M − 1, above 0.
    pub mach_excess: Input,
}

impl Case {
    /// The exact Mach number.
    #[must_use]
    pub fn mach(&self) -> RBig {
        self.mach_excess.exact() + RBig::ONE
    }
}

/// Ratios of heat capacities of the trade: air, atoms, carbon dioxide and others, large molecules, in all three forms.
#[must_use]
pub fn heat_capacity_ratios() -> Vec<Input> {
    let mut all: Vec<Input> = [(7, 5), (5, 3), (9, 7), (4, 3), (11, 9), (13, 10), (21, 20), (3, 2), (2, 1), (3, 1)]
        .map(|(numerator, denominator)| Input::Ratio(numerator, denominator))
        .to_vec();
    all.extend(["1.4", "1.3997", "1.289", "1.667", "1.09", "1.001"].map(|text| Input::Decimal(text.to_owned())));
    all.extend([1.4, 5.0 / 3.0, 1.25, 1.5, 1.289, 1.0 + f64::EPSILON, 1.000_1].map(Input::Double));
    all
}

/// Cases worth naming: simple ratios, decimals and powers of two, which give answers that are doubles.
#[must_use]
pub fn listed() -> Vec<Case> {
    let mut strengths: Vec<Input> = [(1, 2), (1, 1), (3, 2), (2, 1), (3, 1), (4, 1), (9, 1), (1, 3), (1, 7), (22, 7)]
        .map(|(numerator, denominator)| Input::Ratio(numerator, denominator))
        .to_vec();
    strengths.extend(["0.1", "1e-5", "0.37", "2.118", "1e-12", "999999"].map(|text| Input::Decimal(text.to_owned())));
    strengths.extend((-52..=20).map(|power| Input::Double(2f64.powi(power))));
    combine(&heat_capacity_ratios(), &strengths)
}

/// The edges of the domain and their neighbours.
#[must_use]
pub fn edges() -> Vec<Case> {
    let strengths = [
        2f64.powi(-200),
        2f64.powi(-200).next_up(),
        2f64.powi(-199),
        2f64.powi(-107),
        f64::EPSILON.next_down(),
        f64::EPSILON,
        f64::EPSILON.next_up(),
        1.0f64.next_down(),
        1.0f64.next_up(),
        1e6,
        2f64.powi(199),
        2f64.powi(200).next_down(),
        2f64.powi(200),
    ];
    combine(&heat_capacity_ratios(), &strengths.map(Input::Double))
}

/// `count` evenly spaced Mach numbers from 1.01 to 10 for each heat capacity ratio of the trade.
#[must_use]
pub fn evenly_spaced(count: u32) -> Vec<Case> {
    let step = 8.99 / f64::from(count.max(2) - 1);
    let strengths: Vec<_> = (0..count).map(|place| Input::Double(0.01 + step * f64::from(place))).collect();
    combine(&heat_capacity_ratios(), &strengths)
}

fn combine(ratios: &[Input], strengths: &[Input]) -> Vec<Case> {
    let pair = |ratio: &Input, strength: &Input| Case { heat_capacity_ratio: ratio.clone(), mach_excess: strength.clone() };
    ratios.iter().flat_map(|ratio| strengths.iter().map(move |strength| pair(ratio, strength))).collect()
}

/// Random cases without end: one in eight dyadic, one in eight of small whole numbers, one in eight a typed decimal,
/// the rest doubles with M − 1 over 2^-52 to 2^20 and γ from 1 + 2^-10 to 3.
pub fn random(seed: u64) -> impl Iterator<Item = Case> {
    let mut random = Random::new(seed);
    let common = heat_capacity_ratios();
    core::iter::repeat_with(move || {
        let heat_capacity_ratio = match random.below(4) {
            0 => random.pick(&common).clone(),
            1 => {
                let denominator = 1 + random.below(40);
                Input::Ratio(denominator + 1 + random.below(2 * denominator), denominator)
            }
            2 => Input::Double(1.0 + random.over_binades(-10, 1)),
            _ => Input::Decimal(format!("1.{:04}", 1 + random.below(9_999))),
        };
        let mach_excess = match random.below(8) {
            0 => Input::Double(2f64.powi(i32::try_from(random.below(73)).expect("small") - 52)),
            1 => Input::Ratio(1 + random.below(200), 1 + random.below(60)),
            2 => {
                let decimals = random.below(9);
                Input::Decimal(format!("{}e-{decimals}", 1 + random.below(99_999)))
            }
            _ => Input::Double(random.over_binades(-52, 20)),
        };
        Case { heat_capacity_ratio, mach_excess }
    })
}

/// Exact strengths as small as 2^-200 and as large as 2^200, for edges that no double near one can show.
#[must_use]
pub fn extreme_strengths() -> Vec<RBig> {
    let thirds = ratio(1, 3);
    (-200..=200).step_by(25).flat_map(|power| [power_of_two(power), power_of_two(power) * &thirds]).collect()
}

#[cfg(test)]
mod tests {
    use super::{Random, edges, listed, random};
    use crate::oracle::RBig;

    #[test]
    fn splitmix64_gives_the_published_sequence() {
        // First three outputs for seed 1234567, as printed with the reference implementation (from memory).
        let mut random = Random::new(1_234_567);
        assert_eq!(
            [random.bits(), random.bits(), random.bits()],
            [6_457_827_717_110_365_317, 3_203_168_211_198_807_973, 9_817_491_932_198_370_423]
        );
    }

    #[test]
    fn all_cases_are_shocks() {
        for case in listed().into_iter().chain(edges()).chain(random(1).take(2_000)) {
            assert!(case.heat_capacity_ratio.exact() > RBig::ONE && case.mach_excess.exact() > RBig::ZERO, "{case:?}");
        }
    }
}
