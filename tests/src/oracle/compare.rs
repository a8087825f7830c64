//! Judging an enclosure `[lo, hi]` of doubles against the truth.

use core::cmp::Ordering;
use core::fmt;
use std::collections::BTreeMap;

use super::real::Real;

/// Whether `lo ≤ truth ≤ hi`.
#[must_use]
pub fn contains(lo: f64, hi: f64, truth: &Real) -> bool {
    truth.cmp_f64(lo) != Ordering::Less && truth.cmp_f64(hi) != Ordering::Greater
}

/// Position of a double in the order of all doubles; both zeros are one position.
fn position(value: f64) -> i64 {
    let bits = i64::from_ne_bytes(value.to_bits().to_ne_bytes());
    if bits < 0 { i64::MIN - bits } else { bits }
}

/// Number of steps from `lo` to `hi` along the doubles: 0 for a point, 1 for neighbours.
#[must_use]
pub fn ulp_width(lo: f64, hi: f64) -> u64 {
    assert!(lo <= hi, "not an enclosure: [{lo:e}, {hi:e}]");
    position(hi).wrapping_sub(position(lo)) as u64
}

/// Whether `[lo, hi]` is the only best enclosure: the truth itself when that is a double, otherwise its two neighbours.
#[must_use]
pub fn optimal(lo: f64, hi: f64, truth: &Real) -> bool {
    match ulp_width(lo, hi) {
        0 => truth.cmp_f64(lo) == Ordering::Equal,
        1 => truth.cmp_f64(lo) == Ordering::Greater && truth.cmp_f64(hi) == Ordering::Less,
        _ => false,
    }
}

/// Distance of a double from the truth in units of the spacing of the doubles there.
#[must_use]
pub fn ulp_error(value: f64, truth: &Real) -> f64 {
    let spacing = value.abs().next_up() - value.abs();
    let difference = Real::from_f64(value) - truth;
    if difference.signum() == 0 { 0.0 } else { difference.to_f64().abs() / spacing }
}

/// Counts of widths (or whole-number errors), by name; prints itself as a table.
#[derive(Clone, Debug, Default)]
pub struct Histogram {
    counts: BTreeMap<String, BTreeMap<u64, u64>>,
}

impl Histogram {
    /// An empty histogram.
    #[must_use]
    pub fn new() -> Self {
        Self::default()
    }

    /// Counts one width under `name`.
    pub fn record(&mut self, name: &str, width: u64) {
        *self.counts.entry(name.to_owned()).or_default().entry(width).or_default() += 1;
    }

    /// Widest width counted under `name`; 0 when there is none.
    #[must_use]
    pub fn widest(&self, name: &str) -> u64 {
        self.counts.get(name).and_then(|widths| widths.last_key_value()).map_or(0, |(width, _)| *width)
    }

    /// Share of the counts under `name` that are at most `width`.
    #[must_use]
    pub fn share_within(&self, name: &str, width: u64) -> f64 {
        let Some(widths) = self.counts.get(name) else {
            return 1.0;
        };
        let within: u64 = widths.range(..=width).map(|(_, count)| count).sum();
        within as f64 / widths.values().sum::<u64>() as f64
    }
}

impl fmt::Display for Histogram {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (name, widths) in &self.counts {
            write!(out, "{name:<28}")?;
            for (width, count) in widths {
                write!(out, "  {width} ulp: {count}")?;
            }
            writeln!(out)?;
        }
        Ok(())
    }
}
