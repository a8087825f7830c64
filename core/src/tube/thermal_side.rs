//! The same for a thermally perfect gas.

use super::proven_root::{newton, polished};
use crate::gas::isentropic_change::{Change, Pressure, Speed};
use crate::gas::{Gamma, HeatCapacity, ThermallyPerfectGas, molar_gas_constant};
use crate::number::{Ball, Dual, Elementary, Positive, Semifield};

/// Newton steps without proof, at most: about five are taken.
const PLAIN_STEPS: u32 = 40;
/// Newton steps with proof, at most.
const STEPS: u32 = 4;
/// 2⁻⁴⁶: what the plain solution is nearly always good to.
const REACH: f64 = f64::from_bits((1023 - 46) << 52);

/// A thermally perfect gas of known temperature.
#[derive(Clone, Copy, Debug)]
pub(super) struct ThermalSide<'a> {
    heat_capacity: &'a HeatCapacity<Ball>,
    /// T, K.
    temperature: Ball,
    /// The range of T.
    range: usize,
    /// R/W, J/(kg K).
    gas_constant: Ball,
}

impl<'a> ThermalSide<'a> {
    /// The gas at a temperature, with its full heat capacity.
    pub fn new(gas: &'a ThermallyPerfectGas<'_>, temperature: Ball) -> Self {
        let heat_capacity = gas.heat_capacity();
        let gas_constant = molar_gas_constant::<Ball>() / gas.molar_mass();
        Self { heat_capacity, temperature, range: heat_capacity.index_at(temperature.side()), gas_constant }.in_range()
    }

    /// With an unknown temperature if it is not proven to lie in its range: no one polynomial is that of the gas then.
    fn in_range(self) -> Self {
        let is_proven = self.heat_capacity.within_ends(self.range, self.temperature.enclosure()) == [true, true];
        if is_proven { self } else { Self { temperature: Ball::UNKNOWN, ..self } }
    }

    /// T, K.
    pub fn temperature(&self) -> Ball {
        self.temperature
    }

    /// The same with another ball for the temperature, in the same range.
    pub fn with_temperature(self, temperature: Ball) -> Self {
        Self { temperature, ..self }.in_range()
    }

    /// `c_p`/R at T.
    fn capacity(&self) -> Ball {
        self.heat_capacity.value(self.range, self.temperature)
    }

    /// γ at T: γ − 1 = 1/(c − 1).
    pub fn gamma(&self) -> Gamma<Ball> {
        Gamma { d: Ball::whole(1), q: self.capacity() - Ball::whole(1) }
    }

    /// a, m/s.
    pub fn sound_speed(&self) -> Ball {
        (self.gamma().value() * self.gas_constant * self.temperature).sqrt()
    }

    /// The gas at T(1 + x).
    fn at(&self, excess: Ball, range: usize) -> Self {
        Self { temperature: self.temperature + self.temperature * excess, range, ..*self }
    }

    /// The change of the gas speed, m/s: see [`ContactSide::speed`](super::side::ContactSide::speed).
    pub fn speed(&self, excess: Dual<Ball, 1>, is_shock: bool) -> Dual<Ball, 1> {
        let unknown = || Dual::with_slopes(Ball::UNKNOWN, [Ball::UNKNOWN]);
        if is_shock {
            self.shocked(excess.value()).map_or_else(unknown, |hotter| self.shock_speed(excess, hotter))
        } else {
            self.expansion_speed(excess).unwrap_or_else(unknown)
        }
    }

    /// x = T′/T − 1 behind a shock that changes the pressure by the factor 1 + y. Mass, momentum and energy leave
    ///
    /// > G(x) = x(2c̄(1 + y) − y) − y(2 + y) = 0
    ///
    /// (Hugoniot), with c̄ the mean heat capacity between T and T′. Since (c̄x)′ = c(T′) > 1 its slope 2(1 + y)c − y exceeds (1 + y)(2c − 1): between joints G
    /// increases, and the root is the only one if it is farther from each joint than the jump of the enthalpy there makes up for; otherwise nothing is said.
    fn shocked(&self, y: Ball) -> Option<Change> {
        let one = Ball::whole(1);
        let Self { heat_capacity, temperature, range, .. } = *self;
        let residual = |x: Ball, to| {
            let mean = heat_capacity.mean(range, temperature, x, to);
            x * ((mean * (one + y)).doubled() - y) - y * (Ball::whole(2) + y)
        };
        let slope = |x: Ball, to| (heat_capacity.value(to, temperature + temperature * x) * (one + y)).doubled() - y;
        let mut x = {
            let (y, c) = (y.nearest(), self.capacity().nearest());
            y * (2.0 + y) / (2.0 * c * (1.0 + y) - y)
        };
        let end = |x: f64| heat_capacity.index_at(temperature.nearest() * (1.0 + x));
        for _ in 0..PLAIN_STEPS {
            let to = end(x);
            let step = residual(Ball::from(x), to).nearest() / slope(Ball::from(x), to).nearest();
            x -= step;
            // Newton's next step would be its square. What is not a number ends here too.
            if step.abs() <= 1e-9 * x.abs() || step.is_nan() {
                break;
            }
        }
        let to = end(x);
        let mut wanted = 0.0;
        for step in 0..STEPS {
            let at = Ball::from(x);
            let reach = (x.abs() * REACH).max(wanted);
            let correction = residual(at, to) / slope(at.widened(reach), to);
            let found = at - correction;
            if correction.magnitude() < reach && (step > 0 || found.radius() < 1e-22 * x.abs()) {
                return self.is_alone(found, to).then_some(Change { excess: found, to });
            }
            wanted = 4.0 * correction.magnitude();
            if wanted.is_nan() || wanted >= 0.1 * x.abs() {
                return None;
            }
            x = found.nearest();
        }
        None
    }

    /// Whether T(1 + x) is proven to lie in this range and so far from every joint that no jump of the enthalpy hides another solution.
    fn is_alone(&self, excess: Ball, range: usize) -> bool {
        let behind = self.at(excess, range).temperature;
        // The slope in K is at least (1 + y)(2c − 1) > 1 + y, a jump counts 2(1 + y) times.
        let far = |joint: f64| {
            let over = (behind - Ball::from(joint)).enclosure();
            over.low().abs().min(over.high().abs()) > 2.5 * self.heat_capacity.jumps()
        };
        self.heat_capacity.within_ends(range, behind.enclosure()) == [true, true] && self.heat_capacity.joints().all(far)
    }

    /// The change of speed across a shock, √((R T/W) y(y − x)/(1 + y)), with its slope by the implicit function rule on G.
    fn shock_speed(&self, y: Dual<Ball, 1>, Change { excess, to }: Change) -> Dual<Ball, 1> {
        let (one, value) = (Ball::whole(1), y.value());
        let Self { heat_capacity, temperature, range, gas_constant } = *self;
        let mean = heat_capacity.mean(range, temperature, excess, to);
        let by_pressure = excess * (mean.doubled() - one) - (one + value).doubled();
        let by_excess = (heat_capacity.value(to, temperature + temperature * excess) * (one + value)).doubled() - value;
        let x = Dual::with_slopes(excess, y.slopes().map(|slope| -(by_pressure / by_excess) * slope));
        let square = y * (y - x) / (Dual::whole(1) + y);
        (Dual::constant(gas_constant * temperature) * square).sqrt()
    }

    /// The isentropic change by the factor 1 + y, where it is told apart from all others.
    fn expanded(&self, y: Ball) -> Option<Change> {
        match self.heat_capacity.changed_by::<Pressure>(self.range, self.temperature, y * y.log1p_ratio()) {
            [Some(change), None] => Some(change),
            _ => None,
        }
    }

    /// The change of speed across an expansion, ∫ dh/a, whose slope is a/γ/(1 + y).
    fn expansion_speed(&self, y: Dual<Ball, 1>) -> Option<Dual<Ball, 1>> {
        let Change { excess, to } = self.expanded(y.value())?;
        let after = self.at(excess, to);
        let unit = self.gas_constant.sqrt();
        let speed = unit * self.heat_capacity.speed_rise(self.range, self.temperature, excess, to);
        let slope = after.sound_speed() / after.gamma().value() / (Ball::whole(1) + y.value());
        Some(Dual::with_slopes(speed, y.slopes().map(|own| own * slope)))
    }

    /// The gas after an isentropic change by which its speed in a simple wave changes so much (m/s; negative in an expansion), and ln(p′/p).
    pub fn slowed_by(&self, speed: Ball) -> Option<(Self, Ball)> {
        let rise = speed / self.gas_constant.sqrt();
        let [Some(Change { excess, to }), None] = self.heat_capacity.changed_by::<Speed>(self.range, self.temperature, rise) else {
            return None;
        };
        Some((self.at(excess, to), self.heat_capacity.entropy_rise(self.range, self.temperature, excess, to)))
    }

    /// The speed that an expansion to a lower temperature (K) gives the gas, m/s.
    pub fn expanded_to(&self, temperature: f64) -> Ball {
        let excess = (Ball::from(temperature) - self.temperature) / self.temperature;
        let rise = self.heat_capacity.speed_rise(self.range, self.temperature, excess, self.heat_capacity.index_at(temperature));
        -(self.gas_constant.sqrt() * rise)
    }

    /// The speed of a shock relative to the gas ahead, (R T/W) y/Δu by momentum, and the gas behind it.
    pub fn behind_shock(&self, y: Ball) -> Option<(Ball, Self)> {
        let change = self.shocked(y)?;
        let speed = self.shock_speed(Dual::constant(y), change).value();
        Some((self.gas_constant * self.temperature * y / speed, self.at(change.excess, change.to)))
    }

    /// See [`ContactSide::stopped`](super::side::ContactSide::stopped).
    pub fn stopped(&self, speed: Ball) -> Option<Ball> {
        let lacking = |y: Dual<Ball, 1>| self.speed(y, true) - Dual::constant(speed);
        // As with constant heat capacity.
        let gamma = self.gamma().value().nearest();
        let s = (gamma + 1.0) * speed.nearest() / (4.0 * self.sound_speed().nearest());
        let start = 2.0 * gamma / (gamma + 1.0) * 2.0 * s * (s + libm::sqrt(1.0 + s * s));
        Some(Ball::whole(1) + newton(lacking, polished(lacking, start))?)
    }

    /// See [`ContactSide::expanded_twice`](super::side::ContactSide::expanded_twice).
    pub fn expanded_twice(&self, y: Ball) -> Option<Ball> {
        let Change { excess, to } = self.expanded(y)?;
        let speed = self.heat_capacity.speed_rise(self.range, self.temperature, excess, to);
        let [Some(twice), None] = self.heat_capacity.changed_by::<Speed>(self.range, self.temperature, speed.doubled()) else {
            return None;
        };
        Some(self.heat_capacity.entropy_rise(self.range, self.temperature, twice.excess, twice.to).exp())
    }
}

#[cfg(test)]
#[path = "thermal_side_tests.rs"]
mod tests;
