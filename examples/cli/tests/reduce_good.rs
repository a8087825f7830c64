//! Good records give a report, as text and as JSON.

mod common;

use common::{ARGON, KINETICS, NITROGEN, SENSOR, changed, endwall, reduce};
use endwall::record::Shot;
use serde_json::Value;

/// An argon shot by a given speed.
const BY_SPEED: &str = r#"{ "record": "shot/1", "name": "by speed", "gas": { "Ar": "balance", "He": "0 %" }, "heat_capacity": "constant",
  "fill": { "pressure": "8 ± 0.02 kPa", "temperature": "296.2 ± 0.5 K" }, "shock_speed": "950 ± 1 m/s" }"#;

fn json(record: &str) -> Value {
    serde_json::from_str(&reduce(record, &["--json"]).good()).unwrap()
}

fn keys(value: &Value) -> Vec<&str> {
    value.as_object().unwrap().keys().map(String::as_str).collect()
}

#[test]
fn the_json_object_has_exactly_the_keys_of_the_format_in_their_order() {
    let quantity = ["value", "unit", "proven", "standard_uncertainty", "expanded", "coverage_factor"];
    let fitted = ["value", "unit", "standard_uncertainty", "expanded", "coverage_factor"];
    for record in [ARGON, SENSOR, KINETICS, NITROGEN] {
        let report = json(record);
        let top = ["incident", "states", "reflected", "step", "heat_capacity", "fit", "budget", "correlation"];
        let end = ["test_time", "boundary_layer", "bifurcation", "flags", "made_by"];
        assert_eq!(keys(&report), [&top[..], &end].concat());
        assert!(end[..3].iter().all(|key| report[key].is_null()));
        assert_eq!(keys(&report["incident"]), ["speed", "mach", "attenuation"]);
        assert_eq!(keys(&report["incident"]["speed"]), fitted);
        assert_eq!(keys(&report["incident"]["attenuation"]), fitted);
        assert_eq!(keys(&report["incident"]["mach"]), quantity);
        assert_eq!(keys(&report["states"]), ["1", "2", "5"]);
        for state in ["1", "2", "5"] {
            let state = &report["states"][state];
            assert_eq!(keys(state), ["pressure", "temperature", "density", "sound_speed", "gas_speed"]);
            for name in keys(state) {
                assert_eq!(keys(&state[name]), quantity);
            }
        }
        assert_eq!(keys(&report["reflected"]), ["speed", "mach"]);
        assert_eq!(keys(&report["step"]), quantity);
        assert_eq!(keys(&report["heat_capacity"]), ["chosen", "beside", "relaxation"]);
        for other in report["heat_capacity"]["beside"].as_array().unwrap() {
            assert_eq!(keys(other), ["heat_capacity", "2.temperature", "5.temperature", "5.pressure"]);
            assert!(keys(other)[1..].iter().all(|name| keys(&other[*name]) == quantity));
        }
        for time in report["heat_capacity"]["relaxation"].as_array().unwrap() {
            assert_eq!(keys(time), ["species", "2", "5", "factor"]);
        }
        assert_eq!(keys(&report["fit"]), ["stations", "chi_squared", "degrees_of_freedom"]);
        assert_eq!(keys(&report["fit"]["stations"][0]), ["name", "residual", "standardised"]);
        for line in report["budget"].as_array().unwrap() {
            assert_eq!(keys(line), ["input", "standard_uncertainty", "share"]);
            assert_eq!(keys(&line["share"]), ["5.temperature", "5.pressure", "step"]);
        }
        assert_eq!(keys(&report["correlation"]), ["5.temperature,5.pressure"]);
        assert!(report["flags"].as_array().unwrap().iter().all(|flag| keys(flag) == ["code", "text"]));
        assert_eq!(keys(&report["made_by"]), ["version", "gas_data", "input_digest", "seed"]);
        assert!(report["made_by"]["seed"].is_null());
    }
    let by_speed = json(BY_SPEED);
    assert!(by_speed["fit"].is_null() && by_speed["incident"]["attenuation"].is_null());
    assert_eq!(keys(&by_speed["incident"]["speed"]), quantity);
}

#[test]
fn printed_numbers_read_back_to_the_same_doubles() {
    for record in [ARGON, SENSOR, BY_SPEED, KINETICS, NITROGEN] {
        let printed = json(record);
        let report = Shot::read(record.as_bytes()).unwrap().reduce().unwrap();
        let same = |printed: &Value, wanted: f64| {
            // The digits as printed, through the standard library's correctly rounded reader.
            let read: f64 = printed.to_string().parse().unwrap();
            assert_eq!(read.to_bits(), wanted.to_bits(), "{printed}");
        };
        for (key, state) in [("1", &report.states.fill), ("2", &report.states.incident), ("5", &report.states.reflected)] {
            let all = [
                ("pressure", &state.pressure),
                ("temperature", &state.temperature),
                ("density", &state.density),
                ("sound_speed", &state.sound_speed),
                ("gas_speed", &state.gas_speed),
            ];
            for (name, quantity) in all {
                let printed = &printed["states"][key][name];
                same(&printed["value"], quantity.value);
                let [low, high] = quantity.proven.unwrap();
                same(&printed["proven"][0], low);
                same(&printed["proven"][1], high);
                assert!(low <= quantity.value && quantity.value <= high);
                if let Some(standard) = quantity.standard_uncertainty {
                    same(&printed["standard_uncertainty"], standard);
                    same(&printed["expanded"], quantity.expanded.unwrap());
                }
            }
        }
        same(&printed["correlation"]["5.temperature,5.pressure"], report.correlation.temperature_pressure.unwrap());
        for (printed, line) in printed["budget"].as_array().unwrap().iter().zip(&report.budget) {
            same(&printed["standard_uncertainty"], line.standard_uncertainty);
            same(&printed["share"]["step"], line.share.step.unwrap());
        }
    }
}

#[test]
fn the_states_follow_the_closed_forms() {
    // Rankine–Hugoniot relations of NACA Report 1135 and their reflected forms, evaluated apart in plain doubles.
    let report = json(BY_SPEED);
    let (g, u, t1, p1, w) = (5.0 / 3.0, 950.0, 296.2, 8000.0, 0.039_948);
    let m2: f64 = u * u * w / (g * 8.314_462_618_153_24 * t1);
    let z = m2 - 1.0;
    let p21 = 1.0 + 2.0 * g * z / (g + 1.0);
    let p52 = ((g + 1.0) + (3.0 * g - 1.0) * z) / ((g + 1.0) + (g - 1.0) * z);
    let t51 = (1.0 + 2.0 * (g - 1.0) * z / (g + 1.0)) * (1.0 + (3.0 * g - 1.0) * z / (g + 1.0)) / m2;
    let close = |value: &Value, wanted: f64| assert!((value["value"].as_f64().unwrap() / wanted - 1.0).abs() < 1e-13, "{value} {wanted}");
    close(&report["incident"]["mach"], m2.sqrt());
    close(&report["states"]["2"]["pressure"], p1 * p21);
    close(&report["states"]["5"]["pressure"], p1 * p21 * p52);
    close(&report["states"]["5"]["temperature"], t1 * t51);
    close(&report["step"], p1 * (p21 * p52 - 1.0));
}

/// The text of each section of a report by its heading.
fn sections(report: &str) -> Vec<(String, String)> {
    let mut sections = vec![(String::new(), String::new())];
    let lines: Vec<&str> = report.lines().collect();
    for (at, line) in lines.iter().enumerate() {
        let underlined = lines.get(at + 1).is_some_and(|next| next.len() > 2 && next.chars().all(|c| c == '-'));
        if underlined {
            sections.push(((*line).to_string(), String::new()));
        }
        let text = &mut sections.last_mut().unwrap().1;
        text.push_str(line);
        text.push('\n');
    }
    sections
}

#[test]
fn the_text_keeps_arithmetic_and_measurement_apart() {
    for record in [ARGON, SENSOR, BY_SPEED, KINETICS, NITROGEN] {
        let text = reduce(record, &["--monte-carlo"]).good();
        assert!(text.contains("standard uncertainty"));
        let sections = sections(&text);
        assert!(sections.len() > 6, "{text}");
        let proven: Vec<&str> =
            sections.iter().filter(|(_, text)| text.to_lowercase().contains("proven")).map(|(heading, _)| heading.as_str()).collect();
        assert_eq!(proven, ["Digits of the arithmetic"]);
        let words: Vec<&str> = text.split_whitespace().collect();
        assert!(words.join(" ").contains("No number here authorises a shot."));
    }
}

#[test]
fn the_demo_of_a_mixture_says_what_a_chemist_must_know() {
    let text = reduce(KINETICS, &[]).good();
    let words = text.split_whitespace().collect::<Vec<_>>().join(" ");
    for wanted in [
        "! [can-burn] this mixture can burn: it holds CH4 and O2. All pressures here,",
        "! [leak] 0.0250 % of the driven gas is taken as air that leaked in",
        "! [pressure-change] after the pressure changed by 4.00 % the temperature is 21",
        "[measured-agrees] measured.pressure_5",
        "gas data: NASA/TP-2002-211556",
        "Times by the empirical formula of Millikan and White (1963)",
        "Composition: mole fractions",
    ] {
        assert!(words.contains(wanted), "{wanted}: {text}");
    }
    // The caution stands before the first pressure.
    assert!(text.find("[can-burn]").unwrap() < text.find("Pressure p5").unwrap());
    let report = json(KINETICS);
    assert_eq!(report["heat_capacity"]["chosen"], "equilibrium");
    assert_eq!(report["heat_capacity"]["beside"][1]["5.temperature"], report["states"]["5"]["temperature"]);
    let inputs: Vec<&str> = report["budget"].as_array().unwrap().iter().map(|line| line["input"].as_str().unwrap()).collect();
    assert_eq!(inputs.iter().filter(|input| **input == "composition").count(), 1, "{inputs:?}");
    assert_eq!(inputs.last(), Some(&"gas data"));
    // The times were made up for 968 m/s at the wall and 0.9 %/m.
    for (quantity, truth) in [(&report["incident"]["speed"], 968.0), (&report["incident"]["attenuation"], 0.009)] {
        let of = |name: &str| quantity[name].as_f64().unwrap();
        assert!((of("value") - truth).abs() < 3.0 * of("standard_uncertainty"), "{quantity}");
    }
    let silent = changed(KINETICS, "  \"heat_capacity\": \"equilibrium\",\n", "");
    let flags = json(&silent)["flags"].to_string();
    assert!(flags.contains("heat-capacity-not-chosen"), "{flags}");
    let frozen = json(&changed(KINETICS, "\"equilibrium\"", "\"frozen then equilibrium\""));
    assert_eq!(frozen["states"]["5"]["temperature"], report["heat_capacity"]["beside"][3]["5.temperature"]);
}

#[test]
fn the_demo_of_frozen_nitrogen_shows_the_times_behind_its_choice() {
    let report = json(NITROGEN);
    assert_eq!(report["heat_capacity"]["chosen"], "frozen");
    assert_eq!(report["flags"].to_string(), "[]");
    // Frozen nitrogen is a gas of 7/2 R: the closed forms for γ 7/5 at this shock speed.
    let of = |pointer: &str| report.pointer(pointer).unwrap()["value"].as_f64().unwrap();
    let m2 = of("/incident/speed").powi(2) * 0.028_013_4 / (1.4 * 8.314_462_618_153_24 * 296.05);
    let z = m2 - 1.0;
    let t51 = (1.0 + 2.0 * 0.4 * z / 2.4) * (1.0 + 3.2 * z / 2.4) / m2;
    assert!((of("/states/5/temperature") / (296.05 * t51) - 1.0).abs() < 1e-12);
    let time = &report["heat_capacity"]["relaxation"][0];
    assert!(time["species"] == "N2" && time["factor"] == 1.5 && time["5"].as_f64().unwrap() > 1e-3, "{time}");
    assert!(reduce(NITROGEN, &[]).good().contains(" Torr (k=2)"));
}

#[test]
fn a_monte_carlo_run_checks_a_mixture() {
    let text = reduce(KINETICS, &["--monte-carlo", "200000"]).good();
    assert!(text.contains("[monte-carlo-agrees]") && text.contains("seed 1"), "{text}");
}

#[test]
fn a_file_and_standard_input_give_the_same() {
    let file = concat!(env!("CARGO_MANIFEST_DIR"), "/../records/argon-b0412.json");
    for options in [&["--json"][..], &[]] {
        assert_eq!(endwall(&[&["reduce", file], options].concat(), b"").good(), reduce(ARGON, options).good());
    }
}

#[test]
fn a_monte_carlo_run_repeats_and_tells_its_seed() {
    let seed = |options: &[&str]| {
        let text = reduce(ARGON, options).good();
        assert_eq!(text, reduce(ARGON, options).good());
        let report: Value = serde_json::from_str(&text).unwrap();
        assert!(report["flags"].to_string().contains("monte-carlo-agrees"), "{text}");
        report["made_by"]["seed"].as_u64().unwrap()
    };
    assert_eq!(seed(&["--json", "--monte-carlo"]), 1);
    assert_eq!(seed(&["--json", "--monte-carlo", "--seed", "7"]), 7);
    assert!(reduce(ARGON, &["--monte-carlo", "--seed", "7"]).good().contains("seed 7"));
    let file = concat!(env!("CARGO_MANIFEST_DIR"), "/../records/argon-b0412.json");
    assert_eq!(seed(&["--json", "--monte-carlo", "500000", "--seed", "7"]), 7);
    endwall(&["reduce", "--monte-carlo", "500000", file], b"").good();
    // A number of trials may be left out, but a file is none.
    endwall(&["reduce", "--monte-carlo", file], b"").refused(&["--monte-carlo", "argon-b0412.json", "FILE stands before"]);
    for few in ["0", "1000", "19999"] {
        reduce(ARGON, &["--monte-carlo", few]).refused(&[few, "too few", "20000"]);
    }
    // This shot has not settled after two blocks, and says so.
    let short: Value = serde_json::from_str(&reduce(ARGON, &["--json", "--monte-carlo", "20000"]).good()).unwrap();
    assert!(short["flags"].to_string().contains("20000 trials, which have not settled"), "{short}");
    reduce(ARGON, &["--seed", "7"]).refused(&["--monte-carlo"]);
    reduce(ARGON, &["--monte-carlo", "--seed", "-7"]).refused(&["-7"]);
    reduce(ARGON, &["--monte-carlo", "--seed", "18446744073709551615"]).refused(&["18446744073709551615", "2^53", "smaller"]);
}

/// The argon record with the times of a shock of 950 m/s at the wall whose speed grows by this fraction per metre away from it.
fn slowing(attenuation: f64) -> String {
    let time = |distance: f64| (attenuation * distance).ln_1p() / (attenuation * 950.0);
    let typed = [("2.060", "0.00 "), ("1.560", "515.02"), ("1.060", "1033.76"), ("0.560", "1555.46"), ("0.060", "2079.26")];
    typed.iter().fold(ARGON.to_string(), |record, (distance, arrival)| {
        let since_first = time(2.06) - time(distance.parse().unwrap());
        changed(&record, &format!("\"arrival\": \"{arrival}"), &format!("\"arrival\": \"{:.2} ", since_first * 1e6))
    })
}

#[test]
fn doubts_about_a_result_are_flags_and_no_failure() {
    let flagged = |record: &str, code: &str| {
        let text = reduce(record, &[]).good();
        assert!(text.contains(&format!("[{code}]")), "{code}: {text}");
        let report = json(record);
        assert!(report["flags"].as_array().unwrap().iter().any(|flag| flag["code"] == code));
    };
    flagged(&changed(ARGON, "1033.76 ± 0.3", "1039.76 ± 0.3"), "outlier");
    flagged(&changed(ARGON, "0.060 ± 0.0003 m", "0.460 ± 0.0003 m").replace("2079.26", "1661.26"), "far-station");
    flagged(&changed(ARGON, "8.000 ± 0.020 kPa", "8.000 kPa"), "missing-uncertainty");
    flagged(&changed(BY_SPEED, "950 ± 1 m/s", "950 m/s"), "missing-uncertainty");
    flagged(&changed(SENSOR, "\"C-17\",", "\"C-17\", \"tube\": { \"driven_bore\": \"60 mm\" },"), "not-used");
    flagged(&slowing(-0.03), "attenuation-negative");
    flagged(&slowing(0.09), "attenuation-large");
    let question = changed(BY_SPEED, "296.2 ± 0.5 K", "80 ± 0.5 K");
    reduce(&question, &[]).refused(&["fill.temperature", "80 ± 0.5 K", "\"confirm\": [\"fill.temperature\"]"]);
    flagged(&changed(&question, "\"record\"", "\"confirm\": [\"fill.temperature\"], \"record\""), "confirmed");
}

/// Tube and driver as in a plan: how long state 5 lasts, and what the boundary layer does.
#[test]
fn a_shot_with_tube_and_driver_has_its_test_time() {
    let fields = "\"tube\": { \"driven_length\": \"6.2 m\", \"driver_length\": \"2.6 m\", \"driven_bore\": \"81 mm\", \"observe\": \"20 mm\" }, \"driver\": { \"gas\": { \"He\": \"balance\" }, \"temperature\": \"296 K\" }, \"tolerance\": { \"disturbance\": \"1 %\" }, \"record\"";
    let record = changed(BY_SPEED, "\"record\"", fields);
    let report = json(&record);
    let number = |path: &str| report.pointer(path).and_then(Value::as_f64).unwrap_or_else(|| panic!("{path}: {report}"));
    assert!(number("/test_time/end_wall/value") > number("/test_time/observed/time/value"));
    assert_eq!(number("/test_time/disturbance_tolerance"), 0.01);
    assert!(number("/boundary_layer/uniform_time/0") < number("/boundary_layer/uniform_time/1"));
    assert!(number("/boundary_layer/uniform_time/1") <= number("/test_time/end_wall/value"));
    assert!(number("/bifurcation/wall_layer_mach") > 1.0);
    let text = reduce(&record, &[]).good();
    for words in ["How long state 5 lasts", "Uniform time 20.0 mm from the end wall", "laminar, ", "by Mark's criterion", "[ideal-waves]"] {
        assert!(text.contains(words), "{words}\n{text}");
    }
    let seeded = reduce(&record, &["--monte-carlo", "20000", "--json"]).good();
    assert_eq!(serde_json::from_str::<Value>(&seeded).unwrap()["test_time"], report["test_time"]);
    reduce(&changed(&record, "20 mm", "-20 mm"), &[]).refused(&["tube.observe", "-20 mm", "not negative"]);
}

#[test]
fn a_gauge_pressure_is_marked_where_it_is_repeated() {
    let gauge = changed(ARGON, "8.000 ± 0.020 kPa", "-0.2 ± 0.001 bar(g)");
    let text = reduce(&changed(&gauge, "\"clock\"", "\"ambient\": \"1013 ± 1 mbar\", \"clock\""), &[]).good();
    let line = text.lines().find(|line| line.starts_with("fill.pressure")).unwrap();
    assert!(line.contains("-20000 Pa (gauge)"), "{line}");
    assert!(text.contains("[gauge-pressure]") && text.contains("81300 Pa") && text.contains("Pressures are absolute."), "{text}");
}

#[test]
fn notes_do_not_push_the_numbers_aside() {
    let input = |record: &str| {
        let text = reduce(record, &[]).good();
        text.lines().find(|line| line.starts_with("fill.pressure")).unwrap().to_string()
    };
    let long = changed(ARGON, "Invented shot", &"long ".repeat(100));
    assert_eq!(input(&long), input(ARGON));
    assert!(input(ARGON).chars().count() < 96);
}

#[test]
#[cfg(target_os = "linux")]
fn a_full_disk_is_no_bad_input() {
    use std::process::{Command, Stdio};
    let full = || Stdio::from(std::fs::File::options().write(true).open("/dev/full").unwrap());
    let file = concat!(env!("CARGO_MANIFEST_DIR"), "/../records/argon-b0412.json");
    for arguments in [&["reduce", file][..], &["table", "--heat-capacity-ratio", "7/5", "--from", "2", "--to", "3", "--step", "1"]] {
        let output = Command::new(env!("CARGO_BIN_EXE_endwall")).args(arguments).stdout(full()).stderr(Stdio::piped()).output().unwrap();
        let error = String::from_utf8(output.stderr).unwrap();
        assert_eq!(output.status.code(), Some(1), "{error}");
        assert!(error.contains("standard output: cannot be written") && error.contains("space on the device"), "{error}");
    }
}

#[test]
#[cfg(target_os = "linux")]
fn a_file_name_need_not_be_text() {
    use std::os::unix::ffi::OsStringExt;
    let name = std::ffi::OsString::from_vec(format!("endwall-{}-", std::process::id()).into_bytes().into_iter().chain([0xff]).collect());
    let file = std::env::temp_dir().join(name);
    std::fs::write(&file, ARGON).unwrap();
    let output = std::process::Command::new(env!("CARGO_BIN_EXE_endwall")).arg("reduce").arg(&file).output().unwrap();
    std::fs::remove_file(&file).unwrap();
    assert_eq!(String::from_utf8(output.stdout).unwrap(), reduce(ARGON, &[]).good());
}

#[test]
#[cfg(unix)]
fn a_reader_that_goes_away_is_no_panic() {
    use std::process::{Command, Stdio};
    let file = concat!(env!("CARGO_MANIFEST_DIR"), "/../records/argon-b0412.json");
    let run = |arguments: &[&str]| {
        let mut command = Command::new(env!("CARGO_BIN_EXE_endwall"));
        let mut child = command.args(arguments).stdout(Stdio::piped()).stderr(Stdio::piped()).spawn().unwrap();
        drop(child.stdout.take());
        let output = child.wait_with_output().unwrap();
        assert_eq!((output.status.code(), output.stderr.as_slice()), (Some(0), &b""[..]), "{arguments:?}");
    };
    run(&["table", "--heat-capacity-ratio", "7/5", "--from", "1.001", "--to", "20", "--step", "0.01"]);
    run(&["reduce", file]);
    run(&["reduce", file, "--json"]);
    // Nor is an error that nobody reads.
    let mut child = Command::new(env!("CARGO_BIN_EXE_endwall")).args(["reduce", "none"]).stderr(Stdio::piped()).spawn().unwrap();
    drop(child.stderr.take());
    assert_eq!(child.wait().unwrap().code(), Some(2));
}

#[test]
fn the_command_says_what_it_is() {
    assert_eq!(endwall(&["--version"], b"").good().trim(), concat!("endwall ", env!("CARGO_PKG_VERSION")));
    for task in ["reduce", "states", "table", "gases"] {
        assert!(endwall(&["--help"], b"").good().contains(task));
        assert!(endwall(&[task, "--help"], b"").good().contains("Usage: endwall"));
    }
    endwall(&[], b"").refused(&["Usage"]);
    endwall(&["explode"], b"").refused(&["explode"]);
}
