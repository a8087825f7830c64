use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use crate::record::{FillingReport, Plan, PlanReport};

const DEMO: &str = include_str!("../../../examples/records/plan-k0300.json");
const VESSEL: &str = r#""vessel": "mixing vessel", "pressure": "3.00 bar(a)","#;

fn changed(pairs: &[(&str, &str)]) -> String {
    pairs.iter().fold(DEMO.to_string(), |file, (from, to)| {
        assert!(file.contains(from), "{from}");
        file.replacen(from, to, 1)
    })
}

/// A plan that needs no driver, for any gas.
fn mixture(gas: &str, filling: &str) -> String {
    format!(
        r#"{{ "record": "plan/1", "gas": {gas}, "heat_capacity": "equilibrium", "temperature": "296 K",
        "target": {{ "step": "100 kPa", "fill_pressure": "10 kPa" }}, "filling": {{ {filling} }} }}"#
    )
}

fn planned(file: &str) -> PlanReport {
    Plan::read(file.as_bytes()).and_then(|plan| plan.report()).unwrap_or_else(|error| panic!("{error}"))
}

fn steps(file: &str) -> FillingReport {
    planned(file).filling.unwrap()
}

fn text(file: &str) -> String {
    let plan = Plan::read(file.as_bytes()).unwrap();
    plan.report().unwrap().to_text(&plan)
}

fn refused(file: &str, names: &[&str]) {
    let error = Plan::read(file.as_bytes()).and_then(|plan| plan.report()).expect_err(file).to_string();
    for name in names {
        assert!(error.contains(name), "\"{name}\" is not in: {error}");
    }
}

fn flag(file: &str, code: &str) -> Option<String> {
    planned(file).flags.into_iter().find(|flag| flag.code == code).map(|flag| flag.text)
}

fn close(found: f64, expected: f64, relative: f64) {
    assert!((found / expected - 1.0).abs() <= relative, "{found} {expected}");
}

/// 0.4 %, 0.8 % and the rest of 300 kPa, 5 Pa of which were there before.
#[test]
fn readings_are_cumulative_partial_pressures() {
    let filling = steps(DEMO);
    let lines: Vec<_> = filling.steps.iter().map(|line| (line.gas.as_str(), line.partial_pressure.value, line.reading.value)).collect();
    assert_eq!(lines, [("CH4", 1199.98, 1204.98), ("O2", 2399.96, 3604.94), ("Ar", 296_395.06, 300_000.0)]);
    for line in &filling.steps {
        assert_eq!(line.gauge_reading, Some(line.reading.value - 101.3e3));
        for quantity in [&line.partial_pressure, &line.reading, &line.fraction] {
            let [low, high] = quantity.proven.unwrap();
            assert!(low <= quantity.value && quantity.value <= high && high <= low.next_up().next_up(), "{quantity:?}");
        }
    }
    let residual = filling.residual.unwrap();
    close(residual.fraction.value, 5.0 / 300e3, 1e-15);
    let sum: f64 = filling.steps.iter().map(|line| line.fraction.value).sum();
    close(sum + residual.fraction.value, 1.0, 1e-15);
    close(filling.steps[0].fraction.value, 0.004 * 299_995.0 / 300_000.0, 1e-15);
    // Without an ambient pressure nothing is said of a gauge.
    let file = changed(&[("\"ambient\": \"101.3 ± 0.1 kPa\",", ""), ("20 bar(g)", "20 bar(a)")]);
    let file = file
        .replace(", \"ratings\": { \"driven\": \"40 bar(g)\"", ", \"ratings\": { \"driven\": \"40 bar(a)\"")
        .replace("bar(g)", "bar(a)");
    assert!(steps(&file).steps.iter().all(|line| line.gauge_reading.is_none()));
    assert!(text(DEMO).contains("read on a gauge") && !text(&file).contains("read on a gauge"));
}

#[test]
fn the_driven_section_is_filled_up_to_the_planned_pressure() {
    let file = changed(&[(VESSEL, r#""vessel": "driven section","#), (", \"rating\": \"20 bar(g)\"", "")]);
    let report = planned(&file);
    let (filling, p1) = (report.filling.unwrap(), report.fill.p1);
    let last = filling.steps.last().unwrap();
    close(last.reading.value, p1.value, 1e-15);
    let [[low, high], [inner_low, inner_high]] = [last.reading.proven.unwrap(), p1.proven.unwrap()];
    assert!(low <= inner_low && inner_high <= high && high / low - 1.0 < 1e-14);
    close(filling.steps[0].reading.value, 5.0 + 0.004 * (p1.value - 5.0), 1e-14);
    assert!(report.limits.iter().any(|line| line.part == "driven" && line.load.starts_with("filling") && line.rating == 40e5 + 101.3e3));
    refused(
        &changed(&[(r#""vessel": "mixing vessel""#, r#""vessel": "driven section""#)]),
        &["filling.pressure", "3.00 bar(a)", "leave it out"],
    );
    let warm = changed(&[(VESSEL, r#""vessel": "driven section", "temperature": "350 K","#)]);
    refused(&warm, &["filling.temperature", "350 K", "leave it out"]);
    let twice = changed(&[(VESSEL, r#""vessel": "driven section","#)]);
    refused(&twice, &["filling.rating", "20 bar(g)", "\"driven\" in tube.ratings"]);
}

#[test]
fn bad_fields_are_refused_with_the_remedy() {
    let order = |list: &str| changed(&[("\"residual\": \"5 Pa\"", &format!("\"order\": {list}, \"residual\": \"5 Pa\""))]);
    refused(&order(r#"["CH4", "Ar"]"#), &["filling.order", "misses O2"]);
    refused(&order(r#"["CH4", "O2", "CH4", "Ar"]"#), &["filling.order[2]", "CH4", "twice"]);
    refused(&order(r#"["CH4", "O2", "He"]"#), &["filling.order[2]", "He", "does not hold it"]);
    refused(&order(r#"["CH4", "O2", 3]"#), &["filling.order[2]", "name of a gas"]);
    refused(&order(r#""CH4""#), &["filling.order", "a list is wanted"]);
    refused(&changed(&[("3.00 bar(a)", "3.00 bar")]), &["filling.pressure", "3.00 bar", "bar(g) or bar(a)"]);
    refused(&changed(&[("\"20 bar(g)\"", "\"20 bar\"")]), &["filling.rating", "20 bar", "bar(g) or bar(a)"]);
    refused(&changed(&[(" \"pressure\": \"3.00 bar(a)\",", "")]), &["filling.pressure", "pressure of its own", "2.00 bar(a)"]);
    refused(&changed(&[("\"mixing vessel\"", "\"bucket\"")]), &["filling.vessel", "bucket", "driven section"]);
    refused(&changed(&[("\"vessel\": \"mixing vessel\", ", "")]), &["filling.vessel", "not named"]);
    refused(&changed(&[("\"5 Pa\"", "\"4 bar\"")]), &["filling.residual", "4 bar", "300000 Pa"]);
    refused(&changed(&[("\"5 Pa\"", "\"-5 Pa\"")]), &["filling.residual", "-5 Pa", "greater than zero"]);
    refused(&changed(&[("\"0.1 %\"", "\"50 %\"")]), &["filling.gauge.relative", "50 %", "20 Pa"]);
    refused(&changed(&[("\"2 Pa\"", "\"2 Pa(g)\"")]), &["filling.gauge.absolute", "2 Pa(g)", "neither gauge nor absolute"]);
    refused(&changed(&[("\"2 Pa\"", "\"-2 Pa\"")]), &["filling.gauge.absolute", "-2 Pa"]);
    refused(&changed(&[("\"rating\"", "\"ratings\"")]), &["filling.ratings", "rating"]);
    refused(&changed(&[(VESSEL, &format!("{VESSEL} \"temperature_scatter\": \"0.2 degC\","))]), &["filling.temperature_scatter", "0.2 K"]);
    refused(&changed(&[(VESSEL, &format!("{VESSEL} \"temperature\": \"25 K\","))]), &["filling.temperature", "25 degC meant?"]);
    refused(&changed(&[(VESSEL, &format!("{VESSEL} \"vapour_pressures\": {{ \"O3\": \"5 kPa\" }},"))]), &["filling.vapour_pressures.O3"]);
    refused(
        &changed(&[(VESSEL, &format!("{VESSEL} \"vapour_pressures\": {{ \"Ar\": \"5 kPa(g)\" }},"))]),
        &["vapour_pressures.Ar", "absolute"],
    );
    let ratio = r#"{ "heat_capacity_ratio": "7/5", "molar_mass": "28 g/mol" }"#;
    let constant = mixture(ratio, r#""vessel": "driven section""#).replacen("equilibrium", "constant", 1);
    refused(&constant, &["filling", "no parts", "by its species"]);
}

/// A zero fraction is nothing to fill, and air is one gas.
#[test]
fn a_gas_that_is_not_there_is_not_let_in() {
    let gas = r#"{ "He": "0 %", "CO2": "2 %", "air": "balance" }"#;
    let filling = steps(&mixture(gas, r#""vessel": "driven section", "order": ["air", "CO2"]"#));
    let lines: Vec<_> = filling.steps.iter().map(|line| (line.gas.as_str(), line.reading.value)).collect();
    assert_eq!(lines, [("air", 9800.0), ("CO2", 10_000.0)]);
    let ordered = mixture(gas, r#""vessel": "driven section", "order": ["air", "CO2", "He"]"#);
    refused(&ordered, &["filling.order[2]", "He", "zero"]);
    // One gas alone is one step.
    assert_eq!(steps(&mixture(r#"{ "N2": "balance" }"#, r#""vessel": "driven section""#)).steps.len(), 1);
}

#[test]
fn a_mixture_that_can_burn_needs_a_rating_and_says_so_first() {
    let bare = changed(&[(", \"rating\": \"20 bar(g)\"", "")]);
    refused(&bare, &["filling.rating", "can burn", "CH4 and O2", "no rating of the vessel", "as marked on the vessel"]);
    let driven = mixture(r#"{ "CH4": "1 %", "O2": "2 %", "Ar": "balance" }"#, r#""vessel": "driven section""#);
    refused(&driven, &["filling.rating", "can burn", "tube.ratings"]);
    // Inert mixtures need none, and a fuel of the driver is no fuel of the vessel.
    let inert = bare.replacen("\"CH4\": \"0.40 %\", ", "", 1).replacen("{ \"He\": \"balance\" }", "{ \"H2\": \"balance\" }", 1);
    assert!(!steps(&inert).can_burn);
    let shown = text(DEMO);
    let [rating, section, caution, reading] =
        ["[can-burn]", "Filling steps", "This mixture can burn while it is made", "read, absolute"].map(|words| shown.find(words).unwrap());
    assert!(rating < section && section < caution && caution < reading, "{shown}");
    assert!(!text(&inert).contains("This mixture can burn"));
}

#[test]
fn a_filling_pressure_above_the_rating_comes_first() {
    let line = planned(DEMO).limits.into_iter().find(|line| line.part == "mixing vessel").unwrap();
    assert!(!line.exceeded);
    // The upper end of the reading is compared: 0.1 % and 2 Pa, twice.
    close(line.pressure, 300e3 + 2.0 * libm::hypot(300.0, 2.0), 1e-14);
    close(line.rating, 20e5 + 101.3e3, 1e-15);
    for rating in ["1.9 bar(g)", "3.005 bar(a)"] {
        let file = changed(&[("20 bar(g)", rating)]);
        let report = planned(&file);
        assert!(report.limits[0].exceeded && report.limits[0].part == "mixing vessel");
        assert_eq!(report.flags[0].code, "rating-exceeded");
        let shown = text(&file);
        assert!(shown.find("EXCEEDED: do not fill").unwrap() < shown.find("Driven fill p1").unwrap());
    }
    assert!(!planned(&changed(&[("20 bar(g)", "3.007 bar(a)")])).limits[0].exceeded);
}

#[test]
fn a_diluent_belongs_between_fuel_and_oxidiser() {
    let order = |list: &str| changed(&[("\"residual\": \"5 Pa\"", &format!("\"order\": {list}, \"residual\": \"5 Pa\""))]);
    let code = "undiluted-while-filling";
    let said = flag(&order(r#"["CH4", "O2", "Ar"]"#), code).unwrap();
    assert!(said.contains("step 2 (O2)") && said.contains("3.60 kPa before Ar"), "{said}");
    assert!(flag(&order(r#"["O2", "CH4", "Ar"]"#), code).unwrap().contains("step 2 (CH4)"));
    for good in [r#"["CH4", "Ar", "O2"]"#, r#"["Ar", "O2", "CH4"]"#, r#"["O2", "Ar", "CH4"]"#] {
        assert_eq!(flag(&order(good), code), None, "{good}");
    }
    // The price: 0.8 % is the small difference of two large readings.
    assert!(flag(&order(r#"["CH4", "Ar", "O2"]"#), "uncertain-fraction").unwrap().contains("the fraction of O2"));
    assert_eq!(flag(DEMO, "uncertain-fraction"), None);
    let shown = text(DEMO);
    assert!(shown.find("[undiluted-while-filling]").unwrap() < shown.find("read, absolute").unwrap());
    assert_eq!(shown.matches("[undiluted-while-filling]").count(), 1);
}

#[test]
fn a_gas_above_its_vapour_pressure_is_refused() {
    let water = |filling: &str| mixture(r#"{ "H2O": "2 %", "N2": "balance" }"#, filling);
    // Water at 296 K: 2794 Pa; 2 % of 3 bar are 6 kPa.
    refused(
        &water(r#""vessel": "mixing vessel", "pressure": "3 bar(a)""#),
        &["gas.H2O", "2 %", "condense", "mixing vessel is 6.00 kPa", "at 296.0 K is 2.79 kPa", "filling.pressure", "warm the vessel"],
    );
    assert_eq!(flag(&water(r#""vessel": "mixing vessel", "pressure": "3 bar(a)", "temperature": "350 K""#), "near-condensing"), None);
    let near = flag(&water(r#""vessel": "mixing vessel", "pressure": "1.2 bar(a)""#), "near-condensing").unwrap();
    assert!(near.contains("H2O") && near.contains("86 %"), "{near}");
    // Any planned fill: 2 % of 200 kPa.
    let fill = |pressure: &str| {
        format!(
            r#"{{ "record": "plan/1", "gas": {{ "H2O": "2 %", "N2": "balance" }}, "heat_capacity": "equilibrium", "temperature": "296 K",
            "target": {{ "step": "1 MPa", "fill_pressure": "{pressure}" }} }}"#
        )
    };
    refused(&fill("200 kPa"), &["gas.H2O", "driven section is 4.00 kPa", "2.79 kPa", "lower fill pressure"]);
    assert!(planned(&fill("100 kPa")).filling.is_none());
    let propane = mixture(r#"{ "C3H8": "balance" }"#, r#""vessel": "mixing vessel", "pressure": "10 bar(a)""#);
    refused(&propane, &["gas.C3H8", "vapour pressure at 296.0 K is 901 kPa"]);
    // Above its critical temperature no pressure is too high.
    assert_eq!(flag(&mixture(r#"{ "CH4": "balance" }"#, r#""vessel": "mixing vessel", "pressure": "90 bar(a)""#), "near-condensing"), None);
}

#[test]
fn what_is_not_built_in_can_be_stated() {
    let own = |filling: &str| {
        mixture(r#"{ "heptane": "2 %", "N2": "balance" }"#, filling).replacen(
            "\"temperature\"",
            r#""species": { "heptane": { "molar_mass": "100.2 g/mol", "shape": "other",
            "ranges": [ { "from": "250 K", "to": "3000 K", "heat_capacity": [0, 0, 20, 0, 0, 0, 0], "enthalpy": 0 } ] } }, "temperature""#,
            1,
        )
    };
    let vessel = r#""vessel": "mixing vessel", "pressure": "3 bar(a)""#;
    let unknown = flag(&own(vessel), "vapour-pressure-unknown").unwrap();
    assert!(unknown.contains("heptane") && unknown.contains("filling.vapour_pressures"), "{unknown}");
    let stated = |pressure: &str| own(&format!("{vessel}, \"vapour_pressures\": {{ \"heptane\": \"{pressure}\" }}"));
    refused(&stated("5.3 kPa"), &["gas.heptane", "6.00 kPa", "5.30 kPa"]);
    assert_eq!(flag(&stated("20 kPa"), "vapour-pressure-unknown"), None);
}

/// Of x = (p(j) − p(j−1))/p(n), by hand for the first gas; against a Monte Carlo run in the tests of the floor below.
#[test]
fn the_uncertainty_of_readings_becomes_that_of_fractions() {
    let filling = steps(DEMO);
    let first = &filling.steps[0].fraction;
    let of = |reading: f64| libm::hypot(1e-3 * reading, 2.0);
    let (before, after, last) = (of(5.0), of(1204.98), first.value * of(300e3));
    let by_hand = libm::sqrt(before * before + after * after + last * last) / 300e3;
    close(first.standard_uncertainty.unwrap(), by_hand, 1e-12);
    assert_eq!((first.expanded, first.coverage_factor), (first.standard_uncertainty.map(|u| 2.0 * u), Some(2.0)));
    // Each form of the field, and what is stated of the residual gas and of the temperature.
    let gauge = r#"{ "relative": "0.1 %", "absolute": "2 Pa" }"#;
    let of_first = |file: &str| steps(file).steps[0].fraction.standard_uncertainty.unwrap();
    close(of_first(&changed(&[(gauge, "\"20 Pa\"")])), libm::sqrt(2.0 + 1.6e-5) * 20.0 / 300e3, 1e-6);
    let relative = of_first(&changed(&[(gauge, "\"0.1 %\"")]));
    close(relative, 1e-3 * libm::sqrt(25.0 + 1204.98 * 1204.98 + 1199.98 * 1199.98) / 300e3, 1e-9);
    let residual = of_first(&changed(&[("\"5 Pa\"", "\"5 ± 3 Pa\"")]));
    assert!(residual > by_hand && residual < 3.7 / 300e3 + by_hand);
    // 0.296 K of 296 K are 0.1 %.
    let scatter = of_first(&changed(&[(VESSEL, &format!("{VESSEL} \"temperature_scatter\": \"0.296 K\",")), (gauge, "\"0 %\"")]));
    close(scatter, relative, 1e-12);
    let silent = changed(&[(&format!(", \"gauge\": {gauge}"), "")]);
    assert!(flag(&silent, "gauge-uncertainty-missing").is_some() && flag(DEMO, "gauge-uncertainty-missing").is_none());
    assert!(steps(&silent).steps.iter().all(|line| line.fraction.standard_uncertainty.is_none()));
    assert!(text(DEMO).contains("0.39999 ±") || text(DEMO).contains("0.4000 ±"), "{}", text(DEMO));
}

#[test]
fn what_spoils_the_fractions_is_flagged() {
    assert_eq!(flag(DEMO, "residual-gas"), None);
    let residual = flag(&changed(&[("\"5 Pa\"", "\"600 Pa\"")]), "residual-gas").unwrap();
    assert!(residual.contains("0.20 %"), "{residual}");
    assert!(flag(&changed(&[("3.00 bar(a)", "2.0 kPa(a)")]), "vessel-below-fill").is_some());
    assert_eq!(flag(DEMO, "vessel-below-fill"), None);
    assert_eq!(flag(DEMO, "real-gas-filling"), None);
    let vessel = r#""vessel": "mixing vessel", "pressure": "5 bar(a)""#;
    // SF6 alone at 0.5 bar departs by 0.56 %, diluted in helium by little.
    let alone = flag(&mixture(r#"{ "SF6": "10 %", "He": "balance" }"#, vessel), "real-gas-filling").unwrap();
    assert!(alone.starts_with("SF6 departs"), "{alone}");
    let all = flag(&mixture(r#"{ "CO2": "50 %", "Xe": "balance" }"#, vessel), "real-gas-filling").unwrap();
    assert!(all.contains("departs"), "{all}");
    assert!(flag(&mixture(r#"{ "NO2": "1 %", "Ar": "balance" }"#, vessel), "pairs-of-no2").is_some());
    assert!(flag(&mixture(r#"{ "NH3": "10 %", "Ar": "balance" }"#, vessel), "real-gas-unknown").unwrap().contains("NH3"));
    let acetylene = |share: &str| flag(&mixture(&format!("{{ \"C2H2\": \"{share}\", \"Ar\": \"balance\" }}"), vessel), "acetylene");
    assert!(acetylene("50 %").is_some() && acetylene("40 %").is_none());
}
