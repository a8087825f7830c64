//! States 1, 2 and 5 with their units, from a fill and a shock speed or Mach number.

use dashu_ratio::RBig;

use super::real::{Real, parse};
use super::reflection::{Incident, Reflected, incident, reflected, reflected_from_moving_wall};

/// Molar gas constant in J/(mol K), exact in the SI of 2019: 6.02214076e23 · 1.380649e-23.
#[must_use]
pub fn molar_gas_constant() -> RBig {
    parse("8.31446261815324")
}

/// The gas at rest ahead of the incident shock. All values are exact.
#[derive(Clone, Debug)]
pub struct Fill {
    /// Heat capacity ratio γ.
    pub heat_capacity_ratio: RBig,
    /// Molar mass in kg/mol.
    pub molar_mass: RBig,
    /// Pressure p1 in Pa.
    pub pressure: RBig,
    /// Temperature T1 in K.
    pub temperature: RBig,
}

/// A state with its units: Pa, K, kg/m³, m/s.
#[derive(Clone, Debug)]
pub struct State {
    /// Pressure in Pa.
    pub pressure: Real,
    /// Temperature in K.
    pub temperature: Real,
    /// Density in kg/m³.
    pub density: Real,
    /// Sound speed in m/s.
    pub sound_speed: Real,
    /// Gas speed in m/s along the incident direction, laboratory frame.
    pub gas_speed: Real,
}

/// A whole shot.
#[derive(Clone, Debug)]
pub struct Shot {
    /// Dimensionless incident shock.
    pub incident: Incident,
    /// Dimensionless reflected wave.
    pub reflected: Reflected,
    /// Incident shock speed `U_S` in m/s.
    pub shock_speed: Real,
    /// Reflected wave speed `U_R` in m/s, laboratory frame, away from the wall.
    pub reflected_speed: Real,
    /// State 1.
    pub state_1: State,
    /// State 2.
    pub state_2: State,
    /// State 5.
    pub state_5: State,
    /// p2 − p1 in Pa.
    pub incident_step: Real,
    /// p5 − p1 in Pa.
    pub step: Real,
}

impl Fill {
    /// Square of the sound speed a1² = γ R T1 / W in m²/s².
    #[must_use]
    pub fn sound_speed_squared(&self) -> RBig {
        &self.heat_capacity_ratio * molar_gas_constant() * &self.temperature / &self.molar_mass
    }

    /// Sound speed a1 in m/s.
    #[must_use]
    pub fn sound_speed(&self) -> Real {
        Real::Rational(self.sound_speed_squared()).sqrt()
    }

    /// Density ρ1 = p1 W / (R T1) in kg/m³.
    #[must_use]
    pub fn density(&self) -> RBig {
        &self.pressure * &self.molar_mass / (molar_gas_constant() * &self.temperature)
    }

    /// The shot with incident shock speed `shock_speed` in m/s and a rigid wall at rest.
    #[must_use]
    pub fn shot_at_speed(&self, shock_speed: &RBig) -> Shot {
        self.shot(&(Real::Rational(shock_speed.clone()) / self.sound_speed()))
    }

    /// The shot with incident shock Mach number `mach` and a rigid wall at rest.
    #[must_use]
    pub fn shot(&self, mach: &Real) -> Shot {
        let ahead = incident(&self.heat_capacity_ratio, mach);
        let back = reflected(&self.heat_capacity_ratio, &ahead);
        self.assemble(ahead, back, Real::int(0))
    }

    /// The shot against a wall that moves with `wall_speed` in m/s along the incident direction.
    #[must_use]
    pub fn shot_at_moving_wall(&self, mach: &Real, wall_speed: &RBig) -> Shot {
        let ahead = incident(&self.heat_capacity_ratio, mach);
        let wall_speed = Real::Rational(wall_speed.clone());
        let over_a1 = &wall_speed / self.sound_speed();
        let back = reflected_from_moving_wall(&self.heat_capacity_ratio, &ahead, &over_a1);
        self.assemble(ahead, back, wall_speed)
    }

    fn assemble(&self, ahead: Incident, back: Reflected, wall_speed: Real) -> Shot {
        let [pressure, temperature, density] = [self.pressure.clone(), self.temperature.clone(), self.density()].map(Real::Rational);
        let sound_speed = self.sound_speed();
        let state_2 = State {
            pressure: &pressure * &ahead.pressure,
            temperature: &temperature * &ahead.temperature,
            density: &density * &ahead.density,
            sound_speed: &sound_speed * &ahead.sound_speed,
            gas_speed: &sound_speed * &ahead.gas_speed,
        };
        let state_5 = State {
            pressure: &pressure * &back.pressure,
            temperature: &temperature * &back.temperature,
            density: &density * &back.density,
            sound_speed: &sound_speed * &back.sound_speed,
            gas_speed: wall_speed,
        };
        Shot {
            shock_speed: &sound_speed * &ahead.mach,
            reflected_speed: &sound_speed * &back.speed,
            incident_step: &pressure * &ahead.pressure_excess,
            step: &pressure * &back.pressure_excess,
            state_1: State { pressure, temperature, density, sound_speed, gas_speed: Real::int(0) },
            state_2,
            state_5,
            incident: ahead,
            reflected: back,
        }
    }
}
