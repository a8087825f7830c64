//! The choices of heat capacity, against the sizes that are known, and the budget of a gas whose heat capacity depends on temperature.

use alloc::format;
use alloc::string::String;

use crate::record::{Report, ReportQuantity, Shot};

fn record(gas: &str, heat_capacity: &str, temperature: f64, speed: f64) -> String {
    format!(
        r#"{{ "record": "shot/1", "gas": {gas}, {heat_capacity}
        "fill": {{ "pressure": "10.00 ± 0.02 kPa", "temperature": "{temperature} ± 0.5 K" }}, "shock_speed": "{speed} ± 1 m/s" }}"#
    )
}

fn reduced(file: &str) -> Report {
    Shot::read(file.as_bytes()).and_then(|shot| shot.reduce()).unwrap_or_else(|error| panic!("{error}"))
}

const NITROGEN: &str = r#"{ "N2": "balance" }"#;
const CARBON_DIOXIDE: &str = r#"{ "CO2": "balance" }"#;
const EQUILIBRIUM: &str = r#""heat_capacity": "equilibrium", "#;

fn percent(value: f64, against: f64) -> f64 {
    100.0 * (value / against - 1.0)
}

/// T5 and p5 of a choice at a Mach number, in percent of those of equilibrium, at 295 K.
fn departure(gas: &str, choice: &str, mach: f64) -> (f64, f64) {
    let sound = reduced(&record(gas, EQUILIBRIUM, 295.0, 1500.0)).states.fill.sound_speed.value;
    let report = reduced(&record(gas, EQUILIBRIUM, 295.0, mach * sound));
    let other = report.heat_capacity.beside.iter().find(|other| other.heat_capacity == choice).unwrap();
    let of = |quantity: &Option<ReportQuantity>, against: &ReportQuantity| percent(quantity.as_ref().unwrap().value, against.value);
    (of(&other.temperature, &report.states.reflected.temperature), of(&other.pressure, &report.states.reflected.pressure))
}

/// What a textbook formula, with the heat capacity ratio of the fill, errs by: sizes computed before this code was there, to the digits given.
#[test]
fn constant_heat_capacity_errs_by_what_is_known() {
    for (gas, mach, temperature, pressure) in
        [(NITROGEN, 2.0, 1.6, 0.1), (NITROGEN, 3.0, 7.4, -0.7), (NITROGEN, 4.0, 13.6, -3.6), (CARBON_DIOXIDE, 3.0, 19.4, -7.6)]
    {
        let (t, p) = departure(gas, "constant", mach);
        assert!((t - temperature).abs() < 0.06 && (p - pressure).abs() < 0.06, "{gas} {mach}: {t} {p}");
    }
    let (frozen, _) = departure(CARBON_DIOXIDE, "frozen", 3.0);
    assert!((frozen - 43.0).abs() < 0.6, "{frozen}");
    let (helium, _) = departure(r#"{ "He": "balance" }"#, "constant", 3.0);
    assert!(helium.abs() < 1e-9, "{helium}");
}

#[test]
fn the_row_of_the_choice_equals_the_states() {
    for choice in ["constant", "equilibrium", "frozen", "frozen then equilibrium"] {
        let report = reduced(&record(NITROGEN, &format!("\"heat_capacity\": \"{choice}\", "), 295.0, 950.0));
        let own = &report.heat_capacity;
        let names: alloc::vec::Vec<&str> = own.beside.iter().map(|other| other.heat_capacity).collect();
        assert_eq!((own.chosen, names), (choice, alloc::vec!["constant", "equilibrium", "frozen", "frozen then equilibrium"]));
        let row = own.beside.iter().find(|other| other.heat_capacity == choice).unwrap();
        assert_eq!(row.temperature_2.as_ref(), Some(&report.states.incident.temperature));
        assert_eq!(row.temperature.as_ref(), Some(&report.states.reflected.temperature));
        assert_eq!(row.pressure.as_ref(), Some(&report.states.reflected.pressure));
        assert!(report.flags.iter().all(|flag| flag.code != "heat-capacity-not-chosen"));
    }
    let silent = reduced(&record(NITROGEN, "", 295.0, 950.0));
    assert_eq!(silent.heat_capacity.chosen, "equilibrium");
    assert_eq!(silent.flags[0].code, "heat-capacity-not-chosen");
    // A choice that leaves the data has no answer, and the others have theirs.
    let hot = reduced(&record(r#"{ "CH4": "balance" }"#, r#""heat_capacity": "frozen", "#, 295.0, 6400.0));
    let answers: alloc::vec::Vec<bool> = hot.heat_capacity.beside.iter().map(|other| other.temperature.is_some()).collect();
    assert_eq!(answers, [true, false, true, true]); // T5 behind a frozen state 2 stays below 6000 K
}

#[test]
fn relaxation_times_are_those_of_the_states() {
    let report = reduced(&record(r#"{ "O2": "1 %", "CO2": "0.05 %", "CH4": "1 %", "Ar": "balance" }"#, EQUILIBRIUM, 295.0, 950.0));
    // CO2 is a trace, CH4 has no formula.
    let [only] = &report.heat_capacity.relaxation[..] else { panic!("{:?}", report.heat_capacity.relaxation) };
    assert_eq!((only.species.as_str(), only.factor), ("O2", 5.0));
    let reduced_mass = |a: f64, b: f64| a * b / (a + b);
    let state = &report.states.reflected;
    let time =
        |partner: f64| crate::gas::millikan_white(2273.0, reduced_mass(31.9988, partner), state.temperature.value, state.pressure.value);
    let rate = 0.01 / time(31.9988) + 0.0005 / time(44.0095) + 0.01 / time(16.04246) + 0.9795 / time(39.948);
    assert!((only.reflected.unwrap() * rate - 1.0).abs() < 1e-9, "{only:?}");
    assert!(only.incident.unwrap() > only.reflected.unwrap());
    // Air that leaked in brings nitrogen in twice; it is listed once.
    let leaky = reduced(&record(NITROGEN, r#""heat_capacity": "equilibrium", "leak": "2 %", "#, 295.0, 950.0));
    let names: alloc::vec::Vec<&str> = leaky.heat_capacity.relaxation.iter().map(|time| time.species.as_str()).collect();
    assert_eq!(names, ["N2", "O2"]);
    // A gas given by its ratio, and atoms in closed form, have no choice.
    let ratio = reduced(&record(r#"{ "heat_capacity_ratio": "7/5", "molar_mass": "28.0134 g/mol" }"#, "", 295.0, 950.0));
    assert!(ratio.heat_capacity.chosen == "constant" && ratio.heat_capacity.beside.is_empty());
}

/// At a given shock speed a wrong temperature of the fill shows in the pressure, not in the temperature.
#[test]
fn a_warmer_fill_moves_the_pressure() {
    let [right, wrong] = [295.0, 300.0].map(|temperature| reduced(&record(NITROGEN, EQUILIBRIUM, temperature, 950.0)).states.reflected);
    let (temperature, pressure) =
        (percent(wrong.temperature.value, right.temperature.value), percent(wrong.pressure.value, right.pressure.value));
    assert!((temperature - 0.3).abs() < 0.05 && (pressure + 2.4).abs() < 0.05, "{temperature} {pressure}");
}

#[test]
fn a_measured_change_of_the_pressure_gives_the_temperature_after_it() {
    let after = |gas: &str, choice: &str, change: &str| {
        let heat_capacity = format!("\"heat_capacity\": \"{choice}\", \"measured\": {{ \"pressure_change\": \"{change}\" }}, ");
        let report = reduced(&record(gas, &heat_capacity, 295.0, 950.0));
        let text = &report.flags.iter().find(|flag| flag.code == "pressure-change").unwrap().text;
        let kelvin: f64 = text.split(" K,").next().unwrap().rsplit(' ').next().unwrap().parse().unwrap();
        kelvin / report.states.reflected.temperature.value
    };
    // T^(7/2) ~ p with frozen vibration of a linear molecule, T^(5/2) ~ p for atoms.
    for (gas, exponent) in [(NITROGEN, 2.0 / 7.0), (r#"{ "Ar": "balance" }"#, 2.0 / 5.0)] {
        for (change, factor) in [("6 ± 1 %", 1.06), ("-3 %", 0.97), ("0 %", 1.0)] {
            let ratio = after(gas, "frozen", change);
            assert!((ratio - libm::pow(factor, exponent)).abs() < 1e-4, "{gas} {change}: {ratio}");
        }
    }
    // The full heat capacity of nitrogen at 1130 K as rigid rotor and harmonic oscillator (θ 3393 K), a description apart from the data.
    let x = 3393.0 / 1130.0;
    let oscillator = libm::exp(x) * libm::pow(x / (libm::exp(x) - 1.0), 2.0);
    let full = after(NITROGEN, "equilibrium", "5 %");
    assert!((full - libm::pow(1.05, 1.0 / (3.5 + oscillator))).abs() < 1e-4, "{full}");
    let refused = |change: &str| {
        let file = record(NITROGEN, &format!("\"measured\": {{ \"pressure_change\": \"{change}\" }}, "), 295.0, 950.0);
        Shot::read(file.as_bytes()).unwrap_err()
    };
    assert!(refused("-100 %").wrong.contains("cannot fall by all of it"));
    assert!(refused("300 %").remedy.contains("\"confirm\": [\"measured.pressure_change\"]"));
}

#[test]
fn the_budget_of_a_mixture() {
    let gas = r#"{ "CH4": "0.500 ± 0.020 %", "O2": "1.00 ± 0.03 %", "Ar": "balance" }"#;
    let report = reduced(&record(gas, r#""heat_capacity": "equilibrium", "leak": "0.10 ± 0.05 %", "#, 295.0, 950.0));
    let inputs: alloc::vec::Vec<&str> = report.budget.iter().map(|line| line.input.as_str()).collect();
    assert_eq!(inputs, ["shock speed", "fill pressure", "fill temperature", "composition", "gas data"]);
    let composition = &report.budget[3];
    assert!((composition.standard_uncertainty - libm::sqrt(4e-8 + 9e-8 + 25e-8)).abs() < 1e-12);
    let shares =
        |share: fn(&crate::record::Share) -> Option<f64>| -> f64 { report.budget.iter().map(|line| share(&line.share).unwrap()).sum() };
    for sum in [shares(|share| share.temperature), shares(|share| share.pressure), shares(|share| share.step)] {
        assert!((sum - 1.0).abs() < 1e-9, "{sum}");
    }
    // The composition's share of the variance of T5 by differences: three mixtures, each with one fraction larger by its uncertainty.
    let temperature = |methane: &str, oxygen: &str, leak: &str| {
        let gas = format!("{{ \"CH4\": \"{methane}\", \"O2\": \"{oxygen}\", \"Ar\": \"balance\" }}");
        let rest = format!("\"heat_capacity\": \"equilibrium\", \"leak\": \"{leak}\", ");
        reduced(&record(&gas, &rest, 295.0, 950.0)).states.reflected.temperature.value
    };
    let nominal = temperature("0.500 %", "1.00 %", "0.10 %");
    let moved = [("0.520 %", "1.00 %", "0.10 %"), ("0.500 %", "1.03 %", "0.10 %"), ("0.500 %", "1.00 %", "0.15 %")];
    let variance: f64 = moved.iter().map(|(a, b, c)| temperature(a, b, c) - nominal).map(|change| change * change).sum();
    let stated = report.states.reflected.temperature.standard_uncertainty.unwrap();
    let share = composition.share.temperature.unwrap();
    assert!((variance / (stated * stated) / share - 1.0).abs() < 0.02, "{variance} {share}");
}

/// By differences for the measured inputs, and by the shares for the data, which raise T5 and lower p5 or the other way round.
#[test]
fn temperature_and_pressure_are_correlated_by_their_inputs() {
    let report = reduced(&record(NITROGEN, EQUILIBRIUM, 295.0, 1050.0));
    let at = |temperature: f64, speed: f64| {
        let state = reduced(&record(NITROGEN, EQUILIBRIUM, temperature, speed)).states.reflected;
        (state.temperature.value, state.pressure.value)
    };
    let half = |high: (f64, f64), low: (f64, f64)| ((high.0 - low.0) / 2.0, (high.1 - low.1) / 2.0);
    // One standard uncertainty each.
    let (speed, fill) = (half(at(295.0, 1051.0), at(295.0, 1049.0)), half(at(295.5, 1050.0), at(294.5, 1050.0)));
    let (t, p) = (&report.states.reflected.temperature, &report.states.reflected.pressure);
    let (u_t, u_p) = (t.standard_uncertainty.unwrap(), p.standard_uncertainty.unwrap());
    let data = &report.budget.iter().find(|line| line.input == "gas data").unwrap().share;
    let of_data = -libm::sqrt(data.temperature.unwrap() * data.pressure.unwrap());
    let expected = (speed.0 * speed.1 + fill.0 * fill.1) / (u_t * u_p) + of_data;
    let found = report.correlation.temperature_pressure.unwrap();
    assert!((found - expected).abs() < 2e-4, "{found} {expected}");
    assert!((0.2..0.8).contains(&found));
}
