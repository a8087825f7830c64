//! Plans from record files.

mod common;

use common::{Run, changed, endwall};
use serde_json::Value;

const PLAN: &str = include_str!("../../records/plan-k0300.json");

fn plan(record: &str, options: &[&str]) -> Run {
    endwall(&[&["plan", "-"], options].concat(), record.as_bytes())
}

fn json(record: &str) -> Value {
    serde_json::from_str(&plan(record, &["--json"]).good()).unwrap()
}

fn keys(object: &Value) -> Vec<&str> {
    object.as_object().unwrap().keys().map(String::as_str).collect()
}

#[test]
fn the_json_object_has_these_keys() {
    let report = json(PLAN);
    let mut found = keys(&report);
    found.sort_unstable();
    let mut wanted = [
        "limits",
        "fill",
        "filling",
        "incident",
        "states",
        "reflected",
        "step",
        "heat_capacity",
        "first_station_speed",
        "tailoring",
        "test_time",
        "boundary_layer",
        "bifurcation",
        "waves",
        "end_load",
        "stored_energy",
        "flags",
        "made_by",
    ];
    wanted.sort_unstable();
    assert_eq!(found, wanted);
    for (object, wanted) in [
        ("/fill", &["p1", "p4", "p4_band"][..]),
        ("/incident", &["attenuation", "mach", "speed"]),
        ("/filling", &["can_burn", "departure", "residual", "steps", "temperature", "vessel"]),
        ("/filling/steps/0", &["fraction", "gas", "gauge_reading", "partial_pressure", "reading"]),
        ("/filling/residual", &["fraction", "pressure"]),
        ("/states", &["1", "2", "5"]),
        ("/reflected", &["mach", "speed"]),
        ("/tailoring", &["contact_pressure", "end_wall_pressure", "returned", "tailored_blend", "tailored_mach"]),
        ("/test_time", &["cause", "disturbance_tolerance", "end_wall", "observed", "returned_wave", "shortest_driver"]),
        ("/test_time/observed", &["cause", "from_end_wall", "time"]),
        ("/boundary_layer", &["contact_wave", "separation", "uniform_time", "viscosity"]),
        ("/boundary_layer/separation", &["laminar", "turbulent", "without"]),
        ("/boundary_layer/viscosity", &["1", "2", "source"]),
        ("/bifurcation", &["bifurcates", "stagnation_over_reflected", "wall_layer_mach"]),
        ("/waves/0", &["from", "name", "to"]),
        ("/flags/0", &["code", "text"]),
        ("/limits/0", &["exceeded", "load", "part", "pressure", "rating"]),
        ("/fill/p1", &["coverage_factor", "expanded", "proven", "standard_uncertainty", "unit", "value"]),
    ] {
        let mut found = keys(report.pointer(object).unwrap());
        found.sort_unstable();
        assert_eq!(found, wanted, "{object}");
    }
    for (path, unit) in
        [("/fill/p1", "Pa"), ("/fill/p4", "Pa"), ("/test_time/end_wall", "s"), ("/test_time/observed/time", "s"), ("/step", "Pa")]
    {
        assert_eq!(report.pointer(path).unwrap()["unit"], unit, "{path}");
    }
    // Absent is null.
    let bare: String = PLAN.lines().filter(|line| !line.starts_with("  \"driver\":")).collect();
    let bare = json(&bare);
    assert!(bare["fill"]["p4"].is_null() && bare["test_time"].is_null());
    assert_eq!(bare["waves"], serde_json::json!([]));
    let narrow = json(&changed(PLAN, "\"driven_bore\": \"81.0 mm\",", ""));
    assert!(narrow["boundary_layer"].is_null() && !narrow["bifurcation"].is_null());
}

/// What `plan` says to set, given to `reduce`, is the state that was wanted.
#[test]
fn a_planned_shot_reduces_to_the_target() {
    let report = json(PLAN);
    let number = |path: &str| report.pointer(path).unwrap().as_f64().unwrap();
    let shot = serde_json::json!({
        "record": "shot/1",
        "gas": { "CH4": "0.40 %", "O2": "0.80 %", "Ar": "balance" },
        "heat_capacity": "equilibrium",
        "fill": { "pressure": format!("{} Pa", number("/fill/p1/value")), "temperature": "296.0 K" },
        "shock_speed": format!("{} m/s", number("/incident/speed/value")),
    });
    let reduced: Value = serde_json::from_str(&common::reduce(&shot.to_string(), &["--json"]).good()).unwrap();
    for (path, wanted) in [("/states/5/temperature/value", 1650.0), ("/states/5/pressure/value", 2e5)] {
        let found = reduced.pointer(path).unwrap().as_f64().unwrap();
        assert!((found / wanted - 1.0).abs() < 1e-13, "{path} {found}");
    }
}

/// Four figures of a driver pressure in the unit of the target, and safety before every pressure that is to be set.
#[test]
fn the_text_is_for_the_person_at_the_valves() {
    let text = plan(PLAN, &[]).good();
    let line = |text: &str, start: &str| {
        let found = text.lines().find(|line| line.trim_start().starts_with(start)).unwrap_or_else(|| panic!("{start}: {text}"));
        found.to_string()
    };
    let report = json(PLAN);
    let p4 = report["fill"]["p4"]["value"].as_f64().unwrap();
    assert!(line(&text, "Driver pressure p4").ends_with(&format!(" {:.3} bar", p4 / 1e5)), "{text}");
    // A gauge at 101.3 kPa.
    assert!(line(&text, "on a gauge").ends_with(&format!(" {:.4} bar", (p4 - 101.3e3) / 1e5)), "{text}");
    assert!(line(&text, "Driven fill p1").contains(" ± ") && line(&text, "Driven fill p1").ends_with(" bar"));
    assert!(line(&text, "Uniform time at the end wall").contains(" ms, ended when the head of the expansion arrives"));
    let words: Vec<&str> = text.split_whitespace().collect();
    assert!(words.join(" ").contains("No number here authorises a shot."));
    assert_eq!(text.matches("[can-burn]").count(), 1);
    let exceeded = plan(&changed(PLAN, "25 bar(g)", "0.8 bar(g)"), &[]).good();
    let place = |words: &str| exceeded.find(words).unwrap_or_else(|| panic!("{words}: {exceeded}"));
    assert!(place("[rating-exceeded]") < place("Driven fill p1") && place("EXCEEDED: do not fire") < place("Driven fill p1"));
    assert_eq!(line(&exceeded, "window").split_whitespace().last(), Some("fire"));
    // Pascals are shown as kPa.
    let metric = plan(&changed(PLAN, "2.00 bar(a)", "200 kPa"), &[]).good();
    assert!(line(&metric, "Driver pressure p4").ends_with(&format!(" {:.1} kPa", p4 / 1e3)), "{metric}");
}

#[test]
fn bad_plans_end_with_exit_code_2() {
    let refuse = |from: &str, to: &str, names: &[&str]| plan(&changed(PLAN, from, to), &[]).refused(names);
    refuse("plan/1", "shot/1", &["standard input", "record", "plan/1"]);
    refuse("\"pressure\": \"2.00 bar(a)\"", "\"pressure\": \"2.00\"", &["target.pressure", "2.00", "unit"]);
    refuse(", \"pressure\": \"2.00 bar(a)\"", "", &["target", "a step with a fill pressure"]);
    refuse("40 bar(g)", "40 bar", &["tube.ratings.driven", "bar(g) or bar(a)"]);
    refuse(", \"temperature\": \"296 K\" }", " }", &["driver.temperature", "295 K"]);
    refuse("\"He\"", "\"Xe\"", &["driver", "Mach", "at most", "lighter driver gas"]);
    refuse("1650 K", "16500 K", &["target.temperature", "16500 K", "6000 K"]);
    refuse("\"tolerance\"", "\"tolerances\"", &["tolerances"]);
    plan("{", &[]).refused(&["standard input"]);
    endwall(&["plan", "no/such/plan.json"], b"").refused(&["no/such/plan.json", "cannot be read"]);
}
