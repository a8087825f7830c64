//! Mixtures of gases of constant heat capacity by mole fraction.

use super::constant::{Gas, HeatCapacityRatio};
use super::error::{InputError, Parameter, Rule};
use crate::number::{Enclosure, Known, Rational, Semifield};

/// One component of a mixture.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Component {
    /// The pure gas.
    pub gas: Gas,
    /// Its mole fraction.
    pub fraction: Known,
}

/// The mixture of ideal gases, each of constant heat capacity, with mole fractions that sum exactly to one.
///
/// Molar heat capacities add by mole fraction: with γ/(γ−1) = `c_p`/R and 1/(γ−1) = `c_v`/R,
///
/// > γ − 1 = 1/Σ xᵢ/(γᵢ − 1), W = Σ xᵢ Wᵢ.
///
/// Exact while 128-bit integers hold the sums; else, and for tolerances, an enclosure.
/// Source: additivity of enthalpy in an ideal-gas mixture (e.g. NASA RP-1311, part I, section 2.1, from memory).
///
/// # Errors
/// [`InputError`] for a fraction that is negative or not finite, or for a sum that is not one.
///
/// ```
/// use endwall::gas::{Component, Gas, HeatCapacityRatio, mixture};
/// use endwall::number::{Known, Rational};
/// let exact = |text: &str| Known::from(text.parse::<Rational>().unwrap());
/// let argon = Gas::new(HeatCapacityRatio::ratio(5, 3)?, exact("0.039948"))?;
/// let nitrogen = Gas::new(HeatCapacityRatio::ratio(7, 5)?, exact("0.0280134"))?;
/// let half = exact("0.5");
/// let gas = mixture(&[Component { gas: argon, fraction: half }, Component { gas: nitrogen, fraction: half }])?;
/// assert_eq!(gas.heat_capacity_ratio(), HeatCapacityRatio::ratio(3, 2)?); // c_v/R = (3/2 + 5/2)/2 = 2
/// # Ok::<(), endwall::gas::InputError>(())
/// ```
pub fn mixture(components: &[Component]) -> Result<Gas, InputError> {
    let refuse = |value, rule| InputError { parameter: Parameter::MoleFraction, value, rule };
    for component in components {
        let bounds = component.fraction.enclosure();
        if !bounds.is_proven() {
            return Err(refuse(component.fraction.nominal(), Rule::Finite));
        }
        if bounds.low() < 0.0 || bounds.high() > 1.0 {
            return Err(refuse(component.fraction.nominal(), Rule::Between(0.0, 1.0)));
        }
    }
    if let Some((sum, capacity, mass)) = exact_sums(components) {
        if sum != Rational::ONE {
            return Err(refuse(components.first().map_or(0.0, |c| c.fraction.nominal()), Rule::SumToOne(sum.to_f64())));
        }
        if let Some(ratio) = Rational::ONE.checked_div(capacity).and_then(|excess| excess.checked_add(Rational::ONE)) {
            return Gas::new(HeatCapacityRatio::new(ratio)?, mass);
        }
    }
    let zero = Enclosure::whole(0);
    let sum_of = |term: fn(&Component) -> Enclosure| {
        components.iter().fold(zero, |sum, component| sum + component.fraction.enclosure() * term(component))
    };
    let sum = sum_of(|_| Enclosure::whole(1));
    if !sum.contains(1.0) {
        return Err(refuse(components.first().map_or(0.0, |c| c.fraction.nominal()), Rule::SumToOne(sum.middle())));
    }
    let capacity = sum_of(|component| Enclosure::whole(1) / component.gas.heat_capacity_ratio().excess().enclosure());
    let mass = sum_of(|component| component.gas.molar_mass().enclosure());
    Gas::new(HeatCapacityRatio::new(Enclosure::whole(1) + Enclosure::whole(1) / capacity)?, mass)
}

/// The sums of x, x/(γ−1) and x·W, where all inputs are exact and the sums fit.
fn exact_sums(components: &[Component]) -> Option<(Rational, Rational, Rational)> {
    components.iter().try_fold((Rational::ZERO, Rational::ZERO, Rational::ZERO), |(sum, capacity, mass), component| {
        let x = component.fraction.exact()?;
        let excess = component.gas.heat_capacity_ratio().excess().exact()?;
        let w = component.gas.molar_mass().exact()?;
        Some((sum.checked_add(x)?, capacity.checked_add(x.checked_div(excess)?)?, mass.checked_add(x.checked_mul(w)?)?))
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn exact(text: &str) -> Known {
        Known::from(text.parse::<Rational>().unwrap())
    }

    fn helium_in_argon(helium: Known, argon: Known) -> Result<Gas, InputError> {
        let gamma = HeatCapacityRatio::ratio(5, 3)?;
        mixture(&[
            Component { gas: Gas::new(gamma, exact("0.004002602"))?, fraction: helium },
            Component { gas: Gas::new(gamma, exact("0.039948"))?, fraction: argon },
        ])
    }

    #[test]
    fn monatomic_gases_keep_their_ratio() {
        let gas = helium_in_argon(exact("0.1"), exact("0.9")).unwrap();
        assert_eq!(gas.heat_capacity_ratio(), HeatCapacityRatio::ratio(5, 3).unwrap());
        assert_eq!(gas.molar_mass(), exact("0.0363534602"));
    }

    #[test]
    fn fractions_must_sum_to_one() {
        let error = helium_in_argon(exact("0.1"), exact("0.8")).unwrap_err();
        assert_eq!((error.parameter, error.rule), (Parameter::MoleFraction, Rule::SumToOne(0.9)));
        assert!(helium_in_argon(exact("-0.1"), exact("1.1")).is_err());
    }

    #[test]
    fn tolerances_give_an_enclosure_of_every_mixture() {
        let helium = Known::Within(Enclosure::new(0.09, 0.11).unwrap());
        let argon = Known::Within(Enclosure::new(0.89, 0.91).unwrap());
        let gas = helium_in_argon(helium, argon).unwrap();
        assert!(gas.molar_mass().enclosure().contains(0.036_353_460_2));
        assert!(gas.heat_capacity_ratio().enclosure().contains(5.0 / 3.0));
    }
}
