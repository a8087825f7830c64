//! A quick look at gases given by their species.

mod common;

use common::{Run, endwall};
use endwall::record::Shot;
use serde_json::Value;

const FILL: [&str; 5] = ["states", "--pressure", "8 kPa", "--temperature", "296.2 K"];
const MIXTURE: &str = "CH4 0.5 %, O2 1 %, Ar balance";

fn states(options: &[&str]) -> Run {
    endwall(&[&FILL[..], options].concat(), b"")
}

fn json(options: &[&str]) -> Value {
    serde_json::from_str(&states(&[options, &["--json"]].concat()).good()).unwrap()
}

fn codes(answer: &Value) -> Vec<&str> {
    answer["flags"].as_array().unwrap().iter().map(|flag| flag["code"].as_str().unwrap()).collect()
}

/// What the library answers for the same record.
fn report(gas: &str, heat_capacity: &str) -> Value {
    let record = format!(
        r#"{{ "record": "shot/1", "gas": {gas}, "heat_capacity": "{heat_capacity}",
        "fill": {{ "pressure": "8 kPa", "temperature": "296.2 K" }}, "shock_speed": "950 m/s" }}"#
    );
    serde_json::from_str(&Shot::read(record.as_bytes()).unwrap().reduce().unwrap().to_json().unwrap()).unwrap()
}

#[test]
fn a_mixture_has_the_states_of_its_record() {
    for (option, choice) in [
        ("constant", "constant"),
        ("equilibrium", "equilibrium"),
        ("frozen", "frozen"),
        ("frozen then equilibrium", "frozen then equilibrium"),
        ("frozen-then-equilibrium", "frozen then equilibrium"),
    ] {
        let answer = json(&["--gas", MIXTURE, "--heat-capacity", option, "--shock-speed", "950 m/s"]);
        let report = report(r#"{ "CH4": "0.5 %", "O2": "1 %", "Ar": "balance" }"#, choice);
        for part in ["incident", "states", "reflected", "step", "heat_capacity"] {
            assert_eq!(answer[part], report[part], "{choice} {part}");
        }
        assert_eq!(answer["made_by"]["gas_data"], "NASA/TP-2002-211556, composition taken as exact");
        assert!(!codes(&answer).contains(&"heat-capacity-not-chosen"));
    }
}

#[test]
fn a_gas_may_be_typed_in_several_ways() {
    let with = |gas: &[&str]| states(&[gas, &["--shock-speed", "950 m/s"]].concat()).good();
    let whole = with(&["--gas", MIXTURE]);
    assert_eq!(with(&["--gas", "CH4 0.5 %", "--gas", "O2 1 %, argon balance"]), whole);
    assert_eq!(with(&["--gas", "methane 5000 ppm,O2 0.01", "--gas", "Ar balance"]), whole);
    assert_eq!(with(&["--gas", "nitrogen"]), with(&["--gas", "N2 100 %"]));
    let air = json(&["--gas", "air", "--shock-speed", "950 m/s"]);
    assert_eq!(air["states"], report(r#"{ "air": "balance" }"#, "equilibrium")["states"]);
}

#[test]
fn without_a_choice_it_is_equilibrium_and_said_so() {
    let answer = json(&["--gas", MIXTURE, "--mach", "3"]);
    assert_eq!(
        (answer["heat_capacity"]["chosen"].as_str(), codes(&answer)),
        (Some("equilibrium"), vec!["can-burn", "heat-capacity-not-chosen"])
    );
    assert!(answer["flags"][1]["text"].as_str().unwrap().starts_with("no --heat-capacity is given: vibration is taken as in equilibrium"));
    // Atoms have one heat capacity, and the closed forms.
    let atoms = json(&["--gas", "He 10 %, Ar balance", "--mach", "3"]);
    assert_eq!((atoms["heat_capacity"]["chosen"].as_str(), codes(&atoms)), (Some("constant"), vec![]));
    let text = states(&["--gas", MIXTURE, "--mach", "3"]).good();
    // What can burn is said before the first pressure, the choices stand beside.
    assert!(text.find("[can-burn]").unwrap() < text.find("pressure, kPa").unwrap(), "{text}");
    for choice in ["constant  ", "equilibrium  ", "frozen  ", "frozen then equilibrium  "] {
        assert!(text.lines().any(|line| line.starts_with(choice)), "{choice}: {text}");
    }
    assert!(text.contains("vibrational relaxation time") && text.contains("heat capacity equilibrium, normal shock"));
    assert!(text.lines().all(|line| line.chars().count() <= 110), "{text}");
}

#[test]
fn every_quantity_leads_to_the_same_shock() {
    let gas = ["--gas", "N2", "--heat-capacity", "equilibrium"];
    let with = |options: &[&str]| json(&[&gas[..], options].concat());
    let shock = with(&["--mach", "3"]);
    let number = |pointer: &str| shock.pointer(pointer).unwrap()["value"].as_f64().unwrap();
    let (p1, t1) = (8000.0, 296.2);
    for (option, typed) in [
        ("--mach-excess", "2".to_string()),
        ("--shock-speed", format!("{} m/s", number("/incident/speed"))),
        ("--pressure-ratio", (number("/states/2/pressure") / p1).to_string()),
        ("--pressure-rise", format!("{} Pa", number("/states/2/pressure") - p1)),
        ("--temperature-ratio", (number("/states/2/temperature") / t1).to_string()),
        ("--gas-speed", format!("{} m/s", number("/states/2/gas_speed"))),
        ("--reflected-pressure", format!("{} Pa", number("/states/5/pressure"))),
        ("--reflected-pressure-ratio", (number("/states/5/pressure") / p1).to_string()),
        ("--step", format!("{} Pa", number("/step"))),
        ("--reflected-temperature", format!("{} K", number("/states/5/temperature"))),
        ("--reflected-temperature-ratio", (number("/states/5/temperature") / t1).to_string()),
    ] {
        let mach = with(&[option, &typed])["incident"]["mach"]["value"].as_f64().unwrap();
        assert!((mach - 3.0).abs() < 1e-13, "{option} {typed}: {mach}");
    }
}

#[test]
fn ranges_enclose_their_points() {
    let with = |temperature: &str, speed: &str| {
        let options =
            ["states", "--gas", "N2", "--pressure", "7.9..8.1 kPa", "--temperature", temperature, "--shock-speed", speed, "--json"];
        serde_json::from_str::<Value>(&endwall(&options, b"").good()).unwrap()
    };
    let range = with("295..297 K", "945..955 m/s");
    let bounds = |answer: &Value, pointer: &str| [0, 1].map(|end| answer.pointer(pointer).unwrap()["proven"][end].as_f64().unwrap());
    for pointer in ["/states/2/temperature", "/states/5/temperature", "/states/5/pressure", "/step", "/reflected/mach", "/incident/mach"] {
        let [low, high] = bounds(&range, pointer);
        let mut hull = [f64::INFINITY, f64::NEG_INFINITY];
        for (temperature, speed) in
            [("295 K", "945 m/s"), ("295 K", "955 m/s"), ("297 K", "945 m/s"), ("297 K", "955 m/s"), ("296 K", "950 m/s")]
        {
            let [inner_low, inner_high] = bounds(&with(temperature, speed), pointer);
            assert!(low <= inner_low && inner_high <= high, "{pointer} {temperature} {speed}");
            hull = [hull[0].min(inner_low), hull[1].max(inner_high)];
        }
        // Corners reach the ends, as these outputs are monotonic here: the range is hardly wider.
        assert!(high - low < 1.1 * (hull[1] - hull[0]), "{pointer}: {low} {high} {hull:?}");
    }
    // What the other choices would give at one shock speed does not stand beside a range of them.
    assert!(range["heat_capacity"]["beside"].as_array().unwrap().is_empty());
    assert!(!range["flags"].to_string().contains("stand beside"));
    states(&["--gas", "N2", "--reflected-temperature", "1400..1500 K"]).refused(&[
        "--reflected-temperature",
        "1400..1500 K",
        "one exact value",
    ]);
    states(&["--gas", "N2", "--shock-speed", "955..945 m/s"]).refused(&["--shock-speed", "smaller number first"]);
}

#[test]
fn a_wall_that_is_not_rigid() {
    let gas = ["--gas", "N2", "--heat-capacity", "frozen", "--mach", "2"];
    let pressure = |options: &[&str]| {
        let answer = json(&[&gas[..], options].concat());
        (answer["states"]["5"]["pressure"]["value"].as_f64().unwrap(), answer)
    };
    let (rigid, answer) = pressure(&[]);
    assert_eq!(answer["states"]["5"]["gas_speed"]["value"], 0.0);
    let (moving, answer) = pressure(&["--wall-speed", "5 m/s"]);
    assert!(moving < rigid && answer["states"]["5"]["gas_speed"]["value"] == 5.0 && codes(&answer) == ["wall-moves"], "{answer}");
    let (yielding, answer) = pressure(&["--wall-impedance", "39.5 MPa s/m"]);
    let speed = answer["states"]["5"]["gas_speed"]["value"].as_f64().unwrap();
    assert!(yielding < rigid && (speed * 39.5e6 / (yielding - 8000.0) - 1.0).abs() < 1e-9, "{speed}");
    // Faster than the gas, which expands behind it.
    let (receding, answer) = pressure(&["--wall-speed", "900 m/s"]);
    assert!(receding < answer["states"]["2"]["pressure"]["value"].as_f64().unwrap() && codes(&answer) == ["wall-moves"], "{answer}");
    assert!(answer["reflected"]["mach"]["value"] == 1.0);
    let nitrogen = ["--gas", "N2", "--heat-capacity", "equilibrium", "--mach", "2", "--wall-speed", "3000 m/s"];
    states(&nitrogen).refused(&["--wall-speed", "3000 m/s", "200 K"]);
}

#[test]
fn bad_gases_are_refused_with_their_option() {
    let refused = |gas: &str, names: &[&str]| states(&["--gas", gas, "--mach", "2"]).refused(&[&["--gas", gas], names].concat());
    refused("co2", &["co2: this species is unknown", "was CO2 meant?", "endwall gases"]);
    refused("CH4 0,5 %, Ar balance", &["write the species first", "a point"]);
    refused("CH4 0.5 %, Ar 90 %", &["sum to 0.905", "balance"]);
    refused("CH4 150 %, Ar balance", &["CH4: a fraction is one at most"]);
    refused("CH4 0.5, Ar balance, He balance", &["Ar is the balance already"]);
    refused("CH4 1 kPa, Ar balance", &["kPa is the unit of a pressure"]);
    refused("CH4, Ar balance", &["CH4 has no fraction"]);
    refused("Ar, Ar", &["Ar has no fraction"]);
    refused("Ar 1..2 %, He balance", &["range of fractions"]);
    states(&["--gas", "CH4 1.0 ± 0.1 %, Ar balance", "--mach", "2"]).refused(&["--gas", "1.0 ± 0.1 %", "endwall reduce"]);
    states(&["--gas", "N2", "--heat-capacity", "frosen", "--mach", "2"]).refused(&[
        "--heat-capacity",
        "frosen",
        "\"frozen then equilibrium\"",
    ]);
    states(&["--heat-capacity", "frozen", "--mach", "2"]).refused(&["--gas"]);
    let ratio = ["--heat-capacity-ratio", "7/5", "--molar-mass", "28 g/mol", "--mach", "2"];
    states(&[&ratio[..], &["--gas", "N2"]].concat()).refused(&["--gas", "--heat-capacity-ratio"]);
    states(&["--mach", "2"]).refused(&["no gas is given", "--gas", "--heat-capacity-ratio"]);
}

#[test]
fn what_the_relations_refuse_names_the_option() {
    let nitrogen = |options: &[&str]| states(&[&["--gas", "N2"], options].concat());
    nitrogen(&["--shock-speed", "300 m/s"]).refused(&["--shock-speed", "300 m/s", "sound speed of the fill", "350.77"]);
    nitrogen(&["--mach", "1"]).refused(&["--mach", "greater than 1"]);
    nitrogen(&["--mach-excess", "0"]).refused(&["--mach-excess", "greater than 0"]);
    nitrogen(&["--density-ratio", "3.9"]).refused(&["--density-ratio", "3.9", "does not fix one shock", "give the shock speed"]);
    nitrogen(&["--reflected-temperature", "20 degC"]).refused(&["--reflected-temperature", "20 degC"]);
    nitrogen(&["--shock-speed", "20000 m/s"]).refused(&["--shock-speed", "200 K to 20000 K", "not extrapolated"]);
    states(&["--gas", MIXTURE, "--reflected-temperature", "6500 K"]).refused(&["--reflected-temperature", "6500 K", "6000 K"]);
    let cold = ["states", "--pressure", "8 kPa", "--temperature", "150 K", "--gas", "N2", "--mach", "2"];
    endwall(&cold, b"").refused(&["--temperature", "150 K", "200 K to 20000 K"]);
}

#[test]
fn weak_shocks_have_an_answer_though_other_choices_have_none() {
    let answer = json(&["--gas", "N2", "--mach-excess", "1e-9"]);
    let rise = answer["states"]["5"]["pressure"]["value"].as_f64().unwrap() / 8000.0 - 1.0;
    // (p5 − p1)/p1 → 2 · 2γ/(γ + 1) (M² − 1), γ 7/5 to 0.1 %.
    assert!((rise / (2.0 * 2.8 / 2.4 * 2e-9) - 1.0).abs() < 2e-3, "{rise}");
    assert!(states(&["--gas", "N2", "--mach-excess", "1e-9"]).good().contains("no answer"));
}
