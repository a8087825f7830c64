//! What a reader must be told where a result could lead to a shot.

use alloc::format;
use alloc::string::String;

use super::flag::Flag;
use super::gas::{Component, GasRecord};
use super::optional::Driver;
use super::species::OwnSpecies;

/// Fuels that are no hydrocarbons.
const FUELS: [&str; 8] = ["H2", "D2", "HD", "CO", "NH3", "H", "D", "H2S"];
/// What a fuel burns with.
const OXIDISERS: [&str; 9] = ["O2", "O", "O3", "N2O", "NO2", "NO", "N2O4", "OH", super::driven::AIR];

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

/// The flag for a mixture that can burn: the test gas, the driver gas, or both together. What a species of the record's own can do is not known.
pub(super) fn can_burn(gas: &GasRecord, own: &[OwnSpecies], driver: Option<&Driver>) -> Option<Flag> {
    let why = reason(gas, own).or_else(|| with_driver(gas, own, driver?.gas.as_ref()?))?;
    let text = format!(
        "{why}. All pressures here, and every comparison with a rating, are for the unburnt gas; burning or detonation exceeds them several times"
    );
    Some(Flag::new("can-burn", text))
}

/// Why the mixture burns by itself; `None` where it does not.
pub(super) fn mixture_can_burn(gas: &GasRecord, own: &[OwnSpecies]) -> Option<String> {
    reason(gas, own)
}

fn reason(gas: &GasRecord, own: &[OwnSpecies]) -> Option<String> {
    let oxidiser = find(gas, is_oxidiser)?;
    match (find(gas, is_fuel), find(gas, |species| is_own(own, species))) {
        (Some(species), _) => Some(format!("this mixture can burn: it holds {species} and {oxidiser}")),
        (None, Some(species)) => Some(format!("this mixture can burn if {species} is a fuel: it holds {oxidiser}")),
        (None, None) => None,
    }
}

/// Why the driver gas burns by itself, or with the test gas.
fn with_driver(gas: &GasRecord, own: &[OwnSpecies], driver: &GasRecord) -> Option<String> {
    if let (Some(fuel), Some(oxidiser)) = (find(driver, is_fuel), find(driver, is_oxidiser)) {
        return Some(format!("the driver gas can burn by itself: it holds {fuel} and {oxidiser}"));
    }
    if let (Some(oxidiser), Some(fuel)) = (find(gas, is_oxidiser), find(driver, is_fuel)) {
        return Some(format!("this mixture can burn: it holds {oxidiser} and the driver holds {fuel}"));
    }
    let oxidiser = find(driver, is_oxidiser)?;
    match (find(gas, is_fuel), find(gas, |species| is_own(own, species))) {
        (Some(fuel), _) => Some(format!("this mixture can burn: it holds {fuel} and the driver holds {oxidiser}")),
        (None, Some(species)) => Some(format!("this mixture can burn if {species} is a fuel: the driver holds {oxidiser}")),
        (None, None) => None,
    }
}

fn is_own(own: &[OwnSpecies], species: &str) -> bool {
    own.iter().any(|own| own.name == species)
}

fn find(gas: &GasRecord, wanted: impl Fn(&str) -> bool) -> Option<&String> {
    let GasRecord::Mixture(components) = gas else { return None };
    let present = |component: &&Component| component.fraction.is_positive() && wanted(&component.species);
    components.iter().find(present).map(|component| &component.species)
}

pub(super) fn is_oxidiser(species: &str) -> bool {
    OXIDISERS.contains(&species)
}

/// Hydrocarbons and their relatives have carbon and hydrogen in their formula.
pub(super) fn is_fuel(species: &str) -> bool {
    FUELS.contains(&species) || (species.starts_with('C') && species.contains('H'))
}

#[cfg(test)]
mod tests {
    use crate::record::Shot;

    fn caution(gas: &str, rest: &str) -> Option<alloc::string::String> {
        let file = alloc::format!(
            r#"{{ "record": "shot/1", "gas": {gas}, "heat_capacity": "equilibrium", {rest}
            "fill": {{ "pressure": "10 kPa", "temperature": "295 K" }}, "shock_speed": "900 m/s" }}"#
        );
        let shot = Shot::read(file.as_bytes()).unwrap_or_else(|error| panic!("{error}"));
        shot.flags.first().filter(|flag| flag.code == "can-burn").map(|flag| flag.text.clone())
    }

    const OWN: &str = r#""species": { "heptane": { "molar_mass": "100.2 g/mol", "shape": "other",
        "ranges": [ { "from": "250 K", "to": "3000 K", "heat_capacity": [0, 0, 20, 0, 0, 0, 0], "enthalpy": 0 } ] } },"#;

    #[test]
    fn what_can_burn_is_said_first() {
        for (gas, rest, said) in [
            (r#"{ "CH4": "0.5 %", "O2": "1 %", "Ar": "balance" }"#, "", "this mixture can burn: it holds CH4 and O2"),
            (r#"{ "CO": "1 %", "air": "balance" }"#, "", "it holds CO and air"),
            (r#"{ "NH3": "1 %", "N2O": "1 %", "Ar": "balance" }"#, "", "it holds NH3 and N2O"),
            (r#"{ "air": "balance" }"#, r#""driver": { "gas": { "H2": "balance" } },"#, "it holds air and the driver holds H2"),
            (r#"{ "air": "balance" }"#, r#""driver": { "gas": { "CH4": "balance" } },"#, "it holds air and the driver holds CH4"),
            (
                r#"{ "H2": "50 %", "N2": "balance" }"#,
                r#""driver": { "gas": { "O2": "20 %", "He": "balance" } },"#,
                "it holds H2 and the driver holds O2",
            ),
            (
                r#"{ "Ar": "balance" }"#,
                r#""driver": { "gas": { "H2": "20 %", "O2": "10 %", "He": "balance" } },"#,
                "the driver gas can burn by itself: it holds H2 and O2",
            ),
            (r#"{ "heptane": "1 %", "air": "balance" }"#, OWN, "can burn if heptane is a fuel: it holds air"),
        ] {
            let text = caution(gas, rest).expect(gas);
            assert!(text.contains(said) && text.contains("are for the unburnt gas"), "{text}");
        }
        for (gas, rest) in [
            (r#"{ "air": "balance" }"#, ""),
            (r#"{ "CH4": "1 %", "Ar": "balance" }"#, ""),
            (r#"{ "CO2": "10 %", "O2": "balance" }"#, ""),
            (r#"{ "CH4": "0 %", "O2": "1 %", "Ar": "balance" }"#, ""),
            (r#"{ "heptane": "1 %", "Ar": "balance" }"#, OWN),
            (r#"{ "CH4": "1 %", "Ar": "balance" }"#, r#""driver": { "gas": { "H2": "balance" } },"#),
        ] {
            assert_eq!(caution(gas, rest), None, "{gas}");
        }
    }
}
