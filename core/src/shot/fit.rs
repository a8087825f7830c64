//! Arrival times to the speed of the incident shock at the end wall.
//!
//! The times are fitted, not interval speeds: neighbouring interval speeds share a time, their errors are anti-correlated, and a line
//! through them prints a wrong standard error.

use super::arrival::{Prior, Solution, dot_self};
use super::fit_error::{FitError, FitField};
use super::fit_problem::{Problem, STATIONS_WITHOUT_ALLOWANCE};
use super::fit_result::{AllowanceFit, Fit, FitFlags, Outlier, Refit, StationFit};
use super::station::{MAX_STATIONS, Station, in_range, validate};

/// A standardised residual beyond this is worth a look (common practice, no source).
const OUTLYING: f64 = 3.0;
/// Attenuation above which a shot is doubtful, 1/m (common practice, no source).
const LARGE_ATTENUATION: f64 = 0.05;
/// Distance of the last station above which the speed at the wall is an extrapolation, m (common practice, no source).
const FAR_STATION: f64 = 0.3;
/// A leverage closer to one than this is one: no residual is left to judge.
const NO_RESIDUAL_LEFT: f64 = 1e-9;

/// A stated attenuation.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Allowance {
    /// Attenuation, 1/m (0.012 for 1.2 %/m).
    pub value: f64,
    /// Its standard uncertainty, 1/m. Zero: the attenuation is held at the value.
    pub uncertainty: f64,
}

/// What a fit needs to know beside the stations. The default: no allowance, no common errors, curvature line wanted.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct FitSettings {
    /// Attenuation allowance: one more observation of the attenuation. Needed with fewer than four used stations.
    pub attenuation: Option<Allowance>,
    /// Relative standard uncertainty of the rate of the common clock.
    pub clock_uncertainty: f64,
    /// Relative standard uncertainty common to all distances: the tape's scale, or thermal expansion since the survey.
    pub survey_scale_uncertainty: f64,
    /// Standard uncertainty of a common offset of all stations against the end wall, m.
    pub survey_offset_uncertainty: f64,
    /// Whether the curvature of the speed profile is a line of the uncertainty (from five used stations on).
    pub curvature: bool,
}

impl Default for FitSettings {
    fn default() -> Self {
        Self { attenuation: None, clock_uncertainty: 0.0, survey_scale_uncertainty: 0.0, survey_offset_uncertainty: 0.0, curvature: true }
    }
}

impl FitSettings {
    fn validate(&self) -> Result<(), FitError> {
        let allowance = self.attenuation.unwrap_or(Allowance { value: 0.0, uncertainty: 0.0 });
        let fields = [
            (FitField::AllowanceValue, allowance.value, false),
            (FitField::AllowanceUncertainty, allowance.uncertainty, true),
            (FitField::ClockUncertainty, self.clock_uncertainty, true),
            (FitField::SurveyScaleUncertainty, self.survey_scale_uncertainty, true),
            (FitField::SurveyOffsetUncertainty, self.survey_offset_uncertainty, true),
        ];
        for (field, value, not_negative) in fields {
            if !in_range(value) || (not_negative && value < 0.0) {
                return Err(FitError::Setting { field, value });
            }
        }
        Ok(())
    }
}

/// Fits a speed profile linear in distance, `U(y) = U_S (1 + alpha y)`, to the arrival times of 2 to 16 used stations:
/// `t(y) = t_w - log1p(alpha y)/(alpha U_S)`, `y` from the end wall, continuous through `alpha = 0`.
///
/// Weighted least squares with weights `1/s_i^2`, `s_i^2 = s_t^2 + (s_y/U(y_i))^2`, `U` from the starting quadratic; Gauss-Newton with
/// orthogonal factors in at most 40 steps. An allowance is one more observation of `alpha` and moves the result. When no station states an
/// uncertainty, weights are one, no uncertainty is handed out, and an allowance has nothing to be weighed against: `alpha` is then held at
/// its value, as it is when its uncertainty is zero.
///
/// Lines of the uncertainty: see [`FitSource`](super::FitSource). A clock line takes the recorded arrival nearest to the end wall as the zero of time. The
/// curvature line is the change when the profile gets a term in `y^2`, to first order in it, over `sqrt(3)`; from five used stations on.
///
/// Exact times give `U_S` within 1e-9 (relative) and `alpha` within 1e-8 1/m, for `alpha` from -0.02 to 0.1 1/m, `U_S` from 300 to 5000 m/s,
/// 4 to 16 stations over metres. SI units throughout.
///
/// # Errors
/// [`FitError`]: numbers out of range, stations that coincide or are passed in the wrong order, too few or too many, some without an
/// uncertainty, an allowance that is needed, or no solution.
///
/// ```
/// use endwall::shot::{FitSettings, Station, fit};
/// let station = |from_end_wall, microseconds: f64| Station {
///     from_end_wall,
///     position_uncertainty: 0.0003,
///     arrival: 1e-6 * microseconds,
///     time_uncertainty: 0.3e-6,
///     delay: 0.0,
///     used: true,
/// };
/// let stations =
///     [station(1.65, 0.0), station(1.25, 413.852), station(0.85, 829.667), station(0.45, 1247.461), station(0.05, 1667.255)];
/// let fit = fit(&stations, &FitSettings::default())?;
/// assert!((fit.shock_speed - 950.0).abs() < 1.0);
/// assert_eq!(fit.degrees_of_freedom, 2);
/// # Ok::<(), endwall::shot::FitError>(())
/// ```
pub fn fit(stations: &[Station], settings: &FitSettings) -> Result<Fit, FitError> {
    settings.validate()?;
    let used = validate(stations)?;
    let problem = Problem::new(stations, used, settings)?;
    let start = problem.observations.start().ok_or(FitError::NoSolution)?;
    let solution = problem.observations.solve(start).ok_or(FitError::NoSolution)?;
    problem.report(&solution, settings)
}

impl Problem {
    /// The fit without the station of this row.
    fn without(&self, row: usize, solution: &Solution) -> Option<Refit> {
        let needed = if self.observations.prior == Prior::None { STATIONS_WITHOUT_ALLOWANCE } else { 2 };
        if self.used <= needed {
            return None;
        }
        let mut observations = self.observations;
        *observations.weight.get_mut(row)? = 0.0;
        let refit = observations.solve(solution.at)?;
        Some(Refit {
            shock_speed: self.length / refit.at.q,
            attenuation: refit.at.a / self.length,
            chi_squared: self.weighted.then(|| dot_self(&refit.residual)),
        })
    }

    /// Puts everything together.
    fn report(&self, solution: &Solution, settings: &FitSettings) -> Result<Fit, FitError> {
        let leverages = solution.factor.leverages();
        let standardise = |residual: f64, leverage: f64| {
            let left = 1.0 - leverage;
            (self.weighted && left > NO_RESIDUAL_LEFT).then(|| residual / libm::sqrt(left))
        };
        let mut list = [StationFit::EMPTY; MAX_STATIONS];
        let rows = solution.residual.iter().zip(&leverages).zip(&self.observations.weight).zip(&self.index);
        for (row, (place, (((residual, leverage), weight), station))) in list.iter_mut().zip(rows).enumerate().take(self.used) {
            *place = StationFit {
                station: *station,
                residual: residual / weight,
                leverage: *leverage,
                standardised: standardise(*residual, *leverage),
                without: self.without(row, solution),
            };
        }
        let [.., allowance_residual] = solution.residual;
        let [.., allowance_leverage] = leverages;
        let allowance = match self.observations.prior {
            Prior::None => None,
            Prior::Observed { uncertainty, .. } => Some(AllowanceFit {
                residual: allowance_residual * uncertainty / self.length,
                leverage: allowance_leverage,
                standardised: standardise(allowance_residual, allowance_leverage),
            }),
            Prior::Held { .. } => Some(AllowanceFit { residual: 0.0, leverage: 1.0, standardised: None }),
        };
        let observations = self.used.saturating_add(usize::from(allowance.is_some()));
        let mut fit = Fit {
            arrival_at_wall: self.reference + solution.at.t_w,
            shock_speed: self.length / solution.at.q,
            attenuation: solution.at.a / self.length,
            chi_squared: self.weighted.then(|| dot_self(&solution.residual)),
            degrees_of_freedom: observations.saturating_sub(3),
            allowance,
            outlier: None,
            flags: FitFlags::default().with_if(!self.weighted, FitFlags::UNCERTAINTY_MISSING),
            stations: list,
            used: self.used,
            lines: self.lines(solution, settings),
        };
        self.judge(&mut fit);
        let results = [fit.arrival_at_wall, fit.shock_speed, fit.attenuation, fit.chi_squared.unwrap_or(0.0)];
        let uncertain = fit.lines.iter().flat_map(|line| line.covariance.iter().flatten());
        if results.iter().chain(uncertain).all(|x| x.is_finite()) { Ok(fit) } else { Err(FitError::NoSolution) }
    }

    /// Sets flags and names the outlier.
    fn judge(&self, fit: &mut Fit) {
        let mut largest = (OUTLYING, None);
        let stations = fit.stations().iter().map(|s| (Outlier::Station(s.station), s.standardised));
        let allowance = fit.allowance.iter().map(|a| (Outlier::Allowance, a.standardised));
        for (who, standardised) in stations.chain(allowance) {
            let size = libm::fabs(standardised.unwrap_or(0.0));
            if size > largest.0 {
                largest = (size, Some(who));
            }
        }
        let disagrees = largest.1.is_some();
        if fit.degrees_of_freedom > 1 {
            fit.outlier = largest.1;
        }
        // Two standard uncertainties; where none is known the value alone decides.
        let two = 2.0 * fit.attenuation_uncertainty().unwrap_or(0.0);
        fit.flags = fit
            .flags
            .with_if(fit.degrees_of_freedom == 0, FitFlags::NO_CHECK)
            .with_if(fit.degrees_of_freedom == 1 && disagrees, FitFlags::SET_DISAGREES)
            .with_if(fit.outlier.is_some(), FitFlags::OUTLIER)
            .with_if(fit.attenuation + two < 0.0, FitFlags::ATTENUATION_NEGATIVE)
            .with_if(fit.attenuation - two > LARGE_ATTENUATION, FitFlags::ATTENUATION_LARGE)
            .with_if(self.nearest > FAR_STATION, FitFlags::LAST_STATION_FAR);
    }
}

#[cfg(test)]
#[path = "fit_tests.rs"]
mod tests;
