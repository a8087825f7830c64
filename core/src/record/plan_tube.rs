//! What driver and tube add to a plan: driver pressure, waves, uniform time, loads and ratings.

use alloc::format;
use alloc::string::ToString;
use alloc::vec::Vec;

use super::driver::{assumed, dense_driver, no_driver, with_driver};
use super::error::RecordError;
use super::flag::Flag;
use super::optional::{Driver as DriverRecord, Tube as TubeRecord};
use super::plan::Plan;
use super::plan_report::{LimitLine, PlannedWave};
use super::quantity::Quantity;
use super::report::{ReportQuantity, States, computed};
use super::shot::Shot;
use super::shot_tube::Layers;
use super::tailoring::PlannedTailoring;
use super::uniform_time::{Found, Setting, UniformTime};
use crate::gas::HeatCapacityRatio;
use crate::shock::Entry;
use crate::tube::{
    BehindShock, Contact, Drive, Driver, DriverError, Efficiency, Event, Tailoring, TestGas, Wave, WaveDiagram, WaveName, end_load,
    stored_energy,
};

/// Pieces of the one curve of a diagram: more are not seen in a drawing.
const CURVE: u32 = 24;

/// Scatter of the pressure at which a diaphragm bursts, where the record states none (common practice, no source).
const BURST_SCATTER: f64 = 0.05;

/// Standard atmosphere, Pa (ISO 2533:1975, from memory).
const STANDARD_ATMOSPHERE: f64 = 101_325.0;

/// What is found.
#[derive(Default)]
pub(super) struct TubePart {
    pub p4: Option<ReportQuantity>,
    pub p4_band: Option<[f64; 2]>,
    pub tailoring: Option<PlannedTailoring>,
    pub time: Option<UniformTime>,
    pub layers: Layers,
    pub waves: Vec<PlannedWave>,
    pub end_load: Option<f64>,
    pub stored_energy: Option<f64>,
    pub limits: Vec<LimitLine>,
    pub flags: Vec<Flag>,
}

/// Pressures that act on the tube, Pa, absolute, each with its name.
struct Loads {
    /// p5, with its expanded uncertainty.
    reflected: f64,
    /// The end wall after a shock came back from the contact surface.
    over_tailored: Option<f64>,
    /// γ4, and p4 at the upper end of its band.
    driver: Option<(HeatCapacityRatio, f64)>,
}

impl Plan {
    /// All of it, for a shock of this speed (m/s) whose p5 has this upper end (Pa), and the planned shot with its states.
    pub(super) fn tube_part(
        &self,
        gas: TestGas<'_>,
        speed: f64,
        p5: (f64, f64),
        (shot, states): (&Shot, &States),
    ) -> Result<TubePart, RecordError> {
        let mut part = TubePart::default();
        let (mut over_tailored, mut found) = (None, None);
        let behind = gas.behind(Entry::ShockSpeed, speed).map_err(|error| no_driver(&error))?;
        let mut ratio = None;
        if let Some(record) = &self.driver {
            found = with_driver(record, self.tube.as_ref(), |driver| {
                ratio = HeatCapacityRatio::new(driver.heat_capacity_ratio()).ok();
                self.driven(&mut part, &mut over_tailored, record, driver, (gas, &behind), p5)
            })?;
            part.waves = found.as_ref().map_or(Vec::new(), |found| waves(&found.diagram));
            part.flags.extend(assumed(record, self.tube.as_ref()));
        }
        part.layers = shot.layers(&behind, states, found.as_ref(), &mut part.flags);
        part.time = found.map(|found| found.time);
        shot.nothing_observed(part.time.is_some(), &mut part.flags);
        if let Some(tube) = &self.tube {
            let p4 = part.p4_band.map(|[_, high]| high).or(part.p4.as_ref().map(|p4| p4.value));
            let driver = ratio.zip(p4);
            self.loads(&mut part, tube, &Loads { reflected: p5.1, over_tailored, driver });
        }
        Ok(part)
    }

    /// Driver pressure, what comes back from the contact surface, and the times.
    fn driven(
        &self,
        part: &mut TubePart,
        over_tailored: &mut Option<f64>,
        record: &DriverRecord,
        driver: &Driver<'_>,
        (gas, behind): (TestGas<'_>, &BehindShock<'_>),
        p5: (f64, f64),
    ) -> Result<Option<Found>, RecordError> {
        let drive = driver.for_shock(behind).map_err(|error| no_driver(&error))?;
        self.driver_pressure(part, driver, &drive, gas, behind)?;
        let upper = part.p4_band.map(|[_, high]| high).or(part.p4.as_ref().map(|p4| p4.value));
        part.flags.extend(upper.map_or(Ok(Vec::new()), |p4| self.condensing_driver(record, p4))?);
        part.flags.extend(part.p4.as_ref().and_then(|p4| dense_driver(record, p4.value)));
        let contact = Contact::new(behind, &drive);
        let met = contact.meet().ok();
        part.tailoring = Some(PlannedTailoring::new(record, driver, behind, &contact, met.as_ref()));
        // In proportion to p5, of which the upper end counts.
        let rise = met.map(|met| met.interaction().end_wall_pressure.high()).filter(|high| *high > p5.0);
        *over_tailored = rise.map(|high| high / p5.0 * p5.1);
        if met.is_none() && contact.tailoring() != Tailoring::Expansion {
            let text = "the contact surface is over-tailored: a shock comes back and raises the pressure at the end wall above p5 by an amount that is not computed, nor compared with a rating";
            part.flags.push(Flag::new("over-tailored-unchecked", text));
        }
        let disturbance = self.tolerance.disturbance.as_ref().map_or(0.0, |change| change.value().to_f64());
        let (tube, contact) = (self.tube.as_ref(), &contact);
        Setting { behind, driver, contact, met: met.as_ref(), tube, reflected_pressure: p5.0, disturbance }.find(&mut part.flags)
    }

    fn driver_pressure(
        &self,
        part: &mut TubePart,
        driver: &Driver,
        drive: &Drive,
        gas: TestGas<'_>,
        behind: &BehindShock<'_>,
    ) -> Result<(), RecordError> {
        let Some(stated) = &self.efficiency else {
            part.p4 = Some(computed(drive.pressure.middle(), "Pa", Some(drive.pressure)));
            let text = "no efficiency is given: p4 is that of an ideal tube; real tubes need more (a Mach number 5 to 15 % low is common practice)";
            part.flags.push(Flag::new("ideal-driver", text));
            return Ok(());
        };
        // Both ends at twice the standard uncertainty, like those of p5.
        let efficiency = Efficiency::new(stated.value().to_f64(), 2.0 * stated.standard_uncertainty().unwrap_or(0.0));
        let efficiency = efficiency.map_err(|error| no_driver(&error))?;
        let band = driver.pressure_for_mach(gas, behind.mach().nearest(), efficiency).map_err(|error| at_efficiency(stated, &error))?;
        part.p4 = Some(computed(band.pressure, "Pa", None));
        part.p4_band = (band.high > band.low).then_some([band.low, band.high]);
        Ok(())
    }

    fn loads(&self, part: &mut TubePart, tube: &TubeRecord, loads: &Loads) {
        let ambient = self.ambient_pressure();
        if ambient.is_none() && tube.driven_bore.is_some() {
            let text = "no ambient pressure is given: end load and stored energy are those against 101.325 kPa";
            part.flags.push(Flag::new("ambient-assumed", text));
        }
        let ambient = ambient.unwrap_or(STANDARD_ATMOSPHERE);
        if let Some(bore) = &tube.driven_bore {
            let worst = loads.over_tailored.map_or(loads.reflected, |pressure| pressure.max(loads.reflected));
            part.end_load = end_load(worst, ambient, bore.value()).ok().map(|load| load.steady.high());
        }
        if let (Some((ratio, p4)), Some(bore), Some(length)) = (loads.driver, &tube.driver_bore, &tube.driver_length) {
            let area = core::f64::consts::PI / 4.0 * bore.value().to_f64() * bore.value().to_f64();
            let energy = stored_energy(ratio, p4, ambient, area * length.value().to_f64());
            part.stored_energy = energy.ok().map(|energy| energy.brode.high());
        }
        let burst = tube.burst_pressure.as_ref().map(|(typed, absolute)| {
            let (value, standard) = (absolute.value.to_f64(), absolute.standard_uncertainty);
            (typed.typed(), [-1.0, 1.0].map(|sign| value + sign * standard.map_or(BURST_SCATTER * value, |standard| 2.0 * standard)))
        });
        let gas = if self.flags.iter().any(|flag| flag.code == "can-burn") { " of the unburnt gas" } else { "" };
        for rating in &tube.ratings {
            let limit = rating.pressure.1.value.to_f64();
            let mut line = |load: &str, pressure: f64| {
                let exceeded = pressure > limit;
                part.limits.push(LimitLine { part: rating.part.to_string(), load: load.to_string(), pressure, rating: limit, exceeded });
            };
            if rating.part == "driver" {
                if let Some((_, p4)) = loads.driver {
                    let of = if self.efficiency.is_some() { "p4" } else { "p4 of an ideal tube" };
                    line(&format!("{of}{gas}, also where the diaphragm does not burst"), p4);
                }
                if let Some((_, [_, high])) = burst {
                    line("burst pressure of the diaphragm", high);
                }
                continue;
            }
            line(&format!("p5{gas}"), loads.reflected);
            if let Some(pressure) = loads.over_tailored {
                line(&format!("end wall after a shock came back from the contact surface{gas}"), pressure);
            }
        }
        let p4 = part.p4_band.or(part.p4.as_ref().map(|p4| [p4.value; 2]));
        part.flags.extend(burst.zip(p4).and_then(|((typed, burst), p4)| diaphragm(typed, burst, p4)));
    }
}

/// The waves of a diagram, with points on the curved one.
fn waves(diagram: &WaveDiagram) -> Vec<PlannedWave> {
    let at = |event: Event| [event.position.middle(), event.time.middle()];
    let planned = |wave: Wave| {
        let (from, to) = (at(wave.from), at(wave.to));
        let curved = if wave.name == WaveName::HeadInFan { CURVE } else { 1 };
        let between = (1..curved).map(|point| at(diagram.fan_point(f64::from(point) / f64::from(CURVE))));
        let between = between.filter(|point| point[1] < to[1]).collect();
        PlannedWave { name: wave.name.name().to_string(), from, to, between }
    };
    diagram.waves().into_iter().flatten().map(planned).collect()
}

/// The flag for a diaphragm that does not burst at p4; both with lower and upper end, Pa.
fn diaphragm(typed: &str, burst: [f64; 2], p4: [f64; 2]) -> Option<Flag> {
    if burst[0] > p4[1] {
        let text = format!(
            "the diaphragm bursts at {typed}, above p4: unless something else opens it, p4 is left standing in the driver. Vent it from a distance before anybody approaches"
        );
        return Some(Flag::new("diaphragm-holds", text));
    }
    (burst[1] < p4[0]).then(|| {
        let text = format!("the diaphragm bursts at {typed}, below p4: the driver does not reach p4; take a stronger diaphragm");
        Flag::new("diaphragm-bursts-early", text)
    })
}

/// The refusal of the faster ideal shock that a driver must be laid out for.
fn at_efficiency(efficiency: &Quantity, error: &DriverError) -> RecordError {
    let mut refusal = no_driver(error);
    refusal.wrong =
        format!("with the efficiency of {} the driver is laid out for a faster ideal shock: {}", efficiency.typed(), refusal.wrong);
    if matches!(error, DriverError::Shock(_) | DriverError::Gas(_)) {
        refusal.remedy = "take a weaker shock, or leave the efficiency out for the driver pressure of an ideal tube".to_string();
    }
    refusal
}
