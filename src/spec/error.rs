//! What can be wrong in a spec: one variant for each mistake a user can make.
//!
//! The message says what is wrong in the user's words; [`SpecError::help`] (in `help.rs`) says what to
//! write instead. `cli/` draws the excerpt. Each variant has a file in `specs/wrong/`.

use super::place::{Location, Place};
use crate::units::UnitError;

/// One mistake, and where it stands.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum SpecError {
    // ---- the text
    #[error("the file has {bytes} bytes, more than the {limit} a spec may have")]
    TooLarge { at: Place, bytes: usize, limit: usize },
    #[error("the file is not UTF-8: byte {byte} does not belong to a character")]
    NotUtf8 { at: Place, byte: usize },
    #[error("the file is empty")]
    Empty { at: Place },
    #[error("this is not YAML: {reason}")]
    NotYaml { at: Place, reason: String },
    #[error("blocks are nested deeper than {limit}")]
    TooDeep { at: Place, limit: usize },
    #[error("the file has more than {limit} values once aliases and `like` are expanded")]
    TooMany { at: Place, limit: usize },
    #[error("a second document begins here")]
    SecondDocument { at: Place },
    #[error("the tag `{tag}` has no meaning in a spec")]
    Tag { at: Place, tag: String },
    #[error("merge keys are not part of the format")]
    MergeKey { at: Place },
    #[error("a key must be a plain text")]
    KeyNotText { at: Place },
    #[error("the key `{key}` stands here a second time")]
    DuplicateKey { at: Place, key: String, first: Location },
    #[error("`{text}` is not a finite number")]
    NotFinite { at: Place, text: String },
    #[error("this can be read in two ways: as {one}, or as {other}")]
    Ambiguous { at: Place, one: String, other: String },

    // ---- format, parts, paths
    #[error("the file does not begin with its format")]
    NoFormat { at: Place, wanted: &'static str },
    #[error("{}", not_one_of("format this file can have", .found))]
    WrongFormat { at: Place, found: String, wanted: &'static str },
    #[error("`{found}` is newer than this version of axirad reads")]
    NewerFormat { at: Place, found: String },
    #[error("the part `{file}` cannot be read: {reason}")]
    NoPart { at: Place, file: String, reason: String },
    #[error("the part `{file}` includes itself")]
    IncludeCircle { at: Place, file: String },
    #[error("`{key}` is given twice, in two files")]
    GivenTwice { at: Place, key: String, first: Location },
    #[error("nothing is named `{path}`")]
    NoSuchPath { at: Place, path: String, nearest: Option<String> },

    // ---- structure
    #[error("`{block}` has no key `{key}`")]
    UnknownKey { at: Place, block: String, key: String, nearest: Option<String>, known: Vec<&'static str> },
    #[error("`{key}` is a key without a value: did a comma end the text before it?")]
    CommaEndedText { at: Place, key: String },
    #[error("`{block}` lacks the key `{key}`")]
    MissingKey { at: Place, block: String, key: &'static str, example: &'static str },
    #[error("`{block}` lacks one of {}", list(.keys))]
    NoneOf { at: Place, block: String, keys: Vec<&'static str> },
    #[error("`{block}` has both `{one}` and `{other}`")]
    BothOf { at: Place, block: String, one: &'static str, other: &'static str },
    #[error("`{key}` needs {wanted}, but {found} stands here")]
    WrongShape { at: Place, key: String, wanted: &'static str, found: &'static str },
    #[error("{}", not_one_of(&format!("kind of {what}"), .found))]
    UnknownKind { at: Place, what: &'static str, found: String, nearest: Option<String>, known: Vec<&'static str> },
    #[error("`{word}` is not a word for `{key}`")]
    UnknownWord { at: Place, key: String, word: String, nearest: Option<String>, known: Vec<&'static str> },
    #[error("`{what}` is not in this version")]
    NotInThisVersion { at: Place, what: String },

    // ---- values
    #[error("{error}")]
    Unit {
        at: Place,
        #[source]
        error: UnitError,
        key: String,
    },
    #[error("`{key}` needs a whole number, but is `{text}`")]
    NotWhole { at: Place, key: String, text: String },
    #[error("`{key}` is {text}, but must be {bound}")]
    OutOfBounds { at: Place, key: String, text: String, bound: String },
    #[error("`{key}` is the fraction {text}, above 1")]
    FractionAboveOne { at: Place, key: String, text: String },
    #[error("`{text}` is neither `true` nor `false`")]
    NotAFlag { at: Place, key: String, text: String },

    // ---- names
    #[error("`{name}` cannot be a name")]
    BadName { at: Place, name: String },
    #[error("the name `{name}` is reserved")]
    ReservedName { at: Place, name: String },
    #[error("the name `{name}` is taken")]
    NameTaken { at: Place, name: String, first: Location },
    #[error("there is no {what} named `{name}`")]
    UnknownName { at: Place, what: &'static str, name: String, nearest: Option<String>, known: Vec<String> },
    #[error("`{name}` is like itself")]
    LikeCircle { at: Place, name: String },

    // ---- meaning
    #[error("{}, not 1", sum_of(.key, *.sum))]
    SumNotOne { at: Place, key: String, sum: f64 },
    #[error("`rest` stands twice in `{key}`")]
    TwoRests { at: Place, key: String },
    #[error("{}: nothing is left for `rest`", sum_of(.key, *.sum))]
    NoRest { at: Place, key: String, sum: f64 },
    #[error("reaction `{reaction}` does not conserve mass: {consumed} consumed, {made} made")]
    MassNotBalanced { at: Place, reaction: String, consumed: String, made: String },
    #[error("reaction `{reaction}` does not conserve {element}: {} consumed, {} made", rounded(*.consumed), rounded(*.made))]
    ElementNotBalanced { at: Place, reaction: String, element: String, consumed: f64, made: f64 },
    #[error("`{formula}` is not a chemical formula")]
    BadFormula { at: Place, formula: String },
    #[error("species `{species}` needs `{property}` {because}")]
    MissingProperty { at: Place, species: String, property: &'static str, because: String },
    #[error("`{property}` is given twice, for the mixture and for species `{species}`")]
    PropertyTwice { at: Place, property: &'static str, species: String, first: Location },
    #[error("a table needs at least two points")]
    TooFewPoints { at: Place },
    #[error("the table has two points at {temperature}")]
    PointTwice { at: Place, temperature: String },
    #[error("`{key}` goes from {from} to {to}, which is no range")]
    EmptyRange { at: Place, key: String, from: String, to: String },
    #[error("`{key}` has {found} entries, but `{other}` has {wanted}")]
    LengthsDiffer { at: Place, key: String, found: usize, other: &'static str, wanted: usize },
    #[error("the reactor has no section")]
    NoSection { at: Place },
    #[error("`{key}` needs {needs}")]
    Needs { at: Place, key: String, needs: String },
    #[error("`{key}` does not go with {with}")]
    DoesNotGoWith { at: Place, key: String, with: String },
    #[error("the place lies at {z}, outside the {length} of {of}")]
    OutsideLength { at: Place, z: String, length: String, of: String },
}

/// `a`, `b` or `c`.
pub(crate) fn list(words: &[impl AsRef<str>]) -> String {
    joined(words, "or")
}

/// Words in backquotes, the last one after `joint`.
pub(super) fn joined(words: &[impl AsRef<str>], joint: &str) -> String {
    let quoted: Vec<String> = words.iter().map(|word| format!("`{}`", word.as_ref())).collect();
    match quoted.split_last() {
        None => String::new(),
        Some((last, [])) => last.clone(),
        Some((last, before)) => format!("{} {joint} {last}", before.join(", ")),
    }
}

/// What stands where one of several words is due.
fn not_one_of(what: &str, found: &str) -> String {
    if found.is_empty() { format!("no {what} stands here") } else { format!("`{found}` is not a {what}") }
}

/// What the values of a composition come to: shares of mass or moles, or of the volume.
fn sum_of(key: &str, sum: f64) -> String {
    let sum = rounded(sum);
    match key {
        "concentrations" => format!("the species of `{key}` fill {sum} of the volume"),
        _ => format!("the fractions of `{key}` add up to {sum}"),
    }
}

/// A number as a message shows it: without the noise of its last digits.
fn rounded(value: f64) -> f64 {
    format!("{value:.8e}").parse().unwrap_or(value)
}
