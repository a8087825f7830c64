//! The text form of a report.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::format::{shortest, significant, value_with_uncertainty};
use super::hazard::CAUTIONS;
use super::page::{Page, row};
use super::quantity::Mark;
use super::report::{Fit, Report, ReportQuantity, ReportState};
use super::shot::{Shot, Speed};
use super::text_choices::choices;
use super::time_text;
use super::unit::Unit;

pub(super) fn render(report: &Report, shot: &Shot) -> String {
    let mut page = Page::default();
    let units = DisplayUnits::of(shot);
    let name = if shot.name.is_empty() { "without a name" } else { shot.name.as_str() };
    page.line(&format!("Shot {name}: the gas behind the reflected shock at the end wall"));
    result(&mut page, report, units);
    flags(&mut page, report);
    input(&mut page, shot);
    if let Some(fit) = &report.fit {
        fit_section(&mut page, fit, report, shot);
    }
    states(&mut page, report, units);
    times(&mut page, report);
    if !report.heat_capacity.beside.is_empty() {
        page.heading("Choice of the heat capacity");
        choices(&mut page, &report.heat_capacity, units);
    }
    budget(&mut page, report);
    digits(&mut page, report);
    page.heading("Before anybody acts on these numbers");
    for caution in CAUTIONS {
        page.paragraph("- ", caution);
    }
    page.heading("Made by");
    let made_by = &report.made_by;
    page.line(&format!("endwall {}; gas data: {}", made_by.version, made_by.gas_data));
    let seed = made_by.seed.map_or("no random numbers were used".to_string(), |seed| format!("seed {seed}"));
    page.line(&format!("record file {}; {seed}", made_by.input_digest));
    page.text
}

/// Pressures in the writer's unit, so that the numbers can be compared with the gauges; kPa for the units of the pascal.
#[derive(Clone, Copy)]
pub(super) struct DisplayUnits {
    pressure: Option<Unit>,
}

/// The unit of the pressures of a shot.
pub(super) fn pressure_unit(shot: &Shot) -> Option<Unit> {
    displayed(shot.fill.pressure.unit())
}

fn displayed(typed: Unit) -> Option<Unit> {
    let metric = matches!(typed.symbol(), "Pa" | "hPa" | "kPa" | "MPa");
    if metric { Unit::find("kPa") } else { Some(typed) }
}

impl DisplayUnits {
    pub(super) fn of(shot: &Shot) -> Self {
        Self { pressure: pressure_unit(shot) }
    }

    /// With pressures in the unit of a typed one.
    pub(super) fn like(typed: Unit) -> Self {
        Self { pressure: displayed(typed) }
    }

    /// A pressure without uncertainty (Pa), to four figures: nobody sets or compares more.
    pub(super) fn pressure(self, value: f64) -> String {
        let symbol = self.pressure.map_or("Pa", Unit::symbol);
        format!("{} {symbol}", significant(self.pressure.map_or(value, |unit| value / unit.ratio().to_f64()), 4))
    }

    /// value ± U in display units.
    pub(super) fn show(self, quantity: &ReportQuantity) -> String {
        let unit = match quantity.unit {
            "Pa" => self.pressure,
            "1/m" => Unit::find("%/m"),
            other => Unit::find(other),
        };
        let shown = value_with_uncertainty(quantity.value, quantity.expanded, unit);
        // Units that no record uses are written as they are.
        if unit.is_none() && quantity.unit != "1" { format!("{shown} {}", quantity.unit) } else { shown }
    }

    /// With the coverage factor behind it.
    fn show_with_factor(self, quantity: &ReportQuantity) -> String {
        let factor = quantity.coverage_factor.map_or(String::new(), |k| format!(" (k={})", coverage_factor(k)));
        self.show(quantity) + &factor
    }
}

/// Two decimals at most.
fn coverage_factor(k: f64) -> String {
    let text = format!("{k:.2}");
    text.trim_end_matches('0').trim_end_matches('.').to_string()
}

/// The code of the caution that stands before the first pressure.
const FIRST: &str = "can-burn";

fn result(page: &mut Page, report: &Report, units: DisplayUnits) {
    page.heading("Result");
    for flag in report.flags.iter().filter(|flag| flag.code == FIRST) {
        page.paragraph("! ", &format!("[{}] {}", flag.code, flag.text));
    }
    let burns = report.flags.iter().any(|flag| flag.code == FIRST);
    let state = &report.states.reflected;
    page.table(&[
        row([if burns { "Pressure p5, unburnt gas" } else { "Pressure p5" }, &units.show_with_factor(&state.pressure)]),
        row(["Temperature T5", &units.show_with_factor(&state.temperature)]),
        row(["Step p5 - p1", &units.show_with_factor(&report.step)]),
        row(["Incident shock speed", &units.show_with_factor(&report.incident.speed)]),
    ]);
    page.paragraph("", "Pressures are absolute. Behind ± stands the expanded uncertainty U = k times the combined standard uncertainty (JCGM 100). It covers the inputs stated in the record; it does not cover the choice of the model.");
}

fn flags(page: &mut Page, report: &Report) {
    page.heading("Flags");
    let others = || report.flags.iter().filter(|flag| flag.code != FIRST);
    if others().next().is_none() {
        page.line(if report.flags.is_empty() { "none" } else { "none but the caution above" });
    }
    for flag in others() {
        page.paragraph("! ", &format!("[{}] {}", flag.code, flag.text));
    }
}

fn input(page: &mut Page, shot: &Shot) {
    page.heading("Input, in the order of the record");
    let mut rows = alloc::vec![row(["field", "as typed", "SI value", "standard uncertainty"])];
    for entry in &shot.entries {
        let (value, spread) = match &entry.quantity {
            None => (String::new(), String::new()),
            Some(quantity) => {
                let unit = match quantity.dimension().si_unit() {
                    "1" => String::new(),
                    unit => format!(" {unit}"),
                };
                let spread = quantity.uncertainty().map_or("not stated".to_string(), |uncertainty| {
                    let freedom = uncertainty.degrees_of_freedom.map_or(String::new(), |dof| format!(" (dof {dof})"));
                    format!("{}{unit}{freedom}", significant(uncertainty.standard, 3))
                });
                let gauge = if quantity.mark() == Mark::Gauge { " (gauge)" } else { "" };
                (format!("{}{unit}{gauge}", shortest(quantity.value().to_f64())), spread)
            }
        };
        rows.push(row([&entry.path, &entry.typed, &value, &spread]));
    }
    page.table(&rows);
    page.paragraph("", "A number behind ± in the record is read as a standard uncertainty, unless (k=...) or (limits) follows it: then it is divided by k or by the square root of 3.");
}

fn fit_section(page: &mut Page, fit: &Fit, report: &Report, shot: &Shot) {
    page.heading("Fit of the arrival times");
    let stations: &[super::Station] = if let Speed::Stations(stations) = &shot.speed { stations } else { &[] };
    let mut rows = alloc::vec![row(["station", "from end wall", "residual", "standardised", "speed without it", "chi-squared without it"])];
    for line in &fit.stations {
        let distance = stations.iter().find(|station| station.name == line.name).map_or("", |station| station.from_end_wall.typed());
        let without = fit.without.iter().find(|left_out| left_out.name == line.name);
        rows.push(row([
            &line.name,
            distance,
            &format!("{:+.3} us", line.residual * 1e6),
            &line.standardised.map_or("no check".to_string(), |value| format!("{value:+.2}")),
            &without.map_or("-".to_string(), |left_out| format!("{} m/s", significant(left_out.speed, 6))),
            // With no degree of freedom left it is zero but for rounding.
            &without.filter(|_| fit.degrees_of_freedom > 1).map_or("-".to_string(), |left_out| chi_squared(left_out.chi_squared)),
        ]));
    }
    page.table(&rows);
    let freedom = fit.degrees_of_freedom;
    let plural = if freedom == 1 { "" } else { "s" };
    page.line(&format!("chi-squared {} with {freedom} degree{plural} of freedom", chi_squared(fit.chi_squared)));
    if freedom == 0 {
        page.line("No check of the times is possible: every observation is used up by the fit.");
    } else if freedom == 1 {
        page.line("With one degree of freedom all standardised residuals are equal in size; they single out no station.");
    }
    if let Some(attenuation) = &report.incident.attenuation {
        let correlation = fit.speed_attenuation_correlation.map_or(String::new(), |r| format!("; correlation with the speed {r:.2}"));
        let shown = DisplayUnits { pressure: None }.show_with_factor(attenuation);
        page.line(&format!("attenuation {shown}{correlation}"));
    }
}

fn chi_squared(value: Option<f64>) -> String {
    value.map_or("not known".to_string(), |value| significant(value, 3))
}

/// One quantity of a state.
type Of = fn(&ReportState) -> &ReportQuantity;

/// The quantities of a state in the order of the tables.
pub(super) const QUANTITIES: [(&str, Of); 5] = [
    ("pressure", |state| &state.pressure),
    ("temperature", |state| &state.temperature),
    ("density", |state| &state.density),
    ("sound speed", |state| &state.sound_speed),
    ("gas speed", |state| &state.gas_speed),
];

fn states(page: &mut Page, report: &Report, units: DisplayUnits) {
    page.heading("States");
    let columns: [&ReportState; 3] = [&report.states.fill, &report.states.incident, &report.states.reflected];
    let mut rows = alloc::vec![row(["value ± U (k)", "1 fill", "2 incident", "5 reflected"])];
    for (name, of) in QUANTITIES {
        let [one, two, five] = columns.map(|state| units.show_with_factor(of(state)));
        rows.push(row([name, &one, &two, &five]));
    }
    page.table(&rows);
    page.line("");
    page.table(&[
        row(["Mach number of the incident shock", &units.show_with_factor(&report.incident.mach)]),
        row(["Reflected shock, speed in the laboratory", &units.show_with_factor(&report.reflected.speed)]),
        row(["Reflected shock, Mach number relative to gas 2", &units.show_with_factor(&report.reflected.mach)]),
    ]);
}

fn times(page: &mut Page, report: &Report) {
    let (layer, bifurcation) = (report.boundary_layer.as_ref(), report.bifurcation.as_ref());
    let rows = time_text::rows(report.test_time.as_ref(), layer, bifurcation);
    if !rows.is_empty() {
        page.heading("How long state 5 lasts");
        page.table(&rows);
        if let Some(remarks) = time_text::remarks(layer, bifurcation) {
            page.paragraph("", &remarks);
        }
    }
}

/// What an uncertainty without a unit is an uncertainty of.
const REMARKS: [(&str, &str); 2] = [
    ("composition", "Composition: mole fractions, each with its stated uncertainty; the line shows the root of the sum of their squares."),
    ("gas data", "Gas data: relative, of the part of the heat capacity that exceeds translation and rotation."),
];

fn budget(page: &mut Page, report: &Report) {
    page.heading("Uncertainty budget");
    if report.budget.is_empty() {
        page.line("The record states no uncertainty, so none is given.");
        return;
    }
    let percent = |share: Option<f64>| share.map_or("-".to_string(), |share| format!("{:.1} %", share * 100.0));
    let mut rows = alloc::vec![row(["input", "standard uncertainty", "share of T5", "share of p5", "share of step"])];
    for line in &report.budget {
        let unit = if line.unit == "1" { String::new() } else { format!(" {}", line.unit) };
        rows.push(row([
            &line.input,
            &(significant(line.standard_uncertainty, 3) + &unit),
            &percent(line.share.temperature),
            &percent(line.share.pressure),
            &percent(line.share.step),
        ]));
    }
    page.table(&rows);
    page.paragraph("", "Shares are of variance; sensitivities are taken at a given shock speed, not at a given Mach number.");
    for (input, remark) in REMARKS {
        if report.budget.iter().any(|line| line.input == input) {
            page.paragraph("", remark);
        }
    }
    if let Some(correlation) = report.correlation.temperature_pressure {
        page.line(&format!("Correlation of T5 and p5: {correlation:.3}. They share inputs; combine them with it."));
    }
}

/// The enclosures, apart from everything measured.
fn digits(page: &mut Page, report: &Report) {
    page.heading("Digits of the arithmetic");
    page.paragraph("", "The exact answer of the equations, for the nominal inputs exactly as typed (a fitted speed: exactly as printed below), is proven to lie between the two numbers of each line, in SI units. This concerns the arithmetic alone: it says nothing about the gas in the tube.");
    let mut rows = Vec::new();
    let states = &report.states;
    for (state, number) in [(&states.fill, 1), (&states.incident, 2), (&states.reflected, 5)] {
        for (letter, quantity) in
            [("p", &state.pressure), ("T", &state.temperature), ("rho", &state.density), ("a", &state.sound_speed), ("u", &state.gas_speed)]
        {
            enclosure(&mut rows, &format!("{letter}{number}"), quantity);
        }
    }
    enclosure(&mut rows, "p5 - p1", &report.step);
    enclosure(&mut rows, "incident Mach number", &report.incident.mach);
    enclosure(&mut rows, "reflected shock speed", &report.reflected.speed);
    enclosure(&mut rows, "reflected Mach number", &report.reflected.mach);
    page.table(&rows);
    page.line(&format!("at the shock speed {} m/s", shortest(report.incident.speed.value)));
}

fn enclosure(rows: &mut Vec<Vec<String>>, name: &str, quantity: &ReportQuantity) {
    let Some([low, high]) = quantity.proven else { return };
    let unit = if quantity.unit == "1" { "" } else { quantity.unit };
    let between = if low == high { "exactly".to_string() } else { shortest(low) };
    rows.push(row([name, &between, &shortest(high), unit]));
}
