//! The fill with the heat capacities that hold across each shock, in one kind of number.

use super::flow::Ranges;
use super::stage::GivenSpeed;
use crate::gas::HeatCapacity;
use crate::number::{Ball, Elementary, Semifield};
use crate::shock::Entry;

/// What a shock runs into, and the wall that it meets.
#[derive(Clone, Copy, Debug)]
pub(super) struct Setting<S> {
    /// p1, Pa.
    pub pressure: S,
    /// T1, K.
    pub temperature: S,
    /// R T1, m²/s², R for the gas.
    pub scale: S,
    /// `c_p`/R at T1 across the incident shock.
    pub heat_capacity: S,
    /// V, m/s, along the incident direction.
    pub wall_speed: S,
    /// Across the incident shock.
    pub incident: HeatCapacity<S>,
    /// Across the reflected shock.
    pub reflected: HeatCapacity<S>,
    /// The range of T1 in the reflected heat capacity, where vibration is frozen behind the incident shock only: then state 2 carries less enthalpy than
    /// the reflected heat capacity has at T2.
    pub lagging: Option<usize>,
}

impl<S: Semifield> Setting<S> {
    /// The same in another kind of number.
    pub(super) fn map<T: Semifield>(&self, convert: impl Fn(S) -> T + Copy) -> Setting<T> {
        Setting {
            pressure: convert(self.pressure),
            temperature: convert(self.temperature),
            scale: convert(self.scale),
            heat_capacity: convert(self.heat_capacity),
            wall_speed: convert(self.wall_speed),
            incident: self.incident.map(convert),
            reflected: self.reflected.map(convert),
            lagging: self.lagging,
        }
    }
}

impl Setting<Ball> {
    /// The range of T1 in the incident heat capacity.
    pub(super) fn first(&self) -> usize {
        self.incident.index_at(self.temperature.side())
    }
}

impl<S: Elementary> Setting<S> {
    /// The stage of an incident shock of this speed.
    pub(super) fn at_speed(&self, speed: S) -> GivenSpeed<S> {
        let scale = self.scale;
        let square = speed.squared();
        GivenSpeed { m: square / scale, m_excess: (square - scale) / scale }
    }

    /// The stage of an incident shock of this Mach number, given M − 1: m = γ1 M², γ1 = c1/(c1 − 1).
    pub(super) fn at_mach_excess(&self, mach_excess: S) -> GivenSpeed<S> {
        let one = S::whole(1);
        let c = self.heat_capacity;
        let square_excess = mach_excess * (S::whole(2) + mach_excess);
        GivenSpeed { m: c * (one + square_excess) / (c - one), m_excess: (c * square_excess + one) / (c - one) }
    }

    /// The stage of an incident shock for an entry that gives its speed or Mach number; `None` for one that makes it an inverse problem.
    pub(super) fn given(&self, entry: Entry, value: S) -> Option<GivenSpeed<S>> {
        match entry {
            Entry::ShockSpeed => Some(self.at_speed(value)),
            Entry::MachExcess => Some(self.at_mach_excess(value)),
            Entry::Mach => Some(self.at_mach_excess(value - S::whole(1))),
            _ => None,
        }
    }

    /// Δ = (h(T2) − h2)/(R T2), h2 the enthalpy that state 2 carries.
    pub(super) fn lag(&self, ranges: Ranges, excess: S) -> S {
        self.lagging.map_or(S::whole(0), |first| {
            let full = self.reflected.mean(first, self.temperature, excess, ranges.ahead);
            let carried = self.incident.mean(ranges.first, self.temperature, excess, ranges.second);
            (full - carried) * excess / (S::whole(1) + excess)
        })
    }
}
