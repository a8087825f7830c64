//! Root of a function that grows, inside a bracket, in arbitrary precision.

use super::real::{Float, Real, exponent};

/// `found − wanted`, or `None` where no right digit tells them apart.
pub(super) fn difference(found: &Real, wanted: &Real, precision: usize) -> Option<Float> {
    let ((found, bits), (wanted, wanted_bits)) = (found.to_float(precision), wanted.to_float(precision));
    let difference = &found - wanted;
    let seen = !difference.repr().is_zero() && exponent(&difference) > exponent(&found) - bits.min(wanted_bits) + 3;
    seen.then_some(difference)
}

/// The root between `low` and `high` to about five hundred bits, or to the last that `miss` sees.
///
/// `miss` gives `None` where its digits do not tell it from zero. The caller proves the root by the signs beside it.
///
/// False position with halving of the weight of an end that stays (Dowell and Jarratt, BIT 11 (1971) 168, from memory).
pub(super) fn illinois(miss: &dyn Fn(&Float) -> Option<Float>, mut low: Float, mut high: Float) -> Float {
    let (Some(mut low_miss), Some(mut high_miss)) = (miss(&low), miss(&high)) else {
        panic!("an end of the bracket is a root");
    };
    let mut last_side = 0;
    for _ in 0..400 {
        let width = &high - &low;
        if width.repr().is_zero() || exponent(&width) < exponent(&high) - 500 {
            return high;
        }
        let middle = &high - &high_miss * width / (&high_miss - &low_miss);
        let Some(middle_miss) = miss(&middle) else {
            return middle;
        };
        let side = if middle_miss < Float::ZERO { -1 } else { 1 };
        if side < 0 {
            (low, low_miss) = (middle, middle_miss);
            if last_side < 0 {
                high_miss /= Float::from(2);
            }
        } else {
            (high, high_miss) = (middle, middle_miss);
            if last_side > 0 {
                low_miss /= Float::from(2);
            }
        }
        last_side = side;
    }
    panic!("the bracket does not shrink");
}
