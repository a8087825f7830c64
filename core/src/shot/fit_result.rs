//! What a fit of arrival times hands out.

use super::station::MAX_STATIONS;

/// Symmetric matrix over `(arrival at the end wall, shock speed, attenuation)`, in the products of s, m/s and 1/m.
pub type FitMatrix = [[f64; 3]; 3];

/// Doubts about a fit; they travel with the result to every place where it is shown.
///
/// ```
/// use endwall::shot::FitFlags;
/// let flags = FitFlags::NO_CHECK.with(FitFlags::LAST_STATION_FAR);
/// assert!(flags.contains(FitFlags::NO_CHECK) && !flags.contains(FitFlags::OUTLIER));
/// ```
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct FitFlags(u8);

impl FitFlags {
    /// No degree of freedom is left: nothing can be checked.
    pub const NO_CHECK: Self = Self(1);
    /// One observation has a standardised residual beyond 3, see [`Fit::outlier`].
    pub const OUTLIER: Self = Self(1 << 1);
    /// One degree of freedom and standardised residuals (then all of one size) beyond 3: the set disagrees, nobody can be named.
    pub const SET_DISAGREES: Self = Self(1 << 2);
    /// The attenuation is below zero by more than two standard uncertainties.
    pub const ATTENUATION_NEGATIVE: Self = Self(1 << 3);
    /// The attenuation is above 0.05 1/m (5 %/m) by more than two standard uncertainties.
    pub const ATTENUATION_LARGE: Self = Self(1 << 4);
    /// The used station nearest to the end wall is more than 0.3 m from it.
    pub const LAST_STATION_FAR: Self = Self(1 << 5);
    /// No used station states an uncertainty: unit weights, and no uncertainty of the result.
    pub const UNCERTAINTY_MISSING: Self = Self(1 << 6);

    /// Whether all flags of `other` are set.
    #[must_use]
    pub fn contains(self, other: Self) -> bool {
        self.0 & other.0 == other.0
    }

    /// Both sets together.
    #[must_use]
    pub fn with(self, other: Self) -> Self {
        Self(self.0 | other.0)
    }

    /// Whether no flag is set.
    #[must_use]
    pub fn is_empty(self) -> bool {
        self.0 == 0
    }

    /// `other` added when `condition` holds.
    pub(super) fn with_if(self, condition: bool, other: Self) -> Self {
        if condition { self.with(other) } else { self }
    }
}

/// One line of the uncertainty of a fit.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
#[non_exhaustive]
pub enum FitSource {
    /// Independent errors of the arrival times.
    ArrivalTimes,
    /// Independent errors of the station positions. They are the same in every shot and do not average down.
    StationPositions,
    /// The attenuation allowance.
    Allowance,
    /// The rate of the common clock.
    Clock,
    /// A common relative error of all distances (tape, thermal expansion).
    SurveyScale,
    /// A common offset of all stations against the end wall.
    SurveyOffset,
    /// Departure of the speed profile from a straight line: a model line, `|linear - quadratic|/sqrt(3)` of the shock speed alone. With few
    /// stations it is mostly the random error of the curved profile.
    Curvature,
}

/// Contribution of one source to the covariance of the results. The sources are independent: contributions add.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct FitLine {
    /// Where the uncertainty comes from.
    pub source: FitSource,
    /// Its covariance of `(arrival at the end wall, shock speed, attenuation)`.
    pub covariance: FitMatrix,
}

impl FitLine {
    /// Standard uncertainty of the shock speed from this source, m/s.
    #[must_use]
    pub fn shock_speed_uncertainty(&self) -> f64 {
        libm::sqrt(self.covariance[1][1])
    }
}

/// The fit repeated without one station.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Refit {
    /// Shock speed at the end wall, m/s.
    pub shock_speed: f64,
    /// Attenuation, 1/m.
    pub attenuation: f64,
    /// Sum of squared weighted residuals; `None` when the stations state no uncertainty.
    pub chi_squared: Option<f64>,
}

/// How one station fits.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct StationFit {
    /// Index of the station in the slice that was fitted.
    pub station: usize,
    /// Observed minus fitted arrival time, s.
    pub residual: f64,
    /// Share of this observation in its own fitted value, 0 to 1.
    pub leverage: f64,
    /// `r/(s sqrt(1 - h))`; `None` without uncertainties or with a leverage of one (then the residual is zero whatever was measured).
    pub standardised: Option<f64>,
    /// The fit without this station; `None` where too few would be left (four, or two with an allowance) or it does not settle.
    pub without: Option<Refit>,
}

impl StationFit {
    pub(super) const EMPTY: Self = Self { station: 0, residual: 0.0, leverage: 0.0, standardised: None, without: None };
}

/// How the attenuation allowance fits, where one was given.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct AllowanceFit {
    /// Allowance minus fitted attenuation, 1/m.
    pub residual: f64,
    /// Share of the allowance in the fitted attenuation's own observation, 0 to 1; one when the attenuation is held.
    pub leverage: f64,
    /// Standardised residual, as for a station.
    pub standardised: Option<f64>,
}

/// The observation with the largest standardised residual, when that is beyond 3.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum Outlier {
    /// The station with this index in the slice that was fitted.
    Station(usize),
    /// The attenuation allowance.
    Allowance,
}

/// Shock speed at the end wall, attenuation and arrival at the wall, with everything needed to judge them. Made by [`fit`](super::fit()).
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct Fit {
    /// Arrival of the shock at the end wall, s, on the time axis of the stations.
    pub arrival_at_wall: f64,
    /// Speed of the incident shock at the end wall, m/s.
    pub shock_speed: f64,
    /// Attenuation, 1/m: the speed at `y` from the wall is `shock_speed (1 + attenuation y)`. Positive for a shock that slows.
    pub attenuation: f64,
    /// Sum of squared weighted residuals, the allowance included; `None` when no station states an uncertainty.
    pub chi_squared: Option<f64>,
    /// Number of observations (the allowance is one) less the three unknowns.
    pub degrees_of_freedom: usize,
    /// The allowance, where one was given.
    pub allowance: Option<AllowanceFit>,
    /// The observation to look at first. Only the largest is named: a bad one pulls its neighbours. The fit stands until the operator decides.
    pub outlier: Option<Outlier>,
    /// Doubts.
    pub flags: FitFlags,
    pub(super) stations: [StationFit; MAX_STATIONS],
    pub(super) used: usize,
    pub(super) lines: [FitLine; 7],
}

impl Fit {
    /// The used stations, in the order in which they were given.
    #[must_use]
    pub fn stations(&self) -> &[StationFit] {
        self.stations.get(..self.used).unwrap_or(&self.stations)
    }

    /// Contributions to the covariance, one line for each source; zero where a source was not stated. Without uncertainties of the
    /// stations the first two are zero for want of knowledge, and the flag says so.
    #[must_use]
    pub fn lines(&self) -> &[FitLine] {
        &self.lines
    }

    /// Covariance of `(arrival at the end wall, shock speed, attenuation)` from all lines together; `None` when no station states an
    /// uncertainty.
    #[must_use]
    pub fn covariance(&self) -> Option<FitMatrix> {
        self.sum_of(&self.lines)
    }

    /// Covariance from the final linearised problem alone, `(J^T W J)^-1`: random errors and the allowance, without the common errors and
    /// the model line; `None` when no station states an uncertainty.
    #[must_use]
    pub fn observation_covariance(&self) -> Option<FitMatrix> {
        let [times, positions, allowance, ..] = self.lines;
        self.sum_of(&[times, positions, allowance])
    }

    /// Sum of these lines, or `None` when the random errors are not known.
    fn sum_of(&self, lines: &[FitLine]) -> Option<FitMatrix> {
        if self.flags.contains(FitFlags::UNCERTAINTY_MISSING) {
            return None;
        }
        let mut sum = [[0.0; 3]; 3];
        for line in lines {
            for (row, add) in sum.iter_mut().zip(&line.covariance) {
                for (cell, value) in row.iter_mut().zip(add) {
                    *cell += value;
                }
            }
        }
        Some(sum)
    }

    /// Combined standard uncertainty of the shock speed, m/s, from all lines.
    #[must_use]
    pub fn shock_speed_uncertainty(&self) -> Option<f64> {
        self.covariance().map(|c| libm::sqrt(c[1][1]))
    }

    /// Combined standard uncertainty of the attenuation, 1/m, from all lines.
    #[must_use]
    pub fn attenuation_uncertainty(&self) -> Option<f64> {
        self.covariance().map(|c| libm::sqrt(c[2][2]))
    }

    /// Correlation of shock speed and attenuation from all lines; `None` also when one of them has no uncertainty.
    #[must_use]
    pub fn correlation(&self) -> Option<f64> {
        let c = self.covariance()?;
        let product = libm::sqrt(c[1][1]) * libm::sqrt(c[2][2]);
        (product > 0.0).then(|| (c[1][2] / product).clamp(-1.0, 1.0))
    }
}
