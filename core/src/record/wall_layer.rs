//! What the boundary layer of the side wall does to the test time and to the reflected shock: empirical, for plans and for shots.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use serde::Serialize;

use super::flag::Flag;
use super::format::significant;
use super::optional::Tube;
use super::report::States;
use super::shot::Shot;
use super::uniform_time::Found;
use crate::gas::Portion;
use crate::tube::{BehindShock, Bifurcation, BoundaryLayer, LayerBand, ViscosityError, lennard_jones, mixture_viscosity};

/// Half width of the band of the stagnation pressure over p5 around 1 in which the criterion, a model of the wall layer, decides nothing.
const EDGE: f64 = 0.03;
/// Mole fraction up to which species without a viscosity may be left out: they change that of the mixture by less than its model is good for.
const LEFT_OUT: f64 = 0.05;
/// Where the viscosities come from, and how good they are: a test holds the second part against reference correlations.
const SOURCE: &str = "empirical: kinetic theory of dilute gases with Lennard-Jones parameters, and a mixing rule; single gases within 7 % between 250 K and 1000 K, water vapour within 11 %";

/// Whether the reflected shock bifurcates in the boundary layer of the side wall, by Mark's criterion.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct WallLayerCriterion {
    /// Mach number of the wall layer relative to the reflected shock.
    pub wall_layer_mach: f64,
    /// The stagnation pressure of the wall layer over p5: below 1 the shock bifurcates.
    pub stagnation_over_reflected: f64,
    /// `None` within 3 % of the bound, where the criterion decides nothing.
    pub bifurcates: Option<bool>,
}

/// A time or a length at the end wall as wall layers leave it.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct LayerRange {
    /// Without a layer.
    pub without: f64,
    /// With a laminar one, lower and upper end.
    pub laminar: [f64; 2],
    /// With a turbulent one, lower and upper end.
    pub turbulent: [f64; 2],
}

/// Viscosities of the test gas, Pa s.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct LayerViscosity {
    /// At T1.
    #[serde(rename = "1")]
    pub fill: f64,
    /// At T2.
    #[serde(rename = "2")]
    pub incident: f64,
    /// Where they come from, and what is left out.
    pub source: String,
}

/// What the boundary layer behind the incident shock leaves, from laminar to turbulent.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct WallLayer {
    /// From the reflection until a wave from the contact surface comes to the end wall, s.
    pub contact_wave: LayerRange,
    /// Lower and upper end of the uniform time at the end wall, s: the same, or the expansion where that comes earlier. `None` where the waves are not
    /// known, where there is no uniform time, and where no wave from the contact surface ends it.
    pub uniform_time: Option<[f64; 2]>,
    /// Separation of shock and contact surface as the shock meets the end wall, m.
    pub separation: LayerRange,
    /// Viscosities.
    pub viscosity: LayerViscosity,
}

impl From<&LayerBand> for LayerRange {
    fn from(band: &LayerBand) -> Self {
        let ordered = |[a, b]: [f64; 2]| [a.min(b), a.max(b)];
        Self { without: band.ideal, laminar: ordered(band.laminar), turbulent: ordered(band.turbulent) }
    }
}

impl LayerRange {
    /// Lower and upper end over both kinds of layer.
    pub fn ends(&self) -> [f64; 2] {
        [self.laminar[0].min(self.turbulent[0]), self.laminar[1].max(self.turbulent[1])]
    }
}

/// Why there is no viscosity, with the digits of a report.
fn refused(error: &ViscosityError<'_>) -> String {
    match error {
        ViscosityError::Temperature { value, low, high } => {
            let [value, low, high] = [value, low, high].map(|kelvin| significant(*kelvin, 4));
            format!("no viscosity is known at {value} K: its model reaches from {low} K to {high} K for this gas")
        }
        other => other.to_string(),
    }
}

/// The criterion for a shock, with its flag.
pub(super) fn criterion(behind: &BehindShock<'_>, flags: &mut Vec<Flag>) -> Option<WallLayerCriterion> {
    let found = Bifurcation::behind(behind).ok()?;
    let (mach, ratio) = (found.wall_layer_mach.middle(), found.stagnation_over_reflected.middle());
    if !(mach.is_finite() && ratio.is_finite()) {
        return None;
    }
    let bifurcates = if (ratio - 1.0).abs() < EDGE { None } else { Some(ratio < 1.0) };
    let values = format!("the wall layer stagnates at {} of p5, at a Mach number of {}", significant(ratio, 2), significant(mach, 3));
    match bifurcates {
        Some(true) => flags.push(Flag::new("bifurcation", format!("by Mark's criterion the reflected shock bifurcates in the boundary layer of the side wall ({values}): sensors there see its foot before the step, and gas from the wall reaches into state 5. Empirical; no account of how strongly"))),
        None => flags.push(Flag::new("bifurcation", format!("whether the reflected shock bifurcates in the boundary layer of the side wall is not decided by Mark's criterion ({values}; within 3 % of 1 it says nothing)"))),
        Some(false) => {}
    }
    Some(WallLayerCriterion { wall_layer_mach: mach, stagnation_over_reflected: ratio, bifurcates })
}

impl Shot {
    /// The layer in a tube whose bore and driven length the record gives; `None`, with a flag where that is no choice of the writer, without a viscosity.
    pub(super) fn wall_layer(
        &self,
        tube: &Tube,
        behind: &BehindShock<'_>,
        states: &States,
        found: Option<&Found>,
        flags: &mut Vec<Flag>,
    ) -> Option<WallLayer> {
        let [bore, length] = [tube.driven_bore.as_ref()?, tube.driven_length.as_ref()?].map(|length| length.value().to_f64());
        let temperatures = [&states.fill, &states.incident].map(|state| state.temperature.value);
        let layer = self.viscosities(temperatures).and_then(|viscosity| {
            let layer = BoundaryLayer::behind(behind, [bore, length], [viscosity.fill, viscosity.incident]);
            let layer =
                BoundaryLayer { returned_wave: found.and_then(|found| found.returned_speed).unwrap_or(layer.returned_wave), ..layer };
            let bands = layer.test_time().and_then(|time| Ok((time, layer.separation()?)));
            let (time, separation) = bands.map_err(|error| error.to_string())?;
            let (contact_wave, separation) = (LayerRange::from(&time), LayerRange::from(&separation));
            let ideal = found.filter(|found| found.contact_counts).map(|found| found.time.end_wall.value).filter(|ideal| *ideal > 0.0);
            let uniform_time = ideal.map(|ideal| contact_wave.ends().map(|end| end.min(ideal)));
            Ok(WallLayer { contact_wave, uniform_time, separation, viscosity })
        });
        layer.map_err(|why| flags.push(Flag::new("no-boundary-layer", format!("the boundary layer is not estimated: {why}")))).ok()
    }

    /// At T1 and T2, or why not.
    fn viscosities(&self, temperatures: [f64; 2]) -> Result<LayerViscosity, String> {
        let found = self.with_portions(|portions| {
            let positive = || portions.iter().filter(|portion| portion.fraction.is_positive());
            let listed: Vec<Portion<'_>> = positive().filter(|portion| lennard_jones(portion.species.name).is_some()).copied().collect();
            let mut unlisted: Vec<&str> = Vec::new();
            let mut share = 0.0;
            for portion in positive().filter(|portion| lennard_jones(portion.species.name).is_none()) {
                share += portion.fraction.to_f64();
                if !unlisted.contains(&portion.species.name) {
                    unlisted.push(portion.species.name);
                }
            }
            let names = unlisted.join(", ");
            if share > LEFT_OUT {
                return Err(format!("no viscosity is known for {names}, {} % of the gas", significant(share * 100.0, 2)));
            }
            let [fill, incident] = temperatures.map(|temperature| mixture_viscosity(&listed, temperature).map_err(|error| refused(&error)));
            let without = if names.is_empty() { String::new() } else { format!("; without {names}") };
            Ok(LayerViscosity { fill: fill?, incident: incident?, source: format!("{SOURCE}{without}") })
        });
        found.unwrap_or_else(|| {
            Err("the gas is given by its heat capacity ratio, which says nothing of its viscosity: give it by its species".into())
        })
    }
}
