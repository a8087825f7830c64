//! Coverage intervals of a sorted sample (JCGM 101:2008, 7.7, from memory), and the sort.

/// Which interval of a given coverage probability is formed.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum CoverageInterval {
    /// As much probability below as above (JCGM 101, 7.7.2).
    Symmetric,
    /// The shortest (JCGM 101, 7.7.3).
    Shortest,
}

/// The coverage interval of sorted values (JCGM 101, 7.7): between the values number `r` and `r + q`, `q` the nearest whole number to `p M`.
pub(super) fn interval(sorted: &[f64], level: f64, kind: CoverageInterval) -> (f64, f64) {
    let count = sorted.len();
    let inside = (libm::floor(level * count as f64 + 0.5) as usize).min(count.saturating_sub(1));
    let spare = count.saturating_sub(inside);
    let pair = |r: usize| {
        let at = |index: usize| sorted.get(index).copied().unwrap_or(0.0);
        (at(r), at(r.saturating_add(inside)))
    };
    match kind {
        // The guide counts from one: r = (M - q)/2, rounded up when that is no whole number.
        CoverageInterval::Symmetric => pair(spare.div_ceil(2).saturating_sub(1)),
        CoverageInterval::Shortest => {
            let mut best = pair(0);
            for r in 1..spare {
                let next = pair(r);
                if next.1 - next.0 < best.1 - best.0 {
                    best = next;
                }
            }
            best
        }
    }
}

/// Heap sort: in place, bounded, and, unlike a general sort, without any path that could panic.
pub(super) fn heap_sort(values: &mut [f64]) {
    let count = values.len();
    for top in (0..count / 2).rev() {
        sift_down(values, top, count);
    }
    for end in (1..count).rev() {
        exchange(values, 0, end);
        sift_down(values, 0, end);
    }
}

/// Restores the heap `values[..end]` below `top`.
fn sift_down(values: &mut [f64], top: usize, end: usize) {
    let mut parent = top;
    loop {
        let left = parent.saturating_mul(2).saturating_add(1);
        let right = left.saturating_add(1);
        if left >= end {
            return;
        }
        let value = |values: &[f64], index: usize| values.get(index).copied().unwrap_or(0.0);
        let child = if right < end && value(values, right) > value(values, left) { right } else { left };
        if value(values, child) <= value(values, parent) {
            return;
        }
        exchange(values, parent, child);
        parent = child;
    }
}

/// Exchanges two values, `low < high`.
fn exchange(values: &mut [f64], low: usize, high: usize) {
    if let Some((before, after)) = values.split_at_mut_checked(high) {
        if let (Some(a), Some(b)) = (before.get_mut(low), after.first_mut()) {
            core::mem::swap(a, b);
        }
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use crate::shot::random::Generator;
    use std::vec::Vec;

    /// Against the sort of the standard library.
    #[test]
    fn sorts() {
        let mut generator = Generator::new(3);
        for length in (0..40).chain([1000, 1023, 1024]) {
            let mut values: Vec<f64> = (0..length).map(|_| libm::floor(generator.normal() * 20.0)).collect();
            let mut want = values.clone();
            want.sort_by(f64::total_cmp);
            heap_sort(&mut values);
            assert!(values.iter().zip(&want).all(|(a, b)| a == b));
        }
    }

    /// JCGM 101, 7.7: with 100 values at 95 %, q = 95, (M - q)/2 = 2.5, r = 3: the values number 3 and 98.
    #[test]
    fn ranks() {
        let values: Vec<f64> = (1..=100).map(f64::from).collect();
        assert_eq!(interval(&values, 0.95, CoverageInterval::Symmetric), (3.0, 98.0));
        // 200 values: q = 190, r = 5.
        let values: Vec<f64> = (1..=200).map(f64::from).collect();
        assert_eq!(interval(&values, 0.95, CoverageInterval::Symmetric), (5.0, 195.0));
        // Squares lie closest together at the bottom.
        let values: Vec<f64> = (1..=200).map(|i| f64::from(i * i)).collect();
        assert_eq!(interval(&values, 0.95, CoverageInterval::Shortest), (1.0, 191.0 * 191.0));
    }
}
