//! A record file.

/// Reads the demo record.
pub fn read() -> endwall::record::Shot {
    endwall::record::Shot::read(include_bytes!("../../../examples/records/argon-b0412.json")).expect("a record")
}
