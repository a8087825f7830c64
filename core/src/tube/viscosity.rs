//! Viscosity of dilute gases by kinetic theory. Empirical in its parameters, so nothing here is proven.

use crate::gas::Portion;
use core::fmt;

/// Molar gas constant, J/(mol K).
const GAS_CONSTANT: f64 = 8.314_462_618_153_24;
/// Avogadro's number, 1/mol.
const AVOGADRO: f64 = 6.022_140_76e23;
/// Reduced temperatures for which the collision integral is stated.
const REDUCED: (f64, f64) = (0.3, 100.0);

/// Parameters of the Lennard-Jones potential.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct LennardJones {
    /// Collision diameter σ, m.
    pub diameter: f64,
    /// Depth of the well over Boltzmann's constant, ε/k, K.
    pub well_depth: f64,
}

/// σ in 10⁻¹⁰ m and ε/k in K, from memory: R. A. Svehla, NASA TR R-132 (1962), as reprinted in handbooks of gas properties.
const TABLE: [(&str, f64, f64); 14] = [
    ("He", 2.551, 10.22),
    ("Ne", 2.820, 32.8),
    ("Ar", 3.542, 93.3),
    ("Kr", 3.655, 178.9),
    ("Xe", 4.047, 231.0),
    ("H2", 2.827, 59.7),
    ("N2", 3.798, 71.4),
    ("O2", 3.467, 106.7),
    ("CO", 3.690, 91.7),
    ("CO2", 3.941, 195.2),
    ("CH4", 3.758, 148.6),
    ("H2O", 2.641, 809.1),
    ("N2O", 3.828, 232.4),
    ("SF6", 5.128, 222.1),
];

/// The parameters of a species by its formula; `None` for one that is not listed (He Ne Ar Kr Xe H2 N2 O2 CO CO2 CH4 H2O N2O SF6 are).
///
/// From memory, see [`LennardJones::viscosity`] for how well they do.
pub fn lennard_jones(species: &str) -> Option<LennardJones> {
    let (_, diameter, well_depth) = TABLE.iter().find(|(name, ..)| *name == species)?;
    Some(LennardJones { diameter: diameter * 1e-10, well_depth: *well_depth })
}

/// Why a viscosity is not given.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum ViscosityError<'a> {
    /// No parameters are known for this species.
    Species(&'a str),
    /// The temperature lies outside the collision integral; nothing is extrapolated.
    Temperature {
        /// The temperature, K.
        value: f64,
        /// From this temperature, K.
        low: f64,
        /// To this temperature, K.
        high: f64,
    },
    /// The mixture has no component, or a fraction below zero.
    Fractions,
}

impl fmt::Display for ViscosityError<'_> {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Species(name) => write!(f, "no viscosity is known for {name}: give its Lennard-Jones parameters"),
            Self::Temperature { value, low, high } => {
                write!(f, "temperature {value} K lies outside the collision integral, {low} K to {high} K, and is not extrapolated")
            }
            Self::Fractions => write!(f, "a mixture needs mole fractions that are not negative, one of them positive"),
        }
    }
}

impl core::error::Error for ViscosityError<'_> {}

/// The reduced collision integral Ω(2,2)* of the Lennard-Jones potential, dimensionless, at a reduced temperature T* = kT/ε from 0.3 to 100:
///
/// > 1.16145 T*^(−0.14874) + 0.52487 e^(−0.77320 T*) + 2.16178 e^(−2.43787 T*) − 6.435e-4 T*^0.14874 sin(18.0323 T*^(−0.76830) − 7.27371)
///
/// Fitted to 0.1 %. Source: P. D. Neufeld, A. R. Janzen, R. A. Aziz, J. Chem. Phys. 57 (1972) 1100 (from memory; checked against another fit).
///
/// ```
/// // Tables of the integral have 1.593 at T* = 1 and 0.8244 at 10.
/// assert!((endwall::tube::collision_integral(1.0) - 1.593).abs() < 2e-3);
/// assert!((endwall::tube::collision_integral(10.0) - 0.8244).abs() < 1e-3);
/// ```
pub fn collision_integral(reduced_temperature: f64) -> f64 {
    let t = reduced_temperature;
    let power = libm::pow(t, 0.148_74);
    let ripple = 6.435e-4 * power * libm::sin(18.0323 * libm::pow(t, -0.768_30) - 7.273_71);
    1.161_45 / power + 0.524_87 * libm::exp(-0.773_20 * t) + 2.161_78 * libm::exp(-2.437_87 * t) - ripple
}

impl LennardJones {
    /// Viscosity of a dilute gas, Pa·s, at a temperature T (K), for a molar mass W (kg/mol): Chapman–Enskog theory in its first approximation,
    ///
    /// > μ = (5/16)·√(π m k T)/(π σ² Ω(2,2)*(kT/ε)), m = W/`N_A`.
    ///
    /// Against reference correlations the listed parameters are within 3 % at 300 K and 7 % from 250 K to 1000 K (the older data to which they were
    /// fitted are low at high temperatures), water within 11 % (its molecules are polar, which this potential ignores). Plain f64.
    ///
    /// Source: S. Chapman and T. G. Cowling, The Mathematical Theory of Non-uniform Gases (from memory).
    ///
    /// # Errors
    /// [`ViscosityError::Temperature`] unless T* lies between 0.3 and 100 (for helium up to 1022 K).
    ///
    /// ```
    /// use endwall::tube::lennard_jones;
    /// let argon = lennard_jones("Ar").unwrap().viscosity(0.039948, 300.0)?;
    /// assert!((argon - 22.7e-6).abs() < 0.3e-6); // Pa s
    /// # Ok::<(), endwall::tube::ViscosityError>(())
    /// ```
    pub fn viscosity(self, molar_mass: f64, temperature: f64) -> Result<f64, ViscosityError<'static>> {
        let reduced = temperature / self.well_depth;
        if !(reduced >= REDUCED.0 && reduced <= REDUCED.1) {
            let (low, high) = (REDUCED.0 * self.well_depth, REDUCED.1 * self.well_depth);
            return Err(ViscosityError::Temperature { value: temperature, low, high });
        }
        // m·k·T = (W/N_A)(R/N_A)T.
        let momentum = libm::sqrt(core::f64::consts::PI * molar_mass * GAS_CONSTANT * temperature) / AVOGADRO;
        Ok(5.0 / 16.0 * momentum / (core::f64::consts::PI * self.diameter * self.diameter * collision_integral(reduced)))
    }
}

/// Wilke's factor φ of species i in species j: [1 + √(μi/μj)(Wj/Wi)^(1/4)]²/√(8(1 + Wi/Wj)), from viscosities and molar masses.
///
/// Source: C. R. Wilke, J. Chem. Phys. 18 (1950) 517, equation 14 (from memory).
///
/// ```
/// assert!((endwall::tube::wilke((1.8e-5, 0.028), (1.8e-5, 0.028)) - 1.0).abs() < 1e-15);
/// ```
pub fn wilke((viscosity_i, mass_i): (f64, f64), (viscosity_j, mass_j): (f64, f64)) -> f64 {
    let sum = 1.0 + libm::sqrt(viscosity_i / viscosity_j * libm::sqrt(mass_j / mass_i));
    sum * sum / libm::sqrt(8.0 * (1.0 + mass_i / mass_j))
}

/// Viscosity of a mixture of listed species, Pa·s, at a temperature in K: μ = Σ xi μi/Σ xj φij with [`wilke`]'s factors.
///
/// The rule is good to a few per cent, less for mixtures of hydrogen or helium with heavy gases.
///
/// # Errors
/// [`ViscosityError`] for a species that is not listed, a temperature outside its range, or fractions that make no mixture.
///
/// ```
/// use endwall::gas::Portion;
/// use endwall::gas::species::table;
/// use endwall::tube::mixture_viscosity;
/// let part = |species, fraction: &str| Portion { species, fraction: fraction.parse().unwrap() };
/// let air = [part(&table::N2, "0.78"), part(&table::O2, "0.21"), part(&table::AR, "0.01")];
/// assert!((mixture_viscosity(&air, 300.0)? - 18.5e-6).abs() < 0.4e-6); // Pa s
/// # Ok::<(), endwall::tube::ViscosityError>(())
/// ```
pub fn mixture_viscosity<'a>(portions: &[Portion<'a>], temperature: f64) -> Result<f64, ViscosityError<'a>> {
    let pure = |portion: &Portion<'a>| {
        let name = portion.species.name;
        let parameters = lennard_jones(name).ok_or(ViscosityError::Species(name))?;
        let mass = portion.species.molar_mass.to_f64();
        Ok((parameters.viscosity(mass, temperature)?, mass))
    };
    let mut total = 0.0;
    for portion in portions {
        let fraction = portion.fraction.to_f64();
        if !(fraction >= 0.0 && fraction.is_finite()) {
            return Err(ViscosityError::Fractions);
        }
        if fraction == 0.0 {
            continue;
        }
        let own = pure(portion)?;
        let mut shared = 0.0;
        for other in portions.iter().filter(|other| other.fraction.to_f64() > 0.0) {
            shared += other.fraction.to_f64() * wilke(own, pure(other)?);
        }
        total += fraction * own.0 / shared;
    }
    if total > 0.0 { Ok(total) } else { Err(ViscosityError::Fractions) }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::gas::species::table;

    fn part<'a>(species: &'a crate::gas::species::Species<'a>, fraction: f64) -> Portion<'a> {
        Portion { species, fraction: fraction.into() }
    }

    #[test]
    fn a_mixture_of_one_gas_with_itself_is_that_gas() {
        let alone = lennard_jones("N2").unwrap().viscosity(table::N2.molar_mass.to_f64(), 400.0).unwrap();
        let halves = mixture_viscosity(&[part(&table::N2, 0.5), part(&table::N2, 0.5)], 400.0).unwrap();
        assert!((halves / alone - 1.0).abs() < 1e-14);
        // A component of no amount changes nothing, whatever it is.
        let with_none = mixture_viscosity(&[part(&table::N2, 1.0), part(&table::C2H4, 0.0)], 400.0).unwrap();
        assert_eq!(with_none, mixture_viscosity(&[part(&table::N2, 1.0)], 400.0).unwrap());
    }

    /// By algebra Wilke's factors satisfy φij/φji = (μi/μj)(Wj/Wi).
    #[test]
    fn factors_of_a_pair_belong_together() {
        for (one, other) in [((2.0e-5, 0.004), (2.3e-5, 0.040)), ((0.9e-5, 0.002), (1.8e-5, 0.028))] {
            let expected = one.0 / other.0 * other.1 / one.1;
            assert!((wilke(one, other) / wilke(other, one) / expected - 1.0).abs() < 1e-14);
        }
        // For equal molar masses and viscosities in the ratio 1 to 4: (1 + 1/2)²/4.
        assert!((wilke((1.0, 1.0), (4.0, 1.0)) - 0.5625).abs() < 1e-15);
    }

    #[test]
    fn what_is_not_known_is_refused() {
        assert_eq!(mixture_viscosity(&[part(&table::C2H4, 1.0)], 300.0), Err(ViscosityError::Species("C2H4")));
        assert_eq!(mixture_viscosity(&[], 300.0), Err(ViscosityError::Fractions));
        assert_eq!(mixture_viscosity(&[part(&table::N2, -1.0)], 300.0), Err(ViscosityError::Fractions));
        for temperature in [f64::NAN, 3.0, 1100.0, f64::INFINITY] {
            let refused = mixture_viscosity(&[part(&table::HE, 1.0)], temperature);
            assert!(matches!(refused, Err(ViscosityError::Temperature { high, .. }) if (high - 1022.0).abs() < 1e-9));
        }
    }
}
