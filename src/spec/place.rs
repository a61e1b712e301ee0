//! Where something stands: the file, the bytes, and the path of keys that leads there.
//!
//! Every message of the reader carries a [`Place`]; `cli/` draws the line and the caret from it.

use std::fmt;
use std::ops::Range;
use std::sync::Arc;

/// A text that was read: a file, standard input, or the value of a `--set`.
#[derive(Debug, PartialEq)]
pub struct SourceText {
    /// Name as the user wrote it: a path, `standard input`, `--set`.
    pub name: String,
    /// The whole text, without byte-order mark.
    pub text: String,
}

/// A stretch of a text.
#[derive(Clone, Debug, PartialEq)]
pub struct Location {
    /// The text it lies in.
    pub source: Arc<SourceText>,
    /// The bytes that a caret underlines.
    pub bytes: Range<usize>,
}

impl Location {
    /// The text as typed.
    #[must_use]
    pub fn text(&self) -> &str {
        self.source.text.get(self.bytes.clone()).unwrap_or_default()
    }

    /// Line, counted from 1.
    #[must_use]
    pub fn line(&self) -> usize {
        self.before().matches('\n').count() + 1
    }

    /// Column, counted from 1 in characters.
    #[must_use]
    pub fn column(&self) -> usize {
        let before = self.before();
        let start = before.rfind('\n').map_or(0, |newline| newline + 1);
        before[start..].chars().count() + 1
    }

    /// A part of this stretch, by bytes counted from its start and held inside it.
    #[must_use]
    pub fn part(&self, bytes: Range<usize>) -> Self {
        let end = (self.bytes.start + bytes.end).min(self.bytes.end);
        let start = (self.bytes.start + bytes.start).min(end);
        Self { source: Arc::clone(&self.source), bytes: start..end }
    }

    fn before(&self) -> &str {
        &self.source.text[..self.bytes.start.min(self.source.text.len())]
    }
}

/// The keys from the top of a spec to a value; list items by name, else by position from 0.
#[derive(Clone, Debug, Default, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct KeyPath(pub Vec<String>);

impl KeyPath {
    /// This path and one step more.
    #[must_use]
    pub fn child(&self, step: &str) -> Self {
        let mut steps = self.0.clone();
        steps.push(step.to_owned());
        Self(steps)
    }
}

impl fmt::Display for KeyPath {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        out.write_str(&self.0.join("."))
    }
}

/// A stretch of a text and the path of keys it belongs to.
#[derive(Clone, Debug, PartialEq)]
pub struct Place {
    /// The stretch of text.
    pub location: Location,
    /// The path of keys; empty at the top.
    pub path: KeyPath,
}
