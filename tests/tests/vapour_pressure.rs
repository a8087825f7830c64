//! Vapour pressures against property libraries. Sources and tolerances stand in the file in `data/`.

use endwall::gas::species::table;
use endwall::gas::{Condensation, condensation};
use endwall_tests::data;
use endwall_tests::tolerances::{CRITICAL_TEMPERATURE, VAPOUR_PRESSURE, VAPOUR_PRESSURE_COLD};

#[test]
fn vapour_pressures_are_those_of_reference_equations() {
    let mut seen = std::collections::BTreeSet::new();
    let mut worst = (0.0_f64, String::new());
    for row in data::vapour_pressure_library().rows() {
        let (species, temperature, listed) = (row.text("species"), row.f64("temperature"), row.f64("value"));
        if row.text("description") == "critical temperature" {
            assert_eq!(condensation(species, temperature + CRITICAL_TEMPERATURE), Condensation::Never, "{species}");
            assert!(matches!(condensation(species, temperature - CRITICAL_TEMPERATURE), Condensation::Above(_)), "{species}");
            continue;
        }
        let Condensation::Above(pressure) = condensation(species, temperature) else {
            panic!("{species} at {temperature} K: {:?}", condensation(species, temperature));
        };
        let error = (pressure / listed - 1.0).abs();
        let allowed = if listed < 1e3 { VAPOUR_PRESSURE_COLD } else { VAPOUR_PRESSURE };
        assert!(error < allowed, "{species} at {temperature} K: {pressure} Pa for {listed} Pa");
        if listed >= 1e3 && error > worst.0 {
            worst = (error, format!("{species} at {temperature} K"));
        }
        seen.insert(species);
    }
    println!("vapour pressure: worst {:.4}, {}", worst.0, worst.1);
    // All species of the table that have a liquid at temperatures of the laboratory, but for NO2, for which the libraries have no other source.
    let condensing = table::ALL.into_iter().map(|species| species.name);
    let condensing = condensing.filter(|name| matches!(condensation(name, 274.0), Condensation::Above(_)) && *name != "NO2");
    assert!(condensing.into_iter().all(|name| seen.contains(name)));
}
