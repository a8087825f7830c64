//! `endwall reduce`: a record file to its report.

use std::fs::File;
use std::io::{Read, stdin};

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
    file: String,
    /// Print one JSON object with all numbers in SI units instead of the report
    #[arg(long)]
    json: bool,
    /// Check the propagated uncertainties by random draws (JCGM 101); a flag of the report says what came out
    #[arg(long)]
    monte_carlo: bool,
    /// Seed of the random draws; the same seed gives the same draws, and the report prints it
    #[arg(long, value_name = "N", default_value_t = 1, requires = "monte_carlo")]
    seed: u64,
}

/// Runs it.
pub fn run(arguments: &Arguments) -> Result<(), Failure> {
    let name = if arguments.file == "-" { "standard input" } else { arguments.file.as_str() };
    let refused = |error| Failure::record(name, &error);
    let shot = Shot::read(&read(&arguments.file, name)?).map_err(refused)?;
    let report = if arguments.monte_carlo {
        let mut bar = Bar::new("Monte Carlo trials");
        let shown = shot.reduce_checked_with(arguments.seed, &mut |progress| {
            bar.show(progress.trials, progress.max_trials);
            true
        });
        shown.map_err(refused)?
    } else {
        shot.reduce().map_err(refused)?
    };
    let text = if arguments.json { report.to_json().map_err(refused)? } else { report.to_text(&shot) };
    output::print(&text)
}

fn read(file: &str, name: &str) -> Result<Vec<u8>, Failure> {
    let mut bytes = Vec::new();
    let enough = LARGEST_FILE as u64 + 1;
    let read = if file == "-" {
        stdin().lock().take(enough).read_to_end(&mut bytes)
    } else {
        File::open(file).and_then(|opened| opened.take(enough).read_to_end(&mut bytes))
    };
    match read {
        Err(error) => Err(Failure::file(name, "read", &error)),
        Ok(length) if length > LARGEST_FILE => Err(Failure::too_long(name, LARGEST_FILE)),
        Ok(_) => Ok(bytes),
    }
}
