//! At which partial pressure a gas condenses. Empirical: nothing here is proven.

use super::humid_air::water_saturation_pressure;

/// What is known of the condensation of a species at a temperature.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Condensation {
    /// Above this partial pressure, Pa, it condenses.
    Above(f64),
    /// At no pressure is there a liquid: the temperature is not below the critical one.
    Never,
    /// The species is not listed, or freezes at this temperature, where its vapour pressure is lower than that of the listed liquid.
    Unknown,
}

/// A vapour pressure over the liquid: melting point (K), critical temperature (K), critical pressure (Pa) and four constants.
struct VapourPressure {
    species: &'static str,
    melting: f64,
    critical_temperature: f64,
    critical_pressure: f64,
    constants: [f64; 4],
}

const fn entry(
    species: &'static str,
    melting: f64,
    critical_temperature: f64,
    critical_pressure: f64,
    constants: [f64; 4],
) -> VapourPressure {
    VapourPressure { species, melting, critical_temperature, critical_pressure, constants }
}

/// VDI Heat Atlas, 2nd edition (2010), part D3.1, table 3, as given by the property library `chemicals` 1.5.2. Water has an equation of its own.
static LIQUIDS: [VapourPressure; 19] = [
    entry("Ar", 83.75, 150.69, 4.863e6, [-5.92801, 1.21982, -0.53967, -1.52312]),
    entry("Kr", 115.75, 209.48, 5.525e6, [-5.98396, 1.34334, -0.66521, -1.30012]),
    entry("Xe", 161.25, 289.73, 5.842e6, [-6.00659, 1.37325, -0.77703, -1.22529]),
    entry("CO", 68.15, 132.86, 3.498e6, [-6.19574, 1.32502, -0.95226, -1.98513]),
    entry("CO2", 216.55, 304.13, 7.377e6, [-7.02916, 1.53937, -2.2833, -2.34853]),
    entry("C2H2", 192.25, 308.35, 6.139e6, [-6.99241, 1.57338, -1.33202, -5.21884]),
    entry("N2", 63.05, 126.19, 3.396e6, [-6.12498, 1.26499, -0.76765, -1.78173]),
    entry("N2O", 182.25, 309.52, 7.245e6, [-6.79599, 1.59751, -1.85163, -2.29494]),
    entry("NO", 112.15, 180.15, 6.48e6, [-8.38772, 0.85755, -3.11447, -8.98765]),
    entry("O2", 54.35, 154.6, 5.046e6, [-6.05148, 1.23506, -0.62883, -1.61288]),
    entry("CF4", 89.45, 227.55, 3.74e6, [-6.92188, 1.54525, -1.41276, -2.87791]),
    entry("CH4", 90.65, 190.56, 4.599e6, [-6.02388, 1.26813, -0.56948, -1.37648]),
    entry("C2H4", 104.05, 282.35, 5.042e6, [-6.41327, 1.45469, -1.24183, -1.99446]),
    entry("C2H6", 90.25, 305.32, 4.872e6, [-6.46252, 1.3576, -1.04922, -2.03789]),
    entry("C3H8", 85.45, 369.82, 4.248e6, [-6.7148, 1.38388, -1.30695, -2.56827]),
    entry("NH3", 195.35, 405.5, 11.359e6, [-7.30274, 1.64638, -2.01606, -1.96884]),
    entry("NO2", 261.85, 431.15, 10.132e6, [-11.33898, 2.3762, 0.6782, -2.53997]),
    entry("SF6", 222.35, 318.88, 3.766e6, [-7.08034, 1.65103, -1.96365, -0.2506]),
    entry("SO2", 199.95, 430.64, 7.876e6, [-7.27858, 1.72871, -2.37473, -2.70464]),
];

/// Gases whose critical temperature lies below 50 K (from memory: He 5.2 K, H2 33 K, HD 36 K, D2 38 K, Ne 44 K).
const LIGHT: [&str; 5] = ["He", "H2", "HD", "D2", "Ne"];
/// From this temperature on a light gas has no liquid, K.
const LIGHT_FROM: f64 = 50.0;

/// Critical temperature of water, K.
const WATER_CRITICAL: f64 = 647.096;

/// Whether a species condenses at a temperature in K, and above which partial pressure:
///
/// > ln(p/`p_c`) = (`T_c`/T)(A τ + B τ^1.5 + C τ^2.5 + D τ^5), τ = 1 − T/`T_c`,
///
/// from the melting point to the critical temperature `T_c`; for water [`water_saturation_pressure`]. In a mixture the partial pressure counts: what the other gases do to
/// the vapour pressure (by a few per cent at tens of bar, from memory) is left out.
///
/// Plain f64. Where the vapour pressure exceeds 1 kPa the equation differs from the reference equations of state of a property library by 1.5 % at most (SF6; mostly
/// by less than 0.1 %), and from another handbook by 0.8 % for C2H2 and NO. NO2 is its equilibrium with N2O4, and the pressure that of both.
///
/// Source: the equation of W. Wagner, Cryogenics 13 (1973) 470, in the form of VDI Heat Atlas, 2nd edition (2010), part D3.1, with its constants.
///
/// ```
/// use endwall::gas::{Condensation, condensation};
/// // Propane at 20 °C: 8.37 bar (from memory).
/// let Condensation::Above(pressure) = condensation("C3H8", 293.15) else { panic!("it condenses") };
/// assert!((pressure / 8.37e5 - 1.0).abs() < 5e-3);
/// assert_eq!(condensation("CH4", 293.15), Condensation::Never);
/// assert_eq!(condensation("heptane", 293.15), Condensation::Unknown);
/// ```
pub fn condensation(species: &str, temperature: f64) -> Condensation {
    if species == "H2O" && temperature < WATER_CRITICAL {
        return water_saturation_pressure(temperature).map_or(Condensation::Unknown, Condensation::Above);
    }
    let liquid = LIQUIDS.iter().find(|liquid| liquid.species == species);
    let never_from = match liquid {
        Some(liquid) => liquid.critical_temperature,
        None if species == "H2O" => WATER_CRITICAL,
        None if LIGHT.contains(&species) => LIGHT_FROM,
        None => return Condensation::Unknown,
    };
    if temperature >= never_from {
        return Condensation::Never;
    }
    match liquid {
        Some(liquid) if temperature >= liquid.melting => Condensation::Above(liquid.at(temperature)),
        _ => Condensation::Unknown,
    }
}

impl VapourPressure {
    /// Pa.
    fn at(&self, temperature: f64) -> f64 {
        let reduced = temperature / self.critical_temperature;
        let tau = 1.0 - reduced;
        let root = libm::sqrt(tau);
        let [a, b, c, d] = self.constants;
        let squared = tau * tau;
        let sum = a + b * root + c * root * tau + d * squared * squared;
        self.critical_pressure * libm::exp(tau * sum / reduced)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::gas::species::table;

    /// Normal boiling points (K), from memory, except for SF6 and CO2, which sublime.
    #[test]
    fn at_the_normal_boiling_point_the_pressure_is_one_atmosphere() {
        for (species, boiling) in [
            ("Ar", 87.3),
            ("Kr", 119.9),
            ("Xe", 165.1),
            ("CO", 81.6),
            ("N2", 77.35),
            ("O2", 90.19),
            ("N2O", 184.7),
            ("NO", 121.4),
            ("CF4", 145.1),
            ("CH4", 111.7),
            ("C2H4", 169.4),
            ("C2H6", 184.6),
            ("C3H8", 231.1),
            ("NH3", 239.8),
            ("NO2", 294.3),
            ("SO2", 263.1),
            ("H2O", 373.124),
        ] {
            let Condensation::Above(pressure) = condensation(species, boiling) else { panic!("{species}") };
            assert!((pressure / 101_325.0 - 1.0).abs() < 0.015, "{species} {pressure}");
        }
    }

    #[test]
    fn it_rises_to_the_critical_point_and_ends_there() {
        for liquid in &LIQUIDS {
            let mut before = 0.0;
            for step in 0..200 {
                let temperature = liquid.melting + (liquid.critical_temperature - liquid.melting) * f64::from(step) / 200.0;
                let Condensation::Above(now) = condensation(liquid.species, temperature) else {
                    panic!("{} {temperature}", liquid.species)
                };
                assert!(now > before && now < liquid.critical_pressure, "{} {temperature}", liquid.species);
                before = now;
            }
            assert!((liquid.at(liquid.critical_temperature) / liquid.critical_pressure - 1.0).abs() < 1e-12);
            assert_eq!(condensation(liquid.species, liquid.critical_temperature), Condensation::Never);
            assert_eq!(condensation(liquid.species, liquid.melting - 0.01), Condensation::Unknown);
        }
    }

    #[test]
    fn every_stable_species_of_the_table_has_an_answer_at_room_temperature() {
        for species in table::ALL {
            let atom_or_radical = ["H", "N", "O", "OH"].contains(&species.name);
            assert_eq!(condensation(species.name, 296.0) == Condensation::Unknown, atom_or_radical, "{}", species.name);
        }
        assert_eq!(condensation("H2O", 647.096), Condensation::Never);
        assert_eq!(condensation("H2O", 270.0), Condensation::Unknown);
        for outside in [f64::NAN, -1.0, 0.0] {
            for species in ["H2O", "CO2", "He", "air"] {
                assert_eq!(condensation(species, outside), Condensation::Unknown, "{species} {outside}");
            }
        }
    }
}
