use super::super::Plan;
use super::super::plan_report::PlanReport;
use alloc::format;
use alloc::string::{String, ToString};

/// A plan for nitrogen (T5 1100 K: Mach 2.5) with a driver.
fn plan(driver: &str, bore: &str) -> String {
    format!(
        r#"{{ "record": "plan/1", "gas": {{ "N2": "balance" }}, "heat_capacity": "equilibrium", "temperature": "295 K",
        "target": {{ "temperature": "1100 K", "pressure": "200 kPa(a)" }}, "driver": {driver},
        "tube": {{ "driven_length": "6 m", "driver_length": "3 m", "driven_bore": "80 mm", "driver_bore": "{bore}" }} }}"#
    )
}

fn report(driver: &str) -> PlanReport {
    Plan::read(plan(driver, "80 mm").as_bytes()).and_then(|plan| plan.report()).unwrap_or_else(|error| panic!("{error}"))
}

fn refusal(driver: &str, bore: &str) -> String {
    Plan::read(plan(driver, bore).as_bytes()).and_then(|plan| plan.report()).unwrap_err().to_string()
}

fn flagged(report: &PlanReport, code: &str) -> bool {
    report.flags.iter().any(|flag| flag.code == code)
}

#[test]
fn a_hot_driver_follows_its_heat_capacity() {
    let gas = r#""gas": { "N2": "balance" }, "temperature": "1500 K""#;
    let own = report(&format!("{{ {gas}, \"heat_capacity\": \"equilibrium\" }}"));
    let constant = report(&format!("{{ {gas}, \"heat_capacity\": \"constant\" }}"));
    let silent = report(&format!("{{ {gas} }}"));
    let p4 = |report: &PlanReport| report.fill.p4.clone().unwrap();
    // γ rises as the gas expands, which makes less than a per cent here.
    let difference = p4(&own).value / p4(&constant).value - 1.0;
    assert!(difference.abs() > 1e-5 && difference.abs() < 1e-2, "{difference}");
    assert!(p4(&own).proven.is_some_and(|[low, high]| high > low && high / low - 1.0 < 1e-15));
    // The fan is drawn with the heat capacity at T4, and says so.
    assert!(flagged(&own, "driver-expansion") && !flagged(&constant, "driver-expansion"));
    let (of_own, of_constant) = (own.test_time.unwrap(), constant.test_time.as_ref().unwrap());
    assert!(of_own.end_wall.proven.is_none() && of_constant.end_wall.proven.is_some());
    assert!((of_own.end_wall.value / of_constant.end_wall.value - 1.0).abs() < 0.02);
    assert_eq!(p4(&silent), p4(&constant));
    assert!(flagged(&silent, "driver-heat-capacity") && !flagged(&constant, "driver-heat-capacity"));
    assert!(own.flags.iter().all(|flag| flag.code != "driver-heat-capacity" && flag.code != "returned-wave"));
}

#[test]
fn atoms_need_no_choice() {
    let helium = report(r#"{ "gas": { "He": "balance" }, "temperature": "295 K" }"#);
    assert!(!flagged(&helium, "driver-heat-capacity"));
    // Helium by its polynomial is the same gas.
    let followed = report(r#"{ "gas": { "He": "balance" }, "temperature": "800 K", "heat_capacity": "equilibrium" }"#);
    let constant = report(r#"{ "gas": { "He": "balance" }, "temperature": "800 K" }"#);
    let [own, other] = [&followed, &constant].map(|report| report.fill.p4.as_ref().unwrap().value);
    assert!((own / other - 1.0).abs() < 1e-9, "{own} {other}");
}

#[test]
fn what_a_driver_cannot_follow_is_refused() {
    let cold = r#"{ "gas": { "N2": "balance" }, "temperature": "295 K", "heat_capacity": "equilibrium" }"#;
    let hot = cold.replace("295", "1500");
    for (driver, bore, names) in [
        (cold, "80 mm", ["known down to 200 K", "\"heat_capacity\": \"constant\""]),
        (hot.as_str(), "100 mm", ["change of area", "\"heat_capacity\": \"constant\""]),
        (&cold.replace("equilibrium", "frozen"), "80 mm", ["driver.heat_capacity", "\"constant\" or \"equilibrium\""]),
        (
            r#"{ "gas": { "heat_capacity_ratio": "7/5", "molar_mass": "28 g/mol" }, "temperature": "295 K", "heat_capacity": "equilibrium" }"#,
            "80 mm",
            ["driver.heat_capacity", "give species"],
        ),
    ] {
        let error = refusal(driver, bore);
        for name in names {
            assert!(error.contains(name), "{name} is not in: {error}");
        }
    }
}

#[test]
fn a_driver_gas_that_condenses_is_refused() {
    let carbon_dioxide = r#"{ "gas": { "CO2": "balance" }, "temperature": "250 K" }"#;
    // 18 bar at 250 K (from memory); the shock wants more of so heavy a gas.
    let error = refusal(carbon_dioxide, "80 mm");
    for name in ["driver.gas.CO2", "would condense", "in the driver", "take another driver gas"] {
        assert!(error.contains(name), "{name} is not in: {error}");
    }
}

#[test]
fn a_narrow_driver_and_one_bore_alone_are_named() {
    let helium = r#"{ "gas": { "He": "balance" }, "temperature": "295 K" }"#;
    let error = refusal(helium, "79.9 mm");
    assert!(error.contains("tube.driver_bore") && error.contains("79.9 mm") && error.contains("narrower"), "{error}");
    let one = plan(helium, "80 mm").replace("\"driven_bore\": \"80 mm\", ", "");
    let one = Plan::read(one.as_bytes()).and_then(|plan| plan.report()).unwrap();
    assert!(flagged(&one, "one-bore") && !flagged(&report(helium), "one-bore"));
}

#[test]
fn what_a_plan_does_not_use_or_assumes_is_said() {
    let helium = r#"{ "gas": { "He": "balance" }, "temperature": "295 K" }"#;
    let planned = |from: &str, to: &str| {
        let file = plan(helium, "80 mm");
        assert!(file.contains(from), "{from}");
        Plan::read(file.replacen(from, to, 1).as_bytes()).and_then(|plan| plan.report())
    };
    let plain = report(helium);
    // No ambient pressure, but a bore: the load on the end wall counts from some pressure.
    assert!(flagged(&plain, "ambient-assumed") && !flagged(&plain, "target-exact") && !flagged(&plain, "not-used"));
    let ambient = planned("\"target\"", "\"ambient\": \"98 kPa\", \"target\"").unwrap();
    assert!(!flagged(&ambient, "ambient-assumed"));
    assert!(flagged(&planned("\"1100 K\"", "\"1100 ± 20 K\"").unwrap(), "target-exact"));
    assert!(flagged(&planned("\"295 K\" },", "\"295 K\", \"pressure\": \"5 bar(a)\" },").unwrap(), "not-used"));
    for (stations, said) in [("\"6.5 m\"", "only 6 m long"), ("\"-1 m\"", "not negative")] {
        let error = planned("\"driven_bore\"", &format!("\"stations\": [{stations}], \"driven_bore\"")).unwrap_err().to_string();
        assert!(error.contains("tube.stations[0]") && error.contains(said), "{error}");
    }
}

#[test]
fn a_plan_says_what_would_be_tailored() {
    // Helium at 295 K tailors Mach 3.314 in nitrogen (an independent calculation with the same data).
    let helium = report(r#"{ "gas": { "He": "balance" }, "temperature": "295 K" }"#);
    let tailoring = helium.tailoring.as_ref().unwrap();
    let mach = tailoring.tailored_mach.as_ref().unwrap();
    assert!((mach.value - 3.314).abs() < 1e-3 && mach.proven.is_some(), "{mach:?}");
    assert!(tailoring.returned == "expansion" && tailoring.tailored_blend.is_none());
    let after = tailoring.end_wall_pressure.as_ref().unwrap().value;
    assert!(after < tailoring.contact_pressure.as_ref().unwrap().value && after > helium.states.incident.pressure.value);
    // The blend that tailors this shock: planned with it, hardly anything comes back.
    let blend =
        |fraction: &str| report(&format!("{{ \"gas\": {{ \"He\": \"{fraction}\", \"Ar\": \"balance\" }}, \"temperature\": \"295 K\" }}"));
    let first = blend("0.5").tailoring.unwrap().tailored_blend.unwrap();
    assert!(first.gas == "He" && first.fraction.value > 0.1 && first.fraction.value < 1.0, "{first:?}");
    let tailored = blend(&format!("{:.9}", first.fraction.value));
    let (five, after) = (tailored.states.reflected.pressure.value, tailored.tailoring.unwrap().end_wall_pressure.unwrap().value);
    assert!((after / five - 1.0).abs() < 1e-6, "{after} {five}");
    let text = Plan::read(plan(r#"{ "gas": { "He": "balance" }, "temperature": "295 K" }"#, "80 mm").as_bytes()).unwrap();
    let text = text.report().unwrap().to_text(&text);
    assert!(text.contains("under-tailored: an expansion comes back") && text.contains("Mach number that this driver tailors"), "{text}");
}
