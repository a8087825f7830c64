//! Lines of the uncertainty of a fit.

use super::arrival::{Prior, Solution};
use super::fit::FitSettings;
use super::fit_problem::Problem;
use super::fit_result::{FitLine, FitMatrix, FitSource};
use super::least_squares::{ALLOWANCE_ROW, Column, Factor, ROWS};

/// Fewest stations for the curvature line: four unknowns and one station to spare. With four the curved profile would run through every
/// arrival, and the line would show nothing but their errors.
const STATIONS_FOR_CURVATURE: usize = 5;

impl Problem {
    /// Steps of the unknowns inside, `(t_w, q, a)`, in the units of the results, `(t_w, U_S, alpha)`: `U_S = Y/q`, `alpha = a/Y`.
    fn scales(&self, solution: &Solution) -> [f64; 3] {
        let q = solution.at.q;
        [1.0, -self.length / (q * q), 1.0 / self.length]
    }

    /// Covariance when the rows have independent errors of these variances, in units of their stated ones.
    fn independent(&self, solution: &Solution, variances: &Column) -> FitMatrix {
        let mut matrix = solution.factor.covariance(variances);
        let scales = self.scales(solution);
        for (row, a) in matrix.iter_mut().zip(scales) {
            for (cell, b) in row.iter_mut().zip(scales) {
                *cell *= a * b;
            }
        }
        matrix
    }

    /// Covariance of one common error that moves the unknowns by this much.
    fn common(&self, solution: &Solution, shift: [f64; 3]) -> FitMatrix {
        let mut scaled = shift;
        for (cell, scale) in scaled.iter_mut().zip(self.scales(solution)) {
            *cell *= scale;
        }
        scaled.map(|a| scaled.map(|b| a * b))
    }

    /// Lines of the uncertainty, in the order of [`FitSource`].
    pub(super) fn lines(&self, solution: &Solution, settings: &FitSettings) -> [FitLine; 7] {
        let observations = &self.observations;
        let at = solution.at;
        let response = |column: &Column| self.common(solution, solution.factor.solve(column));
        let allowance = match observations.prior {
            Prior::None => [[0.0; 3]; 3],
            Prior::Observed { .. } => {
                let mut column = [0.0; ROWS];
                column[ALLOWANCE_ROW] = 1.0;
                response(&column)
            }
            Prior::Held { uncertainty, .. } => {
                let mut column = observations.slope_in_a(at).map(|slope| -slope * uncertainty);
                column[ALLOWANCE_ROW] = uncertainty;
                response(&column)
            }
        };
        // A distance that is too long by d makes the arrival there look late by d/U(y).
        let per_metre = |eta: f64| at.q / (self.length * (1.0 + at.a * eta));
        let clock = observations.column(|_, time| settings.clock_uncertainty * time);
        let scale = observations.column(|eta, _| settings.survey_scale_uncertainty * eta * self.length * per_metre(eta));
        let offset = observations.column(|eta, _| settings.survey_offset_uncertainty * per_metre(eta));
        let curvature = if settings.curvature { self.curvature(solution) } else { None };
        let line = |source, covariance| FitLine { source, covariance };
        [
            line(FitSource::ArrivalTimes, self.independent(solution, &self.time_share)),
            line(FitSource::StationPositions, self.independent(solution, &self.position_share)),
            line(FitSource::Allowance, allowance),
            line(FitSource::Clock, response(&clock)),
            line(FitSource::SurveyScale, response(&scale)),
            line(FitSource::SurveyOffset, response(&offset)),
            line(FitSource::Curvature, curvature.unwrap_or([[0.0; 3]; 3])),
        ]
    }

    /// The model line, `|U_S(linear) - U_S(quadratic)|/sqrt(3)`: one linear step from the solution with the curvature as a fourth unknown. It
    /// speaks of the shock speed only.
    fn curvature(&self, solution: &Solution) -> Option<FitMatrix> {
        if self.used < STATIONS_FOR_CURVATURE {
            return None;
        }
        let [first, second, third] = solution.columns;
        let fourth = self.observations.slope_in_curvature(solution.at);
        let factor = Factor::new(&[first, second, third, fourth])?;
        let [_, step, _, _] = factor.solve(&solution.residual);
        Some(self.common(solution, [0.0, step / libm::sqrt(3.0), 0.0]))
    }
}
