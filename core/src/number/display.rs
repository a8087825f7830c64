//! Decimal printing of enclosures: outward, only the proven digits, or exactly.

use super::enclosure::Enclosure;
use core::fmt::{self, Write};

/// Digits that are kept of a decimal expansion; more than any sensible request.
const KEPT: usize = 40;

/// The decimal expansion of a non-negative finite double: leading digits, power of ten of the first, and whether more follow.
#[derive(Clone, Copy, PartialEq)]
struct Expansion {
    digits: [u8; KEPT],
    exponent: i32,
    more: bool,
}

/// Receives `d.ddd…e±x` as the formatter writes it, and keeps what [`Expansion`] needs.
struct Collector {
    expansion: Expansion,
    count: usize,
    in_exponent: bool,
    negative_exponent: bool,
}

impl Write for Collector {
    fn write_str(&mut self, text: &str) -> fmt::Result {
        for byte in text.bytes() {
            match byte {
                b'0'..=b'9' if self.in_exponent => {
                    self.expansion.exponent = self.expansion.exponent * 10 + i32::from(byte - b'0');
                }
                b'0'..=b'9' => {
                    match self.expansion.digits.get_mut(self.count) {
                        Some(digit) => *digit = byte - b'0',
                        None => self.expansion.more |= byte != b'0',
                    }
                    self.count += 1;
                }
                b'e' => self.in_exponent = true,
                b'-' if self.in_exponent => self.negative_exponent = true,
                _ => {}
            }
        }
        Ok(())
    }
}

impl Expansion {
    /// All digits of a double: 767 are the most that one has.
    fn of(x: f64) -> Result<Self, fmt::Error> {
        let mut collector = Collector {
            expansion: Self { digits: [0; KEPT], exponent: 0, more: false },
            count: 0,
            in_exponent: false,
            negative_exponent: false,
        };
        write!(collector, "{:.770e}", x.abs())?;
        if collector.negative_exponent {
            collector.expansion.exponent = -collector.expansion.exponent;
        }
        Ok(collector.expansion)
    }

    /// The first `digits` digits, rounded toward zero or away from it.
    fn cut(mut self, digits: usize, away: bool) -> Self {
        let digits = digits.clamp(1, KEPT);
        let dropped = self.more || self.digits.iter().skip(digits).any(|digit| *digit != 0);
        self.digits.iter_mut().skip(digits).for_each(|digit| *digit = 0);
        self.more = false;
        if dropped && away { self.incremented(digits) } else { self }
    }

    /// The first `digits` digits, to nearest, ties away from zero.
    fn rounded(mut self, digits: usize) -> Self {
        let digits = digits.clamp(1, KEPT - 1);
        let up = self.digits.get(digits).is_some_and(|digit| *digit >= 5);
        self.digits.iter_mut().skip(digits).for_each(|digit| *digit = 0);
        self.more = false;
        if up { self.incremented(digits) } else { self }
    }

    /// One unit more in the last of `digits` places.
    fn incremented(mut self, digits: usize) -> Self {
        for digit in self.digits.iter_mut().take(digits).rev() {
            if *digit < 9 {
                *digit += 1;
                return self;
            }
            *digit = 0;
        }
        if let Some(first) = self.digits.first_mut() {
            *first = 1;
        }
        self.exponent += 1;
        self
    }

    /// Plain notation where the point is near the digits, else scientific.
    fn write(&self, f: &mut fmt::Formatter<'_>, negative: bool, count: usize) -> fmt::Result {
        if negative {
            f.write_char('-')?;
        }
        let count = count.clamp(1, KEPT) as i32;
        let plain = self.exponent >= -5 && self.exponent < count.max(16);
        let first = if plain { self.exponent.min(0) } else { 0 };
        let point = if plain { self.exponent } else { 0 };
        let last = (count - 1).max(point);
        for place in first..=last {
            let digit = usize::try_from(place).ok().and_then(|place| self.digits.get(place)).copied().unwrap_or(0);
            f.write_char(char::from(b'0' + digit))?;
            if place == point.max(first) && place < last {
                f.write_char('.')?;
            }
        }
        if plain { Ok(()) } else { write!(f, "e{}", self.exponent) }
    }
}

/// Writes one bound with so many significant digits, rounded down or up.
fn write_bound(f: &mut fmt::Formatter<'_>, x: f64, digits: usize, upward: bool) -> fmt::Result {
    if !x.is_finite() {
        return f.write_str(if x > 0.0 { "∞" } else { "-∞" });
    }
    let negative = x < 0.0;
    Expansion::of(x)?.cut(digits, negative != upward).write(f, negative, digits)
}

impl fmt::Display for Enclosure {
    /// `[low, high]` in decimal, rounded outward, with 17 significant digits or the precision of the format.
    ///
    /// ```
    /// use endwall::number::{Enclosure, Semifield};
    /// let third = Enclosure::whole(1) / Enclosure::whole(3);
    /// assert_eq!(format!("{third:.5}"), "[0.33333, 0.33334]");
    /// assert_eq!(format!("{:.3}", Enclosure::from(-2.5)), "[-2.50, -2.50]");
    /// ```
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let digits = f.precision().unwrap_or(17);
        f.write_char('[')?;
        write_bound(f, self.low(), digits, false)?;
        f.write_str(", ")?;
        write_bound(f, self.high(), digits, true)?;
        f.write_char(']')
    }
}

/// What [`Enclosure::proven_digits`] and [`Enclosure::exact_bounds`] return: prints an enclosure in another way.
#[derive(Clone, Copy, Debug)]
pub struct Digits {
    enclosure: Enclosure,
    exact: bool,
}

impl Enclosure {
    /// Prints the digits that are proven: the longest decimal, of at most 17 digits (or the precision of the format), to which every number
    /// of the enclosure rounds. Prints `?` if not even one digit is.
    ///
    /// ```
    /// use endwall::number::Enclosure;
    /// let x = Enclosure::new(2.4999, 2.50004).unwrap();
    /// assert_eq!(x.proven_digits().to_string(), "2.500");
    /// assert_eq!(format!("{:.3}", x.proven_digits()), "2.50");
    /// ```
    pub fn proven_digits(self) -> Digits {
        Digits { enclosure: self, exact: false }
    }

    /// Prints both bounds with the fewest digits that read back to the same two doubles.
    ///
    /// ```
    /// use endwall::number::Enclosure;
    /// assert_eq!(Enclosure::from(0.1).exact_bounds().to_string(), "[0.1, 0.1]");
    /// ```
    pub fn exact_bounds(self) -> Digits {
        Digits { enclosure: self, exact: true }
    }
}

impl fmt::Display for Digits {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let (low, high) = (self.enclosure.low(), self.enclosure.high());
        if self.exact {
            return write!(f, "[{low:?}, {high:?}]");
        }
        if !self.enclosure.is_bounded() || (low < 0.0 && high > 0.0) {
            return f.write_char('?');
        }
        let (a, b) = (Expansion::of(low)?, Expansion::of(high)?);
        let most = f.precision().unwrap_or(17).clamp(1, 17);
        // Fewer digits may agree where more do not, and the other way round (2.4999 and 2.50004): the longest agreement counts.
        for digits in (1..=most).rev() {
            let (rounded, other) = (a.rounded(digits), b.rounded(digits));
            if rounded == other {
                return rounded.write(f, low < 0.0 || high < 0.0, digits);
            }
        }
        f.write_char('?')
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use std::format;

    #[test]
    fn bounds_are_rounded_outward_in_every_notation() {
        let x = Enclosure::new(-1_234.567_8, 0.000_123_456).unwrap();
        assert_eq!(format!("{x:.3}"), "[-1240, 0.000124]");
        let wide = Enclosure::new(1.75e-30, 9.999e25).unwrap();
        assert_eq!(format!("{wide:.2}"), "[1.7e-30, 1.0e26]");
        assert_eq!(format!("{:.2}", Enclosure::UNKNOWN), "[-∞, ∞]");
        assert_eq!(format!("{:.4}", Enclosure::from(0.0)), "[0.000, 0.000]");
        // 0.1 is a little more than a tenth, 0.3 a little less.
        assert_eq!(format!("{}", Enclosure::from(0.1)), "[0.10000000000000000, 0.10000000000000001]");
        assert_eq!(format!("{:.5}", Enclosure::from(99_999.5)), "[99999, 100000]");
    }

    #[test]
    fn only_proven_digits_are_printed() {
        let digits = |low: f64, high: f64| format!("{}", Enclosure::new(low, high).unwrap().proven_digits());
        assert_eq!(digits(2.5, 2.5), "2.5000000000000000");
        assert_eq!(digits(1.0 / 3.0, (1.0f64 / 3.0).next_up()), "0.333333333333333");
        assert_eq!(digits(-1.0001, -0.9999), "-1.00");
        assert_eq!(digits(-1.0, 1.0), "?");
        assert_eq!(digits(1.0, 8.0), "?");
    }
}
