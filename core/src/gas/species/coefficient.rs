//! Decimal coefficients as they are printed.

use crate::number::{Ball, Rational};

/// A decimal number mantissa·10^exponent, exactly.
///
/// ```
/// use endwall::gas::species::Coefficient;
/// assert_eq!(Coefficient::new(28_0134, -7).to_f64(), 0.0280134);
/// ```
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Coefficient {
    mantissa: i64,
    exponent: i32,
}

impl Coefficient {
    /// mantissa·10^exponent.
    pub const fn new(mantissa: i64, exponent: i32) -> Self {
        Self { mantissa, exponent }
    }

    /// The exact number; `None` where 128-bit integers do not hold it (an exponent beyond ±38, nearly).
    pub fn rational(self) -> Option<Rational> {
        let magnitude = u128::from(self.mantissa.unsigned_abs());
        let power = 10u128.checked_pow(self.exponent.unsigned_abs())?;
        let value = if self.exponent < 0 { Rational::ratio(magnitude, power)? } else { Rational::ratio(magnitude.checked_mul(power)?, 1)? };
        Some(if self.mantissa < 0 { value.negated() } else { value })
    }

    /// The number as a ball good to 2⁻¹⁰⁴; unknown where [`Coefficient::rational`] is `None`.
    pub fn ball(self) -> Ball {
        self.rational().map_or(Ball::UNKNOWN, Ball::from)
    }

    /// The nearest double; not a number where [`Coefficient::rational`] is `None`.
    pub fn to_f64(self) -> f64 {
        self.rational().map_or(f64::NAN, Rational::to_f64)
    }
}

impl TryFrom<Rational> for Coefficient {
    type Error = ();

    /// The decimal, where the number has one of at most 18 digits.
    fn try_from(value: Rational) -> Result<Self, ()> {
        let ten = Rational::integer(10);
        (0..=38)
            .scan(value, |scaled, exponent| {
                let this = *scaled;
                *scaled = this.checked_mul(ten)?;
                Some((this, exponent))
            })
            .find_map(|(scaled, exponent)| scaled.to_i64().map(|mantissa| Self::new(mantissa, -exponent)))
            .ok_or(())
    }
}
