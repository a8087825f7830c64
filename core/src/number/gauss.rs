//! The rule of Gauss and Legendre with twelve points.

use super::ball::Ball;

/// Bound on the relative error of a node or a weight as it stands here: as far as the test proves it, which is far below [`remainder`].
const ERROR: f64 = f64::from_bits((1023 - 72) << 52);

/// Positive nodes on [−1, 1] and their weights, which belong to the negative ones too.
const RULE: [[(u64, u64); 2]; 6] = [
    [(0x3fc0_07a5_f8f6_30e4, 0x3c44_3364_3eda_6f08), (0x3fcf_e40c_e6d4_f025, 0x3c6b_24c7_6de7_da65)],
    [(0x3fd7_8a8d_20a8_b19d, 0x3c66_2d8b_ccac_2c74), (0x3fcd_e315_5c25_6ab5, 0x3c4c_2709_c003_67f2)],
    [(0x3fe2_cb4f_05c0_77f9, 0xbc84_8a54_8b42_c96f), (0x3fca_0163_e6b1_ab72, 0xbc4b_d191_6c33_2325)],
    [(0x3fe8_a30a_eed8_8f36, 0xbc59_5a29_42c5_b6bc), (0x3fc4_7d72_58f2_2d8f, 0x3c58_3b88_0a95_a75a)],
    [(0x3fec_ee87_4ffb_88b4, 0xbc8e_087a_8769_2d2d), (0x3fbb_6060_2bce_6181, 0x3c53_e8cf_8b05_6192)],
    [(0x3fef_68f1_d8e4_2e81, 0x3c60_7348_c344_3d6a), (0x3fa8_275d_9dea_6d8f, 0xbc24_c514_da97_00de)],
];

/// The sum of the rule over [middle − half, middle + half]: exact for polynomials of degree 23, but for rounding, which the ball holds.
pub(crate) fn gauss_legendre(middle: Ball, half: Ball, f: impl Fn(Ball) -> Ball) -> Ball {
    let number = |(head, tail)| {
        let head = f64::from_bits(head);
        Ball::pair(head, f64::from_bits(tail), head * ERROR)
    };
    let pair = |[node, weight]: [(u64, u64); 2]| {
        let distance = half * number(node);
        number(weight) * (f(middle + distance) + f(middle - distance))
    };
    let [first, rest @ ..] = RULE;
    half * rest.into_iter().fold(pair(first), |sum, own| sum + pair(own))
}

/// The radius, in halves of the interval, of the disk on which a function must be analytic for [`remainder`].
pub(crate) const DISK: u32 = 4;

/// A bound on the error of [`gauss_legendre`] for a function that is analytic and at most B in size on the disk of radius 4·half about the middle.
///
/// The disk holds the ellipse with foci at the ends of the interval and ρ = 4 + √15, so the Chebyshev coefficients are at most 2Bρ⁻ᵏ (S. Bernstein, 1912,
/// from memory). Up to degree 23 the rule is exact, by symmetry for all odd ones; for even k ≥ 24 integral and sum of `T_k` are at most 2/(k² − 1) and 2 in
/// size, the weights being positive with sum 2. The error is at most half·B·4.01·ρ⁻²⁴/(1 − ρ⁻²) < 2⁻⁶⁹·half·B.
pub(crate) fn remainder(half: f64, bound: f64) -> f64 {
    // One more bit for the rounding of this product.
    half.abs() * bound * f64::from_bits((1023 - 68) << 52)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::number::{Elementary, Semifield};

    /// `P_12`(x) and (1 − x²)·`P_12`′(x), by the recurrence.
    fn legendre(x: Ball) -> [Ball; 2] {
        let (mut last, mut this) = (Ball::whole(1), x);
        for n in 1..12 {
            let next = (Ball::whole(2 * n + 1) * x * this - Ball::whole(n) * last) / Ball::whole(n + 1);
            (last, this) = (this, next);
        }
        [this, Ball::whole(12) * (last - x * this)]
    }

    #[test]
    fn nodes_and_weights_are_those_of_the_polynomial() {
        for [(node, node_tail), (weight, weight_tail)] in RULE {
            let exactly = |head, tail| Ball::pair(f64::from_bits(head), f64::from_bits(tail), 0.0);
            let node = exactly(node, node_tail);
            let step = Ball::from(libm::scalbn(node.nearest(), -92));
            let [below, above] = [node - step, node + step].map(|x| legendre(x)[0]);
            assert!(below.is_certainly_positive() != above.is_certainly_positive());
            assert!(below.is_certainly_negative() != above.is_certainly_negative());
            // The weight is 2(1 − x²)/((1 − x²)P′)².
            let near = node.widened(step.nearest());
            let exact = Ball::whole(2) * (Ball::whole(1) - near.squared()) / legendre(near)[1].squared();
            let weight = exactly(weight, weight_tail);
            assert!((weight - exact).magnitude() < ERROR * weight.nearest());
        }
        // They integrate the even powers.
        for power in 0..12 {
            let sum = gauss_legendre(Ball::whole(0), Ball::whole(1), |x| (0..power).fold(Ball::whole(1), |all, _| all * x.squared()));
            let difference = sum - Ball::whole(2) / Ball::whole(2 * power + 1);
            assert!(difference.enclosure().contains(0.0) && difference.nearest().abs() < 1e-30, "{power} {difference:?}");
        }
    }

    #[test]
    fn the_remainder_holds_what_is_left() {
        // 1/x about 1 on ± 0.225: on the disk of radius 0.9 it is at most 10.
        let half = Ball::whole(9) / Ball::whole(40);
        let sum = gauss_legendre(Ball::whole(1), half, |x| Ball::whole(1) / x);
        let exact = (Ball::whole(49) / Ball::whole(31)).ln();
        let error = (sum - exact).magnitude();
        assert!(error > 1e-25 && error < remainder(0.225, 10.0), "{error:e}");
    }
}
