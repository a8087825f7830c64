//! The Monte Carlo check of a report's uncertainties.

use alloc::format;
use alloc::string::String;
use alloc::vec;

use super::error::{ErrorKind, RecordError};
use super::flag::Flag;
use super::format::significant;
use super::reduce::report;
use super::report::Report;
use super::shot::Shot;
use super::text;
use super::unit::Unit;
use crate::shock::Output;
use crate::shot::{LEVEL_TWO_SIGMA, MonteCarlo, MonteCarloSettings, Progress, RECOMMENDED_BLOCK, Reduction, Stop, validate_linear};

/// Whole numbers up to this are kept by every reader of JSON.
const LARGEST_SEED: u64 = 1 << 53;
/// Two blocks: with one nobody can tell whether the result has settled (JCGM 101:2008, 7.9.4; from memory).
const FEWEST_TRIALS: u64 = 2 * RECOMMENDED_BLOCK as u64;
/// Digits of the standard uncertainty that must agree; JCGM 101:2008, 7.9.2 has one or two.
const DIGITS: u8 = 1;
/// Of the numerical tolerance, so that the run itself does not decide the comparison (JCGM 101:2008, 8.2).
const TOLERANCE: f64 = 0.2;

const OUTPUTS: [(Output, &str); 3] = [(Output::Temperature5, "T5"), (Output::Pressure5, "p5"), (Output::Step, "p5 - p1")];

impl Shot {
    /// [`reduce`](Self::reduce), with the linear uncertainties of T5, p5 and the step checked by a Monte Carlo run of at most a million
    /// trials (JCGM 101:2008, 8.1): a flag gives the outcome, and the report the seed. The same seed gives the same run.
    ///
    /// # Errors
    /// As for [`reduce`](Self::reduce); a seed above 2⁵³.
    ///
    /// ```
    /// # let file = r#"{ "record": "shot/1", "gas": { "heat_capacity_ratio": "7/5", "molar_mass": "28.9652 g/mol" },
    /// #   "fill": { "pressure": "100.0 ± 0.1 kPa", "temperature": "295.15 ± 0.5 K" }, "shock_speed": "620 ± 0.93 m/s" }"#;
    /// let report = endwall::record::Shot::read(file.as_bytes())?.reduce_checked(412)?;
    /// assert_eq!(report.made_by.seed, Some(412));
    /// assert!(report.flags.iter().any(|flag| flag.code == "monte-carlo-agrees"));
    /// # Ok::<(), endwall::record::RecordError>(())
    /// ```
    pub fn reduce_checked(&self, seed: u64) -> Result<Report, RecordError> {
        self.reduce_checked_with(seed, MonteCarloSettings::default().max_trials, &mut |_| true)
    }

    /// [`reduce_checked`](Self::reduce_checked) with at most this many trials, rounded down to whole blocks of ten thousand; the run ends
    /// earlier where the result has settled. After each block the callback is told how far it has got; if it returns `false` the run ends
    /// there, and the flag says that the result has not settled.
    ///
    /// # Errors
    /// As for [`reduce_checked`](Self::reduce_checked); fewer than 20 000 trials.
    ///
    /// ```
    /// # let file = r#"{ "record": "shot/1", "gas": { "heat_capacity_ratio": "7/5", "molar_mass": "28.9652 g/mol" },
    /// #   "fill": { "pressure": "100.0 ± 0.1 kPa", "temperature": "295.15 ± 0.5 K" }, "shock_speed": "620 ± 0.93 m/s" }"#;
    /// let shot = endwall::record::Shot::read(file.as_bytes())?;
    /// let mut trials = 0;
    /// let watched = shot.reduce_checked_with(412, 1_000_000, &mut |progress| {
    ///     trials = progress.trials;
    ///     true
    /// })?;
    /// assert!(trials > 0);
    /// assert_eq!(watched, shot.reduce_checked(412)?);
    /// assert!(shot.reduce_checked_with(412, 1000, &mut |_| true).is_err());
    /// # Ok::<(), endwall::record::RecordError>(())
    /// ```
    pub fn reduce_checked_with(
        &self,
        seed: u64,
        most_trials: u64,
        progress: &mut dyn FnMut(Progress) -> bool,
    ) -> Result<Report, RecordError> {
        let refuse = |wrong: String, remedy: String| Err(RecordError::new(ErrorKind::Value, "", "", wrong, remedy));
        if seed > LARGEST_SEED {
            return refuse(format!("the seed {seed} is larger than 2^53"), "take a smaller seed".into());
        }
        if most_trials < FEWEST_TRIALS {
            let wrong = format!("{most_trials} Monte Carlo trials are too few to see whether the result has settled");
            return refuse(wrong, format!("take {FEWEST_TRIALS} or more"));
        }
        let unit = text::pressure_unit(self);
        self.with_reduction(|reduction, notes| {
            let mut report = report(self, reduction, notes);
            report.flags.push(check(reduction, seed, most_trials, unit, progress));
            report.made_by.seed = Some(seed);
            report
        })
    }
}

fn check(
    reduction: &Reduction<'_>,
    seed: u64,
    max_trials: u64,
    pressure: Option<Unit>,
    progress: &mut dyn FnMut(Progress) -> bool,
) -> Flag {
    let not_run = |why: String| Flag::new("monte-carlo-not-run", format!("the uncertainties were not checked by a Monte Carlo run: {why}"));
    if OUTPUTS.iter().any(|(output, ..)| reduction.estimate(*output).standard_uncertainty.is_none_or(|standard| standard == 0.0)) {
        return not_run("an input states no uncertainty".into());
    }
    let settings =
        MonteCarloSettings { level: LEVEL_TWO_SIGMA, digits: DIGITS, tolerance: TOLERANCE, max_trials, ..MonteCarloSettings::default() };
    let mut buffer = vec![0.0; RECOMMENDED_BLOCK * OUTPUTS.len()];
    let outputs = OUTPUTS.map(|(output, ..)| output);
    match reduction.monte_carlo(&outputs, seed, &settings, &mut buffer, progress) {
        Err(error) => not_run(format!("{error}")),
        Ok(run) => outcome(reduction, &run, pressure),
    }
}

fn outcome(reduction: &Reduction<'_>, run: &MonteCarlo, pressure: Option<Unit>) -> Flag {
    let mut differing = String::new();
    for ((output, name), summary) in OUTPUTS.iter().zip(run.outputs()) {
        let linear = reduction.estimate(*output);
        let standard = linear.standard_uncertainty.unwrap_or(0.0);
        // The run draws from normal distributions, so the interval is compared at k = 2 whatever the degrees of freedom.
        if !validate_linear(linear.value, standard, 2.0 * standard, summary, DIGITS).validated() {
            let unit = if *output == Output::Temperature5 { None } else { pressure };
            let shown = |value: f64| significant(unit.map_or(value, |unit| unit.reading(value.into())), 5);
            let part =
                format!("; {name} lies between {} and {} {}", shown(summary.low), shown(summary.high), unit.map_or("K", Unit::symbol));
            differing.push_str(&part);
        }
    }
    let settled = if run.stop == Stop::Converged { "" } else { ", which have not settled" };
    let refused = match run.refused {
        0 => String::new(),
        1 => " (1 draw had no shock and was replaced)".into(),
        more => format!(" ({more} draws had no shock and were replaced)"),
    };
    let trials = format!("{} trials{settled}{refused}", run.trials);
    if differing.is_empty() {
        Flag::new("monte-carlo-agrees", format!("the linear uncertainties of T5, p5 and p5 - p1 agree with a Monte Carlo run of {trials}"))
    } else {
        let text = format!("the linear uncertainties do not describe this shot. By a Monte Carlo run of {trials}, at 95 %{differing}");
        Flag::new("monte-carlo-differs", text)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const ARGON: &str = include_str!("../../../examples/records/argon-b0412.json");

    fn checked(speed: &str) -> Report {
        let file = format!(
            r#"{{ "record": "shot/1", "gas": {{ "heat_capacity_ratio": "5/3", "molar_mass": "39.948 g/mol" }},
            "fill": {{ "pressure": "8 ± 0.02 kPa", "temperature": "296.2 ± 0.5 K" }}, "shock_speed": "{speed}" }}"#
        );
        Shot::read(file.as_bytes()).unwrap().reduce_checked(7).unwrap()
    }

    fn last_code(report: &Report) -> &str {
        &report.flags.last().unwrap().code
    }

    #[test]
    fn a_good_shot_agrees_and_repeats() {
        let shot = Shot::read(ARGON.as_bytes()).unwrap();
        let report = shot.reduce_checked(1).unwrap();
        assert_eq!(last_code(&report), "monte-carlo-agrees");
        assert_eq!(report, shot.reduce_checked(1).unwrap());
        assert!(report.to_text(&shot).contains("seed 1"));
        assert!(shot.reduce_checked(u64::MAX).is_err());
    }

    #[test]
    fn the_number_of_trials_is_bounded() {
        let shot = Shot::read(ARGON.as_bytes()).unwrap();
        let text = |most| shot.reduce_checked_with(1, most, &mut |_| true).map(|report| report.flags.last().unwrap().text.clone());
        // This shot settles later than this.
        assert!(text(20_000).unwrap().contains("20000 trials, which have not settled"));
        assert!(text(39_999).unwrap().contains("30000 trials, which have not settled"));
        assert!(!text(1_000_000).unwrap().contains("settled"));
        assert_eq!(text(19_999).unwrap_err().remedy, "take 20000 or more");
    }

    #[test]
    fn a_wide_input_differs_and_a_missing_one_is_said() {
        let wide = checked("950 ± 150 m/s");
        assert_eq!(last_code(&wide), "monte-carlo-differs");
        // In the unit of the gauge, like the rest of the report.
        let text = &wide.flags.last().unwrap().text;
        assert!(text.contains("; p5 lies between 12") && text.ends_with(" kPa") && !text.contains(" Pa"), "{text}");
        assert_eq!(last_code(&checked("950 m/s")), "monte-carlo-not-run");
    }
}
