//! How far a gas departs from an ideal gas: the second virial coefficient by corresponding states. Empirical: nothing here is proven.

use super::constant::molar_gas_constant;
use super::thermally_perfect::ThermallyPerfectGas;

/// Critical temperature (K), critical pressure (Pa) and acentric factor, from memory (as tabulated by B. E. Poling, J. M. Prausnitz, J. P. O'Connell, The
/// Properties of Gases and Liquids, 5th edition). Absent are atoms and radicals, helium, hydrogen and neon, whose coefficient at room temperature
/// is positive and small, and water, whose vapour departs more than the correlation says.
const CRITICAL: [(&str, f64, f64, f64); 17] = [
    ("Ar", 150.9, 4.90e6, 0.000),
    ("Kr", 209.4, 5.50e6, 0.000),
    ("Xe", 289.7, 5.84e6, 0.000),
    ("N2", 126.2, 3.40e6, 0.037),
    ("O2", 154.6, 5.04e6, 0.022),
    ("CO", 132.9, 3.50e6, 0.048),
    ("NO", 180.0, 6.48e6, 0.583),
    ("CO2", 304.1, 7.37e6, 0.225),
    ("N2O", 309.6, 7.25e6, 0.141),
    ("SO2", 430.8, 7.88e6, 0.245),
    ("CH4", 190.6, 4.60e6, 0.011),
    ("C2H2", 308.3, 6.14e6, 0.189),
    ("C2H4", 282.3, 5.04e6, 0.087),
    ("C2H6", 305.3, 4.87e6, 0.100),
    ("C3H8", 369.8, 4.25e6, 0.152),
    ("CF4", 227.5, 3.75e6, 0.179),
    ("SF6", 318.7, 3.76e6, 0.215),
];

/// Second virial coefficient B, m³/mol, of a species of the list at a temperature in K; `None` for others.
///
/// > B `p_c`/(R `T_c`) = 0.083 − 0.422 Tr^(−1.6) + ω(0.139 − 0.172 Tr^(−4.2)), Tr = T/`T_c`.
///
/// Good to about 5 cm³/mol for nonpolar gases above Tr = 0.7 (from memory). Source: the correlation of M. M. Abbott, in J. M. Smith and H. C. Van Ness,
/// Introduction to Chemical Engineering Thermodynamics, 3rd edition (1975), equations for the functions of K. S. Pitzer (from memory).
///
/// ```
/// use endwall::gas::second_virial_coefficient;
/// // CO2 at 300 K: −122 cm³/mol is the usual figure (from memory).
/// let carbon_dioxide = second_virial_coefficient("CO2", 300.0).unwrap();
/// assert!((carbon_dioxide * 1e6 + 122.0).abs() < 5.0);
/// ```
pub fn second_virial_coefficient(species: &str, temperature: f64) -> Option<f64> {
    let (_, critical_temperature, critical_pressure, acentric_factor) = CRITICAL.into_iter().find(|(name, ..)| *name == species)?;
    let reduced = temperature / critical_temperature;
    let simple = 0.083 - 0.422 * libm::pow(reduced, -1.6);
    let acentric = 0.139 - 0.172 * libm::pow(reduced, -4.2);
    Some(molar_gas_constant::<f64>() * critical_temperature / critical_pressure * (simple + acentric_factor * acentric))
}

/// B p/(R T) of a mixture, the relative departure of its molar volume from that of an ideal gas, with B = (Σ x √|B|)² of the species of the list, others
/// taken as ideal: a screening figure for nonpolar gases.
///
/// ```
/// use endwall::gas::species::table;
/// use endwall::gas::{Portion, ThermallyPerfectGas, departure_from_ideal};
/// let portions = [Portion { species: &table::SF6, fraction: "1".parse()? }];
/// let gas = ThermallyPerfectGas::new(&portions)?;
/// // SF6 at 0.5 bar departs by more than half a per cent.
/// assert!(departure_from_ideal(&gas, 295.0, 0.5e5) < -0.005);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn departure_from_ideal(gas: &ThermallyPerfectGas<'_>, temperature: f64, pressure: f64) -> f64 {
    let root: f64 = gas
        .portions()
        .iter()
        .filter_map(|portion| {
            let own = second_virial_coefficient(portion.species.name, temperature)?;
            // Above its Boyle temperature a species hardly departs.
            Some(portion.fraction.to_f64() * libm::sqrt((-own).max(0.0)))
        })
        .sum();
    -root * root * pressure / (molar_gas_constant::<f64>() * temperature)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn coefficients_are_the_usual_ones() {
        // cm³/mol near 300 K, rounded figures of J. H. Dymond and E. B. Smith, The Virial Coefficients of Pure Gases and Mixtures (1980), from memory.
        for (species, temperature, usual, within) in [
            ("Ar", 300.0, -15.5, 3.0),
            ("N2", 300.0, -4.2, 3.0),
            ("CH4", 300.0, -42.0, 3.0),
            ("SF6", 300.0, -275.0, 15.0),
            ("Xe", 300.0, -130.0, 8.0),
        ] {
            let found = second_virial_coefficient(species, temperature).unwrap() * 1e6;
            assert!((found - usual).abs() < within, "{species} {found}");
        }
        assert_eq!(second_virial_coefficient("He", 300.0), None);
    }
}
