//! A quick look without a file.

mod common;

use common::{Run, endwall};
use serde_json::Value;

const FILL: [&str; 5] = ["states", "--pressure", "8 kPa", "--temperature", "296.2 K"];
const NITROGEN: [&str; 4] = ["--heat-capacity-ratio", "7/5", "--molar-mass", "28.0134 g/mol"];

fn argon(options: &[&str]) -> Run {
    endwall(&[&FILL[..], &["--gas", "argon"], options].concat(), b"")
}

fn nitrogen(options: &[&str]) -> Run {
    endwall(&[&FILL[..], &NITROGEN, options].concat(), b"")
}

fn json(run: Run) -> Value {
    serde_json::from_str(&run.good()).unwrap()
}

/// The enclosure holds the number, and so does the pair of doubles around it.
fn holds(quantity: &Value, exact: f64) {
    let [value, low, high] = [&quantity["value"], &quantity["proven"][0], &quantity["proven"][1]].map(|x| x.as_f64().unwrap());
    assert!(low <= exact && exact <= high && low <= value && value <= high, "{quantity} {exact}");
}

#[test]
fn the_exact_cases_of_the_relations_come_out_exactly() {
    // γ 7/5, M 2: p2/p1 9/2, T2/T1 27/16, p5/p1 15, T5/T1 5/2, U_R/a1 1 (Rankine–Hugoniot relations, rational).
    let answer = json(nitrogen(&["--mach", "2", "--json"]));
    holds(&answer["states"]["2"]["pressure"], 36_000.0);
    holds(&answer["states"]["5"]["pressure"], 120_000.0);
    holds(&answer["states"]["5"]["temperature"], 740.5);
    holds(&answer["step"], 112_000.0);
    holds(&answer["reflected_pressure_coefficient"], 4.0);
    assert_eq!(answer["reflected"]["speed"]["value"], answer["states"]["1"]["sound_speed"]["value"]);
    assert!(answer["step"]["standard_uncertainty"].is_null());
    let text = nitrogen(&["--mach", "2"]).good();
    for wanted in ["740.5000000", "120.0000000", "112.0000000", "1.732050808", "4.000000000"] {
        assert!(text.contains(wanted), "{wanted}: {text}");
    }
}

#[test]
fn every_quantity_leads_to_the_same_shock() {
    let shock = json(nitrogen(&["--mach", "3", "--json"]));
    let p5 = &shock["states"]["5"]["pressure"]["value"];
    for (option, value) in
        [("--mach-excess", "2"), ("--pressure-ratio", "31/3"), ("--density-ratio", "27/7"), ("--temperature-ratio", "217/81")]
    {
        assert_eq!(&json(nitrogen(&[option, value, "--json"]))["states"]["5"]["pressure"]["value"], p5, "{option}");
    }
    let read = |pointer: &str| shock.pointer(pointer).unwrap()["value"].to_string();
    let close = |option: &str, typed: String| {
        let mach = json(nitrogen(&[option, &typed, "--json"]))["incident"]["mach"]["value"].as_f64().unwrap();
        assert!((mach - 3.0).abs() < 1e-14, "{option} {typed}: {mach}");
    };
    close("--shock-speed", read("/incident/speed") + " m/s");
    close("--gas-speed", read("/states/2/gas_speed") + " m/s");
    close("--reflected-pressure", read("/states/5/pressure") + " Pa");
    close("--reflected-temperature", read("/states/5/temperature") + " K");
    close("--step", read("/step") + " Pa");
    let over = |pointer: &str, by: f64| (shock.pointer(pointer).unwrap()["value"].as_f64().unwrap() / by).to_string();
    close("--reflected-pressure-ratio", over("/states/5/pressure", 8000.0));
    close("--reflected-temperature-ratio", over("/states/5/temperature", 296.2));
    close("--pressure-rise", format!("{} Pa", shock["states"]["2"]["pressure"]["value"].as_f64().unwrap() - 8000.0));
}

#[test]
fn proven_is_said_of_arithmetic_only() {
    for text in [argon(&["--mach", "3"]).good(), argon(&["--mach", "3..3.1"]).good()] {
        let paragraphs: Vec<&str> = text.split("\n\n").filter(|paragraph| paragraph.to_lowercase().contains("proven")).collect();
        assert!(paragraphs.len() == 1 && paragraphs[0].starts_with("Arithmetic:"), "{text}");
        assert!(text.contains("Caution: for screening only"));
    }
}

#[test]
fn digits_of_the_table_are_those_of_the_enclosure() {
    let answer = json(argon(&["--shock-speed", "950 m/s", "--json"]));
    let text = argon(&["--shock-speed", "950 m/s", "--digits", "7"]).good();
    let temperature = &answer["states"]["5"]["temperature"]["proven"];
    for bound in [&temperature[0], &temperature[1]] {
        let seven = format!("{:.3}", bound.as_f64().unwrap());
        assert!(text.contains(&format!(" {seven}\n")), "{seven}: {text}");
    }
}

#[test]
fn ranges_enclose_their_points() {
    let range = json(argon(&["--shock-speed", "945..955 m/s", "--json"]));
    for speed in ["945 m/s", "950 m/s", "955 m/s"] {
        let point = json(argon(&["--shock-speed", speed, "--json"]));
        for state in ["1", "2", "5"] {
            for name in ["pressure", "temperature", "density", "sound_speed", "gas_speed"] {
                let (outer, inner) = (&range["states"][state][name]["proven"], &point["states"][state][name]["proven"]);
                assert!(outer[0].as_f64() <= inner[0].as_f64() && outer[1].as_f64() >= inner[1].as_f64(), "{state} {name}");
            }
        }
    }
    argon(&["--shock-speed", "955..945 m/s"]).refused(&["--shock-speed", "955..945 m/s", "smaller number first"]);
    assert!(argon(&["--shock-speed", "945 m/s..955 m/s"]).good().contains('['));
}

#[test]
fn a_moving_wall_and_a_gauge_pressure() {
    let rigid = json(argon(&["--mach", "2", "--json"]));
    let moving = json(argon(&["--mach", "2", "--wall-speed", "5 m/s", "--json"]));
    assert!(moving["states"]["5"]["pressure"]["value"].as_f64() < rigid["states"]["5"]["pressure"]["value"].as_f64());
    holds(&moving["states"]["5"]["gas_speed"], 5.0);
    assert!(moving["flags"].to_string().contains("wall-moves"));
    let gauge = ["states", "--gas", "helium", "--pressure", "-90 kPa(g)", "--temperature", "23 degC", "--mach", "2"];
    let answer = json(endwall(&[&gauge[..], &["--ambient", "100 kPa", "--json"]].concat(), b""));
    holds(&answer["states"]["1"]["pressure"], 10_000.0);
    holds(&answer["states"]["1"]["temperature"], 296.15);
    endwall(&gauge, b"").refused(&["--pressure", "-90 kPa(g)", "--ambient"]);
}

#[test]
fn a_yielding_wall() {
    let rigid = json(argon(&["--mach", "2", "--json"]));
    let steel = json(argon(&["--mach", "2", "--wall-impedance", "39.5 MPa s/m", "--json"]));
    let read = |answer: &Value, pointer: &str| answer.pointer(pointer).unwrap()["value"].as_f64().unwrap();
    // The wall moves with the step over its impedance, which the step hardly feels.
    let (speed, step) = (read(&steel, "/states/5/gas_speed"), read(&steel, "/step"));
    assert!(step < read(&rigid, "/step") && step > read(&rigid, "/step") * 0.9999);
    assert!((speed * 39.5e6 / step - 1.0).abs() < 1e-9, "{speed} {step}");
    assert!(read(&steel, "/reflected_pressure_coefficient") < read(&rigid, "/reflected_pressure_coefficient"));
    assert!(steel["flags"].to_string().contains("wall-moves"));
    assert!(argon(&["--mach", "2", "--wall-impedance", "39.5 MPa s/m"]).good().contains("a yielding end wall"));
    for (typed, remedy) in
        [("0 Pa s/m", "greater than zero"), ("-4e7 Pa s/m", "greater than zero"), ("4e7 kg/s", "Pa s/m"), ("4e7", "Pa s/m")]
    {
        argon(&["--mach", "2", "--wall-impedance", typed]).refused(&["--wall-impedance", typed, remedy]);
    }
    argon(&["--mach", "2", "--wall-impedance", "4e7 Pa s/m", "--wall-speed", "1 m/s"]).refused(&["--wall-speed", "--wall-impedance"]);
}

#[test]
fn a_gas_goes_by_its_name_or_its_symbol() {
    let with = |gas: &str| endwall(&[&FILL[..], &["--mach", "2", "--gas", gas]].concat(), b"").good();
    assert_eq!(with("argon"), with("Ar"));
    assert_eq!(with("helium"), with("Helium"));
    assert_ne!(with("neon"), with("Ar"));
}

#[test]
fn limits_of_the_model_are_flagged() {
    let code = |options: &[&str]| json(nitrogen(&[options, &["--json"]].concat()))["flags"].to_string();
    assert_eq!(code(&["--mach", "1.2"]), "[]");
    assert!(code(&["--mach", "3"]).contains("constant-heat-capacity"));
    assert!(code(&["--mach", "40"]).contains("constant-heat-capacity"));
}

#[test]
fn bad_input_is_refused_with_its_option() {
    argon(&["--shock-speed", "300 m/s"]).refused(&["--shock-speed", "300 m/s", "sound speed", "320.54"]);
    for (option, typed, remedy) in [
        ("--mach", "1", "greater than 1"),
        ("--mach", "NaN", "number"),
        ("--mach", "inf", "number"),
        ("--mach", "-2", "greater than"),
        ("--mach", "1e-310", ""),
        ("--mach", "2 m/s", "without a unit"),
        ("--mach", "1e30", "18446744073709552000"),
        ("--mach-excess", "0", "greater than 0"),
        ("--shock-speed", "950", "m/s"),
        ("--shock-speed", "950 K", "m/s"),
        ("--pressure-ratio", "0.5", "greater than 1"),
        ("--pressure-rise", "-5 kPa", "greater than 0"),
        ("--density-ratio", "4", "less than 4"),
        ("--reflected-pressure", "8 kPa", "greater than 8000 Pa"),
        ("--reflected-pressure", "50 kPa(g)", "--ambient"),
        ("--reflected-temperature", "20 degC", "greater than 296.2 K"),
        ("--step", "50 kPa(g)", "leave (g) out"),
        ("--gas-speed", "500 ± 5 m/s", "endwall reduce"),
    ] {
        argon(&[option, typed]).refused(&[option, typed, remedy]);
    }
    argon(&["--mach", "2", "--wall-speed", "fast"]).refused(&["--wall-speed", "fast"]);
    argon(&[]).refused(&["strength", "--shock-speed"]);
    argon(&["--mach", "2", "--step", "5 kPa"]).refused(&["--mach", "--step"]);
    let with = |gas: &[&str], pressure: &str, temperature: &str| {
        endwall(&[&["states", "--mach", "2", "--pressure", pressure, "--temperature", temperature], gas].concat(), b"")
    };
    let helium = ["--gas", "helium"];
    with(&["--gas", "phlogiston"], "8 kPa", "296 K").refused(&["--gas", "phlogiston", "unknown", "built in are Ar, "]);
    with(&[], "8 kPa", "296 K").refused(&["--gas"]);
    with(&["--heat-capacity-ratio", "7/5"], "8 kPa", "296 K").refused(&["--molar-mass"]);
    with(&["--heat-capacity-ratio", "1.667", "--molar-mass", "40 g/mol"], "8 kPa", "296 K").refused(&[
        "1.667",
        "5/3",
        "--confirm heat-capacity-ratio",
    ]);
    with(&helium, "8 kPa", "23 K").refused(&["--temperature", "23 K", "was 23 degC meant?", "--confirm temperature"]);
    with(&helium, "8 kPa", "2300 K").refused(&["--temperature", "2300 K", "--confirm temperature"]);
    with(&helium, "0 kPa", "296 K").refused(&["--pressure", "0 kPa"]);
    with(&helium, "-8 kPa", "296 K").refused(&["--pressure", "-8 kPa", "gauge"]);
    with(&helium, "8 ± 1 kPa", "296 K").refused(&["--pressure", "8 ± 1 kPa", "endwall reduce"]);
    with(&helium, "", "296 K").refused(&["--pressure"]);
    with(&[&helium[..], &["--confirm", "temperature"]].concat(), "8 kPa", "23 K").good();
}
