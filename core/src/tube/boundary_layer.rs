//! What the boundary layer behind the incident shock leaves of the test time, by Mirels' theory of the limiting separation. Empirical and in plain
//! f64: nothing here is proven, and no single number is given.

use super::input::{TubeInput, TubeInputError};
use super::test_gas::BehindShock;
use crate::number::{Ball, Semifield};

/// How well the laminar limit is known, relative: the assumed profile of the wall layer.
const LAMINAR_SPREAD: f64 = 0.27;

/// Reduced distance below which a difference of logarithms is taken by its series.
const SERIES: f64 = 0.25;

/// Halvings of the interval in which a separation is sought.
const HALVINGS: u32 = 80;

/// Σ of a power series s^first/first + s^(first+step)/(first+step) + …, for s ≤ 1/4: 30 terms leave less than 10⁻¹⁸ of the first.
fn logarithm_tail(s: f64, first: u32, step: u32) -> f64 {
    let term = |n: u32| libm::pow(s, f64::from(n)) / f64::from(n);
    (0..30).rev().fold(0.0, |sum, at| sum + term(first + at * step))
}

/// The s in [0, 1) at which an increasing function has a value; 1 beyond the last double below it.
fn inverse(value: f64, f: impl Fn(f64) -> f64) -> f64 {
    let (mut low, mut high) = (0.0, 1.0);
    for _ in 0..HALVINGS {
        let middle = f64::midpoint(low, high);
        if f(middle) < value { low = middle } else { high = middle }
    }
    high
}

/// Separation T = `l/l_m` of shock and contact surface over its limit, and its slope dT/dX, at a reduced distance X.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Separation {
    /// T, from 0 to 1.
    pub value: f64,
    /// dT/dX, from 1 to 0.
    pub slope: f64,
}

/// Laminar wall layer: X = −2[ln(1 − √T) + √T], that is dT/dX = 1 − √T, at X = `x ρ1/(ρ2 l_m)` ≥ 0.
///
/// Source: H. Mirels, Phys. Fluids 6 (1963) 1201 (from memory). To 1e-13 in T.
///
/// ```
/// use endwall::tube::laminar_separation;
/// // √T = 1/2: X = 2 ln 2 − 1.
/// let half = laminar_separation(2.0 * 2f64.ln() - 1.0);
/// assert!((half.value - 0.25).abs() < 1e-13 && (half.slope - 0.5).abs() < 1e-13);
/// ```
pub fn laminar_separation(reduced_distance: f64) -> Separation {
    let distance = |s: f64| if s < SERIES { 2.0 * logarithm_tail(s, 2, 1) } else { -2.0 * (libm::log1p(-s) + s) };
    let s = inverse(reduced_distance, distance);
    Separation { value: s * s, slope: 1.0 - s }
}

/// Turbulent wall layer: dT/dX = 1 − T^(4/5), that is X = 5[(artanh q + arctan q)/2 − q] with T = q⁵.
///
/// Source: H. Mirels, AIAA J. 2 (1964) 84 (from memory); the integral by exact algebra. To 1e-12 in T.
///
/// ```
/// use endwall::tube::turbulent_separation;
/// let near = turbulent_separation(1e-6);
/// assert!((near.value - 1e-6).abs() < 1e-10); // no layer yet: T = X
/// assert!(turbulent_separation(30.0).value > 0.999_999);
/// ```
pub fn turbulent_separation(reduced_distance: f64) -> Separation {
    let closed = |q: f64| 5.0 * (0.25 * (libm::log1p(q) - libm::log1p(-q)) + 0.5 * libm::atan(q) - q);
    let distance = |q: f64| if q < SERIES { 5.0 * logarithm_tail(q, 5, 4) } else { closed(q) };
    let q = inverse(reduced_distance, distance);
    let square = q * q;
    Separation { value: square * square * q, slope: 1.0 - square * square }
}

/// A shock in a tube, for the boundary layer behind it. SI units.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct BoundaryLayer {
    /// Inner diameter d, m.
    pub diameter: f64,
    /// Distance from the diaphragm to the end wall L1, m.
    pub driven_length: f64,
    /// Speed of the incident shock `U_S`, m/s.
    pub incident_shock: f64,
    /// Speed of the reflected shock `U_R`, m/s.
    pub reflected_shock: f64,
    /// Speed c of the wave that returns from the contact surface, m/s: a5 for a weak one.
    pub returned_wave: f64,
    /// Density ρ1 of the fill, kg/m³.
    pub fill_density: f64,
    /// p2/p1.
    pub pressure_ratio: f64,
    /// ρ2/ρ1.
    pub density_ratio: f64,
    /// Viscosity μ(T1), Pa·s.
    pub viscosity_1: f64,
    /// Viscosity μ(T2), Pa·s: the film is between T1 and T2.
    pub viscosity_2: f64,
}

/// What the boundary layer leaves of a time (s) or of a length (m): a band, since neither the state of the layer nor its theory is known better.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct LayerBand {
    /// Without a boundary layer.
    pub ideal: f64,
    /// With a laminar layer: for `l_m` less and more by 27 %.
    pub laminar: [f64; 2],
    /// With a turbulent layer: for a film at T1 and at T2.
    pub turbulent: [f64; 2],
    /// The least of those with a layer.
    pub lowest: f64,
    /// The greatest of those with a layer.
    pub highest: f64,
}

impl BoundaryLayer {
    /// Of the shock that leaves this gas behind it, in a tube of a diameter d and a length L1 (m), with the viscosities μ(T1) and μ(T2) (Pa·s); the
    /// returned wave is taken as weak, c = a5.
    ///
    /// > ρ1 = ρ2(1 − u2/`U_S`), conservation of mass
    ///
    /// ```
    /// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
    /// use endwall::shock::{Entry, Incident};
    /// use endwall::tube::{BehindShock, BoundaryLayer};
    /// let fill = Fill::new(Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.0280134)?, 10e3, 295.0)?;
    /// let shock = Incident::new(&fill, Entry::Mach, 2.0)?;
    /// let layer = BoundaryLayer::behind(&BehindShock::from(&shock), [0.05, 5.0], [17.7e-6, 25.3e-6]);
    /// // For γ 7/5 and Mach 2 p2/p1 is 9/2 and ρ2/ρ1 is 8/3.
    /// assert!((layer.pressure_ratio - 4.5).abs() < 1e-14 && (layer.density_ratio - 8.0 / 3.0).abs() < 1e-14);
    /// // Without a layer the contact surface is L1 ρ1/ρ2 behind the shock.
    /// assert!((layer.separation()?.ideal - 1.875).abs() < 1e-14);
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn behind(behind: &BehindShock, [diameter, driven_length]: [f64; 2], [viscosity_1, viscosity_2]: [f64; 2]) -> Self {
        let rest = Ball::whole(1) - behind.gas_speed / behind.shock_speed;
        Self {
            diameter,
            driven_length,
            incident_shock: behind.shock_speed.nearest(),
            reflected_shock: behind.reflected_speed.nearest(),
            returned_wave: behind.sound_speed_5.nearest(),
            fill_density: (behind.density * rest).nearest(),
            pressure_ratio: (behind.pressure / behind.gas.pressure().ball()).nearest(),
            density_ratio: (Ball::whole(1) / rest).nearest(),
            viscosity_1,
            viscosity_2,
        }
    }

    fn check(&self) -> Result<(), TubeInputError> {
        TubeInput::Diameter.positive(self.diameter)?;
        TubeInput::DrivenLength.positive(self.driven_length)?;
        TubeInput::IncidentShock.positive(self.incident_shock)?;
        TubeInput::ReflectedShock.positive(self.reflected_shock)?;
        TubeInput::ReturnedWave.positive(self.returned_wave)?;
        TubeInput::FillDensity.positive(self.fill_density)?;
        TubeInput::DensityRatio.above(self.density_ratio, 1.0)?;
        // A shock heats: p2/p1 exceeds ρ2/ρ1.
        TubeInput::PressureRatio.above(self.pressure_ratio, self.density_ratio)?;
        TubeInput::Viscosity.positive(self.viscosity_1)?;
        TubeInput::Viscosity.positive(self.viscosity_2)
    }

    /// Laminar limit of the separation, m: `l_m` = d² ρ1 `U_S`/(41.8 (p2/p1) μ(T1)).
    ///
    /// From the momentum of the layer of a wall that moves under gas at rest (B. C. Sakiadis, `AIChE` J. 7 (1961) 26, from memory): to about 27 %.
    pub fn laminar_limit(&self) -> f64 {
        self.diameter * self.diameter * self.fill_density * self.incident_shock / (41.8 * self.pressure_ratio * self.viscosity_1)
    }

    /// Turbulent limits, m, for a film at T1 and at T2: `l_m` = (8 d ρ1/(4.04 ρf))^(5/4)(`U_S`/νf)^(1/4), the film at p2 (1/7-power layer with the
    /// friction law of Blasius).
    ///
    /// The temperature of the film moves them by a factor of 2 to 6.
    pub fn turbulent_limits(&self) -> [f64; 2] {
        let at_2 = self.density_ratio * self.fill_density;
        // At T1 and p2, ρf/ρ1 = p2/p1.
        let at_1 = self.pressure_ratio * self.fill_density;
        [(at_1, self.viscosity_1), (at_2, self.viscosity_2)].map(|(density, viscosity)| {
            let width = 8.0 * self.diameter * self.fill_density / (4.04 * density);
            libm::pow(width, 1.25) * libm::pow(self.incident_shock * density / viscosity, 0.25)
        })
    }

    /// Separation of shock and contact surface with its slope, when the shock is at the end wall, for one law and its limit (m).
    fn at_end_wall(&self, limit: f64, law: impl Fn(f64) -> Separation) -> Separation {
        law(self.driven_length / self.density_ratio / limit)
    }

    /// The uniform time at the end wall, s, for a separation in parts of a limit (m).
    ///
    /// At the end wall the contact surface is l = T·`l_m` behind the shock and runs with `U_S`(1 − dl/dx); the reflected shock meets it after
    /// l/(that + `U_R`), and the returned wave comes after as much again times `U_R`/c.
    fn time(&self, limit: f64, separation: Separation) -> f64 {
        let contact_speed = self.incident_shock * (1.0 - separation.slope / self.density_ratio);
        let meeting = separation.value * limit / (contact_speed + self.reflected_shock);
        meeting * (1.0 + self.reflected_shock / self.returned_wave)
    }

    /// What follows from the separation, for every state of the layer.
    fn band(&self, result: impl Fn(f64, Separation) -> f64) -> Result<LayerBand, TubeInputError> {
        self.check()?;
        let no_layer = Separation { value: 1.0, slope: 1.0 };
        let ideal = result(self.driven_length / self.density_ratio, no_layer);
        let with = |limit: f64, law: fn(f64) -> Separation| result(limit, self.at_end_wall(limit, law));
        let limit = self.laminar_limit();
        let laminar = [1.0 - LAMINAR_SPREAD, 1.0 + LAMINAR_SPREAD].map(|part| with(limit * part, laminar_separation));
        let turbulent = self.turbulent_limits().map(|limit| with(limit, turbulent_separation));
        let all = [laminar[0], laminar[1], turbulent[0], turbulent[1]];
        let (lowest, highest) = all.into_iter().fold((f64::INFINITY, 0.0_f64), |(low, high), one| (low.min(one), high.max(one)));
        Ok(LayerBand { ideal, laminar, turbulent, lowest, highest })
    }

    /// The band of the separation of shock and contact surface as the shock meets the end wall, m: T·`l_m`, without a layer L1 ρ1/ρ2.
    ///
    /// # Errors
    /// As for [`test_time`](Self::test_time).
    pub fn separation(&self) -> Result<LayerBand, TubeInputError> {
        self.band(|limit, separation| separation.value * limit)
    }

    /// The band of the uniform time at the end wall, s. The expansion can end it earlier.
    ///
    /// # Errors
    /// [`TubeInputError`] for a value that is not positive, and for ratios that no shock has.
    ///
    /// ```
    /// use endwall::tube::BoundaryLayer;
    /// // Argon at 5 kPa, M 2.5, in a tube of 50 mm.
    /// let layer = BoundaryLayer {
    ///     diameter: 0.05,
    ///     driven_length: 5.0,
    ///     incident_shock: 800.0,
    ///     reflected_shock: 464.0,
    ///     returned_wave: 725.0,
    ///     fill_density: 0.0813,
    ///     pressure_ratio: 7.5625,
    ///     density_ratio: 2.7027,
    ///     viscosity_1: 22.5e-6,
    ///     viscosity_2: 48e-6,
    /// };
    /// let band = layer.test_time()?;
    /// assert!(0.0 < band.lowest && band.lowest < band.highest && band.highest < band.ideal);
    /// # Ok::<(), endwall::tube::TubeInputError>(())
    /// ```
    pub fn test_time(&self) -> Result<LayerBand, TubeInputError> {
        self.band(|limit, separation| self.time(limit, separation))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const LAYER: BoundaryLayer = BoundaryLayer {
        diameter: 0.05,
        driven_length: 5.0,
        incident_shock: 800.0,
        reflected_shock: 464.0,
        returned_wave: 725.0,
        fill_density: 0.0813,
        pressure_ratio: 7.5625,
        density_ratio: 2.7027,
        viscosity_1: 22.5e-6,
        viscosity_2: 48e-6,
    };

    /// Each separation against its differential equation, integrated by fourth-order steps. Both start with an infinite curvature at 0, so the
    /// integration starts at a point of the closed form.
    #[test]
    fn separations_solve_their_equations() {
        let laws = [(laminar_separation as fn(f64) -> Separation, 0.5), (turbulent_separation, 0.8)];
        for (law, exponent) in laws {
            let slope = |t: f64| 1.0 - libm::pow(t, exponent);
            for start in [1e-3, 0.05, 0.3, 2.0] {
                let (mut x, mut t) = (start, law(start).value);
                let h = start / 400.0;
                for _ in 0..4000 {
                    let k1 = slope(t);
                    let k2 = slope(t + h * k1 / 2.0);
                    let k3 = slope(t + h * k2 / 2.0);
                    let k4 = slope(t + h * k3);
                    t += h * (k1 + 2.0 * k2 + 2.0 * k3 + k4) / 6.0;
                    x += h;
                }
                let found = law(x);
                assert!((found.value - t).abs() < 1e-10 && (found.slope - slope(t)).abs() < 1e-9, "{start} {x} {t} {found:?}");
            }
        }
    }

    #[test]
    fn separations_run_from_none_to_the_limit() {
        for law in [laminar_separation as fn(f64) -> Separation, turbulent_separation] {
            assert!(law(0.0).value < 1e-40);
            assert!(law(1e4).value == 1.0 && law(1e4).slope == 0.0);
            let mut before = 0.0;
            for exponent in -120..40 {
                let x = libm::pow(1.2, f64::from(exponent));
                let now = law(x);
                assert!(now.value > before && now.value < x, "{x} {now:?}");
                // The slope is that of the values.
                let rise = (law(x * 1.0001).value - law(x * 0.9999).value) / (x * 0.0002);
                assert!((rise - now.slope).abs() < 1e-6 * (1.0 + 1e-3 / x), "{x} {rise} {now:?}");
                before = now.value;
                if now.value > 0.999 {
                    break;
                }
            }
        }
    }

    /// The series and the closed form meet where one takes over.
    #[test]
    fn the_series_is_the_closed_form() {
        let s = SERIES;
        assert!((2.0 * logarithm_tail(s, 2, 1) + 2.0 * (libm::log1p(-s) + s)).abs() < 1e-15);
        assert!((logarithm_tail(s, 5, 4) - (libm::atanh(s) / 2.0 + libm::atan(s) / 2.0 - s)).abs() < 1e-16);
    }

    #[test]
    fn a_very_wide_tube_has_the_ideal_time() {
        let wide = BoundaryLayer { diameter: 500.0, ..LAYER }.test_time().unwrap();
        // (L1/U_S)(1 − u2/U_S)U_S/(u2 + U_R)(1 + U_R/c), u2 = U_S(1 − ρ1/ρ2).
        let u2 = 800.0 * (1.0 - 1.0 / 2.7027);
        let ideal = 5.0 * (1.0 - u2 / 800.0) / (u2 + 464.0) * (1.0 + 464.0 / 725.0);
        assert!((wide.ideal / ideal - 1.0).abs() < 1e-14);
        assert!(wide.lowest > 0.99 * ideal && wide.highest < ideal, "{wide:?}");
        let narrow = BoundaryLayer { diameter: 0.01, ..LAYER }.test_time().unwrap();
        assert!(narrow.highest < 0.5 * ideal, "{narrow:?}");
    }

    /// √T = 1/2 at X = 2 ln 2 − 1: the separation is a quarter of its laminar limit, here where the limit is less by 27 %.
    #[test]
    fn the_separation_is_a_part_of_its_limit() {
        let limit = LAYER.laminar_limit();
        let driven_length = (2.0 * libm::log(2.0) - 1.0) * limit * 0.73 * LAYER.density_ratio;
        let band = BoundaryLayer { driven_length, ..LAYER }.separation().unwrap();
        assert!((band.laminar[0] / (0.25 * 0.73 * limit) - 1.0).abs() < 1e-12, "{band:?}");
        assert!((band.ideal * LAYER.density_ratio / driven_length - 1.0).abs() < 1e-14);
        assert!(band.lowest <= band.laminar[0] && band.laminar[0] < band.laminar[1] && band.highest < band.ideal);
        // The limits by hand: d² ρ1 U_S/(41.8 (p2/p1) μ1), and (8d/(4.04·7.5625))^(5/4)·(800·7.5625·0.0813/μ1)^(1/4) for a film at T1.
        assert!((limit - 0.0025 * 0.0813 * 800.0 / (41.8 * 7.5625 * 22.5e-6)).abs() < 1e-13);
        let turbulent = libm::pow(0.4 / (4.04 * 7.5625), 1.25) * libm::pow(800.0 * 7.5625 * 0.0813 / 22.5e-6, 0.25);
        assert!((LAYER.turbulent_limits()[0] / turbulent - 1.0).abs() < 1e-13);
    }

    #[test]
    fn what_no_tube_has_is_refused() {
        let refused = |layer: BoundaryLayer| layer.test_time().unwrap_err().input;
        assert_eq!(refused(BoundaryLayer { diameter: -0.05, ..LAYER }), TubeInput::Diameter);
        assert_eq!(refused(BoundaryLayer { viscosity_2: f64::NAN, ..LAYER }), TubeInput::Viscosity);
        assert_eq!(refused(BoundaryLayer { density_ratio: 0.9, ..LAYER }), TubeInput::DensityRatio);
        assert_eq!(refused(BoundaryLayer { pressure_ratio: 2.0, ..LAYER }), TubeInput::PressureRatio);
    }
}
