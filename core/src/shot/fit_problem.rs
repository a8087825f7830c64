//! The used stations of a shot, gathered, scaled and weighted.

use super::arrival::{Observations, Prior};
use super::fit::{Allowance, FitSettings};
use super::fit_error::FitError;
use super::least_squares::{Column, ROWS};
use super::station::{MAX_STATIONS, Station};

/// Fewest stations that show an attenuation by themselves: one more than the three unknowns.
pub(super) const STATIONS_WITHOUT_ALLOWANCE: usize = 4;

/// The used stations, gathered and scaled.
pub(super) struct Problem {
    pub(super) observations: Observations,
    /// Index of each used station in the caller's slice.
    pub(super) index: [usize; MAX_STATIONS],
    pub(super) used: usize,
    /// Distance of the farthest used station, m: the unit of length inside.
    pub(super) length: f64,
    /// Distance of the nearest used station, m.
    pub(super) nearest: f64,
    /// Arrival at the nearest used station, s: the zero of time inside.
    pub(super) reference: f64,
    /// Share of the arrival times, and of the positions, in the variance of each row.
    pub(super) time_share: Column,
    pub(super) position_share: Column,
    pub(super) weighted: bool,
}

impl Problem {
    pub(super) fn new(stations: &[Station], used: usize, settings: &FitSettings) -> Result<Self, FitError> {
        let blank = Station { from_end_wall: 0.0, position_uncertainty: 0.0, arrival: 0.0, time_uncertainty: 0.0, delay: 0.0, used: false };
        let mut list = [blank; MAX_STATIONS];
        let mut index = [0; MAX_STATIONS];
        let given = stations.iter().enumerate().filter(|(_, s)| s.used);
        for ((place, number), (i, station)) in list.iter_mut().zip(&mut index).zip(given) {
            *place = *station;
            *number = i;
        }
        let gathered = list.get(..used).unwrap_or(&list);
        let mut nearest = blank;
        let mut length = 0.0;
        for (i, station) in gathered.iter().enumerate() {
            if i == 0 || station.from_end_wall < nearest.from_end_wall {
                nearest = *station;
            }
            length = station.from_end_wall.max(length);
        }
        let reference = nearest.corrected_arrival();
        let weighted = gathered.iter().any(|s| s.time_uncertainty > 0.0 || s.position_uncertainty > 0.0);
        let prior = match settings.attenuation {
            None => Prior::None,
            Some(Allowance { value, uncertainty }) => {
                let (value, uncertainty) = (value * length, uncertainty * length);
                if weighted && uncertainty > 0.0 { Prior::Observed { value, uncertainty } } else { Prior::Held { value, uncertainty } }
            }
        };
        if matches!(prior, Prior::Held { value, .. } if value <= -1.0) {
            // The shock would stand still before the farthest station.
            return Err(FitError::NoSolution);
        }
        let mut problem = Self {
            observations: Observations::new(gathered, length, reference, prior),
            index,
            used,
            length,
            nearest: nearest.from_end_wall,
            reference,
            time_share: [0.0; ROWS],
            position_share: [0.0; ROWS],
            weighted,
        };
        if used < STATIONS_WITHOUT_ALLOWANCE && settings.attenuation.is_none() {
            return Err(problem.allowance_needed());
        }
        if weighted {
            problem.weigh(gathered)?;
        }
        Ok(problem)
    }

    /// Sets the weights from the stated uncertainties and the starting profile.
    fn weigh(&mut self, gathered: &[Station]) -> Result<(), FitError> {
        let start = self.observations.start().ok_or(FitError::NoSolution)?;
        let shares = self.time_share.iter_mut().zip(&mut self.position_share).zip(&self.index);
        let rows = self.observations.eta.iter().zip(&mut self.observations.weight).zip(shares);
        for (station, ((eta, weight), ((time_share, position_share), index))) in gathered.iter().zip(rows) {
            // Where the starting profile stands still it cannot turn a distance into a time: take its speed at the wall.
            let relative = if start.a * eta > -0.9 { 1.0 + start.a * eta } else { 1.0 };
            let speed = self.length / start.q * relative;
            let from_position = station.position_uncertainty / speed;
            let (time, position) = (station.time_uncertainty * station.time_uncertainty, from_position * from_position);
            let variance = time + position;
            if variance == 0.0 {
                return Err(FitError::UncertaintyMissing { station: *index });
            }
            *weight = 1.0 / libm::sqrt(variance);
            *time_share = time / variance;
            *position_share = position / variance;
        }
        Ok(())
    }

    /// The refusal with what a straight line would print: `U_line = U_S (1 + alpha S/2)` for small `alpha`.
    fn allowance_needed(&self) -> FitError {
        match self.observations.straight_line() {
            Some((_, slope, regression)) if slope > 0.0 => {
                let straight_line_speed = self.length / slope;
                FitError::AllowanceNeeded {
                    used: self.used,
                    straight_line_speed,
                    bias_per_percent_per_metre: straight_line_speed * 0.01 * self.length * regression / 2.0,
                }
            }
            _ => FitError::NoSolution,
        }
    }
}
