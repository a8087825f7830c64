//! How long the vibration of molecules takes to reach equilibrium: by an empirical formula, so nothing here is proven.

use super::constant::positive;
use super::error::{InputError, Parameter};
use super::thermally_perfect::{Portion, ThermallyPerfectGas};
use crate::number::Known;
use core::fmt;

/// One standard atmosphere, Pa.
const ATMOSPHERE: f64 = 101_325.0;

/// Characteristic temperature θ of the vibration that relaxes first, K: the only one of a diatomic molecule, the lowest of others.
///
/// From memory: hc·ωe/k with the constants of K. P. Huber and G. Herzberg (1979) for diatomic molecules; the fundamental of lowest wavenumber times
/// 1.4388 cm K for CO2 (667 1/cm), N2O (589), CF4 (435), SF6 (347).
///
/// Absent on purpose are molecules for which the formula is known to fail by far more than its factor (from memory): those with hydrogen, whose fast
/// rotation takes up the energy (H2 and CH4 relax 50 to 100 times faster), NO and NO2, which react, and SO2.
const VIBRATION: [(&str, f64); 7] =
    [("N2", 3393.0), ("O2", 2273.0), ("CO", 3122.0), ("CO2", 960.0), ("N2O", 847.0), ("CF4", 626.0), ("SF6", 499.0)];

/// Species of which a trace shortens the relaxation of [`SHORTENED`] beyond the formula.
const SHORTENING: [&str; 3] = ["H2O", "H2", "He"];

/// Species whose relaxation those shorten.
const SHORTENED: [&str; 3] = ["N2", "CO", "O2"];

fn characteristic_temperature(name: &str) -> Option<f64> {
    VIBRATION.iter().find(|(species, _)| *species == name).map(|(_, theta)| *theta)
}

/// Vibrational relaxation time τ, s, of a molecule of characteristic temperature θ (K) among collision partners, with the reduced mass μ of both
/// (g/mol), at a temperature T (K) and a pressure p (Pa):
///
/// > log10(p τ/(atm s)) = 5.0e-4 μ^(1/2) θ^(4/3) (T^(−1/3) − 0.015 μ^(1/4)) − 8.00.
///
/// Empirical. It meets measurements to 50 % for N2 and to a factor of 5 elsewhere; the measurements span about 300 to 8000 K (from memory). Plain f64,
/// with the accuracy of the elementary functions. Where an argument is not positive, the answer means nothing.
///
/// Source: R. C. Millikan and D. R. White, J. Chem. Phys. 39 (1963) 3209 (from memory).
///
/// ```
/// use endwall::gas::millikan_white;
/// let nitrogen = millikan_white(3393.0, 28.0134 / 2.0, 2000.0, 101_325.0);
/// assert!((nitrogen - 0.64e-3).abs() < 0.01e-3); // s
/// ```
pub fn millikan_white(characteristic_temperature: f64, reduced_mass: f64, temperature: f64, pressure: f64) -> f64 {
    let theta = characteristic_temperature;
    let root = libm::sqrt(reduced_mass);
    let steepness = 5.0e-4 * root * theta * libm::cbrt(theta);
    let exponent = steepness * (1.0 / libm::cbrt(temperature) - 0.015 * libm::sqrt(root)) - 8.0;
    libm::exp10(exponent) * ATMOSPHERE / pressure
}

/// The relaxation time of the vibration of one species of a mixture.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct RelaxationTime<'a> {
    /// The species whose vibration relaxes.
    pub species: &'a str,
    /// τ, s: the time in which the distance from equilibrium falls to 1/e.
    pub time: f64,
    /// τ is known within this factor, up and down: 1.5 for pure N2, 5 elsewhere (R. C. Millikan and D. R. White).
    pub factor: f64,
}

impl RelaxationTime<'_> {
    /// Between these two times, s: τ/factor and τ·factor.
    pub fn band(&self) -> (f64, f64) {
        (self.time / self.factor, self.time * self.factor)
    }
}

/// Relaxation times in a mixture at a temperature (K) and an absolute pressure (Pa), in the order of its portions:
///
/// > 1/τᵢ = Σⱼ xⱼ/τᵢⱼ, τᵢⱼ by [`millikan_white`] with the reduced mass of i and j, j over all species of the mixture.
///
/// For N2, O2, CO, and the lowest vibration of CO2, N2O, CF4 and SF6. Other species are absent: atoms do not vibrate, and of the rest the formula is
/// known to fail or nothing is known here. Exchange of vibration between species is left out, and so is what traces of water do: see [`shortenings`].
///
/// Source: R. C. Millikan and D. R. White, J. Chem. Phys. 39 (1963) 3209 (from memory).
///
/// # Errors
/// [`InputError`] for a temperature outside the data of the gas, and for a pressure that is not positive or beyond 2^±200.
///
/// ```
/// use endwall::gas::species::table;
/// use endwall::gas::{Portion, ThermallyPerfectGas, relaxation_times};
/// let nitrogen = [Portion { species: &table::N2, fraction: "1".parse()? }];
/// let gas = ThermallyPerfectGas::new(&nitrogen)?;
/// let times: Vec<_> = relaxation_times(&gas, 1000.0, 101_325.0)?.collect();
/// assert_eq!((times[0].species, times[0].factor), ("N2", 1.5));
/// assert!((times[0].time - 59e-3).abs() < 0.5e-3);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn relaxation_times<'a>(
    gas: &ThermallyPerfectGas<'a>,
    temperature: f64,
    pressure: f64,
) -> Result<impl Iterator<Item = RelaxationTime<'a>> + use<'a>, InputError> {
    gas.check_temperature(Parameter::Temperature, temperature)?;
    positive(Parameter::Pressure, Known::from(pressure))?;
    let portions = gas.portions();
    Ok(portions.iter().filter(|portion| portion.fraction.is_positive()).filter_map(move |portion| {
        let theta = characteristic_temperature(portion.species.name)?;
        let own = grams(portion);
        let rate: f64 = portions
            .iter()
            .filter(|partner| partner.fraction.is_positive())
            .map(|partner| {
                let other = grams(partner);
                partner.fraction.to_f64() / millikan_white(theta, own * other / (own + other), temperature, pressure)
            })
            .sum();
        let pure_nitrogen = portion.species.name == "N2" && portion.fraction == crate::number::Rational::ONE;
        Some(RelaxationTime { species: portion.species.name, time: 1.0 / rate, factor: if pure_nitrogen { 1.5 } else { 5.0 } })
    }))
}

/// Molar mass, g/mol.
fn grams(portion: &Portion<'_>) -> f64 {
    portion.species.molar_mass.to_f64() * 1e3
}

/// A remark: the mixture contains a species of which a trace shortens the relaxation of another one by a factor of 10 to 1000, beyond what the formula
/// says, so that a computed time is an upper limit.
///
/// Water, hydrogen and helium do so to N2, CO and O2 (R. C. Millikan and D. R. White; from memory).
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Shortening<'a> {
    /// The species that shortens.
    pub by: &'a str,
    /// Its mole fraction.
    pub fraction: f64,
    /// The species whose relaxation is shortened.
    pub species: &'a str,
}

impl fmt::Display for Shortening<'_> {
    /// One sentence.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let Self { by, fraction, species } = self;
        write!(f, "{by} (mole fraction {fraction}) can shorten the vibrational relaxation of {species} by a factor of 10 to 1000")
    }
}

/// The pairs of species in a mixture of which one shortens the relaxation of the other; none where there is no such pair.
///
/// What is not in the mixture as stated is not found: a fill that is called dry can hold enough water.
///
/// ```
/// use endwall::gas::{DRY_AIR, ThermallyPerfectGas, humid_air, shortenings};
/// let room = humid_air(295.15, 101_325.0, 0.5)?;
/// let gas = ThermallyPerfectGas::new(&room)?;
/// assert!(shortenings(&gas).map(|remark| (remark.by, remark.species)).eq([("H2O", "N2"), ("H2O", "O2")]));
/// assert_eq!(shortenings(&ThermallyPerfectGas::new(&DRY_AIR)?).count(), 0);
/// # Ok::<(), endwall::gas::InputError>(())
/// ```
pub fn shortenings<'a>(gas: &ThermallyPerfectGas<'a>) -> impl Iterator<Item = Shortening<'a>> + use<'a> {
    let portions = gas.portions();
    let among = move |names: [&'static str; 3]| {
        portions.iter().filter(move |portion| portion.fraction.is_positive() && names.contains(&portion.species.name))
    };
    among(SHORTENING).flat_map(move |by| {
        among(SHORTENED).map(move |relaxing| Shortening {
            by: by.species.name,
            fraction: by.fraction.to_f64(),
            species: relaxing.species.name,
        })
    })
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use crate::gas::Rule;
    use crate::gas::species::{named, table};
    use crate::number::Rational;
    use std::format;
    use std::vec::Vec;

    fn portion<'a>(name: &str, fraction: &str) -> Portion<'a> {
        Portion { species: named(name).unwrap(), fraction: fraction.parse::<Rational>().unwrap() }
    }

    #[test]
    fn nitrogen_has_the_times_of_the_formula() {
        // Worked by hand from the formula with θ 3393 K and μ 14.0067 g/mol, two digits.
        let nitrogen = [portion("N2", "1")];
        let gas = ThermallyPerfectGas::new(&nitrogen).unwrap();
        for (temperature, time, digit) in [(1000.0, 59e-3, 1e-3), (1500.0, 3.7e-3, 0.1e-3), (2000.0, 0.64e-3, 0.01e-3)] {
            let found: Vec<_> = relaxation_times(&gas, temperature, ATMOSPHERE).unwrap().collect();
            assert_eq!((found.len(), found[0].species, found[0].factor), (1, "N2", 1.5));
            assert!((found[0].time - time).abs() <= digit / 2.0, "{temperature} {found:?}");
            // τ p is constant.
            let tenfold = relaxation_times(&gas, temperature, 10.0 * ATMOSPHERE).unwrap().next().unwrap();
            assert!((tenfold.time * 10.0 / found[0].time - 1.0).abs() < 1e-14);
            assert_eq!(found[0].band(), (found[0].time / 1.5, found[0].time * 1.5));
        }
    }

    #[test]
    fn rates_of_a_mixture_add_by_mole_fraction() {
        let mixed = [portion("N2", "0.25"), portion("O2", "0.25"), portion("Ar", "0.5"), portion("He", "0")];
        let gas = ThermallyPerfectGas::new(&mixed).unwrap();
        let found: Vec<_> = relaxation_times(&gas, 1800.0, 2e5).unwrap().collect();
        assert!(found.iter().map(|time| time.species).eq(["N2", "O2"]));
        assert!(found.iter().all(|time| time.factor == 5.0));
        let (n, o, a) = (28.0134, 31.9988, 39.948);
        let rate = |theta: f64, own: f64| {
            let with = |other: f64| 1.0 / millikan_white(theta, own * other / (own + other), 1800.0, 2e5);
            0.25 * with(n) + 0.25 * with(o) + 0.5 * with(a)
        };
        for (time, rate) in found.iter().zip([rate(3393.0, n), rate(2273.0, o)]) {
            assert!((time.time * rate - 1.0).abs() < 1e-13, "{time:?}");
        }
        // A lighter partner relaxes faster, and heat too.
        assert!(millikan_white(3393.0, n * 4.0 / (n + 4.0), 1800.0, 2e5) < millikan_white(3393.0, n / 2.0, 1800.0, 2e5));
    }

    #[test]
    fn only_species_with_known_vibration_have_a_time() {
        for species in table::ALL {
            let portions = [Portion { species, fraction: Rational::ONE }];
            let gas = ThermallyPerfectGas::new(&portions).unwrap();
            let count = relaxation_times(&gas, 1000.0, 1e5).unwrap().count();
            assert_eq!(count, usize::from(characteristic_temperature(species.name).is_some()), "{}", species.name);
        }
        for (name, _) in VIBRATION {
            assert!(named(name).is_some_and(|species| species.shape.twice_frozen_heat_capacity() > 5), "{name}");
        }
        for name in SHORTENING.into_iter().chain(SHORTENED) {
            assert!(named(name).is_some(), "{name}");
        }
    }

    #[test]
    fn traces_are_remarked_only_beside_what_they_shorten() {
        let wet = [portion("N2", "0.999"), portion("H2O", "0.001"), portion("H2", "0")];
        let gas = ThermallyPerfectGas::new(&wet).unwrap();
        let remarks: Vec<_> = shortenings(&gas).collect();
        assert_eq!(remarks, [Shortening { by: "H2O", fraction: 0.001, species: "N2" }]);
        assert!(format!("{}", remarks[0]).starts_with("H2O (mole fraction 0.001) can shorten the vibrational relaxation of N2"));
        let argon = [portion("Ar", "0.9"), portion("He", "0.1")];
        assert_eq!(shortenings(&ThermallyPerfectGas::new(&argon).unwrap()).count(), 0);
    }

    #[test]
    fn inputs_outside_are_refused() {
        let nitrogen = [portion("N2", "1")];
        let gas = ThermallyPerfectGas::new(&nitrogen).unwrap();
        let error = |temperature, pressure| relaxation_times(&gas, temperature, pressure).err().map(|error| (error.parameter, error.rule));
        assert_eq!(error(23.0, 1e5), Some((Parameter::Temperature, Rule::DataRange(200.0, 20_000.0))));
        assert_eq!(error(f64::NAN, 1e5), Some((Parameter::Temperature, Rule::DataRange(200.0, 20_000.0))));
        assert_eq!(error(1000.0, 0.0), Some((Parameter::Pressure, Rule::Above(0.0))));
        assert_eq!(error(1000.0, f64::INFINITY), Some((Parameter::Pressure, Rule::Finite)));
    }
}
