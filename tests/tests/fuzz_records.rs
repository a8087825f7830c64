//! Arbitrary bytes and damaged records, read and reduced: a result or an error, never a panic, and no number that is none.
//!
//! The usual run takes 10^5 inputs, `ENDWALL_LONG=1` takes 10^6. The seed of each part is printed; a failure prints the input.

mod common;

use std::panic::{AssertUnwindSafe, catch_unwind};

use endwall::record::{ErrorKind, Shot};
use endwall_tests::random::Random;

/// Gases whose heat capacity depends on temperature.
const MIXTURES: [&str; 4] = [
    include_str!("../../examples/records/kinetics-k0207.json"),
    include_str!("../../examples/records/nitrogen-n0703.json"),
    include_str!("../fuzz/seeds/humid-air-leak.json"),
    include_str!("../fuzz/seeds/own-species.json"),
];

/// Demo files, and short records that reach the branches which those do not.
const CONSTANT: [&str; 7] = [
    include_str!("../../examples/records/argon-b0412.json"),
    include_str!("../../examples/records/sensor-step-c17.json"),
    r#"{"record":"shot/1","gas":{"Ar":"balance","He":"10.0 ± 0.1 %"},"heat_capacity":"constant","fill":{"pressure":"-0.9 ± 0.001 bar(g)",
        "temperature":"23.0 ± 0.5 degC"},"shock_speed":"950(2) m/s (dof 9)","ambient":"101.3 ± 0.2 kPa","measured":{"pressure_5":"370 ± 9 kPa"}}"#,
    r#"{"record":"shot/1","gas":{"heat_capacity_ratio":"7/5","molar_mass":"28.0134 g/mol"},"fill":{"pressure":"60 ± 0.2 Torr",
        "temperature":"73.4 ± 1 degF (limits)"},"shock_speed":"1.2e3 ± 1 % m/s","wall":{"speed":"5.0 ± 0.2 m/s"}}"#,
    r#"{"record":"shot/1","gas":{"heat_capacity_ratio":1.29,"molar_mass":"44.01 ± 0.01 g/mol"},"fill":{"pressure":"2 ± 0.01 psi",
        "temperature":"296 K"},"wall":{"impedance":"39.5 MPa s/m"},"attenuation":"1.0 ± 0.6 %/m","survey":"0 ± 100 ppm","stations":[
        {"name":"A","from_end_wall":"1 ± 0.001 m","arrival":"0 ± 1 us"},{"name":"B","from_end_wall":"0 m","arrival":"1.4 ± 0.001 ms","delay":"2 us"},
        {"name":"C","from_end_wall":"2 m","arrival":"9 us","use":false,"reason":"noise"}]}"#,
    r#"{"record":"shot/1","gas":{"heat_capacity_ratio":"5/3","molar_mass":"4.0026 g/mol"},"fill":{"pressure":"1 atm","temperature":"80 K"},
        "confirm":["fill.temperature"],"shock_speed":"3000 m/s","notes":["free","text"]}"#,
    r#"{"record":"shot/1","gas":{"Ar":"balance"},"heat_capacity":"constant","fill":{"pressure":"8 kPa","temperature":"296 K"},"shock_speed":"950 m/s",
        "tube":{"driven_length":"6.2 m","driver_length":"2.6 m","driven_bore":"81 mm","driver_bore":"81 mm","observe":"20 mm"},
        "driver":{"gas":{"He":"balance"},"temperature":"296 K"},"tolerance":{"disturbance":"1 %"}}"#,
];

/// Texts that numbers, units and JSON stumble over.
const TOKENS: [&str; 48] = [
    "NaN",
    "Infinity",
    "-0",
    "0",
    "0.0",
    "1e308",
    "1e-308",
    "5e-324",
    "1e38",
    "1e-38",
    "1e999999999",
    "99999999999999999999999999999999999999",
    "0.00000000000000000000000000000000000001",
    "1/3",
    "5/0",
    "340282366920938463463374607431768211455",
    "-1",
    "±",
    "+/-",
    "(8)",
    "(k=0)",
    "(k=1e30)",
    "(dof 0.5)",
    "(dof 1e300)",
    "(limits)",
    "%",
    "% %",
    "kPa(g)",
    "bar(a)",
    "degC",
    "m/s",
    "us",
    "null",
    "true",
    "[]",
    "{}",
    "[",
    "{",
    "\"",
    ",",
    ":",
    "\\u0000",
    "\\ud800",
    "\u{202e}",
    "µ",
    "balance",
    "shot/1",
    "                ",
];

/// How damaged records came out, so that the test sees that it reaches all of them.
#[derive(Default)]
struct Outcomes {
    reduced: usize,
    refused: [usize; 5],
}

/// Reads and reduces; hands out how it went.
fn outcome(bytes: &[u8], outcomes: &mut Outcomes) {
    let result = Shot::read(bytes).and_then(|shot| shot.reduce().map(|report| (report.to_text(&shot), report.to_json())));
    match result {
        Ok((text, json)) => {
            outcomes.reduced += 1;
            let json = json.expect("a report that can be written");
            // What is not a number would be null where the format has a number.
            assert!(!json.contains("\"value\": null") && !json.contains("\"residual\": null"), "{json}");
            assert!(!text.contains('\u{1b}') && !text.contains('\u{202e}'));
        }
        Err(error) => {
            let kind = match error.kind {
                ErrorKind::Syntax => 0,
                ErrorKind::Field => 1,
                ErrorKind::Quantity => 2,
                ErrorKind::Value => 3,
                ErrorKind::Doubtful => 4,
            };
            outcomes.refused[kind] += 1;
            assert!(!error.wrong.is_empty() && !error.to_string().chars().any(|c| c.is_control() && c != '\n'), "{error:?}");
        }
    }
}

fn run(seed: u64, count: usize, mut input: impl FnMut(&mut Random) -> Vec<u8>) -> Outcomes {
    let mut random = Random::new(seed);
    let mut outcomes = Outcomes::default();
    for number in 0..count {
        let bytes = input(&mut random);
        let survived = catch_unwind(AssertUnwindSafe(|| outcome(&bytes, &mut outcomes)));
        assert!(survived.is_ok(), "input {number} of seed {seed:#x}: {}", String::from_utf8_lossy(&bytes));
    }
    outcomes
}

fn below(random: &mut Random, bound: usize) -> usize {
    usize::try_from(random.below(bound.max(1) as u64)).expect("a place in a slice")
}

/// Mixtures take most of the time, so they are the lesser part.
fn record(random: &mut Random) -> &'static str {
    let choices: &[&'static str] = if random.below(8) == 0 { &MIXTURES } else { &CONSTANT };
    random.pick::<&'static str>(choices)
}

/// The stretch of digits that begins at or after a place.
fn digits(bytes: &[u8], from: usize) -> Option<(usize, usize)> {
    let start = from + bytes.get(from..)?.iter().position(u8::is_ascii_digit)?;
    let length = bytes[start..].iter().take_while(|byte| byte.is_ascii_digit() || **byte == b'.').count();
    Some((start, start + length))
}

/// One to three changes: a bit, a cut, a doubled stretch, another number or token, a stretch of another record.
fn damaged(random: &mut Random) -> Vec<u8> {
    let mut bytes = record(random).as_bytes().to_vec();
    for _ in 0..=random.below(3) {
        let place = below(random, bytes.len());
        let end = (place + below(random, 12)).min(bytes.len());
        match random.below(10) {
            0 if !bytes.is_empty() => bytes[place] ^= 1 << random.below(8),
            1 => drop(bytes.drain(place..end)),
            2 => {
                let stretch = bytes[place..end].to_vec();
                bytes.splice(place..place, stretch);
            }
            3 => {
                let other = record(random).as_bytes();
                let from = below(random, other.len());
                let to = (from + below(random, 200)).min(other.len());
                bytes.splice(place..end, other[from..to].iter().copied());
            }
            4 => drop(bytes.splice(place..end, random.pick(&TOKENS).bytes())),
            5 => bytes.truncate(place),
            6 => {
                if let Some((start, end)) = digits(&bytes, place) {
                    drop(bytes.splice(start..end, random.pick(&TOKENS).bytes()));
                }
            }
            _ => {
                // A number stays a number: the record is read, and the reduction meets strange shots.
                if let Some((start, end)) = digits(&bytes, place) {
                    let number = match random.below(4) {
                        0 => random.below(10).to_string(),
                        1 => format!("{:.3}", random.between(0.0, 3000.0)),
                        2 => format!("{:e}", random.over_binades(-60, 60)),
                        _ => random.bits().to_string(),
                    };
                    drop(bytes.splice(start..end, number.bytes()));
                }
            }
        }
    }
    bytes
}

/// Bytes without a plan, or tokens in a row.
fn arbitrary(random: &mut Random) -> Vec<u8> {
    let length = below(random, 200);
    match random.below(3) {
        0 => (0..length).map(|_| random.bits().to_le_bytes()[0]).collect(),
        1 => (0..length).map(|_| *random.pick(b"{}[]\",:0123456789.eE+- \nkPamstru")).collect(),
        _ => (0..length / 4).flat_map(|_| random.pick(&TOKENS).bytes().chain(random.pick(&["", " ", "\"", ",", ":"]).bytes())).collect(),
    }
}

/// What is damaged is good before, or the damage reaches less than it seems to.
#[test]
fn the_records_are_good() {
    for record in MIXTURES.into_iter().chain(CONSTANT) {
        let reduced = Shot::read(record.as_bytes()).and_then(|shot| shot.reduce());
        assert!(reduced.is_ok(), "{record}: {}", reduced.unwrap_err());
    }
}

#[test]
fn damaged_records_are_reduced_or_refused() {
    let outcomes = run(0x5eed_0001, common::cases(80_000, 800_000), damaged);
    // Every kind of end is reached, or the inputs test less than they seem to.
    assert!(outcomes.reduced > 1000 && outcomes.refused.iter().all(|count| *count > 100), "{} {:?}", outcomes.reduced, outcomes.refused);
    println!("{} reduced, refused by kind: {:?}", outcomes.reduced, outcomes.refused);
}

#[test]
fn arbitrary_bytes_are_refused() {
    let outcomes = run(0x5eed_0002, common::cases(20_000, 200_000), arbitrary);
    assert_eq!(outcomes.reduced, 0);
}
