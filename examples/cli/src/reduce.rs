//! `endwall reduce`: a record file to its report.

use std::fs::File;
use std::io::{Read, stdin};
use std::path::{Path, PathBuf};

use clap::Args;
use endwall::record::Shot;

use crate::failure::Failure;
use crate::output;
use crate::progress::Bar;

/// No record is longer than this; the rest of a longer file, or of an endless one, is never read.
const LARGEST_FILE: usize = 1 << 20;

/// Reduce a shot: from its record file to the states, their uncertainties and the budget
///
/// Reads one shot from a JSON record and prints its report: the state behind the reflected shock with expanded uncertainties, flags, the
/// input as it was understood, the fit of the arrival times, the uncertainty budget and cautions.
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
    let name = if is_standard_input(&arguments.file) { "standard input".into() } else { arguments.file.to_string_lossy() };
    let refused = |error| Failure::record(&name, &error);
    let shot = Shot::read(&read(&arguments.file, &name)?).map_err(refused)?;
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

fn is_standard_input(file: &Path) -> bool {
    file.as_os_str() == "-"
}

fn read(file: &Path, name: &str) -> Result<Vec<u8>, Failure> {
    let mut bytes = Vec::new();
    let enough = LARGEST_FILE as u64 + 1;
    let read = if is_standard_input(file) {
        stdin().lock().take(enough).read_to_end(&mut bytes)
    } else {
        File::open(file).and_then(|opened| opened.take(enough).read_to_end(&mut bytes))
    };
    match read {
        Err(error) => Err(Failure::unread(name, &error)),
        Ok(length) if length > LARGEST_FILE => Err(Failure::too_long(name, LARGEST_FILE)),
        Ok(_) => Ok(bytes),
    }
}
