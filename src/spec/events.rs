//! The first reader: where every value of a text stands.
//!
//! granit-parser turns the text into events. They are first collected, so that an alias can be played
//! again wherever it stands and everything it brings is counted, then built into a tree whose scalars
//! are still texts. What the format has not is found here.

use std::borrow::Cow;
use std::collections::HashMap;
use std::ops::Range;

use granit_parser::{Event, Parser, ScalarStyle, Span, StructureStyle, options};

use super::build::build;
use super::document::{MAX_DEPTH, MAX_VALUES, Mistakes};
use super::error::SpecError;
use super::node::{Node, Origin};
use super::not_yaml::{Trouble, trouble};
use super::place::{KeyPath, Place};

/// What the first reader found.
pub(super) struct Read {
    /// The tree, if the text is not empty and could be read to its end.
    pub(super) tree: Option<Node>,
    /// Whether the tree holds everything that the second reader will see.
    pub(super) comparable: bool,
}

/// An event, and the bytes it covers.
pub(super) struct Heard<'t> {
    pub(super) sign: Sign<'t>,
    pub(super) bytes: Range<usize>,
}

/// What an event says.
pub(super) enum Sign<'t> {
    /// A scalar; `plain` without quotes and in no block.
    Scalar { text: Cow<'t, str>, plain: bool },
    /// Nothing, where a value could stand; `colon` if one stands between it and the scalar before.
    Nothing { colon: bool },
    /// A list begins.
    List { flow: bool },
    /// A map begins.
    Map { flow: bool },
    /// The innermost list or map ends.
    End,
    /// What stands under this anchor stands here again.
    Alias(usize),
}

/// All events of a text, as far as it could be read.
#[derive(Default)]
pub(super) struct Score<'t> {
    pub(super) heard: Vec<Heard<'t>>,
    /// The events that an anchor names.
    pub(super) anchors: HashMap<usize, Range<usize>>,
    /// The tags, which the format has not.
    pub(super) tags: Vec<Range<usize>>,
    /// How many values there are, aliases not expanded.
    values: usize,
    /// Why reading ended before the text did.
    pub(super) ended: Option<(Range<usize>, Ending)>,
}

/// Why the rest of a text was not read.
pub(super) enum Ending {
    Trouble(Trouble),
    SecondDocument,
    TooMany,
}

/// Reads a text into a tree of texts.
pub(super) fn read(text: &str, path: &KeyPath, origin: Origin, mistakes: &mut Mistakes) -> Read {
    let score = listen(text);
    for tag in &score.tags {
        let written = text.get(tag.clone()).unwrap_or("!").to_owned();
        let location = mistakes.location(tag.clone());
        mistakes.add(location, path.clone(), |at| SpecError::Tag { at, tag: written });
    }
    if let Some((bytes, Ending::TooMany)) = score.ended {
        // Building what there is would cost as much again and say nothing more.
        let location = mistakes.location(bytes);
        mistakes.add(location, path.clone(), |at| SpecError::TooMany { at, limit: MAX_VALUES });
        return Read { tree: None, comparable: false };
    }
    let built = build(&score, text, path, origin, mistakes);
    let complete = score.ended.is_none();
    if let Some((bytes, ending)) = score.ended {
        let location = mistakes.location(bytes);
        mistakes.add(location, built.stopped_at, |at| ending.into_error(at));
    }
    let comparable = complete && built.comparable && score.tags.is_empty();
    Read { tree: built.tree.filter(|_| complete), comparable }
}

impl Ending {
    fn into_error(self, at: Place) -> SpecError {
        match self {
            Self::Trouble(Trouble::TooDeep) => SpecError::TooDeep { at, limit: MAX_DEPTH },
            Self::Trouble(Trouble::Tag(tag)) => SpecError::Tag { at, tag },
            Self::Trouble(Trouble::NotYaml(reason)) => SpecError::NotYaml { at, reason },
            Self::SecondDocument => SpecError::SecondDocument { at },
            Self::TooMany => SpecError::TooMany { at, limit: MAX_VALUES },
        }
    }
}

/// A list or map that has begun and not ended.
struct Open {
    anchor: usize,
    event: usize,
    /// Whether the next to come is the key of a map: half of what a map holds are no values.
    key_is_due: Option<bool>,
    /// The byte of the bracket that opened it.
    bracket: Option<usize>,
}

fn listen(text: &str) -> Score<'_> {
    let mut score = Score::default();
    let mut open: Vec<Open> = Vec::new();
    let mut documents = 0_usize;
    let options = options! {
        emit_comments: false,
        disallow_directives: true,
        flow_nesting_limit: MAX_DEPTH,
        block_nesting_limit: MAX_DEPTH,
        block_scalar_eof_without_line_feed: true, // as the second reader has it
    };
    for item in Parser::new_from_str_with_options(text, options) {
        let (event, span) = match item {
            Ok(item) => item,
            Err(error) => {
                let brackets: Vec<usize> = open.iter().filter_map(|open| open.bracket).collect();
                let (bytes, trouble) = trouble(&error, text, &brackets);
                score.ended = Some((bytes, Ending::Trouble(trouble)));
                return score;
            }
        };
        let bytes = span.byte_range().unwrap_or_default();
        documents += usize::from(matches!(event, Event::DocumentStart(..)));
        score.note(event, &span, text, &mut open);
        let ending = match () {
            () if documents > 1 => Ending::SecondDocument,
            () if score.values > MAX_VALUES => Ending::TooMany,
            () if open.len() > MAX_DEPTH => Ending::Trouble(Trouble::TooDeep),
            () => continue,
        };
        score.ended = Some((bytes, ending));
        return score;
    }
    score
}

impl<'t> Score<'t> {
    fn note(&mut self, event: Event<'t>, span: &Span, text: &'t str, open: &mut Vec<Open>) {
        let mut bytes = span.byte_range().unwrap_or_default();
        if event.tag().is_some() {
            self.tags.push(span.tag_span().and_then(|tag| tag.byte_range()).unwrap_or_else(|| bytes.clone()));
        }
        if event.is_node() {
            self.count(open.last_mut());
        }
        let here = self.heard.len();
        let sign = match event {
            Event::Scalar(scalar, style, anchor, _) => {
                if anchor > 0 {
                    self.anchors.insert(anchor, here..here + 1);
                }
                bytes = without_line_ends(text, bytes);
                let plain = style == ScalarStyle::Plain;
                if plain && bytes.is_empty() {
                    Sign::Nothing { colon: self.colon_follows_last(text) }
                } else {
                    Sign::Scalar { text: scalar, plain }
                }
            }
            Event::SequenceStart(style, anchor, _) => {
                let flow = style == StructureStyle::Flow;
                open.push(Open { anchor, event: here, key_is_due: None, bracket: flow.then_some(bytes.start) });
                Sign::List { flow }
            }
            Event::MappingStart(style, anchor, _) => {
                let flow = style == StructureStyle::Flow;
                let bracket = flow && !bytes.is_empty(); // `[a: 1]` holds a map without brackets of its own
                open.push(Open {
                    anchor,
                    event: here,
                    key_is_due: Some(true),
                    bracket: bracket.then_some(bytes.start),
                });
                Sign::Map { flow }
            }
            Event::SequenceEnd | Event::MappingEnd => {
                if let Some(Open { anchor, event, .. }) = open.pop().filter(|open| open.anchor > 0) {
                    self.anchors.insert(anchor, event..here + 1);
                }
                Sign::End
            }
            Event::Alias(anchor) => Sign::Alias(anchor),
            // Comments, stream and document marks, and kinds that our options leave out, hold no value.
            _ => return,
        };
        self.heard.push(Heard { sign, bytes });
    }

    /// Counts what begins inside a list or map, unless it is a key.
    fn count(&mut self, inside: Option<&mut Open>) {
        match inside.and_then(|open| open.key_is_due.as_mut()) {
            Some(due) => {
                self.values += usize::from(!*due);
                *due = !*due;
            }
            None => self.values += 1,
        }
    }

    /// Whether a colon comes after the last scalar, blanks, line ends and comments between them aside.
    fn colon_follows_last(&self, text: &str) -> bool {
        let end = self.heard.last().map_or(0, |heard| heard.bytes.end);
        let mut rest = text.get(end..).unwrap_or_default().trim_start();
        while rest.starts_with('#') {
            rest = rest.find('\n').map_or("", |line_end| rest[line_end..].trim_start());
        }
        rest.starts_with(':')
    }
}

/// The bytes without the line ends that a text of several lines may end with.
fn without_line_ends(text: &str, bytes: Range<usize>) -> Range<usize> {
    let length = text.get(bytes.clone()).map_or(0, |written| written.trim_end().len());
    bytes.start..bytes.start + length
}
