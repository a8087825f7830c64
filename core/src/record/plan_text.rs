//! The text form of a plan.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::filling_report::LOAD;
use super::filling_text;
use super::flag::Flag;
use super::format::significant;
use super::hazard::CAUTIONS;
use super::optional::PARTS;
use super::page::{Page, row};
use super::plan::{Plan, Target};
use super::plan_report::PlanReport;
use super::text::DisplayUnits;
use super::text_choices::choices;
use super::time_text;

pub(super) fn render(report: &PlanReport, plan: &Plan) -> String {
    let mut page = Page::default();
    let units = units(plan);
    let name = if plan.name.is_empty() { "without a name" } else { plan.name.as_str() };
    page.line(&format!("Plan {name}: what to set for a wanted state at the end wall"));
    limits(&mut page, report, plan, units);
    set(&mut page, report, plan, units);
    filling_text::section(&mut page, report, units);
    expected(&mut page, report, units);
    page.heading("Flags");
    let mut others = report.flags.iter().filter(|flag| !is_above(flag)).peekable();
    if others.peek().is_none() {
        page.line(if report.flags.is_empty() { "none" } else { "none but those above" });
    }
    for flag in others {
        page.paragraph("! ", &format!("[{}] {}", flag.code, flag.text));
    }
    states(&mut page, report, units);
    if !report.heat_capacity.beside.is_empty() {
        page.heading("Choice of the heat capacity");
        choices(&mut page, &report.heat_capacity, units);
    }
    waves(&mut page, report);
    page.heading("Before anybody acts on these numbers");
    for caution in CAUTIONS.iter().filter(|caution| !tube_is_rated(report) || !caution.starts_with("Ratings are not checked")) {
        page.paragraph("- ", caution);
    }
    page.heading("Made by");
    page.line(&format!("endwall {}; gas data: {}", report.made_by.version, report.made_by.gas_data));
    page.line(&format!("record file {}", report.made_by.input_digest));
    page.text
}

/// Pressures in the unit of the target.
pub(super) fn units(plan: &Plan) -> DisplayUnits {
    DisplayUnits::like(match &plan.target {
        Target::State { pressure, .. } => pressure.0.unit(),
        Target::Step { step, .. } => step.unit(),
    })
}

/// Cautions that stand before every pressure.
const FIRST: [&str; 4] = ["rating-exceeded", "can-burn", "over-tailored-unchecked", "diaphragm-holds"];

/// False where nothing but the filling is compared with a rating.
fn tube_is_rated(report: &PlanReport) -> bool {
    report.limits.iter().any(|line| line.load != LOAD)
}

/// True for a flag that stands beside the pressures of which it warns.
fn is_above(flag: &Flag) -> bool {
    FIRST.contains(&flag.code.as_str()) || filling_text::FIRST.contains(&flag.code.as_str())
}

/// Exceeded ratings come before every pressure that is to be set.
fn limits(page: &mut Page, report: &PlanReport, plan: &Plan, units: DisplayUnits) {
    page.heading("Ratings");
    for flag in report.flags.iter().filter(|flag| FIRST.contains(&flag.code.as_str())) {
        page.paragraph("! ", &format!("[{}] {}", flag.code, flag.text));
    }
    if report.limits.is_empty() {
        page.line("ratings not checked: the record gives none that a pressure of this plan acts on");
    } else {
        let mut rows = alloc::vec![row(["part", "load", "upper end", "rating", ""])];
        for line in &report.limits {
            let verdict = match (line.exceeded, line.load.as_str()) {
                (false, _) => "within",
                (true, LOAD) => "EXCEEDED: do not fill",
                (true, _) => "EXCEEDED: do not fire",
            };
            rows.push(row([&line.part, &line.load, &units.pressure(line.pressure), &units.pressure(line.rating), verdict]));
        }
        page.table(&rows);
        let unchecked = unchecked(report, plan);
        if !tube_is_rated(report) {
            page.line("tube ratings not checked: the record gives none");
        } else if !unchecked.is_empty() {
            page.paragraph("", &format!("Not checked: {unchecked}."));
        }
        page.paragraph("", "Pressures and ratings are absolute; without a stated uncertainty the upper end is the value itself. A rating is a gauge value at room temperature as marked on the part; whether it holds for a sudden load is for the person who rated it to say.");
    }
}

/// Parts that no line compares, with the reason.
fn unchecked(report: &PlanReport, plan: &Plan) -> String {
    let rated = |part: &str| plan.tube.iter().flat_map(|tube| &tube.ratings).any(|rating| rating.part == part);
    let compared = |part: &str| report.limits.iter().any(|line| line.part == part);
    let why = |part: &str| if rated(part) { "no pressure is planned for it" } else { "no rating is given" };
    let parts: Vec<String> = PARTS.iter().filter(|part| !compared(part)).map(|part| format!("{part} ({})", why(part))).collect();
    parts.join(", ")
}

fn set(page: &mut Page, report: &PlanReport, plan: &Plan, units: DisplayUnits) {
    page.heading("Set");
    let mut rows = alloc::vec![row(["Driven fill p1", &units.show(&report.fill.p1)])];
    if let Some(p4) = &report.fill.p4 {
        rows.push(row(["Driver pressure p4", &units.pressure(p4.value)]));
        if let Some(ambient) = plan.ambient_pressure() {
            rows.push(row(["  on a gauge at the ambient pressure", &units.pressure(p4.value - ambient)]));
        }
    }
    if let Some([low, high]) = report.fill.p4_band {
        let band = format!("{} to {}", units.pressure(low), units.pressure(high));
        rows.push(row(["  for the uncertainty of the efficiency (k=2)", &band]));
    }
    page.table(&rows);
    let model = match (&report.fill.p4, &plan.efficiency) {
        (Some(_), Some(_)) => "p1 follows from the shock relations; p4 is that of an ideal tube, raised for the efficiency of the record.",
        (Some(_), None) => "p1 follows from the shock relations; p4 is that of an ideal tube.",
        (None, _) => "p1 follows from the shock relations.",
    };
    page.paragraph("", &format!("Pressures are absolute unless a gauge is named. {model}"));
}

fn expected(page: &mut Page, report: &PlanReport, units: DisplayUnits) {
    page.heading("Wanted and expected");
    let burns = report.flags.iter().any(|flag| flag.code == "can-burn");
    let mut rows = alloc::vec![
        row(["Temperature T5", &units.show(&report.states.reflected.temperature)]),
        row([if burns { "Pressure p5, unburnt gas" } else { "Pressure p5" }, &units.show(&report.states.reflected.pressure)]),
        row(["Step p5 - p1", &units.show(&report.step)]),
        row(["Shock speed at the end wall", &units.show(&report.incident.speed)]),
        row(["Mach number", &units.show(&report.incident.mach)]),
    ];
    if let Some(speed) = report.first_station_speed {
        rows.push(row(["Shock speed at the first station", &format!("{} m/s", significant(speed, 4))]));
    }
    let (layer, bifurcation) = (report.boundary_layer.as_ref(), report.bifurcation.as_ref());
    rows.extend(report.tailoring.iter().flat_map(|tailoring| tailoring.rows(units)));
    rows.extend(time_text::rows(report.test_time.as_ref(), layer, bifurcation));
    if let Some(load) = report.end_load {
        rows.push(row([
            "Greatest load on the end wall (upper end of p5, or a returned shock)",
            &format!("{} kN at rest; suddenly applied it can act as twice that", significant(load / 1e3, 3)),
        ]));
    }
    if let Some(energy) = report.stored_energy {
        rows.push(row(["Stored energy of the driver at the upper end of p4", &format!("{} kJ", significant(energy / 1e3, 3))]));
    }
    page.table(&rows);
    page.paragraph("", &uncertainty(report));
    if let Some(remarks) = time_text::remarks(layer, bifurcation) {
        page.paragraph("", &remarks);
    }
}

/// What stands behind ±, or why nothing does.
fn uncertainty(report: &PlanReport) -> String {
    let five = &report.states.reflected;
    let factors = [&report.fill.p1, &five.temperature, &five.pressure, &report.incident.speed].map(|quantity| quantity.coverage_factor);
    if factors.iter().all(Option::is_none) {
        return "The record states no uncertainty and no tolerance, so none is given.".to_string();
    }
    let factor =
        if factors.iter().flatten().all(|k| *k == 2.0) { "k=2" } else { "k for about 95 %; it differs and stands in the JSON object" };
    format!(
        "Behind ± stands, here and below, the expanded uncertainty ({factor}) that follows from those of fill and gas in the record and from its tolerances."
    )
}

fn states(page: &mut Page, report: &PlanReport, units: DisplayUnits) {
    page.heading("States");
    let states = &report.states;
    let mut rows = alloc::vec![row(["", "1 fill", "2 incident", "5 reflected"])];
    for (name, of) in super::text::QUANTITIES {
        let [one, two, five] = [&states.fill, &states.incident, &states.reflected].map(|state| units.show(of(state)));
        rows.push(row([name, &one, &two, &five]));
    }
    page.table(&rows);
}

fn waves(page: &mut Page, report: &PlanReport) {
    if report.waves.is_empty() {
        return;
    }
    page.heading("Waves");
    let mut rows = alloc::vec![row(["wave", "from x", "t", "to x", "t"])];
    for wave in &report.waves {
        let [x0, t0] = wave.from;
        let [x1, t1] = wave.to;
        let metres = |x: f64| format!("{x:.3} m");
        let milliseconds = |t: f64| format!("{:.3} ms", t * 1e3);
        rows.push(row([&wave.name, &metres(x0), &milliseconds(t0), &metres(x1), &milliseconds(t1)]));
    }
    page.table(&rows);
    page.line("x from the diaphragm toward the end wall, t from its opening; ideal tube.");
}
