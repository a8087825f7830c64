//! What fixes the strength of an incident shock: any one of thirteen quantities.

use super::output::Output;
use super::relations::{Jump, Quadratic, from_density_excess, from_gas_speed_squared, from_mach, from_pressure_excess, from_shock_speed};
use crate::gas::{Gamma, Parameter, sound_speed_squared};
use crate::number::{Exact, Rational, Semifield, Signed};
use core::cmp::Ordering;

/// The quantity that fixes the strength of an incident shock.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Entry {
    /// M − 1.
    MachExcess,
    /// M.
    Mach,
    /// Shock speed, m/s.
    ShockSpeed,
    /// p2/p1.
    PressureRatio,
    /// p2 − p1, Pa.
    PressureRise,
    /// ρ2/ρ1.
    DensityRatio,
    /// T2/T1.
    TemperatureRatio,
    /// u2, m/s.
    GasSpeed,
    /// p5/p1.
    ReflectedPressureRatio,
    /// p5, Pa.
    ReflectedPressure,
    /// p5 − p1, Pa.
    Step,
    /// T5/T1.
    ReflectedTemperatureRatio,
    /// T5, K.
    ReflectedTemperature,
}

impl Entry {
    /// Every entry.
    pub const ALL: [Self; 13] = [
        Self::MachExcess,
        Self::Mach,
        Self::ShockSpeed,
        Self::PressureRatio,
        Self::PressureRise,
        Self::DensityRatio,
        Self::TemperatureRatio,
        Self::GasSpeed,
        Self::ReflectedPressureRatio,
        Self::ReflectedPressure,
        Self::Step,
        Self::ReflectedTemperatureRatio,
        Self::ReflectedTemperature,
    ];

    /// The parameter that an error names.
    pub const fn parameter(self) -> Parameter {
        match self {
            Self::MachExcess => Parameter::MachExcess,
            Self::Mach => Parameter::Mach,
            Self::ShockSpeed => Parameter::ShockSpeed,
            Self::PressureRatio => Parameter::PressureRatio,
            Self::PressureRise => Parameter::PressureRise,
            Self::DensityRatio => Parameter::DensityRatio,
            Self::TemperatureRatio => Parameter::TemperatureRatio,
            Self::GasSpeed => Parameter::GasSpeed,
            Self::ReflectedPressureRatio => Parameter::ReflectedPressureRatio,
            Self::ReflectedPressure => Parameter::ReflectedPressure,
            Self::Step => Parameter::Step,
            Self::ReflectedTemperatureRatio => Parameter::ReflectedTemperatureRatio,
            Self::ReflectedTemperature => Parameter::ReflectedTemperature,
        }
    }

    /// The output that repeats the entry.
    pub const fn output(self) -> Output {
        match self {
            Self::MachExcess => Output::MachExcess,
            Self::Mach => Output::Mach,
            Self::ShockSpeed => Output::ShockSpeed,
            Self::PressureRatio => Output::PressureRatio,
            Self::PressureRise => Output::PressureRise,
            Self::DensityRatio => Output::DensityRatio,
            Self::TemperatureRatio => Output::TemperatureRatio,
            Self::GasSpeed => Output::GasSpeed2,
            Self::ReflectedPressureRatio => Output::ReflectedPressureRatio,
            Self::ReflectedPressure => Output::Pressure5,
            Self::Step => Output::Step,
            Self::ReflectedTemperatureRatio => Output::ReflectedTemperatureRatio,
            Self::ReflectedTemperature => Output::Temperature5,
        }
    }
}

/// All inputs of a shock, in one kind of number.
#[derive(Clone, Copy, Debug)]
pub struct Problem<S> {
    /// γ.
    pub gamma: Gamma<S>,
    /// p1, Pa.
    pub pressure: S,
    /// T1, K.
    pub temperature: S,
    /// W, kg/mol.
    pub molar_mass: S,
    /// The value of the [`Entry`].
    pub entry: S,
}

/// Which of the two exact forms of a quadratic's root does not cancel; decided from the nominal inputs, before the formulas.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Branch {
    /// The linear coefficient is positive.
    PositiveLinear,
    /// It is negative.
    NegativeLinear,
}

impl<S: Semifield> Problem<S> {
    fn sound_speed_squared(&self) -> S {
        sound_speed_squared(self.gamma, self.temperature, self.molar_mass)
    }
}

impl<S: Signed> Problem<S> {
    /// The quadratic for z where the entry leads to one.
    fn quadratic(&self, entry: Entry) -> Option<Quadratic<S>> {
        let (gamma, value, one) = (self.gamma, self.entry, S::whole(1));
        Some(match entry {
            Entry::TemperatureRatio => Quadratic::from_temperature_excess(gamma, value - one),
            Entry::ReflectedPressureRatio => Quadratic::from_reflected_pressure_excess(gamma, value - one),
            Entry::ReflectedPressure => Quadratic::from_reflected_pressure_excess(gamma, (value - self.pressure) / self.pressure),
            Entry::Step => Quadratic::from_reflected_pressure_excess(gamma, value / self.pressure),
            Entry::ReflectedTemperatureRatio => Quadratic::from_reflected_temperature_excess(gamma, value - one),
            Entry::ReflectedTemperature => {
                Quadratic::from_reflected_temperature_excess(gamma, (value - self.temperature) / self.temperature)
            }
            _ => return None,
        })
    }

    /// z = M² − 1 from the entry.
    pub fn mach_squared_excess(&self, entry: Entry, branch: Branch) -> S {
        let (gamma, value, one) = (self.gamma, self.entry, S::whole(1));
        if let Some(quadratic) = self.quadratic(entry) {
            return match branch {
                Branch::PositiveLinear => quadratic.root_for_positive_linear(),
                Branch::NegativeLinear => quadratic.root_for_negative_linear(),
            };
        }
        match entry {
            Entry::MachExcess => value * (S::whole(2) + value),
            Entry::Mach => from_mach(value),
            Entry::ShockSpeed => from_shock_speed(value, self.sound_speed_squared()),
            Entry::PressureRise => from_pressure_excess(gamma, value / self.pressure),
            Entry::DensityRatio => from_density_excess(gamma, value - one),
            Entry::GasSpeed => from_gas_speed_squared(gamma, value.squared() / self.sound_speed_squared()),
            // What is left is the pressure ratio: every quadratic entry has returned above.
            _ => from_pressure_excess(gamma, value - one),
        }
    }
}

impl Problem<f64> {
    /// The branch for these nominal inputs.
    pub fn branch(&self, entry: Entry) -> Branch {
        match self.quadratic(entry) {
            Some(quadratic) if quadratic.linear() < 0.0 => Branch::NegativeLinear,
            _ => Branch::PositiveLinear,
        }
    }
}

impl Problem<Exact> {
    /// The jump where z is a rational function of the inputs and integers hold it; `entry` is the value of the entry as it was given.
    pub(crate) fn jump(&self, entry: Entry, value: Rational) -> Option<Jump<Exact>> {
        let gamma = self.gamma;
        let less_one = || Some(Exact::from(value.checked_sub(Rational::ONE)?));
        let z = match entry {
            Entry::MachExcess => return Some(Jump::from_mach_excess(gamma, self.entry)),
            Entry::Mach => return Some(Jump::from_mach_excess(gamma, less_one()?)),
            Entry::ShockSpeed => {
                let sound = self.sound_speed_squared();
                self.entry.squared().difference(&sound)?.1 / sound
            }
            Entry::PressureRatio => from_pressure_excess(gamma, less_one()?),
            Entry::PressureRise => from_pressure_excess(gamma, self.entry / self.pressure),
            Entry::DensityRatio => {
                let excess = less_one()?;
                let below = gamma.q.doubled().difference(&(gamma.d * excess))?.1;
                excess * gamma.plus_one() / below
            }
            _ => return None,
        };
        Some(Jump::new(gamma, z))
    }

    /// The order of the true M − 1 and a candidate, by the direct relation at the candidate, which
    /// increases with M.
    pub(crate) fn order_of_mach_excess(&self, entry: Entry, value: Rational, candidate: &Exact) -> Option<Ordering> {
        let jump = Jump::from_mach_excess(self.gamma, *candidate);
        let less_one = || Some(Exact::from(value.checked_sub(Rational::ONE)?));
        let (wanted, at_candidate) = match entry {
            Entry::TemperatureRatio => (less_one()?, jump.temperature_excess()),
            Entry::GasSpeed => (self.entry.squared() / self.sound_speed_squared(), jump.gas_speed_squared()),
            Entry::ReflectedPressureRatio => (less_one()?, jump.reflected_pressure_excess()),
            Entry::ReflectedPressure => (self.entry.difference(&self.pressure)?.1 / self.pressure, jump.reflected_pressure_excess()),
            Entry::Step => (self.entry / self.pressure, jump.reflected_pressure_excess()),
            Entry::ReflectedTemperatureRatio => (less_one()?, jump.reflected_temperature_excess()),
            Entry::ReflectedTemperature => {
                (self.entry.difference(&self.temperature)?.1 / self.temperature, jump.reflected_temperature_excess())
            }
            _ => return None,
        };
        wanted.compare(&at_candidate)
    }
}
