//! Points and lines of the wave diagram.

use crate::number::{Ball, Enclosure};

/// A point of the wave diagram: a position, m from the diaphragm, positive toward the end wall, and a time, s from its opening.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Event<S = Enclosure> {
    /// m from the diaphragm, positive toward the end wall.
    pub position: S,
    /// s from the opening of the diaphragm.
    pub time: S,
}

impl Event<Ball> {
    /// The best enclosures of both.
    pub fn enclosure(self) -> Event {
        Event { position: self.position.enclosure(), time: self.time.enclosure() }
    }
}

/// The waves of the diagram, in the order in which they are listed.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum WaveName {
    /// From the diaphragm to the end wall.
    IncidentShock,
    /// The contact surface of driven and driver gas.
    ContactSurface,
    /// First wave of the expansion, into the driver fill.
    ExpansionHead,
    /// Last wave of the expansion, along which the gas has the speed of the contact surface.
    ExpansionTail,
    /// The head on its way back from the driver's end wall, inside the expansion: a curve.
    HeadInFan,
    /// The same in the expanded driver gas.
    HeadInDriverGas,
    /// The same in the gas behind the incident shock.
    HeadInDrivenGas,
    /// From the end wall to the contact surface, or to the head that comes the other way.
    ReflectedShock,
    /// What the contact surface sends back to the end wall.
    ReturnedWave,
    /// The shock that a tailored contact surface lets through.
    TransmittedShock,
    /// From where the transmitted shock met the head or the tail back to the contact surface: an expansion by the head, a weak compression by
    /// the tail.
    DisturbanceToContact,
    /// The last part of that way, or of the head's, behind the reflected shock to the end wall.
    DisturbanceToEndWall,
}

impl WaveName {
    /// The name in a diagram.
    pub const fn name(self) -> &'static str {
        match self {
            Self::IncidentShock => "incident shock",
            Self::ContactSurface => "contact surface",
            Self::ExpansionHead => "expansion head",
            Self::ExpansionTail => "expansion tail",
            Self::HeadInFan => "reflected head in the expansion",
            Self::HeadInDriverGas => "reflected head in the driver gas",
            Self::HeadInDrivenGas => "reflected head in the driven gas",
            Self::ReflectedShock => "reflected shock",
            Self::ReturnedWave => "wave returned from the contact surface",
            Self::TransmittedShock => "transmitted shock",
            Self::DisturbanceToContact => "disturbance to the contact surface",
            Self::DisturbanceToEndWall => "disturbance to the end wall",
        }
    }
}

/// A wave of the diagram: a straight line between two points, but for [`WaveName::HeadInFan`].
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Wave {
    /// Which.
    pub name: WaveName,
    /// Where it begins.
    pub from: Event,
    /// Where it ends, or where the diagram leaves it.
    pub to: Event,
}
