//! [`Known`]: an input, either exact or known within a tolerance.

use super::ball::Ball;
use super::enclosure::Enclosure;
use super::rational::Rational;

/// An input of a relation: an exact number, or an enclosure (a tolerance).
///
/// A double is taken as the exact number that it is; a typed decimal is parsed as a [`Rational`], which is another number.
///
/// ```
/// use endwall::number::{Enclosure, Known, Rational};
/// let typed = Known::from("0.1".parse::<Rational>().unwrap());
/// let double = Known::from(0.1);
/// assert!(typed.enclosure().contains(0.1) && typed.enclosure().width() > 0.0);
/// assert_eq!(double.enclosure(), Enclosure::from(0.1));
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Known {
    /// The exact number.
    Exactly(Rational),
    /// Any number of the enclosure.
    Within(Enclosure),
}

impl Known {
    /// The smallest enclosure of the input.
    pub fn enclosure(self) -> Enclosure {
        match self {
            Self::Exactly(x) => Enclosure::from(x),
            Self::Within(x) => x,
        }
    }

    /// The nearest double, or the middle of the enclosure.
    pub fn nominal(self) -> f64 {
        match self {
            Self::Exactly(x) => x.to_f64(),
            Self::Within(x) => x.middle(),
        }
    }

    /// The exact number, or the middle of the tolerance as an exact number.
    pub(crate) fn middle(self) -> Self {
        self.exactly(Enclosure::middle)
    }

    /// The exact number, or one end of the tolerance as an exact number.
    pub(crate) fn end(self, upper: bool) -> Self {
        self.exactly(if upper { Enclosure::high } else { Enclosure::low })
    }

    fn exactly(self, choice: fn(Enclosure) -> f64) -> Self {
        match self {
            Self::Exactly(_) => self,
            Self::Within(x) => Self::from(choice(x)),
        }
    }

    /// The exact number, if it is one.
    pub fn exact(self) -> Option<Rational> {
        match self {
            Self::Exactly(x) => Some(x),
            Self::Within(_) => None,
        }
    }

    /// The input as a ball.
    pub fn ball(self) -> Ball {
        match self {
            Self::Exactly(x) => Ball::from(x),
            Self::Within(x) => Ball::around(x),
        }
    }

    /// True if it is finite and lies within 2^±200, the domain of every entry.
    pub fn is_within_domain(self) -> bool {
        let limits = (super::round::power_of_two(-200), super::round::power_of_two(200));
        let bounds = self.enclosure();
        bounds.is_proven() && bounds.low() >= limits.0 && bounds.high() <= limits.1
    }
}

impl<T: Into<Rational>> From<T> for Known {
    /// An exact number; a double is the exact number that it is.
    fn from(x: T) -> Self {
        Self::Exactly(x.into())
    }
}

impl From<Enclosure> for Known {
    /// A tolerance; one of no width is the exact number.
    fn from(x: Enclosure) -> Self {
        if x.is_exact() { Self::Exactly(Rational::from(x.low())) } else { Self::Within(x) }
    }
}
