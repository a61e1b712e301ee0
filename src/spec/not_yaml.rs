//! Why a text is not YAML, in words that say what to change.
//!
//! The reader of YAML knows its grammar's terms; whoever types a spec knows lines, colons and brackets.

use std::ops::Range;

use granit_parser::{ErrorKind, ScanError};

const CONTROL: &str = "an invisible control character stands here";

/// What stopped a reader.
#[derive(Debug, PartialEq)]
pub(super) enum Trouble {
    /// The text is not YAML, for this reason.
    NotYaml(String),
    /// Its blocks are too deep.
    TooDeep,
    /// It has a tag with a prefix of its own.
    Tag(String),
}

/// What the first reader's error means, and the bytes to point at.
///
/// `brackets` are the brackets that are open there, by byte, the innermost last.
pub(super) fn trouble(error: &ScanError, text: &str, brackets: &[usize]) -> (Range<usize>, Trouble) {
    use ErrorKind as E;
    let at = error.marker().byte_offset().unwrap_or(0).min(text.len());
    let here = Here { text, at, brackets };
    let reason = match error.kind() {
        E::RecursionLimitExceeded => return (here.one(), Trouble::TooDeep),
        E::UndeclaredTagHandle => return (here.word(), Trouble::Tag(here.text[here.word()].to_owned())),
        E::TabNotAllowed
        | E::TabInBlockIndentation
        | E::TabInIndentation
        | E::TabInPlainScalar
        | E::TabAtBlockScalarStart
        | E::UnexpectedCharacter { character: '\t' } => {
            let (bytes, reason) = here.tab();
            return (bytes, Trouble::NotYaml(reason));
        }
        E::UnknownAnchor => {
            let alias = &here.text[here.word()];
            let reason = format!("`{alias}` repeats what `&{}` names, which is nowhere before", &alias[1..]);
            return (here.word(), Trouble::NotYaml(reason));
        }
        E::UnexpectedCharacter { character } if character.is_control() => {
            let byte = text[at..].find(is_control).map_or(at, |byte| at + byte); // the marker is where its text begins
            return (byte..byte, Trouble::NotYaml(CONTROL.to_owned()));
        }
        E::UnexpectedCharacter { character } => {
            format!("a text cannot begin with `{character}` unless it stands in quotes")
        }
        E::MappingValueNotAllowed | E::InvalidColonPlacement | E::ExpectedFlowMappingSeparator => here.colon(),
        E::ExpectedFlowSequenceSeparator
        | E::UnexpectedEofFlowSequence
        | E::UnexpectedEofFlowMapping
        | E::UnexpectedEofImplicitFlowMapping
        | E::UnexpectedEofBlockSequence
        | E::UnexpectedEofBlockMapping
        | E::UnexpectedEof
        | E::ExpectedNodeContent => here.bracket(),
        E::UnclosedFlowCollection { open } => format!("`{open}` is not closed"),
        E::MismatchedFlowCollectionEnd { open, close } => format!("`{open}` is closed by `{close}`"),
        E::MisplacedFlowCollectionEnd => "this bracket closes nothing".to_owned(),
        E::UnclosedQuotedScalar | E::DocumentIndicatorInQuotedScalar | E::InvalidQuotedScalarIndent => {
            "the quote that opens here is not closed".to_owned()
        }
        E::InvalidTrailingSingleQuotedScalar | E::InvalidTrailingDoubleQuotedScalar => {
            "after a closing quote the text must end: put all of it in the quotes".to_owned()
        }
        E::UnknownQuotedScalarEscape | E::InvalidQuotedScalarHexEscape => {
            "`\\` begins an escape in double quotes, but not this one: take single quotes".to_owned()
        }
        E::SimpleKeyExpected | E::InvalidSimpleKey => {
            "a colon with a blank after it is missing in this line".to_owned()
        }
        E::ExpectedBlockMappingKey | E::InvalidIndentation | E::InvalidFlowScalarIndent => {
            "a key was due here: is the line before complete, and this one indented as its neighbours?".to_owned()
        }
        E::ExpectedBlockSequenceEntry => "a list goes on only with `- ` under its other items".to_owned(),
        E::BlockSequenceEntryNotAllowed => "a list with `- ` begins on a line of its own".to_owned(),
        E::BlockEntryInFlowCollection => "inside brackets items are parted by commas, not by `- `".to_owned(),
        E::CommentInterceptedScalar => "a comment stands inside a text that goes on in the next line".to_owned(),
        E::CommentNotSeparated => "a blank must stand before `#`".to_owned(),
        E::BomInsideDocument => "an invisible byte-order mark stands inside the text".to_owned(),
        E::DirectiveDisallowed => "a line with `%` before the text has no place here".to_owned(),
        E::ExpectedDocumentStart => "the text should have ended before this".to_owned(),
        E::MissingAnchorOrAliasName => "a text that begins with `*` or `&` stands in quotes".to_owned(),
        E::MappingKeyNotAllowed => "a key cannot stand here".to_owned(),
        other => other.to_string(),
    };
    (here.one(), Trouble::NotYaml(reason))
}

/// What the second reader's error means, where only it refuses the text.
pub(super) fn second_trouble(error: &serde_yaml::Error, text: &str) -> (Range<usize>, String) {
    let message = error.to_string();
    let location = error.location();
    let (line, column) = location.map_or((1, 1), |location| (location.line(), location.column()));
    let at = match text.find(is_control) {
        Some(control) if message.starts_with("control characters") => control,
        _ => byte_of(text, line, column),
    };
    let here = Here { text, at, brackets: &[] };
    let reason = match here.text[here.at..].chars().next() {
        _ if message.starts_with("control characters") => CONTROL.to_owned(),
        _ if message.contains("more than one document") => "a second document begins in it".to_owned(),
        Some('\t') => return here.tab(),
        Some(':') => "a blank is missing after the colon".to_owned(),
        _ => message.split([',']).next().and_then(|m| m.split(" at line ").next()).unwrap_or_default().to_owned(),
    };
    (here.one(), reason)
}

fn is_control(c: char) -> bool {
    c.is_control() && !matches!(c, '\t' | '\n' | '\r' | '\u{85}') || matches!(c, '\u{fffe}' | '\u{ffff}')
}

/// The byte of a line and a column, both counted from 1.
fn byte_of(text: &str, line: usize, column: usize) -> usize {
    let start: usize = text.split_inclusive('\n').take(line.saturating_sub(1)).map(str::len).sum();
    let rest = &text[start..];
    start + rest.char_indices().nth(column.saturating_sub(1)).map_or(rest.len(), |(byte, _)| byte)
}

/// A byte of a text at which reading stopped.
struct Here<'a> {
    text: &'a str,
    at: usize,
    brackets: &'a [usize],
}

impl Here<'_> {
    /// The character here.
    fn one(&self) -> Range<usize> {
        let length = self.text[self.at..].chars().next().filter(|c| !c.is_control()).map_or(0, char::len_utf8);
        self.at..self.at + length
    }

    /// The word here.
    fn word(&self) -> Range<usize> {
        let rest = &self.text[self.at..];
        let ends = |c: char| c.is_whitespace() || matches!(c, ',' | '[' | ']' | '{' | '}');
        self.at..self.at + rest.find(ends).unwrap_or(rest.len())
    }

    /// The first tab from this line on that stands before all else in its line.
    fn tab(&self) -> (Range<usize>, String) {
        let mut start = self.text[..self.at].rfind('\n').map_or(0, |newline| newline + 1);
        let mut at = self.at;
        for line in self.text[start..].split_inclusive('\n') {
            let blank = &line[..line.len() - line.trim_start().len()];
            if let Some(tab) = blank.find('\t') {
                at = start + tab;
                break;
            }
            start += line.len();
        }
        let reason = "a tab indents this line; YAML takes only blanks there".to_owned();
        (at..(at + 1).min(self.text.len()).max(at), reason)
    }

    /// A colon, or what stands where one would separate, is out of place.
    fn colon(&self) -> String {
        let line = self.text[..self.at].rsplit(['\n', ',', '{', '[']).next().unwrap_or_default();
        if line.contains(": ") && self.text[self.at..].starts_with(':') {
            "the value before this colon is a text only if it stands in quotes".to_owned()
        } else if self.brackets.is_empty() {
            "this line is indented under one that has a value already".to_owned()
        } else {
            self.bracket()
        }
    }

    /// Something inside brackets is missing or too much.
    fn bracket(&self) -> String {
        if self.text[self.at..].starts_with(',') {
            return "nothing stands before this comma".to_owned();
        }
        let Some(&open) = self.brackets.last() else {
            return "a value is missing here".to_owned();
        };
        let line = self.text[..open].matches('\n').count() + 1;
        let (open, close) = if self.text[open..].starts_with('[') { ('[', ']') } else { ('{', '}') };
        format!("a comma or `{close}` is missing before this: `{open}` opens in line {line}")
    }
}

#[cfg(test)]
mod tests {
    use super::super::document::read_document;
    use super::super::error::SpecError;
    use super::super::node::Origin;

    fn reason(text: &str) -> (usize, usize, String) {
        match read_document("plant.yaml", text.as_bytes(), Origin::File).err().as_deref() {
            Some([SpecError::NotYaml { at, reason }]) => (at.location.line(), at.location.column(), reason.clone()),
            other => panic!("one error was expected, but {other:?} came"),
        }
    }

    #[test]
    fn reasons_say_what_to_change_and_where() {
        let cases = [
            ("duct:\n\tshape: tube\n", 2, 1, "a tab indents"),
            ("feed:\n  share: 5 %\n\ttemperature: 3 K\n", 3, 1, "a tab indents"),
            ("duct: {shape: tube\nfeed: 1\n", 2, 5, "`{` opens in line 1"),
            ("a: [1, 2\nfeed: 1\n", 2, 5, "`[` opens in line 1"),
            ("a: {b: 1", 1, 4, "`{` is not closed"),
            ("a: {b: 1]", 1, 4, "`{` is closed by `]`"),
            ("a: {b: 1}}", 1, 10, "closes nothing"),
            ("{a: 1,, b: 2}", 1, 7, "before this comma"),
            ("title: Line 2: styrene", 1, 14, "stands in quotes"),
            ("a: 1\n  b: 2", 2, 4, "indented under one that has a value"),
            ("a: 1\nb\nc: 2", 2, 1, "a colon with a blank"),
            ("a: 'x\nb: 2", 1, 4, "not closed"),
            ("a: \"x\" y", 1, 8, "after a closing quote"),
            ("a: \"x\\q\"", 1, 4, "take single quotes"),
            ("a: @x", 1, 4, "cannot begin with `@`"),
            ("a: - b", 1, 4, "line of its own"),
            ("a: *b", 1, 4, "`&b`"),
            ("{a:}", 1, 3, "after the colon"),
            ("a: x\u{7}", 1, 5, "control character"),
            ("a: , b", 1, 4, "before this comma"),
            ("{}{}", 1, 3, "should have ended"),
            ("a: *", 1, 4, "stands in quotes"),
        ];
        for (text, line, column, part) in cases {
            let (found_line, found_column, found) = reason(text);
            assert!(found.contains(part), "of {text:?}: {found}");
            assert_eq!((found_line, found_column), (line, column), "of {text:?}: {found}");
        }
    }
}
