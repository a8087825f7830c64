//! The gas on one side of the contact surface: how a wave into it changes its speed, and what the wave leaves behind.

use super::thermal_side::ThermalSide;
use crate::gas::Gamma;
use crate::number::{Ball, Dual, Elementary, Positive, Semifield};
use crate::shock::Jump;

/// A gas into which a wave runs.
#[derive(Clone, Copy, Debug)]
pub(super) enum ContactSide<'a> {
    /// Of constant heat capacity.
    Constant {
        gamma: Gamma<Ball>,
        /// m/s.
        sound_speed: Ball,
    },
    /// Thermally perfect.
    Thermal(ThermalSide<'a>),
}

/// √(2/(γ[2γ + (γ + 1)y])) with y the excess of the pressure ratio: the speed of the gas behind a shock over a·y.
fn stopping<S: Elementary>(gamma: Gamma<S>, excess: S) -> S {
    let sum = gamma.ratio().doubled() + gamma.plus_one() * excess;
    (gamma.q.squared().doubled() / (gamma.ratio() * sum)).sqrt()
}

/// The change of the gas speed across a shock, a·y·√(2/(γ[2γ + (γ + 1)y])).
pub(super) fn shock_speed<S: Elementary>(gamma: Gamma<S>, sound_speed: S, excess: S) -> S {
    sound_speed * excess * stopping(gamma, excess)
}

/// β − 1 behind an expansion, β the ratio of the sound speeds.
fn expanded_excess<S: Elementary>(gamma: Gamma<S>, excess: S) -> S {
    let exponent = excess * excess.log1p_ratio() * gamma.d / gamma.ratio().doubled();
    exponent * exponent.expm1_ratio()
}

/// The change of the gas speed across an expansion, (2a/(γ − 1))((1 + y)^((γ−1)/(2γ)) − 1): negative.
pub(super) fn expansion_speed<S: Elementary>(gamma: Gamma<S>, sound_speed: S, excess: S) -> S {
    sound_speed * expanded_excess(gamma, excess) * gamma.q.doubled() / gamma.d
}

/// M² − 1 of a shock with this excess of the pressure ratio.
fn mach_squared_excess(gamma: Gamma<Ball>, excess: Ball) -> Ball {
    excess * gamma.plus_one() / gamma.ratio().doubled()
}

impl ContactSide<'_> {
    /// a, m/s.
    pub fn sound_speed(&self) -> Ball {
        match self {
            Self::Constant { sound_speed, .. } => *sound_speed,
            Self::Thermal(side) => side.sound_speed(),
        }
    }

    /// γ, at its temperature.
    pub fn gamma(&self) -> Gamma<Ball> {
        match self {
            Self::Constant { gamma, .. } => *gamma,
            Self::Thermal(side) => side.gamma(),
        }
    }

    /// The change of the gas speed across a wave that changes the pressure by the factor 1 + y, m/s; unknown where that is not proven.
    pub fn speed(&self, excess: Dual<Ball, 1>, is_shock: bool) -> Dual<Ball, 1> {
        match self {
            Self::Constant { gamma, sound_speed } => {
                let gamma = Gamma { d: Dual::constant(gamma.d), q: Dual::constant(gamma.q) };
                let formula = if is_shock { shock_speed } else { expansion_speed };
                formula(gamma, Dual::constant(*sound_speed), excess)
            }
            Self::Thermal(side) => side.speed(excess, is_shock),
        }
    }

    /// The speed of the shock that changes the pressure by the factor 1 + y, relative to the gas ahead, m/s, and the gas behind it.
    pub fn behind_shock(&self, excess: Ball) -> Option<(Ball, Self)> {
        match self {
            Self::Constant { gamma, sound_speed } => {
                let square = mach_squared_excess(*gamma, excess);
                let behind = *sound_speed * Jump::new(*gamma, square).temperature_ratio().sqrt();
                let speed = *sound_speed * (Ball::whole(1) + square).sqrt();
                Some((speed, Self::Constant { gamma: *gamma, sound_speed: behind }))
            }
            Self::Thermal(side) => side.behind_shock(excess).map(|(speed, behind)| (speed, Self::Thermal(behind))),
        }
    }

    /// The ratio of pressures across the shock from a wall that stops the gas, which moves toward it with this speed (m/s).
    pub fn stopped(&self, speed: Ball) -> Option<Ball> {
        match self {
            // As for a moving wall, M = s + √(1 + s²).
            Self::Constant { gamma, sound_speed } => {
                let s = gamma.plus_one() * speed / (Ball::whole(4) * gamma.q * *sound_speed);
                let mach = s + (Ball::whole(1) + s.squared()).sqrt();
                Some(Jump::new(*gamma, (s * mach).doubled()).pressure_ratio())
            }
            Self::Thermal(side) => side.stopped(speed),
        }
    }

    /// The ratio of pressures across an expansion by the factor 1 + y and its reflection from a wall at which the gas has to rest again.
    pub fn expanded_twice(&self, excess: Ball) -> Option<Ball> {
        match self {
            // As much sound speed is lost again: a' = a(1 + 2(β − 1)).
            Self::Constant { gamma, .. } => {
                let ratio = Ball::whole(1) + expanded_excess(*gamma, excess).doubled();
                Some(ratio.pow(gamma.ratio().doubled() / gamma.d))
            }
            Self::Thermal(side) => side.expanded_twice(excess),
        }
    }
}
