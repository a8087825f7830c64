//! The two equations for a shock into a gas whose heat capacity depends on temperature, each with its trivial root divided out.
//!
//! Unknown is the compression ε = 1 − ρa/ρb, from the gas ahead (a) to the gas behind (b), which keeps its digits for the weakest shock. With c̄ the
//! mean heat capacity `c_p`/R between both temperatures and x = Tb/Ta − 1, mass, momentum and energy leave
//!
//! > 2 c̄ A(ε) + B(ε) = 0, x = x(ε),
//!
//! in which c̄ depends on ε through x only. For constant c̄ the equation is explicit.

use crate::number::{Ball, Estimate, Semifield, Signed};

/// What is given of a shock besides the gas ahead.
pub(super) trait Stage<S> {
    /// A.
    fn factor(&self, compression: S) -> S;
    /// B.
    fn rest(&self, compression: S) -> S;
    /// x = Tb/Ta − 1.
    fn temperature_excess(&self, compression: S) -> S;
    /// x where the equation holds, from the energy: c̄ and a sum of positive terms (and Δ), so that a strong shock loses no digits.
    fn energy_excess(&self, compression: S, mean: S) -> S;
    /// dA/dε, dB/dε and dx/dε.
    fn slopes(&self, compression: S) -> [S; 3];
    /// ε where x has this value: the solution with lesser and with greater ε, as far as there are any, and whether there are is told by the sign of
    /// [`Stage::discriminant`].
    fn compressions_at(&self, temperature_excess: S) -> [Option<S>; 2];
    /// The residual 2 c̄ A + B from the rise of the enthalpy c̄x, times a positive factor, so that x = 0 is no exception.
    fn lacking(&self, compression: S, rise: S) -> S;
    /// Negative where x never has this value.
    fn discriminant(&self, temperature_excess: S) -> S;
    /// Positive where the energy falls as ε grows, given the heat capacity behind: γ > r for a given speed.
    fn falling(&self, compression: S, heat_capacity: S) -> S;
    /// A lower bound of the slope of the energy that is too much, h/R, with the temperature behind, where it has one for every temperature.
    fn least_slope(&self) -> Option<f64>;
}

/// A stage in balls, which are good for every digit, and in estimates, for what is wanted roughly.
pub(super) trait ProvenStage: Stage<Ball> {
    /// The same stage in estimates.
    type Rough: Stage<Estimate>;
    /// The same stage in estimates.
    fn rough(&self) -> Self::Rough;
}

impl ProvenStage for GivenSpeed<Ball> {
    type Rough = GivenSpeed<Estimate>;
    #[inline(always)]
    fn rough(&self) -> Self::Rough {
        self.map(Estimate::from)
    }
}

impl ProvenStage for GivenSpeedChange<Ball> {
    type Rough = GivenSpeedChange<Estimate>;
    #[inline(always)]
    fn rough(&self) -> Self::Rough {
        self.map(Estimate::from)
    }
}

/// 2 c̄ A + B: positive for too small a compression, negative for too great a one.
#[inline(always)]
pub(super) fn residual<S: Semifield>(stage: &impl Stage<S>, compression: S, mean: S) -> S {
    (mean * stage.factor(compression)).doubled() + stage.rest(compression)
}

/// d(2 c̄ A + B)/dε, given dc̄/dx.
#[inline(always)]
pub(super) fn residual_slope<S: Semifield>(stage: &impl Stage<S>, compression: S, mean: S, mean_slope: S) -> S {
    let [factor, rest, excess] = stage.slopes(compression);
    (mean * factor + stage.factor(compression) * mean_slope * excess).doubled() + rest
}

/// A shock of given speed U relative to the gas ahead: m = U²/(R Ta), R for the gas.
///
/// A = m − 1 − mε, B = −m(2 − ε), x = εA.
#[derive(Clone, Copy, Debug)]
pub(super) struct GivenSpeed<S> {
    pub m: S,
    /// m − 1.
    pub m_excess: S,
}

impl<S: Signed> Stage<S> for GivenSpeed<S> {
    #[inline(always)]
    fn factor(&self, e: S) -> S {
        self.m_excess - self.m * e
    }
    #[inline(always)]
    fn rest(&self, e: S) -> S {
        self.m * (e - S::whole(2))
    }
    #[inline(always)]
    fn temperature_excess(&self, e: S) -> S {
        e * self.factor(e)
    }
    /// mε(2 − ε)/(2c̄).
    #[inline(always)]
    fn energy_excess(&self, e: S, mean: S) -> S {
        self.m * e * (S::whole(2) - e) / mean.doubled()
    }
    #[inline(always)]
    fn slopes(&self, e: S) -> [S; 3] {
        [-self.m, self.m, self.factor(e) - self.m * e]
    }
    /// The roots of mε² − (m − 1)ε + x = 0.
    fn compressions_at(&self, x: S) -> [Option<S>; 2] {
        let greater = (self.m_excess + self.discriminant(x).sqrt()) / self.m.doubled();
        [Some(x / (self.m * greater)), Some(greater)]
    }
    #[inline(always)]
    fn lacking(&self, e: S, rise: S) -> S {
        rise.doubled() + e * self.rest(e)
    }
    /// c(1 + mε) − (c − 1)m(1 − ε).
    #[inline(always)]
    fn falling(&self, e: S, c: S) -> S {
        let one = S::whole(1);
        c * (one + self.m * e) - (c - one) * self.m * (one - e)
    }
    fn least_slope(&self) -> Option<f64> {
        None
    }
    #[inline(always)]
    fn discriminant(&self, x: S) -> S {
        self.m_excess.squared() - (self.m * x).doubled().doubled()
    }
}

/// A shock that changes the speed of the gas by u: k = u²/(R Ta), R for the gas. Δ = (h(Ta) − ha)/(R Ta) is what the enthalpy ha that the gas ahead
/// carries lacks of the full one.
///
/// A = k(1 − ε) − ε², B = 2εΔ − k(2 − ε), x = A/ε.
#[derive(Clone, Copy, Debug)]
pub(super) struct GivenSpeedChange<S> {
    pub k: S,
    pub lag: S,
}

impl<S: Signed> Stage<S> for GivenSpeedChange<S> {
    #[inline(always)]
    fn factor(&self, e: S) -> S {
        self.k * (S::whole(1) - e) - e.squared()
    }
    #[inline(always)]
    fn rest(&self, e: S) -> S {
        (e * self.lag).doubled() - self.k * (S::whole(2) - e)
    }
    #[inline(always)]
    fn temperature_excess(&self, e: S) -> S {
        self.factor(e) / e
    }
    /// (k(2 − ε)/(2ε) − Δ)/c̄.
    #[inline(always)]
    fn energy_excess(&self, e: S, mean: S) -> S {
        (self.k * (S::whole(2) - e) / e.doubled() - self.lag) / mean
    }
    #[inline(always)]
    fn slopes(&self, e: S) -> [S; 3] {
        let factor = -(self.k + e.doubled());
        [factor, self.lag.doubled() + self.k, (factor - self.temperature_excess(e)) / e]
    }
    /// The positive root of ε² + (k + x)ε − k = 0.
    fn compressions_at(&self, x: S) -> [Option<S>; 2] {
        [None, Some(self.k.doubled() / (self.k + x + self.discriminant(x).sqrt()))]
    }
    #[inline(always)]
    fn lacking(&self, e: S, rise: S) -> S {
        (e * rise).doubled() + self.rest(e)
    }
    /// It always does.
    fn falling(&self, _: S, _: S) -> S {
        S::whole(1)
    }
    /// c − κ/(1 + κ) with κ = k/ε², so more than c − 1, which the check of a species puts above 1/2.
    fn least_slope(&self) -> Option<f64> {
        Some(0.5)
    }
    #[inline(always)]
    fn discriminant(&self, x: S) -> S {
        (self.k + x).squared() + self.k.doubled().doubled()
    }
}

impl<S: Semifield> GivenSpeed<S> {
    /// The same in another kind of number.
    pub(super) fn map<T>(&self, convert: impl Fn(S) -> T) -> GivenSpeed<T> {
        GivenSpeed { m: convert(self.m), m_excess: convert(self.m_excess) }
    }
}

impl<S: Semifield> GivenSpeedChange<S> {
    /// The same in another kind of number.
    pub(super) fn map<T>(&self, convert: impl Fn(S) -> T) -> GivenSpeedChange<T> {
        GivenSpeedChange { k: convert(self.k), lag: convert(self.lag) }
    }
}

impl<S: Signed> GivenSpeed<S> {
    /// ε for constant heat capacity: 2(c(m − 1) − m)/(m(2c − 1)).
    #[inline(always)]
    pub(super) fn with_constant(&self, c: S) -> S {
        (c * self.m_excess - self.m).doubled() / (self.m * (c.doubled() - S::whole(1)))
    }
}

impl<S: Signed> GivenSpeedChange<S> {
    /// ε for constant heat capacity: the positive root of cε² + ((c − ½)k − Δ)ε − (c − 1)k = 0.
    #[inline(always)]
    pub(super) fn with_constant(&self, c: S) -> S {
        let linear = (c.doubled() - S::whole(1)) * self.k - self.lag.doubled();
        let last = (c - S::whole(1)) * self.k;
        let root = (linear.squared() + (c * last).doubled().doubled().doubled().doubled()).sqrt();
        (last.doubled().doubled()) / (linear + root)
    }
}
