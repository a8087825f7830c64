//! Published and exactly calculated check values, one comma-separated file per table in `data/`.
//!
//! Every file begins with `# key: value` lines: title, source, digits, status, licence and the tolerance with its
//! reason. Status words: `[READ]` read in a source, `[CALC]` exact mathematics, `[MEM]` cited from memory.

use std::collections::BTreeMap;

use crate::oracle::{RBig, parse};

/// A table with its header.
#[derive(Clone, Debug)]
pub struct Table {
    header: BTreeMap<&'static str, &'static str>,
    columns: Vec<&'static str>,
    rows: Vec<Vec<&'static str>>,
}

/// One row of a table.
#[derive(Clone, Copy, Debug)]
pub struct Row<'a> {
    columns: &'a [&'static str],
    cells: &'a [&'static str],
}

/// What every header has to say.
pub const REQUIRED: [&str; 6] = ["title", "source", "digits", "status", "licence", "tolerance"];

macro_rules! tables {
    ($($(#[$doc:meta])* $name:ident;)*) => {
        $(
            $(#[$doc])*
            #[must_use]
            pub fn $name() -> Table {
                Table::read(include_str!(concat!("../data/", stringify!($name), ".csv")))
            }
        )*
        /// All tables by name.
        #[must_use]
        pub fn all() -> Vec<(&'static str, Table)> {
            vec![$((stringify!($name), $name())),*]
        }
    };
}

tables! {
    /// Normal shock of NACA Report 1135, γ 7/5.
    normal_shock_table;
    /// Rational cases of the reflected shock.
    reflected_shock_exact;
    /// Limits of strong and weak shocks.
    shock_limits;
    /// Loss of total pressure of weak shocks.
    weak_shock_loss;
    /// Star states of Riemann problems.
    riemann_star_states;
    /// Reflected blast overpressure.
    blast_reflection;
    /// Speed of sound of the standard atmosphere.
    standard_atmosphere;
    /// Units in SI.
    units;
    /// Bounds of reflected-shock bifurcation.
    bifurcation;
    /// Tailored Mach numbers.
    tailoring;
    /// t factors of JCGM 100, Table G.2.
    student_t;
    /// Straight line with correlated results, JCGM 100, H.3.
    jcgm_100_h3;
    /// Correlated inputs and outputs, JCGM 100, H.2.
    jcgm_100_h2;
    /// Printed results of JCGM 100: column `example`, `quantity`, `value`.
    jcgm_100_results;
    /// Heat capacity and enthalpy of ideal gases from property libraries.
    heat_capacity_library;
    /// Viscosity of dilute gases and the collision integral from property libraries.
    viscosity_library;
    /// Vapour pressure of pure liquids, and critical points, from property libraries.
    vapour_pressure_library;
}

impl Table {
    fn read(text: &'static str) -> Self {
        let (mut header, mut columns, mut rows) = (BTreeMap::new(), Vec::new(), Vec::new());
        for line in text.lines() {
            if let Some(entry) = line.strip_prefix("# ") {
                let (key, value) = entry.split_once(": ").expect("a header line is `# key: value`");
                header.insert(key, value);
            } else if columns.is_empty() {
                columns = line.split(',').collect();
            } else {
                let cells: Vec<_> = line.split(',').collect();
                assert_eq!(cells.len(), columns.len(), "a row has a cell for each column: {line}");
                rows.push(cells);
            }
        }
        Self { header, columns, rows }
    }

    /// An entry of the header, such as `"source"`.
    #[must_use]
    pub fn about(&self, key: &str) -> Option<&str> {
        self.header.get(key).copied()
    }

    /// The rows in order.
    pub fn rows(&self) -> impl ExactSizeIterator<Item = Row<'_>> {
        self.rows.iter().map(|cells| Row { columns: &self.columns, cells })
    }
}

impl Row<'_> {
    /// The cell as printed; panics when there is no such column.
    #[must_use]
    pub fn text(&self, column: &str) -> &'static str {
        let place = self.columns.iter().position(|name| *name == column);
        self.cells[place.unwrap_or_else(|| panic!("no column {column:?} among {:?}", self.columns))]
    }

    /// The cell as the exact ratio that its digits are.
    #[must_use]
    pub fn exact(&self, column: &str) -> RBig {
        parse(self.text(column))
    }

    /// The cell as the nearest double.
    #[must_use]
    pub fn f64(&self, column: &str) -> f64 {
        self.exact(column).to_f64().value()
    }

    /// One unit of the last printed digit of the cell.
    #[must_use]
    pub fn last_digit(&self, column: &str) -> f64 {
        let text = self.text(column);
        let (mantissa, power) = text.split_once(['e', 'E']).unwrap_or((text, "0"));
        let decimals = mantissa.split_once('.').map_or(0, |(_, fraction)| fraction.len());
        format!("1e{}", power.parse::<i32>().expect("a power of ten") - i32::try_from(decimals).expect("few digits"))
            .parse()
            .expect("a power of ten is a double")
    }
}

#[cfg(test)]
mod tests {
    use super::{REQUIRED, all, normal_shock_table};

    #[test]
    fn every_table_says_where_it_comes_from() {
        for (name, table) in all() {
            for key in REQUIRED {
                assert!(table.about(key).is_some_and(|text| text.len() > 3), "{name}.csv says nothing of {key:?}");
            }
            let status = table.about("status").expect("checked above");
            assert!(["[READ", "[CALC]", "[MEM]"].iter().any(|word| status.contains(word)), "{name}.csv: {status}");
            assert!(table.rows().len() > 0, "{name}.csv is empty");
        }
    }

    #[test]
    fn last_digit_counts_decimals() {
        let table = normal_shock_table();
        let row = table.rows().next().expect("a first row");
        assert!((row.last_digit("mach_behind") - 1e-4).abs() < 1e-18);
        assert!((row.f64("mach") - 1.05).abs() < 1e-15);
    }
}
