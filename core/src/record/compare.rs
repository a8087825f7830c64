//! Past shots against a plan: what the tube really reached, ready to be put back into the plan.
//!
//! The efficiency of a shot is its measured Mach number **at the end wall** over the ideal one, for which the driver pressure that was set, its gas and
//! its temperature, the bores and the fill of that shot are taken. A plan uses it that way round: it wants a shock at the end wall, and sets the driver
//! pressure of the ideal shock that is faster by 1/efficiency. So all that the tube loses up to the end wall, attenuation included, is in the efficiency,
//! and the attenuation, which is the relative change of speed with distance over the speed at the end wall, says only how much faster the shock passes the
//! stations before it. Put back together they give the past shots again.

use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use super::compare_report::{CompareReport, PastShot, Ready, ReadyTolerance, Spread, Wanted};
use super::compare_shot::past_shot;
use super::error::{ErrorKind, RecordError};
use super::flag::Flag;
use super::format::{significant, value_with_uncertainty};
use super::plan::Plan;
use super::report::{MadeBy, ReportQuantity};
use super::shot::Shot;
use super::unit::Unit;

/// Shots that scatter by more than this many times what they state are flagged: for two shots that state the truth it happens in 5 % of cases, for more in
/// fewer.
const SCATTER: f64 = 2.0;
/// Less is no scatter of a tube (relative, and in 1/m): the lines for a plan show no such digits.
const LEAST: f64 = 1e-5;
/// Relative uncertainties from which a plan refuses an efficiency and a tolerance.
const LARGEST: f64 = 0.2;

/// A plan, and past shots beside it.
///
/// Fill and speed count only for shots that were set for the plan's state: the same gas, p1 within 10 % and p4, where both are known, within 20 %. A shot in
/// another tube counts nowhere; one of another gas, or from another driver gas, counts for efficiency and attenuation and is flagged. An attenuation counts
/// where the times alone give it, without an allowance: otherwise what was assumed would come back as what was found.
///
/// ```
/// use endwall::record::{Comparison, Plan, Shot};
/// let plan = r#"{ "record": "plan/1", "gas": { "Ar": "balance" }, "heat_capacity": "constant", "temperature": "296 K",
///   "target": { "temperature": "1500 K", "pressure": "2.0 bar(a)" }, "driver": { "gas": { "He": "balance" }, "temperature": "296 K" } }"#;
/// let shot = |speed, p4| format!(r#"{{ "record": "shot/1", "gas": {{ "Ar": "balance" }}, "heat_capacity": "constant",
///   "fill": {{ "pressure": "6.78 kPa", "temperature": "296 K" }}, "shock_speed": "{speed} m/s", "driver": {{ "pressure": "{p4} kPa(a)" }} }}"#);
/// let plan = Plan::read(plan.as_bytes())?;
/// let mut comparison = Comparison::new(&plan)?;
/// for (speed, p4) in [(782, 180), (778, 179), (785, 182)] {
///     comparison.add(&Shot::read(shot(speed, p4).as_bytes())?)?;
/// }
/// let report = comparison.report();
/// let efficiency = report.efficiency.as_ref().unwrap();
/// assert_eq!((efficiency.shots, efficiency.degrees_of_freedom), (3, 2));
/// assert!(report.ready.efficiency.is_some());
/// // No stations, no attenuation.
/// assert!(report.ready.attenuation.is_none());
/// # Ok::<(), endwall::record::RecordError>(())
/// ```
#[derive(Clone, Debug)]
pub struct Comparison<'a> {
    plan: &'a Plan,
    wanted: Wanted,
    made_by: MadeBy,
    flags: Vec<Flag>,
    shots: Vec<PastShot>,
}

impl<'a> Comparison<'a> {
    /// A plan without shots.
    ///
    /// # Errors
    /// As for [`Plan::report`].
    pub fn new(plan: &'a Plan) -> Result<Self, RecordError> {
        let report = plan.report()?;
        let wanted = Wanted {
            name: plan.name.clone(),
            fill: report.fill.p1,
            driver_pressure: report.fill.p4,
            speed: report.incident.speed,
            mach: report.incident.mach,
            temperature: report.states.reflected.temperature,
            pressure: report.states.reflected.pressure,
            step: report.step,
        };
        let flags = report.flags.into_iter().filter(|flag| flag.code == "can-burn").collect();
        Ok(Self { plan, wanted, made_by: report.made_by, flags, shots: Vec::new() })
    }

    /// Adds a past shot.
    ///
    /// # Errors
    /// As for [`Shot::reduce`]; a driver that cannot be; a driver pressure that is not above that of the fill; a file that is there already.
    pub fn add(&mut self, shot: &Shot) -> Result<(), RecordError> {
        if let Some(same) = self.shots.iter().find(|past| past.input_digest == shot.input_digest) {
            let wrong = format!("this is the same record as one before it, shot {} ({})", name(same), same.input_digest);
            return Err(RecordError::new(ErrorKind::Value, "", "", wrong, "name each shot once, or it counts twice"));
        }
        let mut past = past_shot(self.plan, &self.wanted, shot)?;
        if !past.name.is_empty() && self.shots.iter().any(|other| other.name == past.name) {
            let text = "another record has this name and other contents: if one corrects the other, leave the older one out";
            past.flags.insert(0, Flag::new("same-name", text));
        }
        self.shots.push(past);
        Ok(())
    }

    /// The shots, their means and scatter, and what to put back into the plan.
    pub fn report(&self) -> CompareReport {
        let shots = &self.shots;
        let wanted = &self.wanted;
        let relative = |found: &ReportQuantity, wanted: &ReportQuantity| found.standard_uncertainty.map(|standard| standard / wanted.value);
        let stated = |found: &ReportQuantity| (found.value, found.standard_uncertainty);
        let efficiency = shots.iter().filter(|shot| shot.counts.efficiency).filter_map(|shot| shot.efficiency.as_ref().map(stated));
        let attenuation = shots.iter().filter(|shot| shot.counts.attenuation).filter_map(|shot| shot.attenuation.as_ref().map(stated));
        let set = || shots.iter().filter(|shot| shot.counts.setting);
        let speed = set().map(|shot| (shot.departure.speed, relative(&shot.speed, &wanted.speed)));
        let fill = set().map(|shot| (shot.departure.fill, relative(&shot.fill, &wanted.fill)));
        let mut report = CompareReport {
            plan: self.wanted.clone(),
            shots: self.shots.clone(),
            efficiency: Spread::of(efficiency, "1"),
            attenuation: Spread::of(attenuation, "1/m"),
            speed: Spread::of(speed, "1"),
            fill: Spread::of(fill, "1"),
            ready: Ready::default(),
            flags: self.flags.clone(),
            made_by: self.made_by.clone(),
        };
        few(&mut report);
        scatter(&mut report);
        report.ready = ready(&mut report, self.plan.tolerance.disturbance.as_ref().map(|typed| typed.typed().into()));
        self.tolerances(&mut report);
        report
    }

    /// Scatter against what the plan allows for.
    fn tolerances(&self, report: &mut CompareReport) {
        let tolerance = &self.plan.tolerance;
        for (name, stated, found) in [
            ("speed", &tolerance.speed, report.speed.as_ref().and_then(|spread| spread.standard_deviation)),
            ("fill", &tolerance.fill, report.fill.as_ref().and_then(fill_uncertainty)),
        ] {
            let Some((stated, found)) = stated.as_ref().zip(found).filter(|(stated, found)| *found > stated.value().to_f64()) else {
                continue;
            };
            let text = format!(
                "these shots met the {name} of the plan to {} %, and tolerance.{name} says {}: T5 and p5 of the plan are less certain than it says",
                significant(found * 100.0, 2),
                stated.typed()
            );
            report.flags.push(Flag::new("tolerance-exceeded", text));
        }
    }
}

/// What to call a shot.
pub(super) fn name(shot: &PastShot) -> &str {
    if shot.name.is_empty() { "without a name" } else { &shot.name }
}

/// Flags for what rests on no shot or on a single one.
fn few(report: &mut CompareReport) {
    let spreads = [
        ("efficiency", &report.efficiency),
        ("attenuation", &report.attenuation),
        ("speed against the plan", &report.speed),
        ("fill against the plan", &report.fill),
    ];
    let having = |shots: usize| -> Vec<&str> {
        spreads.iter().filter(|(_, spread)| spread.as_ref().map_or(0, |spread| spread.shots) == shots).map(|(name, _)| *name).collect()
    };
    let (none, one) = (having(0), having(1));
    if !none.is_empty() {
        report.flags.push(Flag::new("no-shot", format!("no shot counts for: {}; the flags of the shots say why", none.join(", "))));
    }
    if !one.is_empty() {
        let text = format!("one shot alone counts for: {}; it has no scatter, and how well it repeats is not known", one.join(", "));
        report.flags.push(Flag::new("one-shot", text));
    }
}

/// Flags for shots that scatter by more than they state.
fn scatter(report: &mut CompareReport) {
    for (name, spread) in [("efficiency", &report.efficiency), ("attenuation", &report.attenuation)] {
        let found = spread.as_ref().and_then(|spread| Some((spread.standard_deviation?, spread.stated?)));
        let Some((found, stated)) = found.filter(|(found, stated)| *found > SCATTER * stated) else { continue };
        let text = format!(
            "the {name} scatters {} times as much as the shots state: they differ by more than measuring them explains",
            significant(found / stated, 2)
        );
        report.flags.push(Flag::new("scatter-exceeds-stated", text));
    }
}

/// The scatter of p1 together with what the gauge is uncertain by: its readings do not show that.
fn fill_uncertainty(spread: &Spread) -> Option<f64> {
    Some(libm::hypot(spread.standard_deviation?, spread.stated.unwrap_or(0.0)))
}

/// What goes back into the plan, as the plan reads it: standard uncertainties. What a plan would refuse is left out with a flag.
fn ready(report: &mut CompareReport, disturbance: Option<String>) -> Ready {
    let mut refused = Vec::new();
    let efficiency = report.efficiency.as_ref().and_then(|spread| {
        let mean = spread.mean.value;
        match spread.next.map(|next| next.max(LEAST)) {
            None => {
                refused.push("efficiency");
                None
            }
            Some(next) if next > LARGEST * mean => {
                refused.push("efficiency");
                None
            }
            Some(next) => Some(value_with_uncertainty(mean, Some(next), None)),
        }
    });
    let attenuation = report.attenuation.as_ref().and_then(|spread| {
        // A common error of the stations does not scatter, and few shots may agree by chance: the larger of the two.
        let uncertainty = spread.next.unwrap_or(0.0).max(spread.stated.unwrap_or(0.0));
        if uncertainty == 0.0 {
            refused.push("attenuation");
            return None;
        }
        Some(value_with_uncertainty(spread.mean.value, Some(uncertainty.max(LEAST)), Unit::find("%/m")))
    });
    let mut tolerance = |name, found: Option<f64>| {
        let found = found?.max(LEAST);
        if found >= LARGEST {
            refused.push(name);
            return None;
        }
        Some(format!("{} %", significant(found * 100.0, 2)))
    };
    let tolerance = ReadyTolerance {
        fill: tolerance("tolerance.fill", report.fill.as_ref().and_then(fill_uncertainty)),
        speed: tolerance("tolerance.speed", report.speed.as_ref().and_then(|spread| spread.standard_deviation)),
        disturbance,
    };
    if !refused.is_empty() {
        let text = format!(
            "no line for {}: a plan takes no uncertainty of a fifth, and a value without one would take the band from it",
            refused.join(", ")
        );
        report.flags.push(Flag::new("not-ready", text));
    }
    Ready { efficiency, attenuation, tolerance }
}

impl Ready {
    /// The lines to paste into a plan; empty where there is nothing to paste.
    pub(super) fn lines(&self) -> Vec<String> {
        let field = |name: &str, value: &Option<String>| value.as_ref().map(|value| format!("\"{name}\": \"{value}\""));
        let [fill, speed] = [field("fill", &self.tolerance.fill), field("speed", &self.tolerance.speed)];
        // The line replaces the whole field, so that it holds what the shots say nothing about; alone that is nothing new.
        let kept = field("disturbance", &self.tolerance.disturbance).filter(|_| fill.is_some() || speed.is_some());
        let inside = fill.into_iter().chain(speed).chain(kept).collect::<Vec<_>>().join(", ");
        let tolerance = (!inside.is_empty()).then(|| format!("\"tolerance\": {{ {inside} }}"));
        [field("efficiency", &self.efficiency), field("attenuation", &self.attenuation), tolerance].into_iter().flatten().collect()
    }
}

#[cfg(test)]
#[path = "compare_tests.rs"]
mod tests;
