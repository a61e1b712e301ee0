//! A value of the tree on its way to be read: the node, its path, its place in the canonical order.

use std::ops::Range;
use std::sync::Arc;

use super::about::{About, Bound};
use super::error::SpecError;
use super::fields::{Fields, measure, origin_mark};
use super::later::is_later;
use super::node::{Entry, Node, Origin, Value};
use super::place::{KeyPath, Location, Place, SourceText};
use super::reader::{Provenance, Reader, Reported, ResolvedLine, Step};
use super::suggest::nearest;
use crate::units::{self, Dimension};

/// Names a user cannot give.
const RESERVED: [&str; 8] = ["rest", "same", "inlet", "outlet", "inner", "outer", "lower", "upper"];

/// A node of the tree, or the value that a key has by default.
#[derive(Clone, Debug)]
enum Held<'a> {
    Tree(&'a Node),
    Default(Box<Node>),
}

/// A source that a block gives.
#[derive(Clone, Debug)]
struct Given {
    text: String,
    confirmed: bool,
    /// The file that gives it: what another file adds below is not from that source.
    file: Arc<SourceText>,
}

/// A value that can be opened as a block, listed, or measured as a quantity.
#[derive(Clone, Debug)]
pub struct Block<'a> {
    reader: &'a Reader,
    held: Held<'a>,
    path: KeyPath,
    order: Vec<Step>,
    /// Whether the value stands for the key `value` of the block it is short for.
    short: bool,
    /// The source that holds here.
    source: Option<Given>,
}

impl<'a> Block<'a> {
    /// The top of a spec.
    #[must_use]
    pub fn top(reader: &'a Reader, root: &'a Node) -> Self {
        Self { reader, held: Held::Tree(root), path: KeyPath::default(), order: Vec::new(), short: false, source: None }
    }

    /// Who gathers what is found.
    #[must_use]
    pub fn reader(&self) -> &'a Reader {
        self.reader
    }

    /// The node.
    #[must_use]
    pub fn node(&self) -> &Node {
        match &self.held {
            Held::Tree(node) => node,
            Held::Default(node) => node,
        }
    }

    /// The node, if it stands in a file; a default is a scalar and has nothing below it.
    #[must_use]
    pub(super) fn tree(&self) -> Option<&'a Node> {
        match self.held {
            Held::Tree(node) => Some(node),
            Held::Default(_) => None,
        }
    }

    /// The path of keys to this value.
    #[must_use]
    pub fn path(&self) -> &KeyPath {
        &self.path
    }

    /// The last step of the path; `spec` at the top.
    #[must_use]
    pub fn last_step(&self) -> &str {
        self.path.0.last().map_or("spec", String::as_str)
    }

    /// The block's name in a message: its path, `spec` at the top.
    #[must_use]
    pub fn name(&self) -> String {
        if self.path.0.is_empty() { "spec".to_owned() } else { self.path.to_string() }
    }

    /// Where the value stands.
    #[must_use]
    pub fn place(&self) -> Place {
        Place { location: self.node().location.clone(), path: self.path.clone() }
    }

    /// Opens the block by its table.
    #[must_use]
    pub fn open(&self, about: &'static About) -> Fields<'a> {
        self.open_for(about, Dimension::RATIO)
    }

    /// Opens a law by its table, for a property of this dimension.
    #[must_use]
    pub fn open_for(&self, about: &'static About, subject: Dimension) -> Fields<'a> {
        Fields::open(self.clone(), about, subject)
    }

    /// The kind of a block: what its key `kind` says, `plain` where there is no such key.
    ///
    /// # Errors
    /// The word is no kind of `what`; it is noted.
    pub fn kind(
        &self,
        what: &'static str,
        kinds: &'static [&'static About],
        plain: Option<&'static About>,
    ) -> Result<&'static About, Reported> {
        self.kind_by("kind", what, kinds, plain)
    }

    /// The kind of a block by the key that says it.
    ///
    /// # Errors
    /// The word is no kind of `what`, or one of a later version; it is noted.
    pub fn kind_by(
        &self,
        key: &'static str,
        what: &'static str,
        kinds: &'static [&'static About],
        plain: Option<&'static About>,
    ) -> Result<&'static About, Reported> {
        let known = || kinds.iter().map(|about| about.kind);
        let Some(word) = self.tree().and_then(|node| node.get(key)) else {
            if let Some(about) = plain {
                return Ok(about);
            }
            let error = match self.node().entries() {
                Some(_) => SpecError::MissingKey {
                    at: self.place(),
                    block: self.name(),
                    key,
                    example: kinds.first().map_or("", |about| about.kind),
                },
                None => self.wrong_shape(self.last_step(), "a block with a `kind`"),
            };
            return Err(self.refuse(error));
        };
        let text = word.text().unwrap_or_default();
        if let Some(about) = kinds.iter().find(|about| about.kind == text) {
            self.step_to(key, Step::Key(0), Held::Tree(word)).resolve(text.to_owned());
            return Ok(about);
        }
        let at = Place { location: word.location.clone(), path: self.path.child(key) };
        if is_later(text) {
            return Err(self.refuse(SpecError::NotInThisVersion { at, what: format!("{key}: {text}") }));
        }
        Err(self.refuse(SpecError::UnknownKind {
            at,
            what,
            found: text.to_owned(),
            nearest: nearest(text, known()).map(str::to_owned),
            known: known().collect(),
        }))
    }

    /// The value of a key of this block, unread by any table.
    #[must_use]
    pub fn child_of(&self, key: &str) -> Option<Block<'a>> {
        let node = self.tree()?.get(key)?;
        Some(self.step_to(key, Step::Name(key.to_owned()), Held::Tree(node)))
    }

    /// A block that was not given: all its keys have their defaults.
    #[must_use]
    pub fn absent(&self, key: &str, position: usize) -> Block<'a> {
        let location = Location { source: Arc::clone(&self.node().location.source), bytes: 0..0 };
        let node = Node { value: Value::Map(Vec::new()), location, origin: Origin::File };
        self.step_to(key, Step::Key(position), Held::Default(Box::new(node)))
    }

    /// Notes a mistake.
    #[must_use]
    pub fn refuse(&self, error: SpecError) -> Reported {
        self.reader.problem(error);
        Reported
    }

    /// The mistake that something else is wanted here.
    #[must_use]
    pub fn wrong_shape(&self, key: &str, wanted: &'static str) -> SpecError {
        SpecError::WrongShape { at: self.place(), key: key.to_owned(), wanted, found: self.node().shape() }
    }

    /// The items of a list; none if this is no list.
    #[must_use]
    pub fn items(&self) -> Vec<Block<'a>> {
        let items = self.tree().and_then(Node::items).unwrap_or_default();
        let below = |(k, node): (usize, &'a Node)| self.step_to(&node.item_step(k), Step::Item(k), Held::Tree(node));
        items.iter().enumerate().map(below).collect()
    }

    /// The items of a map whose keys the user chose: key as typed, where it stands, value.
    #[must_use]
    pub fn keyed(&self) -> Vec<(&'a str, Location, Block<'a>)> {
        let entries = self.tree().and_then(Node::entries).unwrap_or_default();
        let below = |entry: &'a Entry| {
            let step = Step::Name(entry.key.clone());
            let value = self.step_to(&entry.key, step, Held::Tree(&entry.node));
            (entry.key.as_str(), entry.key_location.clone(), value)
        };
        entries.iter().map(below).collect()
    }

    /// The same without the places of the keys.
    #[must_use]
    pub fn pairs(&self) -> Vec<(&'a str, Block<'a>)> {
        self.keyed().into_iter().map(|(key, _, value)| (key, value)).collect()
    }

    /// The items of a map whose keys are names; a key that cannot be a name is noted and left out.
    #[must_use]
    pub fn named(&self) -> Vec<(&'a str, Block<'a>)> {
        if self.tree().is_some_and(|node| node.entries().is_none()) {
            self.reader.problem(self.wrong_shape(self.last_step(), "a block of names"));
        }
        let good = |(name, location, block): (&'a str, Location, Block<'a>)| {
            let at = Place { location, path: block.path.clone() };
            check_name(name, at).map_err(|error| self.refuse(error)).ok()?;
            Some((name, block))
        };
        self.keyed().into_iter().filter_map(good).collect()
    }

    /// The name of a list's item: its key `name`; a mistake is noted.
    ///
    /// # Errors
    /// The text cannot be a name.
    pub fn item_name(&self) -> Result<String, Reported> {
        let Some(node) = self.tree().and_then(|node| node.get("name")) else {
            return Err(Reported); // opening the block notes the missing key
        };
        let at = Place { location: node.location.clone(), path: self.path.child("name") };
        let name = node.text().unwrap_or_default();
        check_name(name, at).map_err(|error| self.refuse(error))?;
        Ok(name.to_owned())
    }

    /// The value as a quantity, SI; noted in the resolved listing.
    ///
    /// # Errors
    /// It is no such quantity, or out of its bound; it is noted.
    pub fn measure(&self, key: &str, dimension: Dimension, bound: Bound) -> Result<f64, Reported> {
        let value = measure(self.node(), &self.path, key, dimension, bound).map_err(|e| self.refuse(e))?;
        self.resolve(units::write(value, dimension));
        Ok(value)
    }

    /// The key that leads here as a quantity, SI: the temperature of a table's point.
    ///
    /// # Errors
    /// It is no such quantity; it is noted.
    pub fn measure_key(&self, key: &str, location: Location, dimension: Dimension) -> Result<f64, Reported> {
        let value = Value::Text(key.to_owned());
        let node = Node { value, location, origin: self.node().origin };
        measure(&node, &self.path, key, dimension, Bound::Any).map_err(|error| self.refuse(error))
    }

    /// The value as the name of one of `known`; its position there.
    ///
    /// # Errors
    /// It is no text, or no such name; it is noted.
    pub fn choose(&self, what: &'static str, known: &[String]) -> Result<usize, Reported> {
        let Some(text) = self.node().text() else {
            return Err(self.refuse(self.wrong_shape(self.last_step(), "a name")));
        };
        if let Some(position) = known.iter().position(|name| name == text) {
            self.resolve(text.to_owned());
            return Ok(position);
        }
        Err(self.refuse(unknown_name(self.place(), what, text, known)))
    }

    /// Notes the value for the resolved listing.
    pub fn resolve(&self, value: String) {
        let origin = origin_mark(self.node(), self.tree().is_none());
        let path = if self.short { self.path.child("value") } else { self.path.clone() };
        self.reader.resolve(self.order.clone(), ResolvedLine { path, value, origin });
    }

    /// Notes where the numbers of this block come from.
    pub fn trace(&self) {
        let entries = self.node().entries().unwrap_or_default();
        let is_changed = entries.iter().any(|entry| entry.node.origin != Origin::File);
        let (source, confirmed) = match &self.source {
            // a number put in by `--set` or `override` does not come from the source of those it stands among
            Some(given) if !is_changed => (Some(given.text.clone()), given.confirmed),
            _ => (None, true),
        };
        let path = self.path.clone();
        self.reader.trace(self.order.clone(), Provenance { path, source, confirmed });
    }

    /// A key's value below this block.
    pub(super) fn below(&self, key: &str, position: usize, node: &'a Node) -> Block<'a> {
        if self.tree().is_some_and(|here| std::ptr::eq(here, node)) {
            return Block { short: true, ..self.clone() };
        }
        self.step_to(key, Step::Key(position), Held::Tree(node))
    }

    /// A key's default below this block.
    pub(super) fn below_default(&self, key: &str, position: usize, text: &str) -> Block<'a> {
        let source = Arc::new(SourceText { name: "default".to_owned(), text: text.to_owned() });
        let bytes: Range<usize> = 0..text.len();
        let value = match (text, text.parse::<f64>()) {
            ("true" | "false", _) => Value::Flag(text == "true"),
            (_, Ok(value)) => Value::Number { value, text: text.to_owned() },
            _ => Value::Text(text.to_owned()),
        };
        let node = Node { value, location: Location { source, bytes }, origin: Origin::File };
        self.step_to(key, Step::Key(position), Held::Default(Box::new(node)))
    }

    fn step_to(&self, step: &str, order_step: Step, held: Held<'a>) -> Block<'a> {
        let mut order = self.order.clone();
        order.push(order_step);
        let mut block = Block {
            reader: self.reader,
            held,
            path: self.path.child(step),
            order,
            short: false,
            source: self.source.clone(),
        };
        block.inherit_source();
        block
    }

    /// A source given in this block holds from here on downwards, in the file that gives it.
    fn inherit_source(&mut self) {
        let Some(node) = self.tree() else { return };
        let file = &node.location.source;
        let confirmed = !matches!(node.get("confirmed").map(|flag| &flag.value), Some(Value::Flag(false)));
        if let Some(words) = node.get("source").and_then(Node::text) {
            self.source = Some(Given { text: self.reader.source_text(words), confirmed, file: Arc::clone(file) });
            return;
        }
        self.source = self.source.take().filter(|given| Arc::ptr_eq(&given.file, file));
        if let Some(given) = &mut self.source {
            given.confirmed &= confirmed;
        }
    }
}

/// Holds a name of the user's against the rule for names.
fn check_name(name: &str, at: Place) -> Result<(), SpecError> {
    let good = name.starts_with(|c: char| c.is_ascii_lowercase())
        && name.chars().all(|c| c.is_ascii_lowercase() || c.is_ascii_digit() || c == '_');
    if !good {
        return Err(SpecError::BadName { at, name: name.to_owned() });
    }
    if RESERVED.contains(&name) {
        return Err(SpecError::ReservedName { at, name: name.to_owned() });
    }
    Ok(())
}

/// The mistake that nothing of this name exists.
#[must_use]
pub fn unknown_name(at: Place, what: &'static str, name: &str, known: &[String]) -> SpecError {
    let nearest = nearest(name, known.iter().map(String::as_str)).map(str::to_owned);
    SpecError::UnknownName { at, what, name: name.to_owned(), nearest, known: known.to_vec() }
}
