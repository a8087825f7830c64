//! The relations of the incident and the reflected shock, each written once for every kind of number.
//!
//! Sources: Rankine–Hugoniot relations of the stationary normal shock, NACA Report 1135 (1953), equations 93 to 99; the reflected shock
//! follows from them by exact algebra with the condition that the gas at the wall is at rest. With g = γ, G = γ+1 and z = M² − 1,
//!
//! > A = G + 2γz, B = G + (γ−1)z, C = G + (3γ−1)z, D = G + 2(γ−1)z
//!
//! are positive sums, of which every output is a quotient: nothing is subtracted, so nothing cancels, down to the weakest shock.

use crate::gas::Gamma;
use crate::number::{Positive, Semifield, Signed};

/// The sums of which the outputs are quotients, each times a common power of q (γ − 1 = d/q), under which the quotients are invariant.
#[derive(Clone, Copy, Debug)]
pub struct Jump<S> {
    gamma: Gamma<S>,
    /// z = M² − 1.
    z: S,
    /// M².
    mach_squared: S,
    /// G.
    up: S,
    /// A.
    a: S,
    /// B.
    b: S,
    /// C.
    c: S,
    /// D.
    d: S,
}

impl<S: Semifield> Jump<S> {
    /// From z = M² − 1.
    #[inline(always)]
    pub fn new(gamma: Gamma<S>, z: S) -> Self {
        Self::with_mach_squared(gamma, z, S::whole(1) + z)
    }

    /// From M − 1 = e: z = e(2 + e), M² = (1 + e)².
    #[inline(always)]
    pub fn from_mach_excess(gamma: Gamma<S>, e: S) -> Self {
        Self::with_mach_squared(gamma, e * (S::whole(2) + e), (S::whole(1) + e).squared())
    }

    #[inline(always)]
    fn with_mach_squared(gamma: Gamma<S>, z: S, mach_squared: S) -> Self {
        let up = gamma.plus_one();
        let rise = (gamma.ratio() * z).doubled();
        let drop = gamma.d * z;
        Self { gamma, z, mach_squared, up, a: up + rise, b: up + drop, c: up + gamma.thrice_minus_one() * z, d: up + drop.doubled() }
    }

    /// M².
    #[inline(always)]
    pub fn mach_squared(&self) -> S {
        self.mach_squared
    }

    /// M² − 1.
    #[inline(always)]
    pub fn mach_squared_excess(&self) -> S {
        self.z
    }

    /// p2/p1 = A/G.
    #[inline(always)]
    pub fn pressure_ratio(&self) -> S {
        self.a / self.up
    }

    /// p2/p1 − 1 = 2γz/G.
    #[inline(always)]
    pub fn pressure_excess(&self) -> S {
        (self.gamma.ratio() * self.z).doubled() / self.up
    }

    /// ρ2/ρ1 = GM²/B.
    #[inline(always)]
    pub fn density_ratio(&self) -> S {
        self.up * self.mach_squared / self.b
    }

    /// ρ2/ρ1 − 1 = 2z/B.
    #[inline(always)]
    pub fn density_excess(&self) -> S {
        (self.gamma.q * self.z).doubled() / self.b
    }

    /// T2/T1 = AB/(G²M²).
    #[inline(always)]
    pub fn temperature_ratio(&self) -> S {
        self.a * self.b / self.scale()
    }

    /// T2/T1 − 1 = 2(γ−1)z(G + γz)/(G²M²).
    #[inline(always)]
    pub fn temperature_excess(&self) -> S {
        (self.gamma.d * self.z).doubled() * (self.up + self.gamma.ratio() * self.z) / self.scale()
    }

    /// G²M².
    #[inline(always)]
    fn scale(&self) -> S {
        self.up.squared() * self.mach_squared
    }

    /// (u2/a1)² = 4z²/(G²M²), u2 in the frame in which the gas ahead is at rest.
    #[inline(always)]
    pub fn gas_speed_squared(&self) -> S {
        (self.gamma.q * self.z).doubled().squared() / self.scale()
    }

    /// u2/a1 = 2z/(GM), given M.
    #[inline(always)]
    pub fn gas_speed(&self, mach: S) -> S {
        (self.gamma.q * self.z).doubled() / (self.up * mach)
    }

    /// ((U − u2)/a1)² = B²/(G²M²), the gas speed behind the shock in the frame of the shock: M·a1·ρ1/ρ2.
    #[inline(always)]
    pub fn shock_frame_speed_squared(&self) -> S {
        self.b.squared() / self.scale()
    }

    /// M2² = B/A, the Mach number behind the shock in its own frame.
    #[inline(always)]
    pub fn mach_behind_squared(&self) -> S {
        self.b / self.a
    }

    /// p5/p2 = C/B.
    #[inline(always)]
    pub fn reflected_over_incident_pressure(&self) -> S {
        self.c / self.b
    }

    /// p5/p1 = AC/(GB).
    #[inline(always)]
    pub fn reflected_pressure_ratio(&self) -> S {
        self.a * self.c / (self.up * self.b)
    }

    /// p5/p1 − 1 = 2γz(G + C)/(GB).
    #[inline(always)]
    pub fn reflected_pressure_excess(&self) -> S {
        self.pressure_excess() * self.reflection_coefficient()
    }

    /// The reflected-pressure coefficient (p5 − p1)/(p2 − p1) = (G + C)/B.
    #[inline(always)]
    pub fn reflection_coefficient(&self) -> S {
        (self.up + self.c) / self.b
    }

    /// ρ5/ρ1 = GM²A/(BD).
    #[inline(always)]
    pub fn reflected_density_ratio(&self) -> S {
        self.up * self.mach_squared * self.a / (self.b * self.d)
    }

    /// ρ5/ρ1 − 1 = 2z(G + C)/(BD).
    #[inline(always)]
    pub fn reflected_density_excess(&self) -> S {
        (self.gamma.q * self.z).doubled() * (self.up + self.c) / (self.b * self.d)
    }

    /// T5/T1 = CD/(G²M²).
    #[inline(always)]
    pub fn reflected_temperature_ratio(&self) -> S {
        self.c * self.d / self.scale()
    }

    /// T5/T1 − 1 = 2(γ−1)z(G + C)/(G²M²).
    #[inline(always)]
    pub fn reflected_temperature_excess(&self) -> S {
        (self.gamma.d * self.z).doubled() * (self.up + self.c) / self.scale()
    }

    /// (`U_R`/a1)² = D²/(G²M²), laboratory frame.
    #[inline(always)]
    pub fn reflected_speed_squared(&self) -> S {
        self.d.squared() / self.scale()
    }

    /// `U_R`/a1 = D/(GM), given M.
    #[inline(always)]
    pub fn reflected_speed(&self, mach: S) -> S {
        self.d / (self.up * mach)
    }

    /// `M_R`² = A/B, relative to the gas ahead of it.
    #[inline(always)]
    pub fn reflected_mach_squared(&self) -> S {
        self.a / self.b
    }

    /// `M_R`² − 1 = Gz/B.
    #[inline(always)]
    pub fn reflected_mach_squared_excess(&self) -> S {
        self.up * self.z / self.b
    }
}

/// The same ratios with fewer occurrences of each input, so that values and slopes over a box stay narrow; at a point the forms above keep more digits.
impl<S: Signed> Jump<S> {
    /// (U − u2)/a1 = ((γ−1)M + 2/M)/G.
    pub(crate) fn narrow_shock_frame_speed(&self) -> S {
        let mach = self.mach_squared.sqrt();
        (self.gamma.d * mach + self.gamma.q.doubled() / mach) / self.up
    }

    /// `U_R`/a1 = (2(γ−1)M + (3−γ)/M)/G.
    pub(crate) fn narrow_reflected_speed(&self) -> S {
        let mach = self.mach_squared.sqrt();
        ((self.gamma.d * mach).doubled() + (self.gamma.q.doubled() - self.gamma.d) / mach) / self.up
    }

    /// The coefficient (p5 − p1)/(p2 − p1) = 2 + G/(G/z + γ−1).
    pub(crate) fn narrow_reflection_coefficient(&self) -> S {
        S::whole(2) + self.up / (self.up / self.z + self.gamma.d)
    }

    /// T2/T1 − 1 = 2(γ−1)(G + γz)/G²/(1 + 1/z): a product of factors that each increase with z.
    pub(crate) fn narrow_temperature_excess(&self) -> S {
        self.gamma.d.doubled() * (self.up + self.gamma.ratio() * self.z) / self.up.squared() / (S::whole(1) + S::whole(1) / self.z)
    }

    /// T5/T1 − 1 = 2(γ−1)(G + C)/G²/(1 + 1/z), likewise.
    pub(crate) fn narrow_reflected_temperature_excess(&self) -> S {
        self.gamma.d.doubled() * (self.up + self.c) / self.up.squared() / (S::whole(1) + S::whole(1) / self.z)
    }

    /// ρ5/ρ1 = G/(γ−1 + 2/M²) · γ/(γ−1 + p1/p2).
    pub(crate) fn narrow_reflected_density(&self) -> S {
        let (d, q) = (self.gamma.d, self.gamma.q);
        self.up / (d + q.doubled() / self.mach_squared) * (self.gamma.ratio() / (d + q / (S::whole(1) + self.pressure_excess())))
    }
}

/// √(1 + z) − 1 = z/(1 + √(1 + z)): a Mach number's excess from that of its square.
#[inline(always)]
pub fn mach_excess<S: Positive>(z: S) -> S {
    z / (S::whole(1) + (S::whole(1) + z).sqrt())
}

/// z from M² = U²W/(γRT1): the difference is formed once.
#[inline(always)]
pub fn from_shock_speed<S: Signed>(shock_speed: S, sound_speed_squared: S) -> S {
    (shock_speed.squared() - sound_speed_squared) / sound_speed_squared
}

/// z from p2/p1 − 1 = 2γz/G.
#[inline(always)]
pub fn from_pressure_excess<S: Semifield>(gamma: Gamma<S>, excess: S) -> S {
    excess * gamma.plus_one() / gamma.ratio().doubled()
}

/// z from ρ2/ρ1 − 1 = r: z = rG/(2 − (γ−1)r).
#[inline(always)]
pub fn from_density_excess<S: Signed>(gamma: Gamma<S>, excess: S) -> S {
    excess * gamma.plus_one() / (gamma.q.doubled() - gamma.d * excess)
}

/// z from (u2/a1)², with s = G·u2/(4a1): M = s + √(1 + s²), z = 2sM.
#[inline(always)]
pub fn from_gas_speed_squared<S: Positive>(gamma: Gamma<S>, speed_over_sound_squared: S) -> S {
    let square = gamma.plus_one().squared() * speed_over_sound_squared / (S::whole(4) * gamma.q).squared();
    let s = square.sqrt();
    (s * (s + (S::whole(1) + square).sqrt())).doubled()
}

/// The quadratic a·z² + b·z = c with a, c > 0 whose positive root is z.
#[derive(Clone, Copy, Debug)]
pub struct Quadratic<S> {
    a: S,
    b: S,
    c: S,
}

impl<S: Signed> Quadratic<S> {
    /// From T2/T1 − 1 = t: 2γ(γ−1)z² + G(3γ−1 − tG − G)z = tG².
    #[inline(always)]
    pub fn from_temperature_excess(gamma: Gamma<S>, excess: S) -> Self {
        let up = gamma.plus_one();
        Self {
            a: (gamma.ratio() * gamma.d).doubled(),
            // 3γ−1 − (1+t)(γ+1) = 2(γ−1) − t(γ+1).
            b: up * (gamma.d.doubled() - excess * up),
            c: excess * up.squared(),
        }
    }

    /// From p5/p1 − 1 = x: 2γ(3γ−1)z² + G(4γ − x(γ−1))z = xG².
    #[inline(always)]
    pub fn from_reflected_pressure_excess(gamma: Gamma<S>, excess: S) -> Self {
        let up = gamma.plus_one();
        Self {
            a: (gamma.ratio() * gamma.thrice_minus_one()).doubled(),
            b: up * (S::whole(4) * gamma.ratio() - excess * gamma.d),
            c: excess * up.squared(),
        }
    }

    /// From T5/T1 − 1 = t: 2(γ−1)(3γ−1)z² + G(4(γ−1) − tG)z = tG².
    #[inline(always)]
    pub fn from_reflected_temperature_excess(gamma: Gamma<S>, excess: S) -> Self {
        let up = gamma.plus_one();
        Self { a: (gamma.d * gamma.thrice_minus_one()).doubled(), b: up * (S::whole(4) * gamma.d - excess * up), c: excess * up.squared() }
    }

    /// √(b² + 4ac).
    #[inline(always)]
    fn root_of_discriminant(self) -> S {
        (self.b.squared() + S::whole(4) * self.a * self.c).sqrt()
    }

    /// b, whose sign decides which of the two forms of the root does not cancel.
    pub fn linear(self) -> S {
        self.b
    }

    /// 2c/(b + √(b² + 4ac)): exact for every b, without cancellation for b ≥ 0.
    #[inline(always)]
    pub fn root_for_positive_linear(self) -> S {
        self.c.doubled() / (self.b + self.root_of_discriminant())
    }

    /// (√(b² + 4ac) − b)/(2a): exact for every b, without cancellation for b ≤ 0.
    #[inline(always)]
    pub fn root_for_negative_linear(self) -> S {
        (self.root_of_discriminant() - self.b) / self.a.doubled()
    }
}
