//! Numbers as people read them.

use alloc::format;
use alloc::string::{String, ToString};

use super::unit::Unit;
use crate::number::Rational;

/// Powers of ten outside this range are written as `e`.
const PLAIN: core::ops::RangeInclusive<i32> = -5..=8;

/// A value and its expanded uncertainty in a display unit: the uncertainty with two significant figures, the value rounded
/// to the same place (JCGM 100:2008, 7.2.6), both to nearest. Both are given in SI units; `expanded` is zero or more.
/// Without an uncertainty the value has six significant figures.
///
/// ```
/// use endwall::record::{Unit, value_with_uncertainty};
/// let kilopascal = Unit::find("kPa");
/// assert_eq!(value_with_uncertainty(950_123.4, Some(6_345.0), kilopascal), "950.1 ± 6.3 kPa");
/// assert_eq!(value_with_uncertainty(0.012_04, Some(0.002_8), Unit::find("%/m")), "1.20 ± 0.28 %/m");
/// assert_eq!(value_with_uncertainty(2.963_7, None, None), "2.96370");
/// ```
pub fn value_with_uncertainty(value: f64, expanded: Option<f64>, unit: Option<Unit>) -> String {
    let in_unit = |x: f64, difference: bool| match unit {
        None => x,
        Some(unit) => {
            let zero = if difference { unit.reading(Rational::ZERO) } else { 0.0 };
            unit.reading(Rational::from(x)) - zero
        }
    };
    let symbol = unit.map_or(String::new(), |unit| format!(" {}", unit.symbol()));
    let shown = in_unit(value, false);
    match expanded.map(|expanded| in_unit(expanded, true)) {
        Some(half_width) if half_width > 0.0 && half_width.is_finite() => {
            let (number, half_width) = rounded(shown, half_width);
            match number.split_once('e') {
                None => format!("{number} ± {half_width}{symbol}"),
                Some((number, power)) => format!("({number} ± {half_width})e{power}{symbol}"),
            }
        }
        Some(_) => format!("{} ± 0{symbol}", significant(shown, 6)),
        None => format!("{}{symbol}", significant(shown, 6)),
    }
}

/// The value and the uncertainty, rounded to the second figure of the uncertainty; a common power of ten, where one is
/// needed, stands at the value.
fn rounded(value: f64, half_width: f64) -> (String, String) {
    let place = leading_place(half_width, 2) - 1;
    let leading = leading_place(if value.abs() > half_width { value } else { half_width }, 2);
    if PLAIN.contains(&leading) && PLAIN.contains(&(place + 1)) {
        return (fixed(value, place), fixed(half_width, place));
    }
    let scale = power_of_ten(-leading);
    let number = fixed(value * scale, place - leading);
    (format!("{number}e{leading}"), fixed(half_width * scale, place - leading))
}

/// `figures` significant figures.
pub(super) fn significant(value: f64, figures: i32) -> String {
    if !value.is_finite() {
        return "not a number".to_string();
    }
    if value == 0.0 {
        return "0".to_string();
    }
    let leading = leading_place(value, figures);
    if PLAIN.contains(&leading) {
        fixed(value, leading - figures + 1)
    } else {
        format!("{:.*e}", usize::try_from(figures - 1).unwrap_or(0), value)
    }
}

/// The shortest digits that read back to the same double.
pub(super) fn shortest(value: f64) -> String {
    if value == 0.0 || (1e-5..1e15).contains(&value.abs()) { format!("{value}") } else { format!("{value:e}") }
}

/// The power of ten of the first figure, after rounding to `figures` figures.
fn leading_place(value: f64, figures: i32) -> i32 {
    let text = format!("{:.*e}", usize::try_from(figures - 1).unwrap_or(0), value);
    text.rsplit_once('e').and_then(|(_, power)| power.parse().ok()).unwrap_or(0)
}

/// Rounded to a multiple of 10^place, written without an exponent. −0 is written as 0.
fn fixed(value: f64, place: i32) -> String {
    let text = if place <= 0 {
        format!("{value:.*}", place.unsigned_abs().min(40) as usize)
    } else {
        let mut whole = format!("{:.0}", value * power_of_ten(-place));
        if whole.trim_start_matches('-') != "0" {
            whole.extend(core::iter::repeat_n('0', place.unsigned_abs().min(40) as usize));
        }
        whole
    };
    match text.strip_prefix('-') {
        Some(digits) if digits.bytes().all(|byte| matches!(byte, b'0' | b'.')) => digits.to_string(),
        _ => text,
    }
}

/// 10ⁿ; within one unit in the last place, which rounding to a few figures does not show.
fn power_of_ten(n: i32) -> f64 {
    libm::pow(10.0, f64::from(n))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::record::{Dimension, Quantity};

    #[test]
    fn two_figures_of_uncertainty_and_the_value_to_the_same_place() {
        for (value, half_width, text) in [
            // JCGM 100:2008, 7.2.6: 10.057 62 Ω with a combined uncertainty of 27 mΩ becomes 10.058 Ω.
            (10.057_62, 0.027, "10.058 ± 0.027"),
            (1234.567, 12.3, "1235 ± 12"),
            (1234.567, 123.0, "1230 ± 120"),
            (123_456.0, 1234.0, "123500 ± 1200"),
            (0.5, 0.099_6, "0.50 ± 0.10"),
            (0.5, 0.096, "0.500 ± 0.096"),
            (-0.001, 0.3, "0.00 ± 0.30"),
            (0.0, 12.0, "0 ± 12"),
            (40.0, 1234.0, "0 ± 1200"),
            (3.2e-7, 1.5e-9, "(3.200 ± 0.015)e-7"),
            (4.0e-9, 3.0e-7, "(0.0 ± 3.0)e-7"),
            (1.5e12, 2.0e10, "(1.500 ± 0.020)e12"),
        ] {
            assert_eq!(value_with_uncertainty(value, Some(half_width), None), text);
        }
        assert_eq!(value_with_uncertainty(1.0, Some(0.0), None), "1.00000 ± 0");
        assert_eq!(value_with_uncertainty(f64::NAN, None, None), "not a number");
        assert_eq!(value_with_uncertainty(296.15, Some(0.5), Unit::find("degC")), "23.00 ± 0.50 degC");
        assert_eq!(value_with_uncertainty(296.15, Some(0.5), Unit::find("degF")), "73.40 ± 0.90 degF");
    }

    #[test]
    fn what_is_shown_can_be_typed_into_a_record() {
        let shown = value_with_uncertainty(950_123.4, Some(6_345.0), Unit::find("kPa")) + " (k=2)";
        let read = Quantity::parse(&shown, Dimension::Pressure).unwrap();
        assert_eq!(read.value(), "950100".parse().unwrap());
        assert_eq!(read.standard_uncertainty(), Some(3150.0));
    }

    #[test]
    fn shortest_digits_read_back() {
        for value in [0.1, 1e-300, 123_456.789, 1e22, f64::MAX, 5e-324, 0.0, -2.5e-7] {
            assert_eq!(shortest(value).parse::<f64>().unwrap(), value);
        }
    }
}
