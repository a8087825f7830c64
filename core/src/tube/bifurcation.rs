//! Whether the reflected shock bifurcates in the boundary layer of the side wall, by Mark's criterion.

use super::input::{TubeInput, TubeInputError};
use super::test_gas::BehindShock;
use crate::gas::{Gamma, HeatCapacityRatio, Rule};
use crate::number::{Ball, Elementary, Enclosure, Function, Known, RootError, Semifield, Signed, root};
use crate::shock::Jump;
use core::fmt;

/// The answer of the criterion.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum Verdict {
    /// The wall layer is proven to stagnate below p5.
    Bifurcates,
    /// It is proven to reach p5.
    DoesNot,
    /// The inputs do not tell.
    Undecided,
}

/// The criterion at one shock.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Bifurcation {
    /// Mach number of the wall layer in the frame of the reflected shock, `M_bl` = `U_R`/a(T1).
    pub wall_layer_mach: Enclosure,
    /// Its stagnation pressure over p5.
    pub stagnation_over_reflected: Enclosure,
    /// 1 minus that: positive where the shock bifurcates. Within some hundredths of 0 the criterion, a model of the wall layer, decides nothing.
    pub margin: Enclosure,
    /// Yes or no.
    pub verdict: Verdict,
}

/// The Mach numbers of the incident shock between which the reflected one bifurcates.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct BifurcationBand {
    /// The lower bound.
    pub lower: Enclosure,
    /// The upper bound.
    pub upper: Enclosure,
}

/// Why a band is not proven.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum BifurcationError {
    /// An input was refused.
    Input(TubeInputError),
    /// The proof of one of the roots failed.
    Root(RootError),
}

impl fmt::Display for BifurcationError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Input(error) => error.fmt(f),
            Self::Root(error) => write!(f, "a bound of the Mach numbers with bifurcation is not proven: {error}"),
        }
    }
}

impl core::error::Error for BifurcationError {}

/// ln(pt/p) = γ/(γ−1)·ln(1 + (γ−1)M²/2), isentropic (NACA Report 1135, equation 44), in a form that holds for γ near 1.
fn isentropic<S: Elementary>(gamma: Gamma<S>, mach_squared: S) -> S {
    let twice = gamma.q.doubled();
    gamma.ratio() / twice * mach_squared * (gamma.d * mach_squared / twice).log1p_ratio()
}

/// ln(pt2/p1) = γ/(γ−1)·ln((γ+1)M²/2) − 1/(γ−1)·ln((2γM² − (γ−1))/(γ+1)), behind a normal shock (Rayleigh's pitot formula, NACA Report 1135,
/// equation 100).
fn pitot<S: Elementary>(gamma: Gamma<S>, mach_squared: S) -> S {
    let stagnation = (gamma.plus_one() * mach_squared / gamma.q.doubled()).ln();
    let jump = (((gamma.ratio() * mach_squared).doubled() - gamma.d) / gamma.plus_one()).ln();
    stagnation + gamma.q / gamma.d * (stagnation - jump)
}

impl Bifurcation {
    /// The criterion for a gas of constant heat capacity at a Mach number of the incident shock.
    ///
    /// > `M_bl` = `U_R`/a1 = (2(γ−1)M² + 3−γ)/((γ+1)M)
    ///
    /// The gas of the wall layer has the temperature and, in the laboratory, the speed of the wall, so that it runs into the reflected shock with
    /// `U_R`. Its stagnation pressure, isentropic for `M_bl` ≤ 1 and behind a normal shock above, is compared with p5; both forms agree at `M_bl` 1.
    ///
    /// Source: H. Mark, NACA TM 1418 (1958), from memory.
    ///
    /// # Errors
    /// [`TubeInputError`] unless 1 < M ≤ 2⁶⁴ and M − 1 ≥ 2⁻²⁰⁰.
    ///
    /// ```
    /// use endwall::gas::HeatCapacityRatio;
    /// use endwall::tube::{Bifurcation, Verdict};
    /// // γ 7/5 at M 2: M_bl is 1, p5/p2 is 10/3, and the layer reaches only (6/5)^(7/2) = 1.893 times p2.
    /// let shock = Bifurcation::new(HeatCapacityRatio::ratio(7, 5)?, 2.0)?;
    /// assert!(shock.wall_layer_mach.contains(1.0));
    /// assert!((shock.stagnation_over_reflected.middle() - 1.2_f64.powf(3.5) * 0.3).abs() < 1e-14);
    /// assert_eq!(shock.verdict, Verdict::Bifurcates);
    /// assert_eq!(Bifurcation::new(HeatCapacityRatio::ratio(5, 3)?, 4.0)?.verdict, Verdict::DoesNot);
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn new(heat_capacity_ratio: HeatCapacityRatio, mach: impl Into<Known>) -> Result<Self, TubeInputError> {
        let mach = mach.into();
        let excess = match mach {
            Known::Exactly(x) => Ball::from(x) - Ball::from(1.0),
            Known::Within(x) => Ball::around(x) - Ball::from(1.0),
        };
        let bounds = excess.enclosure();
        let greatest = 18_446_744_073_709_551_616.0;
        if !bounds.is_proven() || bounds.low() < Ball::SMALLEST_ENTRY || bounds.high() > greatest {
            return Err(TubeInput::Mach.refuse(mach.nominal(), Rule::Between(1.0, greatest)));
        }
        let gamma = Gamma::from_excess(heat_capacity_ratio.excess().ball());
        let jump = Jump::from_mach_excess(gamma, excess);
        let wall_layer = jump.reflected_speed(excess + Ball::from(1.0));
        Ok(Self::compare(gamma, wall_layer, jump.reflected_over_incident_pressure()))
    }

    /// The criterion for any gas: γ of the wall layer (at T1), `M_bl` = `U_R`/a1 and p5/p2.
    ///
    /// # Errors
    /// [`TubeInputError`] unless `M_bl` is positive, p5/p2 is above 1 and both are within 2^±200.
    pub fn from_ratios(
        heat_capacity_ratio: HeatCapacityRatio,
        wall_layer_mach: impl Into<Known>,
        reflected_over_incident_pressure: impl Into<Known>,
    ) -> Result<Self, TubeInputError> {
        let (mach, ratio) = (wall_layer_mach.into().ball(), reflected_over_incident_pressure.into().ball());
        TubeInput::WallLayerMach.positive_ball(mach)?;
        TubeInput::ReflectedOverIncidentPressure.positive_ball(ratio)?;
        if !(ratio - Ball::from(1.0)).is_certainly_positive() {
            return Err(TubeInput::ReflectedOverIncidentPressure.refuse(ratio.nearest(), Rule::Above(1.0)));
        }
        Ok(Self::compare(Gamma::from_excess(heat_capacity_ratio.excess().ball()), mach, ratio))
    }

    /// The criterion for the gas behind a shock, of constant heat capacity or thermally perfect, reflected from a rigid wall.
    ///
    /// > γ = ρ1 a1²/p1 with ρ1 = ρ2(1 − u2/`U_S`)
    ///
    /// # Errors
    /// [`TubeInputError`] for a γ that is not above 1.
    ///
    /// ```
    /// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
    /// use endwall::shock::{Entry, Incident};
    /// use endwall::tube::{BehindShock, Bifurcation, Verdict};
    /// let fill = Fill::new(Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.0280134)?, 10e3, 295.0)?;
    /// let shock = Incident::new(&fill, Entry::Mach, 2.0)?;
    /// let found = Bifurcation::behind(&BehindShock::from(&shock))?;
    /// assert_eq!(found.verdict, Verdict::Bifurcates);
    /// assert!((found.stagnation_over_reflected.middle() - 1.2_f64.powf(3.5) * 0.3).abs() < 1e-14);
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn behind(behind: &BehindShock) -> Result<Self, TubeInputError> {
        let gamma = if let Some(gamma) = behind.constant_gamma() {
            gamma
        } else {
            let density = behind.density * (Ball::from(1.0) - behind.gas_speed / behind.shock_speed);
            let ratio = density * behind.sound_speed_1.squared() / behind.gas.pressure().ball();
            if !(ratio - Ball::from(1.0)).is_certainly_positive() {
                return Err(TubeInput::HeatCapacityRatio.refuse(ratio.nearest(), Rule::Above(1.0)));
            }
            Gamma { d: ratio - Ball::from(1.0), q: Ball::from(1.0) }
        };
        Ok(Self::compare(gamma, behind.reflected_speed / behind.sound_speed_1, behind.reflected_over_incident_pressure()))
    }

    fn compare(gamma: Gamma<Ball>, mach: Ball, reflected_over_incident_pressure: Ball) -> Self {
        let square = mach * mach;
        let over_one = mach - Ball::from(1.0);
        let stagnation = if over_one.is_certainly_positive() {
            pitot(gamma, square)
        } else if over_one.is_certainly_negative() || mach.enclosure() == Enclosure::from(1.0) {
            isentropic(gamma, square)
        } else {
            // Around 1 each form holds on its side, and the hull of both on either.
            Ball::around(pitot(gamma, square).enclosure().hull(isentropic(gamma, square).enclosure()))
        };
        let logarithm = stagnation - reflected_over_incident_pressure.ln();
        let margin = -(logarithm * logarithm.expm1_ratio());
        // Over a tolerance so wide that the ball leaves the domain of a logarithm nothing is known, and the answer says so.
        let bounds = margin.enclosure();
        let verdict = if bounds.low() > 0.0 {
            Verdict::Bifurcates
        } else if bounds.high() <= 0.0 {
            Verdict::DoesNot
        } else {
            Verdict::Undecided
        };
        let stagnation_over_reflected = logarithm.exp().enclosure();
        Self { wall_layer_mach: mach.enclosure(), stagnation_over_reflected, margin: bounds, verdict }
    }
}

/// ln(`p_st`/p5) as a function of M, on one side of `M_bl` = 1, for γ − 1 = d/q with integers below 2⁵³.
struct Criterion {
    d: u64,
    q: u64,
    supersonic: bool,
}

/// An integer below 2⁵³ in any kind of number.
fn integer<S: Signed>(n: u64) -> S {
    S::whole((n >> 32) as u32) * S::whole(65_536).squared() + S::whole(n as u32)
}

impl Function for Criterion {
    fn evaluate<S: Elementary>(&self, mach: S) -> S {
        let gamma = Gamma { d: integer(self.d), q: integer(self.q) };
        let jump = Jump::from_mach_excess(gamma, mach - S::whole(1));
        let square = jump.reflected_speed(mach).squared();
        let stagnation = if self.supersonic { pitot(gamma, square) } else { isentropic(gamma, square) };
        stagnation - jump.reflected_over_incident_pressure().ln()
    }
}

impl Criterion {
    /// γ − 1 as integers; `None` where they are too large.
    fn new(heat_capacity_ratio: HeatCapacityRatio) -> Option<Self> {
        let (n, d, exponent) = heat_capacity_ratio.excess().exact()?.parts();
        let shift = u32::try_from(exponent.abs()).ok().filter(|shift| *shift < 64)?;
        let (n, d) = if exponent < 0 { (n, d.checked_mul(1 << shift)?) } else { (n.checked_mul(1 << shift)?, d) };
        let small = |n: u128| u64::try_from(n).ok().filter(|n| *n < 1 << 53);
        Some(Self { d: small(n)?, q: small(d)?, supersonic: false })
    }

    /// The Mach number at which `M_bl` is 1: (3−γ)/(2(γ−1)).
    fn sonic(&self) -> f64 {
        (2.0 * self.q as f64 - self.d as f64) / (2.0 * self.d as f64)
    }

    /// In plain arithmetic, on the side on which M lies.
    fn plain(&self, mach: f64) -> f64 {
        Self { supersonic: mach > self.sonic(), ..*self }.evaluate(mach)
    }

    /// A Mach number at which the criterion changes its answer, between two with different answers; no proof.
    fn search(&self, mut outside: f64, mut inside: f64) -> f64 {
        for _ in 0..100 {
            let middle = f64::midpoint(outside, inside);
            if self.plain(middle) > 0.0 { outside = middle } else { inside = middle }
        }
        inside
    }

    /// The certified root near an approximation, in a bracket that is narrow beside the distances to the Mach numbers given.
    fn certify(&self, near: f64, other: f64) -> Result<Enclosure, RootError> {
        let sonic = self.sonic();
        let reach = (0.01 * (near - 1.0)).min(0.4 * (near - sonic).abs()).min(0.1 * (near - other).abs());
        root(&Self { supersonic: near > sonic, ..*self }, near - reach, near + reach)
    }
}

/// The least Mach excess that is looked at, the ratio of neighbours and their number: up to about 10¹², beyond the upper bound for γ 1.000001.
const SEARCH: (f64, f64, u32) = (1e-3, 1.05, 710);

/// The Mach numbers of the incident shock between which the reflected one bifurcates in a gas of constant heat capacity: the two roots of
/// `p_st`(M) = p5(M), each proven to exist and to be the only one near.
///
/// `None` where the search, in plain arithmetic, finds no Mach number with bifurcation: γ of about 1.8 and more.
///
/// The band often quoted for γ 7/5, 1.33 to 6.45, satisfies the criterion to about 1 % of p5 only.
///
/// # Errors
/// [`BifurcationError`] unless γ − 1 is an exact ratio of integers below 2⁵³, or where the proof of a root fails: where both roots nearly meet,
/// or one nearly lies at `M_bl` = 1.
///
/// ```
/// use endwall::gas::HeatCapacityRatio;
/// use endwall::tube::bifurcation_band;
/// let band = bifurcation_band(HeatCapacityRatio::ratio(7, 5)?)?.unwrap();
/// assert!((band.lower.middle() - 1.322662786).abs() < 1e-9);
/// assert!((band.upper.middle() - 6.498632656).abs() < 1e-9);
/// assert!(band.lower.width_in_ulp() <= 2 && band.upper.width_in_ulp() <= 2);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn bifurcation_band(heat_capacity_ratio: HeatCapacityRatio) -> Result<Option<BifurcationBand>, BifurcationError> {
    let refused = TubeInput::HeatCapacityRatio.refuse(heat_capacity_ratio.known().nominal(), Rule::Digits);
    let criterion = Criterion::new(heat_capacity_ratio).ok_or(BifurcationError::Input(refused))?;
    let (first, ratio, count) = SEARCH;
    let (mut excess, mut least, mut inside) = (first, 0.0, None);
    for _ in 0..count {
        let value = criterion.plain(1.0 + excess);
        if value < least {
            (least, inside) = (value, Some(1.0 + excess));
        }
        excess *= ratio;
    }
    let Some(inside) = inside else { return Ok(None) };
    let (lower, upper) = (criterion.search(1.0 + first, inside), criterion.search(1.0 + excess, inside));
    let certify = |near, other| criterion.certify(near, other).map_err(BifurcationError::Root);
    Ok(Some(BifurcationBand { lower: certify(lower, upper)?, upper: certify(upper, lower)? }))
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use std::println;

    fn ratio(n: u32, d: u32) -> HeatCapacityRatio {
        HeatCapacityRatio::ratio(n, d).unwrap()
    }

    /// Both forms of the stagnation pressure agree at M 1 to third order.
    #[test]
    fn the_forms_meet_at_the_speed_of_sound() {
        for (d, q) in [(2, 5), (2, 3), (1, 50)] {
            let gamma = Gamma { d: f64::from(d), q: f64::from(q) };
            for excess in [0.0, 1e-3, 1e-2] {
                let square = (1.0_f64 + excess) * (1.0 + excess);
                let gap = isentropic(gamma, square) - pitot(gamma, square);
                assert!(gap >= -1e-12 && gap < 2.0 * excess * excess * excess + 1e-12, "{excess} {gap}");
            }
        }
    }

    /// The answer changes at the bounds of the band and nowhere else: on pieces between 1.02 and 300 the sign is proven by enclosures.
    #[test]
    fn the_band_is_all_of_the_band() {
        for (n, d) in [(7, 5), (5, 3), (9, 7), (4, 3)] {
            let gamma = ratio(n, d);
            let band = bifurcation_band(gamma).unwrap().unwrap();
            println!("{n}/{d}: {} {} ulp, {} {} ulp", band.lower, band.lower.width_in_ulp(), band.upper, band.upper.width_in_ulp());
            assert!(band.lower.width_in_ulp() <= 2 && band.upper.width_in_ulp() <= 2);
            let edges = [1.02, band.lower.low() * (1.0 - 1e-6), band.lower.high() * (1.0 + 1e-6)];
            let edges = [edges[0], edges[1], edges[2], band.upper.low() * (1.0 - 1e-6), band.upper.high() * (1.0 + 1e-6), 300.0];
            for (pair, verdict) in edges.chunks_exact(2).zip([Verdict::DoesNot, Verdict::Bifurcates, Verdict::DoesNot]) {
                let mut waiting = std::vec![(pair[0], pair[1])];
                let mut pieces = 0;
                while let Some((low, high)) = waiting.pop() {
                    pieces += 1;
                    assert!(pieces < 20_000, "{n}/{d} {low} {high}");
                    let found = Bifurcation::new(gamma, Enclosure::new(low, high).unwrap()).unwrap().verdict;
                    if found == Verdict::Undecided {
                        let middle = f64::midpoint(low, high);
                        waiting.extend([(low, middle), (middle, high)]);
                    } else {
                        assert_eq!(found, verdict, "{n}/{d} between {low} and {high}");
                    }
                }
            }
        }
    }

    /// The criterion has proven opposite answers on both sides of each bound, for γ over its domain.
    #[test]
    fn bounds_hold_for_any_ratio() {
        let mut none = 0;
        for thousandths in [1001, 1010, 1050, 1090, 1200, 1300, 1400, 1500, 1550, 1600, 1667, 1700, 1750, 1800, 1900, 2000, 3000] {
            let gamma = ratio(thousandths, 1000);
            let Some(band) = bifurcation_band(gamma).unwrap_or_else(|error| panic!("{thousandths}: {error}")) else {
                assert!(thousandths > 1700, "{thousandths}");
                none += 1;
                continue;
            };
            let verdict = |mach: f64| Bifurcation::new(gamma, mach).unwrap().verdict;
            let step = |x: f64, part: f64| x + (x - 1.0) * part;
            assert_eq!(verdict(step(band.lower.low(), -1e-9)), Verdict::DoesNot, "{thousandths}");
            assert_eq!(verdict(step(band.lower.high(), 1e-9)), Verdict::Bifurcates, "{thousandths}");
            assert_eq!(verdict(step(band.upper.low(), -1e-9)), Verdict::Bifurcates, "{thousandths}");
            assert_eq!(verdict(step(band.upper.high(), 1e-9)), Verdict::DoesNot, "{thousandths}");
        }
        assert!(none >= 2);
    }

    #[test]
    fn ratios_give_what_the_mach_number_gives() {
        let gamma = ratio(7, 5);
        // M 3: U_R/a1 = 11/9, p5/p2 = 155/31.
        let direct = Bifurcation::new(gamma, 3.0).unwrap();
        let exact = |text: &str| text.parse::<crate::number::Rational>().unwrap();
        let other = Bifurcation::from_ratios(gamma, exact("11/9"), exact("5")).unwrap();
        assert!(direct.margin.overlaps(other.margin) && direct.margin.width_in_ulp() <= 2);
        assert_eq!(Bifurcation::from_ratios(gamma, 1.1, 0.9).unwrap_err().input, TubeInput::ReflectedOverIncidentPressure);
        assert_eq!(Bifurcation::new(gamma, 1.0).unwrap_err().input, TubeInput::Mach);
        let tolerance = HeatCapacityRatio::new(Enclosure::new(1.39, 1.41).unwrap()).unwrap();
        assert!(matches!(bifurcation_band(tolerance), Err(BifurcationError::Input(error)) if error.rule == Rule::Digits));
    }
}
