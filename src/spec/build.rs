//! From the events of the first reader to a tree of texts.
//!
//! No recursion: frames stand on a stack of their own, and an alias is a second cursor over events
//! already heard, so a bomb of aliases is counted as it unfolds and stopped.

use std::collections::HashMap;
use std::ops::Range;

use super::document::{MAX_BYTES, MAX_DEPTH, MAX_VALUES, Mistakes};
use super::error::SpecError;
use super::events::{Heard, Score, Sign};
use super::node::{Entry, Node, Origin, Value};
use super::place::{KeyPath, Location, Place};

/// Longest stretch searched for a line end: the caret under a block needs no more.
const CARET: usize = 200;

/// The tree that was built, as far as the events went.
pub(super) struct Built {
    pub(super) tree: Option<Node>,
    /// Whether nothing of the text was left out.
    pub(super) comparable: bool,
    /// The path that was being read when the events ended.
    pub(super) stopped_at: KeyPath,
}

/// Builds the tree. What could be read on with is a mistake and no end; only too much is an end.
pub(super) fn build(score: &Score<'_>, text: &str, path: &KeyPath, origin: Origin, mistakes: &mut Mistakes) -> Built {
    let mut builder = Builder {
        score,
        text,
        path,
        origin,
        mistakes,
        frames: Vec::new(),
        root: None,
        comparable: true,
        alias: None,
        values: 0,
        letters: 0,
    };
    let complete = builder.play();
    let stopped_at = builder.path();
    let tree = builder.root.filter(|_| complete);
    Built { tree, comparable: builder.comparable && complete, stopped_at }
}

/// Reading ended because the text would unfold into too much.
struct TooMuch;

struct Builder<'a> {
    score: &'a Score<'a>,
    text: &'a str,
    path: &'a KeyPath,
    origin: Origin,
    mistakes: &'a mut Mistakes,
    frames: Vec<Frame<'a>>,
    root: Option<Node>,
    comparable: bool,
    /// The alias that is played; mistakes in what it names were reported where that stands.
    alias: Option<Range<usize>>,
    values: usize,
    letters: usize,
}

/// A list or map that has not ended.
struct Frame<'a> {
    bytes: Range<usize>,
    flow: bool,
    held: Held<'a>,
}

enum Held<'a> {
    List(Vec<Node>),
    Map { entries: Vec<Entry>, seen: HashMap<&'a str, Location>, key: Option<Key<'a>> },
}

/// A key whose value has not come yet.
enum Key<'a> {
    Text {
        text: &'a str,
        location: Location,
    },
    /// No text, so what follows cannot be kept.
    Other,
}

impl<'a> Builder<'a> {
    /// Plays all events; false if they were too much.
    fn play(&mut self) -> bool {
        let score = self.score;
        let mut cursors: Vec<Range<usize>> = std::iter::once(0..score.heard.len()).collect();
        while let Some(cursor) = cursors.last_mut() {
            let Some(event) = cursor.next() else {
                cursors.pop();
                continue;
            };
            let Some(heard) = score.heard.get(event) else { continue };
            if cursors.len() == 1 {
                self.alias = None;
            }
            let played = match &heard.sign {
                Sign::Alias(anchor) => self.alias(*anchor, event, heard).map(|more| cursors.extend(more)),
                _ => self.hear(heard),
            };
            if played.is_err() {
                return false;
            }
        }
        true
    }

    fn hear(&mut self, heard: &'a Heard<'a>) -> Result<(), TooMuch> {
        match &heard.sign {
            Sign::List { flow } => self.begin(Held::List(Vec::new()), heard, *flow),
            Sign::Map { flow } => {
                self.begin(Held::Map { entries: Vec::new(), seen: HashMap::new(), key: None }, heard, *flow)
            }
            Sign::End => {
                self.end(heard);
                Ok(())
            }
            Sign::Scalar { text, plain } if self.key_is_due() => {
                self.key(text, *plain, heard);
                Ok(())
            }
            Sign::Scalar { text, plain } => {
                self.count(text.len(), &heard.bytes)?;
                if *plain && is_too_large_for_a_number(text) {
                    let text = text.to_string();
                    self.mistake(&heard.bytes, |at| SpecError::NotFinite { at, text });
                }
                let location = self.mistakes.location(heard.bytes.clone());
                self.put(Node { value: Value::Text(text.to_string()), location, origin: self.origin }, false);
                Ok(())
            }
            Sign::Nothing { .. } if self.key_is_due() => {
                self.other_key(&heard.bytes);
                Ok(())
            }
            Sign::Nothing { colon } => {
                self.count(0, &heard.bytes)?;
                let location = self.mistakes.location(heard.bytes.clone());
                self.put(Node { value: Value::Null, location, origin: self.origin }, !*colon);
                Ok(())
            }
            Sign::Alias(_) => Ok(()), // played by `alias`
        }
    }

    /// The events that an alias stands for.
    fn alias(&mut self, anchor: usize, event: usize, heard: &Heard<'_>) -> Result<Option<Range<usize>>, TooMuch> {
        if self.key_is_due() {
            self.other_key(&heard.bytes);
            return Ok(None);
        }
        match self.score.anchors.get(&anchor) {
            Some(range) if range.end <= event => {
                self.alias.get_or_insert_with(|| heard.bytes.clone());
                Ok(Some(range.clone()))
            }
            _ => {
                let reason = "this alias stands inside what it names".to_owned();
                self.mistake(&heard.bytes, |at| SpecError::NotYaml { at, reason });
                Err(TooMuch)
            }
        }
    }

    fn begin(&mut self, held: Held<'a>, heard: &Heard<'_>, flow: bool) -> Result<(), TooMuch> {
        if !self.key_is_due() {
            self.count(0, &heard.bytes)?;
        }
        if self.frames.len() >= MAX_DEPTH {
            return Err(self.too_much(&heard.bytes, |at| SpecError::TooDeep { at, limit: MAX_DEPTH }));
        }
        self.frames.push(Frame { bytes: heard.bytes.clone(), flow, held });
        Ok(())
    }

    fn end(&mut self, heard: &Heard<'_>) {
        let Some(frame) = self.frames.pop() else { return };
        let bytes = self.caret(&frame, heard.bytes.end);
        if self.key_is_due() {
            self.other_key(&bytes);
            return;
        }
        let value = match frame.held {
            Held::List(items) => Value::List(items),
            Held::Map { entries, .. } => Value::Map(entries),
        };
        let location = self.mistakes.location(bytes);
        self.put(Node { value, location, origin: self.origin }, false);
    }

    /// The bytes under which a caret shows a list or map: all in brackets, of a block the first line.
    fn caret(&self, frame: &Frame<'_>, end: usize) -> Range<usize> {
        let start = frame.bytes.start;
        if frame.flow {
            return start..end.max(start);
        }
        let origin = self.mistakes.location(0..0).bytes.start;
        let (key_end, first) = match &frame.held {
            Held::List(items) => (start + 1, items.first()),
            Held::Map { entries, .. } => {
                let first = entries.first();
                let key_end = first.map_or(start, |entry| entry.key_location.bytes.end.saturating_sub(origin));
                (key_end, first.map(|entry| &entry.node))
            }
        };
        let first_end = first.map_or(key_end, |node| node.location.bytes.end.saturating_sub(origin));
        let one_line = first_end.saturating_sub(start) <= CARET
            && self.text.get(start..first_end).is_some_and(|stretch| !stretch.contains('\n'));
        start..if one_line { first_end } else { key_end.max(start) }
    }

    fn key_is_due(&self) -> bool {
        matches!(self.frames.last(), Some(Frame { held: Held::Map { key: None, .. }, .. }))
    }

    fn key(&mut self, text: &'a str, plain: bool, heard: &Heard<'_>) {
        self.letters += text.len();
        if plain && text == "<<" {
            self.mistake(&heard.bytes, |at| SpecError::MergeKey { at });
        }
        let location = self.mistakes.location(heard.bytes.clone());
        let mut first = None;
        if let Some(Frame { held: Held::Map { seen, key, .. }, .. }) = self.frames.last_mut() {
            *key = Some(Key::Text { text, location: location.clone() });
            first = seen.get(text).cloned();
            seen.entry(text).or_insert(location);
        }
        if let Some(first) = first {
            self.mistake(&heard.bytes, |at| SpecError::DuplicateKey { at, key: text.to_owned(), first });
        }
    }

    /// Something that is no text stands where a key is due.
    fn other_key(&mut self, bytes: &Range<usize>) {
        self.comparable = false;
        self.mistake(bytes, |at| SpecError::KeyNotText { at });
        if let Some(Frame { held: Held::Map { key, .. }, .. }) = self.frames.last_mut() {
            *key = Some(Key::Other);
        }
    }

    /// Puts a finished value where it belongs.
    fn put(&mut self, node: Node, bare: bool) {
        match self.frames.last_mut() {
            None => self.root = Some(node),
            Some(Frame { held: Held::List(items), .. }) => items.push(node),
            Some(Frame { held: Held::Map { entries, key, .. }, .. }) => {
                if let Some(Key::Text { text, location }) = key.take() {
                    entries.push(Entry { key: text.to_owned(), key_location: location, node, bare });
                }
            }
        }
    }

    /// Counts a value and the bytes of its text: a long text named by many aliases is a bomb too.
    fn count(&mut self, letters: usize, bytes: &Range<usize>) -> Result<(), TooMuch> {
        self.values += 1;
        self.letters += letters;
        if self.values <= MAX_VALUES && self.letters <= 2 * MAX_BYTES {
            return Ok(());
        }
        Err(self.too_much(bytes, |at| SpecError::TooMany { at, limit: MAX_VALUES }))
    }

    /// Reports where it became too much: at the alias, if one is played.
    fn too_much(&mut self, bytes: &Range<usize>, error: impl FnOnce(Place) -> SpecError) -> TooMuch {
        let bytes = self.alias.take().unwrap_or_else(|| bytes.clone());
        self.mistake(&bytes, error);
        TooMuch
    }

    fn mistake(&mut self, bytes: &Range<usize>, error: impl FnOnce(Place) -> SpecError) {
        if self.alias.is_none() {
            let location = self.mistakes.location(bytes.clone());
            let path = self.path();
            self.mistakes.add(location, path, error);
        }
    }

    /// The path of the value or key that is being read.
    fn path(&self) -> KeyPath {
        let mut path = self.path.clone();
        for (depth, frame) in self.frames.iter().enumerate() {
            match &frame.held {
                Held::List(items) => path.0.push(match self.frames.get(depth + 1) {
                    Some(inner) => inner.name().unwrap_or_else(|| items.len().to_string()),
                    None => items.len().to_string(),
                }),
                Held::Map { key: Some(Key::Text { text, .. }), .. } => path.0.push((*text).to_owned()),
                Held::Map { .. } => {}
            }
        }
        path
    }
}

impl Frame<'_> {
    /// The name that the map gives itself so far.
    fn name(&self) -> Option<String> {
        match &self.held {
            Held::Map { entries, .. } => {
                entries.iter().find(|entry| entry.key == "name")?.node.text().map(str::to_owned)
            }
            Held::List(_) => None,
        }
    }
}

/// Whether a text has the form of a number, but of one beyond all that can be held.
fn is_too_large_for_a_number(text: &str) -> bool {
    text.starts_with(|first: char| first.is_ascii_digit() || matches!(first, '+' | '-' | '.'))
        && text.contains(|c: char| c.is_ascii_digit())
        && text.parse::<f64>().is_ok_and(f64::is_infinite)
}
