use super::*;

const ARGON: &str = include_str!("../../../examples/records/argon-b0412.json");
const SENSOR: &str = include_str!("../../../examples/records/sensor-step-c17.json");

fn given(gas: &str, fill: &str, rest: &str) -> String {
    format!("{{ \"record\": \"shot/1\", \"gas\": {gas}, \"fill\": {fill}, {rest} }}")
}

fn reduced(file: &str) -> Report {
    Shot::read(file.as_bytes()).and_then(|shot| shot.reduce()).unwrap_or_else(|error| panic!("{error}"))
}

fn codes(report: &Report) -> Vec<&str> {
    report.flags.iter().map(|flag| flag.code.as_str()).collect()
}

/// Exact values: γ 7/5 at Mach 2 gives p5/p1 = 15, T5/T1 = 5/2; the molar mass is chosen so that a1 is 350 m/s.
#[test]
fn a_rational_case_comes_out_exactly() {
    // W = γRT/a² = 7/5 · 8.31446261815324 · 300/350² kg/mol.
    let mass = "7/5".parse::<crate::number::Rational>().unwrap();
    let mass = ["8.31446261815324", "300"].iter().fold(mass, |product, text| product.checked_mul(text.parse().unwrap()).unwrap());
    let mass = mass.checked_div("122500".parse().unwrap()).unwrap();
    // Not a finite decimal, so the record cannot hold it: seven digits more than a double are enough to see the result.
    assert!((mass.to_f64() - 0.028_506_728_976_525_4).abs() < 1e-15);
    let gas = r#"{ "heat_capacity_ratio": "7/5", "molar_mass": "28.50672897652539429 g/mol" }"#;
    let report = reduced(&given(gas, r#"{ "pressure": "10 kPa", "temperature": "300 K" }"#, r#""shock_speed": "700 m/s""#));
    let (one, two, five) = (&report.states.fill, &report.states.incident, &report.states.reflected);
    let density = one.density.value;
    for (found, expected) in [
        (one.pressure.value, 10_000.0),
        (one.temperature.value, 300.0),
        (density, 10_000.0 * mass.to_f64() / (8.314_462_618_153_24 * 300.0)),
        (one.sound_speed.value, 350.0),
        (two.pressure.value, 45_000.0),
        (two.temperature.value, 300.0 * 27.0 / 16.0),
        (two.density.value, density * 8.0 / 3.0),
        (two.sound_speed.value, 350.0 * libm::sqrt(27.0 / 16.0)),
        (two.gas_speed.value, 350.0 * 1.25),
        (five.pressure.value, 150_000.0),
        (five.temperature.value, 750.0),
        (five.density.value, density * 6.0),
        (five.sound_speed.value, 350.0 * libm::sqrt(2.5)),
        (report.step.value, 140_000.0),
        (report.incident.mach.value, 2.0),
        (report.reflected.speed.value, 350.0),
        (report.reflected.mach.value, libm::sqrt(3.0)),
    ] {
        assert!((found / expected - 1.0).abs() < 1e-12, "{found} {expected}");
    }
    assert!(one.gas_speed.value == 0.0 && five.gas_speed.value == 0.0);
    let [low, high] = report.states.reflected.temperature.proven.unwrap();
    assert!(low <= high && high.to_bits() - low.to_bits() <= 2);
    assert_eq!(report.incident.speed.proven, Some([700.0, 700.0]));
    assert!(report.fit.is_none() && report.incident.attenuation.is_none());
    assert_eq!(report.step.standard_uncertainty, None);
    assert!(codes(&report).contains(&"constant-heat-capacity"));
}

/// An invented shot in air. At constant heat capacity p5/p1 depends on U/√T1 alone, so the contributions of temperature and speed are
/// as ½ u(T)/T to u(U)/U; p5 − p1 is proportional to p1.
#[test]
fn the_budget_has_a_line_for_every_stated_input() {
    let gas = r#"{ "heat_capacity_ratio": "7/5", "molar_mass": "28.9652 g/mol" }"#;
    let fill = r#"{ "pressure": "100.0 ± 0.1 kPa", "temperature": "295.15 ± 0.5 K" }"#;
    let report = reduced(&given(gas, fill, r#""shock_speed": "620 ± 0.93 m/s""#));
    let u = report.step.standard_uncertainty.unwrap();
    let contribution = |at: usize| libm::sqrt(report.budget[at].share.step.unwrap()) * u;
    let inputs: Vec<&str> = report.budget.iter().map(|line| line.input.as_str()).collect();
    assert_eq!(inputs, ["shock speed", "fill pressure", "fill temperature"]);
    assert!((contribution(0) - 5470.0).abs() < 5.0, "{}", contribution(0));
    assert!((contribution(1) / (report.step.value * 0.001) - 1.0).abs() < 1e-9);
    let ratio = 0.5 * (0.5 / 295.15) / (0.93 / 620.0);
    assert!((contribution(2) / contribution(0) / ratio - 1.0).abs() < 1e-9);
    assert!((report.step.coverage_factor.unwrap() - 2.0).abs() < 1e-12);
    // A faster shock raises both, a warmer fill raises T5 and lowers p5, and p1 leaves T5 alone.
    let product = |at: usize| {
        let share = &report.budget[at].share;
        libm::sqrt(share.temperature.unwrap() * share.pressure.unwrap())
    };
    assert!(product(1) == 0.0);
    assert!((report.correlation.temperature_pressure.unwrap() - (product(0) - product(2))).abs() < 1e-9);
}

#[test]
fn the_examples_are_reduced() {
    let shot = Shot::read(ARGON.as_bytes()).unwrap();
    let report = shot.reduce().unwrap();
    assert!((report.incident.speed.value - 950.0).abs() < 3.0 * report.incident.speed.standard_uncertainty.unwrap());
    assert!(report.incident.speed.proven.is_none() && report.incident.attenuation.as_ref().unwrap().proven.is_none());
    assert_eq!(report.fit.as_ref().unwrap().degrees_of_freedom, 2);
    assert!(report.flags.is_empty(), "{:?}", report.flags);
    let shares: f64 = report.budget.iter().map(|line| line.share.pressure.unwrap()).sum();
    assert!((shares - 1.0).abs() < 1e-9);
    let text = report.to_text(&shot);
    assert!(text.contains("arrival times") && text.contains("S3"));
    let sensor = reduced(SENSOR);
    assert!((sensor.incident.speed.value - 702.0).abs() < 3.0 * sensor.incident.speed.standard_uncertainty.unwrap());
    assert!(codes(&sensor).contains(&"not-used"), "degrees of freedom of a station: {:?}", sensor.flags);
}

#[test]
fn a_slow_shock_is_refused_with_its_field() {
    let gas = r#"{ "heat_capacity_ratio": "5/3", "molar_mass": "39.948 g/mol" }"#;
    let fill = r#"{ "pressure": "8 kPa", "temperature": "296.2 K" }"#;
    let refused = |file: &str| Shot::read(file.as_bytes()).unwrap().reduce().unwrap_err();
    let error = refused(&given(gas, fill, r#""shock_speed": "320 m/s""#));
    assert_eq!(error.path, "shock_speed");
    assert!(error.to_string().contains("sound speed of the fill") && error.typed == "320 m/s");
    let error = refused(&given(r#"{ "N2": "balance" }"#, fill, r#""heat_capacity": "equilibrium", "shock_speed": "320 m/s""#));
    assert_eq!(error.path, "shock_speed");
    assert!(error.to_string().contains("sound speed of the fill"));
}

#[test]
fn a_swapped_or_bad_station_is_named() {
    let bad = ARGON.replacen("1033.76 ±", "1043.76 ±", 1);
    let report = reduced(&bad);
    assert!(codes(&report).contains(&"outlier"));
    assert!(report.flags.iter().any(|flag| flag.text.contains("station S3 has the largest")));
}

#[test]
fn a_time_without_an_uncertainty_is_said_and_a_control_character_is_not_echoed() {
    let bare = reduced(&ARGON.replacen("515.02 ± 0.3 us", "515.02 us", 1));
    assert!(bare.flags.iter().any(|flag| flag.code == "missing-uncertainty" && flag.text.contains("stations[1].arrival")));
    let escape = Shot::read(ARGON.replacen("0.3 us", "0.3 u\\u001b[1ms", 1).as_bytes()).unwrap_err();
    assert!(escape.to_string().chars().all(|c| c == '\n' || !c.is_control()), "{escape:?}");
}

#[test]
fn measured_pressures_are_compared_and_never_called_a_proof() {
    let with = |measured: &str| reduced(&ARGON.replacen("\"clock\"", &format!("\"measured\": {measured},\n  \"clock\""), 1));
    let truth = reduced(ARGON).states.reflected.pressure.value / 1000.0;
    let near = with(&format!("{{ \"pressure_5\": \"{truth:.2} ± 3 kPa\" }}"));
    assert_eq!(codes(&near), ["measured-agrees"]);
    assert!(near.flags[0].text.contains("does not prove the gas"));
    let far = with(&format!("{{ \"pressure_5\": \"{:.2} ± 3 kPa\", \"rise\": \"{truth:.2} kPa\" }}", truth * 1.1));
    assert_eq!(codes(&far), ["measured-disagrees", "measured-not-judged"]);
}

#[test]
fn a_wall_that_is_not_rigid_and_limits_of_validity_are_said() {
    let yielding = reduced(&ARGON.replacen("\"clock\"", "\"wall\": { \"impedance\": \"39.5 MPa s/m\" },\n  \"clock\"", 1));
    assert!(codes(&yielding).contains(&"wall-moves"));
    let rigid = reduced(ARGON);
    let (given_way, stood) = (&yielding.states.reflected, &rigid.states.reflected);
    // V = (p5 − p1)/Z, within the change of the step itself.
    assert!((given_way.gas_speed.value * 39.5e6 / rigid.step.value - 1.0).abs() < 1e-3);
    assert!(given_way.pressure.value < stood.pressure.value && given_way.temperature.value < stood.temperature.value);
    let gas = r#"{ "heat_capacity_ratio": "5/3", "molar_mass": "39.948 g/mol" }"#;
    let hot = reduced(&given(gas, r#"{ "pressure": "200 kPa", "temperature": "296.2 K" }"#, r#""shock_speed": "2200 m/s""#));
    assert!(codes(&hot).contains(&"ionisation") && codes(&hot).contains(&"real-gas"));
}

#[test]
fn few_degrees_of_freedom_widen_the_coverage() {
    let gas = r#"{ "heat_capacity_ratio": "5/3", "molar_mass": "39.948 g/mol" }"#;
    let fill = r#"{ "pressure": "8 ± 0 kPa", "temperature": "296.2 ± 0 K" }"#;
    let report = reduced(&given(gas, fill, r#""shock_speed": "950 ± 1 m/s (dof 4)""#));
    // JCGM 100:2008, table G.2: t for 4 degrees of freedom at 95.45 % is 2.87.
    assert!((report.step.coverage_factor.unwrap() - 2.87).abs() < 0.005);
    let gauge = reduced(&given(
        gas,
        r#"{ "pressure": "-93 ± 1 kPa(g) (dof 3)", "temperature": "296.2 ± 0 K" }"#,
        r#""ambient": "101 ± 1 kPa", "shock_speed": "950 ± 0 m/s""#,
    ));
    // Welch and Satterthwaite: (1 + 1)²/(1/3) = 12; t(12) at 95.45 % is 2.23 (JCGM 100:2008, table G.2).
    assert!((gauge.states.fill.pressure.coverage_factor.unwrap() - 2.23).abs() < 0.005);
}

#[test]
fn mutated_records_never_panic_in_the_reduction() {
    let mut state = 0x2545_f491_4f6c_dd1d_u64;
    let mut below = |limit: usize| {
        state ^= state << 13;
        state ^= state >> 7;
        state ^= state << 17;
        (state % limit as u64) as usize
    };
    let mut reduced = 0;
    for round in 0..300 {
        let mut bytes = if round % 2 == 0 { ARGON } else { SENSOR }.as_bytes().to_vec();
        for _ in 0..3 {
            let at = below(bytes.len());
            if bytes[at].is_ascii_digit() {
                bytes[at] = b'0' + below(10) as u8;
            }
        }
        if let Ok(report) = Shot::read(&bytes).and_then(|shot| shot.reduce()) {
            reduced += 1;
            assert!(!report.to_json().unwrap().contains("NaN") && report.made_by.seed.is_none());
        }
    }
    assert!(reduced > 50, "only {reduced} mutated records were still reduced");
}
