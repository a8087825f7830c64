//! Good records with some of their values replaced.

use arbitrary::Arbitrary;

/// The demo records, and short ones for the branches that those do not take.
const GOOD: [&str; 9] = [
    include_str!("../../../examples/records/argon-b0412.json"),
    include_str!("../../../examples/records/kinetics-k0207.json"),
    include_str!("../../../examples/records/nitrogen-n0703.json"),
    include_str!("../../../examples/records/sensor-step-c17.json"),
    include_str!("../seeds/mixture-moving-wall.json"),
    include_str!("../seeds/ratio-yielding-wall.json"),
    include_str!("../seeds/driver-and-tube.json"),
    include_str!("../seeds/humid-air-leak.json"),
    include_str!("../seeds/own-species.json"),
];

/// Units of all dimensions, and some that are none.
const UNITS: [&str; 21] = [
    "Pa/min", "kPa", "Pa", "bar(g)", "Torr", "psi(a)", "K", "degC", "degF", "m", "mm", "in", "s", "us", "m/s", "g/mol", "%", "ppm", "%/m", "", "Kpa",
];

/// What may follow a unit.
const REMARKS: [&str; 7] = ["", "", "", " (k=2)", " (limits)", " (dof 9)", " (k=1e30)"];

/// Which good record, and what is done to it.
#[derive(Arbitrary, Debug)]
pub struct Plan {
    record: u8,
    changes: Vec<Change>,
}

/// One change.
#[derive(Arbitrary, Debug)]
enum Change {
    /// The number at the start of a text becomes another one; unit and uncertainty stay.
    Number { place: u8, number: Number },
    /// A text becomes a quantity.
    Text { place: u8, number: Number, spread: Option<Number>, percent: bool, unit: u8, remark: u8 },
    /// A text becomes this one.
    Free { place: u8, text: String },
    /// A text becomes that of another place.
    Copy { place: u8, from: u8 },
    /// A few bytes vanish.
    Cut { at: u16, length: u8 },
}

/// A number in one of the ways of writing it.
#[derive(Arbitrary, Debug)]
enum Number {
    Double(f64),
    Decimal { digits: i32, decimals: u8 },
    Power { digits: i16, exponent: i8 },
    Ratio { above: u16, below: u16 },
}

impl Number {
    fn text(&self) -> String {
        match self {
            Self::Double(value) => format!("{value:e}"),
            Self::Decimal { digits, decimals } => {
                let decimals = usize::from(decimals % 8);
                format!("{:.decimals$}", f64::from(*digits) / 10_f64.powi(i32::try_from(decimals).unwrap_or(0)))
            }
            Self::Power { digits, exponent } => format!("{digits}e{exponent}"),
            Self::Ratio { above, below } => format!("{above}/{below}"),
        }
    }
}

impl Plan {
    /// The damaged record.
    #[must_use]
    pub fn file(&self) -> String {
        let mut file = GOOD[usize::from(self.record) % GOOD.len()].to_string();
        for change in self.changes.iter().take(8) {
            file = change.of(&file);
        }
        file
    }
}

impl Change {
    fn of(&self, file: &str) -> String {
        match self {
            Self::Number { place, number } => replaced(file, *place, |text| {
                let unit = text.trim_start_matches(|c: char| c.is_ascii_digit() || "+-./".contains(c));
                format!("{}{unit}", number.text())
            }),
            Self::Text { place, number, spread, percent, unit, remark } => replaced(file, *place, |_| {
                let spread =
                    spread.as_ref().map_or(String::new(), |spread| format!(" ± {}{}", spread.text(), if *percent { " %" } else { "" }));
                let (unit, remark) = (UNITS[usize::from(*unit) % UNITS.len()], REMARKS[usize::from(*remark) % REMARKS.len()]);
                format!("{}{spread} {unit}{remark}", number.text())
            }),
            Self::Free { place, text } => replaced(file, *place, |_| text.replace(['"', '\\'], "")),
            Self::Copy { place, from } => {
                let other = texts(file).get(usize::from(*from)).map_or(String::new(), |(start, end)| file[*start..*end].to_string());
                replaced(file, *place, |_| other)
            }
            Self::Cut { at, length } => {
                let (start, length) = (usize::from(*at), usize::from(length % 16));
                file.char_indices().filter(|(index, _)| !(start..start + length).contains(index)).map(|(_, c)| c).collect()
            }
        }
    }
}

/// The stretches between quotes, names of fields among them.
fn texts(file: &str) -> Vec<(usize, usize)> {
    let quotes: Vec<usize> = file.match_indices('"').map(|(at, _)| at).collect();
    quotes.chunks_exact(2).map(|pair| (pair[0] + 1, pair[1])).collect()
}

/// The file with one of its texts replaced.
fn replaced(file: &str, place: u8, new: impl FnOnce(&str) -> String) -> String {
    let texts = texts(file);
    if texts.is_empty() {
        return file.to_string();
    }
    let (start, end) = texts[usize::from(place) % texts.len()];
    format!("{}{}{}", &file[..start], new(&file[start..end]), &file[end..])
}
