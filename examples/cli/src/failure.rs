//! What ends the command with exit code 2.

use std::fmt;

use endwall::record::RecordError;

/// A refusal: where, what is wrong with which text, and what would be right.
#[derive(Debug)]
pub struct Failure(String);

impl Failure {
    /// The same code that wrong usage gives.
    pub const EXIT_CODE: u8 = 2;

    /// A refusal of the text typed for an option.
    pub fn option(option: &str, wrong: impl fmt::Display, typed: &str, remedy: impl fmt::Display) -> Self {
        Self(format!("--{option}: {wrong} (typed: \"{typed}\")\n  {remedy}"))
    }

    /// Something that was not given.
    pub fn missing(wrong: &str, remedy: &str) -> Self {
        Self(format!("{wrong}\n  {remedy}"))
    }

    /// A refusal of a record file.
    pub fn record(file: &str, error: &RecordError) -> Self {
        Self(format!("{file}: {error}"))
    }

    /// A file that cannot be read or written.
    pub fn file(file: &str, doing: &str, error: &std::io::Error) -> Self {
        Self(format!("{file}: cannot be {doing}: {error}\n  check the name and the permissions of the file"))
    }

    /// A file that no record can be.
    pub fn too_long(file: &str, most: usize) -> Self {
        Self(format!(
            "{file}: the file has more than {most} bytes, which no record has\n  is this the right file? Leave raw signals out of a record"
        ))
    }
}

impl fmt::Display for Failure {
    /// Nothing typed or named paints the terminal: control characters other than line breaks are written as blanks.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let plain = |c: char| if c.is_control() && c != '\n' { ' ' } else { c };
        self.0.chars().map(plain).collect::<String>().fmt(f)
    }
}
