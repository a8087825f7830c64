//! `endwall compare`: past shots against a plan.

use std::path::PathBuf;

use clap::Args;
use endwall::record::{Comparison, Plan, Shot};

use crate::failure::Failure;
use crate::file;
use crate::output;
use crate::progress::Bar;

/// Compare past shots with a plan: efficiency, attenuation and scatter, ready to be put back into it
///
/// Reduces each shot as endwall reduce does and prints one line for it: what was measured against what the plan wanted, the efficiency (measured over
/// ideal Mach number, both at the end wall, from the driver pressure in the record of the shot) and the attenuation. Then means and scatter over the
/// shots, and the fields efficiency, attenuation and tolerance as text to paste into the plan. A shot that cannot count says why in a flag.
#[derive(Args)]
pub struct Arguments {
    /// Record file of the plan; - reads standard input
    plan: PathBuf,
    /// Record files of past shots; - reads standard input, once
    #[arg(required = true, value_name = "RECORD")]
    records: Vec<PathBuf>,
    /// Print one JSON object with all numbers in SI units instead of the report
    #[arg(long)]
    json: bool,
}

/// Runs it.
pub fn run(arguments: &Arguments) -> Result<(), Failure> {
    let files = || std::iter::once(&arguments.plan).chain(&arguments.records);
    if files().filter(|file| file.as_os_str() == "-").count() > 1 {
        return Err(Failure::plain("standard input is named twice, and can be read once", "name the other records by their files"));
    }
    let name = file::name(&arguments.plan);
    let plan = Plan::read(&file::read(&arguments.plan)?).map_err(|error| Failure::record(&name, &error))?;
    let mut comparison = Comparison::new(&plan).map_err(|error| Failure::record(&name, &error))?;
    let mut bar = Bar::new("shots");
    for (done, record) in arguments.records.iter().enumerate() {
        bar.show(done as u64, arguments.records.len() as u64);
        let read = Shot::read(&file::read(record)?).and_then(|shot| comparison.add(&shot));
        read.map_err(|error| Failure::record(&file::name(record), &error))?;
    }
    let report = comparison.report();
    let text = if arguments.json { report.to_json().map_err(|error| Failure::record(&name, &error))? } else { report.to_text(&plan) };
    output::print(&text)
}
