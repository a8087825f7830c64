//! What every input must do: give a report or an error, both fit to be shown.

pub mod damage;

use endwall::record::Shot;

/// Reads a record, reduces it and writes both reports.
///
/// # Panics
/// On whatever a user must never meet: a report with a number that is none, text that can paint a terminal, an error without a reason, a
/// second reading that differs from the first.
pub fn judge(file: &[u8]) {
    let read = Shot::read(file);
    assert_eq!(read, Shot::read(file), "the same file reads the same");
    match read.and_then(|shot| Ok((shot.reduce()?, shot))) {
        Ok((report, shot)) => {
            let json = report.to_json().expect("a report can be written");
            assert!(!json.contains("\"value\": null") && !json.contains("\"residual\": null"), "{json}");
            for quantity in [&report.states.reflected.pressure, &report.states.reflected.temperature, &report.incident.mach] {
                assert!(quantity.proven.is_none_or(|[low, high]| low <= quantity.value && quantity.value <= high), "{quantity:?}");
            }
            plain(&report.to_text(&shot));
        }
        Err(error) => {
            assert!(!error.wrong.is_empty(), "{error:?}");
            plain(&error.to_string());
        }
    }
}

/// Nothing that a file says may paint the terminal or turn the direction of writing.
fn plain(text: &str) {
    assert!(!text.chars().any(|c| (c.is_control() && c != '\n') || ('\u{202a}'..='\u{202e}').contains(&c)), "{text:?}");
}
