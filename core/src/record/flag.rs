//! Flags: what travels with a result to every place where it is shown.

use alloc::format;
use alloc::string::String;

use serde::Serialize;

/// Something that the reader of a result must know.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct Flag {
    /// A short name that stays the same from version to version.
    pub code: String,
    /// One sentence.
    pub text: String,
}

impl Flag {
    /// A flag of that code and text.
    ///
    /// ```
    /// # use endwall::record::Flag;
    /// assert_eq!(Flag::new("far-station", "the last station is 0.4 m from the end wall").code, "far-station");
    /// ```
    pub fn new(code: &str, text: impl Into<String>) -> Self {
        Self { code: code.into(), text: text.into() }
    }

    /// The flag for a field that is read but does not enter the computation.
    ///
    /// ```
    /// # use endwall::record::Flag;
    /// assert!(Flag::not_used("leak").text.starts_with("leak is recorded"));
    /// ```
    pub fn not_used(path: &str) -> Self {
        Self::new("not-used", format!("{path} is recorded but not used in this version: no result depends on it"))
    }
}
