//! The answer as a table.

use std::fmt::Write;

use endwall::number::Enclosure;
use endwall::record::{Flag, ReportQuantity, ReportState, Unit};

use super::answer::Answer;
use super::input::{Input, Wall};
use crate::output::{columns, paragraph};

/// Significant digits of the ends of a range, which are rounded outward.
const RANGE_DIGITS: usize = 6;

/// One quantity of a state.
type Of = fn(&ReportState) -> &ReportQuantity;

/// How numbers are written.
struct Style {
    digits: usize,
    /// Some input is a range.
    range: bool,
    pressure: Unit,
}

pub fn render(answer: &Answer, input: &Input, digits: usize) -> String {
    let Some(pascal) = Unit::find("Pa") else { return String::new() };
    // In the writer's unit where that is exact to the last digit or nearly: gauges are read in it.
    let typed = input.shot.fill.pressure.unit();
    let style = Style { digits, range: input.has_range(), pressure: if typed.has_offset() { pascal } else { typed } };
    let mut page = match &input.constant {
        Some(_) => String::from("Quick look at one shock: ideal gas of constant heat capacity, normal shock, reflected from "),
        None => {
            format!("Quick look at one shock: ideal gas, heat capacity {}, normal shock, reflected from ", input.shot.heat_capacity.name())
        }
    };
    page.push_str(match input.wall {
        None => "a rigid end wall\n\n",
        Some(Wall::Speed(_)) => "a moving end wall\n\n",
        Some(Wall::Impedance(_)) => "a yielding end wall\n\n",
    });
    let (first, others): (Vec<&Flag>, Vec<&Flag>) = answer.flags.iter().partition(|flag| flag.code == "can-burn");
    for flag in first {
        page.push_str(&noted(flag));
        page.push('\n');
    }
    page.push_str(&columns(&states(answer, &style)));
    page.push('\n');
    page.push_str(&columns(&waves(answer, &style)));
    let choices = answer.heat_capacity.to_text(&input.shot);
    if !choices.is_empty() {
        page.push('\n');
        page.push_str(&choices);
    }
    for flag in others {
        page.push('\n');
        page.push_str(&noted(flag));
    }
    let _ = write!(page, "\n{}\n", paragraph(&digits_statement(&style)));
    let _ = write!(page, "\n{}", paragraph(CAUTION));
    page
}

/// A flag as a paragraph.
fn noted(flag: &Flag) -> String {
    paragraph(&format!("! [{}] {}", flag.code, flag.text)) + "\n"
}

const CAUTION: &str = "Caution: for screening only; ratings are not checked here, and no number here authorises a shot.";

fn digits_statement(style: &Style) -> String {
    let what = if style.range {
        format!(
            "Arithmetic: each pair of numbers, rounded outward to {RANGE_DIGITS} digits, is proven to enclose the answers of the equations for every \
             choice of inputs inside the typed ranges."
        )
    } else {
        format!(
            "Arithmetic: the inputs are taken exactly as typed, and each number has at most {} digits, to which the exact answer of the equations \
             is proven to round.",
            style.digits
        )
    };
    what + " This is a statement about arithmetic only: it says nothing about the gas in the tube, and there is no measurement uncertainty in it (for \
        that: endwall reduce)."
}

fn states(answer: &Answer, style: &Style) -> Vec<Vec<String>> {
    let quantities: [(String, Of); 5] = [
        (format!("pressure, {}", pressure_label(style)), |state| &state.pressure),
        ("temperature, K".into(), |state| &state.temperature),
        ("density, kg/m3".into(), |state| &state.density),
        ("sound speed, m/s".into(), |state| &state.sound_speed),
        ("gas speed, m/s".into(), |state| &state.gas_speed),
    ];
    let columns = [&answer.states.fill, &answer.states.incident, &answer.states.reflected];
    let mut rows = vec![["", "1 fill", "2 incident", "5 reflected"].map(String::from).to_vec()];
    for (name, of) in quantities {
        let mut row = vec![name];
        row.extend(columns.map(|state| style.show(of(state))));
        rows.push(row);
    }
    rows
}

fn waves(answer: &Answer, style: &Style) -> Vec<Vec<String>> {
    let lines = [
        ("incident shock speed, m/s".into(), &answer.incident.speed),
        ("incident Mach number".into(), &answer.incident.mach),
        ("reflected shock speed U_R in the laboratory, m/s".into(), &answer.reflected.speed),
        ("reflected Mach number M_R relative to gas 2".into(), &answer.reflected.mach),
        (format!("step p5 - p1, {}", style.pressure.symbol()), &answer.step),
        ("reflected-pressure coefficient (p5 - p1)/(p2 - p1)".into(), &answer.reflected_pressure_coefficient),
    ];
    lines.into_iter().map(|(name, quantity): (String, _)| vec![name, style.show(quantity)]).collect()
}

fn pressure_label(style: &Style) -> String {
    format!("{} (absolute)", style.pressure.symbol())
}

impl Style {
    fn show(&self, quantity: &ReportQuantity) -> String {
        let Some(bounds) = quantity.proven.and_then(|[low, high]| Enclosure::new(low, high)) else {
            return "not found".into();
        };
        let bounds =
            if quantity.unit == "Pa" && self.pressure.symbol() != "Pa" { bounds / Enclosure::from(self.pressure.ratio()) } else { bounds };
        if bounds == Enclosure::from(0.0) {
            "0".into()
        } else if self.range {
            format!("{bounds:.RANGE_DIGITS$}")
        } else {
            format!("{:.*}", self.digits, bounds.proven_digits())
        }
    }
}
