//! [`Exact`]: fixed-width integer fractions, for the sign test that makes an enclosure optimal.

use super::counted::Counted;
use super::rational::Rational;
use super::traits::Semifield;
use super::wide::Wide;
use core::cmp::Ordering;
use core::ops::{Add, Div, Mul};

/// An exact non-negative fraction numerator/denominator·2ᵉ of integers of up to 1536 bits.
///
/// The same generic formulas run on it as on every other kind. What does not fit becomes indefinite, and stays so:
/// a comparison with it gives `None`, and the caller keeps the enclosure that it had.
///
/// ```
/// use endwall::number::{Exact, Semifield};
/// use core::cmp::Ordering;
/// let sum = Exact::whole(1) / Exact::whole(3) + Exact::whole(1) / Exact::whole(6);
/// assert_eq!(sum.compare_double(0.5), Some(Ordering::Equal));
/// ```
#[derive(Clone, Copy, Debug)]
pub struct Exact {
    parts: Option<(Wide, Wide)>,
    exponent: i32,
}

impl From<Rational> for Exact {
    /// |x| of a finite number; indefinite for others.
    fn from(x: Rational) -> Self {
        let (numerator, denominator, exponent) = x.parts();
        Self { parts: x.is_finite().then(|| (Wide::from(numerator), Wide::from(denominator))), exponent }
    }
}

impl From<f64> for Exact {
    /// The exact number |x|.
    fn from(x: f64) -> Self {
        Self::from(Rational::from(x))
    }
}

impl Exact {
    /// What does not fit.
    pub(crate) const INDEFINITE: Self = Self { parts: None, exponent: 0 };

    /// Takes the powers of two out of both integers.
    fn reduced(numerator: Wide, denominator: Wide, exponent: i32) -> Self {
        if numerator.is_zero() {
            return Self { parts: Some((numerator, Wide::from(1))), exponent: 0 };
        }
        let (up, down) = (numerator.trailing_zeros(), denominator.trailing_zeros());
        let exponent = exponent.checked_add(up as i32).and_then(|sum| sum.checked_sub(down as i32));
        exponent.map_or(Self::INDEFINITE, |exponent| Self { parts: Some((numerator.shr(up), denominator.shr(down))), exponent })
    }

    /// The order of two fractions; `None` if one is indefinite or the products do not fit.
    pub fn compare(&self, other: &Self) -> Option<Ordering> {
        let (left, right) = self.over_common(other)?;
        Some(left.cmp(&right))
    }

    /// The order of this fraction and a non-negative double.
    pub fn compare_double(&self, x: f64) -> Option<Ordering> {
        self.compare(&Self::from(x))
    }

    /// |self − other| and the order of the two.
    pub fn difference(&self, other: &Self) -> Option<(Ordering, Self)> {
        let (_, a) = self.parts?;
        let (_, b) = other.parts?;
        let (left, right) = self.over_common(other)?;
        let order = left.cmp(&right);
        let distance = if order == Ordering::Less { right.checked_sub(&left)? } else { left.checked_sub(&right)? };
        Some((order, Self::reduced(distance, common_denominator(&a, &b)?, self.common_exponent(other))))
    }

    fn is_zero(&self) -> bool {
        self.parts.is_some_and(|(numerator, _)| numerator.is_zero())
    }

    /// The two numerators over the common denominator and the smaller power of two.
    fn over_common(&self, other: &Self) -> Option<(Wide, Wide)> {
        let (a, b) = self.parts?;
        let (c, d) = other.parts?;
        let (left, right) = if b == d { (a, c) } else { (a.checked_mul(&d)?, c.checked_mul(&b)?) };
        // Zero is shifted by any amount without growing.
        let least = self.common_exponent(other);
        Some((left.checked_shl(self.exponent.abs_diff(least))?, right.checked_shl(other.exponent.abs_diff(least))?))
    }

    /// The smaller power of two; zero has none of its own.
    fn common_exponent(&self, other: &Self) -> i32 {
        match (self.is_zero(), other.is_zero()) {
            (true, _) => other.exponent,
            (_, true) => self.exponent,
            _ => self.exponent.min(other.exponent),
        }
    }

    /// The fraction as a pair, where 2^low ≤ x ≤ 2^high; `None` elsewhere.
    #[inline(always)]
    pub(crate) fn counted(&self, low: i32, high: i32) -> Option<Counted> {
        let (numerator, denominator) = self.parts?;
        let (n, up) = leading(&numerator)?;
        let (d, down) = leading(&denominator)?;
        Counted::from_quotient(n, d, self.exponent.checked_add(up)?.checked_sub(down)?, low, high)
    }
}

fn common_denominator(a: &Wide, b: &Wide) -> Option<Wide> {
    if a == b { Some(*a) } else { a.checked_mul(b) }
}

/// The leading 128 bits, the first of them 1, and the power of two that was taken out; `None` for zero.
fn leading(integer: &Wide) -> Option<(u128, i32)> {
    let length = integer.length();
    if length == 0 {
        None
    } else if length > 128 {
        Some((integer.shr(length - 128).low_bits(), (length - 128) as i32))
    } else {
        let bits = integer.low_bits();
        Some((bits << bits.leading_zeros(), length as i32 - 128))
    }
}

impl Semifield for Exact {
    fn whole(n: u32) -> Self {
        Self::from(Rational::from(n))
    }

    fn doubled(self) -> Self {
        self.exponent.checked_add(1).map_or(Self::INDEFINITE, |exponent| Self { exponent, ..self })
    }
}

impl Add for Exact {
    type Output = Self;
    fn add(self, other: Self) -> Self {
        let sum = || {
            let (_, a) = self.parts?;
            let (_, b) = other.parts?;
            let (left, right) = self.over_common(&other)?;
            Some(Self::reduced(left.checked_add(&right)?, common_denominator(&a, &b)?, self.common_exponent(&other)))
        };
        sum().unwrap_or(Self::INDEFINITE)
    }
}

impl Mul for Exact {
    type Output = Self;
    fn mul(self, other: Self) -> Self {
        let product = || {
            let (a, b) = self.parts?;
            let (c, d) = other.parts?;
            Some(Self::reduced(a.checked_mul(&c)?, b.checked_mul(&d)?, self.exponent.checked_add(other.exponent)?))
        };
        product().unwrap_or(Self::INDEFINITE)
    }
}

impl Div for Exact {
    type Output = Self;
    /// Indefinite where the divisor is zero.
    fn div(self, other: Self) -> Self {
        let reciprocal = || {
            let (c, d) = other.parts?;
            (!c.is_zero()).then_some(Self { parts: Some((d, c)), exponent: other.exponent.checked_neg()? })
        };
        reciprocal().map_or(Self::INDEFINITE, |r| self * r)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn fractions_obey_the_field_laws() {
        let x = Exact::from("296.2".parse::<Rational>().unwrap());
        let y = Exact::from(0.1);
        let z = Exact::whole(7) / Exact::whole(5);
        let left = (x + y) * z;
        let right = x * z + y * z;
        assert_eq!(left.compare(&right), Some(Ordering::Equal));
        assert_eq!((left / z).compare(&(y + x)), Some(Ordering::Equal));
        let (order, distance) = x.difference(&y).unwrap();
        assert_eq!(order, Ordering::Greater);
        assert_eq!((distance + y).compare(&x), Some(Ordering::Equal));
        assert_eq!(x.doubled().compare(&(x + x)), Some(Ordering::Equal));
    }

    #[test]
    fn zero_is_a_number_and_no_divisor() {
        let zero = Exact::from(0.0);
        let x = Exact::from(1e-300);
        assert_eq!((zero + x).compare(&x), Some(Ordering::Equal));
        assert_eq!(zero.compare(&x), Some(Ordering::Less));
        assert_eq!((zero * x).compare_double(0.0), Some(Ordering::Equal));
        assert_eq!((x / zero).compare(&x), None);
        assert!(zero.counted(-200, 200).is_none());
    }

    /// An exponent that leaves 32 bits makes the fraction indefinite, not another one.
    #[test]
    fn an_exponent_that_does_not_fit_is_indefinite() {
        let mut power = Exact::whole(2);
        let mut all = power;
        for _ in 1..31 {
            power = power * power;
            all = all * power;
        }
        assert_eq!(all.exponent, i32::MAX);
        assert_eq!(all.doubled().compare(&all), None);
        assert_eq!((all + all).compare(&all), None);
    }

    #[test]
    fn a_pair_holds_the_fraction() {
        let third = (Exact::whole(1) / Exact::whole(3)).counted(-200, 200).unwrap().enclosure();
        assert_eq!((third.low(), third.high()), ((1.0f64 / 3.0), (1.0f64 / 3.0).next_up()));
        assert!(Exact::from(1e100).counted(-200, 200).is_none());
        assert!(Exact::from(1e50).counted(-200, 200).is_some());
    }
}
