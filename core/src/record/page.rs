//! Layout of text: headings, paragraphs, tables.

use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::error::plain_character;

/// Lines of running text are broken here.
const WIDTH: usize = 96;

/// Cells without characters that paint the terminal.
pub(super) fn row<const N: usize>(cells: [&str; N]) -> Vec<String> {
    cells.iter().map(|cell| cell.chars().map(plain_character).collect()).collect()
}

/// A text under construction.
#[derive(Default)]
pub(super) struct Page {
    pub(super) text: String,
}

impl Page {
    pub(super) fn line(&mut self, line: &str) {
        self.text.extend(line.chars().map(plain_character));
        self.text.push('\n');
    }

    pub(super) fn heading(&mut self, title: &str) {
        self.text.push('\n');
        self.line(title);
        self.line(&"-".repeat(title.chars().count()));
    }

    /// Broken into lines; further lines are indented below the text of the first.
    pub(super) fn paragraph(&mut self, mark: &str, text: &str) {
        let mut line = mark.to_string();
        let indent = " ".repeat(mark.chars().count());
        for word in text.split_whitespace() {
            let occupied = line.chars().count();
            if occupied > mark.chars().count() && occupied + 1 + word.chars().count() > WIDTH {
                self.line(&line);
                line.clone_from(&indent);
            }
            if line.chars().count() > mark.chars().count() {
                line.push(' ');
            }
            line.push_str(word);
        }
        self.line(&line);
    }

    /// Columns as wide as their widest cell. The last cell of a row may be longer, so that notes do not push the numbers off the screen.
    pub(super) fn table(&mut self, rows: &[Vec<String>]) {
        let columns = rows.iter().map(Vec::len).max().unwrap_or(0);
        let followed = |row: &[String], column: usize| row.iter().skip(column + 1).any(|cell| !cell.is_empty());
        let in_column = |column: usize| rows.iter().filter(move |row| followed(row, column)).filter_map(move |row| row.get(column));
        let width = |column: usize| in_column(column).map(|cell| cell.chars().count()).max().unwrap_or(0);
        let widths: Vec<usize> = (0..columns).map(width).collect();
        for row in rows {
            let mut line = String::new();
            for (cell, width) in row.iter().zip(&widths) {
                line.push_str(cell);
                let missing = width - cell.chars().count().min(*width);
                line.extend(core::iter::repeat_n(' ', missing + 2));
            }
            self.line(line.trim_end());
        }
    }
}
