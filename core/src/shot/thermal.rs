//! Slopes of the outputs for a thermally perfect gas, at fixed shock speed.

use super::reduction::{EndWall, Source};
use crate::shock::{Output, ThermalInput, ThermalShock};

/// The shock of a reduction with its wall.
pub(super) struct Thermal<'r> {
    pub shock: &'r ThermalShock<'r>,
    pub wall: &'r EndWall,
}

impl Thermal<'_> {
    /// Slopes of outputs with respect to the input on which a line of the budget acts: one solution serves all of them.
    pub(super) fn slopes<const N: usize>(&self, source: Source, outputs: [Output; N]) -> [f64; N] {
        let mut slopes = self.at_wall_speed(source, outputs);
        if let EndWall::Yielding(_) = self.wall {
            // The wall's velocity moves too.
            let by_wall = self.along(ThermalInput::WallSpeed, outputs);
            let wall = self.wall_slope(source);
            for (slope, by_wall) in slopes.iter_mut().zip(by_wall) {
                *slope += by_wall * wall;
            }
        }
        slopes
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
                let step = |[slope]: [f64; 1]| slope;
                let own = if source == Source::EndWall {
                    self.shock.wall_speed().middle()
                } else {
                    -step(self.at_wall_speed(source, [Output::Step]))
                };
                -own / (impedance.value.nominal() - step(self.along(ThermalInput::WallSpeed, [Output::Step])))
            }
        }
    }

    /// Slopes at fixed velocity of a yielding wall.
    fn at_wall_speed<const N: usize>(&self, source: Source, outputs: [Output; N]) -> [f64; N] {
        let input = match source {
            Source::Fit(_) | Source::ShockSpeed => ThermalInput::ShockSpeed,
            Source::FillPressure => ThermalInput::FillPressure,
            Source::FillTemperature => ThermalInput::FillTemperature,
            Source::Mixture(change) => ThermalInput::Mixture(change),
            Source::EndWall if matches!(self.wall, EndWall::Moving(_)) => ThermalInput::WallSpeed,
            Source::EndWall | Source::HeatCapacityRatio | Source::MolarMass => return [0.0; N],
        };
        self.along(input, outputs)
    }

    fn along<const N: usize>(&self, input: ThermalInput, outputs: [Output; N]) -> [f64; N] {
        let speed = self.shock.nearest(Output::ShockSpeed);
        let flow = self.shock.fill().slopes(speed, self.shock.wall_speed().middle(), input);
        outputs.map(|output| {
            if output == Output::ShockSpeed {
                return if input == ThermalInput::ShockSpeed { 1.0 } else { 0.0 };
            }
            flow.as_ref().map_or(f64::NAN, |flow| {
                let [slope] = flow.evaluate(output).slopes();
                slope
            })
        })
    }
}
