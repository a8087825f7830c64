//! Times of every way, with their scatter.
//!
//! `cargo bench -p endwall-tests --bench shock`; ratios within one run, and other builds, are what `tests/bench` is for.

mod ways;

use criterion::{BenchmarkId, Criterion, Throughput};
use std::hint::black_box;
use std::time::Duration;
use ways::inverse::{self, Inverse};
use ways::iterate::{Bisection, Iterate, Secant};
use ways::timing::{batch, latency};
use ways::{BATCH, Careful, Proven, Textbook, Way, cases};

fn way(criterion: &mut Criterion, name: &str, way: impl Way) {
    let mut group = criterion.benchmark_group("nine ratios");
    group.throughput(Throughput::Elements(1));
    group.bench_function(BenchmarkId::new("latency", name), |bencher| bencher.iter_custom(|turns| latency(cases(), turns, way)));
    group.throughput(Throughput::Elements(BATCH as u64));
    group.bench_function(BenchmarkId::new("batch of 16", name), |bencher| {
        bencher.iter_custom(|turns| batch(cases(), turns * BATCH as u64, way));
    });
    group.finish();
}

fn main() {
    let mut criterion = Criterion::default()
        .sample_size(20)
        .warm_up_time(Duration::from_millis(200))
        .measurement_time(Duration::from_millis(800))
        .configure_from_args();
    way(&mut criterion, "plain, forms of the library", Careful);
    way(&mut criterion, "proven", Proven);
    way(&mut criterion, "plain, textbook", Textbook);
    way(&mut criterion, "secant", Iterate(Secant));
    way(&mut criterion, "bisection", Iterate(Bisection));
    #[cfg(feature = "inari")]
    way(&mut criterion, "general interval arithmetic", ways::interval::General);

    let inverses = Inverse::cases();
    let mut group = criterion.benchmark_group("64 Mach numbers from T5/T1");
    let mut solve = |name, solve: fn(&Inverse) -> f64| {
        group.bench_function(name, |bencher| bencher.iter(|| inverses.iter().map(|inverse| solve(black_box(inverse))).sum::<f64>()));
    };
    solve("plain closed form", Inverse::plain);
    solve("secant", Inverse::secant);
    solve("proven closed form", Inverse::closed);
    solve("certified root", Inverse::root);
    group.finish();

    let mut group = criterion.benchmark_group("elementary");
    group.bench_function("ln, libm", |bencher| bencher.iter(|| inverse::plain_ln(black_box(12.3))));
    group.bench_function("ln, proven", |bencher| bencher.iter(|| inverse::proven_ln(black_box(12.3))));
    group.bench_function("exp, libm", |bencher| bencher.iter(|| inverse::plain_exp(black_box(2.3))));
    group.bench_function("exp, proven", |bencher| bencher.iter(|| inverse::proven_exp(black_box(2.3))));
    group.finish();

    criterion.bench_function("record: read, reduce, write", |bencher| {
        bencher.iter(|| ways::record::read().reduce().expect("a shot").to_json().expect("text"));
    });
    criterion.final_summary();
}
