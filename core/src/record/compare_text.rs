//! The text form of a comparison.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::compare::name;
use super::compare_report::{CompareReport, Spread};
use super::format::{significant, value_with_uncertainty};
use super::hazard::CAUTIONS;
use super::page::{Page, row};
use super::plan::{Plan, Target};
use super::plan_text::units;
use super::quantity::Quantity;
use super::report::ReportQuantity;
use super::text::DisplayUnits;
use super::unit::Unit;
use crate::shot::{LEVEL_TWO_SIGMA, coverage_factor};

/// The code of the caution that stands before the first pressure.
const FIRST: &str = "can-burn";

pub(super) fn render(report: &CompareReport, plan: &Plan) -> String {
    let mut page = Page::default();
    let units = units(plan);
    let plan_name = if report.plan.name.is_empty() { "without a name" } else { report.plan.name.as_str() };
    let shots = if report.shots.len() == 1 { "one past shot".to_string() } else { format!("{} past shots", report.shots.len()) };
    page.line(&format!("Plan {plan_name} against {shots}"));
    page.heading("Shots");
    for flag in report.flags.iter().filter(|flag| flag.code == FIRST) {
        page.paragraph("! ", &format!("[{}] {}", flag.code, flag.text));
    }
    table(&mut page, report, plan, units);
    page.heading("Over these shots");
    means(&mut page, report, plan);
    page.heading("To put back into the plan");
    ready(&mut page, report);
    flags(&mut page, report);
    page.heading("Before anybody acts on these numbers");
    for caution in CAUTIONS {
        page.paragraph("- ", caution);
    }
    page.heading("Made by");
    page.line(&format!("endwall {}; gas data: {}", report.made_by.version, report.made_by.gas_data));
    page.line(&format!("plan file {}", report.made_by.input_digest));
    for shot in &report.shots {
        page.line(&format!("record file {}, shot {}", shot.input_digest, name(shot)));
    }
    page.text
}

/// Hundredths of a per cent, with the sign.
fn percent(departure: f64) -> String {
    format!("{:+.2} %", departure * 100.0)
}

fn typed(quantity: Option<&Quantity>) -> String {
    quantity.map_or("-".to_string(), |quantity| quantity.typed().to_string())
}

fn table(page: &mut Page, report: &CompareReport, plan: &Plan, units: DisplayUnits) {
    let wanted = &report.plan;
    let is_step = matches!(plan.target, Target::Step { .. });
    let exactly = |quantity: &ReportQuantity| units.show(&ReportQuantity { expanded: None, ..quantity.clone() });
    let last = |cell: String, step: String| if is_step { [cell, step] } else { [cell, String::new()] };
    let [pressure, step] = last("p5".to_string(), "step".to_string());
    let mut rows =
        alloc::vec![row(["shot", "shock speed", "", "Mach", "ideal", "efficiency", "attenuation", "p1", "p4", "T5", &pressure, &step])];
    let [pressure, step] = last(units.pressure(wanted.pressure.value), units.pressure(wanted.step.value));
    rows.push(row([
        "wanted",
        &exactly(&wanted.speed),
        "",
        &significant(wanted.mach.value, 5),
        "",
        &typed(plan.efficiency.as_ref()),
        &typed(plan.attenuation.as_ref()),
        &units.pressure(wanted.fill.value),
        &wanted.driver_pressure.as_ref().map_or("-".to_string(), |p4| units.pressure(p4.value)),
        &exactly(&wanted.temperature),
        &pressure,
        &step,
    ]));
    for shot in &report.shots {
        let off = &shot.departure;
        let counted = |quantity: Option<&ReportQuantity>, counts: bool| match quantity {
            None => "-".to_string(),
            Some(quantity) if counts => units.show(quantity),
            Some(quantity) => format!("({})", units.show(quantity)),
        };
        let [pressure, step] = last(percent(off.pressure), percent(off.step));
        rows.push(row([
            name(shot),
            &units.show(&shot.speed),
            &percent(off.speed),
            &significant(shot.mach.value, 5),
            &shot.ideal_mach.as_ref().map_or("-".to_string(), |mach| significant(mach.value, 5)),
            &counted(shot.efficiency.as_ref(), shot.counts.efficiency),
            &counted(shot.attenuation.as_ref(), shot.counts.attenuation),
            &percent(off.fill),
            &off.driver_pressure.map_or("-".to_string(), percent),
            &percent(off.temperature),
            &pressure,
            &step,
        ]));
    }
    page.table(&rows);
    page.paragraph("", "Speed, Mach number and efficiency are those at the end wall; per cent are measured over wanted less 1. Behind ± stands the expanded uncertainty, as in the report of each shot. What stands in parentheses does not count; a flag says why.");
}

fn means(page: &mut Page, report: &CompareReport, plan: &Plan) {
    let mut rows = alloc::vec![row(["", "mean", "scatter", "next shot", "stated", "shots", "degrees of freedom", "in the plan"])];
    let tolerance = &plan.tolerance;
    for (title, spread, unit, in_plan) in [
        ("efficiency", &report.efficiency, None, &plan.efficiency),
        ("attenuation", &report.attenuation, Unit::find("%/m"), &plan.attenuation),
        ("speed over the wanted one, less 1", &report.speed, Unit::find("%"), &tolerance.speed),
        ("fill over the wanted one, less 1", &report.fill, Unit::find("%"), &tolerance.fill),
    ] {
        let Some(spread) = spread else { continue };
        let in_unit = |value: Option<f64>| value.map_or("not known".to_string(), |value| short(value, unit));
        let Spread { mean, standard_deviation, next, stated, shots, degrees_of_freedom } = spread;
        rows.push(row([
            title,
            &value_with_uncertainty(mean.value, mean.expanded, unit),
            &in_unit(*standard_deviation),
            &in_unit(*next),
            &in_unit(*stated),
            &shots.to_string(),
            &degrees_of_freedom.to_string(),
            &typed(in_plan.as_ref()),
        ]));
    }
    if rows.len() == 1 {
        page.line("No shot counts.");
        return;
    }
    page.table(&rows);
    page.paragraph("", "Plain means: behind ± of a mean stands its expanded uncertainty with Student's factor (JCGM 100, G.3). Scatter is the sample standard deviation s from shot to shot; next shot is the standard uncertainty with which the mean foretells one more shot, the root of s² + s²/n; stated is the root mean square of the standard uncertainties that the shots state. Weights would follow stated uncertainties, of which errors of the stations and gauges are a part; they are the same in every shot, do not scatter, and no mean makes them smaller.");
}

/// Two figures in a unit.
fn short(value: f64, unit: Option<Unit>) -> String {
    match unit {
        None => significant(value, 2),
        Some(unit) => format!("{} {}", significant(value / unit.ratio().to_f64(), 2), unit.symbol()),
    }
}

fn ready(page: &mut Page, report: &CompareReport) {
    let lines = report.ready.lines();
    if lines.is_empty() {
        page.line("Nothing: the flags say why.");
        return;
    }
    for line in lines {
        page.line(&format!("  {line},"));
    }
    page.paragraph("", "Behind ± stands a standard uncertainty here, as a plan reads it: of the efficiency that of the next shot; of the attenuation that of the next shot, or what the shots state if that is more; tolerance.speed is the scatter of the measured speed, with what measuring it adds; tolerance.fill the scatter of p1 together with its stated uncertainty. An error that all shots share, such as that of a gauge, stays in the efficiency, and drops out if the next shot is set with the same instruments.");
    let freedom = report.efficiency.as_ref().filter(|spread| (1..10).contains(&spread.degrees_of_freedom));
    if let Some(factor) = freedom.and_then(|spread| coverage_factor(LEVEL_TWO_SIGMA, spread.degrees_of_freedom as f64).ok()) {
        page.paragraph("", &format!(
            "These are few shots: where a plan takes twice the standard uncertainty of the efficiency for its band of p4, 95 % would need {} times.",
            significant(factor, 2)
        ));
    }
}

fn flags(page: &mut Page, report: &CompareReport) {
    page.heading("Flags");
    let mut lines: Vec<(String, String)> = Vec::new();
    for flag in report.flags.iter().filter(|flag| flag.code != FIRST) {
        lines.push(("! ".to_string(), format!("[{}] {}", flag.code, flag.text)));
    }
    for shot in &report.shots {
        for flag in &shot.flags {
            lines.push(("! ".to_string(), format!("{}: [{}] {}", name(shot), flag.code, flag.text)));
        }
    }
    for shot in &report.shots {
        let codes: Vec<&str> = shot.report_flags.iter().map(|flag| flag.code.as_str()).filter(|code| *code != FIRST).collect();
        if !codes.is_empty() {
            lines.push(("  ".to_string(), format!("{}: endwall reduce explains {}", name(shot), codes.join(", "))));
        }
    }
    if lines.is_empty() {
        page.line(if report.flags.is_empty() { "none" } else { "none but the caution above" });
    }
    for (mark, text) in lines {
        page.paragraph(&mark, &text);
    }
}
