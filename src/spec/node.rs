//! The tree that a spec is before any key is understood: maps, lists and scalars that know where they stand.
//!
//! `document.rs` makes it from a text, `include.rs` and `edit.rs` join and change it, `fields.rs` reads it.

use super::place::Location;

/// Who gave a value.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Origin {
    /// A file: the spec itself or a part it includes.
    File,
    /// The block `override` of the spec.
    Override,
    /// `--set` or a study.
    Set,
}

/// One value of the tree.
#[derive(Clone, Debug, PartialEq)]
pub struct Node {
    /// What stands there.
    pub value: Value,
    /// Where it stands.
    pub location: Location,
    /// Who gave it.
    pub origin: Origin,
}

/// What a node holds.
#[derive(Clone, Debug, PartialEq)]
pub enum Value {
    /// Nothing: an empty value or `null`.
    Null,
    /// `true` or `false`.
    Flag(bool),
    /// A bare number; the text is as typed.
    Number { value: f64, text: String },
    /// Any other text.
    Text(String),
    /// Values in order.
    List(Vec<Node>),
    /// Keys with values, in the order typed.
    Map(Vec<Entry>),
}

/// A key and its value.
#[derive(Clone, Debug, PartialEq)]
pub struct Entry {
    /// The key as typed.
    pub key: String,
    /// Where the key stands.
    pub key_location: Location,
    /// The value.
    pub node: Node,
    /// Whether the key stands without a colon, as when a comma inside `{ }` ends a text.
    pub bare: bool,
}

impl Node {
    /// The entries, if this is a map.
    #[must_use]
    pub fn entries(&self) -> Option<&[Entry]> {
        match &self.value {
            Value::Map(entries) => Some(entries),
            _ => None,
        }
    }

    /// The value of a key, if this is a map that has it.
    #[must_use]
    pub fn get(&self, key: &str) -> Option<&Node> {
        self.entries()?.iter().find(|entry| entry.key == key).map(|entry| &entry.node)
    }

    /// The items, if this is a list.
    #[must_use]
    pub fn items(&self) -> Option<&[Node]> {
        match &self.value {
            Value::List(items) => Some(items),
            _ => None,
        }
    }

    /// The number, if this is a bare one.
    #[must_use]
    pub fn number(&self) -> Option<f64> {
        match &self.value {
            Value::Number { value, .. } => Some(*value),
            _ => None,
        }
    }

    /// Whether the text stands in quotes.
    #[must_use]
    pub fn is_quoted(&self) -> bool {
        self.location.text().starts_with(['"', '\''])
    }

    /// The scalar as typed, if this is one.
    #[must_use]
    pub fn text(&self) -> Option<&str> {
        match &self.value {
            Value::Text(text) | Value::Number { text, .. } => Some(text),
            Value::Flag(true) => Some("true"),
            Value::Flag(false) => Some("false"),
            Value::Null | Value::List(_) | Value::Map(_) => None,
        }
    }

    /// What stands there, in the words of a message.
    #[must_use]
    pub fn shape(&self) -> &'static str {
        match &self.value {
            Value::Null => "nothing",
            Value::Flag(_) => "true or false",
            Value::Number { .. } => "a number",
            Value::Text(_) => "a text",
            Value::List(_) => "a list",
            Value::Map(_) => "a block of keys",
        }
    }

    /// The step of a path that names item `position` of a list: its `name`, else its position.
    #[must_use]
    pub fn item_step(&self, position: usize) -> String {
        match self.get("name").and_then(Node::text) {
            Some(name) => name.to_owned(),
            None => position.to_string(),
        }
    }
}
