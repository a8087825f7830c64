//! ∫ √(c(c − 1)/T) dT with c = `c_p`/R: the gas speed that a simple wave changes by, over √(R/W).
//!
//! With dh = c R/W dT and a² = γ R T/W, γ = c/(c − 1), it is ∫ dh/a. There is no closed form; the rule of Gauss and Legendre is applied to pieces, each with a
//! bound on its error.

use crate::number::{Ball, DISK, Positive, Semifield, gauss_legendre, remainder};

/// ln(9/7): a piece reaches at most from T to 9T/7, so that its disk of four halves reaches from T/2 of its middle to 3T/2.
const PIECE: f64 = 0.251_314_428_280_906;
/// Pieces, at most.
const PIECES: f64 = 256.0;

/// `c_p`/R of the polynomial a1/T² + a2/T + a3 + … + a7 T⁴.
#[inline(always)]
fn value(a: &[Ball; 7], t: Ball) -> Ball {
    let [a1, a2, a3, a4, a5, a6, a7] = *a;
    (a1 / t + a2) / t + (a3 + t * (a4 + t * (a5 + t * (a6 + t * a7))))
}

/// The integral from T to T(1 + x) for the polynomial with these coefficients; no digit is lost as x goes to zero.
pub(super) fn speed_rise(a: &[Ball; 7], temperature: Ball, excess: Ball) -> Ball {
    let logarithm = libm::log1p(excess.nearest());
    let pieces = libm::ceil(logarithm.abs() / PIECE).max(1.0);
    // Where the heat capacity changes fast the disks must be smaller.
    let finer = [1.0, 2.0, 4.0, 8.0].map(|times| times * pieces);
    finer
        .into_iter()
        .filter(|pieces| *pieces <= PIECES)
        .find_map(|pieces| sum(a, temperature, excess, logarithm, pieces))
        .unwrap_or(Ball::UNKNOWN)
}

/// The same from so many pieces of equal ratio; `None` where the error of one is not bounded.
fn sum(a: &[Ball; 7], temperature: Ball, excess: Ball, logarithm: f64, pieces: f64) -> Option<Ball> {
    if pieces <= 1.0 {
        let half = (temperature * excess).halved();
        return piece(a, temperature + half, half);
    }
    let mut low = temperature;
    let mut sum = Ball::whole(0);
    let mut index = 1.0;
    while index < pieces {
        let high = Ball::from(temperature.nearest() * libm::exp(logarithm * index / pieces));
        sum = sum + piece(a, (low + high).halved(), (high - low).halved())?;
        low = high;
        index += 1.0;
    }
    let end = temperature + temperature * excess;
    Some(sum + piece(a, (low + end).halved(), (end - low).halved())?)
}

/// The integral over [middle − half, middle + half].
fn piece(a: &[Ball; 7], middle: Ball, half: Ball) -> Option<Ball> {
    let integrand = |t: Ball| {
        let c = value(a, t);
        (c * (c - Ball::whole(1)) / t).sqrt()
    };
    let bound = bound(a, middle, half)?;
    Some(gauss_legendre(middle, half, integrand).widened(remainder(half.magnitude(), bound)))
}

/// A bound B of |√(c(c − 1)/T)| on the disk of radius R about the middle, R = 4·half, on which it is analytic; `None` where that is not proven.
///
/// With T = m + δ the heat capacity differs from that at m by at most E, the sum over k ≥ 1 of |`c_k`| Rᵏ with its Taylor coefficients
///
/// > `c_k` = Σ C(j, k) `p_j` m^(j−k) + (−1/m)ᵏ (a2/m + (k + 1)a1/m²),
///
/// of which those for k > 4 are geometric series. For c(m) − E > 1 both c and c − 1 have positive real parts on the disk, so that their square roots are
/// analytic there, and R < m does the same for 1/√T.
fn bound(a: &[Ball; 7], middle: Ball, half: Ball) -> Option<f64> {
    let whole = Ball::whole;
    let [a1, a2, _, a4, a5, a6, a7] = *a;
    let m = middle;
    let reach = Ball::from(half.magnitude()) * whole(DISK) / m;
    // m^k times the Taylor coefficient of the polynomial part, times C(j, k) for each power j.
    let [p1, p2, p3, p4] = [a4 * m, a5 * m.squared(), a6 * m * m.squared(), a7 * m.squared().squared()];
    let rising = [p1 + whole(2) * p2 + whole(3) * p3 + whole(4) * p4, p2 + whole(3) * p3 + whole(6) * p4, p3 + whole(4) * p4, p4];
    let (second, first) = (a2 / m, a1 / m.squared());
    let size = |x: Ball| Ball::from(x.magnitude());
    let mut sum = whole(0);
    let mut power = whole(1);
    for (k, rising) in (1u32..).zip(rising) {
        let falling = second + first * whole(k + 1);
        power = power * reach;
        sum = sum + power * size(if k % 2 == 0 { rising + falling } else { rising - falling });
    }
    // Σ qᵏ = q⁵/(1 − q) and Σ (k + 1)qᵏ = q⁵(6 − 5q)/(1 − q)² from k = 5.
    let rest = whole(1) - reach;
    let tail = power * reach / rest;
    sum = sum + tail * (size(second) + size(first) * (whole(6) - whole(5) * reach) / rest);
    let centre = value(a, m);
    let (least, greatest) = (centre - sum - whole(1), centre + sum);
    let square = greatest * (greatest - whole(1)) / (m * rest);
    let proven = m.is_certainly_positive() && rest.is_certainly_positive() && least.is_certainly_positive();
    let bound = square.sqrt().magnitude();
    (proven && bound.is_finite()).then_some(bound)
}
