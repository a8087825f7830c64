//! `endwall plan`: a wanted state at the end wall to what the operator sets.

use std::path::PathBuf;

use clap::Args;
use endwall::record::Plan;

use crate::failure::Failure;
use crate::file;
use crate::output;

/// Plan a shot: from a wanted state at the end wall to fill pressures, waves and limits
///
/// Reads one plan from a JSON record and prints what to set: ratings that would be exceeded first, then fill and driver pressure, the shock, the
/// states, the uniform time with its cause, the waves and cautions.
#[derive(Args)]
pub struct Arguments {
    /// Record file of the plan; - reads standard input
    file: PathBuf,
    /// Print one JSON object with all numbers in SI units instead of the report
    #[arg(long)]
    json: bool,
}

/// Runs it.
pub fn run(arguments: &Arguments) -> Result<(), Failure> {
    let name = file::name(&arguments.file);
    let refused = |error| Failure::record(&name, &error);
    let plan = Plan::read(&file::read(&arguments.file)?).map_err(refused)?;
    let report = plan.report().map_err(refused)?;
    let text = if arguments.json { report.to_json().map_err(refused)? } else { report.to_text(&plan) };
    output::print(&text)
}
