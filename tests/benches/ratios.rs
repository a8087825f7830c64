//! How many times the time of careful plain doubles each way takes, measured in turn within one run.
//!
//! `tests/bench` runs it in every build. Only ratios are printed: times of one machine mean nothing on another.

mod ways;

use std::hint::black_box;
use std::time::Instant;

use endwall::shock::error_counts;
use ways::inverse::{self, Inverse};
use ways::iterate::{Bisection, Iterate, Secant};
use ways::timing::{batch, latency};
use ways::{Careful, Case, Proven, Textbook, Way, cases};

/// Rounds, in each of which everything is measured once; the median of their ratios is printed.
const ROUNDS: usize = 61;
/// Answers for each measurement.
const TURNS: u64 = 16 * 256;

/// Something to measure: seconds for so many turns.
struct Row {
    name: &'static str,
    run: Box<dyn Fn(u64) -> f64>,
    times: Vec<f64>,
}

impl Row {
    fn new(name: &'static str, run: impl Fn(u64) -> f64 + 'static) -> Self {
        Self { name, run: Box::new(run), times: Vec::new() }
    }

    /// A function of the number of the turn.
    fn repeated<T>(name: &'static str, function: impl Fn(usize) -> T + 'static) -> Self {
        Self::new(name, move |turns| {
            let start = Instant::now();
            for turn in 0..turns as usize {
                black_box(function(black_box(turn)));
            }
            start.elapsed().as_secs_f64()
        })
    }
}

/// Measures all rows in turn and gives the ratio of each to the first.
fn ratios(rows: &mut [Row], turns: u64) -> Vec<f64> {
    for _ in 0..ROUNDS {
        for row in rows.iter_mut() {
            let time = (row.run)(turns);
            row.times.push(time);
        }
    }
    let of_row = |row: &Row| {
        let mut ratios: Vec<_> = row.times.iter().zip(&rows[0].times).map(|(own, first)| own / first).collect();
        ratios.sort_by(f64::total_cmp);
        ratios[ratios.len() / 2]
    };
    rows.iter().map(of_row).collect()
}

/// Latency and batch of one way.
fn both(name: &'static str, way: impl Way) -> [Row; 2] {
    [
        Row::new(name, move |turns| latency(cases(), turns, way).as_secs_f64()),
        Row::new(name, move |turns| batch(cases(), turns, way).as_secs_f64()),
    ]
}

fn nine_ratios() {
    let ways = [
        both("plain, forms of the library", Careful),
        both("proven", Proven),
        both("plain, textbook", Textbook),
        both("secant to 1e-12", Iterate(Secant)),
        both("bisection to 1e-12", Iterate(Bisection)),
        #[cfg(feature = "inari")]
        both("general interval arithmetic", ways::interval::General),
    ];
    let names: Vec<_> = ways.iter().map(|[latency, _]| latency.name).collect();
    let (mut latency, mut batch): (Vec<_>, Vec<_>) = ways.into_iter().map(|[latency, batch]| (latency, batch)).unzip();
    let (latency, batch) = (ratios(&mut latency, TURNS), ratios(&mut batch, TURNS));
    println!("{:34}{:>10}{:>14}", "nine ratios", "latency", "batch of 16");
    for ((name, latency), batch) in names.iter().zip(&latency).zip(&batch) {
        println!("{name:34}{latency:>10.2}{batch:>14.2}");
    }
    println!("proven over textbook, latency {:.2}", latency[1] / latency[2]);
    let cases = cases();
    let mean = |steps: fn(Case) -> u32| cases.iter().map(|case| f64::from(steps(*case))).sum::<f64>() / cases.len() as f64;
    println!("steps: secant {:.1}, bisection {:.1}", mean(|case| Iterate(Secant).steps(case)), mean(|case| Iterate(Bisection).steps(case)));
}

/// One table of ratios to its first row.
fn table(title: &str, mut rows: Vec<Row>, turns: u64) {
    println!("\n{title:34}{:>10}", "time");
    let ratios = ratios(&mut rows, turns);
    for (row, ratio) in rows.iter().zip(ratios) {
        println!("{:34}{ratio:>10.2}", row.name);
    }
}

fn main() {
    nine_ratios();
    let counts = error_counts().expect("a gas").map(|(count, _)| count);
    println!("errors of the nine pairs in units of 2^-106: {counts:?}");

    let inverses = Inverse::cases();
    let of = |name, solve: fn(&Inverse) -> f64| {
        let inverses = inverses.clone();
        Row::repeated(name, move |turn| solve(&inverses[turn % inverses.len()]))
    };
    let rows = vec![
        of("plain closed form", Inverse::plain),
        of("plain secant to 1e-12", Inverse::secant),
        of("proven closed form", Inverse::closed),
        of("certified root", Inverse::root),
    ];
    table("M from T5/T1", rows, 64);
    println!("evaluations of a certified root, at most: {}", inverse::most_evaluations(&inverses));

    let arguments = |low: f64, high: f64| move |turn: usize| low + (high - low) * ((turn * 7919) % 1024) as f64 / 1024.0;
    let (of_ln, of_exp) = (arguments(0.01, 50.0), arguments(-20.0, 20.0));
    table(
        "logarithm",
        vec![
            Row::repeated("libm", move |turn| inverse::plain_ln(of_ln(turn))),
            Row::repeated("proven", move |turn| inverse::proven_ln(of_ln(turn))),
        ],
        256,
    );
    table(
        "exponential",
        vec![
            Row::repeated("libm", move |turn| inverse::plain_exp(of_exp(turn))),
            Row::repeated("proven", move |turn| inverse::proven_exp(of_exp(turn))),
        ],
        256,
    );
    let fill = ways::thermal::fill();
    let plain = fill.plain(|x| x);
    let constant = ways::thermal::constant_fill();
    table(
        "T5 of air at a shock speed",
        vec![
            Row::repeated("plain Newton, heat capacity of T", move |turn| ways::thermal::plain(&plain, ways::thermal::speed(turn))),
            Row::repeated("proven, heat capacity of T", move |turn| ways::thermal::proven(&fill, ways::thermal::speed(turn))),
            Row::repeated("proven, constant heat capacity", move |turn| ways::thermal::constant(&constant, ways::thermal::speed(turn))),
        ],
        128,
    );
    println!("Newton steps of both shocks, at most: {}", ways::thermal::most_steps(&ways::thermal::fill()));
    let planner = ways::plan::Planner::new;
    let (plain, proven, thermal) = (planner(), planner(), planner());
    table(
        "a whole plan",
        vec![
            Row::repeated("plain, constant heat capacity", move |turn| plain.plain(turn)),
            Row::repeated("proven, constant heat capacity", move |turn| proven.proven(turn)),
            Row::repeated("proven, heat capacity of T", move |turn| thermal.thermal(turn)),
        ],
        16,
    );
    table(
        "a record, five stations",
        vec![
            Row::repeated("read", |_| ways::record::read()),
            Row::repeated("read and reduce", |_| ways::record::read().reduce().expect("a shot")),
            Row::repeated("read, reduce and write", |_| ways::record::read().reduce().expect("a shot").to_json().expect("text")),
        ],
        4,
    );
}
