//! The comparison of past shots with a plan as data: the object that `endwall compare PLAN RECORD… --json` prints.

use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use serde::Serialize;

use super::compare_text;
use super::error::{ErrorKind, RecordError};
use super::flag::Flag;
use super::plan::Plan;
use super::report::{MadeBy, ReportQuantity};
use crate::shot::{LEVEL_TWO_SIGMA, Sample, coverage_factor};

/// What the plan wants.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Wanted {
    /// The name of the plan; empty where none was given.
    pub name: String,
    /// p1, Pa, absolute.
    pub fill: ReportQuantity,
    /// p4, Pa, absolute; `None` without a driver.
    pub driver_pressure: Option<ReportQuantity>,
    /// Shock speed at the end wall, m/s.
    pub speed: ReportQuantity,
    /// Its Mach number.
    pub mach: ReportQuantity,
    /// T5, K.
    pub temperature: ReportQuantity,
    /// p5, Pa.
    pub pressure: ReportQuantity,
    /// p5 − p1, Pa.
    pub step: ReportQuantity,
}

/// Measured over wanted, less 1.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Departure {
    /// Of p1.
    pub fill: f64,
    /// Of p4; `None` where one of the two is not known.
    pub driver_pressure: Option<f64>,
    /// Of the shock speed at the end wall.
    pub speed: f64,
    /// Of its Mach number.
    pub mach: f64,
    /// Of T5.
    pub temperature: f64,
    /// Of p5.
    pub pressure: f64,
    /// Of p5 − p1.
    pub step: f64,
}

/// Where a shot counts; its flags say why not.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
pub struct Counted {
    /// In the efficiency.
    pub efficiency: bool,
    /// In the attenuation.
    pub attenuation: bool,
    /// In how well fill and speed of the plan are met.
    pub setting: bool,
}

/// One past shot.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct PastShot {
    /// The name; empty where none was given.
    pub name: String,
    /// Fingerprint of its file.
    pub input_digest: String,
    /// p1, Pa, absolute.
    pub fill: ReportQuantity,
    /// p4, Pa, absolute; `None` where the record has none.
    pub driver_pressure: Option<ReportQuantity>,
    /// Shock speed at the end wall, m/s.
    pub speed: ReportQuantity,
    /// Its Mach number.
    pub mach: ReportQuantity,
    /// Mach number that this p4 gives this fill in an ideal tube; `None` where it is not known.
    pub ideal_mach: Option<ReportQuantity>,
    /// Measured over ideal Mach number.
    pub efficiency: Option<ReportQuantity>,
    /// Relative loss of speed with distance, 1/m; `None` without stations.
    pub attenuation: Option<ReportQuantity>,
    /// T5, K.
    pub temperature: ReportQuantity,
    /// p5, Pa.
    pub pressure: ReportQuantity,
    /// p5 − p1, Pa.
    pub step: ReportQuantity,
    /// Against the plan.
    pub departure: Departure,
    /// Where it counts.
    pub counts: Counted,
    /// What the comparison says about it.
    pub flags: Vec<Flag>,
    /// The flags of its own report, without those for tube and driver, which are used here.
    pub report_flags: Vec<Flag>,
}

/// One quantity over past shots; all numbers in the unit of the mean.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Spread {
    /// Plain mean. Its uncertainty is s/√n, expanded with Student's factor.
    pub mean: ReportQuantity,
    /// Sample standard deviation s, the scatter from shot to shot; `None` for one shot.
    pub standard_deviation: Option<f64>,
    /// Standard uncertainty of the next shot about the mean, √(s² + s²/n).
    pub next: Option<f64>,
    /// Root mean square of the standard uncertainties that the shots state themselves; `None` where one states none.
    pub stated: Option<f64>,
    /// Number of shots n.
    pub shots: usize,
    /// n − 1.
    pub degrees_of_freedom: usize,
}

/// Values for the field `tolerance` of a plan.
#[derive(Clone, Debug, Default, PartialEq, Serialize)]
pub struct ReadyTolerance {
    /// `tolerance.fill`.
    pub fill: Option<String>,
    /// `tolerance.speed`.
    pub speed: Option<String>,
    /// `tolerance.disturbance`, as the plan has it.
    pub disturbance: Option<String>,
}

/// Values to be put back into the plan, as text for its fields; `None` where these shots do not give one.
#[derive(Clone, Debug, Default, PartialEq, Serialize)]
pub struct Ready {
    /// `efficiency`.
    pub efficiency: Option<String>,
    /// `attenuation`.
    pub attenuation: Option<String>,
    /// `tolerance`.
    pub tolerance: ReadyTolerance,
}

/// Past shots against a plan. Field names and order are those of the JSON object.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct CompareReport {
    /// What was wanted.
    pub plan: Wanted,
    /// One line for each shot, in the order in which they were given.
    pub shots: Vec<PastShot>,
    /// Measured over ideal Mach number; `None` where no shot gives one.
    pub efficiency: Option<Spread>,
    /// 1/m; `None` where no shot gives one.
    pub attenuation: Option<Spread>,
    /// Measured over wanted shock speed, less 1; `None` where no shot was set for this plan.
    pub speed: Option<Spread>,
    /// p1 over the wanted one, less 1; `None` where no shot was set for this plan.
    pub fill: Option<Spread>,
    /// What to put back into the plan.
    pub ready: Ready,
    /// What concerns all shots.
    pub flags: Vec<Flag>,
    /// How it came about; the fingerprint is that of the plan.
    pub made_by: MadeBy,
}

impl CompareReport {
    /// The JSON object, indented. Numbers are the shortest that read back to the same double; what is absent is `null`.
    ///
    /// # Errors
    /// None is known; the JSON writer's own error would be handed on.
    pub fn to_json(&self) -> Result<String, RecordError> {
        serde_json::to_string_pretty(self)
            .map_err(|error| RecordError::new(ErrorKind::Syntax, "", "", format!("the comparison cannot be written: {error}"), ""))
    }

    /// The comparison as text: one line for each shot, the means with their scatter, the lines to paste into the plan, flags and cautions.
    pub fn to_text(&self, plan: &Plan) -> String {
        compare_text::render(self, plan)
    }
}

impl Spread {
    /// Of values with the standard uncertainties that their shots state; `None` for no shot.
    pub(super) fn of(values: impl Iterator<Item = (f64, Option<f64>)>, unit: &'static str) -> Option<Self> {
        let (values, stated): (Vec<f64>, Vec<Option<f64>>) = values.unzip();
        let sample = Sample::of(&values).ok()?;
        let squares: Option<f64> = stated.iter().map(|stated| stated.map(|stated| stated * stated)).sum();
        let standard_uncertainty = sample.mean_uncertainty();
        let factor = standard_uncertainty.and_then(|_| coverage_factor(LEVEL_TWO_SIGMA, sample.degrees_of_freedom() as f64).ok());
        Some(Self {
            mean: ReportQuantity {
                value: sample.mean,
                unit,
                proven: None,
                standard_uncertainty,
                expanded: standard_uncertainty.zip(factor).map(|(standard, factor)| standard * factor),
                coverage_factor: factor,
            },
            standard_deviation: sample.standard_deviation,
            next: sample.next_uncertainty(),
            stated: squares.map(|squares| libm::sqrt(squares / sample.count as f64)),
            shots: sample.count,
            degrees_of_freedom: sample.degrees_of_freedom(),
        })
    }
}
