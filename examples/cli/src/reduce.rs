//! `endwall reduce`: a record file to its report.

use std::path::PathBuf;

use clap::Args;
use endwall::record::Shot;

use crate::failure::Failure;
use crate::file;
use crate::output;
use crate::progress::Bar;

/// Reduce a shot: from its record file to the states, their uncertainties and the budget
///
/// Reads one shot from a JSON record and prints its report: the state behind the reflected shock with expanded uncertainties, flags, the
/// input as it was understood, the fit of the arrival times, the uncertainty budget and cautions. A record with driver and tube, as in a plan, has
/// the uniform time with its cause, the boundary layer and the bifurcation too.
#[derive(Args)]
pub struct Arguments {
    /// Record file of the shot; - reads standard input
    file: PathBuf,
    /// Print one JSON object with all numbers in SI units instead of the report
    #[arg(long)]
    json: bool,
    /// Check the propagated uncertainties by at most N random draws (JCGM 101), a million where N is left out; the draws end when the
    /// result has settled, and a flag of the report says what came out
    #[arg(long, value_name = "N", num_args = 0..=1, default_missing_value = "1000000", value_parser = trials)]
    monte_carlo: Option<u64>,
    /// Seed of the random draws; the same seed gives the same draws, and the report prints it
    #[arg(long, value_name = "S", default_value_t = 1, requires = "monte_carlo")]
    seed: u64,
}

/// The number behind `--monte-carlo`, where a file name may stand by mistake.
fn trials(typed: &str) -> Result<u64, &'static str> {
    typed.parse().map_err(|_| "a whole number of trials is wanted, like 200000, or none; FILE stands before --monte-carlo")
}

/// Runs it.
pub fn run(arguments: &Arguments) -> Result<(), Failure> {
    let name = file::name(&arguments.file);
    let refused = |error| Failure::record(&name, &error);
    let shot = Shot::read(&file::read(&arguments.file)?).map_err(refused)?;
    let mut report = shot.reduce().map_err(refused)?;
    if let Some(most) = arguments.monte_carlo {
        let mut bar = Bar::new("Monte Carlo trials");
        let checked = shot.reduce_checked_with(arguments.seed, most, &mut |progress| {
            bar.show(progress.trials, progress.max_trials);
            true
        });
        // The record has just been reduced: what is refused now was typed beside it.
        report = checked.map_err(|error| Failure::plain(&error.wrong, &error.remedy))?;
    }
    let text = if arguments.json { report.to_json().map_err(refused)? } else { report.to_text(&shot) };
    output::print(&text)
}
