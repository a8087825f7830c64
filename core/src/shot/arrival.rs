//! The arrival-time model of a shock whose speed is linear in distance, and its bounded Gauss-Newton solution.
//!
//! `U(y) = U_S (1 + alpha y)`, hence `t(y) = t_w - log1p(alpha y)/(alpha U_S)`, with `y` from the end wall. Inside, distances are in units of
//! the farthest station, `eta = y/Y`, times are taken from one of the arrivals, and the unknowns are `t_w`, `q = Y/U_S` and `a = alpha Y`:
//! `t = t_w - q G`, `G = eta L(a eta)`, `L(x) = log1p(x)/x`. The model is linear in the first two.

use super::least_squares::{ALLOWANCE_ROW, Column, Factor, ROWS};
use super::station::{MAX_STATIONS, Station};

/// Steps of the iteration; it takes three to six on real shots.
const STEPS: usize = 40;
/// Halvings of one step; together with [`STEPS`] they bound the work.
const HALVINGS: usize = 30;
/// A step that is smaller (relative, and in `a`) is the last one: convergence is close to quadratic, so what is left is far below it.
const SETTLED: f64 = 1e-11;
/// Largest part of the way to a standstill of the modelled shock at the farthest station, `1 + a = 0`, that one step may take.
const APPROACH: f64 = 0.9;

/// Value of the unknowns.
#[derive(Clone, Copy)]
pub(super) struct Unknowns {
    /// Arrival at the end wall after the reference time, s.
    pub(super) t_w: f64,
    /// `Y/U_S`, s.
    pub(super) q: f64,
    /// `alpha Y`.
    pub(super) a: f64,
}

/// How the allowance for `a` enters.
#[derive(Clone, Copy, PartialEq)]
pub(super) enum Prior {
    /// No allowance.
    None,
    /// One more observation of `a`.
    Observed { value: f64, uncertainty: f64 },
    /// `a` is held at this value: the allowance is stated as exact, or there is nothing to weigh it against.
    Held { value: f64, uncertainty: f64 },
}

/// What is fitted. Row `i` is the `i`-th used station; rows without a station have weight zero.
#[derive(Clone, Copy)]
pub(super) struct Observations {
    pub(super) eta: [f64; MAX_STATIONS],
    /// Arrival after the reference time, s.
    pub(super) time: [f64; MAX_STATIONS],
    /// `1/s_i` (one for all when no uncertainty is stated).
    pub(super) weight: [f64; MAX_STATIONS],
    pub(super) prior: Prior,
}

/// Solution of the nonlinear problem with its linearisation there.
#[derive(Clone, Copy)]
pub(super) struct Solution {
    pub(super) at: Unknowns,
    pub(super) factor: Factor<3>,
    pub(super) columns: [Column; 3],
    /// Weighted residuals, observed minus modelled.
    pub(super) residual: Column,
}

/// `L(x) = log1p(x)/x`, continuous through zero.
fn log_ratio(x: f64) -> f64 {
    if x == 0.0 { 1.0 } else { libm::log1p(x) / x }
}

/// `L'(x) = (1/(1+x) - L(x))/x`; near zero, where this cancels, its series `-1/2 + 2x/3 - 3x^2/4 + ...`.
fn log_ratio_slope(x: f64) -> f64 {
    if libm::fabs(x) > 0.1 {
        return (1.0 / (1.0 + x) - log_ratio(x)) / x;
    }
    // sum over k of (-1)^k k/(k+1) x^(k-1); the first term left out is below 1e-17.
    let mut sum = 0.0;
    for k in (1..=17_u8).rev() {
        let k = f64::from(k);
        sum = k / (k + 1.0) - x * sum;
    }
    -sum
}

/// `K(x)`, the integral of `s^2/(1 + x s)^2` over `s` from 0 to 1: how a curvature of the speed profile changes the arrival times.
/// Gauss-Legendre rule of five points (Abramowitz and Stegun 25.4.30, from memory): within 1e-6 for `x` from -0.3 to 1.
fn curvature_kernel(x: f64) -> f64 {
    let outer = libm::sqrt(5.0 + 2.0 * libm::sqrt(10.0 / 7.0)) / 3.0;
    let inner = libm::sqrt(5.0 - 2.0 * libm::sqrt(10.0 / 7.0)) / 3.0;
    let root70 = libm::sqrt(70.0);
    let (heavy, light) = ((322.0 + 13.0 * root70) / 900.0, (322.0 - 13.0 * root70) / 900.0);
    let rule = [(-outer, light), (-inner, heavy), (0.0, 128.0 / 225.0), (inner, heavy), (outer, light)];
    rule.iter()
        .map(|&(node, weight)| {
            let s = 0.5 * (1.0 + node);
            let f = s / (1.0 + x * s);
            0.5 * weight * f * f
        })
        .sum()
}

impl Observations {
    /// The used stations with unit weights, distances scaled by `length`, times after `reference`.
    pub(super) fn new(used: &[Station], length: f64, reference: f64, prior: Prior) -> Self {
        let mut new = Self { eta: [0.0; MAX_STATIONS], time: [0.0; MAX_STATIONS], weight: [0.0; MAX_STATIONS], prior };
        let rows = new.eta.iter_mut().zip(&mut new.time).zip(&mut new.weight);
        for (((eta, time), weight), station) in rows.zip(used) {
            *eta = station.from_end_wall / length;
            *time = station.corrected_arrival() - reference;
            *weight = 1.0;
        }
        new
    }

    /// Rows of stations: `(eta, time, weight)`.
    fn rows(&self) -> impl Iterator<Item = (f64, f64, f64)> + '_ {
        self.eta.iter().zip(&self.time).zip(&self.weight).map(|((&eta, &time), &weight)| (eta, time, weight))
    }

    /// One weighted column from a function of `(eta, time)`; the allowance row is zero.
    pub(super) fn column(&self, value: impl Fn(f64, f64) -> f64) -> Column {
        let mut column = [0.0; ROWS];
        for (cell, (eta, time, weight)) in column.iter_mut().zip(self.rows()) {
            *cell = weight * value(eta, time);
        }
        column
    }

    /// The straight line `t = c0 - c1 eta`: `(c0, c1)`, and how far the slope of the regression of `eta^2` on `eta` shifts it, `S`: for a small
    /// `a` the line's speed is `U_S (1 + a S/2)`.
    pub(super) fn straight_line(&self) -> Option<(f64, f64, f64)> {
        let factor = Factor::new(&[self.column(|_, _| 1.0), self.column(|eta, _| -eta)])?;
        let [c0, c1] = factor.solve(&self.column(|_, time| time));
        let [_, minus_s] = factor.solve(&self.column(|eta, _| eta * eta));
        Some((c0, c1, -minus_s))
    }

    /// Where the iteration starts: with an allowance the linear problem at its `a`; otherwise the quadratic `t = c0 - c1 eta + c2 eta^2`,
    /// `q = c1`, `a = 2 c2/c1`; and the straight line where that gives no forward speed.
    pub(super) fn start(&self) -> Option<Unknowns> {
        let given = match self.prior {
            Prior::None => None,
            Prior::Held { value, .. } => Some(value),
            Prior::Observed { value, .. } => Some(value.clamp(-0.5, 10.0)),
        };
        if let Some(a) = given {
            let factor = Factor::new(&[self.column(|_, _| 1.0), self.column(|eta, _| -eta * log_ratio(a * eta))])?;
            let [t_w, q] = factor.solve(&self.column(|_, time| time));
            return Some(Unknowns { t_w, q, a });
        }
        let factor = Factor::new(&[self.column(|_, _| 1.0), self.column(|eta, _| -eta), self.column(|eta, _| eta * eta)])?;
        let [t_w, q, c2] = factor.solve(&self.column(|_, time| time));
        if q > 0.0 {
            return Some(Unknowns { t_w, q, a: (2.0 * c2 / q).clamp(-0.5, 10.0) });
        }
        let (t_w, q, _) = self.straight_line()?;
        Some(Unknowns { t_w, q, a: 0.0 })
    }

    /// Weighted residuals, observed minus modelled.
    fn residual(&self, at: Unknowns) -> Column {
        let mut residual = self.column(|eta, time| time - at.t_w + at.q * eta * log_ratio(at.a * eta));
        if let Prior::Observed { value, uncertainty } = self.prior {
            residual[ALLOWANCE_ROW] = (value - at.a) / uncertainty;
        }
        residual
    }

    /// Slope of the modelled arrival times in `a`, weighted.
    pub(super) fn slope_in_a(&self, at: Unknowns) -> Column {
        self.column(|eta, _| -at.q * eta * eta * log_ratio_slope(at.a * eta))
    }

    /// Slope in the coefficient `b` of a profile `1 + a eta + b eta^2`, at `b = 0`, weighted.
    pub(super) fn slope_in_curvature(&self, at: Unknowns) -> Column {
        self.column(|eta, _| at.q * eta * eta * eta * curvature_kernel(at.a * eta))
    }

    /// Columns of the linearised problem.
    fn columns(&self, at: Unknowns) -> [Column; 3] {
        // A held `a` keeps its column with a single one in the row of the allowance: its step is then zero, and its leverage one.
        let third = match self.prior {
            Prior::None => self.slope_in_a(at),
            Prior::Observed { uncertainty, .. } => {
                let mut column = self.slope_in_a(at);
                column[ALLOWANCE_ROW] = 1.0 / uncertainty;
                column
            }
            Prior::Held { .. } => {
                let mut column = [0.0; ROWS];
                column[ALLOWANCE_ROW] = 1.0;
                column
            }
        };
        [self.column(|_, _| 1.0), self.column(|eta, _| -eta * log_ratio(at.a * eta)), third]
    }

    /// The linearised problem at a point.
    fn linearise(&self, at: Unknowns) -> Option<Solution> {
        let columns = self.columns(at);
        Some(Solution { at, factor: Factor::new(&columns)?, columns, residual: self.residual(at) })
    }

    /// Gauss-Newton with halved steps from `start`. `None` when it does not settle or leaves the finite numbers.
    pub(super) fn solve(&self, start: Unknowns) -> Option<Solution> {
        let mut here = self.linearise(start)?;
        for _ in 0..STEPS {
            let [d_t, d_q, d_a] = here.factor.solve(&here.residual);
            let from = here.at;
            let size = libm::fabs(d_t / from.q).max(libm::fabs(d_q / from.q)).max(libm::fabs(d_a) / (1.0 + libm::fabs(from.a)));
            if !size.is_finite() {
                return None;
            }
            let before = dot_self(&here.residual);
            let mut share = 1.0;
            let mut next = None;
            for _ in 0..HALVINGS {
                let at = Unknowns { t_w: from.t_w + share * d_t, q: from.q + share * d_q, a: from.a + share * d_a };
                let inside = at.q > 0.0 && share * d_a > -APPROACH * (1.0 + from.a);
                // Close to the end rounding decides whether the sum of squares falls: such a step is taken as it is.
                if inside && (size < 1e-6 || dot_self(&self.residual(at)) <= before) {
                    next = Some(at);
                    break;
                }
                share *= 0.5;
            }
            here = self.linearise(next?)?;
            if size <= SETTLED {
                return (here.at.q > 0.0 && here.residual.iter().all(|r| r.is_finite())).then_some(here);
            }
        }
        None
    }
}

/// Sum of squares.
pub(super) fn dot_self(column: &Column) -> f64 {
    super::least_squares::dot(column, column)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn log_ratio_and_its_slope_join() {
        assert_eq!(log_ratio(0.0), 1.0);
        assert!((log_ratio(1.0) - core::f64::consts::LN_2).abs() < 1e-16);
        assert_eq!(log_ratio_slope(0.0), -0.5);
        for x in [-0.1, 0.1] {
            let direct = (1.0 / (1.0 + x) - log_ratio(x)) / x;
            assert!((direct - log_ratio_slope(x)).abs() < 1e-14, "{x}");
        }
        // Against a central difference of L.
        for x in [-0.6, -0.05, 0.02, 0.3, 1.0] {
            let difference = (log_ratio(x + 1e-5) - log_ratio(x - 1e-5)) / 2e-5;
            assert!((difference - log_ratio_slope(x)).abs() < 1e-9, "{x}");
        }
    }

    #[test]
    fn curvature_kernel_is_the_integral() {
        assert!((curvature_kernel(0.0) - 1.0 / 3.0).abs() < 1e-15);
        for x in [-0.3, 0.2, 1.0] {
            // Closed form, which cancels near zero: ((1+x) - 2 ln(1+x) - 1/(1+x))/x^3.
            let closed = ((1.0 + x) - 2.0 * libm::log1p(x) - 1.0 / (1.0 + x)) / (x * x * x);
            assert!((curvature_kernel(x) - closed).abs() < 1e-6, "{x}: {}", curvature_kernel(x) - closed);
        }
    }

    /// Slopes of the arrival times in `a` and in the curvature, against differences of the travel time integrated numerically.
    #[test]
    fn slopes_are_those_of_the_travel_time() {
        let (a, q) = (0.3, 2e-3);
        let arrival = |eta: f64, a: f64, b: f64| {
            let n = 1000;
            let h = eta / f64::from(n);
            let slowness = |s: f64| q * h / (1.0 + a * s + b * s * s);
            -(0..n).map(|i| slowness(h * (f64::from(i) + 0.5))).sum::<f64>()
        };
        let mut observations = Observations::new(&[], 1.0, 0.0, Prior::None);
        observations.eta = core::array::from_fn(|i| i as f64 / 15.0);
        observations.weight = [1.0; MAX_STATIONS];
        let at = Unknowns { t_w: 0.0, q, a };
        let (in_a, in_b) = (observations.slope_in_a(at), observations.slope_in_curvature(at));
        let residual = observations.residual(at);
        for (i, eta) in observations.eta.into_iter().enumerate() {
            let d = 1e-4;
            let by_a = (arrival(eta, a + d, 0.0) - arrival(eta, a - d, 0.0)) / (2.0 * d);
            let by_b = (arrival(eta, a, d) - arrival(eta, a, -d)) / (2.0 * d);
            assert!((in_a[i] - by_a).abs() < 1e-6 * q, "{eta}: {} {by_a}", in_a[i]);
            assert!((in_b[i] - by_b).abs() < 1e-6 * q, "{eta}: {} {by_b}", in_b[i]);
            assert!((residual[i] + arrival(eta, a, 0.0)).abs() < 1e-6 * q);
        }
    }
}
