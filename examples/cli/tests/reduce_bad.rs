//! Bad records are refused: exit code 2, and an error that names the field, the text as typed and the remedy.

mod common;

use common::{ARGON, KINETICS, SENSOR, changed, endwall, reduce};

/// A shot by its speed.
fn by_speed(gas: &str, speed: &str) -> String {
    format!(
        r#"{{ "record": "shot/1", "gas": {gas}, "heat_capacity": "constant",
        "fill": {{ "pressure": "8 ± 0.02 kPa", "temperature": "296.2 ± 0.5 K" }}, "shock_speed": "{speed}" }}"#
    )
}

const RATIO: &str = r#"{ "heat_capacity_ratio": "5/3", "molar_mass": "39.948 g/mol" }"#;

/// Replaces a text of the argon record and wants these in the refusal.
fn refuse(from: &str, to: &str, names: &[&str]) {
    reduce(&changed(ARGON, from, to), &[]).refused(names);
}

const PRESSURE: &str = "8.000 ± 0.020 kPa";
const TEMPERATURE: &str = "296.2 ± 0.5 K";

#[test]
fn pressures() {
    refuse(PRESSURE, "8.000 ± 0.020 kPa(g)", &["fill.pressure", "8.000 ± 0.020 kPa(g)", "\"ambient\""]);
    refuse(PRESSURE, "-93 kPa", &["fill.pressure", "-93 kPa", "gauge"]);
    refuse(PRESSURE, "0 kPa", &["fill.pressure", "0 kPa", "greater than zero"]);
    refuse(PRESSURE, "0.5 Pa", &["fill.pressure", "0.5 Pa", "is the unit right?", "\"confirm\""]);
    refuse(PRESSURE, "8.000 ± 0.020 MPa", &["fill.pressure", "8.000 ± 0.020 MPa", "another unit", "\"confirm\""]);
    refuse(PRESSURE, "8.000 Kpa", &["fill.pressure", "8.000 Kpa", "was kPa meant?"]);
    refuse(PRESSURE, "8.000 kPa abs", &["fill.pressure", "8.000 kPa abs", "notes"]);
    refuse(PRESSURE, "8.000", &["fill.pressure", "8.000", "no unit", "kPa"]);
    refuse(PRESSURE, "8,000 kPa", &["fill.pressure", "8,000 kPa", "point"]);
    refuse(PRESSURE, "8.000 K", &["fill.pressure", "8.000 K", "a temperature", "kPa"]);
    refuse(PRESSURE, "8.000 ± 20 kPa", &["fill.pressure", "8.000 ± 20 kPa", "more than half", "its unit", "\"confirm\""]);
    refuse(PRESSURE, "8.000 ± 0.020 ± 0.010 kPa", &["fill.pressure", "± stands twice", "once"]);
    refuse(PRESSURE, "8.000 ± -0.020 kPa", &["fill.pressure", "negative", "zero or more"]);
}

#[test]
fn temperatures() {
    refuse(TEMPERATURE, "23 ± 0.5 K", &["fill.temperature", "23 ± 0.5 K", "was 23 degC meant?", "\"confirm\": [\"fill.temperature\"]"]);
    refuse(TEMPERATURE, "2300 K", &["fill.temperature", "2300 K", "was degC or another unit meant?", "\"confirm\""]);
    for edge in ["100 K", "2000 K"] {
        reduce(&changed(&by_speed(RATIO, "2000 m/s"), "296.2 ± 0.5 K", edge), &[]).good();
    }
    for beyond in ["99.99 K", "2000.1 K", "-174 degC"] {
        let record = changed(&by_speed(RATIO, "2000 m/s"), "296.2 ± 0.5 K", beyond);
        reduce(&record, &[]).refused(&["fill.temperature", beyond, "\"confirm\": [\"fill.temperature\"]"]);
        reduce(&changed(&record, "\"record\"", "\"confirm\": [\"fill.temperature\"], \"record\""), &[]).good();
    }
    refuse(TEMPERATURE, "296.2 degC", &["fill.temperature", "296.2 degC", "was 296.2 K meant?"]);
    refuse(TEMPERATURE, "0 K", &["fill.temperature", "0 K", "degC"]);
    refuse(TEMPERATURE, "-20 K", &["fill.temperature", "-20 K", "degC"]);
    refuse(TEMPERATURE, "-300 degC", &["fill.temperature", "-300 degC", "above 0 K", "check the sign"]);
    refuse(TEMPERATURE, "296.2 C", &["fill.temperature", "296.2 C", "was degC meant?"]);
    let confirmed = changed(&changed(ARGON, TEMPERATURE, "23 ± 0.5 K"), "\"record\"", "\"confirm\": [\"fill.temperature\"], \"record\"");
    reduce(&confirmed, &[]).good();
    let elsewhere = changed(&changed(ARGON, TEMPERATURE, "23 ± 0.5 K"), "\"record\"", "\"confirm\": [\"fill.temperatur\"], \"record\"");
    reduce(&elsewhere, &[]).refused(&["confirm[0]", "fill.temperatur", "fill.temperature"]);
}

#[test]
fn gases() {
    let refuse_ratio = |ratio: &str, names: &[&str]| {
        reduce(&by_speed(&changed(RATIO, "5/3", ratio), "950 ± 1 m/s"), &[]).refused(names);
    };
    for rounded in ["1.66", "1.67", "1.667", "1.6667"] {
        refuse_ratio(rounded, &["gas.heat_capacity_ratio", rounded, "was 5/3 meant?", "\"confirm\""]);
    }
    for wrong in ["1", "0.9", "-5/3", "0", "3/5"] {
        refuse_ratio(wrong, &["gas.heat_capacity_ratio", wrong, "greater than one", "5/3"]);
    }
    refuse_ratio("5:3", &["gas.heat_capacity_ratio", "5:3", "without a unit, like 5/3"]);
    refuse_ratio("4", &["gas.heat_capacity_ratio", "4", "above three"]);
    refuse_ratio("5/0", &["gas.heat_capacity_ratio", "5/0", "denominator"]);
    refuse("39.948 g/mol", "39.948 kg/mol", &["gas.molar_mass", "39.948 kg/mol", "was g/mol meant?"]);
    refuse("39.948 g/mol", "0 g/mol", &["gas.molar_mass", "0 g/mol", "greater than zero"]);
    let mixture = |gas: &str, names: &[&str]| reduce(&by_speed(gas, "950 ± 1 m/s"), &[]).refused(names);
    mixture(r#"{ "Ar": "90 %", "He": "5 %" }"#, &["gas", "sum to 0.95", "balance"]);
    mixture(r#"{ "Ar": "balance", "He": "balance" }"#, &["gas.He", "Ar is the balance"]);
    mixture(r#"{ "Ar": "110 %", "He": "balance" }"#, &["gas.Ar", "110 %", "correct the number"]);
    mixture(r#"{ "Ar": "50", "He": "balance" }"#, &["gas.Ar", "50", "was % meant?"]);
    mixture(r#"{ "Ar": "-1 %", "He": "balance" }"#, &["gas.Ar", "-1 %", "sign"]);
    mixture(r#"{ "co2": "balance", "Ar": "1 %" }"#, &["gas.co2", "unknown", "was CO2 meant?", "built in are Ar, "]);
    mixture("{}", &["gas", "no gas is given", "5/3"]);
    mixture("[]", &["gas", "a list stands where an object is wanted"]);
}

#[test]
fn mixtures() {
    let refuse = |from: &str, to: &str, names: &[&str]| reduce(&changed(KINETICS, from, to), &[]).refused(names);
    refuse("\"equilibrium\"", "\"frosen\"", &["heat_capacity", "frosen", "\"frozen then equilibrium\""]);
    refuse("\"Ar\": \"balance\"", "\"Ar\": \"98 %\"", &["gas", "sum to 0.996", "balance"]);
    refuse("0.40 ± 0.10 Pa/min", "0.40 ± 0.10 Pa", &["leak.rate", "0.40 ± 0.10 Pa", "Pa/s"]);
    refuse("240 ± 20 s", "240 ± 20 h", &["leak.waiting", "240 ± 20 h"]);
    refuse("0.40 ± 0.10 Pa/min", "900 Pa/min", &["leak", "56.2 % of the fill"]);
    refuse("\"4.0 ± 0.5 %\"", "\"4.0 ± 0.5\"", &["measured.pressure_change", "is it right?", "\"confirm\""]);
    refuse("\"clock\"", "\"humidity\": \"40 %\", \"clock\"", &["humidity", "no air"]);
    refuse("\"clock\"", "\"species\": { \"O2\": {} }, \"clock\"", &["species.O2", "built in"]);
    // At 5300 m/s the gas is hotter than 6000 K, where the data of methane end.
    let times = [("458.33", "82.0"), ("918.26", "164.6"), ("1379.67", "247.8"), ("1843.53", "331.6")];
    let fast = times.into_iter().fold(KINETICS.to_string(), |record, (from, to)| changed(&record, from, to));
    reduce(&fast, &[]).refused(&["stations", "200 K to 6000 K", "not extrapolated"]);
}

#[test]
fn stations() {
    let swapped = changed(&changed(ARGON, "515.02", "1033.77"), "1033.76", "515.03");
    reduce(&swapped, &[]).refused(&["stations", "S2", "S3", "swapped", "1.560"]);
    refuse("\"S2\"", "\"S1\"", &["stations[1].name", "S1", "each its own"]);
    refuse("1.560 ± 0.0003 m", "2.060 ± 0.0003 m", &["stations", "S1", "S2", "same distance", "\"use\": false"]);
    refuse("0.060 ± 0.0003 m", "-0.060 ± 0.0003 m", &["stations[4].from_end_wall", "-0.060", "measure from the end wall"]);
    let bare = changed(&changed(ARGON, "1.560 ± 0.0003 m", "1.560 m"), "515.02 ± 0.3 us", "515.02 us");
    reduce(&bare, &[]).refused(&["stations[1].arrival", "515.02 us", "state an uncertainty for every station"]);
    refuse("515.02 ± 0.3 us", "515.02 ± 0.3 s", &["stations"]);
    refuse("\"arrival\": \"515.02 ± 0.3 us\"", "\"use\": false", &["stations[1].arrival"]);
    let few = changed(SENSOR, "  \"attenuation\": \"0.8 ± 0.5 %/m\",\n", "");
    reduce(&few, &[]).refused(&["attenuation", "straight line", "\"attenuation\": \"1.0 ± 0.6 %/m\""]);
    let slow = ARGON.replace("us\"", "ms\"");
    reduce(&slow, &[]).refused(&["stations", "m/s", "are the units of distance and time right?"]);
    // 260 m/s by the times, in argon at 296.2 K with 320.5 m/s.
    let subsonic = [("515.02", "1923"), ("1033.76", "3846"), ("1555.46", "5769"), ("2079.26", "7692")];
    let subsonic = subsonic.into_iter().fold(ARGON.to_string(), |record, (from, to)| changed(&record, from, to));
    reduce(&subsonic, &[]).refused(&["stations", "sound speed", "320.54"]);
    refuse("\"stations\": [", "\"stations\": [], \"notes2\": [", &["notes2"]);
}

#[test]
fn more_stations_than_can_be_fitted() {
    let one = |at: usize| format!(r#"{{ "name": "S{at}", "from_end_wall": "{} mm", "arrival": "{at} us" }}"#, 100 - at);
    let stations: Vec<String> = (0..17).map(one).collect();
    let record = changed(&by_speed(RATIO, "950 m/s"), "\"shock_speed\": \"950 m/s\"", &format!("\"stations\": [{}]", stations.join(",")));
    reduce(&record, &[]).refused(&["stations", "17", "at most 16", "\"use\": false"]);
}

#[test]
fn speeds() {
    for speed in ["300 ± 1 m/s", "320 m/s", "320.543130348547 m/s"] {
        reduce(&by_speed(RATIO, speed), &[]).refused(&["shock_speed", speed, "sound speed", "320.543", "check the digits of the speed"]);
    }
    reduce(&by_speed(RATIO, "950 ± 500 m/s"), &[]).refused(&["shock_speed", "950 ± 500 m/s", "more than half"]);
    reduce(&by_speed(RATIO, "-950 m/s"), &[]).refused(&["shock_speed", "-950 m/s", "greater than zero"]);
    reduce(&by_speed(RATIO, "0 m/s"), &[]).refused(&["shock_speed", "0 m/s", "greater than zero"]);
    reduce(&by_speed(RATIO, "9.5 m/s"), &[]).refused(&["shock_speed", "9.5 m/s", "is the unit right?"]);
    refuse("\"clock\"", "\"shock_speed\": \"950 m/s\", \"clock\"", &["shock_speed", "950 m/s", "keep the one"]);
    refuse("\"stations\"", "\"station\"", &["station", "was \"stations\" meant?"]);
}

#[test]
fn numbers_that_are_none_and_numbers_out_of_range() {
    for (field, from, unit) in [
        ("fill.pressure", PRESSURE, "kPa"),
        ("fill.temperature", TEMPERATURE, "K"),
        ("gas.molar_mass", "39.948 g/mol", "g/mol"),
        ("stations[1].from_end_wall", "1.560 ± 0.0003 m", "m"),
        ("stations[1].arrival", "515.02 ± 0.3 us", "us"),
    ] {
        for number in ["NaN", "nan", "inf", "-Infinity", "∞", "", "abc", "1e400", "1e-400", "4.9e-324", "1e-310", "0x10"] {
            let typed = format!("{number} {unit}");
            refuse(from, &typed, &[field, typed.trim()]);
        }
        for bare in ["NaN", "Infinity", "-Infinity"] {
            refuse(&format!("\"{from}\""), bare, &["not valid JSON", "line"]);
        }
        for value in ["null", "true", "[]", "{}", "[1]", "1.5", "1e999"] {
            refuse(&format!("\"{from}\""), value, &[field]);
        }
    }
    reduce(&by_speed(RATIO, "1e-310 m/s"), &[]).refused(&["shock_speed", "1e-310 m/s"]);
}

#[test]
fn files() {
    reduce("", &[]).refused(&["standard input", "empty", "\"record\": \"shot/1\""]);
    reduce(" \n\t ", &[]).refused(&["empty"]);
    reduce("\u{0}", &[]).refused(&["not valid JSON"]);
    reduce("[]", &[]).refused(&["object"]);
    reduce("{}", &[]).refused(&["record", "missing", "shot/1"]);
    reduce("null", &[]).refused(&["null"]);
    reduce(&ARGON[..ARGON.len() / 2], &[]).refused(&["not valid JSON", "line"]);
    reduce(&format!("{ARGON}{ARGON}"), &[]).refused(&["one record"]);
    endwall(&["reduce", "-"], b"\xff\xfe{}").refused(&["UTF-8", "byte 1"]);
    reduce(&" ".repeat((1 << 20) + 1), &[]).refused(&["bytes", "1048576"]);
    reduce(&"[".repeat(200_000), &[]).refused(&["not valid JSON"]);
    reduce(&changed(ARGON, "\"notes\": \"", &format!("\"notes\": \"{}", "x".repeat(1 << 20))), &[]).refused(&["bytes"]);
    let comma = reduce(&changed(ARGON, "\"clock\"", ", \"clock\""), &[]);
    assert!(!comma.err.contains('?'), "{}", comma.err);
    comma.refused(&["not valid JSON", "line 13", "commas"]);
    refuse("\"shot/1\"", "\"shot/2\"", &["record", "shot/2", "shot/1"]);
    refuse("\"shot/1\"", "\"plan/1\"", &["record", "plan/1", "shot/1"]);
    endwall(&["reduce", "no such file.json"], b"").refused(&["no such file.json", "cannot be read"]);
    endwall(&["reduce", "."], b"").refused(&["cannot be read"]);
    endwall(&["reduce"], b"").refused(&["FILE"]);
    endwall(&["reduce", "-", "--jsn"], b"").refused(&["--jsn", "--json"]);
}

#[test]
#[cfg(target_os = "linux")]
fn an_endless_file_is_left_alone() {
    endwall(&["reduce", "/dev/zero"], b"").refused(&["bytes"]);
}

#[test]
fn fields() {
    refuse("\"pressure\":", "\"presure\":", &["fill.presure", "unknown", "was \"pressure\" meant?"]);
    refuse("\"molar_mass\":", "\"molarmass\":", &["gas.molarmass", "was \"molar_mass\" meant?"]);
    let measured = |field: &str| changed(ARGON, "\"clock\"", &format!("\"measured\": {{ \"{field}\": \"370 kPa\" }}, \"clock\""));
    reduce(&measured("pressure5"), &[]).refused(&["measured.pressure5", "was \"pressure_5\" meant?"]);
    reduce(&measured("Pressure-2"), &[]).refused(&["measured.Pressure-2", "was \"pressure_2\" meant?"]);
    refuse("\"clock\"", "\"colour\": 1, \"clock\"", &["colour", "unknown", "stations"]);
    refuse("\"clock\"", "\"name\": \"again\", \"clock\"", &["name", "again", "twice"]);
    refuse("\"pressure\":", "\"pressure\": \"1 kPa\", \"pressure\":", &["fill.pressure", "twice"]);
    refuse("\"arrival\": \"515.02", "\"arrival\": \"1 us\", \"arrival\": \"515.02", &["stations[1].arrival", "twice"]);
    refuse("{ \"pressure\": \"8.000 ± 0.020 kPa\", \"temperature\": \"296.2 ± 0.5 K\" }", "[]", &["fill", "a list stands where an object"]);
    refuse(", \"temperature\": \"296.2 ± 0.5 K\"", "", &["fill.temperature", "missing", "296.2"]);
    refuse("\"B-0412\"", "412", &["name", "412", "quotes"]);
    // What a file says cannot paint the terminal.
    let painted = reduce(&changed(ARGON, "\"clock\"", "\"\\u001b[31mred\": 1, \"clock\""), &[]);
    assert!(!painted.err.contains('\u{1b}'));
    painted.refused(&["red", "unknown"]);
}
