use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::*;
use crate::gas::{Fill, Gas, HeatCapacityRatio};
use crate::number::Rational;
use crate::record::{Plan, PlanReport};
use crate::tube::{BoundaryLayer, Driver, LayerBand, lennard_jones};

/// γ 7/5 at 300 K.
const DIATOMIC: &str = r#"{ "heat_capacity_ratio": "7/5", "molar_mass": "28.014 g/mol" }"#;
const LONG: &str = r#""tube": { "driven_length": "6 m", "driver_length": "40 m", "driven_bore": "80 mm", "observe": "20 mm" }"#;
const HELIUM: &str = r#""driver": { "gas": { "He": "balance" }, "temperature": "300 K" }"#;

fn plan_of(gas: &str, temperature: f64, rest: &str) -> String {
    format!(
        r#"{{ "record": "plan/1", "gas": {gas}, "heat_capacity": "constant", "temperature": "300 K", "ambient": "100 kPa",
        "target": {{ "temperature": "{temperature} K", "pressure": "150 kPa" }}, {rest} }}"#
    )
}

fn shot_of(gas: &str, rest: &str) -> String {
    format!(
        r#"{{ "record": "shot/1", "gas": {gas}, "heat_capacity": "constant",
        "fill": {{ "pressure": "10 kPa", "temperature": "300 K" }}, {rest} }}"#
    )
}

fn planned(file: &str) -> PlanReport {
    Plan::read(file.as_bytes()).and_then(|plan| plan.report()).unwrap_or_else(|error| panic!("{error}\n{file}"))
}

fn text_of(file: &str) -> String {
    let plan = Plan::read(file.as_bytes()).unwrap();
    plan.report().unwrap().to_text(&plan).split_whitespace().collect::<Vec<_>>().join(" ")
}

fn reduced(file: &str) -> Report {
    Shot::read(file.as_bytes()).and_then(|shot| shot.reduce()).unwrap_or_else(|error| panic!("{error}\n{file}"))
}

fn refused(file: &str, names: &[&str]) {
    let found = if file.contains("plan/1") { Plan::read(file.as_bytes()).map(|_| ()) } else { Shot::read(file.as_bytes()).map(|_| ()) };
    let error = found.expect_err(file).to_string();
    for name in names {
        assert!(error.contains(name), "\"{name}\" is not in: {error}");
    }
}

fn flagged<'a>(flags: &'a [Flag], code: &str) -> Option<&'a str> {
    flags.iter().find(|flag| flag.code == code).map(|flag| flag.text.as_str())
}

fn close(found: f64, expected: f64, relative: f64) {
    assert!((found / expected - 1.0).abs() <= relative, "{found} {expected}");
}

/// a1 of that gas, m/s, with the gas constant of the SI.
fn sound_speed() -> f64 {
    (1.4 * 8.314_462_618_153_24 * 300.0 / 0.028_014_f64).sqrt()
}

/// T5 (K) from 300 K at a Mach number, NACA Report 1135 with the reflected shock.
fn reflected(ratio: f64, mach: f64) -> f64 {
    let square = mach * mach;
    let (first, second) = (2.0 * (ratio - 1.0) * square + 3.0 - ratio, (3.0 * ratio - 1.0) * square - 2.0 * (ratio - 1.0));
    300.0 * first * second / ((ratio + 1.0) * (ratio + 1.0) * square)
}

/// At Mach 2, in units of a1: u2 5/4, `U_R` 1, a5 √(5/2). The reflected shock meets the contact surface a sixth of the driven length from the end wall.
#[test]
fn the_uniform_time_is_that_of_the_wave_diagram_at_the_wall_and_at_the_place_that_is_observed() {
    let report = planned(&plan_of(DIATOMIC, 750.0, &format!("{LONG}, {HELIUM}")));
    let time = report.test_time.as_ref().unwrap();
    let per_metre = (1.0 + 1.0 / 2.5_f64.sqrt()) / sound_speed();
    close(time.end_wall.value, per_metre, 1e-12);
    assert!(time.end_wall.proven.is_some());
    assert_eq!(time.cause, "the wave returned from the contact surface arrives");
    let observed = time.observed.as_ref().unwrap();
    assert_eq!(observed.from_end_wall, 0.02);
    close(observed.time.value, 0.98 * per_metre, 1e-12);
    assert_eq!(observed.cause, time.cause);
    let wave = time.returned_wave.as_ref().unwrap();
    close(wave.arrival, per_metre, 1e-12);
    assert!(wave.kind == "expansion" && wave.counts && time.disturbance_tolerance == 0.0);
    // Beyond the place where the reflected shock meets the contact surface there is no state 5.
    let far = planned(&plan_of(DIATOMIC, 750.0, &format!("{}, {HELIUM}", LONG.replace("20 mm", "1.5 m"))));
    let beyond = far.test_time.unwrap().observed.unwrap();
    assert!(beyond.time.value == 0.0 && beyond.cause == "the contact surface stops the reflected shock before this station");
    let text = text_of(&plan_of(DIATOMIC, 750.0, &format!("{LONG}, {HELIUM}")));
    assert!(text.contains("Uniform time 20.0 mm from the end wall 4.53 ms, ended when the wave returned"), "{text}");
}

/// Helium at the temperature of the test gas is tailored at Mach 3.34 (docs of `tailored_mach`).
#[test]
fn a_weak_wave_does_not_end_the_time_and_is_named() {
    let file = |mach: f64, rest: &str| plan_of(DIATOMIC, reflected(1.4, mach), &format!("{LONG}, {HELIUM}{rest}"));
    let all = planned(&file(3.3, "")).test_time.unwrap();
    let wave = all.returned_wave.clone().unwrap();
    // The strength by the library.
    let helium = Gas::new(HeatCapacityRatio::ratio(5, 3).unwrap(), 0.004_002_602).unwrap();
    let exact = |text: &str| text.parse::<Rational>().unwrap();
    let gas = Gas::new(HeatCapacityRatio::ratio(7, 5).unwrap(), exact("0.028014")).unwrap();
    let fill = Fill::new(gas, 10e3, 300.0).unwrap();
    let behind = TestGas::from(&fill).behind(Entry::Mach, 3.3).unwrap();
    let met = Contact::new(&behind, &Driver::new(helium, 300.0).unwrap().for_shock(&behind).unwrap()).interaction().unwrap();
    let p5 = crate::shock::Incident::new(&fill, Entry::Mach, 3.3).unwrap().state_5().pressure.middle();
    let change = met.end_wall_pressure.middle() / p5 - 1.0;
    assert!((wave.pressure_change.unwrap() - change).abs() < 1e-7 && (-0.05..-0.001).contains(&change), "{change} {wave:?}");
    assert!(wave.counts && wave.kind == "expansion");
    // Just too tight, and just wide enough.
    let with = |tolerance: f64| planned(&file(3.3, &format!(r#", "tolerance": {{ "disturbance": "{tolerance:.6}" }}"#)));
    let tight = with(change.abs() * 0.99);
    let same = tight.test_time.as_ref().unwrap();
    assert!(same.end_wall == all.end_wall && same.returned_wave.as_ref().unwrap().counts);
    assert!(flagged(&tight.flags, "ideal-waves").unwrap().contains("counts if it changes p5 by more than"));
    let wide = with(change.abs() * 1.01);
    let later = wide.test_time.as_ref().unwrap();
    assert!(later.end_wall.value > all.end_wall.value && later.end_wall.proven.is_none(), "{later:?}");
    assert!(later.cause.contains("the expansion"), "{}", later.cause);
    let named = later.returned_wave.as_ref().unwrap();
    assert!(!named.counts && named.pressure_change == wave.pressure_change && named.arrival == wave.arrival);
    assert!(flagged(&wide.flags, "weak-disturbance").unwrap().starts_with("an expansion comes back"));
    // Nothing that the contact surface does ends it, so that no boundary layer does.
    assert!(wide.waves.iter().any(|wave| wave.name == "wave returned from the contact surface"));
    // A shock, where the contact surface is over-tailored.
    let over = planned(&file(3.5, r#", "tolerance": { "disturbance": "0.1 %" }"#)).test_time.unwrap();
    let wave = over.returned_wave.unwrap();
    assert!(wave.kind == "shock" && wave.counts && wave.pressure_change.unwrap() > 0.0);
}

/// At γ 7/5 `M_bl` is 1 at Mach 2, p5/p2 is 10/3; the bounds are at M 1.32266 and 6.49863, for 5/3 at 1.57054 and 2.80509.
#[test]
fn bifurcation_is_told_by_the_criterion() {
    let at = |gas: &str, ratio: f64, mach: f64| {
        let report = planned(&plan_of(gas, reflected(ratio, mach), r#""tolerance": {}"#));
        (report.bifurcation.unwrap(), report.flags)
    };
    let (found, flags) = at(DIATOMIC, 1.4, 2.0);
    close(found.wall_layer_mach, 1.0, 1e-12);
    close(found.stagnation_over_reflected, 0.3 * 1.2_f64.powf(3.5), 1e-12);
    assert_eq!(found.bifurcates, Some(true));
    assert!(flagged(&flags, "bifurcation").unwrap().contains("the wall layer stagnates at 0.57 of p5"));
    let monatomic = r#"{ "heat_capacity_ratio": "5/3", "molar_mass": "39.948 g/mol" }"#;
    for (gas, ratio, mach, expected) in [
        (DIATOMIC, 1.4, 1.2, Some(false)),
        (DIATOMIC, 1.4, 1.322_66, None),
        (DIATOMIC, 1.4, 6.45, None),
        (monatomic, 5.0 / 3.0, 2.0, Some(true)),
        (monatomic, 5.0 / 3.0, 2.805, None),
        (monatomic, 5.0 / 3.0, 4.0, Some(false)),
    ] {
        let (found, flags) = at(gas, ratio, mach);
        assert_eq!(found.bifurcates, expected, "{ratio} {mach} {found:?}");
        assert_eq!(flagged(&flags, "bifurcation").is_some(), expected != Some(false));
    }
    // The gas of the same atoms by its species, thermally perfect: the same.
    let argon = |model: &str| {
        let file = plan_of(r#"{ "Ar": "balance" }"#, 1500.0, r#""tolerance": {}"#).replace("constant", model);
        planned(&file).bifurcation.unwrap()
    };
    close(argon("equilibrium").stagnation_over_reflected, argon("constant").stagnation_over_reflected, 1e-7);
}

#[test]
fn the_boundary_layer_is_a_band_from_laminar_to_turbulent() {
    let report = planned(&plan_of(r#"{ "Ar": "balance" }"#, 1500.0, &format!("{LONG}, {HELIUM}")));
    let layer = report.boundary_layer.as_ref().unwrap();
    let (one, two) = (&report.states.fill, &report.states.incident);
    let argon = |temperature| lennard_jones("Ar").unwrap().viscosity(0.039_95, temperature).unwrap();
    close(layer.viscosity.fill, argon(300.0), 1e-4);
    close(layer.viscosity.incident, argon(two.temperature.value), 1e-4);
    assert!(layer.viscosity.source.starts_with("empirical") && !layer.viscosity.source.contains("19"));
    // From the numbers of the report.
    let by_hand = BoundaryLayer {
        diameter: 0.08,
        driven_length: 6.0,
        incident_shock: report.incident.speed.value,
        reflected_shock: report.reflected.speed.value,
        returned_wave: report.states.reflected.sound_speed.value,
        fill_density: one.density.value,
        pressure_ratio: two.pressure.value / one.pressure.value,
        density_ratio: two.density.value / one.density.value,
        viscosity_1: layer.viscosity.fill,
        viscosity_2: layer.viscosity.incident,
    };
    let same = |range: &super::super::LayerRange, band: LayerBand| {
        close(range.without, band.ideal, 1e-9);
        for (found, expected) in range.laminar.iter().zip(band.laminar).chain(range.turbulent.iter().zip(band.turbulent)) {
            close(*found, expected, 1e-9);
        }
        close(range.ends()[0], band.lowest, 1e-9);
        close(range.ends()[1], band.highest, 1e-9);
    };
    same(&layer.contact_wave, by_hand.test_time().unwrap());
    same(&layer.separation, by_hand.separation().unwrap());
    // Without a layer it is the time of the waves; with one it is less.
    let ideal = report.test_time.as_ref().unwrap().end_wall.value;
    close(layer.contact_wave.without, ideal, 1e-12);
    assert_eq!(layer.uniform_time, Some(layer.contact_wave.ends()));
    assert!(layer.uniform_time.unwrap()[1] < ideal);
    let json: serde_json::Value = serde_json::from_str(&report.to_json().unwrap()).unwrap();
    for key in ["boundary_layer", "bifurcation"] {
        assert!(!json[key].is_null() && !json[key].to_string().contains("proven"), "{}", json[key]);
    }
    // Where the expansion comes first, it is the upper end.
    let short = planned(&plan_of(r#"{ "Ar": "balance" }"#, 1500.0, &format!("{}, {HELIUM}", LONG.replace("40 m\"", "2.0 m\""))));
    let time = short.test_time.unwrap();
    assert!(time.cause.starts_with("the head of the expansion"));
    let [low, high] = short.boundary_layer.unwrap().uniform_time.unwrap();
    assert!(low < high && high == time.end_wall.value, "{low} {high}");
    let text = text_of(&plan_of(r#"{ "Ar": "balance" }"#, 1500.0, &format!("{LONG}, {HELIUM}")));
    for words in ["laminar, ", "turbulent (", "Viscosity 22.", "empirical: kinetic theory", "within 7 % between 250 K and 1000 K"] {
        assert!(text.contains(words), "{words}\n{text}");
    }
}

#[test]
fn a_gas_without_a_viscosity_says_so_and_a_little_of_one_is_left_out() {
    let layer = |gas: &str| {
        let report = planned(&plan_of(gas, 1200.0, LONG).replace("constant", "equilibrium"));
        (report.boundary_layer, flagged(&report.flags, "no-boundary-layer").map(ToString::to_string))
    };
    let (none, why) = layer(r#"{ "C2H4": "20 %", "Ar": "balance" }"#);
    assert!(none.is_none() && why.unwrap().contains("no viscosity is known for C2H4, 20 % of the gas"));
    let (some, why) = layer(r#"{ "C2H4": "1 %", "Ar": "balance" }"#);
    assert!(why.is_none() && some.unwrap().viscosity.source.ends_with("; without C2H4"));
    // The collision integral of helium ends at 1022 K.
    let (none, why) = layer(r#"{ "He": "balance" }"#);
    assert!(none.is_some() && why.is_none());
    let hot = planned(&plan_of(r#"{ "He": "balance" }"#, 3000.0, LONG));
    assert!(hot.boundary_layer.is_none() && flagged(&hot.flags, "no-boundary-layer").unwrap().contains("1022 K"));
    let by_ratio = planned(&plan_of(DIATOMIC, 750.0, LONG));
    assert!(by_ratio.boundary_layer.is_none() && flagged(&by_ratio.flags, "no-boundary-layer").unwrap().contains("heat capacity ratio"));
    // A bore and a length of any size that can be typed give numbers.
    for (bore, length) in [("1e30 m", "1e-30 m"), ("1e-30 m", "1e30 m")] {
        let tube = LONG.replace("80 mm", bore).replace("\"6 m", &format!("\"{length}")).replace("20 mm", "0 m");
        let layer = planned(&plan_of(r#"{ "Ar": "balance" }"#, 1500.0, &tube)).boundary_layer.unwrap();
        assert!(layer.contact_wave.ends().iter().chain(&layer.separation.ends()).all(|end| end.is_finite()), "{layer:?}");
    }
    // Without a bore nobody asked.
    let bare = planned(&plan_of(DIATOMIC, 750.0, &LONG.replace(r#""driven_bore": "80 mm", "#, "")));
    assert!(bare.boundary_layer.is_none() && flagged(&bare.flags, "no-boundary-layer").is_none());
}

/// In a driver of 5 cm the expansion is fast enough to overtake.
#[test]
fn an_expansion_that_overtakes_the_incident_shock_is_flagged_with_the_driver_that_avoids_it() {
    let with = |length: &str| planned(&plan_of(DIATOMIC, 750.0, &format!("{}, {HELIUM}", LONG.replace("40 m\"", &format!("{length}\"")))));
    let short = with("0.05 m");
    let text = flagged(&short.flags, "incident-overtaken").unwrap();
    let time = short.test_time.unwrap();
    assert!(time.end_wall.value == 0.0 && time.cause == "the expansion overtakes the incident shock before the end wall");
    assert!(flagged(&with("40 m").flags, "incident-overtaken").is_none());
    // The length that the flag names is the bound.
    let length: f64 = text.split("longer than ").nth(1).unwrap().split(' ').next().unwrap().parse().unwrap();
    let overtaken = |factor: f64| flagged(&with(&format!("{:.4} m", length * factor)).flags, "incident-overtaken").is_some();
    assert!(overtaken(0.99) && !overtaken(1.01), "{text}");
    let text = text_of(&plan_of(DIATOMIC, 750.0, &format!("{}, {HELIUM}", LONG.replace("40 m\"", "0.05 m\""))));
    assert!(text.contains("Uniform time at the end wall none: the expansion overtakes"), "{text}");
}

/// The shot that a plan leads to has the times of the plan.
#[test]
fn a_shot_has_what_its_plan_had() {
    let rest = format!(r#"{LONG}, {HELIUM}, "tolerance": {{ "disturbance": "2 %" }}"#);
    for temperature in [750.0, reflected(1.4, 3.3)] {
        let plan = planned(&plan_of(DIATOMIC, temperature, &rest));
        let speed = format!(r#""shock_speed": "{} m/s""#, plan.incident.speed.value);
        let shot = reduced(&shot_of(DIATOMIC, &format!("{rest}, {speed}")));
        let (before, after) = (plan.test_time.unwrap(), shot.test_time.as_ref().unwrap());
        close(after.end_wall.value, before.end_wall.value, 1e-12);
        close(after.observed.as_ref().unwrap().time.value, before.observed.unwrap().time.value, 1e-12);
        assert_eq!((&after.cause, after.disturbance_tolerance), (&before.cause, 0.02));
        assert_eq!(after.returned_wave.as_ref().map(|wave| wave.counts), before.returned_wave.map(|wave| wave.counts));
        close(shot.bifurcation.unwrap().stagnation_over_reflected, plan.bifurcation.unwrap().stagnation_over_reflected, 1e-12);
    }
    let argon = r#"{ "Ar": "balance" }"#;
    let file = shot_of(argon, &format!(r#"{LONG}, {HELIUM}, "shock_speed": "900 ± 2 m/s""#));
    let report = reduced(&file);
    assert!(report.boundary_layer.as_ref().is_some_and(|layer| layer.uniform_time.is_some()));
    assert!(flagged(&report.flags, "not-used").is_none(), "{:?}", report.flags);
    let text = report.to_text(&Shot::read(file.as_bytes()).unwrap());
    for part in ["How long state 5 lasts", "Uniform time at the end wall", "laminar, ", "by Mark's criterion", "empirical"] {
        assert!(text.contains(part), "{part}\n{text}");
    }
    let json: serde_json::Value = serde_json::from_str(&report.to_json().unwrap()).unwrap();
    assert!(json["test_time"]["end_wall"]["value"].as_f64().unwrap() > 0.0);
}

#[test]
fn a_shot_without_the_fields_has_none_and_says_what_is_missing() {
    let speed = r#""shock_speed": "900 m/s""#;
    let bare = reduced(&shot_of(DIATOMIC, speed));
    let json: serde_json::Value = serde_json::from_str(&bare.to_json().unwrap()).unwrap();
    for key in ["test_time", "boundary_layer", "bifurcation"] {
        assert!(json.as_object().unwrap().contains_key(key) && json[key].is_null(), "{key}");
    }
    let unused = |rest: &str| {
        let report = reduced(&shot_of(DIATOMIC, &format!("{rest}, {speed}")));
        assert!(report.test_time.is_none());
        let texts = report.flags.iter().filter(|flag| matches!(flag.code.as_str(), "not-used" | "no-test-time"));
        texts.map(|flag| flag.text.clone()).collect::<Vec<_>>().join("; ")
    };
    assert!(unused(r#""tolerance": { "disturbance": "1 %" }"#).contains("tolerance.disturbance is recorded but not used"));
    let tube = unused(LONG);
    assert!(tube.contains("tube is recorded but not used") && tube.contains("tube.observe is recorded but not used"), "{tube}");
    let driver = unused(r#""driver": { "gas": { "He": "balance" }, "pressure": "10 bar(a)" }"#);
    for words in ["no uniform time", "driver.temperature", "driver.pressure is recorded", "driver is recorded but not used"] {
        assert!(driver.contains(words), "{words}: {driver}");
    }
    // Xenon cannot drive it: a plan refuses that, a shot was fired.
    let slow = HELIUM.replace("He", "Xe");
    let said = unused(&format!("{LONG}, {slow}"));
    assert!(said.contains("no uniform time") && said.contains("lighter driver gas"), "{said}");
    // The end wall of the times is rigid.
    let moving = reduced(&shot_of(DIATOMIC, &format!(r#"{LONG}, {HELIUM}, "wall": {{ "speed": "5 m/s" }}, {speed}"#)));
    assert!(moving.test_time.is_some() && flagged(&moving.flags, "rigid-wall-times").is_some());
}

#[test]
fn places_and_tolerances_that_make_no_sense_are_refused() {
    for file in [plan_of(DIATOMIC, 750.0, &format!("{LONG}, {HELIUM}")), shot_of(DIATOMIC, &format!(r#"{LONG}, "shock_speed": "900 m/s""#))]
    {
        let place = |typed: &str, names: &[&str]| refused(&file.replace("20 mm", typed), &[&["tube.observe", typed], names].concat());
        place("-20 mm", &["not negative", "20 mm"]);
        place("6 m", &["only 6 m long"]);
        place("20", &["unit"]);
        place("20 ms", &[]);
        let tolerance = |typed: &str, names: &[&str]| {
            let added = file.replacen("\"ambient\"", &format!(r#""tolerance": {{ "disturbance": "{typed}" }}, "ambient""#), 1);
            let added = added.replacen("\"fill\"", &format!(r#""tolerance": {{ "disturbance": "{typed}" }}, "fill""#), 1);
            refused(&added, &[&["tolerance.disturbance", typed], names].concat());
        };
        tolerance("30 %", &["between 0 and 20 %", "\"1 %\""]);
        tolerance("-1 %", &["between 0 and 20 %"]);
        tolerance("1 m", &[]);
    }
    // What a shot was set to has its own uncertainties.
    refused(&shot_of(DIATOMIC, r#""tolerance": { "fill": "1 %" }, "shock_speed": "900 m/s""#), &["tolerance.fill", "disturbance"]);
}

/// Where the strength of a shock that comes back is not known, that is said before the pressures; where it is, it is compared.
#[test]
fn an_over_tailored_rise_is_compared_or_said_not_to_be() {
    let rest = format!(r#""tube": {{ "ratings": {{ "window": "12 bar(g)" }} }}, {HELIUM}"#);
    let file = plan_of(r#"{ "N2": "balance" }"#, 2600.0, &rest).replace("constant", "equilibrium");
    let report = planned(&file);
    let is_compared = report.limits.iter().any(|line| line.load.starts_with("end wall after a shock"));
    assert!(is_compared != flagged(&report.flags, "over-tailored-unchecked").is_some(), "{:?}", report.flags);
    let text = text_of(&file);
    assert!(is_compared || text.find("[over-tailored-unchecked]").unwrap() < text.find("Driven fill p1").unwrap(), "{text}");
    let weak = planned(&file.replace("2600 K", "1200 K"));
    assert!(flagged(&weak.flags, "over-tailored-unchecked").is_none() && weak.limits.len() == 1);
}

/// Ratings, a diaphragm that holds, and the gas that burns.
#[test]
fn ratings_are_compared_with_the_upper_ends() {
    let tube = |more: &str| format!(r#""tube": {{ "driven_length": "6 m", "driver_length": "40 m", {more} }}, {HELIUM}"#);
    // Over-tailored: a shock comes back. The upper end of p5 raises it in proportion.
    let measured =
        |rest: &str| plan_of(DIATOMIC, reflected(1.4, 4.5), rest).replace("\"300 K\", \"ambient\"", "\"300 ± 1 K\", \"ambient\"");
    let rest = format!(r#"{}, "tolerance": {{ "fill": "1 %", "speed": "1 %" }}"#, tube(r#""ratings": { "window": "12 bar(g)" }"#));
    let report = planned(&measured(&rest));
    let change = report.test_time.as_ref().unwrap().returned_wave.as_ref().unwrap().pressure_change.unwrap();
    let p5 = &report.states.reflected.pressure;
    let after = report.limits.iter().find(|line| line.load.starts_with("end wall after a shock")).unwrap();
    close(after.pressure, (p5.value + p5.expanded.unwrap()) * (1.0 + change), 1e-9);
    assert_eq!(after.rating, 1.3e6);
    assert!(change > 0.05 && !after.exceeded);
    // The rating that only the returned shock exceeds.
    let between = format!("{:.6} bar(a)", (after.pressure * 0.999) / 1e5);
    let report = planned(&measured(&rest.replace("12 bar(g)", &between)));
    assert!(report.limits[0].exceeded && report.limits[0].load.starts_with("end wall after") && !report.limits[1].exceeded);
    assert_eq!(report.flags[0].code, "rating-exceeded");
    // Parts without a rating are named, and all of them where there is none.
    let text = text_of(&plan_of(DIATOMIC, 750.0, &tube(r#""ratings": { "window": "12 bar(g)" }"#)));
    assert!(text.contains("Not checked: driven (no rating is given), driver (no rating is given), sensor (no rating is given)."), "{text}");
    let text = text_of(&plan_of(DIATOMIC, 750.0, r#""tube": { "ratings": { "driver": "12 bar(g)" } }"#));
    assert!(text.contains("ratings not checked"), "{text}");
    // A diaphragm at twice p4 holds; its pressure, with its scatter of 5 %, is one that the driver may have to bear.
    let p4 = planned(&plan_of(DIATOMIC, 750.0, HELIUM)).fill.p4.unwrap().value;
    let burst = |factor: f64, more: &str| {
        let stated = format!(
            r#""burst_pressure": "{:.4} kPa{more}(a)", "ratings": {{ "driver": "{:.4} kPa(a)" }}"#,
            p4 * factor / 1e3,
            p4 * 2.08 / 1e3
        );
        planned(&plan_of(DIATOMIC, 750.0, &tube(&stated.replace(" kPa ±", " ±"))))
    };
    let holds = burst(2.0, "");
    assert!(flagged(&holds.flags, "diaphragm-holds").unwrap().contains("left standing in the driver"));
    let line = &holds.limits[0];
    assert!(line.exceeded && line.load == "burst pressure of the diaphragm");
    close(line.pressure, 2.1 * p4, 1e-4);
    assert!(flagged(&burst(1.02, "").flags, "diaphragm-holds").is_none());
    assert!(flagged(&burst(0.98, "").flags, "diaphragm-bursts-early").is_none());
    assert!(flagged(&burst(0.5, "").flags, "diaphragm-bursts-early").unwrap().contains("does not reach p4"));
}

#[test]
fn what_can_burn_is_said_beside_p5_and_every_rating() {
    let fuel = r#"{ "CH4": "1 %", "O2": "2 %", "Ar": "balance" }"#;
    let file = |gas: &str| plan_of(gas, 1400.0, r#""tube": { "ratings": { "driven": "40 bar(g)", "window": "20 bar(g)" } }"#);
    let burns = file(fuel).replace("constant", "equilibrium");
    assert!(planned(&burns).limits.iter().all(|line| line.load == "p5 of the unburnt gas"));
    assert!(text_of(&burns).contains("Pressure p5, unburnt gas"));
    let inert = file(r#"{ "Ar": "balance" }"#);
    assert!(planned(&inert).limits.iter().all(|line| line.load == "p5") && !text_of(&inert).contains("unburnt"));
    let shot = shot_of(fuel, r#""shock_speed": "900 m/s""#).replace("constant", "equilibrium");
    let shot = Shot::read(shot.as_bytes()).unwrap();
    assert!(shot.reduce().unwrap().to_text(&shot).contains("Pressure p5, unburnt gas"));
}
