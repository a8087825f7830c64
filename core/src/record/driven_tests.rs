//! Gases of records as they come to the relations.

use alloc::string::ToString;

use super::*;
use crate::record::Report;

fn record(gas: &str, rest: &str) -> String {
    format!(
        r#"{{ "record": "shot/1", "gas": {gas}, {rest}
        "fill": {{ "pressure": "10.0 ± 0.02 kPa", "temperature": "295 ± 0.5 K" }}, "shock_speed": "850 ± 1 m/s" }}"#
    )
}

fn read(gas: &str, rest: &str) -> Shot {
    Shot::read(record(gas, rest).as_bytes()).unwrap_or_else(|error| panic!("{error}"))
}

fn reduced(gas: &str, rest: &str) -> Report {
    read(gas, rest).reduce().unwrap_or_else(|error| panic!("{error}"))
}

fn refused(gas: &str, rest: &str) -> RecordError {
    Shot::read(record(gas, rest).as_bytes()).and_then(|shot| shot.reduce()).expect_err(gas)
}

type Portions = Vec<(String, f64)>;
type Changes = Vec<(MixtureChange, f64)>;

/// Species and fractions in order, and the changes.
fn composition(gas: &str, rest: &str) -> (Portions, Changes) {
    let found = read(gas, rest).with_driven_gas(|gas, _| {
        let DrivenGas::ThermallyPerfect { gas, changes, .. } = gas else { panic!("constant") };
        let portions = gas.portions().iter().map(|portion| (portion.species.name.to_string(), portion.fraction.to_f64())).collect();
        (portions, changes.iter().map(|(change, uncertainty)| (*change, uncertainty.standard)).collect())
    });
    found.unwrap()
}

fn fraction(gas: &str, rest: &str, species: &str) -> f64 {
    composition(gas, rest).0.iter().filter(|(name, _)| name == species).map(|(_, fraction)| fraction).sum()
}

fn flag<'r>(report: &'r Report, code: &str) -> &'r str {
    report.flags.iter().find(|flag| flag.code == code).map_or("", |flag| flag.text.as_str())
}

#[test]
fn an_unknown_species_is_named_with_what_is_known() {
    for (typed, meant) in [("co2", "was CO2 meant?"), ("AR", "was Ar meant?"), ("Air", "was air meant?"), (" N2", "was N2 meant?")] {
        let error = refused(&format!("{{ \"{typed}\": \"1 %\", \"N2\": \"balance\" }}"), "");
        assert_eq!((error.path.as_str(), error.wrong.as_str()), (&*format!("gas.{typed}"), "this species is unknown"));
        assert!(error.remedy.starts_with(meant) && error.remedy.contains("SF6") && error.remedy.contains("\"species\""), "{error}");
    }
    assert!(refused(r#"{ "C7H16": "1 %", "Ar": "balance" }"#, "").remedy.starts_with("built in are Ar, "));
}

#[test]
fn air_is_a_mixture_that_keeps_its_proportions() {
    let (portions, changes) = composition(r#"{ "air": "5.0 ± 0.1 %", "Ar": "balance" }"#, "");
    let names: Vec<&str> = portions.iter().map(|(name, _)| name.as_str()).collect();
    assert_eq!(names, ["N2", "O2", "Ar", "CO2", "Ar"]);
    assert!((portions[0].1 - 0.05 * 0.780_84).abs() < 1e-15 && (portions[4].1 - 0.95).abs() < 1e-15);
    let exchange = MixtureChange::Exchange { more: Group { first: 0, count: 4 }, less: Group::one(4) };
    assert_eq!(changes, [(exchange, 0.001), (MixtureChange::Data, GAS_DATA)]);
}

#[test]
fn a_fraction_without_a_balance_is_an_addition() {
    let (_, changes) = composition(r#"{ "N2": "79.0 ± 0.2 %", "O2": "21.0 ± 0.1 %" }"#, "");
    let expected = [(MixtureChange::Addition(Group::one(0)), 0.002), (MixtureChange::Addition(Group::one(1)), 0.001)];
    assert_eq!(changes, [expected[0], expected[1], (MixtureChange::Data, GAS_DATA)]);
}

/// A measured p5 that agrees does not prove the gas: air in argon moves T5 and hardly p5.
#[test]
fn air_in_argon_shows_in_the_temperature_and_not_in_the_pressure() {
    let pure = reduced(r#"{ "Ar": "balance" }"#, r#""heat_capacity": "equilibrium","#).states.reflected;
    for report in [
        reduced(r#"{ "air": "5 %", "Ar": "balance" }"#, r#""heat_capacity": "equilibrium","#),
        reduced(r#"{ "Ar": "balance" }"#, r#""heat_capacity": "equilibrium", "leak": "5 %","#),
    ] {
        let moved = |with: f64, without: f64| 100.0 * (with / without - 1.0);
        let mixed = &report.states.reflected;
        let (temperature, pressure) =
            (moved(mixed.temperature.value, pure.temperature.value), moved(mixed.pressure.value, pure.pressure.value));
        assert!((temperature + 3.4).abs() < 0.05 && (pressure - 0.3).abs() < 0.05, "{temperature} {pressure}");
    }
}

#[test]
fn humidity_puts_water_into_air() {
    let humid = r#""humidity": "50 ± 4 %", "ambient": "101325 Pa", "#;
    // Half of the saturation pressure at 295 K, 2621 Pa (IAPWS-IF97, by the equation of the release), in 101325 Pa.
    let water = fraction(r#"{ "air": "balance" }"#, humid, "H2O");
    assert!((water - 0.5 * 2621.0 / 101_325.0).abs() < 2e-6, "{water}");
    assert!((fraction(r#"{ "air": "10 %", "Ar": "balance" }"#, humid, "H2O") - 0.1 * water).abs() < 1e-12);
    // Without an ambient pressure it was measured at that of the fill.
    assert!((fraction(r#"{ "air": "balance" }"#, r#""humidity": "50 %", "#, "H2O") - water * 10.132_5).abs() < 1e-9);
    let (_, changes) = composition(r#"{ "air": "balance" }"#, humid);
    let exchange = MixtureChange::Exchange { more: Group::one(4), less: Group { first: 0, count: 4 } };
    assert!(changes[0].0 == exchange && (changes[0].1 - 0.08 * water).abs() < 1e-12, "{changes:?}");
    let report = reduced(r#"{ "air": "balance" }"#, humid);
    let text = flag(&report, "humid-air");
    assert!(text.contains("1.29 % of water") && text.contains("the ambient pressure") && text.contains("IAPWS-IF97"), "{text}");
    let shortened = "H2O (1.29 % by mole) can shorten the vibrational relaxation of N2, O2 by a factor of 10 to 1000";
    assert!(flag(&report, "relaxation-shortened").starts_with(shortened), "{:?}", report.flags);
    let error = refused(r#"{ "N2": "balance" }"#, humid);
    assert!(error.path == "humidity" && error.wrong.contains("no air"), "{error}");
    let cold = record(r#"{ "air": "balance" }"#, humid).replace("295 ± 0.5 K", "250 ± 0.5 K");
    let error = Shot::read(cold.as_bytes()).unwrap().reduce().unwrap_err();
    assert!(error.path == "humidity" && error.typed == "50 ± 4 %" && error.wrong.contains("273.15"), "{error}");
    let ratio = r#"{ "heat_capacity_ratio": "7/5", "molar_mass": "28.97 g/mol" }"#;
    assert_eq!(refused(ratio, humid).path, "humidity");
    assert_eq!(refused(ratio, r#""leak": "1 %", "#).path, "leak");
}

#[test]
fn a_leak_takes_a_part_of_everything() {
    let by_fraction = r#""leak": "0.20 ± 0.05 %", "#;
    let (portions, changes) = composition(r#"{ "CH4": "1 %", "Ar": "balance" }"#, by_fraction);
    assert!((portions[0].1 - 0.01 * 0.998).abs() < 1e-15 && (portions[2].1 - 0.002 * 0.780_84).abs() < 1e-15);
    let exchange = MixtureChange::Exchange { more: Group { first: 2, count: 4 }, less: Group { first: 0, count: 2 } };
    assert_eq!(changes[0], (exchange, 0.0005));
    // 1.2 Pa/min for 10 min are 12 Pa of 10 kPa.
    let by_rate = r#""leak": { "rate": "1.2 ± 0.3 Pa/min", "waiting": "600 ± 50 s" }, "#;
    let nitrogen = r#"{ "Ar": "balance" }"#;
    let leaked = fraction(nitrogen, by_rate, "N2") / 0.780_84;
    assert!((leaked - 0.0012).abs() < 1e-9, "{leaked}");
    let (_, changes) = composition(nitrogen, by_rate);
    let expected = libm::hypot(0.3 / 60.0 * 600.0, 1.2 / 60.0 * 50.0) / 10e3;
    assert!((changes[0].1 / expected - 1.0).abs() < 1e-12);
    let report = reduced(nitrogen, by_rate);
    assert_eq!(flag(&report, "leak"), "0.120 % of the driven gas is taken as air that leaked in");
    assert!(report.budget.iter().any(|line| line.input == "composition"));
}

#[test]
fn traces_of_leaked_air_raise_no_doubt_of_their_own() {
    let hot = |leak: &str| {
        let file = record(r#"{ "He": "10 %", "Kr": "balance" }"#, &format!("\"leak\": \"{leak}\", ")).replace("850 ± 1", "1000 ± 1");
        let report = Shot::read(file.as_bytes()).unwrap().reduce().unwrap();
        assert!(report.states.reflected.temperature.value > 2500.0, "{}", report.states.reflected.temperature.value);
        report.flags.iter().map(|flag| flag.code.clone()).collect::<Vec<_>>()
    };
    assert_eq!(hot("0.01 %"), ["heat-capacity-not-chosen", "leak"]);
    // 2 % of air are 0.4 % of O2; its CO2 is still a trace.
    assert_eq!(hot("2 %"), ["heat-capacity-not-chosen", "leak", "dissociation", "relaxation-shortened"]);
}

#[test]
fn bad_leaks_are_refused() {
    for (typed, path, said) in [
        (r#""0.5 Pa/min""#, "leak", "a rate without the waiting time"),
        (r#"{ "rate": "0.5 Pa/min" }"#, "leak.waiting", "missing"),
        (r#"{ "rate": "0.5 Pa", "waiting": "60 s" }"#, "leak.rate", "Pa is the unit of a pressure"),
        (r#"{ "rate": "-0.5 Pa/min", "waiting": "60 s" }"#, "leak", "zero or more"),
        (r#"{ "rate": "0.5 Pa/min", "wating": "60 s" }"#, "leak.wating", "was \"waiting\" meant?"),
        (r#""-1 %""#, "leak", "between 0 and 100 %"),
        (r#""100 %""#, "leak", "between 0 and 100 %"),
        (r#""60 %""#, "leak", "60.0 % of the fill would be air"),
        (r#"{ "rate": "10 Pa/s", "waiting": "600 s" }"#, "leak", "60.0 % of the fill would be air"),
        (r#"["1 %"]"#, "leak", "a list stands where"),
    ] {
        let error = refused(r#"{ "Ar": "balance" }"#, &format!("\"leak\": {typed}, "));
        assert!(error.path == path && error.to_string().contains(said), "{typed}: {error}");
    }
}

#[test]
fn a_gas_of_atoms_is_solved_in_closed_form_where_it_may_be() {
    let kind = |gas: &str, rest: &str| {
        let constant = |gas: DrivenGas<'_>, _: &GasNotes| matches!(gas, DrivenGas::ConstantHeatCapacity { .. });
        read(gas, rest).with_driven_gas(constant).unwrap()
    };
    let constant = r#""heat_capacity": "constant", "#;
    assert!(kind(r#"{ "He": "10 %", "Ar": "balance" }"#, constant));
    assert!(!kind(r#"{ "He": "10 %", "Ar": "balance" }"#, ""));
    assert!(!kind(r#"{ "Kr": "10 %", "Ar": "balance" }"#, constant));
    assert!(!kind(r#"{ "Ar": "balance" }"#, r#""heat_capacity": "constant", "leak": "1 %", "#));
    // The two ways agree: argon departs from 5/2 R by less than 1e-6 here.
    let [closed, solved] = [constant, ""].map(|rest| reduced(r#"{ "Ar": "balance" }"#, rest).states.reflected.temperature.value);
    assert!((closed / solved - 1.0).abs() < 1e-6, "{closed} {solved}");
}

#[test]
fn where_the_data_end_there_is_an_error_and_no_extrapolation() {
    let hot = record(r#"{ "CH4": "10 %", "Ar": "balance" }"#, "").replace("850 ± 1 m/s", "3000 ± 1 m/s");
    let error = Shot::read(hot.as_bytes()).unwrap().reduce().unwrap_err();
    assert_eq!((error.path.as_str(), error.typed.as_str()), ("shock_speed", "3000 ± 1 m/s"));
    assert!(error.wrong.contains("200 K to 6000 K") && error.wrong.contains("not extrapolated"), "{error}");
    // Carbon dioxide alone has data to 20000 K.
    let hot = record(r#"{ "CO2": "balance" }"#, "").replace("850 ± 1 m/s", "3300 ± 1 m/s");
    let report = Shot::read(hot.as_bytes()).unwrap().reduce().unwrap();
    assert!(report.states.reflected.temperature.value > 6000.0 && flag(&report, "dissociation").contains("CO2"));
    let cold = record(r#"{ "CH4": "10 %", "Ar": "balance" }"#, "").replace("295 ± 0.5 K", "150 ± 0.5 K");
    let error = Shot::read(cold.as_bytes()).unwrap().reduce().unwrap_err();
    assert!(error.path == "fill.temperature" && error.wrong.contains("200 K to 6000 K"), "{error}");
}

#[test]
fn more_uncertain_fractions_than_a_budget_holds_are_refused() {
    let names = ["He", "Ne", "Kr", "Xe", "N2", "O2", "CO", "CO2", "H2", "D2", "NO", "N2O", "CH4", "C2H2", "C2H4"];
    let parts: Vec<String> = names.iter().map(|name| format!("\"{name}\": \"1.0 ± 0.1 %\"")).collect();
    let error = refused(&format!("{{ {}, \"Ar\": \"balance\" }}", parts.join(", ")), "");
    assert!(error.wrong.contains("16 uncertain fractions") && error.wrong.contains("14"), "{error}");
}
