//! What a fit of arrival times refuses, and why.

use super::station::MAX_STATIONS;
use core::fmt;

/// A number that the fit reads, to name it in an error.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum FitField {
    /// [`Station::from_end_wall`](super::Station::from_end_wall), m.
    FromEndWall,
    /// [`Station::position_uncertainty`](super::Station::position_uncertainty), m.
    PositionUncertainty,
    /// [`Station::arrival`](super::Station::arrival), s.
    Arrival,
    /// [`Station::time_uncertainty`](super::Station::time_uncertainty), s.
    TimeUncertainty,
    /// [`Station::delay`](super::Station::delay), s.
    Delay,
    /// Value of the attenuation allowance, 1/m.
    AllowanceValue,
    /// Standard uncertainty of the attenuation allowance, 1/m.
    AllowanceUncertainty,
    /// Relative standard uncertainty of the common clock.
    ClockUncertainty,
    /// Relative standard uncertainty common to all distances.
    SurveyScaleUncertainty,
    /// Standard uncertainty of the common offset of the distances, m.
    SurveyOffsetUncertainty,
}

impl FitField {
    /// The name of the field, spelt out.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            Self::FromEndWall => "distance from the end wall (m)",
            Self::PositionUncertainty => "uncertainty of the distance (m)",
            Self::Arrival => "arrival time (s)",
            Self::TimeUncertainty => "uncertainty of the arrival time (s)",
            Self::Delay => "channel delay (s)",
            Self::AllowanceValue => "attenuation allowance (1/m)",
            Self::AllowanceUncertainty => "uncertainty of the attenuation allowance (1/m)",
            Self::ClockUncertainty => "relative uncertainty of the clock",
            Self::SurveyScaleUncertainty => "relative uncertainty common to all distances",
            Self::SurveyOffsetUncertainty => "uncertainty of the common offset of the distances (m)",
        }
    }
}

/// Why arrival times could not be turned into a shock speed. Stations are named by their index in the slice.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub enum FitError {
    /// Fewer than two used stations: no speed can be formed.
    TooFewStations {
        /// Number of used stations.
        used: usize,
    },
    /// More than [`MAX_STATIONS`] used stations.
    TooManyStations {
        /// Number of used stations.
        used: usize,
    },
    /// A number of a station is not finite or beyond 2^200.
    StationOutOfRange {
        /// Index of the station.
        station: usize,
        /// The field.
        field: FitField,
        /// Its value.
        value: f64,
    },
    /// A distance or an uncertainty of a station is negative. A negative distance is a station behind the end wall.
    StationNegative {
        /// Index of the station.
        station: usize,
        /// The field.
        field: FitField,
        /// Its value.
        value: f64,
    },
    /// A setting is not finite, beyond 2^200, or a negative uncertainty.
    Setting {
        /// The field.
        field: FitField,
        /// Its value.
        value: f64,
    },
    /// Two used stations have the same distance from the end wall.
    DuplicatePosition {
        /// Index of the first station.
        first: usize,
        /// Index of the second station.
        second: usize,
        /// The distance that they share, m.
        from_end_wall: f64,
    },
    /// The shock would have passed the station nearer to the end wall first, or both at once: swapped channels, distances or times.
    OutOfOrder {
        /// Index of the station farther from the end wall.
        farther: usize,
        /// Index of the station nearer to the end wall.
        nearer: usize,
    },
    /// Some used stations state an uncertainty, this one states none: its weight would be infinite.
    UncertaintyMissing {
        /// Index of the station.
        station: usize,
    },
    /// Fewer than four used stations and no attenuation allowance: the attenuation cannot be told from the errors of the times.
    AllowanceNeeded {
        /// Number of used stations.
        used: usize,
        /// Speed of the straight line through the arrival times, m/s: wrong by the bias below times the attenuation.
        straight_line_speed: f64,
        /// By how much that speed is too high at the end wall for each 0.01 1/m (1 %/m) of attenuation, m/s.
        bias_per_percent_per_metre: f64,
    },
    /// No speed profile linear in distance fits: the iteration did not settle within its bounded number of steps.
    NoSolution,
}

impl fmt::Display for FitError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match *self {
            Self::TooFewStations { used } => {
                write!(f, "{used} used station(s): at least 2 are needed")
            }
            Self::TooManyStations { used } => {
                write!(f, "{used} used stations: at most {MAX_STATIONS} can be fitted")
            }
            Self::StationOutOfRange { station, field, value } => {
                write!(f, "station {station}: {} is {value}, a finite number is needed", field.name())
            }
            Self::StationNegative { station, field: FitField::FromEndWall, value } => {
                write!(f, "station {station} is at {value} m, behind the end wall: distances count from the end wall")
            }
            Self::StationNegative { station, field, value } => {
                write!(f, "station {station}: {} is {value}, zero or more is needed", field.name())
            }
            Self::Setting { field, value } => {
                write!(f, "{} is {value}: a finite number is needed, an uncertainty zero or more", field.name())
            }
            Self::DuplicatePosition { first, second, from_end_wall } => {
                write!(f, "stations {first} and {second} are both at {from_end_wall} m from the end wall: leave one out")
            }
            Self::OutOfOrder { farther, nearer } => {
                write!(f, "station {farther} is farther from the end wall than station {nearer} but its arrival is not earlier: swapped?")
            }
            Self::UncertaintyMissing { station } => {
                write!(f, "station {station} has no uncertainty while others have: give all of them one, or none")
            }
            Self::AllowanceNeeded { used, straight_line_speed, bias_per_percent_per_metre } => write!(
                f,
                "{used} used stations cannot show the attenuation: give an allowance. The straight line prints {straight_line_speed} m/s, \
                 too high by {bias_per_percent_per_metre} m/s for each %/m of attenuation"
            ),
            Self::NoSolution => {
                write!(f, "no speed profile linear in distance fits these arrival times: check stations and units")
            }
        }
    }
}

impl core::error::Error for FitError {}
