//! Whether a past shot is like the plan: gas, driver gas, tube.

use super::gas::GasRecord;
use super::optional::Tube;
use super::quantity::Quantity;

/// Mole fractions, and heat capacity ratio and molar mass relatively, may differ by this: it changes the speed of sound by some tenths of a per cent at most.
const GAS: f64 = 0.002;
/// Lengths and bores may differ by this relatively: they were measured on another day.
const LENGTH: f64 = 0.01;

fn near(a: &Quantity, b: &Quantity, relative: f64) -> bool {
    (a.value().to_f64() / b.value().to_f64() - 1.0).abs() <= relative
}

/// Whether two gases are the same to a shock. The same gas in other words, air and its components, is taken as another: the flag asks the reader to look.
pub(super) fn gas(a: &GasRecord, b: &GasRecord) -> bool {
    match (a, b) {
        (
            GasRecord::Ratio { heat_capacity_ratio, molar_mass },
            GasRecord::Ratio { heat_capacity_ratio: other_ratio, molar_mass: other_mass },
        ) => near(heat_capacity_ratio, other_ratio, GAS) && near(molar_mass, other_mass, GAS),
        (GasRecord::Mixture(first), GasRecord::Mixture(second)) => {
            let fraction = |of: &[super::Component], species: &str| -> f64 {
                of.iter().filter(|component| component.species == species).map(|component| component.fraction.to_f64()).sum()
            };
            let both = || first.iter().chain(second).map(|component| component.species.as_str());
            // A little more than the bound, so that fractions typed at its very distance are within.
            both().all(|species| (fraction(first, species) - fraction(second, species)).abs() <= GAS * (1.0 + 1e-9))
        }
        _ => false,
    }
}

/// The first length that differs, where both tubes state it.
pub(super) fn other_length(shot: &Tube, plan: &Tube) -> Option<&'static str> {
    let pairs = [
        ("tube.driven_length", &shot.driven_length, &plan.driven_length),
        ("tube.driver_length", &shot.driver_length, &plan.driver_length),
        ("tube.driven_bore", &shot.driven_bore, &plan.driven_bore),
        ("tube.driver_bore", &shot.driver_bore, &plan.driver_bore),
    ];
    let differs = |a: &Option<Quantity>, b: &Option<Quantity>| a.as_ref().zip(b.as_ref()).is_some_and(|(a, b)| !near(a, b, LENGTH));
    pairs.into_iter().find(|(_, a, b)| differs(a, b)).map(|(path, ..)| path)
}
