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

fn alternative(heat_capacity: &'static str, temperature: Option<f64>) -> Alternative {
    let of = |value, unit| quantity(value, unit, Some(5.0), true);
    Alternative {
        heat_capacity,
        temperature_2: temperature.map(|value| of(value / 2.0, "K")),
        temperature: temperature.map(|value| of(value, "K")),
        pressure: temperature.map(|value| of(value * 200.0, "Pa")),
    }
}

fn relaxation(species: &str, incident: Option<f64>, reflected: Option<f64>) -> Relaxation {
    Relaxation { species: species.into(), incident, reflected, factor: 5.0 }
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
        heat_capacity: HeatCapacityChoice {
            chosen: "equilibrium",
            beside: alloc::vec![
                alternative("equilibrium", Some(2090.0)),
                alternative("frozen", Some(2194.5)),
                alternative("frozen then equilibrium", None)
            ],
            relaxation: alloc::vec![relaxation("O2", Some(2.1e-4), Some(3.0e-10)), relaxation("N2", None, Some(1.9e-3)),],
        },
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
        test_time: None,
        boundary_layer: None,
        bifurcation: None,
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
    assert_eq!(
        keys(&json),
        [
            "incident",
            "states",
            "reflected",
            "step",
            "heat_capacity",
            "fit",
            "budget",
            "correlation",
            "test_time",
            "boundary_layer",
            "bifurcation",
            "flags",
            "made_by"
        ]
    );
    assert_eq!(keys(&json["incident"]), ["speed", "mach", "attenuation"]);
    assert_eq!(keys(&json["states"]), ["1", "2", "5"]);
    assert_eq!(keys(&json["states"]["5"]), ["pressure", "temperature", "density", "sound_speed", "gas_speed"]);
    assert_eq!(keys(&json["step"]), ["value", "unit", "proven", "standard_uncertainty", "expanded", "coverage_factor"]);
    assert_eq!(keys(&json["incident"]["speed"]), ["value", "unit", "standard_uncertainty", "expanded", "coverage_factor"]);
    let choice = &json["heat_capacity"];
    assert_eq!(keys(choice), ["chosen", "beside", "relaxation"]);
    assert_eq!(choice["chosen"], "equilibrium");
    assert_eq!(keys(&choice["beside"][0]), ["heat_capacity", "2.temperature", "5.temperature", "5.pressure"]);
    assert_eq!(keys(&choice["beside"][0]["5.temperature"]), keys(&json["step"]));
    assert!(choice["beside"][2]["5.temperature"].is_null());
    assert_eq!(keys(&choice["relaxation"][0]), ["species", "2", "5", "factor"]);
    assert!(choice["relaxation"][1]["2"].is_null());
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
fn the_choices_stand_side_by_side_with_the_times_that_tell_which_is_nearer() {
    let (mut report, shot) = example();
    let text = report.to_text(&shot);
    let section = text.split("Choice of the heat capacity").nth(1).unwrap().split("Uncertainty budget").next().unwrap();
    assert!(section.contains(&report.heat_capacity.to_text(&shot)));
    let row = |start: &str| section.lines().find(|line| line.starts_with(start)).unwrap().split_whitespace().collect::<Vec<_>>().join(" ");
    assert_eq!(row("equilibrium"), "equilibrium 1045 ± 10 K 2090 ± 10 K 418.000 ± 0.010 kPa chosen");
    assert!(row("frozen ").ends_with("+5.00 %"), "{section}");
    assert_eq!(row("frozen then"), "frozen then equilibrium no answer no answer no answer");
    assert!(section.contains("No answer: "));
    // Below a nanosecond the formula says nothing.
    assert_eq!(row("O2"), "O2 210 us less than 1 ns 5");
    assert_eq!(row("N2"), "N2 - 1.9 ms 5");
    let words = section.split_whitespace().collect::<Vec<_>>().join(" ");
    assert!(words.contains("An observation of state 5 that begins well after 1.9 ms sees vibration in equilibrium. Where"), "{words}");
    report.heat_capacity.relaxation[0].reflected = Some(4.8e-6);
    let words = report.heat_capacity.to_text(&shot).split_whitespace().collect::<Vec<_>>().join(" ");
    let sentence =
        "An observation of state 5 that is over well before 4.8 us sees vibration frozen, one that begins well after 1.9 ms sees";
    assert!(words.contains(sentence) && words.contains("; between them some molecules have relaxed"), "{words}");
    // With one answer for all there is nothing to compare.
    report.heat_capacity.beside.clear();
    assert!(!report.to_text(&shot).contains("Choice of the heat capacity"));
    assert_eq!(report.heat_capacity.to_text(&shot), "");
}

#[test]
fn what_can_burn_is_said_before_the_first_pressure() {
    let (mut report, shot) = example();
    report.flags.insert(0, Flag::new("can-burn", "this mixture can burn"));
    let text = report.to_text(&shot);
    assert_eq!(text.matches("[can-burn]").count(), 1);
    assert!(text.find("[can-burn]").unwrap() < text.find("Pressure p5").unwrap());
    assert!(text.contains("[not-used]") && !text.contains("none but"));
    report.flags.truncate(1);
    assert!(report.to_text(&shot).contains("none but the caution above"));
    report.flags.clear();
    assert!(report.to_text(&shot).contains("-----\nnone\n"));
}

#[test]
fn uncertainties_without_a_unit_are_explained() {
    let (mut report, shot) = example();
    assert!(!report.to_text(&shot).contains("Composition:") && !report.to_text(&shot).contains("Gas data:"));
    report.budget[0].input = "composition".into();
    assert!(report.to_text(&shot).contains("Composition: mole fractions"));
    report.budget[0].input = "gas data".into();
    assert!(report.to_text(&shot).contains("Gas data: relative"));
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
