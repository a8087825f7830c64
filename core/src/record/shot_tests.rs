use alloc::string::ToString;

use super::*;
use crate::number::Rational;

const GIVEN: &str = r#"{
  "record": "shot/1", "name": "T-1",
  "gas": { "heat_capacity_ratio": "5/3", "molar_mass": "39.948 g/mol" },
  "fill": { "pressure": "8.000 ± 0.020 kPa", "temperature": "296.2 ± 0.5 K" },
  "shock_speed": "950.0 ± 1.0 m/s"
}"#;

const TIMED: &str = r#"{
  "record": "shot/1",
  "name": "T-2",
  "gas": { "CH4": "0.50 %", "O2": "1.00 %", "Ar": "balance" },
  "heat_capacity": "frozen then equilibrium",
  "fill": { "pressure": "-93.3 ± 0.02 kPa(g)", "temperature": "23.05 ± 0.5 °C" },
  "stations": [
    { "name": "S1", "from_end_wall": "1.650 ± 0.0003 m", "arrival": "0.0 ± 0.3 us", "delay": "2.0 ± 0.4 us" },
    { "name": "S2", "from_end_wall": "1.250 ± 0.0003 m", "arrival": "414.1 ± 0.3 us", "use": false, "reason": "ringing" },
    { "name": "S3", "from_end_wall": "850 ± 0.3 mm", "arrival": "0.8299(3) ms" },
    { "name": "S4", "from_end_wall": "0 m", "arrival": "1720.0 ± 0.3 µs", "use": true }
  ],
  "attenuation": "1.0 ± 0.6 %/m", "clock": "0 ± 20 ppm", "survey": "0 ± 0.5 mm",
  "ambient": "101.30 ± 0.05 kPa", "humidity": "45 ± 3 %", "leak": { "rate": "0.5 Pa/min", "waiting": "120 s" },
  "wall": { "impedance": "39.5 MPa s/m" },
  "measured": { "pressure_2": "90 ± 2 kPa", "pressure_5": "3.2 bar(g)", "rise": "312 kPa" },
  "tube": { "driven_length": "4.2 m", "driver_length": "2.0 m", "driven_bore": "76 mm", "ratings": { "driven": "60 bar(g)" } },
  "driver": { "gas": { "He": "balance" }, "pressure": "22.0 bar(a)", "temperature": "296 K" },
  "date": "2031-04-12", "operator": "duty", "instruments": { "timer": "T7" }, "notes": ["first", "second"]
}"#;

fn good(file: &str) -> Shot {
    Shot::read(file.as_bytes()).unwrap_or_else(|error| panic!("{error}"))
}

fn refused(file: &str) -> RecordError {
    Shot::read(file.as_bytes()).expect_err(file)
}

/// The record with one part replaced, which must occur.
fn with(file: &str, part: &str, by: &str) -> String {
    assert!(file.contains(part), "{part}");
    file.replacen(part, by, 1)
}

fn exact(text: &str) -> Rational {
    text.parse().unwrap()
}

fn codes(shot: &Shot) -> Vec<&str> {
    shot.flags.iter().map(|flag| flag.code.as_str()).collect()
}

#[test]
fn a_short_record_is_read() {
    let shot = good(GIVEN);
    assert_eq!(shot.name, "T-1");
    assert_eq!(shot.heat_capacity, HeatCapacityModel::Constant);
    assert_eq!(shot.fill.temperature.value(), exact("296.2"));
    let Speed::Given(speed) = &shot.speed else { panic!("given") };
    assert_eq!((speed.value(), speed.standard_uncertainty()), (exact("950"), Some(1.0)));
    assert!(shot.flags.is_empty(), "{:?}", shot.flags);
    assert!(shot.input_digest.starts_with("fnv1a64:"));
}

#[test]
fn every_field_is_read_and_every_unused_one_is_said() {
    let shot = good(TIMED);
    assert_eq!(shot.fill.absolute.value, exact("8000"));
    assert!((shot.fill.absolute.standard_uncertainty.unwrap() - 53.851_648).abs() < 1e-6);
    assert_eq!(shot.fill.temperature.value(), exact("296.2"));
    let Speed::Stations(stations) = &shot.speed else { panic!("stations") };
    assert_eq!((stations[0].time, stations[0].time_uncertainty), (exact("-2e-6"), Some(0.5e-6)));
    assert_eq!((stations[1].used, stations[1].reason.as_deref()), (false, Some("ringing")));
    assert_eq!(stations[2].from_end_wall.value(), exact("0.85"));
    assert_eq!(stations[2].time_uncertainty, Some(3e-7));
    assert!(stations[3].from_end_wall.value().is_zero());
    assert_eq!(shot.clock.as_ref().unwrap().standard_uncertainty(), Some(20e-6));
    assert!(matches!(&shot.survey, Some(Survey::Offset(error)) if error.standard_uncertainty() == Some(0.0005)));
    let scale = good(&with(TIMED, "0 ± 0.5 mm", "0 ± 0.01 %"));
    assert!(matches!(&scale.survey, Some(Survey::Scale(error)) if error.standard_uncertainty() == Some(0.0001)));
    assert!(matches!(&shot.wall, Some(Wall::Impedance(z)) if z.value() == exact("39.5e6")));
    let measured = shot.measured.as_ref().unwrap();
    assert_eq!(measured.pressure_5.as_ref().unwrap().1.value, exact("421300"));
    assert_eq!(shot.tube.as_ref().unwrap().ratings[0].pressure.1.value, exact("6101300"));
    assert!(matches!(shot.driver.as_ref().unwrap().gas, Some(GasRecord::Mixture(_))));
    let unused: Vec<&str> =
        shot.flags.iter().filter(|flag| flag.code == "not-used").map(|flag| flag.text.split(' ').next().unwrap()).collect();
    assert_eq!(unused, ["tube.ratings", "driver.pressure"]);
    assert_eq!(shot.flags[0].code, "can-burn");
    assert!(codes(&shot).contains(&"station-left-out") && codes(&shot).contains(&"gauge-pressure"));
}

#[test]
fn the_echo_keeps_the_order_of_the_file() {
    let shot = good(TIMED);
    let paths: Vec<&str> = shot.entries.iter().map(|entry| entry.path.as_str()).collect();
    assert_eq!(paths[..5], ["record", "name", "gas.CH4", "gas.O2", "gas.Ar"]);
    let arrival = shot.entries.iter().find(|entry| entry.path == "stations[2].arrival").unwrap();
    assert_eq!(arrival.typed, "0.8299(3) ms");
    assert_eq!(arrival.quantity.as_ref().unwrap().value(), exact("829.9e-6"));
    assert!(paths.contains(&"instruments.timer") && paths.contains(&"notes[1]"));
}

/// (part, by, path, said): one part of the record goes wrong.
fn each_is_refused(file: &str, cases: &[(&str, &str, &str, &str)]) {
    for (part, by, path, said) in cases {
        let error = refused(&with(file, part, by));
        assert_eq!(error.path, *path, "{by}: {error}");
        assert!(error.to_string().contains(said), "{by}: {error}");
        assert!(error.to_string().lines().count() <= 2, "{error}");
    }
}

#[test]
fn fields_are_checked_with_their_path() {
    each_is_refused(
        GIVEN,
        &[
            (r#""record": "shot/1", "#, "", "record", "missing"),
            ("shot/1", "plan/1", "record", "shot/1"),
            (r#""record": "shot/1""#, r#""record": 1"#, "record", "a bare number"),
            ("shock_speed", "shok_speed", "shok_speed", "was \"shock_speed\" meant?"),
            (r#""name": "T-1""#, r#""name": "T-1", "name": "T-2""#, "name", "twice"),
            (r#""temperature""#, r#""Temperature""#, "fill.Temperature", "was \"temperature\" meant?"),
            (r#""temperature""#, r#""pressure""#, "fill.pressure", "twice"),
            (r#", "temperature": "296.2 ± 0.5 K""#, "", "fill.temperature", "296.2 ± 0.5 K"),
            (r#""8.000 ± 0.020 kPa""#, "8.000", "fill.pressure", "no unit"),
            (r#""8.000 ± 0.020 kPa""#, "[8.000]", "fill.pressure", "a list stands where a pressure"),
            (r#""8.000 ± 0.020 kPa""#, "null", "fill.pressure", "leave the field out"),
            ("8.000 ± 0.020 kPa", "8.000 ± 0.020 kpa", "fill.pressure", "was kPa meant?"),
            ("950.0 ± 1.0 m/s", "950.0 ± -1.0 m/s", "shock_speed", "negative"),
            ("950.0 ± 1.0 m/s", "-950.0 m/s", "shock_speed", "greater than zero"),
            (",", r#", "stations": [],"#, "shock_speed", "both given"),
            (r#""shock_speed": "950.0 ± 1.0 m/s""#, r#""notes": """#, "stations", "neither"),
            (r#""shock_speed""#, r#""wall": {}, "shock_speed""#, "wall", "rigid"),
            (r#""shock_speed""#, r#""wall": [], "shock_speed""#, "wall", "a list stands where an object"),
            (r#""shock_speed""#, r#""notes": [1], "shock_speed""#, "notes[0]", "quotes"),
            (r#""shock_speed""#, r#""heat_capacity": "equilibrium", "shock_speed""#, "heat_capacity", "leave the field out"),
            (r#""shock_speed""#, r#""attenuation": "1 %/m", "shock_speed""#, "attenuation", "± 0.6 %/m"),
            (r#""shock_speed""#, r#""clock": "5 ± 20 ppm", "shock_speed""#, "clock", "must be zero"),
            (r#""shock_speed""#, r#""clock": "0 ppm", "shock_speed""#, "clock", "says nothing"),
            (r#""shock_speed""#, r#""survey": "1 ± 0.5 mm", "shock_speed""#, "survey", "must be zero"),
            (r#""shock_speed""#, r#""survey": "0 ± 0.5 K", "shock_speed""#, "survey", "K is the unit of a temperature"),
            (r#""shock_speed""#, r#""humidity": "145 %", "shock_speed""#, "humidity", "between 0 and 100 %"),
            (r#""shock_speed""#, r#""measured": { "rise": "3 bar(g)" }, "shock_speed""#, "measured.rise", "difference"),
            (
                r#""shock_speed""#,
                r#""tube": { "ratings": { "driven": "60 bar" } }, "shock_speed""#,
                "tube.ratings.driven",
                "bar(g) or bar(a)",
            ),
            (r#""shock_speed""#, r#""tube": { "driven_length": "0 m" }, "shock_speed""#, "tube.driven_length", "greater than zero"),
            (r#""shock_speed""#, r#""driver": { "pressure": "22 bar" }, "shock_speed""#, "driver.pressure", "marked"),
        ],
    );
    assert!(refused("[]").to_string().contains("a list stands where an object is wanted"));
}

/// Every mistake of the trade that a record can show by itself.
#[test]
fn mistakes_of_the_trade_are_refused() {
    each_is_refused(
        GIVEN,
        &[
            // Gauge for absolute.
            ("8.000 ± 0.020 kPa", "8.000 ± 0.020 kPa(g)", "fill.pressure", "add \"ambient\""),
            ("8.000 ± 0.020 kPa", "-93 kPa", "fill.pressure", "was a gauge pressure meant?"),
            // Another unit of pressure.
            ("8.000 ± 0.020 kPa", "0.5 Pa", "fill.pressure", "less than 1 Pa"),
            ("8.000 ± 0.020 kPa", "8000 kPa", "fill.pressure", "was another unit meant?"),
            // Celsius for kelvin and the other way round.
            ("296.2 ± 0.5 K", "23 K", "fill.temperature", "23 K is below the data range; was 23 degC meant?"),
            ("296.2 ± 0.5 K", "80 K", "fill.temperature", "\"confirm\": [\"fill.temperature\"]"),
            ("296.2 ± 0.5 K", "296.2 °C", "fill.temperature", "was 296.2 K meant?"),
            ("296.2 ± 0.5 K", "-5 K", "fill.temperature", "above 0 K"),
            ("296.2 ± 0.5 K", "2100 K", "fill.temperature", "no usual fill; was degC"),
            // An uncertainty in another unit than the value.
            ("8.000 ± 0.020 kPa", "8.000 ± 20 kPa", "fill.pressure", "more than half of the value"),
            ("296.2 ± 0.5 K", "296.2 ± 200 K", "fill.temperature", "more than half of the value"),
            // A typed ratio.
            ("5/3", "1.67", "gas.heat_capacity_ratio", "was 5/3 meant?"),
            ("5/3", "1.667", "gas.heat_capacity_ratio", "was 5/3 meant?"),
            // Units of the speed, and an allowance beyond belief.
            ("950.0 ± 1.0 m/s", "0.95 m/s", "shock_speed", "unit"),
            (r#""shock_speed""#, r#""attenuation": "10 ± 2 %/m", "shock_speed""#, "attenuation", "exceeds 5 %/m"),
            (r#""shock_speed""#, r#""attenuation": "-2 ± 0.5 %/m", "shock_speed""#, "attenuation", "gains speed"),
            (r#""shock_speed""#, r#""ambient": "101.3 Pa", "shock_speed""#, "ambient", "is the unit right?"),
            (r#""shock_speed""#, r#""ambient": "0 kPa(g)", "shock_speed""#, "ambient", "barometer"),
        ],
    );
    each_is_refused(
        TIMED,
        &[
            ("-93.3 ± 0.02 kPa(g)", "-101.3 kPa(g)", "fill.pressure", "greater than zero"),
            (r#""Ar": "balance""#, r#""Ar": "98.4 %""#, "gas", "sum to 0.999"),
            ("frozen then equilibrium", "frozen, then equilibrium", "heat_capacity", "write one of \"constant\""),
            // Stations swapped or measured from the diaphragm.
            ("0.8299(3) ms", "1.8299(3) ms", "stations", "stations S3 and S4 contradict each other"),
            ("850 ± 0.3 mm", "1850 ± 0.3 mm", "stations", "stations S3 and S1"),
            ("1720.0 ± 0.3 µs", "1720.0 ± 0.3 ms", "stations", "are the units of distance and time right?"),
            (r#""name": "S3""#, r#""name": "S1""#, "stations[2].name", "another station"),
            (r#""name": "S3""#, r#""name": " ""#, "stations[2].name", "empty"),
            (r#""arrival": "0.8299(3) ms""#, r#""arival": "0.8299(3) ms""#, "stations[2].arival", "was \"arrival\" meant?"),
            (r#", "arrival": "0.8299(3) ms""#, "", "stations[2].arrival", "missing"),
            ("850 ± 0.3 mm", "-850 mm", "stations[2].from_end_wall", "zero or more"),
            ("850 ± 0.3 mm", "850 ± 0.3 ms", "stations[2].from_end_wall", "ms is the unit of a time"),
            (r#", "reason": "ringing""#, "", "stations[1].reason", "needs a reason"),
            (r#""use": false"#, r#""use": "no""#, "stations[1].use", "true or false"),
        ],
    );
}

#[test]
fn too_few_stations_are_refused() {
    let one_left = with(TIMED, r#""arrival": "0.8299(3) ms""#, r#""arrival": "0.8299(3) ms", "use": false, "reason": "noise""#);
    let none_left = with(&one_left, r#""use": true"#, r#""use": false, "reason": "noise""#);
    assert!(refused(&none_left).to_string().contains("1 of 4 stations can be used"));
    let same_place = with(
        &with(GIVEN, r#""shock_speed": "950.0 ± 1.0 m/s""#, "STATIONS"),
        "STATIONS",
        r#""stations": [
        { "name": "A", "from_end_wall": "1 m", "arrival": "0 us" }, { "name": "B", "from_end_wall": "1000 mm", "arrival": "1 us" } ]"#,
    );
    assert!(refused(&same_place).to_string().contains("stations A and B are at the same distance"));
}

#[test]
fn an_uncertainty_of_some_stations_only_is_refused_and_of_none_is_flagged() {
    let some = with(&with(TIMED, "850 ± 0.3 mm", "850 mm"), "0.8299(3) ms", "0.8299 ms");
    let error = refused(&some);
    assert_eq!(error.path, "stations[2].arrival");
    assert!(error.to_string().contains("S3 has no uncertainty while S1 has one"));
    let none = with(
        GIVEN,
        r#""shock_speed": "950.0 ± 1.0 m/s""#,
        r#""stations": [
        { "name": "A", "from_end_wall": "1 m", "arrival": "0 us" }, { "name": "B", "from_end_wall": "0.5 m", "arrival": "500 us" } ]"#,
    );
    let shot = good(&none);
    assert_eq!(codes(&shot), ["missing-uncertainty", "far-station"]);
    let bare = with(&with(GIVEN, "8.000 ± 0.020 kPa", "8.000 kPa"), "950.0 ± 1.0 m/s", "950.0 m/s");
    assert_eq!(codes(&good(&bare)), ["missing-uncertainty", "missing-uncertainty"]);
}

#[test]
fn a_question_is_answered_by_the_record_and_said() {
    let cold = with(GIVEN, "296.2 ± 0.5 K", "80.0 ± 0.5 K");
    assert_eq!(refused(&cold).kind, ErrorKind::Doubtful);
    let shot = good(&with(&cold, r#""shock_speed""#, r#""confirm": ["fill.temperature"], "shock_speed""#));
    assert_eq!(shot.confirmed, ["fill.temperature"]);
    assert_eq!(codes(&shot), ["confirmed"]);
    assert!(shot.flags[0].text.contains("80.0 ± 0.5 K"));
    let needless = good(&with(GIVEN, r#""shock_speed""#, r#""confirm": ["fill.pressure"], "shock_speed""#));
    assert_eq!(codes(&needless), ["confirmed-without-question"]);
    each_is_refused(
        GIVEN,
        &[
            (r#""shock_speed""#, r#""confirm": ["fill.temprature"], "shock_speed""#, "confirm[0]", "no such field"),
            (r#""shock_speed""#, r#""confirm": [1], "shock_speed""#, "confirm[0]", "path"),
            (r#""shock_speed""#, r#""confirm": "fill.temperature", "shock_speed""#, "confirm", "a list is wanted"),
            (r#""shock_speed""#, &format!("\"confirm\": [{}1], \"shock_speed\"", "1,".repeat(50)), "confirm", "51 values"),
        ],
    );
}

/// A small generator (xorshift, seed printed by the failing assertion's input) so that the runs repeat.
struct Random(u64);

impl Random {
    fn below(&mut self, limit: usize) -> usize {
        self.0 ^= self.0 << 13;
        self.0 ^= self.0 >> 7;
        self.0 ^= self.0 << 17;
        (self.0 % limit.max(1) as u64) as usize
    }
}

#[test]
fn no_input_panics() {
    const PIECES: [&str; 24] = [
        "±",
        "+/-",
        "%",
        "(k=2)",
        "(",
        ")",
        "(g)",
        "e",
        "e99",
        "-",
        "−",
        ".",
        ",",
        "/",
        "\"",
        "{",
        "}",
        "[",
        "]",
        "null",
        "9999999999",
        "µ",
        "\u{0}",
        "\\u",
    ];
    let mut random = Random(0x9e37_79b9_7f4a_7c15);
    let mut read = 0;
    for round in 0..6000 {
        let mut bytes = if round % 2 == 0 { TIMED } else { GIVEN }.as_bytes().to_vec();
        for _ in 0..=random.below(4) {
            let at = random.below(bytes.len() + 1);
            match random.below(5) {
                0 => bytes.truncate(at),
                1 if at < bytes.len() => bytes[at] = random.below(256) as u8,
                2 if at < bytes.len() => {
                    bytes.remove(at);
                }
                3 if at < bytes.len() => bytes[at] = b"0123456789.e-+ "[random.below(15)],
                _ => {
                    let piece = PIECES[random.below(PIECES.len())].bytes();
                    bytes.splice(at..at, piece);
                }
            }
        }
        match Shot::read(&bytes) {
            Ok(_) => read += 1,
            Err(error) => assert!(!error.to_string().is_empty()),
        }
    }
    assert!(read > 100, "only {read} mutated records were still read: the mutations are too coarse");
    for _ in 0..6000 {
        let bytes: Vec<u8> = (0..random.below(60)).map(|_| random.below(256) as u8).collect();
        let _ = Shot::read(&bytes);
        let mut text = String::new();
        for _ in 0..random.below(8) {
            text.push_str(PIECES[random.below(PIECES.len())]);
            text.push_str(["1", " ", "kPa", "0.5", "K", "%/m"][random.below(6)]);
        }
        for dimension in [Dimension::Pressure, Dimension::Temperature, Dimension::Fraction, Dimension::Ratio, Dimension::PerLength] {
            let _ = Quantity::parse(&text, dimension);
        }
    }
}

#[test]
fn large_and_deep_files_are_refused_calmly() {
    let deep = with(GIVEN, r#""T-1""#, &("[".repeat(5000) + &"]".repeat(5000)));
    assert_eq!(refused(&deep).kind, ErrorKind::Syntax);
    let nested = with(GIVEN, r#""T-1""#, &("[".repeat(100) + &"]".repeat(100)));
    assert_eq!(refused(&nested).path, "name");
    let long = with(GIVEN, r#""T-1""#, &format!("\"{}\"", "x".repeat(2 << 20)));
    assert_eq!(refused(&long).kind, ErrorKind::Syntax);
    let many = (0..3000).map(|n| format!("\"gas{n}\": \"1 ppm\"")).collect::<Vec<_>>().join(",");
    let many = good(&with(TIMED, r#""CH4": "0.50 %", "O2": "1.00 %""#, &many));
    let GasRecord::Mixture(components) = &many.gas else { panic!("mixture") };
    assert_eq!(components.last().unwrap().fraction, exact("0.997"));
}
