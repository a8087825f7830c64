//! Standard output, and columns of text.

use std::io::{ErrorKind, Write, stdout};

use crate::failure::Failure;

/// Prints a text that ends with one line break. A reader that has gone away (`endwall … | head`) is no failure.
pub fn print(text: &str) -> Result<(), Failure> {
    let mut out = stdout().lock();
    let written = out.write_all(text.trim_end_matches('\n').as_bytes()).and_then(|()| out.write_all(b"\n")).and_then(|()| out.flush());
    match written {
        Err(error) if error.kind() != ErrorKind::BrokenPipe => Err(Failure::unwritten("standard output", &error)),
        _ => Ok(()),
    }
}

/// Columns as wide as their widest cell: the first to the left, the others to the right.
pub fn columns(rows: &[Vec<String>]) -> String {
    let width = |column: usize| rows.iter().filter_map(|row| row.get(column)).map(|cell| cell.chars().count()).max().unwrap_or(0);
    let widths: Vec<usize> = (0..rows.iter().map(Vec::len).max().unwrap_or(0)).map(width).collect();
    let mut text = String::new();
    for row in rows {
        for (at, (cell, width)) in row.iter().zip(&widths).enumerate() {
            let aligned = if at == 0 { format!("{cell:<width$}") } else { format!("  {cell:>width$}") };
            text.push_str(&aligned);
        }
        text.truncate(text.trim_end_matches(' ').len());
        text.push('\n');
    }
    text
}

/// Running text broken into lines of at most 96 characters, without a break at the end.
pub fn paragraph(text: &str) -> String {
    const WIDTH: usize = 96;
    let mut lines = vec![String::new()];
    for word in text.split_whitespace() {
        match lines.last_mut() {
            Some(line) if line.is_empty() => line.push_str(word),
            Some(line) if line.chars().count() + 1 + word.chars().count() <= WIDTH => {
                line.push(' ');
                line.push_str(word);
            }
            _ => lines.push(word.to_string()),
        }
    }
    lines.join("\n")
}
