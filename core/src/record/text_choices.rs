//! The choices of heat capacity as text.

use alloc::format;
use alloc::string::{String, ToString};

use super::format::{shortest, significant};
use super::page::{Page, row};
use super::report::{HeatCapacityChoice, ReportQuantity};
use super::shot::Shot;
use super::text::DisplayUnits;

/// The choices side by side, and how long vibration takes.
pub(super) fn heat_capacity(choice: &HeatCapacityChoice, shot: &Shot) -> String {
    let mut page = Page::default();
    if !choice.beside.is_empty() {
        choices(&mut page, choice, DisplayUnits::of(shot));
    }
    page.text
}

/// As a section of a page.
pub(super) fn choices(page: &mut Page, choice: &HeatCapacityChoice, units: DisplayUnits) {
    let mut rows = alloc::vec![row(["heat capacity", "T2", "T5", "p5", "T5 against the chosen"])];
    let chosen = choice.beside.iter().find(|other| other.heat_capacity == choice.chosen);
    let chosen = chosen.and_then(|other| other.temperature.as_ref()).map(|temperature| temperature.value);
    for other in &choice.beside {
        let shown = |quantity: &Option<ReportQuantity>| quantity.as_ref().map_or("no answer".to_string(), |quantity| units.show(quantity));
        let difference = match (chosen, &other.temperature) {
            _ if other.heat_capacity == choice.chosen => "chosen".to_string(),
            (Some(chosen), Some(own)) => {
                let percent = format!("{:+.2} %", 100.0 * (own.value / chosen - 1.0));
                if percent == "-0.00 %" { "+0.00 %".to_string() } else { percent }
            }
            _ => String::new(),
        };
        rows.push(row([
            other.heat_capacity,
            &shown(&other.temperature_2),
            &shown(&other.temperature),
            &shown(&other.pressure),
            &difference,
        ]));
    }
    page.table(&rows);
    page.paragraph(
        "",
        "All at the same shock speed. The spread of the choices is a question of the model: it is no uncertainty and is not added to one.",
    );
    if choice.beside.iter().any(|other| other.temperature.is_none()) {
        page.paragraph("", "No answer: the states leave the data of the gas, or the wave is no shock with that heat capacity.");
    }
    if choice.relaxation.is_empty() {
        return;
    }
    page.line("");
    let time = |seconds: Option<f64>| seconds.map_or("-".to_string(), relaxation_time);
    let mut rows = alloc::vec![row(["vibrational relaxation time", "in state 2", "in state 5", "known within a factor of"])];
    for relaxing in &choice.relaxation {
        rows.push(row([&relaxing.species, &time(relaxing.incident), &time(relaxing.reflected), &shortest(relaxing.factor)]));
    }
    page.table(&rows);
    page.paragraph("", &nearer(choice));
}

/// What the relaxation times say about the choice.
fn nearer(choice: &HeatCapacityChoice) -> String {
    let times = || choice.relaxation.iter().filter_map(|relaxing| relaxing.reflected);
    let (quickest, slowest) = (times().fold(f64::INFINITY, f64::min), times().fold(0.0, f64::max));
    let frozen = if quickest < SHORTEST {
        String::new()
    } else {
        format!("is over well before {} sees vibration frozen, one that ", relaxation_time(quickest))
    };
    let between =
        if quickest >= SHORTEST && quickest < slowest { "; between them some molecules have relaxed and others have not" } else { "" };
    format!(
        "An observation of state 5 that {frozen}begins well after {} sees vibration in equilibrium{between}. Where a time in state 2 is much longer than the gas spends there, \"frozen then equilibrium\" is nearer than \"equilibrium\". Times by the empirical formula of Millikan and White (1963); a molecule that is not listed has none by it.",
        relaxation_time(slowest.max(SHORTEST))
    )
}

/// Below a nanosecond the digits of the formula, which was made for microseconds and longer, mean nothing, s.
const SHORTEST: f64 = 1e-9;

fn relaxation_time(seconds: f64) -> String {
    let unit = [(1.0, "s"), (1e-3, "ms"), (1e-6, "us"), (SHORTEST, "ns")].into_iter().find(|(unit, _)| seconds >= *unit);
    unit.map_or("less than 1 ns".to_string(), |(unit, symbol)| format!("{} {symbol}", significant(seconds / unit, 2)))
}
