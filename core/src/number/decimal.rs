//! Exact numbers from text: decimals and ratios of decimals.

use super::rational::Rational;
use core::fmt;
use core::str::FromStr;

/// Why a text is not an exact number.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum RationalError {
    /// The text is empty.
    Empty,
    /// A character that does not belong into a number, and its position in bytes.
    Character(usize),
    /// More digits, or a larger or smaller power of ten, than 128-bit integers hold (38 digits).
    TooLong,
    /// The denominator of a ratio is zero.
    DividedByZero,
}

impl fmt::Display for RationalError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Empty => f.write_str("no number was given"),
            Self::Character(at) => write!(f, "not a number: character {} does not belong there", at + 1),
            Self::TooLong => f.write_str("a number may have at most 38 digits and a power of ten within 1e-38 to 1e38"),
            Self::DividedByZero => f.write_str("the denominator of a ratio must not be zero"),
        }
    }
}

impl core::error::Error for RationalError {}

impl FromStr for Rational {
    type Err = RationalError;

    /// A decimal (`-12.5`, `1.2e-3`) or a ratio of two of them (`5/3`).
    fn from_str(text: &str) -> Result<Self, RationalError> {
        match text.split_once('/') {
            None => decimal(text, 0),
            Some((above, below)) => {
                let divisor = decimal(below, above.len() + 1)?;
                if divisor.is_zero() {
                    return Err(RationalError::DividedByZero);
                }
                decimal(above, 0)?.checked_div(divisor).ok_or(RationalError::TooLong)
            }
        }
    }
}

/// One decimal; `offset` is its place in the whole text, for the error.
fn decimal(text: &str, offset: usize) -> Result<Rational, RationalError> {
    let trimmed = text.trim_start();
    let offset = offset + text.len() - trimmed.len();
    let trimmed = trimmed.trim_end();
    let (negative, digits, offset) = match trimmed.strip_prefix('-') {
        Some(rest) => (true, rest, offset + 1),
        None => match trimmed.strip_prefix('+') {
            Some(rest) => (false, rest, offset + 1),
            None => (false, trimmed, offset),
        },
    };
    if digits.is_empty() {
        return Err(RationalError::Empty);
    }
    let mut mantissa: u128 = 0;
    let mut pending_zeros: i32 = 0;
    let mut ten: i32 = 0;
    let (mut seen_point, mut seen_digit) = (false, false);
    let mut bytes = digits.bytes().enumerate();
    for (at, byte) in bytes.by_ref() {
        match byte {
            b'0' if mantissa == 0 => seen_digit = true,
            // Zeros are kept back until a digit follows, so that 1000000 does not use up the digits.
            b'0' => {
                seen_digit = true;
                pending_zeros = pending_zeros.checked_add(1).ok_or(RationalError::TooLong)?;
            }
            b'1'..=b'9' => {
                seen_digit = true;
                for _ in 0..=pending_zeros {
                    mantissa = mantissa.checked_mul(10).ok_or(RationalError::TooLong)?;
                }
                pending_zeros = 0;
                mantissa = mantissa.checked_add(u128::from(byte - b'0')).ok_or(RationalError::TooLong)?;
            }
            b'.' if !seen_point => {
                seen_point = true;
                continue;
            }
            b'e' | b'E' if seen_digit => {
                let power = digits.get(at + 1..).unwrap_or("");
                let value: i32 = power.parse().map_err(|_| RationalError::Character(offset + at))?;
                ten = ten.checked_add(value).ok_or(RationalError::TooLong)?;
                break;
            }
            _ => return Err(RationalError::Character(offset + at)),
        }
        if seen_point {
            ten = ten.checked_sub(1).ok_or(RationalError::TooLong)?;
        }
    }
    if !seen_digit {
        return Err(RationalError::Character(offset));
    }
    if mantissa == 0 {
        return Ok(Rational::ZERO);
    }
    let ten = ten.checked_add(pending_zeros).ok_or(RationalError::TooLong)?;
    let power = 5u128.checked_pow(ten.unsigned_abs()).ok_or(RationalError::TooLong)?;
    // 10ⁿ = 5ⁿ·2ⁿ: the powers of two cost no digits.
    let base = Rational::scaled(negative, mantissa, ten);
    let five = Rational::ratio(power, 1).ok_or(RationalError::TooLong)?;
    if ten < 0 { base.checked_div(five) } else { base.checked_mul(five) }.ok_or(RationalError::TooLong)
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use std::string::ToString;

    #[test]
    fn decimals_are_read_exactly_and_rounded_once() {
        let cases = [
            "0",
            "1",
            "0.1",
            "296.2",
            "39.948e-3",
            "1e22",
            "1e23",
            "9007199254740993",
            "0.3",
            "123456789012345678901234567890",
            "1.7976931348623157e30",
            "8.31446261815324",
            "-2.5e-7",
            "1e-38",
            "2.2250738585072011e-20",
            "4.35",
            "0.000001",
        ];
        for text in cases {
            let exact: Rational = text.parse().unwrap();
            let double: f64 = text.parse().unwrap();
            assert_eq!(exact.to_f64(), double, "{text}");
        }
    }

    #[test]
    fn what_is_no_number_is_refused_with_its_place() {
        let error = |text: &str| text.parse::<Rational>().unwrap_err();
        assert_eq!(error(""), RationalError::Empty);
        assert_eq!(error("1,5"), RationalError::Character(1));
        assert_eq!(error("12x"), RationalError::Character(2));
        assert_eq!(error("1/0"), RationalError::DividedByZero);
        assert_eq!(error("1e99"), RationalError::TooLong);
        assert_eq!(error("."), RationalError::Character(0));
        assert_eq!(error("e5"), RationalError::Character(0));
        assert_eq!(error("3/4/5"), RationalError::Character(3));
        assert!(error("1e99").to_string().contains("38 digits"));
    }
}
