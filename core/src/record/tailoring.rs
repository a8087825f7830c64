//! What the contact surface does with the reflected shock, and what this driver would tailor.

use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use serde::Serialize;

use super::driver::two_gases;
use super::format::significant;
use super::optional::Driver as DriverRecord;
use super::page::row;
use super::report::{ReportQuantity, computed};
use super::text::DisplayUnits;
use crate::number::{Enclosure, Rational};
use crate::tube::{BehindShock, Contact, ContactWaves, Driver, Tailoring, tailored_blend};

/// The reflected shock at the contact surface of an ideal tube.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct PlannedTailoring {
    /// What comes back from the contact surface: `shock`, `expansion` or `nothing`.
    pub returned: &'static str,
    /// Pressure at the contact surface behind that wave, Pa; `None` where it is not proven.
    pub contact_pressure: Option<ReportQuantity>,
    /// Pressure at the end wall once that wave has reflected there, Pa; `None` where it is not proven.
    pub end_wall_pressure: Option<ReportQuantity>,
    /// The Mach number that this driver tailors in this gas; `None` where there is none, or none within the data.
    pub tailored_mach: Option<ReportQuantity>,
    /// The blend of a driver of two gases that tailors this shock; `None` for other drivers, and where none does.
    pub tailored_blend: Option<TailoredBlend>,
}

/// A blend of two driver gases.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct TailoredBlend {
    /// One of them.
    pub gas: String,
    /// Its mole fraction; the rest is the other gas.
    pub fraction: ReportQuantity,
}

impl PlannedTailoring {
    /// For a shock, its driver and what follows at the contact surface.
    pub(super) fn new(
        record: &DriverRecord,
        driver: &Driver<'_>,
        behind: &BehindShock<'_>,
        contact: &Contact<'_>,
        met: Option<&ContactWaves>,
    ) -> Self {
        let figure = |bounds: Enclosure, unit| computed(bounds.middle(), unit, Some(bounds));
        let met = met.map(ContactWaves::interaction);
        let blend =
            two_gases(record).filter(|_| driver.area_ratio().exact() == Some(Rational::ONE)).and_then(|(gas, gases, temperature)| {
                let fraction = tailored_blend(behind, gases, temperature).ok()?;
                Some(TailoredBlend { gas, fraction: figure(fraction, "1") })
            });
        Self {
            returned: match contact.tailoring() {
                Tailoring::Shock => "shock",
                Tailoring::Expansion => "expansion",
                Tailoring::Tailored => "nothing",
            },
            contact_pressure: met.map(|met| figure(met.pressure, "Pa")),
            end_wall_pressure: met.map(|met| figure(met.end_wall_pressure, "Pa")),
            tailored_mach: driver.tailored_mach(behind.test_gas()).ok().map(|tailored| figure(tailored.mach, "1")),
            tailored_blend: blend,
        }
    }

    /// Rows of a table.
    pub(super) fn rows(&self, units: DisplayUnits) -> Vec<Vec<String>> {
        let mut rows = Vec::new();
        let what = match self.returned {
            "shock" => "over-tailored: a shock comes back from the contact surface",
            "expansion" => "under-tailored: an expansion comes back from the contact surface",
            _ => "tailored: nothing comes back from the contact surface",
        };
        let after = self.end_wall_pressure.as_ref().map_or(String::new(), |pressure| {
            format!("; after it {} at the end wall, if nothing else comes before", units.pressure(pressure.value))
        });
        rows.push(row(["Contact surface", &format!("{what}{after}")]));
        if let Some(mach) = &self.tailored_mach {
            rows.push(row(["Mach number that this driver tailors", &significant(mach.value, 4)]));
        }
        if let Some(blend) = &self.tailored_blend {
            let name = format!("Mole fraction of {} with which the driver tailors this shock", blend.gas);
            rows.push(row([&name, &significant(blend.fraction.value, 4)]));
        }
        rows
    }
}
