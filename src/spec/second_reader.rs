//! The second reader: what every scalar is.
//!
//! serde_yaml reads the same text. It decides what is a number, a text, a flag or nothing; where it sees
//! another shape than the first reader, the text is ambiguous and refused.

use std::fmt;

use serde::Deserialize;
use serde::de::{Deserializer, EnumAccess, MapAccess, SeqAccess, VariantAccess, Visitor};

use super::document::Mistakes;
use super::error::SpecError;
use super::node::{Entry, Node, Value};
use super::not_yaml::second_trouble;
use super::place::KeyPath;

/// Longest text that a message quotes.
const QUOTED: usize = 40;

/// What the second reader saw. serde_yaml's own value would end at the first key given twice.
#[derive(Debug, PartialEq)]
enum Seen {
    Null,
    Flag(bool),
    Number(f64),
    Text(String),
    List(Vec<Seen>),
    Map(Vec<(Seen, Seen)>),
}

/// Reads the text again and settles what the scalars of the tree are.
pub(super) fn settle(node: &mut Node, text: &str, path: &KeyPath, mistakes: &mut Mistakes) {
    match serde_yaml::from_str::<Seen>(text) {
        Ok(seen) => Walk { path: path.0.clone(), mistakes }.node(node, seen),
        Err(error) => {
            let (bytes, reason) = second_trouble(&error, text);
            let location = mistakes.location(bytes);
            mistakes.add(location, path.clone(), |at| SpecError::NotYaml { at, reason });
        }
    }
}

/// Both trees, walked together; the first is never deeper than its limit.
struct Walk<'m> {
    path: Vec<String>,
    mistakes: &'m mut Mistakes,
}

impl Walk<'_> {
    fn node(&mut self, node: &mut Node, seen: Seen) {
        match (&mut node.value, seen) {
            (Value::Null, Seen::Null) => {}
            (Value::Text(_), Seen::Null) => node.value = Value::Null,
            (Value::Text(_), Seen::Flag(flag)) => node.value = Value::Flag(flag),
            (Value::Text(text), Seen::Number(value)) if value.is_finite() => {
                node.value = Value::Number { value, text: std::mem::take(text) };
            }
            (Value::Text(text), Seen::Number(_)) => {
                let text = quoted(text);
                let (location, path) = (node.location.clone(), self.path());
                self.mistakes.add(location, path, |at| SpecError::NotFinite { at, text });
            }
            (Value::Text(text), Seen::Text(other)) if *text == other => {}
            (Value::List(items), Seen::List(others)) if items.len() == others.len() => self.items(items, others),
            (Value::Map(entries), Seen::Map(others)) if entries.len() == others.len() => self.entries(entries, others),
            (_, seen) => self.ambiguous(node, &seen),
        }
    }

    fn items(&mut self, items: &mut [Node], others: Vec<Seen>) {
        for (position, (item, seen)) in items.iter_mut().zip(others).enumerate() {
            self.path.push(item.item_step(position));
            self.node(item, seen);
            self.path.pop();
        }
    }

    fn entries(&mut self, entries: &mut [Entry], others: Vec<(Seen, Seen)>) {
        for (entry, (key, seen)) in entries.iter_mut().zip(others) {
            self.path.push(entry.key.clone());
            match &key {
                Seen::List(_) | Seen::Map(_) => self.other_key(entry, &key),
                Seen::Text(text) if *text != entry.key => self.other_key(entry, &key),
                _ => self.node(&mut entry.node, seen), // a key such as `20` is a text for us, as typed
            }
            self.path.pop();
        }
    }

    fn other_key(&mut self, entry: &Entry, key: &Seen) {
        let (one, other) = (format!("the key `{}`", quoted(&entry.key)), format!("the key {}", key.words()));
        let (location, path) = (entry.key_location.clone(), self.path());
        self.mistakes.add(location, path, |at| SpecError::Ambiguous { at, one, other });
    }

    fn ambiguous(&mut self, node: &Node, seen: &Seen) {
        let one = match &node.value {
            Value::Text(text) => format!("`{}`", quoted(text)),
            Value::List(items) => format!("a list of {}", items.len()),
            Value::Map(entries) => format!("a block of {} keys", entries.len()),
            Value::Null | Value::Flag(_) | Value::Number { .. } => node.shape().to_owned(),
        };
        let (location, path, other) = (node.location.clone(), self.path(), seen.words());
        self.mistakes.add(location, path, |at| SpecError::Ambiguous { at, one, other });
    }

    fn path(&self) -> KeyPath {
        KeyPath(self.path.clone())
    }
}

/// The text, or its beginning if it is long.
fn quoted(text: &str) -> String {
    match text.char_indices().nth(QUOTED) {
        Some((end, _)) => format!("{}…", &text[..end]),
        None => text.to_owned(),
    }
}

impl Seen {
    fn words(&self) -> String {
        match self {
            Self::Null => "nothing".to_owned(),
            Self::Flag(flag) => flag.to_string(),
            Self::Number(value) => format!("the number {value}"),
            Self::Text(text) => format!("`{}`", quoted(text)),
            Self::List(items) => format!("a list of {}", items.len()),
            Self::Map(entries) => format!("a block of {} keys", entries.len()),
        }
    }
}

impl<'de> Deserialize<'de> for Seen {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        deserializer.deserialize_any(SeenVisitor)
    }
}

struct SeenVisitor;

impl<'de> Visitor<'de> for SeenVisitor {
    type Value = Seen;

    fn expecting(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        out.write_str("a value of YAML")
    }

    fn visit_unit<E>(self) -> Result<Seen, E> {
        Ok(Seen::Null)
    }

    fn visit_none<E>(self) -> Result<Seen, E> {
        Ok(Seen::Null)
    }

    fn visit_some<D: Deserializer<'de>>(self, deserializer: D) -> Result<Seen, D::Error> {
        Seen::deserialize(deserializer)
    }

    fn visit_bool<E>(self, flag: bool) -> Result<Seen, E> {
        Ok(Seen::Flag(flag))
    }

    fn visit_i64<E>(self, value: i64) -> Result<Seen, E> {
        Ok(Seen::Number(value as f64))
    }

    fn visit_u64<E>(self, value: u64) -> Result<Seen, E> {
        Ok(Seen::Number(value as f64))
    }

    fn visit_i128<E>(self, value: i128) -> Result<Seen, E> {
        Ok(Seen::Number(value as f64))
    }

    fn visit_u128<E>(self, value: u128) -> Result<Seen, E> {
        Ok(Seen::Number(value as f64))
    }

    fn visit_f64<E>(self, value: f64) -> Result<Seen, E> {
        Ok(Seen::Number(value))
    }

    fn visit_str<E>(self, text: &str) -> Result<Seen, E> {
        Ok(Seen::Text(text.to_owned()))
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut list: A) -> Result<Seen, A::Error> {
        let mut items = Vec::new();
        while let Some(item) = list.next_element()? {
            items.push(item);
        }
        Ok(Seen::List(items))
    }

    fn visit_map<A: MapAccess<'de>>(self, mut map: A) -> Result<Seen, A::Error> {
        let mut entries = Vec::new();
        while let Some(entry) = map.next_entry()? {
            entries.push(entry);
        }
        Ok(Seen::Map(entries))
    }

    /// A tagged value; the first reader has refused the tag, so that this one is never used.
    fn visit_enum<A: EnumAccess<'de>>(self, tagged: A) -> Result<Seen, A::Error> {
        let (_, value) = tagged.variant::<String>()?;
        value.newtype_variant()
    }
}
