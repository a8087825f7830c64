//! Dry and humid air as mixtures of species.

use super::constant::positive;
use super::error::{InputError, Parameter, Rule};
use super::species::table;
use super::thermally_perfect::Portion;
use crate::number::{Known, Rational};

/// n/10⁶, for a denominator that is not zero.
const fn millionths(n: u128) -> Rational {
    match Rational::ratio(n, 1_000_000) {
        Some(fraction) => fraction,
        None => Rational::ZERO,
    }
}

/// Dry air by mole: N2 78.084 %, O2 20.9476 %, Ar 0.9365 %, CO2 0.0319 %. Exact decimals that sum exactly to one.
///
/// Source: the composition of "Air" in B. J. `McBride`, M. J. Zehe, S. Gordon, NASA/TP-2002-211556 (2002). The CO2 of outdoor air is higher today
/// (0.042 % in 2024, from memory) and several times higher in a closed room; 0.1 % more CO2 in place of N2 changes the molar mass by 0.06 %.
///
/// ```
/// use endwall::gas::{DRY_AIR, ThermallyPerfectGas};
/// let air = ThermallyPerfectGas::new(&DRY_AIR)?;
/// // The same report prints 28.9651159 g/mol.
/// assert!((air.molar_mass().nearest() - 0.0289651159).abs() < 1e-10);
/// # Ok::<(), endwall::gas::InputError>(())
/// ```
pub static DRY_AIR: [Portion<'static>; 4] = [
    Portion { species: &table::N2, fraction: millionths(780_840) },
    Portion { species: &table::O2, fraction: millionths(209_476) },
    Portion { species: &table::AR, fraction: millionths(9_365) },
    Portion { species: &table::CO2, fraction: millionths(319) },
];

/// Between these temperatures the saturation equation holds, K: 0 °C and the critical point of water.
const SATURATION_RANGE: (f64, f64) = (273.15, 647.096);

/// n1 … n10 of the saturation equation (table 34 of the release).
const SATURATION: [f64; 10] = [
    0.116_705_214_527_67e4,
    -0.724_213_167_032_06e6,
    -0.170_738_469_400_92e2,
    0.120_208_247_024_70e5,
    -0.323_255_503_223_33e7,
    0.149_151_086_135_30e2,
    -0.482_326_573_615_91e4,
    0.405_113_405_420_57e6,
    -0.238_555_575_678_49,
    0.650_175_348_447_98e3,
];

/// Saturation pressure of pure water over liquid, Pa, at a temperature in K:
///
/// > p/MPa = (2C/(−B + √(B² − 4AC)))⁴, ϑ = T/K + n9/(T/K − n10), A = ϑ² + n1ϑ + n2, B = n3ϑ² + n4ϑ + n5, C = n6ϑ² + n7ϑ + n8.
///
/// Domain: 273.15 to 647.096 K; below it water freezes and another equation would be needed. Plain f64, not an enclosure: the equation describes
/// measurements, to about 0.1 % (from memory).
///
/// Source: IAPWS R7-97(2012), Industrial Formulation 1997, region 4, equations (29) and (30), coefficients of table 34 (from memory; the equation
/// reproduces the values for checking of table 35, 3536.58941 Pa at 300 K and two more, to all digits).
///
/// # Errors
/// [`InputError`] for a temperature outside the domain.
///
/// ```
/// use endwall::gas::water_saturation_pressure;
/// assert!((water_saturation_pressure(300.0)? - 3536.58941).abs() < 5e-6); // Pa
/// assert!(water_saturation_pressure(25.0).is_err()); // was 25 °C meant? It is 298.15 K
/// # Ok::<(), endwall::gas::InputError>(())
/// ```
pub fn water_saturation_pressure(temperature: f64) -> Result<f64, InputError> {
    let (low, high) = SATURATION_RANGE;
    if !(low..=high).contains(&temperature) {
        return Err(InputError { parameter: Parameter::Temperature, value: temperature, rule: Rule::Between(low, high) });
    }
    let [n1, n2, n3, n4, n5, n6, n7, n8, n9, n10] = SATURATION;
    let theta = temperature + n9 / (temperature - n10);
    let a = (theta + n1) * theta + n2;
    let b = (n3 * theta + n4) * theta + n5;
    let c = (n6 * theta + n7) * theta + n8;
    let root = 2.0 * c / (libm::sqrt(b * b - 4.0 * a * c) - b);
    let square = root * root;
    Ok(1e6 * square * square)
}

/// The mole fraction of water is rounded to a multiple of 2⁻⁶⁰, so that 128-bit integers hold the products with the decimals of dry air.
const WATER_STEPS: f64 = (1u64 << 60) as f64;

/// Humid air: [`DRY_AIR`] and water vapour, from the temperature (K), the absolute pressure (Pa) and the relative humidity (0 to 1) **where the
/// humidity was measured**, which is usually the room and not the fill. The mixture keeps its fractions when it is compressed or expanded, as long as
/// no water condenses.
///
/// > x = φ `p_sat`(T)/p, all other fractions times 1 − x.
///
/// The fraction of water, a double, is taken as the exact number that it is (rounded to a multiple of 2⁻⁶⁰), and the others are scaled exactly, so
/// that the sum is exactly one. Model: ideal gas, [`water_saturation_pressure`]. That air raises the vapour pressure of water is left out: at room
/// temperature and atmospheric pressure x is 0.4 % of itself too low (enhancement factor 1.004; A. Picard, R. S. Davis, M. Gläser, K. Fujii,
/// Metrologia 45 (2008) 149, from memory), much less than a hygrometer errs.
///
/// # Errors
/// [`InputError`] for a temperature outside 273.15 to 647.096 K, a relative humidity outside 0 to 1 (45 % is 0.45), and a pressure that is not greater
/// than the partial pressure of the water.
///
/// ```
/// use endwall::gas::{ThermallyPerfectGas, humid_air};
/// let room = humid_air(295.15, 101_325.0, 0.5)?;
/// let water = room[4].fraction.to_f64();
/// assert!((water - 0.01306).abs() < 1e-5); // half of 2646 Pa in 101325 Pa
/// // It makes the air lighter, by 0.5 %.
/// let air = ThermallyPerfectGas::new(&room)?;
/// assert!((air.molar_mass().nearest() - 0.028822).abs() < 1e-6);
/// assert!(humid_air(295.15, 101_325.0, 50.0).is_err());
/// # Ok::<(), endwall::gas::InputError>(())
/// ```
pub fn humid_air(temperature: f64, pressure: f64, relative_humidity: f64) -> Result<[Portion<'static>; 5], InputError> {
    let refuse = |rule| InputError { parameter: Parameter::RelativeHumidity, value: relative_humidity, rule };
    if !relative_humidity.is_finite() {
        return Err(refuse(Rule::Finite));
    }
    if !(0.0..=1.0).contains(&relative_humidity) {
        return Err(refuse(Rule::Between(0.0, 1.0)));
    }
    positive(Parameter::Pressure, Known::from(pressure))?;
    let vapour = relative_humidity * water_saturation_pressure(temperature)?;
    if vapour >= pressure {
        return Err(InputError { parameter: Parameter::Pressure, value: pressure, rule: Rule::Above(vapour) });
    }
    let water = Rational::from(libm::rint(vapour / pressure * WATER_STEPS) / WATER_STEPS);
    let dry = Rational::ONE.checked_sub(water).ok_or(refuse(Rule::Digits))?;
    let mut portions = [Portion { species: &table::H2O, fraction: water }; 5];
    for (place, portion) in portions.iter_mut().zip(&DRY_AIR) {
        *place = Portion { fraction: portion.fraction.checked_mul(dry).ok_or(refuse(Rule::Digits))?, ..*portion };
    }
    Ok(portions)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::gas::ThermallyPerfectGas;

    #[test]
    fn saturation_reproduces_the_values_for_checking() {
        // IAPWS R7-97(2012), table 35: nine digits.
        for (temperature, megapascals) in [(300.0, 0.353_658_941e-2), (500.0, 0.263_889_776e1), (600.0, 0.123_443_146e2)] {
            let computed = water_saturation_pressure(temperature).unwrap() / 1e6;
            assert!((computed / megapascals - 1.0).abs() < 2e-9, "{temperature} {computed}");
        }
    }

    #[test]
    fn saturation_meets_the_fixed_points_of_water() {
        // Triple point 273.16 K, 611.657 Pa (Guildner, Johnson, Jones 1976); normal boiling point on ITS-90 373.124 K; critical point 22.064 MPa
        // (IAPWS); all from memory. To the accuracy of the equation.
        for (temperature, pressure, tolerance) in [(273.16, 611.657, 1e-4), (373.124, 101_325.0, 1e-4), (647.096, 22.064e6, 1e-5)] {
            let computed = water_saturation_pressure(temperature).unwrap();
            assert!((computed / pressure - 1.0).abs() < tolerance, "{temperature} {computed}");
        }
        let mut before = 0.0;
        for step in 0..=1000 {
            let now = water_saturation_pressure(273.15 + 373.946 * f64::from(step) / 1000.0).unwrap();
            assert!(now > before, "{step}");
            before = now;
        }
        for outside in [273.149, 647.097, f64::NAN, f64::INFINITY, -1.0] {
            assert_eq!(water_saturation_pressure(outside).unwrap_err().parameter, Parameter::Temperature);
        }
    }

    #[test]
    fn fractions_sum_exactly_to_one() {
        let sum =
            |portions: &[Portion<'_>]| portions.iter().try_fold(Rational::ZERO, |sum, portion| sum.checked_add(portion.fraction)).unwrap();
        assert_eq!(sum(&DRY_AIR), Rational::ONE);
        for temperature in [273.15, 280.0, 295.15, 310.0, 373.0, 600.0] {
            for pressure in [1e-3, 700.0, 50_000.0, 101_325.0, 1e8, 1e60] {
                for humidity in [0.0, 1e-30, 1e-9, 0.1, 0.37, 1.0] {
                    let vapour = humidity * water_saturation_pressure(temperature).unwrap();
                    match humid_air(temperature, pressure, humidity) {
                        Ok(portions) => {
                            assert_eq!(sum(&portions), Rational::ONE);
                            assert!((portions[4].fraction.to_f64() - vapour / pressure).abs() < 1e-16);
                            assert!(ThermallyPerfectGas::new(&portions).is_ok());
                        }
                        Err(error) => {
                            assert_eq!((error.parameter, error.rule), (Parameter::Pressure, Rule::Above(vapour)));
                            assert!(vapour >= pressure);
                        }
                    }
                }
            }
        }
    }

    #[test]
    fn without_water_it_is_dry_air() {
        let dry = humid_air(295.0, 1e5, 0.0).unwrap();
        assert_eq!(dry[..4], DRY_AIR);
        assert!(dry[4].fraction.is_zero());
    }

    #[test]
    fn what_is_refused_is_named() {
        let parameter = |t, p, phi| humid_air(t, p, phi).unwrap_err().parameter;
        assert_eq!(parameter(22.0, 1e5, 0.5), Parameter::Temperature);
        assert_eq!(parameter(295.0, -1e5, 0.5), Parameter::Pressure);
        assert_eq!(parameter(295.0, f64::NAN, 0.5), Parameter::Pressure);
        assert_eq!(parameter(295.0, 1e5, 1.01), Parameter::RelativeHumidity);
        assert_eq!(parameter(295.0, 1e5, -0.01), Parameter::RelativeHumidity);
        assert_eq!(parameter(295.0, 1e5, f64::NAN), Parameter::RelativeHumidity);
        assert_eq!(humid_air(295.0, 1e5, 50.0).unwrap_err().rule, Rule::Between(0.0, 1.0));
    }
}
