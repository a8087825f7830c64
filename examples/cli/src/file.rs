//! Record files, or standard input in their place.

use std::borrow::Cow;
use std::fs::File;
use std::io::{Read, stdin};
use std::path::Path;

use crate::failure::Failure;

/// No record is longer than this; the rest of a longer file, or of an endless one, is never read.
const LARGEST_FILE: usize = 1 << 20;

/// What a message calls the file.
pub fn name(file: &Path) -> Cow<'_, str> {
    if is_standard_input(file) { "standard input".into() } else { file.to_string_lossy() }
}

fn is_standard_input(file: &Path) -> bool {
    file.as_os_str() == "-"
}

/// The bytes of a record file.
pub fn read(file: &Path) -> Result<Vec<u8>, Failure> {
    let name = &name(file);
    let mut bytes = Vec::new();
    let enough = LARGEST_FILE as u64 + 1;
    let read = if is_standard_input(file) {
        stdin().lock().take(enough).read_to_end(&mut bytes)
    } else {
        File::open(file).and_then(|opened| opened.take(enough).read_to_end(&mut bytes))
    };
    match read {
        Err(error) => Err(Failure::unread(name, &error)),
        Ok(length) if length > LARGEST_FILE => Err(Failure::too_long(name, LARGEST_FILE)),
        Ok(_) => Ok(bytes),
    }
}
