//! What a record file got wrong, said so that it can be put right.

use alloc::string::String;
use core::fmt;

/// The longest part of a typed text that a message repeats, in characters.
const LONGEST_ECHO: usize = 80;

/// The family of a [`RecordError`], for programs that act on it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ErrorKind {
    /// The file is not JSON, not UTF-8, or too large.
    Syntax,
    /// A field is missing, unknown, given twice or of the wrong JSON type.
    Field,
    /// A quantity cannot be read: number, unit, uncertainty or remark.
    Quantity,
    /// The value is read but cannot be right.
    Value,
    /// The value is possible but doubtful; `"confirm"` answers the question.
    Doubtful,
}

/// One mistake in a record: where, what was typed, what is wrong and what would be right.
///
/// ```
/// # use endwall::record::{Dimension, Quantity};
/// let error = Quantity::parse("32.99 Kpa", Dimension::Pressure).unwrap_err().at("fill.pressure");
/// assert_eq!(error.path, "fill.pressure");
/// assert!(error.to_string().contains("kPa"));
/// ```
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct RecordError {
    /// The family.
    pub kind: ErrorKind,
    /// The full path of the field (`stations[2].arrival`); empty for the file as a whole.
    pub path: String,
    /// The text as typed, shortened; empty where nothing was typed.
    pub typed: String,
    /// What is wrong.
    pub wrong: String,
    /// What would be right; may be empty where `wrong` says it already.
    pub remedy: String,
}

impl RecordError {
    pub(crate) fn new(kind: ErrorKind, path: &str, typed: &str, wrong: impl Into<String>, remedy: impl Into<String>) -> Self {
        // Pieces of the file are repeated in all of them.
        let plain = |text: String| text.chars().map(plain_character).collect();
        Self { kind, path: plain(path.into()), typed: printable(typed), wrong: plain(wrong.into()), remedy: plain(remedy.into()) }
    }
}

impl fmt::Display for RecordError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if !self.path.is_empty() {
            write!(f, "{}: ", self.path)?;
        }
        f.write_str(&self.wrong)?;
        if !self.typed.is_empty() {
            write!(f, " (typed: \"{}\")", self.typed)?;
        }
        if !self.remedy.is_empty() {
            write!(f, "\n  {}", self.remedy)?;
        }
        Ok(())
    }
}

impl core::error::Error for RecordError {}

/// Text from a file made safe to print on one line: control characters become spaces, a long text is cut.
pub(crate) fn printable(text: &str) -> String {
    let mut out: String = text.chars().take(LONGEST_ECHO).map(plain_character).collect();
    if text.chars().nth(LONGEST_ECHO).is_some() {
        out.push('…');
    }
    out
}

/// Control characters, and the marks that reverse the direction of what follows, could make a message say something else.
pub(crate) fn plain_character(c: char) -> char {
    match c {
        '\u{200e}' | '\u{200f}' | '\u{202a}'..='\u{202e}' | '\u{2066}'..='\u{2069}' => ' ',
        c if c.is_control() => ' ',
        c => c,
    }
}
