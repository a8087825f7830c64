//! Loads on the tube: force on the end flange, stored energy, comparison with ratings. Screening only: no number here authorises a shot.

use super::input::{TubeInput, TubeInputError};
use crate::gas::{HeatCapacityRatio, Rule};
use crate::number::{Ball, Elementary, Enclosure, Known, Semifield};

/// π to 2⁻¹⁰⁶: what the two doubles leave is less than 3.1·10⁻³³. A test derives it.
fn pi() -> Ball {
    (Ball::from(core::f64::consts::PI) + Ball::from(1.224_646_799_147_353_2e-16)).widened(3.1e-33)
}

/// Force on the end flange, N; positive outward.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct EndLoad {
    /// F = (p5 − `p_ambient`)·π D²/4, as if it came slowly.
    pub steady: Enclosure,
    /// 2F: the most that a structure without damping answers to a load that comes at once and stays.
    pub sudden: Enclosure,
}

/// Force on the end flange from the absolute pressure behind the reflected shock, the absolute ambient pressure (Pa) and the diameter of the seal
/// (m); at most 2 ulp for exact inputs.
///
/// The factor 2 for sudden application is that of an undamped oscillator (any text on vibrations). A shorter load, or one that rises slower than
/// a quarter of the period, gives less; a later second shock can give more.
///
/// # Errors
/// [`TubeInputError`] unless both pressures and the diameter are positive and within 2^±200.
///
/// ```
/// use endwall::tube::end_load;
/// let load = end_load(3.1e6, 100e3, 0.2)?;
/// assert!(load.steady.contains(30_000.0 * std::f64::consts::PI)); // 94 kN
/// assert_eq!(load.sudden.high(), 2.0 * load.steady.high());
/// # Ok::<(), endwall::tube::TubeInputError>(())
/// ```
pub fn end_load(pressure: impl Into<Known>, ambient: impl Into<Known>, seal_diameter: impl Into<Known>) -> Result<EndLoad, TubeInputError> {
    let (pressure, ambient, diameter) = (pressure.into().ball(), ambient.into().ball(), seal_diameter.into().ball());
    TubeInput::LoadPressure.positive_ball(pressure)?;
    TubeInput::AmbientPressure.positive_ball(ambient)?;
    TubeInput::SealDiameter.positive_ball(diameter)?;
    let steady = ((pressure - ambient) * pi() * diameter.squared() / Ball::whole(4)).enclosure();
    Ok(EndLoad { steady, sudden: steady.doubled() })
}

/// Energy stored in compressed driver gas, J.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct StoredEnergy {
    /// Work of an isentropic expansion to ambient pressure.
    pub isentropic: Enclosure,
    /// Brode's: what it takes to bring the volume from ambient pressure to p4 by heating. Never less.
    pub brode: Enclosure,
}

/// Energy stored in a driver of volume V4 (m³) at the absolute pressure p4 (Pa) above the ambient pressure; at most 2 ulp for exact inputs.
///
/// > isentropic: p4 V4/(γ4−1)·(1 − (`p_a`/p4)^((γ4−1)/γ4)), the work of a gas of constant heat capacity
/// >
/// > Brode: (p4 − `p_a`)V4/(γ4−1): H. L. Brode, Phys. Fluids 2 (1959) 217 (from memory)
///
/// # Errors
/// [`TubeInputError`] unless all are positive and within 2^±200, and p4 exceeds the ambient pressure.
///
/// ```
/// use endwall::gas::HeatCapacityRatio;
/// use endwall::tube::stored_energy;
/// // 32 atm of helium in 30 litres: (1/32)^(2/5) = 1/4.
/// let energy = stored_energy(HeatCapacityRatio::ratio(5, 3)?, 32.0 * 101_325.0, 101_325.0, 0.03)?;
/// let product: f64 = 32.0 * 101_325.0 * 0.03;
/// assert!((energy.isentropic.middle() / (1.5 * 0.75 * product) - 1.0).abs() < 1e-15); // 109 kJ
/// assert!((energy.brode.middle() / (1.5 * 31.0 / 32.0 * product) - 1.0).abs() < 1e-15); // 141 kJ
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn stored_energy(
    heat_capacity_ratio: HeatCapacityRatio,
    driver_pressure: impl Into<Known>,
    ambient: impl Into<Known>,
    driver_volume: impl Into<Known>,
) -> Result<StoredEnergy, TubeInputError> {
    let (pressure, ambient, volume) = (driver_pressure.into().ball(), ambient.into().ball(), driver_volume.into().ball());
    TubeInput::DriverPressure.positive_ball(pressure)?;
    TubeInput::AmbientPressure.positive_ball(ambient)?;
    TubeInput::DriverVolume.positive_ball(volume)?;
    if !(pressure - ambient).is_certainly_positive() {
        return Err(TubeInput::DriverPressure.refuse(pressure.nearest(), Rule::Above(ambient.nearest())));
    }
    let excess = heat_capacity_ratio.excess().ball();
    let isentropic = isentropic_energy(excess, pressure, ambient, volume);
    let brode = brode_energy(excess, pressure, ambient, volume);
    Ok(StoredEnergy { isentropic: isentropic.enclosure(), brode: brode.enclosure() })
}

/// p V/(γ−1)·(1 − e^(−y)) with y = (γ−1)/γ·ln(p/pa), in a form that holds for γ near 1 and for p near pa: p V ln(p/pa)/γ·(1 − e^(−y))/y.
fn isentropic_energy<S: Elementary>(excess: S, pressure: S, ambient: S, volume: S) -> S {
    let gamma = S::whole(1) + excess;
    let logarithm = (pressure / ambient).ln();
    pressure * volume * logarithm / gamma * (-(excess * logarithm / gamma)).expm1_ratio()
}

/// (p − pa)V/(γ−1).
fn brode_energy<S: Elementary>(excess: S, pressure: S, ambient: S, volume: S) -> S {
    (pressure - ambient) * volume / excess
}

/// A pressure against a rating.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum RatingCheck {
    /// The upper end of the pressure is at most the rating.
    Within,
    /// The value is, the upper end of its band is not.
    ExceededByUpperEnd,
    /// The value itself exceeds the rating.
    Exceeded,
}

/// Compares a pressure and the upper end of its band with a rating, all absolute, Pa.
///
/// # Errors
/// [`TubeInputError`] unless all are positive and finite and the upper end is at least the value.
///
/// ```
/// use endwall::tube::{RatingCheck, check_rating};
/// assert_eq!(check_rating(2.0e6, 2.2e6, 2.1e6)?, RatingCheck::ExceededByUpperEnd);
/// assert_eq!(check_rating(2.0e6, 2.1e6, 2.1e6)?, RatingCheck::Within);
/// # Ok::<(), endwall::tube::TubeInputError>(())
/// ```
pub fn check_rating(value: f64, upper_end: f64, rating: f64) -> Result<RatingCheck, TubeInputError> {
    TubeInput::LoadPressure.positive(value)?;
    TubeInput::UpperEnd.positive(upper_end)?;
    TubeInput::Rating.positive(rating)?;
    if upper_end < value {
        return Err(TubeInput::UpperEnd.refuse(upper_end, Rule::Above(value)));
    }
    Ok(if value > rating {
        RatingCheck::Exceeded
    } else if upper_end > rating {
        RatingCheck::ExceededByUpperEnd
    } else {
        RatingCheck::Within
    })
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use std::println;

    /// π = 16 artan(1/5) − 4 artan(1/239) (Machin).
    #[test]
    fn pi_is_what_it_is_called() {
        let artan = |n: u32| {
            let x = Ball::whole(1) / Ball::whole(n);
            let square = x * x;
            let sum = (0..40).rev().fold(Ball::from(0.0), |sum, k| Ball::whole(1) / Ball::whole(2 * k + 1) - square * sum);
            x * sum.widened(1e-50)
        };
        let derived = Ball::whole(16) * artan(5) - Ball::whole(4) * artan(239);
        let difference = pi() - derived;
        assert!(difference.enclosure().contains(0.0) && difference.radius() < 1e-30, "{difference:?}");
    }

    #[test]
    fn loads_and_energies_are_proven_to_two_ulp() {
        let mut widest = 0;
        let mut seen = 0;
        for pressure in [101_325.000_001, 1.1e5, 7.3e5, 2.9e6, 4.4e7] {
            for gamma in [(5, 3), (7, 5), (1_000_001, 1_000_000), (100, 1)] {
                let load = end_load(pressure, 101_325.0, 0.133).unwrap();
                let gamma = HeatCapacityRatio::ratio(gamma.0, gamma.1).unwrap();
                let energy = stored_energy(gamma, pressure, 101_325.0, 0.0317).unwrap();
                for found in [load.steady, load.sudden, energy.isentropic, energy.brode] {
                    assert!(found.is_proven() && found.low() > 0.0);
                    widest = widest.max(found.width_in_ulp());
                    seen += 1;
                }
                assert!(energy.isentropic.low() <= energy.brode.high());
            }
        }
        println!("{seen} enclosures, widest {widest} ulp");
        assert!(widest <= 2, "{widest}");
    }

    /// The work of expansion in small steps: ∫ (p − 0) dV along the isentrope from p4 to ambient.
    #[test]
    fn the_isentropic_energy_is_the_work() {
        let (p4, ambient, volume, gamma) = (3.0e6, 1.0e5, 0.03, 1.4);
        let end = volume * libm::pow(p4 / ambient, 1.0 / gamma);
        let steps = 20_000;
        let h = libm::log(end / volume) / f64::from(steps);
        // In ln V: p V d(ln V), Simpson's rule.
        let work: f64 = (0..=steps)
            .map(|k| {
                let weight = if k == 0 || k == steps {
                    1.0
                } else if k % 2 == 1 {
                    4.0
                } else {
                    2.0
                };
                weight * p4 * volume * libm::exp(f64::from(k) * h * (1.0 - gamma))
            })
            .sum::<f64>()
            * h
            / 3.0;
        let energy = stored_energy(HeatCapacityRatio::ratio(7, 5).unwrap(), p4, ambient, volume).unwrap();
        assert!((energy.isentropic.middle() / work - 1.0).abs() < 1e-12, "{work} {energy:?}");
    }

    #[test]
    fn a_vacuum_pulls_inward_and_nonsense_is_refused() {
        assert!(end_load(1.0e3, 1.0e5, 0.1).unwrap().steady.high() < 0.0);
        assert_eq!(end_load(-1.0, 1e5, 0.1).unwrap_err().input, TubeInput::LoadPressure);
        assert_eq!(end_load(1e6, 1e5, 0.0).unwrap_err().input, TubeInput::SealDiameter);
        let gamma = HeatCapacityRatio::ratio(5, 3).unwrap();
        assert_eq!(stored_energy(gamma, 1e5, 1e5, 0.1).unwrap_err().rule, Rule::Above(1e5));
        assert_eq!(check_rating(2e6, 1e6, 3e6).unwrap_err().input, TubeInput::UpperEnd);
        assert_eq!(check_rating(2e6, f64::INFINITY, 3e6).unwrap_err().rule, Rule::Finite);
        assert_eq!(check_rating(3.1e6, 3.2e6, 3e6), Ok(RatingCheck::Exceeded));
    }
}
