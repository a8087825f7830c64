//! The `endwall` command: reduces record files, plans shots, learns from past ones, looks at single shocks, prints tables.
//!
//! Exit codes: 0 for a result, with or without flags; 2 where the input is refused, 1 for any other failure such as a full disk, both with
//! the reason on standard error.

mod compare;
mod failure;
mod file;
mod gas;
mod gases;
mod options;
mod output;
mod plan;
mod progress;
mod reduce;
mod states;
mod table;
mod waves;

use std::io::{Write, stderr};
use std::process::ExitCode;

use clap::{Parser, Subcommand};

/// The gas behind the reflected shock at the end wall of a shock tube.
#[derive(Parser)]
#[command(
    name = "endwall",
    version,
    arg_required_else_help = true,
    after_help = "Pressures are absolute unless marked (g). Write quantities with their unit and in quotes: \"8.000 kPa\", \"23.0 degC\".\n\
        A refused input ends with exit code 2 and says what would be right; any other failure ends with 1. Doubts about a result are flags:\n\
        they stand in the output, and the exit code is 0.\n\
        For screening only: no number printed here authorises a shot."
)]
struct Arguments {
    #[command(subcommand)]
    task: Task,
}

// Each task describes itself where its arguments are.
#[derive(Subcommand)]
#[expect(clippy::large_enum_variant, reason = "there is one of them")]
enum Task {
    Reduce(reduce::Arguments),
    Plan(plan::Arguments),
    Compare(compare::Arguments),
    Waves(waves::Arguments),
    States(states::Arguments),
    Table(table::Arguments),
    Gases(gases::Arguments),
}

fn main() -> ExitCode {
    let done = match Arguments::parse().task {
        Task::Reduce(arguments) => reduce::run(&arguments),
        Task::Plan(arguments) => plan::run(&arguments),
        Task::Compare(arguments) => compare::run(&arguments),
        Task::Waves(arguments) => waves::run(&arguments),
        Task::States(arguments) => states::run(&arguments),
        Task::Table(arguments) => table::run(&arguments),
        Task::Gases(arguments) => gases::run(&arguments),
    };
    match done {
        Ok(()) => ExitCode::SUCCESS,
        Err(failure) => {
            // Where nobody listens, the exit code has to do.
            let _ = writeln!(stderr(), "endwall: {failure}");
            ExitCode::from(failure.exit_code())
        }
    }
}
