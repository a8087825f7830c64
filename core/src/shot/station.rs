//! Stations of a shot (sensor positions and arrival times) and their validation.

use super::fit_error::{FitError, FitField};

/// Largest number of used stations in one fit.
pub const MAX_STATIONS: usize = 16;

/// Largest magnitude accepted for any entry value, 2^200 in its SI unit.
const LARGEST: f64 = f64::from_bits(((1023 + 200) as u64) << 52);

/// One sensor of the driven section: where it is and when the shock passed it.
///
/// ```
/// use endwall::shot::Station;
/// let station = Station {
///     from_end_wall: 0.450,
///     position_uncertainty: 0.0003,
///     arrival: 1247.461e-6,
///     time_uncertainty: 0.3e-6,
///     delay: 0.0,
///     used: true,
/// };
/// assert_eq!(station.corrected_arrival(), 1247.461e-6);
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Station {
    /// Distance from the end wall, m; zero or positive (zero: a sensor in the end wall itself).
    pub from_end_wall: f64,
    /// Standard uncertainty of that distance, m, independent of the other stations; zero or positive.
    pub position_uncertainty: f64,
    /// Arrival time of the incident shock as recorded, s, on any common time axis.
    pub arrival: f64,
    /// Standard uncertainty of the arrival time, s, independent of the other stations; zero or positive.
    pub time_uncertainty: f64,
    /// Delay of this channel, s: the recorded time is late by so much, it is subtracted.
    pub delay: f64,
    /// Whether the fit uses this station. One that is not used is not read, not even to validate it.
    pub used: bool,
}

impl Station {
    /// Arrival time with the delay of the channel taken off, s: `arrival - delay`.
    #[must_use]
    pub fn corrected_arrival(&self) -> f64 {
        self.arrival - self.delay
    }
}

/// Time between two readings of a free-running 32-bit counter, s: `(ticks_b - ticks_a) / clock_hz`.
///
/// The ticks are subtracted as wrapping integers before any conversion, so a counter that ran over once in between costs nothing and no
/// digit is lost. The result is correct when `b` follows `a` by less than 2^32 ticks. `clock_hz` is the tick rate in Hz; the quotient has
/// one rounding (half an ulp). Zero or a negative rate is the caller's mistake and gives an infinite or a negative time, which [`fit`](super::fit())
/// refuses.
///
/// ```
/// use endwall::shot::seconds_between;
/// assert_eq!(seconds_between(u32::MAX - 9, 40, 50.0), 1.0);
/// ```
#[must_use]
pub fn seconds_between(ticks_a: u32, ticks_b: u32, clock_hz: f64) -> f64 {
    f64::from(ticks_b.wrapping_sub(ticks_a)) / clock_hz
}

/// Whether a number can be computed with: finite and at most 2^200.
pub(super) fn in_range(value: f64) -> bool {
    value.is_finite() && libm::fabs(value) <= LARGEST
}

/// Refuses what no fit can be made of; returns the number of used stations.
pub(super) fn validate(stations: &[Station]) -> Result<usize, FitError> {
    let mut used = 0_usize;
    for (station, s) in stations.iter().enumerate().filter(|(_, s)| s.used) {
        used = used.saturating_add(1);
        let fields = [
            (FitField::FromEndWall, s.from_end_wall, true),
            (FitField::PositionUncertainty, s.position_uncertainty, true),
            (FitField::Arrival, s.arrival, false),
            (FitField::TimeUncertainty, s.time_uncertainty, true),
            (FitField::Delay, s.delay, false),
        ];
        for (field, value, not_negative) in fields {
            if !in_range(value) {
                return Err(FitError::StationOutOfRange { station, field, value });
            }
            if not_negative && value < 0.0 {
                return Err(FitError::StationNegative { station, field, value });
            }
        }
    }
    if used < 2 {
        return Err(FitError::TooFewStations { used });
    }
    if used > MAX_STATIONS {
        return Err(FitError::TooManyStations { used });
    }
    check_order(stations)?;
    Ok(used)
}

/// Every pair of used stations must be apart, and the farther one must be passed first. All pairs (at most 120 of used stations) are
/// compared, so that a swapped pair is named as such.
fn check_order(stations: &[Station]) -> Result<(), FitError> {
    for (first, a) in stations.iter().enumerate().filter(|(_, s)| s.used) {
        let rest = stations.iter().enumerate().skip(first.saturating_add(1));
        for (second, b) in rest.filter(|(_, s)| s.used) {
            if a.from_end_wall == b.from_end_wall {
                return Err(FitError::DuplicatePosition { first, second, from_end_wall: a.from_end_wall });
            }
            let (far, near, farther, nearer) =
                if a.from_end_wall > b.from_end_wall { (a, b, first, second) } else { (b, a, second, first) };
            if far.corrected_arrival() >= near.corrected_arrival() {
                return Err(FitError::OutOfOrder { farther, nearer });
            }
        }
    }
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;

    fn station(from_end_wall: f64, arrival: f64) -> Station {
        Station { from_end_wall, position_uncertainty: 0.0, arrival, time_uncertainty: 1e-7, delay: 0.0, used: true }
    }

    #[test]
    fn ticks_wrap() {
        assert_eq!(seconds_between(10, 110, 1e6), 1e-4);
        assert_eq!(seconds_between(u32::MAX, 0, 1.0), 1.0);
        assert_eq!(seconds_between(5, 4, 1.0), f64::from(u32::MAX));
    }

    #[test]
    fn order_is_checked_by_pairs() {
        let good = [station(1.0, 0.0), station(0.5, 1e-3), station(0.0, 2e-3)];
        assert_eq!(validate(&good), Ok(3));
        let swapped = [station(1.0, 0.0), station(0.5, 2e-3), station(0.0, 1e-3)];
        assert_eq!(validate(&swapped), Err(FitError::OutOfOrder { farther: 1, nearer: 2 }));
        let listed_upwards = [station(0.0, 1e-3), station(0.5, 2e-3)];
        assert_eq!(validate(&listed_upwards), Err(FitError::OutOfOrder { farther: 1, nearer: 0 }));
        let twice = [station(1.0, 0.0), station(0.5, 1e-3), station(0.5, 1e-3)];
        assert_eq!(validate(&twice), Err(FitError::DuplicatePosition { first: 1, second: 2, from_end_wall: 0.5 }));
    }

    #[test]
    fn the_delay_decides_the_order() {
        let mut s = [station(1.0, 0.0), station(0.5, -1e-4)];
        assert_eq!(validate(&s), Err(FitError::OutOfOrder { farther: 0, nearer: 1 }));
        s[1].delay = -2e-4;
        assert_eq!(validate(&s), Ok(2));
    }

    #[test]
    fn values_are_named() {
        let mut s = [station(1.0, 0.0), station(-0.1, 1e-3)];
        assert_eq!(validate(&s), Err(FitError::StationNegative { station: 1, field: FitField::FromEndWall, value: -0.1 }));
        s[1] = station(0.1, f64::INFINITY);
        assert_eq!(validate(&s), Err(FitError::StationOutOfRange { station: 1, field: FitField::Arrival, value: f64::INFINITY }));
        s[1].used = false;
        assert_eq!(validate(&s), Err(FitError::TooFewStations { used: 1 }));
    }
}
