//! The filling steps as text.

use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use super::format::{significant, value_with_uncertainty};
use super::page::{Page, row};
use super::plan_report::PlanReport;
use super::report::ReportQuantity;
use super::text::DisplayUnits;
use super::unit::Unit;

/// The caution that stands before every reading.
const BURNS: &str = "This mixture can burn while it is made and as long as it is kept. The pressures below are for the unburnt gas, and burning or detonation exceeds them several times: a rating above them says nothing of that.";

/// Flags that stand before the readings, since they speak against filling like this.
pub(super) const FIRST: [&str; 2] = ["undiluted-while-filling", "acetylene"];

pub(super) fn section(page: &mut Page, report: &PlanReport, units: DisplayUnits) {
    let Some(filling) = &report.filling else { return };
    page.heading("Filling steps");
    if filling.can_burn {
        page.paragraph("! ", BURNS);
    }
    for flag in report.flags.iter().filter(|flag| FIRST.contains(&flag.code.as_str())) {
        page.paragraph("! ", &format!("[{}] {}", flag.code, flag.text));
    }
    page.line(&format!("Made in the {} at {} K", filling.vessel, significant(filling.temperature, 6)));
    let on_gauge = filling.steps.iter().any(|step| step.gauge_reading.is_some());
    let mut rows: Vec<Vec<String>> =
        alloc::vec![row(["step", "gas", "adds", "read, absolute", "read on a gauge", "fraction in the vessel"])];
    for (number, step) in filling.steps.iter().enumerate() {
        let gauge = step.gauge_reading.map_or(String::new(), |reading| units.show(&pressure(reading, &step.reading)));
        rows.push(row([
            &format!("{}", number + 1),
            &step.gas,
            &units.show(&step.partial_pressure),
            &units.show(&step.reading),
            &gauge,
            &percent(&step.fraction),
        ]));
    }
    if !on_gauge {
        for cells in &mut rows {
            cells.remove(4);
        }
    }
    page.table(&rows);
    if let Some(left) = &filling.residual {
        page.paragraph(
            "",
            &format!(
                "The pump left {} Pa, taken as air: {} of the mixture. It is counted in the fractions above; the states are those of the gas without it.",
                significant(left.pressure.value, 3),
                percent(&left.fraction)
            ),
        );
    }
    page.paragraph(
        "",
        "Partial pressures of ideal gases at one temperature: after each gas wait until it has the temperature of the vessel, then read; the reading is that of all gases so far. Let the mixture diffuse before it is used.",
    );
    if filling.steps.iter().any(|step| step.fraction.expanded.is_some()) {
        page.paragraph(
            "",
            "Behind ± stands the expanded uncertainty (k=2) from the readings of the gauge, each with an error of its own; an error in proportion that all readings share cancels. For the states to have it too, type it beside the fractions in gas.",
        );
    }
}

fn pressure(value: f64, like: &ReportQuantity) -> ReportQuantity {
    ReportQuantity { value, proven: None, ..like.clone() }
}

fn percent(fraction: &ReportQuantity) -> String {
    value_with_uncertainty(fraction.value, fraction.expanded, Unit::find("%"))
}
