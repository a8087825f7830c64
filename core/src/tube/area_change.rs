//! Expansion of the driver gas from rest to the speed of the contact surface, through a change of area at the diaphragm.
//!
//! With h = (γ4 − 1)/2, α = A4/A1 and speeds in units of a4, an unsteady expansion leads from the driver to the change of area (a), a steady one through
//! it (b), and, if it is sonic there, an unsteady one on to state 3. a3/a4 = σ is all that is asked, since the whole expansion is isentropic: with w = u2/a4
//!
//! > equal areas: σ = 1 − h w;
//! > sonic (M3 ≥ 1): σ = g − h w, g = √((1 + h `M_a`²)(1 + h))/(1 + h `M_a`), α = ((1 + h `M_a`²)/(1 + h))^((1 + h)/(2h))/`M_a`;
//! > subsonic (M3 < 1): σ² = (1 − v)² + v²/h − h w², α (1 − v)^(1/h) v/h = σ^(1/h) w, v = h u_a/a4.
//!
//! The first two are those of R. A. Alpher and D. R. White, J. Fluid Mech. 3 (1958) 457, with g = `G^((γ4−1)/(2γ4))`; the third is the same flow with
//! `M_b` = M3, reduced to one unknown (energy, then mass), so that nothing has to be iterated between two relations.
//!
//! Both relations have one root. Sonic: d ln α/d`M_a` = (`M_a`² − 1)/(`M_a`(1 + h `M_a`²)) < 0 below `M_a` = 1. Subsonic: the logarithm of left over right
//! side has the slope 1/v − 1/(h(1 − v)) + ((1 − v) − v/h)/(h σ²) in v, of which both parts are positive for v/h < 1 − v, that is `M_a` < 1; it grows
//! from −∞, and at v = h w, where σ = 1 − v, it is ln α ≥ 0.

use super::driver_error::Unproven;
use super::proven_root::{newton, search};
use crate::number::{Ball, Dual, Elementary, Positive, Semifield, Signed};

/// The driver gas, expanded to the speed of the contact surface.
#[derive(Clone, Copy, Debug)]
pub(super) struct Expanded {
    /// a3/a4; not positive where the gas does not become that fast.
    pub sound_speed_ratio: Ball,
    /// Mach number ahead of the change of area.
    pub mach_before: Option<Ball>,
    /// Whether the flow through the change of area is sonic.
    pub is_sonic: bool,
}

/// ln of the area ratio for a Mach number `M_a` ahead of a sonic section.
fn logarithm_of_area<S: Elementary>(h: S, mach: S) -> S {
    let one = S::whole(1);
    ((one + h * mach.squared()) / (one + h)).ln() * (one + h) / h.doubled() - mach.ln()
}

/// σ² of a steady subsonic section.
fn subsonic_squared<S: Signed>(h: S, w: S, v: S) -> S {
    (S::whole(1) - v).squared() + v.squared() / h - h * w.squared()
}

/// The logarithm of the mass flow ahead of the change of area over that behind it, without that of α.
fn logarithm_of_flow<S: Elementary>(h: S, w: S, v: S) -> S {
    let one = S::whole(1);
    ((one - v).ln() - subsonic_squared(h, w, v).ln() / S::whole(2)) / h + (v / (h * w)).ln()
}

/// g of a sonic section, and `M_a`.
pub(super) fn sonic(h: Ball, area_ratio: Ball) -> Option<(Ball, Ball)> {
    let one = Ball::whole(1);
    let logarithm = area_ratio.ln();
    let (plain_h, plain_logarithm) = (h.nearest(), logarithm.nearest());
    // The area ratio falls with the Mach number.
    let near = search(|mach| plain_logarithm - logarithm_of_area(plain_h, mach), 0.0, 1.0);
    let constant = Dual::constant;
    let mach = newton(|mach| logarithm_of_area(constant(h), mach) - constant(logarithm), near)?;
    if !(one - mach).is_certainly_positive() {
        return None;
    }
    Some((((one + h * mach.squared()) * (one + h)).sqrt() / (one + h * mach), mach))
}

/// σ of a subsonic section, and `M_a`.
fn subsonic(h: Ball, w: Ball, area_ratio: Ball) -> Option<(Ball, Ball)> {
    let one = Ball::whole(1);
    let logarithm = area_ratio.ln();
    let (plain_h, plain_w, plain_logarithm) = (h.nearest(), w.nearest(), logarithm.nearest());
    let highest = (plain_h * plain_w).min(plain_h / (1.0 + plain_h));
    let near = search(|v| logarithm_of_flow(plain_h, plain_w, v) + plain_logarithm, 0.0, highest);
    let constant = Dual::constant;
    let v = newton(|v| logarithm_of_flow(constant(h), constant(w), v) + constant(logarithm), near)?;
    let mach = v / (h * (one - v));
    if !(one - mach).is_certainly_positive() {
        return None;
    }
    Some((subsonic_squared(h, w, v).sqrt(), mach))
}

/// The expansion to w = u2/a4 of a gas with h = (γ4 − 1)/2; `area_ratio` is `None` for equal areas.
pub(super) fn expand(h: Ball, w: Ball, area_ratio: Option<Ball>) -> Result<Expanded, Unproven> {
    let one = Ball::whole(1);
    let Some(area_ratio) = area_ratio else {
        let sound_speed_ratio = one - h * w;
        let is_sonic = (w - sound_speed_ratio).is_certainly_positive();
        return Ok(Expanded { sound_speed_ratio, mach_before: None, is_sonic });
    };
    let (g, mach) = sonic(h, area_ratio).ok_or(Unproven::AreaChange)?;
    // M3 ≥ 1 where w ≥ g − h w.
    let over = w * (one + h) - g;
    if over.is_certainly_positive() {
        return Ok(Expanded { sound_speed_ratio: g - h * w, mach_before: Some(mach), is_sonic: true });
    }
    if !over.is_certainly_negative() {
        return Err(Unproven::Choking);
    }
    let (sound_speed_ratio, mach) = subsonic(h, w, area_ratio).ok_or(Unproven::AreaChange)?;
    Ok(Expanded { sound_speed_ratio, mach_before: Some(mach), is_sonic: false })
}

#[cfg(test)]
mod tests {
    use super::*;

    const H: [(u32, u32); 3] = [(1, 3), (1, 5), (1, 7)];

    fn ball(n: u32, d: u32) -> Ball {
        Ball::whole(n) / Ball::whole(d)
    }

    #[test]
    fn subsonic_and_sonic_flow_meet() {
        for (n, d) in H {
            let h = ball(n, d);
            for area in [1.01, 1.5, 2.25, 9.0, 400.0] {
                let area = Ball::from(area);
                let (g, mach) = sonic(h, area).unwrap();
                let w = g / (Ball::whole(1) + h);
                let at = |part: f64| expand(h, w * Ball::from(part), Some(area)).unwrap();
                let (below, above) = (at(1.0 - 1e-9), at(1.0 + 1e-9));
                assert!(!below.is_sonic && above.is_sonic);
                let jump = below.sound_speed_ratio - above.sound_speed_ratio;
                assert!(jump.is_certainly_positive() && jump.nearest() < 4e-9, "{jump:?}");
                // The sonic Mach number is the limit of the subsonic ones, which rises as the square root does not: linearly.
                assert!((below.mach_before.unwrap().nearest() / mach.nearest() - 1.0).abs() < 1e-8);
            }
        }
    }

    /// The published form: both Mach numbers as unknowns, iterated.
    #[test]
    fn the_published_relations_hold() {
        for (n, d) in H {
            let h = ball(n, d).nearest();
            for area in [1.2, 2.0, 9.0] {
                for w in [0.05, 0.3, 0.6] {
                    let expanded = expand(ball(n, d), Ball::from(w), Some(Ball::from(area))).unwrap();
                    if expanded.is_sonic {
                        continue;
                    }
                    let (a, b) = (expanded.mach_before.unwrap().nearest(), w / expanded.sound_speed_ratio.nearest());
                    let quotient = (1.0 + h * a * a) / (1.0 + h * b * b);
                    let found = b / a * libm::pow(quotient, (1.0 + h) / (2.0 * h));
                    assert!((found / area - 1.0).abs() < 1e-13, "{h} {area} {w} {found}");
                    let g = libm::sqrt(quotient) * (1.0 + h * b) / (1.0 + h * a);
                    assert!((g - h * w - expanded.sound_speed_ratio.nearest()).abs() < 1e-14);
                }
            }
        }
    }

    #[test]
    fn the_flow_without_a_change_of_area_is_the_limit() {
        for (n, d) in H {
            for w in [1e-9, 0.01, 0.2, 0.7, 2.0] {
                let (h, w) = (ball(n, d), Ball::from(w));
                let equal = expand(h, w, None).unwrap().sound_speed_ratio;
                let nearly = expand(h, w, Some(Ball::from(1.0 + 1e-9))).unwrap().sound_speed_ratio;
                let gain = (nearly - equal).nearest();
                assert!(gain > 0.0 && gain < 1e-9, "{h:?} {w:?} {gain}");
            }
        }
    }
}
