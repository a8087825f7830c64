//! `endwall plan`: a wanted state at the end wall to what the operator sets.

mod sweep;

use std::path::PathBuf;

use clap::Args;
use endwall::record::Plan;

use crate::failure::Failure;
use crate::file;
use crate::output;

/// Plan a shot: from a wanted state at the end wall to fill pressures, waves and limits
///
/// Reads one plan from a JSON record and prints what to set: ratings that would be exceeded first, then fill and driver pressure, the shock, the
/// states, the uniform time with its cause at the end wall and at the place that the record observes, what the boundary layer leaves of it,
/// whether the reflected shock bifurcates, the waves and cautions.
#[derive(Args)]
pub struct Arguments {
    /// Record file of the plan; - reads standard input
    file: PathBuf,
    /// Print one JSON object with all numbers in SI units instead of the report
    #[arg(long)]
    json: bool,
    /// Print a line of comma-separated values for each target of a range: "1000 K..2000 K" for a temperature, "50 kPa..500 kPa" for a step
    #[arg(long, value_name = "RANGE", conflicts_with = "json", allow_hyphen_values = true)]
    sweep: Option<String>,
    /// Equal steps of the sweep
    #[arg(long, value_name = "N", requires = "sweep", default_value_t = 10, value_parser = clap::value_parser!(u32).range(1..=sweep::MOST_STEPS))]
    steps: u32,
}

/// Runs it.
pub fn run(arguments: &Arguments) -> Result<(), Failure> {
    let name = file::name(&arguments.file);
    let refused = |error| Failure::record(&name, &error);
    let plan = Plan::read(&file::read(&arguments.file)?).map_err(refused)?;
    if let Some(range) = &arguments.sweep {
        return output::print(&sweep::table(&plan, &name, range, arguments.steps)?);
    }
    let report = plan.report().map_err(refused)?;
    let text = if arguments.json { report.to_json().map_err(refused)? } else { report.to_text(&plan) };
    output::print(&text)
}
