//! A gas of constant heat capacity.

use super::error::{InputError, Parameter, Rule};
use crate::number::{Ball, Counted, Enclosure, Exact, Known, Positive, Rational, Semifield};

/// The molar gas constant R = 8.31446261815324 J/(mol K), exact in the SI of 2019 (`N_A`·k = 6.02214076e23·1.380649e-23).
///
/// As a formula, so that every kind of number gets it without rounding: 831446261815324/10¹⁴.
///
/// ```
/// assert_eq!(endwall::gas::molar_gas_constant::<f64>(), 8.31446261815324);
/// ```
#[inline(always)]
pub fn molar_gas_constant<S: Semifield>() -> S {
    let ten_to_seven = S::whole(10_000_000);
    (S::whole(83_144_626) * ten_to_seven + S::whole(1_815_324)) / (ten_to_seven * ten_to_seven)
}

/// γ as the formulas want it: γ − 1 = d/q, with which nothing has to be subtracted.
///
/// Formulas are homogeneous in (d, q), so q may be 1.
#[derive(Clone, Copy, Debug)]
pub struct Gamma<S> {
    /// A multiple of γ − 1.
    pub d: S,
    /// The same multiple of 1.
    pub q: S,
}

impl<S: Semifield> Gamma<S> {
    /// From γ − 1.
    pub fn from_excess(excess: S) -> Self {
        Self { d: excess, q: S::whole(1) }
    }

    /// q·γ.
    #[inline(always)]
    pub fn ratio(self) -> S {
        self.d + self.q
    }

    /// q·(γ + 1).
    #[inline(always)]
    pub fn plus_one(self) -> S {
        self.d + self.q.doubled()
    }

    /// q·(3γ − 1).
    #[inline(always)]
    pub fn thrice_minus_one(self) -> S {
        self.d + (self.d + self.q).doubled()
    }

    /// γ.
    #[inline(always)]
    pub fn value(self) -> S {
        self.ratio() / self.q
    }
}

/// The heat-capacity ratio γ = `c_p`/`c_v`, dimensionless: an exact ratio or a tolerance, between 1.000001 and 100.
///
/// A double is not 7/5: with γ the double nearest 1.4, an enclosure of T5/T1 misses the answer for 7/5 nearly always. Give the ratio.
///
/// ```
/// use endwall::gas::HeatCapacityRatio;
/// let diatomic = HeatCapacityRatio::ratio(7, 5)?;
/// assert!(diatomic.enclosure().contains(1.4));
/// assert!(HeatCapacityRatio::ratio(1, 1).is_err());
/// # Ok::<(), endwall::gas::InputError>(())
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct HeatCapacityRatio {
    value: Known,
    /// γ − 1.
    excess: Known,
}

impl HeatCapacityRatio {
    /// The exact ratio numerator/denominator.
    ///
    /// # Errors
    /// [`InputError`] unless 1.000001 ≤ γ ≤ 100.
    pub fn ratio(numerator: u32, denominator: u32) -> Result<Self, InputError> {
        let ratio = Rational::ratio(u128::from(numerator), u128::from(denominator));
        Self::new(ratio.unwrap_or(Rational::from(f64::INFINITY)))
    }

    /// An exact number or a tolerance.
    ///
    /// # Errors
    /// [`InputError`] unless 1.000001 ≤ γ ≤ 100 and γ − 1 is held exactly by 128-bit integers.
    pub fn new(value: impl Into<Known>) -> Result<Self, InputError> {
        const LIMITS: (f64, f64) = (1.000_001, 100.0);
        let value = value.into();
        let refuse = |rule| InputError { parameter: Parameter::HeatCapacityRatio, value: value.nominal(), rule };
        let bounds = value.enclosure();
        if !bounds.is_proven() {
            return Err(refuse(Rule::Finite));
        }
        if bounds.low() < LIMITS.0 || bounds.high() > LIMITS.1 {
            return Err(refuse(Rule::Between(LIMITS.0, LIMITS.1)));
        }
        let excess = match value {
            Known::Exactly(x) => x.checked_sub(Rational::ONE).ok_or(refuse(Rule::Digits))?.into(),
            Known::Within(x) => Known::Within(x - Enclosure::whole(1)),
        };
        Ok(Self { value, excess })
    }

    /// From γ − 1, inside the limits.
    pub(crate) fn from_excess(excess: Known) -> Option<Self> {
        let value = match excess {
            Known::Exactly(x) => Known::Exactly(x.checked_add(Rational::ONE)?),
            Known::Within(x) => Known::Within(x + Enclosure::whole(1)),
        };
        Some(Self { value, excess })
    }

    /// γ as it was given.
    pub fn known(self) -> Known {
        self.value
    }

    /// γ − 1.
    pub(crate) fn excess(self) -> Known {
        self.excess
    }

    /// An enclosure of γ.
    pub fn enclosure(self) -> Enclosure {
        self.value.enclosure()
    }

    /// γ − 1 as a quotient of two exact doubles, where γ is a ratio of integers below 2⁵³.
    pub fn small(self) -> Option<SmallRatio> {
        const LIMIT: u128 = 1 << 53;
        let (n, d, exponent) = self.excess.exact()?.parts();
        if n >= LIMIT || d >= LIMIT {
            return None;
        }
        let shift = d.ilog2() as i32;
        Some(SmallRatio { d: libm::scalbn(n as f64, exponent - shift), q: libm::scalbn(d as f64, -shift) })
    }

    /// For an exact ratio: d = γ − 1 as a pair, q = 1.
    pub(crate) fn counted(self) -> Option<Gamma<Counted>> {
        let excess = Counted::from_rational(self.excess.exact()?, -20, 7)?;
        Some(Gamma::from_excess(excess))
    }

    /// For an exact ratio: both integers.
    pub(crate) fn exact(self) -> Option<Gamma<Exact>> {
        Some(Gamma::from_excess(Exact::from(self.excess.exact()?)))
    }
}

/// γ − 1 = d/q with two exact doubles, q in [1, 2): the form in which the fast relations take γ.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SmallRatio {
    d: f64,
    q: f64,
}

impl SmallRatio {
    /// d and q.
    #[inline(always)]
    pub fn parts(self) -> (f64, f64) {
        (self.d, self.q)
    }
}

/// A gas of constant heat capacity: γ and the molar mass W in kg/mol, between 1e-4 and 10 kg/mol.
///
/// ```
/// use endwall::gas::{Gas, HeatCapacityRatio};
/// use endwall::number::Rational;
/// let argon = Gas::new(HeatCapacityRatio::ratio(5, 3)?, "0.039948".parse::<Rational>().unwrap())?;
/// let sound_speed = argon.sound_speed(300.0)?;
/// assert!((sound_speed.middle() - 322.6).abs() < 0.1);
/// assert_eq!(sound_speed.width_in_ulp(), 1);
/// # Ok::<(), endwall::gas::InputError>(())
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Gas {
    heat_capacity_ratio: HeatCapacityRatio,
    molar_mass: Known,
}

impl Gas {
    /// A gas from its heat-capacity ratio and its molar mass in kg/mol.
    ///
    /// # Errors
    /// [`InputError`] unless the molar mass lies between 1e-4 and 10 kg/mol (a value of 39.948 is in g/mol).
    pub fn new(heat_capacity_ratio: HeatCapacityRatio, molar_mass: impl Into<Known>) -> Result<Self, InputError> {
        let molar_mass = molar_mass.into();
        let bounds = molar_mass.enclosure();
        let refuse = |rule| InputError { parameter: Parameter::MolarMass, value: molar_mass.nominal(), rule };
        if !bounds.is_proven() {
            return Err(refuse(Rule::Finite));
        }
        if bounds.low() < 1e-4 || bounds.high() > 10.0 {
            return Err(refuse(Rule::Between(1e-4, 10.0)));
        }
        Ok(Self { heat_capacity_ratio, molar_mass })
    }

    /// γ.
    pub fn heat_capacity_ratio(&self) -> HeatCapacityRatio {
        self.heat_capacity_ratio
    }

    /// W in kg/mol.
    pub fn molar_mass(&self) -> Known {
        self.molar_mass
    }

    /// Sound speed a = √(γ R T/W) in m/s at a temperature in K; the optimal enclosure for exact inputs, the hull for tolerances.
    ///
    /// # Errors
    /// [`InputError`] unless the temperature is positive and within 2^±200 K.
    pub fn sound_speed(&self, temperature: impl Into<Known>) -> Result<Enclosure, InputError> {
        let temperature = temperature.into();
        positive(Parameter::FillTemperature, temperature)?;
        let (gamma, mass) = (self.heat_capacity_ratio, self.molar_mass);
        if let (Some(t), Some(w), Some(g), Some(e)) = (temperature.exact(), mass.exact(), gamma.counted(), gamma.exact()) {
            let pair = |x| Counted::from_rational(x, -Counted::ENTRY, Counted::ENTRY);
            if let (Some(pair_t), Some(pair_w)) = (pair(t), pair(w)) {
                let root = sound_speed_squared(g, pair_t, pair_w).sqrt();
                return Ok(root.optimal_root(|| sound_speed_squared(e, Exact::from(t), Exact::from(w))));
            }
        }
        // Increasing in γ and T, decreasing in W: the enclosure arithmetic of a formula in which each occurs once is the hull.
        let square = gamma.enclosure() * molar_gas_constant() * temperature.enclosure() / mass.enclosure();
        Ok(square.sqrt())
    }
}

/// a² = γ R T/W in m²/s².
#[inline(always)]
pub fn sound_speed_squared<S: Semifield>(gamma: Gamma<S>, temperature: S, molar_mass: S) -> S {
    gamma.ratio() * molar_gas_constant::<S>() * temperature / (gamma.q * molar_mass)
}

/// Checks that an input is positive and inside the domain of every entry, 2^±200.
pub(crate) fn positive(parameter: Parameter, value: Known) -> Result<(), InputError> {
    let bounds = value.enclosure();
    let refuse = |rule| Err(InputError { parameter, value: value.nominal(), rule });
    if !bounds.is_proven() {
        refuse(Rule::Finite)
    } else if bounds.low() <= 0.0 {
        refuse(Rule::Above(0.0))
    } else if !value.is_within_domain() {
        refuse(Rule::Between(Ball::SMALLEST_ENTRY, Ball::LARGEST_ENTRY))
    } else {
        Ok(())
    }
}
