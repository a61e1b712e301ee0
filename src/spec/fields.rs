//! Reading a block by the table that describes it.
//!
//! Opening a block against its [`About`] reports all that is wrong with its structure: keys that are
//! unknown, missing, of a later version, or alternatives given together. The values are then asked for one
//! by one; what is wrong with one is noted and the reading goes on, so that all mistakes of a spec come in
//! one go. [`Fields::finish`] says whether the block may be used, and holds that no key was left unread.

use std::cell::{Cell, RefCell};

use super::about::{About, Bound, Key, Need, Takes};
use super::block::Block;
use super::error::SpecError;
use super::later::is_later;
use super::node::{Entry, Node, Origin, Value};
use super::place::{KeyPath, Place};
use super::reader::Reported;
use super::suggest::nearest;
use crate::units::{self, Dimension};

/// Keys that any block may carry: where its numbers come from.
pub const PROVENANCE: [&str; 3] = ["source", "confirmed", "note"];

/// The key by which [`Block::kind`] chose the table.
const KIND: &str = "kind";

/// A block that was opened for reading.
#[derive(Debug)]
pub struct Fields<'a> {
    block: Block<'a>,
    about: &'static About,
    /// The dimension that the law is for.
    subject: Dimension,
    asked: RefCell<Vec<&'static str>>,
    failed: Cell<bool>,
}

impl<'a> Fields<'a> {
    /// Opens a block; notes everything that is wrong with its structure.
    pub(super) fn open(block: Block<'a>, about: &'static About, subject: Dimension) -> Self {
        let fields = Self { block, about, subject, asked: RefCell::default(), failed: Cell::new(false) };
        fields.check_shape();
        fields.check_keys();
        fields.check_needs();
        fields
    }

    /// Whether the block is read by this table.
    #[must_use]
    pub fn is_about(&self, about: &About) -> bool {
        self.about == about
    }

    /// The block that was opened.
    #[must_use]
    pub fn block(&self) -> &Block<'a> {
        &self.block
    }

    /// Whether the key was given.
    #[must_use]
    pub fn has(&self, key: &str) -> bool {
        self.find(key).is_some()
    }

    /// A quantity, SI; the default where the key is absent; NaN where it is missing or wrong, which is noted.
    pub fn quantity(&self, key: &'static str) -> f64 {
        self.optional_quantity(key).unwrap_or(f64::NAN)
    }

    /// A quantity, SI, if the key was given or has a default.
    pub fn optional_quantity(&self, key: &'static str) -> Option<f64> {
        let known = self.known(key);
        let (dimension, bound) = match known.takes {
            Takes::Quantity(dimension, bound) => (dimension, bound),
            Takes::Subject(power, bound) => {
                let kelvin = Dimension::TEMPERATURE_DIFFERENCE.to_power(power);
                (if power == 0.0 { self.subject } else { self.subject.times(kelvin) }, bound)
            }
            _ => unreachable!("`{key}` of `{}` is not a quantity", self.about.kind),
        };
        self.measured(key, dimension, bound)
    }

    fn measured(&self, key: &'static str, dimension: Dimension, bound: Bound) -> Option<f64> {
        let child = self.child(key)?;
        if self.is_cut(key) {
            self.failed.set(true);
            return None;
        }
        match child.measure(key, dimension, bound) {
            Ok(value) => Some(value),
            Err(Reported) => {
                self.failed.set(true);
                None
            }
        }
    }

    /// A list of numbers, SI, if the key was given: a polynomial, or numbers of one dimension.
    pub fn numbers(&self, key: &'static str) -> Option<Vec<f64>> {
        let known = self.known(key);
        let child = self.child(key)?;
        let Some(items) = child.node().items() else {
            self.problem(child.wrong_shape(key, "a list of numbers"));
            return None;
        };
        let mut values = Vec::with_capacity(items.len());
        for (k, item) in child.items().iter().enumerate() {
            let dimension = match known.takes {
                Takes::Numbers(dimension) => dimension,
                Takes::SubjectPolynomial => {
                    let power = -f64::from(u16::try_from(k).unwrap_or(u16::MAX));
                    let per = Dimension::TEMPERATURE_DIFFERENCE.to_power(power);
                    if k == 0 { self.subject } else { self.subject.times(per) }
                }
                _ => unreachable!("`{key}` of `{}` is not a list of numbers", self.about.kind),
            };
            match item.measure(key, dimension, Bound::Any) {
                Ok(value) => values.push(value),
                Err(Reported) => self.failed.set(true),
            }
        }
        (values.len() == items.len()).then_some(values)
    }

    /// A whole number; 0 where it is wrong, which is noted.
    pub fn whole(&self, key: &'static str) -> usize {
        let Takes::Whole(first, last) = self.known(key).takes else {
            unreachable!("`{key}` of `{}` is not a whole number", self.about.kind)
        };
        let Some(child) = self.child(key) else { return 0 };
        let text = child.node().text().unwrap_or_default().to_owned();
        let Some(value) = child.node().number().filter(|value| value.fract() == 0.0) else {
            let error = if child.node().text().is_some() {
                SpecError::NotWhole { at: child.place(), key: key.to_owned(), text }
            } else {
                child.wrong_shape(key, "a whole number")
            };
            self.problem(error);
            return 0;
        };
        #[expect(clippy::cast_precision_loss, reason = "bounds are far below 2^53")]
        if value < first as f64 || value > last as f64 {
            let bound = format!("from {first} to {last}");
            self.problem(SpecError::OutOfBounds { at: child.place(), key: key.to_owned(), text, bound });
            return 0;
        }
        child.resolve(format!("{value}"));
        #[expect(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "held between the bounds above")]
        {
            value as usize
        }
    }

    /// `true` or `false`; false where it is wrong, which is noted.
    pub fn flag(&self, key: &'static str) -> bool {
        let Some(child) = self.child(key) else { return false };
        match &child.node().value {
            Value::Flag(flag) => {
                child.resolve(flag.to_string());
                *flag
            }
            _ => {
                let error = match child.node().text() {
                    Some(text) => SpecError::NotAFlag { at: child.place(), key: key.to_owned(), text: text.to_owned() },
                    None => child.wrong_shape(key, "`true` or `false`"),
                };
                self.problem(error);
                false
            }
        }
    }

    /// One of the words the key knows; the first where it is wrong, which is noted.
    pub fn word(&self, key: &'static str) -> &'static str {
        let Takes::Word(words) = self.known(key).takes else {
            unreachable!("`{key}` of `{}` is not a word", self.about.kind)
        };
        let Some(child) = self.child(key) else { return words[0] };
        let Some(text) = child.node().text() else {
            self.problem(child.wrong_shape(key, "a word"));
            return words[0];
        };
        if let Some(word) = words.iter().find(|word| **word == text) {
            child.resolve((*word).to_owned());
            return word;
        }
        if is_later(text) {
            let what = format!("{key}: {text}");
            self.problem(SpecError::NotInThisVersion { at: child.place(), what });
            return words[0];
        }
        self.problem(SpecError::UnknownWord {
            at: child.place(),
            key: key.to_owned(),
            word: text.to_owned(),
            nearest: nearest(text, words.iter().copied()).map(str::to_owned),
            known: words.to_vec(),
        });
        words[0]
    }

    /// A text, if given.
    pub fn text(&self, key: &'static str) -> Option<String> {
        let child = self.child(key)?;
        let Some(text) = child.node().text() else {
            self.problem(child.wrong_shape(key, "a text"));
            return None;
        };
        child.resolve(text.to_owned());
        Some(text.to_owned())
    }

    /// The value of a key that is a block, a list or a law, if given (or the default).
    pub fn child(&self, key: &'static str) -> Option<Block<'a>> {
        let known = self.known(key);
        let mut asked = self.asked.borrow_mut();
        if !asked.contains(&known.name) {
            asked.push(known.name);
        }
        drop(asked);
        let position = self.about.keys.iter().position(|entry| entry.name == key).unwrap_or(0);
        if let Some(node) = self.find(key) {
            return Some(self.block.below(key, position, node));
        }
        match known.need {
            Need::Default(text) => Some(self.block.below_default(key, position, text)),
            _ => None,
        }
    }

    /// The block under a key; where it was not given, a block whose keys all have their defaults.
    pub fn child_or_absent(&self, key: &'static str) -> Block<'a> {
        let position = self.about.keys.iter().position(|entry| entry.name == key).unwrap_or(0);
        self.child(key).unwrap_or_else(|| self.block.absent(key, position))
    }

    /// The place of a key's value, or of the block where the key is absent.
    #[must_use]
    pub fn place_of(&self, key: &str) -> Place {
        match self.find(key) {
            Some(node) => Place { location: node.location.clone(), path: self.block.path().child(key) },
            None => self.block.place(),
        }
    }

    /// The place of a key's value in a block below this one; of the block where the key is absent.
    #[must_use]
    pub fn place_in(&self, block: &'static str, key: &str) -> Place {
        let child = self.child(block).and_then(|child| child.child_of(key));
        child.map_or_else(|| self.place_of(block), |child| child.place())
    }

    /// Notes a mistake of this block.
    pub fn problem(&self, error: SpecError) {
        self.failed.set(true);
        self.block.reader().problem(error);
    }

    /// Notes that something below this block was wrong.
    pub fn take<T>(&self, read: Result<T, Reported>) -> Option<T> {
        if read.is_err() {
            self.failed.set(true);
        }
        read.ok()
    }

    /// Ends the reading.
    ///
    /// # Errors
    /// Something in the block was wrong; it has been noted.
    ///
    /// # Panics
    /// A key that the table accepts was given and never asked for: a fault of the caller.
    pub fn finish<T>(self, value: T) -> Result<T, Reported> {
        if self.failed.get() {
            return Err(Reported);
        }
        let asked = self.asked.borrow();
        for key in self.about.keys {
            assert!(
                !self.has(key.name) || asked.contains(&key.name) || key.name == KIND,
                "the key `{}` of `{}` was accepted but never read",
                key.name,
                self.about.kind
            );
        }
        Ok(value)
    }

    fn known(&self, key: &str) -> &'static Key {
        self.about
            .key(key)
            .unwrap_or_else(|| unreachable!("`{key}` does not stand in the table of `{}`", self.about.kind))
    }

    /// The node of a key; a scalar stands for the key `value`.
    fn find(&self, key: &str) -> Option<&'a Node> {
        let node = self.block.tree()?;
        match &node.value {
            Value::Map(_) => node.get(key),
            Value::Null | Value::List(_) => None,
            _ if key == "value" => Some(node),
            _ => None,
        }
    }

    fn check_shape(&self) {
        if !self.has_right_shape() {
            self.problem(self.block.wrong_shape(self.block.last_step(), "a block of keys"));
        }
    }

    /// Whether it is a block, or a scalar that stands for the key `value`.
    fn has_right_shape(&self) -> bool {
        let node = self.block.node();
        node.entries().is_some() || self.about.key("value").is_some() && node.text().is_some()
    }

    fn check_keys(&self) {
        let entries = self.block.node().entries().unwrap_or_default();
        for (position, entry) in entries.iter().enumerate() {
            self.check_provenance(entry);
            let at = Place { location: entry.key_location.clone(), path: self.block.path().child(&entry.key) };
            match self.about.key(&entry.key) {
                Some(key) if key.need == Need::Later => {
                    let what = format!("{}", self.block.path().child(&entry.key));
                    self.problem(SpecError::NotInThisVersion { at, what });
                }
                Some(key) => self.block.reader().given(self.about.kind, key.name),
                None if PROVENANCE.contains(&entry.key.as_str()) => {}
                // of a text that several commas cut to pieces the first is reported
                None if entry.bare && position > 0 && self.is_piece(&entries[position - 1]) => {}
                None if entry.bare => {
                    self.problem(SpecError::CommaEndedText { at, key: entry.key.clone() });
                }
                None => {
                    let known: Vec<&'static str> = self.usable_keys().collect();
                    let nearest = nearest(&entry.key, known.iter().copied()).map(str::to_owned);
                    let (block, key) = (self.block.name(), entry.key.clone());
                    self.problem(SpecError::UnknownKey { at, block, key, nearest, known });
                }
            }
        }
    }

    /// `source` and `note` are texts, `confirmed` is true or false.
    fn check_provenance(&self, entry: &Entry) {
        let node = &entry.node;
        let at = || Place { location: node.location.clone(), path: self.block.path().child(&entry.key) };
        let (key, found) = (entry.key.clone(), node.shape());
        let error = match (entry.key.as_str(), &node.value) {
            ("confirmed", Value::Flag(_)) => return,
            ("confirmed", Value::Text(text)) => SpecError::NotAFlag { at: at(), key, text: text.clone() },
            ("confirmed", _) => SpecError::WrongShape { at: at(), key, wanted: "`true` or `false`", found },
            ("source" | "note", _) if node.text().is_none() => {
                SpecError::WrongShape { at: at(), key, wanted: "a text", found }
            }
            _ => return,
        };
        self.problem(error);
    }

    /// Whether an entry is no key, but what a comma cut off the text before it.
    fn is_piece(&self, entry: &Entry) -> bool {
        entry.bare && self.about.key(&entry.key).is_none() && !PROVENANCE.contains(&entry.key.as_str())
    }

    /// Whether a comma cut the value of a key to pieces, which is reported.
    fn is_cut(&self, key: &str) -> bool {
        let entries = self.block.node().entries().unwrap_or_default();
        entries.windows(2).any(|pair| pair[0].key == key && self.is_piece(&pair[1]))
    }

    /// Whether an unknown key of the block, which is reported, most likely stands for this one.
    fn is_misspelt(&self, key: &str) -> bool {
        let entries = self.block.node().entries().unwrap_or_default();
        let unknown = entries.iter().filter(|entry| self.about.key(&entry.key).is_none() && !entry.bare);
        unknown.filter_map(|entry| nearest(&entry.key, self.usable_keys())).any(|meant| meant == key)
    }

    fn usable_keys(&self) -> impl Iterator<Item = &'static str> {
        self.about.keys.iter().filter(|key| key.need != Need::Later).map(|key| key.name)
    }

    fn check_needs(&self) {
        if !self.has_right_shape() {
            return; // reported
        }
        let is_later = |entry: &Entry| self.about.key(&entry.key).is_some_and(|key| key.need == Need::Later);
        if self.block.node().entries().unwrap_or_default().iter().any(is_later) {
            return; // reported; a later version has other needs
        }
        for (k, key) in self.about.keys.iter().enumerate() {
            match key.need {
                Need::Required(example) if !self.has(key.name) && !self.is_misspelt(key.name) => {
                    self.problem(SpecError::MissingKey {
                        at: self.block.place(),
                        block: self.block.name(),
                        key: key.name,
                        example,
                    })
                }
                Need::OneOf(group) | Need::AtMostOneOf(group) if self.is_first_of(group, k) => {
                    self.check_group(group, matches!(key.need, Need::OneOf(_)));
                }
                _ => {}
            }
        }
    }

    fn group_of(key: &Key) -> Option<&'static str> {
        match key.need {
            Need::OneOf(group) | Need::AtMostOneOf(group) => Some(group),
            _ => None,
        }
    }

    fn is_first_of(&self, group: &str, position: usize) -> bool {
        self.about.keys.iter().position(|key| Self::group_of(key) == Some(group)) == Some(position)
    }

    fn check_group(&self, group: &str, one_is_due: bool) {
        let members = || self.about.keys.iter().filter(|key| Self::group_of(key) == Some(group)).map(|key| key.name);
        let given: Vec<&'static str> = members().filter(|key| self.has(key)).collect();
        match given[..] {
            [] if one_is_due && !members().any(|key| self.is_misspelt(key)) => {
                let (at, block) = (self.block.place(), self.block.name());
                self.problem(SpecError::NoneOf { at, block, keys: members().collect() });
            }
            [one, other, ..] => {
                let (at, block) = (self.place_of(other), self.block.name());
                self.problem(SpecError::BothOf { at, block, one, other });
            }
            _ => {}
        }
    }
}

/// Reads one scalar as a quantity and holds it against its bound.
pub(super) fn measure(
    node: &Node,
    path: &KeyPath,
    key: &str,
    wanted: Dimension,
    bound: Bound,
) -> Result<f64, SpecError> {
    let at = |location| Place { location, path: path.clone() };
    let Some(text) = node.text() else {
        let found = node.shape();
        let at = at(node.location.clone());
        return Err(SpecError::WrongShape { at, key: key.to_owned(), wanted: "a value", found });
    };
    let value = units::read(text, wanted).map_err(|error| {
        let quote = usize::from(node.is_quoted());
        let bytes = error.bytes();
        let location = node.location.part(bytes.start + quote..bytes.end + quote);
        SpecError::Unit { at: at(location), error, key: key.to_owned() }
    })?;
    let outside = |bound: &str| {
        Err(SpecError::OutOfBounds {
            at: at(node.location.clone()),
            key: key.to_owned(),
            text: text.to_owned(),
            bound: bound.to_owned(),
        })
    };
    match bound {
        Bound::Positive if value <= 0.0 => outside("above 0"),
        Bound::NotNegative | Bound::Fraction if value < 0.0 => outside("0 or above"),
        Bound::AtLeastOne if value < 1.0 => outside("1 or above"),
        Bound::Fraction if value > 1.0 => Err(SpecError::FractionAboveOne {
            at: at(node.location.clone()),
            key: key.to_owned(),
            text: text.to_owned(),
        }),
        _ => Ok(value),
    }
}

/// The word that marks who gave a value in the resolved listing.
pub(super) fn origin_mark(node: &Node, default: bool) -> String {
    match node.origin {
        _ if default => "default".to_owned(),
        Origin::File => node.location.source.name.clone(),
        Origin::Override => format!("{} (override)", node.location.source.name),
        Origin::Set => "set".to_owned(),
    }
}
