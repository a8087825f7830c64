//! Plans for a range of targets.

mod common;

use common::{Run, changed, endwall};

const PLAN: &str = include_str!("../../records/plan-k0300.json");
const HEADER: &str = "T5/K,p5/bar,p1/bar,p4/bar,U_S/(m/s),M,T2/K,p2/bar,uniform time/ms,ended when,note";

fn sweep(record: &str, range: &str, steps: &str) -> Run {
    endwall(&["plan", "-", "--sweep", range, "--steps", steps], record.as_bytes())
}

/// Cells of lines, with quotation marks understood.
fn rows(csv: &str) -> Vec<Vec<String>> {
    let cells = |line: &str| {
        let (mut cells, mut quoted) = (vec![String::new()], false);
        for c in line.chars() {
            match c {
                '"' => quoted = !quoted,
                ',' if !quoted => cells.push(String::new()),
                c => cells.last_mut().unwrap().push(c),
            }
        }
        cells
    };
    csv.lines().map(cells).collect()
}

/// Each row is the plan for that target alone.
#[test]
fn rows_are_plans() {
    let csv = sweep(PLAN, "1200 K..2000 K", "4").good();
    assert_eq!(csv.lines().next(), Some(HEADER));
    let rows = rows(&csv);
    assert_eq!(rows.len(), 6);
    assert!(rows.iter().all(|row| row.len() == 11), "{csv}");
    for (row, kelvin) in rows[1..].iter().zip([1200, 1400, 1600, 1800, 2000]) {
        let record = changed(PLAN, "1650 K", &format!("{kelvin} K"));
        let report: serde_json::Value = serde_json::from_str(&endwall(&["plan", "-", "--json"], record.as_bytes()).good()).unwrap();
        let cell = |column: usize| row[column].parse::<f64>().unwrap();
        for (column, path, unit, digits) in [
            (0, "/states/5/temperature", 1.0, 6),
            (1, "/states/5/pressure", 1e5, 6),
            (2, "/fill/p1", 1e5, 5),
            (3, "/fill/p4", 1e5, 4),
            (4, "/incident/speed", 1.0, 5),
            (5, "/incident/mach", 1.0, 5),
            (6, "/states/2/temperature", 1.0, 5),
            (7, "/states/2/pressure", 1e5, 5),
            (8, "/test_time/end_wall", 1e-3, 3),
        ] {
            let value = report.pointer(path).unwrap()["value"].as_f64().unwrap() / unit;
            // Half a unit of the last digit that is promised.
            assert!((cell(column) / value - 1.0).abs() <= 0.5 * 10f64.powi(1 - digits), "{kelvin} {path} {value} {}", row[column]);
        }
        assert_eq!(row[9], report["test_time"]["cause"].as_str().unwrap());
        assert!(row[10].contains("can burn: pressures are for the unburnt gas"), "{}", row[10]);
    }
}

#[test]
fn a_row_without_an_answer_is_empty_and_says_why() {
    let cold = changed(PLAN, "\"He\"", "\"Ar\"");
    let csv = sweep(&cold, "1000..7000 K", "3").good();
    let rows = rows(&csv);
    // A driver that serves.
    assert!(rows[1].iter().all(|cell| !cell.is_empty()), "{csv}");
    // A fill and a shock, but no driver pressure.
    let slow = &rows[3];
    assert!(slow[0] == "5000.00" && !slow[2].is_empty() && !slow[4].is_empty(), "{csv}");
    assert!(slow[3].is_empty() && slow[8].is_empty() && slow[9].is_empty() && slow[10].contains("no p4: "), "{csv}");
    // Outside the data of the gas.
    let outside = &rows[4];
    assert_eq!(outside[..2], ["7000.00", "2.00000"]);
    assert!(outside[2..10].iter().all(String::is_empty) && outside[10].contains("6000 K"), "{csv}");
}

#[test]
fn a_rating_stands_in_its_row() {
    let csv = sweep(&changed(PLAN, "60 bar(g)", "0.6 bar(g)"), "1000 K..2000 K", "1").good();
    let rows = rows(&csv);
    assert!(rows[2][10].starts_with("RATING EXCEEDED (driver): do not fire; "), "{csv}");
}

/// The fields for the place that is observed and for disturbances change no column, present or absent.
#[test]
fn what_is_observed_changes_no_column() {
    let bare = changed(&changed(PLAN, "    \"observe\": \"20 mm\",\n", ""), ", \"disturbance\": \"1 %\"", "");
    let [with, without] = [PLAN, &bare].map(|record| sweep(record, "1200 K..2000 K", "2").good());
    assert_eq!(with.lines().next(), Some(HEADER));
    for (with, without) in rows(&with).iter().zip(&rows(&without)) {
        assert_eq!((with.len(), &with[..8]), (11, &without[..8]));
    }
    sweep(&changed(PLAN, "\"20 mm\"", "\"20 m\""), "1200 K..2000 K", "2").refused(&["tube.observe", "20 m", "6.20 m long"]);
}

#[test]
fn a_step_is_swept_in_its_unit() {
    let record = r#"{ "record": "plan/1", "gas": { "heat_capacity_ratio": "7/5", "molar_mass": "28.014 g/mol" }, "temperature": "300 K",
        "target": { "step": "100 kPa", "fill_pressure": "10 kPa" } }"#;
    let csv = sweep(record, "70..140 kPa", "2").good();
    let rows = rows(&csv);
    assert_eq!(rows[0][1..4], ["p5/kPa", "p1/kPa", "p4/kPa"]);
    // γ 7/5 at Mach 2: the step is 14 times the fill pressure, T5/T1 is 5/2, p2/p1 is 9/2.
    assert_eq!(rows[3][..8], ["750.000", "150.000", "10.000", "", rows[3][4].as_str(), "2.0000", "506.25", "45.000"]);
    // No driver, no time; what the plan flags is named.
    assert_eq!(rows[3][8..], ["", "", "flags bifurcation constant-heat-capacity"]);
}

#[test]
fn ranges_that_are_none_are_refused() {
    let refuse = |range: &str, names: &[&str]| sweep(PLAN, range, "3").refused(names);
    refuse("1000 K", &["--sweep", "two ends", "1000 K..2000 K"]);
    refuse("1000 K..", &["--sweep"]);
    refuse("1 bar..2 bar", &["--sweep", "1 bar", "K"]);
    refuse("1000 ± 5 K..2000 K", &["--sweep", "1000 ± 5 K"]);
    refuse("7000 K..8000 K", &["--sweep", "7000 K", "6000 K", "another range"]);
    sweep(PLAN, "1000 K..2000 K", "0").refused(&["--steps", "0"]);
    sweep(PLAN, "1000 K..2000 K", "1001").refused(&["--steps", "1001"]);
    endwall(&["plan", "-", "--steps", "3"], PLAN.as_bytes()).refused(&["--sweep"]);
    endwall(&["plan", "-", "--json", "--sweep", "1000 K..2000 K"], PLAN.as_bytes()).refused(&["--json", "--sweep"]);
    sweep(&changed(PLAN, ", \"temperature\": \"296 K\" }", " }"), "1000 K..2000 K", "3").refused(&["driver.temperature"]);
}
