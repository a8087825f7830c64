//! A JSON file as it was written: order, duplicates and the digits of numbers are kept.

use alloc::collections::BTreeSet;
use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;
use core::fmt;

use serde::de::{Deserialize, Deserializer, Error, MapAccess, SeqAccess, Visitor};

use super::error::{ErrorKind, RecordError};

/// A record holds one shot; a larger file is something else.
const LARGEST_FILE: usize = 1 << 20;

/// The key under which `serde_json` hands over the digits of a number.
const NUMBER_KEY: &str = "$serde_json::private::Number";

#[derive(Clone, Debug, PartialEq)]
pub(super) enum Node {
    Null,
    Truth(bool),
    /// The digits as typed; of a power of ten only the sign is made explicit (`1e2` comes as `1e+2`).
    Number(String),
    Text(String),
    List(Vec<Node>),
    Object(Vec<(String, Node)>),
}

impl Node {
    /// What it is called in a message.
    pub(super) fn kind(&self) -> &'static str {
        match self {
            Self::Null => "null",
            Self::Truth(_) => "true or false",
            Self::Number(_) => "a bare number",
            Self::Text(_) => "a text",
            Self::List(_) => "a list",
            Self::Object(_) => "an object",
        }
    }

    /// The text of a leaf as typed; empty for lists and objects.
    pub(super) fn typed(&self) -> &str {
        match self {
            Self::Null => "null",
            Self::Truth(true) => "true",
            Self::Truth(false) => "false",
            Self::Number(text) | Self::Text(text) => text,
            Self::List(_) | Self::Object(_) => "",
        }
    }
}

impl<'de> Deserialize<'de> for Node {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        deserializer.deserialize_any(NodeVisitor)
    }
}

struct NodeVisitor;

impl<'de> Visitor<'de> for NodeVisitor {
    type Value = Node;

    fn expecting(&self, f: &mut fmt::Formatter) -> fmt::Result {
        f.write_str("a JSON value")
    }

    fn visit_unit<E: Error>(self) -> Result<Node, E> {
        Ok(Node::Null)
    }

    fn visit_bool<E: Error>(self, value: bool) -> Result<Node, E> {
        Ok(Node::Truth(value))
    }

    // Whole numbers that fit come as integers, all others by their digits.
    fn visit_u64<E: Error>(self, value: u64) -> Result<Node, E> {
        Ok(Node::Number(value.to_string()))
    }

    fn visit_i64<E: Error>(self, value: i64) -> Result<Node, E> {
        Ok(Node::Number(value.to_string()))
    }

    fn visit_str<E: Error>(self, value: &str) -> Result<Node, E> {
        Ok(Node::Text(value.to_string()))
    }

    fn visit_string<E: Error>(self, value: String) -> Result<Node, E> {
        Ok(Node::Text(value))
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut list: A) -> Result<Node, A::Error> {
        let mut nodes = Vec::new();
        while let Some(node) = list.next_element()? {
            nodes.push(node);
        }
        Ok(Node::List(nodes))
    }

    fn visit_map<A: MapAccess<'de>>(self, mut map: A) -> Result<Node, A::Error> {
        let mut entries: Vec<(String, Node)> = Vec::new();
        while let Some((key, node)) = map.next_entry::<String, Node>()? {
            if let (NUMBER_KEY, Node::Text(digits)) = (key.as_str(), &node) {
                return Ok(Node::Number(digits.clone()));
            }
            entries.push((key, node));
        }
        Ok(Node::Object(entries))
    }
}

/// The file as a tree without duplicate fields.
pub(super) fn parse(bytes: &[u8]) -> Result<Node, RecordError> {
    let fail = |path: &str, wrong: String, remedy: &str| RecordError::new(ErrorKind::Syntax, path, "", wrong, remedy);
    if bytes.len() > LARGEST_FILE {
        let wrong = format!("the file has {} bytes; a record may have {LARGEST_FILE}", bytes.len());
        return Err(fail("", wrong, "one record holds one shot; keep raw traces in other files"));
    }
    let text = core::str::from_utf8(bytes)
        .map_err(|error| fail("", format!("the file is not UTF-8 text: byte {}", error.valid_up_to() + 1), "save it as UTF-8"))?;
    // Some editors put a byte order mark in front.
    let text = text.strip_prefix('\u{feff}').unwrap_or(text);
    if text.trim().is_empty() {
        return Err(fail("", "the file is empty".to_string(), "a record is a JSON object that begins with { \"record\": \"shot/1\", …"));
    }
    let mut json = serde_json::Deserializer::from_str(text);
    let node: Node = serde_path_to_error::deserialize(&mut json).map_err(|error| {
        let path = error.path().to_string();
        // Where the place has no name, it ends with a question mark.
        let path = path.trim_end_matches(['.', '?']);
        fail(path, format!("the file is not valid JSON: {}", error.inner()), "check quotes, commas and braces at that place")
    })?;
    json.end().map_err(|error| fail("", format!("text follows the record: {error}"), "one file holds one record"))?;
    refuse_duplicates(&node, "")?;
    Ok(node)
}

/// Depth is bounded by the JSON reader (128 levels), so this recursion is too.
fn refuse_duplicates(node: &Node, path: &str) -> Result<(), RecordError> {
    match node {
        Node::List(nodes) => {
            for (at, inner) in nodes.iter().enumerate() {
                refuse_duplicates(inner, &format!("{path}[{at}]"))?;
            }
        }
        Node::Object(entries) => {
            let mut seen = BTreeSet::new();
            for (key, inner) in entries {
                let inner_path = joined(path, key);
                if !seen.insert(key.as_str()) {
                    return Err(RecordError::new(ErrorKind::Field, &inner_path, inner.typed(), "the field is given twice", "keep one"));
                }
                refuse_duplicates(inner, &inner_path)?;
            }
        }
        _ => {}
    }
    Ok(())
}

/// `fill` and `pressure` make `fill.pressure`.
pub(super) fn joined(path: &str, key: &str) -> String {
    let key = super::error::printable(key);
    if path.is_empty() { key } else { format!("{path}.{key}") }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn order_and_digits_are_kept() {
        let node = parse(br#"{"b": 0.10, "a": [7, -7, 1e2, null, true, "x"]}"#).unwrap();
        let Node::Object(entries) = node else { panic!("object") };
        assert_eq!(entries[0], ("b".into(), Node::Number("0.10".into())));
        let list = alloc::vec![
            Node::Number("7".into()),
            Node::Number("-7".into()),
            Node::Number("1e+2".into()),
            Node::Null,
            Node::Truth(true),
            Node::Text("x".into())
        ];
        assert_eq!(entries[1], ("a".into(), Node::List(list)));
        assert_eq!(parse("\u{feff}{}".as_bytes()).unwrap(), Node::Object(Vec::new()));
    }

    #[test]
    fn what_is_no_json_is_refused_with_its_place() {
        let refused = |bytes: &[u8]| parse(bytes).unwrap_err().to_string();
        assert!(refused(b"").contains("empty"));
        assert!(refused(b"\xff{}").contains("byte 1"));
        assert!(refused(br#"{"a": {"b": [1, }"#).starts_with("a.b[1]: "));
        assert!(refused(br#"{"a": 1,, "b": 2}"#).starts_with("the file is not valid JSON"));
        assert!(refused(br#"{"a": {"b": 1,}}"#).starts_with("a: the file is not valid JSON"));
        assert!(refused(b"{}\n{}").contains("line 2"));
        assert!(refused(br#"{"a": {"b": 1, "b": 2}}"#).starts_with("a.b: the field is given twice"));
        assert!(refused(br#"{"a": [{"b": 1, "b": 2}]}"#).starts_with("a[0].b: "));
        assert!(refused(&alloc::vec![b' '; LARGEST_FILE + 1]).contains("bytes"));
    }

    #[test]
    fn nesting_is_bounded() {
        assert!(parse("[".repeat(100_000).as_bytes()).is_err());
        assert!(parse(br#"{"a":"#.repeat(100_000).as_slice()).is_err());
    }
}
