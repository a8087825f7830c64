//! One reproducible generator: xoshiro256++ (Blackman and Vigna, ACM Trans. Math. Softw. 47 (2021) 36; public domain), seeded by `SplitMix64`.
//!
//! Whole numbers, `+ - * /`, square root and one software logarithm: the same seed gives the same bits on every machine.

use crate::number::{Elementary, Positive};

/// 2^-53, the spacing of the uniform variates.
const SPACING: f64 = 1.0 / 9_007_199_254_740_992.0;

/// Tries of the polar method for one pair of normal variates. Each fails with probability `1 - pi/4`: all of them with 1e-43.
const TRIES: usize = 64;

/// `SplitMix64`: spreads a seed over the state.
fn split_mix(state: &mut u64) -> u64 {
    *state = state.wrapping_add(0x9e37_79b9_7f4a_7c15);
    let mut z = *state;
    z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
    z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
    z ^ (z >> 31)
}

/// A source of pseudorandom numbers with a period of 2^256 - 1. Not for secrets.
///
/// ```
/// use endwall::shot::Generator;
/// let (mut a, mut b) = (Generator::new(2026), Generator::new(2026));
/// assert_eq!(a.normal().to_bits(), b.normal().to_bits());
/// let u = a.uniform();
/// assert!(u > 0.0 && u < 1.0);
/// ```
#[derive(Clone, Debug)]
pub struct Generator {
    state: [u64; 4],
    /// Second variate of the last pair of the polar method.
    spare: Option<f64>,
}

impl Generator {
    /// A generator that the seed determines. Any seed will do.
    #[must_use]
    pub fn new(seed: u64) -> Self {
        let mut from = seed;
        Self { state: core::array::from_fn(|_| split_mix(&mut from)), spare: None }
    }

    /// The next 64 random bits.
    pub fn next_u64(&mut self) -> u64 {
        let [a, b, c, d] = &mut self.state;
        let result = a.wrapping_add(*d).rotate_left(23).wrapping_add(*a);
        let shifted = *b << 17;
        *c ^= *a;
        *d ^= *b;
        *b ^= *c;
        *a ^= *d;
        *c ^= shifted;
        *d = d.rotate_left(45);
        result
    }

    /// A variate uniform in (0, 1): a multiple of 2^-53, never 0 (2^-54 stands in for it, once in 2^53) and never 1. Exact.
    pub fn uniform(&mut self) -> f64 {
        let bits = self.next_u64() >> 11;
        // 53 bits: the conversion is exact.
        if bits == 0 { 0.5 * SPACING } else { bits as f64 * SPACING }
    }

    /// A standard normal variate (mean 0, variance 1) by the polar method of Marsaglia. Two variates are made at a time, the second is kept
    /// for the next call. Bounded: after 64 refused pairs (probability 1e-43) the point (0.5, 0.5) is taken.
    pub fn normal(&mut self) -> f64 {
        if let Some(kept) = self.spare.take() {
            return kept;
        }
        let (mut x, mut y, mut square) = (0.5, 0.5, 0.5);
        for _ in 0..TRIES {
            let (u, v) = (2.0 * self.uniform() - 1.0, 2.0 * self.uniform() - 1.0);
            let s = u * u + v * v;
            if s > 0.0 && s < 1.0 {
                (x, y, square) = (u, v, s);
                break;
            }
        }
        let factor = Positive::sqrt(-2.0 * Elementary::ln(square) / square);
        self.spare = Some(y * factor);
        x * factor
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// First outputs of xoshiro256++ from the state 1, 2, 3, 4, and of `SplitMix64` from its seed: published with the reference
    /// implementations (from memory; compared with an independent implementation).
    #[test]
    fn published_outputs() {
        let mut generator = Generator { state: [1, 2, 3, 4], spare: None };
        let want = [
            41_943_041,
            58_720_359,
            3_588_806_011_781_223,
            3_591_011_842_654_386,
            9_228_616_714_210_784_205,
            9_973_669_472_204_895_162,
            14_011_001_112_246_962_877,
            12_406_186_145_184_390_807,
            15_849_039_046_786_891_736,
            10_450_023_813_501_588_000,
        ];
        for value in want {
            assert_eq!(generator.next_u64(), value);
        }
        let mut seed = 1_477_776_061_723_855_037;
        for value in [1_985_237_415_132_408_290, 2_979_275_885_539_914_483, 13_511_426_838_097_143_398_u64] {
            assert_eq!(split_mix(&mut seed), value);
        }
    }

    /// Moments and tails of a million variates, within five standard errors.
    #[test]
    fn normal_variates_are_normal() {
        let mut generator = Generator::new(1);
        let n = 1_000_000;
        let (mut m1, mut m2, mut m3, mut m4, mut lag, mut outside, mut last) = (0.0, 0.0, 0.0, 0.0, 0.0, 0, 0.0);
        for _ in 0..n {
            let z = generator.normal();
            m1 += z;
            m2 += z * z;
            m3 += z * z * z;
            m4 += z * z * z * z;
            lag += z * last;
            last = z;
            outside += i32::from(z.abs() > 1.959_963_984_540_054);
        }
        let n = f64::from(n);
        let error = 1.0 / n.sqrt();
        assert!((m1 / n).abs() < 5.0 * error);
        assert!((m2 / n - 1.0).abs() < 5.0 * 2.0_f64.sqrt() * error);
        assert!((m3 / n).abs() < 5.0 * 15.0_f64.sqrt() * error);
        assert!((m4 / n - 3.0).abs() < 5.0 * 96.0_f64.sqrt() * error);
        assert!((lag / n).abs() < 5.0 * error);
        assert!((f64::from(outside) / n - 0.05).abs() < 5.0 * (0.05_f64 * 0.95).sqrt() * error);
    }

    /// Chi-squared of 256 equal cells: mean 255, standard deviation 22.6.
    #[test]
    fn uniform_variates_are_uniform() {
        let mut generator = Generator::new(2);
        let mut cells = [0_u32; 256];
        for _ in 0..1_000_000 {
            let u = generator.uniform();
            assert!(u > 0.0 && u < 1.0);
            cells[(u * 256.0) as usize] += 1;
        }
        let expected = 1e6 / 256.0;
        let chi_squared: f64 = cells.iter().map(|&c| (f64::from(c) - expected).powi(2) / expected).sum();
        assert!((chi_squared - 255.0).abs() < 5.0 * 22.6, "{chi_squared}");
    }
}
