//! The outputs, from both compressions.

use super::setting::Setting;
use super::stage::{GivenSpeed, GivenSpeedChange, Stage};
use crate::gas::HeatCapacity;
use crate::gas::isentropic_change::{Change, Speed};
use crate::number::{Ball, Elementary, Positive, Semifield, Signed};
use crate::shock::{Output, mach_excess};

/// A shock into a thermally perfect gas and its reflection, in one kind of number.
///
/// With m = U²/(R T1), ε and x compression 1 − ρ1/ρ2 and temperature excess T2/T1 − 1 of the incident shock, k = (u2 − V)²/(R T2), ε′ and x′ those of
/// the reflected one, R for the gas:
///
/// > p2/p1 = 1 + mε, u2 = Uε, p5/p2 = 1 + k/ε′, `U_R` = (u2 − V)(1 − ε′)/ε′ − V, `M_R`² = k/(γ2 ε′²).
///
/// Source: conservation of mass, momentum and energy.
#[derive(Clone, Copy, Debug)]
pub struct ThermalFlow<S> {
    pressure: S,
    temperature: S,
    density: S,
    /// R T1, m²/s².
    scale: S,
    m: S,
    m_excess: S,
    compression: S,
    excess: S,
    /// u2 − V.
    closing_speed: S,
    wall_speed: S,
    ranges: Ranges,
    reflection: Reflection<S>,
    /// 1 − ρ2/ρ5: negative for an expansion.
    reflected_compression: S,
    reflected_excess: S,
    /// `c_p`/R in the states 1, 2 and 5, as the states were computed.
    heat_capacity: [S; 3],
}

/// What runs back from the wall.
#[derive(Clone, Copy, Debug)]
enum Reflection<S> {
    Shock {
        k: S,
        /// c̄ across the reflected shock.
        mean: S,
        /// Δ/ε′.
        lag_ratio: S,
    },
    Expansion {
        /// p5/p2 − 1.
        pressure_excess: S,
    },
}

/// Where the temperature behind each shock lies: ranges of the incident and of the reflected heat capacity.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Ranges {
    /// Of T1, in the incident heat capacity.
    pub first: usize,
    /// Of T2, in the incident heat capacity.
    pub second: usize,
    /// Of T2, in the reflected heat capacity.
    pub ahead: usize,
    /// Of T5, in the reflected heat capacity.
    pub fifth: usize,
}

/// γ = c/(c − 1).
#[inline(always)]
fn ratio<S: Signed>(heat_capacity: S) -> S {
    heat_capacity / (heat_capacity - S::whole(1))
}

/// The stage of the reflected shock, T2, and u2 − V, for an incident shock of given compression.
pub(super) fn reflected_stage<S: Elementary>(
    setting: &Setting<S>,
    incident: &GivenSpeed<S>,
    ranges: Ranges,
    compression: S,
) -> (GivenSpeedChange<S>, S, S) {
    let excess = incident.temperature_excess(compression);
    let behind = setting.temperature + setting.temperature * excess;
    let (stage, change) = reflected_stage_at(setting, incident, ranges, compression, excess);
    (stage, behind, change)
}

/// The same where the temperature excess is known; without T2.
#[inline(always)]
pub(super) fn reflected_stage_at<S: Elementary>(
    setting: &Setting<S>,
    incident: &GivenSpeed<S>,
    ranges: Ranges,
    compression: S,
    excess: S,
) -> (GivenSpeedChange<S>, S) {
    let speed = (incident.m * setting.scale).sqrt();
    // In units of U, so that nothing is rounded for a wall at rest.
    let change = compression - setting.wall_speed / speed;
    let k = incident.m * change.squared() / (S::whole(1) + excess);
    (GivenSpeedChange { k, lag: setting.lag(ranges, excess) }, speed * compression - setting.wall_speed)
}

impl<S: Elementary> ThermalFlow<S> {
    /// From both compressions.
    pub(super) fn new(
        setting: &Setting<S>,
        incident: &GivenSpeed<S>,
        ranges: Ranges,
        compression: S,
        (reflected_compression, reflected_mean): (S, S),
    ) -> Self {
        let (reflected, behind, closing_speed) = reflected_stage(setting, incident, ranges, compression);
        let both = [
            (compression, incident.temperature_excess(compression)),
            (reflected_compression, reflected.temperature_excess(reflected_compression)),
        ];
        Self::from_parts(setting, incident, &reflected, ranges, both, (behind, closing_speed, reflected_mean))
    }

    /// From compressions, temperature excesses and what else was formed of them.
    pub(super) fn from_parts(
        setting: &Setting<S>,
        incident: &GivenSpeed<S>,
        reflected: &GivenSpeedChange<S>,
        ranges: Ranges,
        [(compression, excess), (reflected_compression, reflected_excess)]: [(S, S); 2],
        (behind, closing_speed, reflected_mean): (S, S, S),
    ) -> Self {
        let scale = setting.scale;
        Self {
            pressure: setting.pressure,
            temperature: setting.temperature,
            density: setting.pressure / scale,
            scale,
            m: incident.m,
            m_excess: incident.m_excess,
            compression,
            excess,
            closing_speed,
            wall_speed: setting.wall_speed,
            ranges,
            reflection: Reflection::Shock { k: reflected.k, mean: reflected_mean, lag_ratio: reflected.lag / reflected_compression },
            reflected_compression,
            reflected_excess,
            heat_capacity: [
                setting.heat_capacity,
                setting.incident.value(ranges.second, behind),
                setting.reflected.value(ranges.fifth, behind + behind * reflected_excess),
            ],
        }
    }
}

impl<S: Signed> ThermalFlow<S> {
    /// The output. State 5 is the gas at the end wall, `ReflectedSpeed` in the laboratory, away from the wall.
    pub fn evaluate(&self, output: Output) -> S {
        let one = S::whole(1);
        let [c1, c2, c5] = self.heat_capacity;
        let (e, r) = (self.compression, self.reflected_compression);
        let speed = || (self.m * self.scale).sqrt();
        let sound_speed = || (ratio(c1) * self.scale).sqrt();
        let pressure_excess = || self.m * e;
        let rise = || match self.reflection {
            Reflection::Shock { k, .. } => k / r,
            Reflection::Expansion { pressure_excess } => pressure_excess,
        };
        let reflected_excess = || pressure_excess() + (one + pressure_excess()) * rise();
        let temperature_ratio = || (one + self.excess) * (one + self.reflected_excess);
        let reflected_temperature_excess = || self.excess + self.reflected_excess * (one + self.excess);
        let remaining = || (one - e) * (one - r);
        let mach_squared_excess = || (self.m_excess * (c1 - one) - one) / c1;
        let sound_speed_2 = || (ratio(c2) * self.scale * (one + self.excess)).sqrt();
        let reflected_speed = || match self.reflection {
            Reflection::Shock { .. } => self.closing_speed * (one - r) / r - self.wall_speed,
            // The head of the expansion.
            Reflection::Expansion { .. } => sound_speed_2() - speed() * e,
        };
        match output {
            Output::ShockSpeed => speed(),
            Output::Mach => (self.m / ratio(c1)).sqrt(),
            Output::MachExcess => mach_excess(mach_squared_excess()),
            Output::Density1 => self.density,
            Output::SoundSpeed1 => sound_speed(),
            Output::PressureRatio => one + pressure_excess(),
            Output::PressureExcess => pressure_excess(),
            Output::Pressure2 => self.pressure * (one + pressure_excess()),
            Output::PressureRise => self.pressure * pressure_excess(),
            Output::DensityRatio => one / (one - e),
            Output::DensityExcess => e / (one - e),
            Output::Density2 => self.density / (one - e),
            Output::TemperatureRatio => one + self.excess,
            Output::TemperatureExcess => self.excess,
            Output::Temperature2 => self.temperature * (one + self.excess),
            Output::SoundSpeed2 => sound_speed_2(),
            Output::GasSpeed2 => speed() * e,
            Output::GasSpeedRatio => (self.m / ratio(c1)).sqrt() * e,
            Output::MachBehind => (self.m / (ratio(c2) * (one + self.excess))).sqrt() * (one - e),
            Output::ShockFrameSpeed2 => speed() * (one - e),
            Output::ReflectedOverIncidentPressure => one + rise(),
            Output::ReflectedPressureRatio => one + reflected_excess(),
            Output::ReflectedPressureExcess => reflected_excess(),
            Output::Pressure5 => self.pressure * (one + reflected_excess()),
            Output::Step => self.pressure * reflected_excess(),
            Output::ReflectionCoefficient => reflected_excess() / pressure_excess(),
            Output::ReflectedDensityRatio => one / remaining(),
            Output::ReflectedDensityExcess => (e + r * (one - e)) / remaining(),
            Output::Density5 => self.density / remaining(),
            Output::ReflectedTemperatureRatio => temperature_ratio(),
            Output::ReflectedTemperatureExcess => reflected_temperature_excess(),
            Output::Temperature5 => self.temperature * temperature_ratio(),
            Output::SoundSpeed5 => (ratio(c5) * self.scale * temperature_ratio()).sqrt(),
            Output::ReflectedSpeed => reflected_speed(),
            Output::ReflectedSpeedRatio => reflected_speed() / sound_speed(),
            Output::ReflectedMach => match self.reflection {
                Reflection::Shock { k, .. } => (k / ratio(c2)).sqrt() / r,
                Reflection::Expansion { .. } => one,
            },
            Output::ReflectedMachExcess => match self.reflection {
                Reflection::Shock { mean, lag_ratio, .. } => mach_excess(self.reflected_mach_squared_excess(mean, lag_ratio)),
                Reflection::Expansion { .. } => S::whole(0),
            },
        }
    }

    /// `M_R`² − 1 with k from the equation of the reflected shock, in which nothing is left to cancel for a weak one:
    ///
    /// > k/ε′² = 2(c̄ − Δ/ε′)/D, `M_R`² − 1 = (2(c2 − c̄) + c2 ε′(2c̄ − 1) − 2(c2 − 1)Δ/ε′)/(c2 D), D = 2(c̄ − 1) − ε′(2c̄ − 1).
    fn reflected_mach_squared_excess(&self, mean: S, lag_ratio: S) -> S {
        let one = S::whole(1);
        let ([_, c2, _], r) = (self.heat_capacity, self.reflected_compression);
        let growing = r * (mean.doubled() - one);
        let sum = (c2 - mean).doubled() + c2 * growing - ((c2 - one) * lag_ratio).doubled();
        sum / (c2 * ((mean - one).doubled() - growing))
    }
}

impl<S: Elementary> ThermalFlow<S> {
    /// The stage of the incident shock.
    pub(super) fn incident(&self) -> GivenSpeed<S> {
        GivenSpeed { m: self.m, m_excess: self.m_excess }
    }

    /// u2 − V for another wall speed.
    pub(super) fn closing_speed_to(&self, wall_speed: S) -> S {
        (self.m * self.scale).sqrt() * self.compression - wall_speed
    }
}

impl ThermalFlow<Ball> {
    /// The same incident shock at a wall that recedes with V > u2. An expansion runs back, a simple wave with the heat capacity of state 2:
    ///
    /// > V − u2 = ∫ from T5 to T2 of dh/a, ln(p5/p2) = −∫ from T5 to T2 of `c_p`/R dT/T.
    ///
    /// Both answers where T5 is on a joint to all digits; none where it is not proven to lie in the data.
    pub(super) fn expanded(&self, heat_capacity: &HeatCapacity<Ball>, wall_speed: Ball) -> [Option<Self>; 2] {
        let one = Ball::whole(1);
        let closing_speed = self.closing_speed_to(wall_speed);
        let temperature = self.temperature + self.temperature * self.excess;
        // √(R/W), with which the integral is a speed.
        let unit = (self.scale / self.temperature).sqrt();
        let changes = heat_capacity.changed_by::<Speed>(self.ranges.second, temperature, closing_speed / unit);
        changes.map(|change| {
            let Change { excess, to } = change?;
            let logarithm = heat_capacity.entropy_rise(self.ranges.second, temperature, excess, to);
            let pressure_excess = logarithm * logarithm.expm1_ratio();
            let [c1, c2, _] = self.heat_capacity;
            Some(Self {
                closing_speed,
                wall_speed,
                reflection: Reflection::Expansion { pressure_excess },
                // ρ2/ρ5 = (T5/T2)/(p5/p2).
                reflected_compression: (pressure_excess - excess) / (one + pressure_excess),
                reflected_excess: excess,
                heat_capacity: [c1, c2, heat_capacity.value(to, temperature + temperature * excess)],
                ..*self
            })
        })
    }

    /// The ranges whose polynomials gave it.
    pub(super) fn ranges(&self) -> Ranges {
        self.ranges
    }

    /// Both compressions, without proof.
    pub(super) fn compressions(&self) -> [f64; 2] {
        [self.compression.nearest(), self.reflected_compression.nearest()]
    }

    /// Whether an expansion runs back.
    pub(super) fn expands(&self) -> bool {
        matches!(self.reflection, Reflection::Expansion { .. })
    }
}
