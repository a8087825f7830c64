//! The only code that knows how floating-point arithmetic rounds: error-free transforms and directed rounding.
//!
//! IEEE 754 binary64, rounding to nearest, ties to even; u = 2⁻⁵³. WebAssembly and Cortex-M soft float offer nothing else,
//! so directed results are built from the error of the nearest one.
//! Error-free transforms: T. J. Dekker, Numer. Math. 18 (1971) 224; Knuth, The Art of Computer Programming, vol. 2,
//! 4.2.2, theorem B (from memory); restated in M. Joldeş, J.-M. Muller, V. Popescu, ACM TOMS 44 (2017) 15res, section 1.

/// u = 2⁻⁵³, the unit roundoff: |RN(x) − x| ≤ u·|RN(x)| for normal results.
pub(crate) const UNIT: f64 = f64::EPSILON / 2.0;

/// Between this and its reciprocal a product's rounding error is a double: ulp(a)·ulp(b) ≥ 2⁻¹⁰⁷⁴ as soon as
/// |a·b| ≥ 2⁻⁹⁶⁹, and Dekker's split of a factor up to 2⁹⁹⁵ does not overflow.
pub(crate) const SMALLEST: f64 = f64::from_bits((1023 - 960) << 52);
/// The reciprocal of [`SMALLEST`].
pub(crate) const LARGEST: f64 = f64::from_bits((1023 + 960) << 52);

/// True if error-free products and quotients can be taken at this magnitude.
#[inline(always)]
pub(crate) fn in_range(x: f64) -> bool {
    let magnitude = x.abs();
    (SMALLEST..=LARGEST).contains(&magnitude)
}

/// a + b = s + e exactly, s = RN(a + b); no condition but the absence of overflow.
#[inline(always)]
pub(crate) fn two_sum(a: f64, b: f64) -> (f64, f64) {
    let s = a + b;
    let a_part = s - b;
    let b_part = s - a_part;
    (s, (a - a_part) + (b - b_part))
}

/// a + b = s + e exactly where |a| ≥ |b| or a = 0.
#[inline(always)]
pub(crate) fn fast_two_sum(a: f64, b: f64) -> (f64, f64) {
    let s = a + b;
    (s, b - (s - a))
}

/// a·b = p + e exactly, p = RN(a·b), where p and both factors are [`in_range`]. The fused form and Dekker's give the
/// same two doubles, since both are exact.
#[inline(always)]
pub(crate) fn two_product(a: f64, b: f64) -> (f64, f64) {
    let p = a * b;
    #[cfg(all(feature = "std", target_feature = "fma"))]
    {
        (p, a.mul_add(b, -p))
    }
    #[cfg(not(all(feature = "std", target_feature = "fma")))]
    {
        let (ah, al) = split(a);
        let (bh, bl) = split(b);
        (p, al * bl - (((p - ah * bh) - al * bh) - ah * bl))
    }
}

/// Veltkamp's split into two halves of at most 26 bits.
#[cfg(not(all(feature = "std", target_feature = "fma")))]
#[inline(always)]
fn split(a: f64) -> (f64, f64) {
    // 2²⁷ + 1.
    let c = 134_217_729.0 * a;
    let high = c - (c - a);
    (high, a - high)
}

/// RN(√x).
#[inline(always)]
pub(crate) fn sqrt(x: f64) -> f64 {
    #[cfg(feature = "std")]
    {
        x.sqrt()
    }
    #[cfg(not(feature = "std"))]
    {
        libm::sqrt(x)
    }
}

/// 2ⁿ for −1022 ≤ n ≤ 1023.
#[inline(always)]
pub(crate) const fn power_of_two(n: i32) -> f64 {
    f64::from_bits(((1023 + n) as u64) << 52)
}

/// The greatest double ≤ the exact value, given its nearest double and the sign of (exact − nearest).
#[inline(always)]
fn down(nearest: f64, error: f64) -> f64 {
    if error < 0.0 { nearest.next_down() } else { nearest }
}

/// The least double ≥ a + b.
#[inline(always)]
pub(crate) fn add_up(a: f64, b: f64) -> f64 {
    -add_down(-a, -b)
}

/// The greatest double ≤ a + b.
#[inline(always)]
pub(crate) fn add_down(a: f64, b: f64) -> f64 {
    let (s, e) = two_sum(a, b);
    if s.is_finite() { down(s, e) } else { overflowed_down(s) }
}

/// The greatest double ≤ a·b; 0·∞ is 0, as a bound of a product of bounds.
#[inline(always)]
pub(crate) fn multiply_down(a: f64, b: f64) -> f64 {
    if a == 0.0 || b == 0.0 {
        return 0.0;
    }
    let p = a * b;
    if in_range(p) && in_range(a) && in_range(b) { down(p, two_product(a, b).1) } else { overflowed_down(p) }
}

/// The least double ≥ a·b.
#[inline(always)]
pub(crate) fn multiply_up(a: f64, b: f64) -> f64 {
    -multiply_down(-a, b)
}

/// The greatest double ≤ a/b, b ≠ 0.
#[inline(always)]
pub(crate) fn divide_down(a: f64, b: f64) -> f64 {
    if a == 0.0 {
        return 0.0;
    }
    let q = a / b;
    if in_range(q) && in_range(a) && in_range(b) {
        // a − q·b is a double (its sign is what matters): exact by the remainder property.
        let (p, e) = two_product(q, b);
        let remainder = (a - p) - e;
        down(q, if b > 0.0 { remainder } else { -remainder })
    } else {
        overflowed_down(q)
    }
}

/// The least double ≥ a/b, b ≠ 0.
#[inline(always)]
pub(crate) fn divide_up(a: f64, b: f64) -> f64 {
    -divide_down(-a, b)
}

/// The greatest double ≤ √x, x ≥ 0.
#[inline(always)]
pub(crate) fn sqrt_down(x: f64) -> f64 {
    let (s, remainder) = sqrt_with_remainder(x);
    if remainder < 0.0 { s.next_down() } else { s }
}

/// The least double ≥ √x, x ≥ 0.
#[inline(always)]
pub(crate) fn sqrt_up(x: f64) -> f64 {
    let (s, remainder) = sqrt_with_remainder(x);
    if remainder > 0.0 { s.next_up() } else { s }
}

/// RN(√x) and the sign of x − RN(√x)².
#[inline(always)]
fn sqrt_with_remainder(x: f64) -> (f64, f64) {
    let s = sqrt(x);
    if in_range(x) {
        let (p, e) = two_product(s, s);
        (s, (x - p) - e)
    } else if x == 0.0 || x == f64::INFINITY {
        (s, 0.0)
    } else {
        // Scaled by an even power of two into the range, where the remainder is exact.
        let scale = if x < 1.0 { power_of_two(600) } else { power_of_two(-600) };
        let half = if x < 1.0 { power_of_two(300) } else { power_of_two(-300) };
        let (p, e) = two_product(s * half, s * half);
        (s, (x * scale - p) - e)
    }
}

/// One step down from a result whose rounding error cannot be computed; an overflow becomes the largest finite double.
#[inline(always)]
fn overflowed_down(nearest: f64) -> f64 {
    if nearest.is_nan() { f64::NEG_INFINITY } else { nearest.next_down() }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn directed_results_bracket_and_are_neighbours() {
        for (a, b) in [(0.1, 0.2), (1e300, 3e-5), (1.0, 3.0), (7.0, -5.3), (1e-200, 1e-200), (0.1, 1e-320)] {
            assert!(add_down(a, b) <= add_up(a, b));
            assert!(multiply_down(a, b) <= multiply_up(a, b));
            assert!(divide_down(a, b) <= divide_up(a, b));
        }
        assert_eq!(add_down(0.1, 0.2).next_up(), add_up(0.1, 0.2));
        assert_eq!(divide_down(1.0, 3.0).next_up(), divide_up(1.0, 3.0));
        assert_eq!(multiply_down(0.5, 3.0), multiply_up(0.5, 3.0));
        assert_eq!(multiply_down(0.1, 0.1).next_up(), multiply_up(0.1, 0.1));
        assert_eq!(sqrt_down(4.0), sqrt_up(4.0));
        assert_eq!(sqrt_down(2.0).next_up(), sqrt_up(2.0));
        assert_eq!(sqrt_down(1e-310).next_up(), sqrt_up(1e-310));
        assert_eq!(sqrt_down(power_of_two(-1000)), sqrt_up(power_of_two(-1000)));
    }

    #[test]
    fn overflow_is_bounded_by_the_largest_double() {
        assert_eq!(multiply_down(1e200, 1e200), f64::MAX);
        assert_eq!(multiply_up(1e200, 1e200), f64::INFINITY);
        assert_eq!(add_down(f64::MAX, f64::MAX), f64::MAX);
    }
}
