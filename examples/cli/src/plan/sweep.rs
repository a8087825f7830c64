//! `endwall plan --sweep`: the same plan for a range of targets, as comma-separated values.

use endwall::record::{Dimension, ErrorKind, Plan, PlanReport, RecordError, Target, Unit};

use crate::failure::Failure;
use crate::options;
use crate::progress::Bar;

/// More rows than anybody reads.
pub const MOST_STEPS: i64 = 1000;

/// The columns; p stands for the unit of the target.
const HEADER: [&str; 11] = ["T5/K", "p5/p", "p1/p", "p4/p", "U_S/(m/s)", "M", "T2/K", "p2/p", "uniform time/ms", "ended when", "note"];

/// The whole table.
pub fn table(plan: &Plan, file: &str, range: &str, steps: u32) -> Result<String, Failure> {
    let targets = targets(plan, range, steps)?;
    let unit = unit(&plan.target);
    let mut text = HEADER.map(|column| column.replace("/p", &format!("/{}", unit.symbol()))).join(",") + "\n";
    let mut bar = Bar::new("targets");
    let (mut answered, mut first_error) = (false, None);
    for (done, target) in targets.iter().enumerate() {
        bar.show(done as u64, targets.len() as u64);
        let one = Plan { target: target.clone(), ..plan.clone() };
        let row = match report(&one) {
            Ok((report, refused)) => {
                answered = true;
                row(&report, refused.as_ref(), unit)
            }
            // It is the record that is wrong, not the target.
            Err(error) if error.kind == ErrorKind::Field || !error.path.starts_with("target") && error.path != "driver" => {
                return Err(Failure::record(file, &error));
            }
            Err(error) => {
                let row = refused_row(target, &error, unit);
                first_error.get_or_insert(error);
                row
            }
        };
        text.push_str(&row.map(|cell| quoted(&cell)).join(","));
        text.push('\n');
    }
    match first_error {
        Some(error) if !answered => {
            Err(Failure::option("sweep", error.wrong, range, "no target of the range has an answer: choose another range"))
        }
        _ => Ok(text),
    }
}

/// The targets from the first to the last, each exactly as it is printed.
fn targets(plan: &Plan, range: &str, steps: u32) -> Result<Vec<Target>, Failure> {
    let (dimension, example) = match plan.target {
        Target::State { .. } => (Dimension::Temperature, "1000 K..2000 K"),
        Target::Step { .. } => (Dimension::Pressure, "50 kPa..500 kPa"),
    };
    let Some((first, last)) = range.split_once("..") else {
        return Err(Failure::option("sweep", "a range has two ends", range, format!("write it like \"{example}\"")));
    };
    // The unit may stand once, at the end.
    let first = match (first.trim().parse::<f64>(), last.trim().split_once(' ')) {
        (Ok(_), Some((_, unit))) => format!("{first} {unit}"),
        _ => first.to_string(),
    };
    let [first, last] = [first.as_str(), last].map(|end| options::exact("sweep", end.trim(), dimension));
    let (first, last) = (first?, last?);
    let unit = first.unit();
    let (from, to) = (unit.reading(first.value()), unit.reading(last.value()));
    let target = |step: u32| {
        let reading = from + (to - from) * f64::from(step) / f64::from(steps);
        // Ten digits, so that 1333.333333 is the target and not only its print.
        let short: f64 = format!("{reading:.9e}").parse().unwrap_or(reading);
        let wanted = options::exact("sweep", &format!("{short} {}", unit.symbol()), dimension)?;
        Ok(match &plan.target {
            Target::State { pressure, .. } => Target::State { temperature: wanted, pressure: pressure.clone() },
            Target::Step { fill_pressure, .. } => Target::Step { step: wanted, fill_pressure: fill_pressure.clone() },
        })
    };
    (0..=steps).map(target).collect()
}

/// The unit in which the pressure of the target was typed.
fn unit(target: &Target) -> Unit {
    match target {
        Target::State { pressure, .. } => pressure.0.unit(),
        Target::Step { step, .. } => step.unit(),
    }
}

/// The plan, or what is left of it where the driver cannot drive this shock, with the reason.
fn report(plan: &Plan) -> Result<(PlanReport, Option<RecordError>), RecordError> {
    match plan.report() {
        Ok(report) => Ok((report, None)),
        Err(error) if error.path == "driver" => Ok((Plan { driver: None, ..plan.clone() }.report()?, Some(error))),
        Err(error) => Err(error),
    }
}

fn row(report: &PlanReport, refused: Option<&RecordError>, unit: Unit) -> [String; 11] {
    let states = &report.states;
    let pressure = |pascal: f64, digits| number(pascal / unit.ratio().to_f64(), digits);
    let time = report.test_time.as_ref();
    [
        number(states.reflected.temperature.value, 6),
        pressure(states.reflected.pressure.value, 6),
        pressure(report.fill.p1.value, 5),
        report.fill.p4.as_ref().map_or(String::new(), |p4| pressure(p4.value, 4)),
        number(report.incident.speed.value, 5),
        number(report.incident.mach.value, 5),
        number(states.incident.temperature.value, 5),
        pressure(states.incident.pressure.value, 5),
        time.map_or(String::new(), |time| number(time.end_wall.value * 1e3, 3)),
        time.map_or(String::new(), |time| time.cause.clone()),
        note(report, refused),
    ]
}

/// What a reader of the row must know: the worst first, then the flags that `endwall plan` explains.
fn note(report: &PlanReport, refused: Option<&RecordError>) -> String {
    let mut notes = Vec::new();
    let mut exceeded: Vec<&str> = report.limits.iter().filter(|line| line.exceeded).map(|line| line.part.as_str()).collect();
    exceeded.dedup();
    if !exceeded.is_empty() {
        notes.push(format!("RATING EXCEEDED ({}): do not fire", exceeded.join(" ")));
    }
    let has = |code: &str| report.flags.iter().any(|flag| flag.code == code);
    if has("can-burn") {
        notes.push("can burn: pressures are for the unburnt gas".to_string());
    }
    if let Some(error) = refused {
        notes.push(format!("no p4: {}", error.wrong));
    }
    let said = |code: &str| matches!(code, "can-burn" | "rating-exceeded");
    let codes: Vec<&str> = report.flags.iter().map(|flag| flag.code.as_str()).filter(|code| !said(code)).collect();
    if !codes.is_empty() {
        notes.push(format!("flags {}", codes.join(" ")));
    }
    notes.join("; ")
}

/// A target without an answer: only what was asked for, and why there is nothing else.
fn refused_row(target: &Target, error: &RecordError, unit: Unit) -> [String; 11] {
    let mut row = [const { String::new() }; 11];
    let in_unit = |quantity: f64| number(quantity / unit.ratio().to_f64(), 6);
    match target {
        Target::State { temperature, pressure } => {
            row[0] = number(temperature.value().to_f64(), 6);
            row[1] = in_unit(pressure.1.value.to_f64());
        }
        Target::Step { step, fill_pressure } => {
            row[1] = in_unit(step.value().to_f64() + fill_pressure.1.value.to_f64());
            row[2] = in_unit(fill_pressure.1.value.to_f64());
        }
    }
    row[10].clone_from(&error.wrong);
    row
}

/// At least so many significant digits, never an exponent.
fn number(value: f64, digits: i32) -> String {
    // The power of ten after rounding: 999.9999 is 1000.00 to six digits.
    let rounded = format!("{value:.*e}", usize::try_from(digits - 1).unwrap_or(0));
    let exponent = rounded.rsplit_once('e').and_then(|(_, power)| power.parse::<i32>().ok()).unwrap_or(0);
    let decimals = usize::try_from(digits - 1 - exponent).unwrap_or(0);
    format!("{value:.decimals$}")
}

/// A cell that holds a comma or a quotation mark stands in quotation marks (RFC 4180).
fn quoted(cell: &str) -> String {
    if cell.contains([',', '"', '\n']) { format!("\"{}\"", cell.replace('"', "\"\"")) } else { cell.to_string() }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_have_their_digits() {
        for (value, digits, text) in [
            (1650.0, 6, "1650.00"),
            (0.061_234_5, 4, "0.06123"),
            (123_456.7, 4, "123457"),
            (9.999_96, 5, "10.000"),
            (999.999_999, 6, "1000.00"),
            (0.0, 3, "0.00"),
        ] {
            assert_eq!(number(value, digits), text);
        }
    }

    #[test]
    fn cells_are_quoted_where_they_must_be() {
        assert_eq!([quoted("a b"), quoted("a, b"), quoted("a \"b\"")], ["a b", "\"a, b\"", "\"a \"\"b\"\"\""]);
    }
}
