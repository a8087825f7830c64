//! Total pressure across the stationary shock.

use super::incident::Incident;
use super::output::Output;
use crate::gas::Gamma;
use crate::number::{Ball, Dual, Elementary, Enclosure, Semifield};

/// M² − 1 below which the loss is taken by its series.
const WEAK: f64 = 0.1;

/// 2⁻¹²⁰, what is left of a series.
const REST: f64 = f64::from_bits((1023 - 120) << 52);

/// ln(pt2/pt1) = (γ·ln(ρ2/ρ1) − ln(p2/p1))/(γ−1): NACA Report 1135, equation 99, in logarithms.
fn logarithm<S: Elementary>(gamma: Gamma<S>, z: S) -> S {
    let jump = super::relations::Jump::new(gamma, z);
    (gamma.ratio() * jump.density_ratio().ln() - gamma.q * jump.pressure_ratio().ln()) / gamma.d
}

/// (ln(1+x) − x + x²/2)/x³ = Σ (−x)ⁿ/(n+3) for |x| ≤ 1/8: the terms after n = 40 sum to less than 2⁻¹²⁸.
fn third_order(x: Ball) -> Ball {
    let sum = (0..=40).rev().fold(Ball::from(0.0), |sum, n| Ball::whole(1) / Ball::whole(n + 3) - x * sum);
    sum.widened(REST)
}

/// The same logarithm for weak shocks, where it is of third order in z: with x = ρ2/ρ1 − 1, y = p2/p1 − 1 and T(x) = (ln(1+x) − x + x²/2)/x³
/// the first two orders cancel by algebra,
///
/// > ln(pt2/pt1) = 2γz³·{ (G² + γ(γ−1)z)/(G²B²) + 4/(γ−1)·[T(x)/B³ − γ²T(y)/G³] } → −(2γ/3)z³/G².
fn weak_logarithm(gamma: Gamma<Ball>, z: Ball) -> Ball {
    let (g, up, less_one) = (gamma.value(), gamma.plus_one() / gamma.q, gamma.d / gamma.q);
    let b = up + less_one * z;
    let x = z.doubled() / b;
    let y = (g * z).doubled() / up;
    let first = (up.squared() + g * less_one * z) / (up.squared() * b.squared());
    let second = third_order(x) / (b * b.squared()) - g.squared() * third_order(y) / (up * up.squared());
    (g * z).doubled() * z.squared() * (first + Ball::whole(4) * second / less_one)
}

impl Incident {
    /// Total-pressure ratio pt2/pt1 across the stationary shock (in its own frame), dimensionless, in (0, 1); at most 2 ulp for exact inputs.
    ///
    /// pt2/pt1 = (ρ2/ρ1)^(γ/(γ−1))·(p2/p1)^(−1/(γ−1)), NACA Report 1135, equation 99.
    ///
    /// A ratio below 2⁻⁹³⁶ comes as an enclosure from 0 to a little above that.
    ///
    /// ```
    /// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
    /// use endwall::shock::{Entry, Incident};
    /// let gas = Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.0289652)?;
    /// let shock = Incident::new(&Fill::new(gas, 100e3, 295.0)?, Entry::Mach, 2.0)?;
    /// // NACA Report 1135, table II, M 2.00: 0.7209.
    /// assert!((shock.total_pressure_ratio().middle() - 0.7209).abs() < 5e-5);
    /// # Ok::<(), endwall::gas::InputError>(())
    /// ```
    pub fn total_pressure_ratio(&self) -> Enclosure {
        self.of_logarithm(Output::MachBehind, Elementary::exp, Dual::exp).at_least_zero()
    }

    /// Total-pressure loss 1 − pt2/pt1, accurate for the weakest shock: it vanishes as (16γ/(3(γ+1)²))·(M − 1)³.
    pub fn total_pressure_loss(&self) -> Enclosure {
        self.of_logarithm(Output::DensityRatio, |l| -(l * l.expm1_ratio()), |l| -(l * l.expm1_ratio()))
    }

    fn of_logarithm(
        &self,
        direction: Output,
        point: impl Fn(Ball) -> Ball,
        slopes: impl Fn(Dual<Enclosure, 5>) -> Dual<Enclosure, 5>,
    ) -> Enclosure {
        let at = |shock: &Self| {
            let (gamma, z) = (shock.ball_problem().gamma, shock.z());
            point(if z.nearest() < WEAK { weak_logarithm(gamma, z) } else { logarithm(gamma, z) }).enclosure()
        };
        if self.is_exact() {
            return at(self);
        }
        let over_box = |variables: [Dual<Enclosure, 5>; 5]| {
            let (problem, z) = self.over_box(variables);
            slopes(logarithm(problem.gamma, z))
        };
        // Both directions are those of an output that depends on M and γ alone: the ratio goes with M2, falling with M and growing with γ, the loss
        // with ρ2/ρ1. With γ at fixed z since −ln(pt2/pt1) is the integral over z of 2z²/((A/γ)·B·(1+z)), of which ∂[(A/γ)·B]/∂γ =
        // (1 + 1/γ + 2z)(1 + z) − (γ+1 + (γ−1)z)/γ² > 0, because (γ+1)/γ² ≤ 1 + 1/γ and (γ−1)/γ² ≤ 1/4.
        self.range_of(direction, over_box, at)
    }
}

#[cfg(test)]
mod tests {
    use crate::gas::{Fill, Gas, HeatCapacityRatio};
    use crate::number::{Enclosure, Known};
    use crate::shock::{Entry, Incident};

    /// At a given Mach number the loss falls and the ratio grows with γ: the range runs from one end of γ to the other.
    #[test]
    fn a_tolerance_of_gamma_bounds_ratio_and_loss() {
        let shock = |gamma: Known, mach: f64| {
            let gas = Gas::new(HeatCapacityRatio::new(gamma).unwrap(), 0.028).unwrap();
            Incident::new(&Fill::new(gas, 1e4, 296.0).unwrap(), Entry::Mach, mach).unwrap()
        };
        for mach in [1.01, 2.0, 30.0] {
            for (low, high) in [(1.000_001, 1.1), (1.3, 1.4), (1.6, 3.0), (3.0, 100.0)] {
                let range = shock(Enclosure::new(low, high).unwrap().into(), mach);
                for gamma in [low, f64::midpoint(low, high), high] {
                    let point = shock(gamma.into(), mach);
                    let pairs = [
                        (range.total_pressure_ratio(), point.total_pressure_ratio()),
                        (range.total_pressure_loss(), point.total_pressure_loss()),
                    ];
                    for (range, point) in pairs {
                        assert!(range.low() <= point.high() && point.low() <= range.high(), "{mach} {gamma} {range:?} {point:?}");
                    }
                }
            }
        }
    }
}
