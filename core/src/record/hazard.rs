//! What a reader must be told where a result could lead to a shot.

use alloc::format;
use alloc::string::String;

use super::flag::Flag;
use super::gas::{Component, GasRecord};
use super::optional::Driver;

/// Fuels that are no hydrocarbons.
const FUELS: [&str; 8] = ["H2", "D2", "HD", "CO", "NH3", "H", "D", "H2S"];
/// What a fuel burns with.
const OXIDISERS: [&str; 9] = ["O2", "O", "O3", "N2O", "NO2", "NO", "N2O4", "OH", "Air"];

/// The cautions of a text report, in the order in which they are printed.
pub(super) const CAUTIONS: [&str; 9] = [
    "A display is no permission to approach: vent, verify by two independent means, then open.",
    "A diaphragm that did not burst still holds back pressure; its fragments fly when it does. Nobody stands in line with the tube.",
    "Compressed gas is stored energy. Check recoil and anchors, and windows under vacuum as well as under pressure.",
    "Isolate low-pressure gauges before firing. Lock out before opening. Wear hearing protection.",
    "The tube and its end wall may be hot. The gas left behind may be toxic; vented driver gas can suffocate.",
    "Hydrogen and oxygen call for their own precautions, and a mixture that can burn may exceed every pressure printed here several times.",
    "The load on the end wall is applied suddenly: the response of the structure can be twice that of the same load at rest.",
    "Ratings are not checked in this report: compare every pressure, with its upper end, with the marked rating of each section.",
    "For screening only: local codes, site rules and a licensed engineer decide. No number here authorises a shot.",
];

/// The flag for a mixture that can burn, by itself or with a hydrogen driver.
pub(super) fn can_burn(gas: &GasRecord, driver: Option<&Driver>) -> Option<Flag> {
    let oxidiser = find(gas, |species| OXIDISERS.contains(&species))?;
    let fuel = find(gas, is_fuel);
    let driver_gas = driver.and_then(|driver| driver.gas.as_ref());
    let of_driver = driver_gas.and_then(|gas| find(gas, |species| matches!(species, "H2" | "D2" | "HD")));
    let fuel = match (fuel, of_driver) {
        (Some(species), _) => format!("it holds {species} and {oxidiser}"),
        (None, Some(species)) => format!("it holds {oxidiser} and the driver holds {species}"),
        (None, None) => return None,
    };
    let text = format!(
        "this mixture can burn: {fuel}. All pressures here, and every comparison with a rating, are for the unburnt gas; burning or detonation exceeds them several times"
    );
    Some(Flag::new("can-burn", text))
}

fn find(gas: &GasRecord, wanted: impl Fn(&str) -> bool) -> Option<&String> {
    let GasRecord::Mixture(components) = gas else { return None };
    let present = |component: &&Component| component.fraction.is_positive() && wanted(&component.species);
    components.iter().find(present).map(|component| &component.species)
}

/// Hydrocarbons and their relatives have carbon and hydrogen in their formula.
fn is_fuel(species: &str) -> bool {
    FUELS.contains(&species) || (species.starts_with('C') && species.contains('H'))
}
