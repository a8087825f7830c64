//! `endwall waves`: the waves of a planned shot, as a table or as a drawing.

mod drawing;

use std::path::PathBuf;

use clap::Args;
use endwall::record::{Plan, PlanReport};

use crate::failure::Failure;
use crate::{file, output};

/// Waves of a planned shot: where and when they run, as a table or a diagram
///
/// Reads a plan with a driver (gas and temperature) and the lengths of both sections of the tube. The diagram has the distance from the diaphragm
/// across and the time from its opening upward, for an ideal tube.
#[derive(Args)]
pub struct Arguments {
    /// Record file of the plan; - reads standard input
    file: PathBuf,
    /// Print the diagram as SVG instead of the table
    #[arg(long)]
    svg: bool,
}

/// Runs it.
pub fn run(arguments: &Arguments) -> Result<(), Failure> {
    let name = file::name(&arguments.file);
    let refused = |error| Failure::record(&name, &error);
    let plan = Plan::read(&file::read(&arguments.file)?).map_err(refused)?;
    let report = plan.report().map_err(refused)?;
    if report.waves.is_empty() {
        return Err(absent(&name, &report));
    }
    output::print(&if arguments.svg { drawing::svg(&plan, &report) } else { table(&plan, &report) })
}

fn absent(name: &str, report: &PlanReport) -> Failure {
    match report.flags.iter().find(|flag| flag.code == "no-wave-diagram") {
        Some(flag) => Failure::plain(&format!("{name}: {}", flag.text), "use endwall plan for everything else"),
        None => Failure::plain(
            &format!("{name}: waves need a driver and the lengths of the tube"),
            "add \"driver\": { \"gas\": { \"He\": \"balance\" }, \"temperature\": \"295 K\" } and \"tube\": { \"driven_length\": \"6 m\", \"driver_length\": \"3 m\" }",
        ),
    }
}

/// What the record calls itself.
fn title(plan: &Plan) -> String {
    let name = if plan.name.is_empty() { "a plan without a name" } else { &plan.name };
    format!("Waves of {name}")
}

/// The time at the end wall in a sentence.
fn uniform_time(report: &PlanReport) -> Option<String> {
    let time = report.test_time.as_ref()?;
    Some(format!("uniform time at the end wall is {} ms, ended when {}", milliseconds(time.end_wall.value), time.cause))
}

fn milliseconds(seconds: f64) -> String {
    format!("{:.3}", seconds * 1e3)
}

fn table(plan: &Plan, report: &PlanReport) -> String {
    let mut rows = vec![["wave", "from x/m", "t/ms", "to x/m", "t/ms"].map(String::from).to_vec()];
    for wave in &report.waves {
        let [from, to] = [wave.from, wave.to].map(|[x, t]| [format!("{x:.3}"), milliseconds(t)]);
        rows.push([vec![wave.name.clone()], from.to_vec(), to.to_vec()].concat());
    }
    let mut lines = vec![title(plan), String::new(), output::columns(&rows)];
    lines.push(output::paragraph(
        "x is the distance from the diaphragm, positive toward the end wall, t the time from its opening; ideal tube.",
    ));
    lines.extend(uniform_time(report).map(|text| output::paragraph(&format!("The {text}."))));
    lines.extend(
        report
            .flags
            .iter()
            .filter(|flag| concerns_waves(&flag.code))
            .map(|flag| output::paragraph(&format!("[{}] {}", flag.code, flag.text))),
    );
    lines.join("\n")
}

/// Flags that a reader of the waves must know; all stand in the plan.
fn concerns_waves(code: &str) -> bool {
    matches!(code, "returned-wave" | "ideal-waves" | "rating-exceeded" | "incident-overtaken" | "weak-disturbance")
}
