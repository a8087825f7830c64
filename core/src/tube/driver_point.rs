//! The expansion of a driver gas at one point of the tolerances.

use super::area_change::{expand, sonic};
use super::driver_error::DriverError;
use super::side::ContactSide;
use super::thermal_side::ThermalSide;
use crate::gas::{Gamma, ThermallyPerfectGas, molar_gas_constant, sound_speed_squared};
use crate::number::{Ball, Elementary, Positive, Semifield};

/// The gas of a driver.
#[derive(Clone, Copy)]
pub(super) enum PointGas<'a> {
    Constant { gamma: Gamma<Ball>, molar_mass: Ball },
    Thermal(&'a ThermallyPerfectGas<'a>),
}

/// A driver and a contact surface, at one point of the tolerances.
#[derive(Clone, Copy)]
pub(super) struct Point<'a> {
    pub gas: PointGas<'a>,
    pub temperature: Ball,
    /// `None` for equal areas, as always for a thermally perfect gas.
    pub area_ratio: Option<Ball>,
    /// p2, Pa.
    pub pressure: Ball,
    /// u2, m/s.
    pub gas_speed: Ball,
}

/// The driver gas, expanded to the speed of the contact surface.
#[derive(Clone, Copy)]
pub(super) struct Expansion<'a> {
    /// State 3, for the waves into it.
    pub side: ContactSide<'a>,
    /// T3, K.
    pub temperature: Ball,
    /// ln(p4/p2).
    pub logarithm: Ball,
    /// Mach number ahead of the change of area.
    pub mach_before: Option<Ball>,
    /// Whether the flow at the diaphragm is sonic.
    pub is_sonic: bool,
}

/// h = (γ4 − 1)/2.
fn half_excess(gamma: Gamma<Ball>) -> Ball {
    gamma.d / gamma.q.doubled()
}

impl<'a> Point<'a> {
    /// W4, kg/mol.
    pub fn molar_mass(&self) -> Ball {
        match self.gas {
            PointGas::Constant { molar_mass, .. } => molar_mass,
            PointGas::Thermal(gas) => gas.molar_mass(),
        }
    }

    /// γ4, at T4.
    pub fn gamma(&self) -> Gamma<Ball> {
        match self.gas {
            PointGas::Constant { gamma, .. } => gamma,
            PointGas::Thermal(gas) => ThermalSide::new(gas, self.temperature).gamma(),
        }
    }

    /// a4, m/s.
    pub fn sound_speed(&self) -> Ball {
        sound_speed_squared(self.gamma(), self.temperature, self.molar_mass()).sqrt()
    }

    /// The greatest gas speed, m/s: where the gas expands to vacuum, g·a4/h, or where its data end.
    pub fn greatest_gas_speed(&self) -> Option<Ball> {
        match self.gas {
            PointGas::Constant { gamma, .. } => {
                let h = half_excess(gamma);
                let g = match self.area_ratio {
                    Some(area_ratio) => sonic(h, area_ratio)?.0,
                    None => Ball::whole(1),
                };
                Some(g * self.sound_speed() / h)
            }
            PointGas::Thermal(gas) => Some(ThermalSide::new(gas, self.temperature).expanded_to(gas.range().0)),
        }
    }

    /// The expansion to u2; `None` where the gas does not become that fast.
    pub fn expand(&self) -> Result<Option<Expansion<'a>>, DriverError> {
        match self.gas {
            PointGas::Constant { gamma, .. } => self.constant(gamma),
            PointGas::Thermal(gas) => Ok(self.thermal(gas)),
        }
    }

    /// ln(p4/p2) = −(2γ4/(γ4 − 1)) ln(a3/a4), T3/T4 = (a3/a4)².
    fn constant(&self, gamma: Gamma<Ball>) -> Result<Option<Expansion<'a>>, DriverError> {
        let sound_speed = self.sound_speed();
        let expanded = expand(half_excess(gamma), self.gas_speed / sound_speed, self.area_ratio)?;
        let ratio = expanded.sound_speed_ratio;
        let expansion = || Expansion {
            side: ContactSide::Constant { gamma, sound_speed: sound_speed * ratio },
            temperature: self.temperature * ratio.squared(),
            logarithm: -(ratio.ln() * gamma.ratio().doubled() / gamma.d),
            mach_before: expanded.mach_before,
            is_sonic: expanded.is_sonic,
        };
        Ok(ratio.is_certainly_positive().then(expansion))
    }

    /// u2 = ∫ from T3 to T4 of dh/a, ln(p4/p2) = ∫ from T3 to T4 of `c_p`/R dT/T.
    fn thermal(&self, gas: &'a ThermallyPerfectGas<'a>) -> Option<Expansion<'a>> {
        let (side, logarithm) = ThermalSide::new(gas, self.temperature).slowed_by(-self.gas_speed)?;
        let is_sonic = (self.gas_speed - side.sound_speed()).is_certainly_positive();
        Some(Expansion {
            side: ContactSide::Thermal(side),
            temperature: side.temperature(),
            logarithm: -logarithm,
            mach_before: None,
            is_sonic,
        })
    }
}

impl Expansion<'_> {
    /// a3, m/s.
    pub fn sound_speed(&self) -> Ball {
        self.side.sound_speed()
    }

    /// ρ3 = p2 W/(R T3), kg/m³.
    pub fn density(&self, point: &Point<'_>) -> Ball {
        point.pressure * point.molar_mass() / (molar_gas_constant::<Ball>() * self.temperature)
    }
}
