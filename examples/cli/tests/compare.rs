//! Past shots against a plan.

mod common;

use std::path::PathBuf;

use common::{Run, changed, endwall};
use serde_json::Value;

const PLAN: &str = include_str!("../../records/plan-k0300.json");
const FIRST: &str = include_str!("../../records/kinetics-k0301.json");

/// A demo record.
fn demo(name: &str) -> String {
    let path: PathBuf = [env!("CARGO_MANIFEST_DIR"), "..", "records", name].iter().collect();
    path.to_str().expect("a path in UTF-8").to_string()
}

/// The demo plan against these demo shots.
fn compare(shots: &[&str], options: &[&str]) -> Run {
    let files: Vec<String> = std::iter::once(&"plan-k0300.json").chain(shots).map(|name| demo(name)).collect();
    let files: Vec<&str> = files.iter().map(String::as_str).collect();
    endwall(&[&["compare"], files.as_slice(), options].concat(), b"")
}

/// The demo plan against a record from standard input.
fn against(record: &str, options: &[&str]) -> Run {
    endwall(&[&["compare", demo("plan-k0300.json").as_str(), "-"], options].concat(), record.as_bytes())
}

const SHOTS: [&str; 3] = ["kinetics-k0301.json", "kinetics-k0302.json", "kinetics-k0303.json"];

fn keys(object: &Value) -> Vec<&str> {
    object.as_object().unwrap().keys().map(String::as_str).collect()
}

#[test]
fn the_json_object_has_these_keys() {
    let report: Value = serde_json::from_str(&compare(&SHOTS, &["--json"]).good()).unwrap();
    for (object, wanted) in [
        ("", &["attenuation", "efficiency", "fill", "flags", "made_by", "plan", "ready", "shots", "speed"][..]),
        ("/plan", &["driver_pressure", "fill", "mach", "name", "pressure", "speed", "step", "temperature"]),
        (
            "/shots/0",
            &[
                "attenuation",
                "counts",
                "departure",
                "driver_pressure",
                "efficiency",
                "fill",
                "flags",
                "ideal_mach",
                "input_digest",
                "mach",
                "name",
                "pressure",
                "report_flags",
                "speed",
                "step",
                "temperature",
            ],
        ),
        ("/shots/0/departure", &["driver_pressure", "fill", "mach", "pressure", "speed", "step", "temperature"]),
        ("/shots/0/counts", &["attenuation", "efficiency", "setting"]),
        ("/shots/0/efficiency", &["coverage_factor", "expanded", "standard_uncertainty", "unit", "value"]),
        ("/efficiency", &["degrees_of_freedom", "mean", "next", "shots", "standard_deviation", "stated"]),
        ("/ready", &["attenuation", "efficiency", "tolerance"]),
        ("/ready/tolerance", &["disturbance", "fill", "speed"]),
        ("/flags/0", &["code", "text"]),
        ("/made_by", &["gas_data", "input_digest", "seed", "version"]),
    ] {
        let mut found = keys(report.pointer(object).unwrap());
        found.sort_unstable();
        assert_eq!(found, wanted, "{object}");
    }
    // The mean and the scatter follow from the lines of the shots.
    let of = |path: &str| -> Vec<f64> {
        report["shots"].as_array().unwrap().iter().map(|shot| shot.pointer(path).unwrap().as_f64().unwrap()).collect()
    };
    for (path, spread) in [("/efficiency/value", "efficiency"), ("/attenuation/value", "attenuation"), ("/departure/speed", "speed")] {
        let values = of(path);
        let mean = values.iter().sum::<f64>() / 3.0;
        let squares: f64 = values.iter().map(|value| (value - mean) * (value - mean)).sum();
        let number = |field: &str| report[spread].pointer(field).unwrap().as_f64().unwrap();
        assert!((number("/mean/value") / mean - 1.0).abs() < 1e-12, "{spread}");
        assert!((number("/standard_deviation") / (squares / 2.0).sqrt() - 1.0).abs() < 1e-12, "{spread}");
        assert_eq!((number("/shots"), number("/degrees_of_freedom")), (3.0, 2.0));
    }
    // Each line is the report of its shot, and its efficiency the Mach number there over the ideal one.
    let alone: Value = serde_json::from_str(&common::reduce(FIRST, &["--json"]).good()).unwrap();
    for (path, of_report) in [
        ("/speed", "/incident/speed"),
        ("/mach", "/incident/mach"),
        ("/attenuation", "/incident/attenuation"),
        ("/temperature", "/states/5/temperature"),
        ("/pressure", "/states/5/pressure"),
    ] {
        assert_eq!(report["shots"][0].pointer(path), alone.pointer(of_report), "{path}");
    }
    let ratio = of("/mach/value")[0] / of("/ideal_mach/value")[0];
    assert!((of("/efficiency/value")[0] / ratio - 1.0).abs() < 1e-14);
    // Absent is null.
    let one: Value = serde_json::from_str(&compare(&SHOTS[..1], &["--json"]).good()).unwrap();
    assert!(one["efficiency"]["standard_deviation"].is_null() && one["ready"]["tolerance"]["speed"].is_null());
    assert!(one["flags"].as_array().unwrap().iter().any(|flag| flag["code"] == "one-shot"));
}

/// What is printed to be pasted is read as a plan, and the new p4 answers to the new efficiency.
#[test]
fn the_lines_can_be_pasted() {
    let text = compare(&SHOTS, &[]).good();
    let mut file = PLAN.to_string();
    for field in ["efficiency", "attenuation", "tolerance"] {
        let line = |text: &str| text.lines().find(|line| line.starts_with(&format!("  \"{field}\":"))).expect(field).to_string();
        file = changed(&file, &line(PLAN), &line(&text));
    }
    let p4 = |plan: &str| -> f64 {
        let report: Value = serde_json::from_str(&endwall(&["plan", "-", "--json"], plan.as_bytes()).good()).unwrap();
        report["fill"]["p4"]["value"].as_f64().unwrap()
    };
    assert!(file.contains("\"efficiency\": \"0.92"), "{file}");
    assert!(p4(&file) > p4(PLAN));
    // Shots and plan are told apart by the order.
    assert!(text.contains("Plan K-0300 against 3 past shots") && text.contains("No number here"), "{text}");
}

#[test]
fn a_shot_without_a_driver_pressure_gives_no_efficiency() {
    let start = FIRST.find("  \"driver\":").unwrap();
    let end = start + FIRST[start..].find('\n').unwrap() + 1;
    let text = against(&(FIRST[..start].to_string() + &FIRST[end..]), &[]).good();
    assert!(
        text.contains("K-0301: [no-efficiency]") && !text.contains("  \"efficiency\":") && text.contains("  \"attenuation\":"),
        "{text}"
    );
}

#[test]
fn bad_records_end_with_exit_code_2() {
    against("{", &[]).refused(&["standard input"]);
    against(&changed(FIRST, "shot/1", "plan/1"), &[]).refused(&["standard input", "record", "shot/1"]);
    against(&changed(FIRST, "0.005 bar(g)", "0.005 bar"), &[]).refused(&["standard input: driver.pressure", "bar(g) or bar(a)"]);
    let start = FIRST.find("\"pressure\": \"0.").unwrap() + "\"pressure\": \"".len();
    let low = FIRST[..start].to_string() + "-0.96 ± 0.001 bar(g)" + &FIRST[start + FIRST[start..].find('"').unwrap()..];
    against(&low, &[]).refused(&["standard input: driver.pressure", "-0.96", "not above that of the fill"]);
    compare(&["kinetics-k0301.json", "kinetics-k0302.json", "kinetics-k0301.json"], &[]).refused(&[
        "kinetics-k0301.json",
        "same record as one before it, shot K-0301",
        "name each shot once",
    ]);
    compare(&["no-such.json"], &[]).refused(&["no-such.json", "cannot be read"]);
    endwall(&["compare", "-", "-"], PLAN.as_bytes()).refused(&["standard input is named twice"]);
    let shot = demo("kinetics-k0301.json");
    endwall(&["compare", &shot, &shot], b"").refused(&["kinetics-k0301.json", "record", "plan/1"]);
    endwall(&["compare", "-", &shot], changed(PLAN, "1650 K", "16500 K").as_bytes()).refused(&["standard input", "target.temperature"]);
    endwall(&["compare", &shot], b"").refused(&["RECORD"]);
}
