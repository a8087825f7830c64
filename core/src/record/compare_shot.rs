//! One past shot against a plan.

use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use super::compare_report::{Counted, Departure, PastShot, Wanted};
use super::compare_same as same;
use super::driver::{dense_driver, with_driver};
use super::error::{ErrorKind, RecordError};
use super::flag::Flag;
use super::format::significant;
use super::optional::{Driver as DriverRecord, Tube as TubeRecord};
use super::plan::Plan;
use super::reduce::report;
use super::report::{Report, ReportQuantity, computed};
use super::shot::{Shot, Speed};
use super::shot_tube::test_gas;
use crate::number::{Enclosure, Known};
use crate::shot::Reduction;
use crate::tube::{Driver, DriverError, TestGas};

/// A fill pressure further than this from that of the plan was set for another state.
const OTHER_FILL: f64 = 0.10;
/// The same for a driver pressure: it moves the shock speed by about 3 %.
const OTHER_DRIVER_PRESSURE: f64 = 0.20;
/// What a plan takes as an efficiency.
pub(super) const EFFICIENCIES: core::ops::RangeInclusive<f64> = 0.3..=1.2;
/// Relative step of the slopes of the ideal Mach number; what curvature adds is of its size.
const STEP: f64 = 1e-4;

/// The shot reduced, and what its driver was good for.
pub(super) fn past_shot(plan: &Plan, wanted: &Wanted, shot: &Shot) -> Result<PastShot, RecordError> {
    let mut flags = differences(plan, shot);
    let reduced = shot.with_reduction(|reduction, notes| {
        let report = report(shot, reduction, notes);
        let ideal = ideal(plan, shot, &report, reduction, &mut flags)?;
        Ok::<_, RecordError>((report, ideal))
    })?;
    let (report, ideal) = reduced?;
    let five = &report.states.reflected;
    let fill = report.states.fill.pressure.clone();
    let driver_pressure = shot
        .driver
        .as_ref()
        .and_then(|driver| driver.pressure.as_ref())
        .map(|(_, absolute)| computed(absolute.value.to_f64(), "Pa", None).with_standard_uncertainty(absolute.standard_uncertainty));
    let against = |found: &ReportQuantity, wanted: &ReportQuantity| found.value / wanted.value - 1.0;
    let departure = Departure {
        fill: against(&fill, &wanted.fill),
        driver_pressure: driver_pressure.as_ref().zip(wanted.driver_pressure.as_ref()).map(|(found, wanted)| against(found, wanted)),
        speed: against(&report.incident.speed, &wanted.speed),
        mach: against(&report.incident.mach, &wanted.mach),
        temperature: against(&five.temperature, &wanted.temperature),
        pressure: against(&five.pressure, &wanted.pressure),
        step: against(&report.step, &wanted.step),
    };
    let (ideal_mach, efficiency) = ideal.unzip();
    let counts = counts(shot, &departure, efficiency.as_ref(), &mut flags);
    // Tube and driver are used here, whatever a reduction says.
    let used_here = |flag: &Flag| ["tube", "driver", "driver.pressure"].iter().any(|path| *flag == Flag::not_used(path));
    let report_flags = report.flags.iter().filter(|flag| !used_here(flag)).cloned().collect();
    Ok(PastShot {
        name: shot.name.clone(),
        input_digest: shot.input_digest.clone(),
        fill,
        driver_pressure,
        speed: report.incident.speed,
        mach: report.incident.mach,
        ideal_mach,
        efficiency,
        attenuation: report.incident.attenuation,
        temperature: report.states.reflected.temperature,
        pressure: report.states.reflected.pressure,
        step: report.step,
        departure,
        counts,
        flags,
        report_flags,
    })
}

/// Code of the flag for another gas.
const OTHER_GAS: &str = "other-gas";
/// Code of the flag for another tube.
const OTHER_TUBE: &str = "other-tube";

/// In what a shot is not like the plan.
fn differences(plan: &Plan, shot: &Shot) -> Vec<Flag> {
    let mut flags = Vec::new();
    if !same::gas(&shot.gas, &plan.gas) {
        let text = "the gas is not that of the plan: efficiency and attenuation count, fill and speed do not";
        flags.push(Flag::new(OTHER_GAS, text));
    }
    if shot.heat_capacity != plan.heat_capacity {
        let text = format!(
            "heat_capacity is {}, in the plan {}: the ideal Mach number is computed with that of the shot",
            shot.heat_capacity.name(),
            plan.heat_capacity.name()
        );
        flags.push(Flag::new("other-heat-capacity", text));
    }
    let tubes = shot.tube.as_ref().zip(plan.tube.as_ref());
    if let Some(path) = tubes.and_then(|(of_shot, of_plan)| same::other_length(of_shot, of_plan)) {
        let text = format!("{path} is not that of the plan: this shot counts nowhere, since efficiency and attenuation belong to a tube");
        flags.push(Flag::new(OTHER_TUBE, text));
    }
    let gas_of = |driver: &'_ Option<DriverRecord>| driver.as_ref().and_then(|driver| driver.gas.clone());
    if let (Some(own), Some(planned)) = (gas_of(&shot.driver), gas_of(&plan.driver)) {
        if !same::gas(&own, &planned) {
            let text = "driver.gas is not that of the plan: the efficiency counts all the same";
            flags.push(Flag::new("other-driver", text));
        }
    }
    flags
}

/// Where a shot counts, with a flag for every reason against it that has none yet.
fn counts(shot: &Shot, departure: &Departure, efficiency: Option<&ReportQuantity>, flags: &mut Vec<Flag>) -> Counted {
    let other = |flags: &[Flag], code: &str| flags.iter().any(|flag| flag.code == code);
    let (tube, gas) = (!other(flags, OTHER_TUBE), !other(flags, OTHER_GAS));
    let plausible = efficiency.is_none_or(|efficiency| EFFICIENCIES.contains(&efficiency.value));
    if !plausible {
        let text =
            "the efficiency lies outside 0.3 to 1.2, which no plan takes, and does not count: check driver.pressure, its unit and its mark";
        flags.push(Flag::new("doubtful-efficiency", text));
    }
    let own_attenuation = match (&shot.speed, &shot.attenuation) {
        (Speed::Given(_), _) => {
            flags.push(Flag::new("no-attenuation", "no attenuation: the record gives shock_speed and no stations"));
            false
        }
        (Speed::Stations(_), Some(_)) => {
            let text = "the attenuation does not count: the allowance of the record, field attenuation, is a part of it";
            flags.push(Flag::new("allowance", text));
            false
        }
        (Speed::Stations(_), None) => true,
    };
    let far = |path: &str, departure: f64, most: f64| {
        let text = || format!("{path} differs by {:+.1} % from that of the plan", departure * 100.0);
        (departure.abs() > most).then(text)
    };
    let elsewhere = far("fill.pressure", departure.fill, OTHER_FILL)
        .or_else(|| far("driver.pressure", departure.driver_pressure?, OTHER_DRIVER_PRESSURE));
    if let Some(text) = &elsewhere {
        let text =
            format!("{text}: this shot was set for another state and says nothing about how well fill and speed of the plan are met");
        flags.push(Flag::new("other-setting", text));
    }
    Counted {
        efficiency: efficiency.is_some() && plausible && tube,
        attenuation: own_attenuation && tube,
        setting: elsewhere.is_none() && tube && gas,
    }
}

/// Ideal Mach number and efficiency; `None`, with a flag that says why, where the driver is not known.
fn ideal(
    plan: &Plan,
    shot: &Shot,
    report: &Report,
    reduction: &Reduction<'_>,
    flags: &mut Vec<Flag>,
) -> Result<Option<(ReportQuantity, ReportQuantity)>, RecordError> {
    let mut without = |why: String| {
        flags.push(Flag::new("no-efficiency", format!("no efficiency: {why}")));
        Ok(None)
    };
    let Some(own) = shot.driver.as_ref().filter(|driver| driver.pressure.is_some()) else {
        return without("the record has no driver.pressure, and that of the plan is not what was set".into());
    };
    let planned = plan.driver.as_ref();
    let record = DriverRecord {
        gas: own.gas.clone().or_else(|| planned?.gas.clone()),
        pressure: own.pressure.clone(),
        temperature: own.temperature.clone().or_else(|| planned?.temperature.clone()),
        heat_capacity: own.heat_capacity.or_else(|| planned?.heat_capacity),
    };
    let missing = [("gas", record.gas.is_none()), ("temperature", record.temperature.is_none())];
    if let Some((field, _)) = missing.into_iter().find(|(_, missing)| *missing) {
        return without(format!("neither the record nor the plan has driver.{field}"));
    }
    let Some((typed, p4)) = &record.pressure else { return Ok(None) };
    let gas = test_gas(reduction);
    let p1 = report.states.fill.pressure.value;
    if p4.value.to_f64() <= p1 {
        let wrong = format!("the driver pressure is not above that of the fill, {} Pa", significant(p1, 4));
        let remedy = "check both, their units and the marks (g) and (a)";
        return Err(RecordError::new(ErrorKind::Value, "driver.pressure", typed.typed(), wrong, remedy));
    }
    let found = with_driver(&record, bores(shot.tube.as_ref()).or(plan.tube.as_ref()), |driver| {
        Ok(driver.mach_excess(gas, p4.value).and_then(|excess| {
            let mach = Known::from(1.0).enclosure() + excess;
            Ok((mach, slopes(driver, gas, p4.value.to_f64(), mach.middle())?))
        }))
    })?;
    let (mach, slopes): (Enclosure, _) = match found {
        Ok(found) => found,
        Err(error) => return without(format!("{error}")),
    };
    let borrowed: Vec<&str> = [("driver.gas", own.gas.is_none()), ("driver.temperature", own.temperature.is_none())]
        .into_iter()
        .filter_map(|(path, missing)| missing.then_some(path))
        .collect();
    if !borrowed.is_empty() {
        let text = format!("{} of the plan is used: the record has none", borrowed.join(" and "));
        flags.push(Flag::new("driver-from-plan", text));
    }
    flags.extend(dense_driver(&record, p4.value.to_f64()));
    let of_mach = &report.incident.mach;
    let relative = |standard: Option<f64>, value: f64| standard.map(|standard| standard / value);
    let temperature = record.temperature.as_ref();
    let temperature = temperature.and_then(|typed| relative(typed.standard_uncertainty(), typed.value().to_f64()));
    let stated = Stated {
        mach: relative(of_mach.standard_uncertainty, of_mach.value),
        fill: relative(report.states.fill.pressure.standard_uncertainty, p1),
        driver_pressure: relative(p4.standard_uncertainty, p4.value.to_f64()),
        driver_temperature: temperature,
    };
    let value = of_mach.value / mach.middle();
    let standard_uncertainty = stated.combined(slopes).map(|relative| relative * value);
    // The coverage factor of the Mach number, which holds most of it.
    let coverage_factor = standard_uncertainty.map(|_| of_mach.coverage_factor.unwrap_or(2.0).max(2.0));
    let efficiency = ReportQuantity {
        standard_uncertainty,
        expanded: standard_uncertainty.zip(coverage_factor).map(|(standard, factor)| standard * factor),
        coverage_factor,
        ..computed(value, "1", None)
    };
    Ok(Some((computed(mach.middle(), "1", Some(mach)), efficiency)))
}

/// A tube that states both bores.
fn bores(tube: Option<&TubeRecord>) -> Option<&TubeRecord> {
    tube.filter(|tube| tube.driver_bore.is_some() && tube.driven_bore.is_some())
}

/// Slopes of ln M of the ideal shock in ln p4 and in ln T4.
fn slopes(driver: &Driver, gas: TestGas<'_>, pressure: f64, mach: f64) -> Result<[f64; 2], DriverError> {
    let more = 1.0 + STEP;
    let hotter = driver.with_temperature(driver.temperature().nominal() * more)?;
    let slope = |excess: Enclosure| libm::log((1.0 + excess.middle()) / mach) / libm::log1p(STEP);
    Ok([slope(driver.mach_excess(gas, pressure * more)?), slope(hotter.mach_excess(gas, pressure)?)])
}

/// Relative standard uncertainties behind an efficiency; `None` where one is not stated.
struct Stated {
    mach: Option<f64>,
    fill: Option<f64>,
    driver_pressure: Option<f64>,
    driver_temperature: Option<f64>,
}

impl Stated {
    /// Relative standard uncertainty of the efficiency, JCGM 100:2008, equation (10). The ideal Mach number depends on p4/p1, so that p1 has the slope of p4
    /// with the other sign; that of T1 in it, which is opposite to its effect on the measured one, is left out: the result is a little too large.
    fn combined(&self, [of_pressure, of_temperature]: [f64; 2]) -> Option<f64> {
        let parts = [self.mach?, of_pressure * self.fill?, of_pressure * self.driver_pressure?, of_temperature * self.driver_temperature?];
        Some(libm::sqrt(parts.iter().map(|part| part * part).sum()))
    }
}
