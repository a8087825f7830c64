//! How long a way takes: for one answer after the other, and for a batch of independent ones.

use super::{Answer, BATCH, Case, Way};
use core::hint::black_box;
use std::time::{Duration, Instant};

/// Time of `turns` answers, each of which waits for all bits of the one before.
#[inline(never)]
pub fn latency(cases: &[Case], turns: u64, way: impl Way) -> Duration {
    let start = Instant::now();
    let mut fold = 0;
    for turn in 0..turns {
        let case = cases[turn as usize % cases.len()];
        // The last twenty bits of the input, all of which depend on all bits of the answers so far.
        let last = fold_down(fold);
        fold = way.ratios(case.at(f64::from_bits(case.mach_excess.to_bits() ^ last))).fold();
    }
    black_box(fold);
    start.elapsed()
}

#[inline(always)]
fn fold_down(fold: u64) -> u64 {
    fold.wrapping_mul(0x9E37_79B9_7F4A_7C15) >> 44
}

/// Time of `turns` answers, a batch at a time into memory.
#[inline(never)]
pub fn batch(cases: &[Case], turns: u64, way: impl Way) -> Duration {
    let batches: Vec<_> =
        cases.chunks_exact(BATCH).map(|batch| (batch[0], core::array::from_fn(|index| batch[index].mach_excess))).collect();
    let start = Instant::now();
    for turn in 0..turns / BATCH as u64 {
        let (gas, strengths) = &batches[turn as usize % batches.len()];
        black_box(&way.batch(*gas, strengths));
    }
    start.elapsed()
}
