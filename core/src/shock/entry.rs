//! What fixes the strength of an incident shock: any one of thirteen quantities.

use super::output::Output;
use super::relations::{Jump, Quadratic, from_density_excess, from_gas_speed_squared, from_pressure_excess, from_shock_speed};
use crate::gas::{Gamma, Parameter, sound_speed_squared};
use crate::number::{Exact, Rational, Semifield, Signed};
use core::cmp::Ordering;

/// The quantity that fixes the strength of an incident shock.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
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

    /// Whether it is a quantity behind the reflected shock, and so meant for the rigid wall.
    pub(super) const fn is_reflected(self) -> bool {
        matches!(
            self,
            Self::ReflectedPressureRatio
                | Self::ReflectedPressure
                | Self::Step
                | Self::ReflectedTemperatureRatio
                | Self::ReflectedTemperature
        )
    }

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
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum Branch {
    /// The linear coefficient is positive.
    PositiveLinear,
    /// It is negative.
    NegativeLinear,
}

impl<S: Semifield> Problem<S> {
    /// a1².
    pub(crate) fn sound_speed_squared(&self) -> S {
        sound_speed_squared(self.gamma, self.temperature, self.molar_mass)
    }
}

impl<S: Signed> Problem<S> {
    /// What the strength is computed from: the entry's value less the value without a shock, relative to it (p5/p1 − 1 …); the value itself
    /// where there is none without a shock or where the relation takes it as it is.
    pub fn relative_excess(&self, entry: Entry) -> S {
        let value = self.entry;
        match entry {
            Entry::Mach
            | Entry::PressureRatio
            | Entry::DensityRatio
            | Entry::TemperatureRatio
            | Entry::ReflectedPressureRatio
            | Entry::ReflectedTemperatureRatio => value - S::whole(1),
            Entry::PressureRise | Entry::Step => value / self.pressure,
            Entry::ReflectedPressure => (value - self.pressure) / self.pressure,
            Entry::ReflectedTemperature => (value - self.temperature) / self.temperature,
            Entry::MachExcess | Entry::ShockSpeed | Entry::GasSpeed => value,
        }
    }

    /// An output that the entry gives without a shock relation (p2 from p2/p1, p5 − p1 from p5 …), with each input used once: over a box the
    /// enclosure arithmetic of it is the range. The fill's density is ρ1 = p1·W/(R·T1).
    pub(crate) fn direct(&self, entry: Entry, output: Output) -> Option<S> {
        let (value, one) = (self.entry, S::whole(1));
        let (pressure, temperature) = (self.pressure, self.temperature);
        Some(match (entry, output) {
            (Entry::Mach, Output::MachExcess)
            | (Entry::PressureRatio, Output::PressureExcess)
            | (Entry::DensityRatio, Output::DensityExcess)
            | (Entry::TemperatureRatio, Output::TemperatureExcess)
            | (Entry::ReflectedPressureRatio, Output::ReflectedPressureExcess)
            | (Entry::ReflectedTemperatureRatio, Output::ReflectedTemperatureExcess) => value - one,
            (Entry::MachExcess, Output::Mach) => value + one,
            (Entry::PressureRatio, Output::Pressure2) | (Entry::ReflectedPressureRatio, Output::Pressure5) => pressure * value,
            (Entry::PressureRatio, Output::PressureRise) | (Entry::ReflectedPressureRatio, Output::Step) => pressure * (value - one),
            (Entry::PressureRise, Output::Pressure2) | (Entry::Step, Output::Pressure5) => pressure + value,
            (Entry::PressureRise, Output::PressureExcess)
            | (Entry::Step, Output::ReflectedPressureExcess)
            | (Entry::ReflectedPressure, Output::ReflectedPressureRatio) => value / pressure,
            (Entry::PressureRise, Output::PressureRatio) | (Entry::Step, Output::ReflectedPressureRatio) => value / pressure + one,
            (Entry::ReflectedPressure, Output::Step) => value - pressure,
            (Entry::ReflectedPressure, Output::ReflectedPressureExcess) => value / pressure - one,
            (Entry::DensityRatio, Output::Density2) => {
                pressure * self.molar_mass / (crate::gas::molar_gas_constant::<S>() * temperature) * value
            }
            (Entry::TemperatureRatio, Output::Temperature2) | (Entry::ReflectedTemperatureRatio, Output::Temperature5) => {
                temperature * value
            }
            (Entry::ReflectedTemperature, Output::ReflectedTemperatureRatio) => value / temperature,
            (Entry::ReflectedTemperature, Output::SoundSpeed5) => sound_speed_squared(self.gamma, value, self.molar_mass).sqrt(),
            (Entry::TemperatureRatio, Output::SoundSpeed2) | (Entry::ReflectedTemperatureRatio, Output::SoundSpeed5) => {
                (self.sound_speed_squared() * value).sqrt()
            }
            (Entry::ReflectedTemperature, Output::ReflectedTemperatureExcess) => value / temperature - one,
            _ => return None,
        })
    }

    /// The quadratic for z where the entry leads to one.
    fn quadratic(&self, entry: Entry, excess: S) -> Option<Quadratic<S>> {
        match entry {
            Entry::TemperatureRatio => Some(Quadratic::from_temperature_excess(self.gamma, excess)),
            Entry::ReflectedPressureRatio | Entry::ReflectedPressure | Entry::Step => {
                Some(Quadratic::from_reflected_pressure_excess(self.gamma, excess))
            }
            Entry::ReflectedTemperatureRatio | Entry::ReflectedTemperature => {
                Some(Quadratic::from_reflected_temperature_excess(self.gamma, excess))
            }
            _ => None,
        }
    }

    /// The direct relation for the excess that leads to a quadratic, in the form that stays narrow over a box.
    pub(crate) fn forward_excess(entry: Entry, jump: &Jump<S>) -> Option<S> {
        match entry {
            Entry::TemperatureRatio => Some(jump.narrow_temperature_excess()),
            Entry::ReflectedPressureRatio | Entry::ReflectedPressure | Entry::Step => {
                Some(jump.pressure_excess() * jump.narrow_reflection_coefficient())
            }
            Entry::ReflectedTemperatureRatio | Entry::ReflectedTemperature => Some(jump.narrow_reflected_temperature_excess()),
            _ => None,
        }
    }

    /// z = M² − 1 from the entry.
    pub fn mach_squared_excess(&self, entry: Entry, branch: Branch) -> S {
        self.mach_squared_excess_from(entry, branch, self.relative_excess(entry))
    }

    /// z = M² − 1 from the relative excess of the entry, where that is known better than by subtraction in this kind of number.
    pub(crate) fn mach_squared_excess_from(&self, entry: Entry, branch: Branch, excess: S) -> S {
        if let Some(quadratic) = self.quadratic(entry, excess) {
            return match branch {
                Branch::PositiveLinear => quadratic.root_for_positive_linear(),
                Branch::NegativeLinear => quadratic.root_for_negative_linear(),
            };
        }
        match entry {
            Entry::MachExcess | Entry::Mach => excess * (S::whole(2) + excess),
            Entry::ShockSpeed => from_shock_speed(excess, self.sound_speed_squared()),
            Entry::DensityRatio => from_density_excess(self.gamma, excess),
            Entry::GasSpeed => from_gas_speed_squared(self.gamma, excess.squared() / self.sound_speed_squared()),
            // What is left is the pressure ratio and the pressure rise: every quadratic entry has returned above.
            _ => from_pressure_excess(self.gamma, excess),
        }
    }
}

impl Problem<f64> {
    /// The branch for these nominal inputs.
    pub fn branch(&self, entry: Entry) -> Branch {
        match self.quadratic(entry, self.relative_excess(entry)) {
            Some(quadratic) if quadratic.linear() < 0.0 => Branch::NegativeLinear,
            _ => Branch::PositiveLinear,
        }
    }
}

impl Problem<Exact> {
    /// [`Problem::relative_excess`] in integers; `value` is the value of the entry as it was given.
    pub(crate) fn exact_relative_excess(&self, entry: Entry, value: Rational) -> Option<Exact> {
        let above = |base: Exact| Some(self.entry.difference(&base)?.1 / base);
        match entry {
            Entry::PressureRise | Entry::Step => Some(self.entry / self.pressure),
            Entry::ReflectedPressure => above(self.pressure),
            Entry::ReflectedTemperature => above(self.temperature),
            Entry::MachExcess | Entry::ShockSpeed | Entry::GasSpeed => Some(self.entry),
            _ => Some(Exact::from(value.checked_sub(Rational::ONE)?)),
        }
    }

    /// The jump where z is a rational function of the inputs and integers hold it.
    pub(crate) fn jump(&self, entry: Entry, value: Rational) -> Option<Jump<Exact>> {
        let gamma = self.gamma;
        let excess = self.exact_relative_excess(entry, value)?;
        let z = match entry {
            Entry::MachExcess | Entry::Mach => return Some(Jump::from_mach_excess(gamma, excess)),
            Entry::ShockSpeed => {
                let sound = self.sound_speed_squared();
                excess.squared().difference(&sound)?.1 / sound
            }
            Entry::PressureRatio | Entry::PressureRise => from_pressure_excess(gamma, excess),
            Entry::DensityRatio => {
                let below = gamma.q.doubled().difference(&(gamma.d * excess))?.1;
                excess * gamma.plus_one() / below
            }
            _ => return None,
        };
        Some(Jump::new(gamma, z))
    }

    /// The order of the true M − 1 and a candidate, by the direct relation at the candidate, which increases with M.
    pub(crate) fn order_of_mach_excess(&self, entry: Entry, value: Rational, candidate: &Exact) -> Option<Ordering> {
        let jump = Jump::from_mach_excess(self.gamma, *candidate);
        let excess = self.exact_relative_excess(entry, value)?;
        let (wanted, at_candidate) = match entry {
            Entry::TemperatureRatio => (excess, jump.temperature_excess()),
            Entry::GasSpeed => (excess.squared() / self.sound_speed_squared(), jump.gas_speed_squared()),
            Entry::ReflectedPressureRatio | Entry::ReflectedPressure | Entry::Step => (excess, jump.reflected_pressure_excess()),
            Entry::ReflectedTemperatureRatio | Entry::ReflectedTemperature => (excess, jump.reflected_temperature_excess()),
            _ => return None,
        };
        wanted.compare(&at_candidate)
    }
}
