//! What is gathered while a spec is read: mistakes, the resolved listing, and where the numbers come from.

use std::cell::RefCell;
use std::collections::{BTreeMap, BTreeSet};

use super::error::SpecError;
use super::place::{KeyPath, Place};

/// Something was wrong, and has been noted with the [`Reader`].
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Reported;

/// A step of the canonical order: keys by their table, list items by position, names by letter.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Step {
    /// A key, by its position in the table.
    Key(usize),
    /// An item of a list.
    Item(usize),
    /// A name of the user's.
    Name(String),
}

/// One line of the resolved spec.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ResolvedLine {
    /// The path of the key.
    pub path: KeyPath,
    /// The value: SI for a quantity, as typed for words and texts.
    pub value: String,
    /// Who gave it: a file's name, `default`, `set`.
    pub origin: String,
}

/// Where the numbers of a block come from.
#[derive(Clone, Debug, PartialEq)]
pub struct Provenance {
    /// The block.
    pub path: KeyPath,
    /// Its source, or that of the block around it.
    pub source: Option<String>,
    /// Whether the spec says that the number was read there.
    pub confirmed: bool,
}

/// Something to warn of that only the reading sees.
#[derive(Clone, Debug, PartialEq)]
pub struct ReadWarning {
    /// The warning's code.
    pub code: &'static str,
    /// What is in doubt.
    pub text: String,
    /// Where it stands.
    pub at: Place,
}

/// Gathers what the reading of a spec finds.
#[derive(Debug, Default)]
pub struct Reader {
    problems: RefCell<Vec<SpecError>>,
    resolved: RefCell<BTreeMap<Vec<Step>, ResolvedLine>>,
    provenance: RefCell<BTreeMap<Vec<Step>, Provenance>>,
    warnings: RefCell<Vec<ReadWarning>>,
    keys: RefCell<BTreeSet<(&'static str, &'static str)>>,
    sources: BTreeMap<String, String>,
}

impl Reader {
    /// A reader that knows the names under `sources`.
    #[must_use]
    pub fn new(sources: BTreeMap<String, String>) -> Self {
        Self { sources, ..Self::default() }
    }

    /// Notes a mistake; the same one only once.
    pub fn problem(&self, error: SpecError) {
        let mut problems = self.problems.borrow_mut();
        if !problems.contains(&error) {
            problems.push(error);
        }
    }

    /// Notes a warning.
    pub fn warn(&self, warning: ReadWarning) {
        self.warnings.borrow_mut().push(warning);
    }

    /// Notes that a key of a table was given.
    pub(super) fn given(&self, table: &'static str, key: &'static str) {
        self.keys.borrow_mut().insert((table, key));
    }

    /// Notes a resolved value.
    pub(super) fn resolve(&self, order: Vec<Step>, line: ResolvedLine) {
        self.resolved.borrow_mut().insert(order, line);
    }

    /// Notes where a block's numbers come from.
    pub(super) fn trace(&self, order: Vec<Step>, provenance: Provenance) {
        self.provenance.borrow_mut().insert(order, provenance);
    }

    /// The text of a source: what stands under `sources` by that name, else the words themselves.
    pub(super) fn source_text(&self, words: &str) -> String {
        self.sources.get(words).cloned().unwrap_or_else(|| words.to_owned())
    }

    /// Whether nothing was wrong so far.
    #[must_use]
    pub fn is_clean(&self) -> bool {
        self.problems.borrow().is_empty()
    }

    /// Ends the reading: the mistakes, or what was gathered.
    ///
    /// # Errors
    /// All mistakes, in the order of the files.
    pub fn end(self) -> Result<Gathered, Vec<SpecError>> {
        let mut problems = self.problems.into_inner();
        if !problems.is_empty() {
            problems.sort_by_key(|error| error.at().location.bytes.start);
            return Err(problems);
        }
        Ok(Gathered {
            resolved: self.resolved.into_inner().into_values().collect(),
            provenance: self.provenance.into_inner().into_values().collect(),
            warnings: self.warnings.into_inner(),
            keys: self.keys.into_inner(),
        })
    }
}

/// What the reading of a good spec leaves.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Gathered {
    /// One line a key, canonical order.
    pub resolved: Vec<ResolvedLine>,
    /// Where the numbers come from, canonical order.
    pub provenance: Vec<Provenance>,
    /// What the reading warns of.
    pub warnings: Vec<ReadWarning>,
    /// Which keys of which tables the spec gives: (kind of the table, key).
    pub keys: BTreeSet<(&'static str, &'static str)>,
}
