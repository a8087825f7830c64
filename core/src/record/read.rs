//! Takes fields out of an object: every mistake is an error with the full path.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::error::{ErrorKind, RecordError};
use super::quantity::Quantity;
use super::tree::{self, Node};
use super::unit::Dimension;

/// A leaf of the record, for the echo in a report.
#[derive(Clone, Debug, PartialEq)]
pub struct Entry {
    /// The full path (`stations[2].arrival`).
    pub path: String,
    /// The text as typed.
    pub typed: String,
    /// The quantity, where the field is one.
    pub quantity: Option<Quantity>,
}

/// What was read and asked so far.
pub(super) struct Reading {
    /// Paths that the record confirms.
    pub(super) confirm: Vec<String>,
    /// Those whose question was really asked.
    pub(super) answered: Vec<String>,
    pub(super) quantities: Vec<(String, Quantity)>,
}

impl Reading {
    pub(super) fn new() -> Self {
        Self { confirm: Vec::new(), answered: Vec::new(), quantities: Vec::new() }
    }

    /// Refuses a doubtful value with a question, unless the record has answered it.
    pub(super) fn ask(&mut self, path: &str, typed: &str, question: impl Into<String>) -> Result<(), RecordError> {
        if self.confirm.iter().any(|confirmed| confirmed == path) {
            if !self.answered.iter().any(|answered| answered == path) {
                self.answered.push(path.to_string());
            }
            return Ok(());
        }
        let remedy = format!("correct it, or state that it is right: \"confirm\": [\"{path}\"]");
        Err(RecordError::new(ErrorKind::Doubtful, path, typed, question, remedy))
    }
}

/// The fields of one object.
#[derive(Clone, Copy)]
pub(super) struct Fields<'a> {
    path: &'a str,
    entries: &'a [(String, Node)],
}

impl<'a> Fields<'a> {
    pub(super) fn new(node: &'a Node, path: &'a str) -> Result<Self, RecordError> {
        match node {
            Node::Object(entries) => Ok(Self { path, entries }),
            other => {
                let wrong = format!("{} stands where an object is wanted", other.kind());
                Err(RecordError::new(ErrorKind::Field, path, other.typed(), wrong, "write { \"field\": … }"))
            }
        }
    }

    pub(super) fn entries(&self) -> &'a [(String, Node)] {
        self.entries
    }

    pub(super) fn path_of(&self, key: &str) -> String {
        tree::joined(self.path, key)
    }

    /// Refuses fields outside the list, offering the nearest one.
    pub(super) fn allow(&self, known: &[&str]) -> Result<(), RecordError> {
        for (key, node) in self.entries {
            if !known.contains(&key.as_str()) {
                let remedy = match nearest(key, known) {
                    Some(meant) => format!("was \"{meant}\" meant? Fields here: {}", known.join(", ")),
                    None => format!("fields here: {}", known.join(", ")),
                };
                return Err(RecordError::new(ErrorKind::Field, &self.path_of(key), node.typed(), "the field is unknown", remedy));
            }
        }
        Ok(())
    }

    pub(super) fn get(&self, key: &str) -> Option<&'a Node> {
        self.entries.iter().find(|(name, _)| name == key).map(|(_, node)| node)
    }

    pub(super) fn required(&self, key: &str, example: &str) -> Result<&'a Node, RecordError> {
        self.get(key).ok_or_else(|| {
            let remedy = format!("add \"{key}\": {example}");
            RecordError::new(ErrorKind::Field, &self.path_of(key), "", "the field is missing", remedy)
        })
    }

    pub(super) fn quantity(&self, reading: &mut Reading, key: &str, wanted: Dimension) -> Result<Option<Quantity>, RecordError> {
        self.get(key).map(|node| quantity(reading, node, &self.path_of(key), wanted)).transpose()
    }

    pub(super) fn required_quantity(
        &self,
        reading: &mut Reading,
        key: &str,
        wanted: Dimension,
        example: &str,
    ) -> Result<Quantity, RecordError> {
        let node = self.required(key, &format!("\"{example}\""))?;
        quantity(reading, node, &self.path_of(key), wanted)
    }

    pub(super) fn text(&self, key: &str) -> Result<Option<&'a str>, RecordError> {
        match self.get(key) {
            None => Ok(None),
            Some(Node::Text(text)) => Ok(Some(text)),
            Some(other) => {
                let wrong = format!("{} stands where a text is wanted", other.kind());
                Err(RecordError::new(ErrorKind::Field, &self.path_of(key), other.typed(), wrong, "write it in quotes"))
            }
        }
    }

    pub(super) fn truth(&self, key: &str) -> Result<Option<bool>, RecordError> {
        match self.get(key) {
            None => Ok(None),
            Some(Node::Truth(value)) => Ok(Some(*value)),
            Some(other) => {
                let wrong = format!("{} stands where true or false is wanted", other.kind());
                Err(RecordError::new(ErrorKind::Field, &self.path_of(key), other.typed(), wrong, "write true or false without quotes"))
            }
        }
    }

    /// The elements of a list.
    pub(super) fn list(&self, key: &str) -> Result<Option<&'a [Node]>, RecordError> {
        match self.get(key) {
            None => Ok(None),
            Some(Node::List(nodes)) => Ok(Some(nodes)),
            Some(other) => {
                let wrong = format!("{} stands where a list is wanted", other.kind());
                Err(RecordError::new(ErrorKind::Field, &self.path_of(key), other.typed(), wrong, "write [ …, … ]"))
            }
        }
    }
}

/// A quantity from a text, or from the digits of a bare number.
pub(super) fn quantity(reading: &mut Reading, node: &Node, path: &str, wanted: Dimension) -> Result<Quantity, RecordError> {
    let (Node::Text(text) | Node::Number(text)) = node else {
        let wrong = format!("{} stands where {} is wanted", node.kind(), wanted.name());
        let remedy =
            if *node == Node::Null { "leave the field out if it is not known" } else { "write it as a text, like \"32.99 ± 0.08 kPa\"" };
        return Err(RecordError::new(ErrorKind::Field, path, node.typed(), wrong, remedy));
    };
    let quantity = Quantity::parse(text, wanted).map_err(|error| error.at(path))?;
    reading.quantities.push((path.to_string(), quantity.clone()));
    Ok(quantity)
}

/// The known field that the typed one was probably meant to be: equal but for capitals, blanks, hyphens and underscores,
/// or one letter away, or the start of one.
fn nearest<'k>(typed: &str, known: &[&'k str]) -> Option<&'k str> {
    let fold = |text: &str| -> String { text.chars().filter(|c| c.is_alphanumeric()).flat_map(char::to_lowercase).take(40).collect() };
    let folded = fold(typed);
    let close = |candidate: &&&str| {
        let candidate = fold(candidate);
        within_one_edit(&candidate, &folded) || (folded.len() >= 3 && (candidate.starts_with(&folded) || folded.starts_with(&candidate)))
    };
    known.iter().find(|candidate| fold(candidate) == folded).or_else(|| known.iter().find(close)).copied()
}

fn within_one_edit(a: &str, b: &str) -> bool {
    let (a, b): (Vec<char>, Vec<char>) = (a.chars().collect(), b.chars().collect());
    let head = a.iter().zip(&b).take_while(|(x, y)| x == y).count();
    let tail = a.iter().rev().zip(b.iter().rev()).take_while(|(x, y)| x == y).count();
    let longer = a.len().max(b.len());
    a.len().min(b.len()) >= 3
        && a.len().abs_diff(b.len()) <= 1
        && (head + tail + 1 >= longer || (a.len() == b.len() && head + tail + 2 >= longer && swapped(&a, &b, head)))
}

/// True if the two letters after the common head changed places.
fn swapped(a: &[char], b: &[char], head: usize) -> bool {
    a.get(head).is_some() && a.get(head) == b.get(head + 1) && a.get(head + 1) == b.get(head)
}

/// All leaves in the order of the file, with the quantities that were read from them.
pub(super) fn entries(node: &Node, reading: &Reading) -> Vec<Entry> {
    let quantities: alloc::collections::BTreeMap<&str, &Quantity> =
        reading.quantities.iter().map(|(path, quantity)| (path.as_str(), quantity)).collect();
    let mut found = Vec::new();
    leaves(node, "", &mut |path, leaf| {
        let quantity = quantities.get(path).map(|quantity| (*quantity).clone());
        found.push(Entry { path: path.to_string(), typed: leaf.typed().to_string(), quantity });
    });
    found
}

/// Depth is bounded by the JSON reader.
pub(super) fn leaves(node: &Node, path: &str, found: &mut dyn FnMut(&str, &Node)) {
    match node {
        Node::Object(entries) => {
            for (key, inner) in entries {
                leaves(inner, &tree::joined(path, key), found);
            }
        }
        Node::List(nodes) => {
            for (at, inner) in nodes.iter().enumerate() {
                leaves(inner, &format!("{path}[{at}]"), found);
            }
        }
        leaf => found(path, leaf),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_nearest_field_is_offered() {
        let known = ["pressure", "temperature", "from_end_wall", "arrival"];
        for (typed, meant) in [
            ("presure", "pressure"),
            ("Pressure", "pressure"),
            ("temp", "temperature"),
            ("fromEndWall", "from_end_wall"),
            ("arrivla", "arrival"),
            ("arrival_time", "arrival"),
        ] {
            assert_eq!(nearest(typed, &known), Some(meant), "{typed}");
        }
        assert_eq!(nearest("colour", &known), None);
        assert_eq!(nearest("", &known), None);
    }
}
