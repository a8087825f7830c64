//! Slopes of the outputs for a thermally perfect gas, at fixed shock speed.

use super::reduction::{EndWall, Source};
use crate::shock::{Output, ThermalInput, ThermalShock};

/// The shock of a reduction with its wall.
pub(super) struct Thermal<'r> {
    pub shock: &'r ThermalShock<'r>,
    pub wall: &'r EndWall,
}

impl Thermal<'_> {
    /// Slope of an output with respect to the input on which a line of the budget acts.
    pub(super) fn slope(&self, source: Source, output: Output) -> f64 {
        let EndWall::Yielding(_) = self.wall else { return self.at_wall_speed(source, output) };
        // The wall's velocity moves too.
        self.at_wall_speed(source, output) + self.along(ThermalInput::WallSpeed, output) * self.wall_slope(source)
    }

    /// Slope of the wall's velocity. For a yielding wall by the implicit function rule: with f = Z·V − (p5(V) − p1) = 0 it is that of −f at fixed V
    /// over ∂f/∂V.
    pub(super) fn wall_slope(&self, source: Source) -> f64 {
        match self.wall {
            EndWall::Rigid => 0.0,
            EndWall::Moving(_) => {
                if source == Source::EndWall {
                    1.0
                } else {
                    0.0
                }
            }
            EndWall::Yielding(impedance) => {
                let own =
                    if source == Source::EndWall { self.shock.wall_speed().middle() } else { -self.at_wall_speed(source, Output::Step) };
                -own / (impedance.value.nominal() - self.along(ThermalInput::WallSpeed, Output::Step))
            }
        }
    }

    /// Slope at fixed velocity of a yielding wall.
    fn at_wall_speed(&self, source: Source, output: Output) -> f64 {
        let input = match source {
            Source::Fit(_) | Source::ShockSpeed => ThermalInput::ShockSpeed,
            Source::FillPressure => ThermalInput::FillPressure,
            Source::FillTemperature => ThermalInput::FillTemperature,
            Source::Mixture(change) => ThermalInput::Mixture(change),
            Source::EndWall if matches!(self.wall, EndWall::Moving(_)) => ThermalInput::WallSpeed,
            Source::EndWall | Source::HeatCapacityRatio | Source::MolarMass => return 0.0,
        };
        self.along(input, output)
    }

    fn along(&self, input: ThermalInput, output: Output) -> f64 {
        if output == Output::ShockSpeed {
            return if input == ThermalInput::ShockSpeed { 1.0 } else { 0.0 };
        }
        let speed = self.shock.nearest(Output::ShockSpeed);
        self.shock.fill().slopes(speed, self.shock.wall_speed().middle(), input).map_or(f64::NAN, |flow| {
            let [slope] = flow.evaluate(output).slopes();
            slope
        })
    }
}
