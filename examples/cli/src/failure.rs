//! What ends the command without a result.

use std::fmt;

use endwall::record::RecordError;

/// A refusal: where, what is wrong with which text, and what would be right.
#[derive(Debug)]
pub struct Failure {
    message: String,
    exit_code: u8,
}

impl Failure {
    /// Bad input: the same code that wrong usage gives.
    const BAD_INPUT: u8 = 2;
    /// The input may be right, but something else is not.
    const OTHER: u8 = 1;

    fn input(message: String) -> Self {
        Self { message, exit_code: Self::BAD_INPUT }
    }

    /// What the command ends with.
    pub fn exit_code(&self) -> u8 {
        self.exit_code
    }

    /// A refusal of the text typed for an option.
    pub fn option(option: &str, wrong: impl fmt::Display, typed: &str, remedy: impl fmt::Display) -> Self {
        Self::input(format!("--{option}: {wrong} (typed: \"{typed}\")\n  {remedy}"))
    }

    /// A refusal that belongs to no single option, or names it itself.
    pub fn plain(wrong: &str, remedy: &str) -> Self {
        Self::input(format!("{wrong}\n  {remedy}"))
    }

    /// A refusal of a record file.
    pub fn record(file: &str, error: &RecordError) -> Self {
        Self::input(format!("{file}: {error}"))
    }

    /// A file that cannot be read: it is the input.
    pub fn unread(file: &str, error: &std::io::Error) -> Self {
        Self::input(format!("{file}: cannot be read: {error}\n  check the name and the permissions of the file"))
    }

    /// A file, or standard output, that cannot be written.
    pub fn unwritten(file: &str, error: &std::io::Error) -> Self {
        let message = format!("{file}: cannot be written: {error}\n  check its folder, its permissions and the space on the device");
        Self { message, exit_code: Self::OTHER }
    }

    /// An answer that cannot be put into the form that was asked for.
    pub fn unformatted(error: impl fmt::Display) -> Self {
        Self { message: format!("the answer cannot be written: {error}"), exit_code: Self::OTHER }
    }

    /// A file that no record can be.
    pub fn too_long(file: &str, most: usize) -> Self {
        Self::input(format!(
            "{file}: the file has more than {most} bytes, which no record has\n  is this the right file? Leave raw signals out of a record"
        ))
    }
}

impl fmt::Display for Failure {
    /// Nothing typed or named paints the terminal: control characters other than line breaks are written as blanks.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let plain = |c: char| if c.is_control() && c != '\n' { ' ' } else { c };
        self.message.chars().map(plain).collect::<String>().fmt(f)
    }
}
