//! The dimensionless direct problem at once and fast: nine ratios from γ and M − 1.

use super::relations::Jump;
use crate::gas::{Gamma, HeatCapacityRatio, InputError, Parameter, Rule, SmallRatio};
use crate::number::{Counted, Enclosure, Exact, Positive, Semifield};

/// The nine ratios of the incident and the reflected shock, each the optimal enclosure.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Ratios {
    /// p2/p1.
    pub pressure: Enclosure,
    /// T2/T1.
    pub temperature: Enclosure,
    /// ρ2/ρ1.
    pub density: Enclosure,
    /// u2/a1.
    pub gas_speed: Enclosure,
    /// Mach number of the reflected shock relative to the gas ahead of it.
    pub reflected_mach: Enclosure,
    /// p5/p1.
    pub reflected_pressure: Enclosure,
    /// T5/T1.
    pub reflected_temperature: Enclosure,
    /// ρ5/ρ1.
    pub reflected_density: Enclosure,
    /// Reflected shock speed in the laboratory over a1.
    pub reflected_speed: Enclosure,
}

/// The nine ratios in any kind of number, from γ and e = M − 1; `reflected_mach` is returned as its square.
///
/// Inlined, so that proof counts fold into constants.
#[inline(always)]
pub fn nine_ratios<S: Semifield>(gamma: Gamma<S>, mach_excess: S) -> [S; 9] {
    let jump = Jump::from_mach_excess(gamma, mach_excess);
    let mach = S::whole(1) + mach_excess;
    [
        jump.pressure_ratio(),
        jump.temperature_ratio(),
        jump.density_ratio(),
        jump.gas_speed(mach),
        jump.reflected_mach_squared(),
        jump.reflected_pressure_ratio(),
        jump.reflected_temperature_ratio(),
        jump.reflected_density_ratio(),
        jump.reflected_speed(mach),
    ]
}

impl Ratios {
    /// All nine ratios for e = M − 1, any e from 2⁻²⁰⁰ to 2⁶⁴; `None` outside. The optimal enclosures, hence the same bits on every machine.
    ///
    /// About twice the time of careful plain f64 where the hardware has a fused multiply-add that the build may use.
    ///
    /// ```
    /// use endwall::gas::HeatCapacityRatio;
    /// use endwall::number::Enclosure;
    /// use endwall::shock::Ratios;
    /// let diatomic = HeatCapacityRatio::ratio(7, 5)?.small().unwrap();
    /// let ratios = Ratios::from_mach_excess(diatomic, 1.0).unwrap();
    /// assert_eq!(ratios.reflected_pressure, Enclosure::from(15.0));
    /// assert!(ratios.reflected_mach.contains(3f64.sqrt()) && ratios.reflected_mach.width_in_ulp() == 1);
    /// # Ok::<(), endwall::gas::InputError>(())
    /// ```
    #[inline(always)]
    pub fn from_mach_excess(gamma: SmallRatio, mach_excess: f64) -> Option<Self> {
        let (d, q) = gamma.parts();
        let pair = Gamma { d: Counted::exactly(d, -20, 8)?, q: Counted::exactly(q, 0, 1)? };
        let [pressure, temperature, density, gas_speed, mach_squared, p5, t5, r5, reflected_speed] =
            nine_ratios(pair, Counted::exactly(mach_excess, -Counted::ENTRY, 64)?);
        // Only where a pair cannot tell an answer from a double.
        let exact = |index: usize| {
            move || {
                let gamma = Gamma { d: Exact::from(d), q: Exact::from(q) };
                nine_ratios(gamma, Exact::from(mach_excess)).get(index).copied().unwrap_or(Exact::INDEFINITE)
            }
        };
        Some(Self {
            pressure: pressure.optimal(exact(0)),
            temperature: temperature.optimal(exact(1)),
            density: density.optimal(exact(2)),
            gas_speed: gas_speed.optimal(exact(3)),
            reflected_mach: mach_squared.sqrt().optimal_root(exact(4)),
            reflected_pressure: p5.optimal(exact(5)),
            reflected_temperature: t5.optimal(exact(6)),
            reflected_density: r5.optimal(exact(7)),
            reflected_speed: reflected_speed.optimal(exact(8)),
        })
    }

    /// All nine ratios for a Mach number, with errors that say what is wrong.
    ///
    /// # Errors
    /// [`InputError`] unless γ is an exact ratio of integers below 2⁵³ and 1 < M ≤ 2⁵³.
    pub fn from_mach(gamma: HeatCapacityRatio, mach: f64) -> Result<Self, InputError> {
        let small = gamma.small().ok_or(InputError {
            parameter: Parameter::HeatCapacityRatio,
            value: gamma.known().nominal(),
            rule: Rule::Digits,
        })?;
        let limit = 9_007_199_254_740_992.0;
        let refuse = InputError { parameter: Parameter::Mach, value: mach, rule: Rule::Between(1.0, limit) };
        if !(mach > 1.0 && mach <= limit) {
            return Err(refuse);
        }
        // Exact: the difference of a double up to 2⁵³ and 1 is a double.
        Self::from_mach_excess(small, mach - 1.0).ok_or(refuse)
    }
}

/// The error counts of the nine ratios as the formulas themselves derive them, in units of u² = 2⁻¹⁰⁶ of the value, and the bound on their
/// exponents: with these the documentation page "How it is proven" is checked.
pub fn error_counts() -> Option<[(u32, (i32, i32)); 9]> {
    let gamma = Gamma { d: Counted::exactly(1.0, -20, 8)?, q: Counted::exactly(1.0, 0, 1)? };
    let mut ratios = nine_ratios(gamma, Counted::exactly(1.0, -Counted::ENTRY, 64)?);
    if let Some(mach) = ratios.get_mut(4) {
        *mach = mach.sqrt();
    }
    Some(ratios.map(|ratio| (ratio.error_count(), ratio.range())))
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use std::{format, println};

    #[test]
    fn the_documented_counts_are_those_of_the_formulas() {
        let page = include_str!("../how_it_is_proven.md");
        let names = ["p2/p1", "T2/T1", "ρ2/ρ1", "u2/a1", "`M_R`", "p5/p1", "T5/T1", "ρ5/ρ1", "`U_R`/a1"];
        for (name, (count, (low, high))) in names.iter().zip(error_counts().unwrap()) {
            let row = format!("| {name} | {count} | {low} to {high} |");
            println!("{row}");
            assert!(page.contains(&row), "{row}");
        }
    }

    /// Single precision is within 8 units of 2⁻²⁴ (4.8e-7, worst seen 6.1) of the same formulas in double precision, at every strength.
    #[test]
    fn single_precision_keeps_its_digits() {
        let mut worst = 0.0_f64;
        for (d, q) in [(2.0_f32, 5.0), (2.0, 3.0), (2.0, 7.0)] {
            let mut e = 1e-6_f32;
            while e < 29.0 {
                let single = nine_ratios(Gamma { d, q }, e);
                let double = nine_ratios(Gamma { d: f64::from(d), q: f64::from(q) }, f64::from(e));
                for (single, double) in single.into_iter().zip(double) {
                    worst = worst.max((f64::from(single) / double - 1.0).abs());
                }
                e *= 1.0009;
            }
        }
        println!("single precision: worst relative error {:.2} of 2^-24", worst * 2f64.powi(24));
        assert!(worst < 8.0 * 2f64.powi(-24), "{worst}");
    }

    #[test]
    fn exact_answers_have_no_width() {
        let gamma = HeatCapacityRatio::ratio(5, 3).unwrap();
        let ratios = Ratios::from_mach(gamma, 3.0).unwrap();
        assert_eq!(ratios.pressure, Enclosure::from(11.0));
        assert_eq!(ratios.density, Enclosure::from(3.0));
        assert_eq!(ratios.gas_speed, Enclosure::from(2.0));
        assert_eq!(ratios.reflected_pressure.width_in_ulp(), 1);
        assert!(ratios.reflected_temperature.contains(65.0 / 9.0));
    }
}
