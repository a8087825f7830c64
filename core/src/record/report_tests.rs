use super::*;
use crate::record::Speed;

const RECORD: &str = include_str!("../../../examples/records/argon-b0412.json");

fn quantity(value: f64, unit: &'static str, spread: Option<f64>, proven: bool) -> ReportQuantity {
    ReportQuantity {
        value,
        unit,
        proven: proven.then(|| [value, value.next_up()]),
        standard_uncertainty: spread,
        expanded: spread.map(|u| 2.0 * u),
        coverage_factor: spread.map(|_| 2.0),
    }
}

fn state(pressure: f64, temperature: f64) -> ReportState {
    ReportState {
        pressure: quantity(pressure, "Pa", Some(0.002 * pressure), true),
        temperature: quantity(temperature, "K", Some(0.003 * temperature), true),
        density: quantity(0.125, "kg/m3", Some(0.001), true),
        sound_speed: quantity(320.5, "m/s", Some(0.3), true),
        gas_speed: quantity(0.0, "m/s", None, true),
    }
}

/// Invented figures: only the form is looked at.
fn report(shot: &Shot) -> Report {
    let Speed::Stations(stations) = &shot.speed else { panic!("stations") };
    let line = |station: &crate::record::Station| FitLine { name: station.name.clone(), residual: 1.25e-7, standardised: Some(-0.5) };
    Report {
        incident: Incident {
            speed: quantity(950.1, "m/s", Some(1.0), false),
            mach: quantity(2.964, "1", Some(0.004), true),
            attenuation: Some(quantity(0.012, "1/m", Some(0.0007), false)),
        },
        states: States { fill: state(8000.0, 296.2), incident: state(86_000.0, 1060.0), reflected: state(372_000.0, 2090.0) },
        reflected: Reflected { speed: quantity(534.0, "m/s", Some(1.0), true), mach: quantity(2.0, "1", None, true) },
        step: quantity(364_000.0, "Pa", Some(800.0), true),
        fit: Some(Fit {
            stations: stations.iter().map(line).collect(),
            chi_squared: Some(1.5),
            degrees_of_freedom: 2,
            speed_attenuation_correlation: Some(-0.96),
            without: alloc::vec![LeftOut { name: stations[0].name.clone(), speed: 949.8, chi_squared: Some(0.9) }],
        }),
        budget: alloc::vec![BudgetLine {
            input: "arrival times".into(),
            standard_uncertainty: 1.0,
            share: Share { temperature: Some(0.9), pressure: Some(0.8), step: None },
            unit: "m/s",
        }],
        correlation: Correlation { temperature_pressure: Some(0.87) },
        flags: alloc::vec![Flag::not_used("leak")],
        made_by: MadeBy::this_version(shot, "constant heat capacity"),
    }
}

fn example() -> (Report, Shot) {
    let shot = Shot::read(RECORD.as_bytes()).unwrap();
    (report(&shot), shot)
}

#[test]
fn the_object_has_the_keys_in_their_order() {
    let (report, _) = example();
    let json: serde_json::Value = serde_json::from_str(&report.to_json().unwrap()).unwrap();
    let keys = |value: &serde_json::Value| value.as_object().unwrap().keys().cloned().collect::<Vec<_>>();
    assert_eq!(keys(&json), ["incident", "states", "reflected", "step", "fit", "budget", "correlation", "flags", "made_by"]);
    assert_eq!(keys(&json["incident"]), ["speed", "mach", "attenuation"]);
    assert_eq!(keys(&json["states"]), ["1", "2", "5"]);
    assert_eq!(keys(&json["states"]["5"]), ["pressure", "temperature", "density", "sound_speed", "gas_speed"]);
    assert_eq!(keys(&json["step"]), ["value", "unit", "proven", "standard_uncertainty", "expanded", "coverage_factor"]);
    assert_eq!(keys(&json["incident"]["speed"]), ["value", "unit", "standard_uncertainty", "expanded", "coverage_factor"]);
    assert_eq!(keys(&json["fit"]), ["stations", "chi_squared", "degrees_of_freedom"]);
    assert_eq!(keys(&json["fit"]["stations"][0]), ["name", "residual", "standardised"]);
    assert_eq!(keys(&json["budget"][0]), ["input", "standard_uncertainty", "share"]);
    assert_eq!(keys(&json["budget"][0]["share"]), ["5.temperature", "5.pressure", "step"]);
    assert_eq!(keys(&json["correlation"]), ["5.temperature,5.pressure"]);
    assert_eq!(keys(&json["flags"][0]), ["code", "text"]);
    assert_eq!(keys(&json["made_by"]), ["version", "gas_data", "input_digest", "seed"]);
    assert!(json["made_by"]["seed"].is_null());
    assert!(json["reflected"]["mach"]["standard_uncertainty"].is_null());
}

#[test]
fn numbers_read_back_to_the_same_double_and_absence_is_null() {
    let (mut report, _) = example();
    for value in [0.1 + 0.2, 1e-300, 5e-324, f64::MAX, 123_456_789.123_456_79] {
        report.step.value = value;
        report.fit = None;
        report.incident.attenuation = None;
        let json: serde_json::Value = serde_json::from_str(&report.to_json().unwrap()).unwrap();
        assert_eq!(json["step"]["value"].as_f64().unwrap().to_bits(), value.to_bits());
        assert!(json["fit"].is_null() && json["incident"]["attenuation"].is_null());
    }
}

#[test]
fn the_text_says_what_a_referee_and_a_technician_need() {
    let (report, shot) = example();
    let text = report.to_text(&shot);
    for part in [
        "372.0 ± 1.5 kPa (k=2)",
        "standard uncertainty",
        "[not-used] leak",
        "1.20 ± 0.14 %/m (k=2)",
        "no permission to approach",
        "authorises",
        "0.870",
        "-0.96",
        "949.800 m/s",
        "fnv1a64:",
        env!("CARGO_PKG_VERSION"),
        "8.000 ± 0.020 kPa",
    ] {
        assert!(text.contains(part), "{part} is missing in\n{text}");
    }
    let typed: Vec<usize> = shot.entries.iter().map(|entry| text.find(&entry.path).unwrap()).collect();
    assert!(typed.is_sorted(), "the echo left the order of the file");
}

#[test]
fn proven_is_said_of_the_arithmetic_only() {
    let (report, shot) = example();
    let text = report.to_text(&shot);
    assert_eq!(text.matches("proven").count(), 1);
    let section = text.split("Digits of the arithmetic").nth(1).unwrap().split("Before anybody").next().unwrap();
    assert!(section.contains("proven") && !section.contains('±') && !section.contains("uncertainty"));
}

#[test]
fn free_text_cannot_move_the_cursor() {
    let nasty = RECORD.replacen("B-0412", "\\u001b[2Jx\\u202ey", 1);
    let shot = Shot::read(nasty.as_bytes()).unwrap();
    let text = report(&shot).to_text(&shot);
    assert!(!text.contains('\u{1b}') && !text.contains('\u{202e}') && text.contains("[2Jx y"));
}
