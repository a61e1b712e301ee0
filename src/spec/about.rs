//! How a block describes itself: the one table that the reader, the messages and the reference share.
//!
//! A block or a law declares an [`About`]; [`super::fields::Fields`] reads only keys that stand there,
//! takes dimension, bounds and default from it, and refuses all others.

use crate::units::Dimension;

/// What a block or a kind is.
#[derive(Debug, PartialEq)]
pub struct About {
    /// The kind's word in a spec, or the block's key.
    pub kind: &'static str,
    /// What it is, in a line.
    pub summary: &'static str,
    /// The equation it stands for; empty where there is none.
    pub equation: &'static str,
    /// Where the equation comes from; empty where there is none.
    pub source: &'static str,
    /// The keys it has, in canonical order.
    pub keys: &'static [Key],
}

/// A key of a block.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Key {
    /// The key as typed.
    pub name: &'static str,
    /// What kind of value it takes.
    pub takes: Takes,
    /// Whether it must be there.
    pub need: Need,
    /// What it means, in a line.
    pub meaning: &'static str,
}

/// Whether a key must be given.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Need {
    /// Always; the text is an example that parses.
    Required(&'static str),
    /// It may be absent; what then holds is in the key's meaning.
    Optional,
    /// Absent, this value holds.
    Default(&'static str),
    /// Exactly one of the keys of the block with the same text here must be given.
    OneOf(&'static str),
    /// At most one of the keys of the block with the same text here may be given.
    AtMostOneOf(&'static str),
    /// A key of the format that this version refuses.
    Later,
}

/// What kind of value a key takes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Takes {
    /// A number with a unit.
    Quantity(Dimension, Bound),
    /// A number of the dimension that the law is for, times kelvin to this power.
    Subject(f64, Bound),
    /// A list of such numbers; entry *k* belongs to the power *k* of temperature, so it is per K to the *k*.
    SubjectPolynomial,
    /// Temperatures with values of the dimension that the law is for.
    Points,
    /// A list of numbers of this dimension.
    Numbers(Dimension),
    /// A whole number, from the first to the last.
    Whole(usize, usize),
    /// `true` or `false`.
    Flag,
    /// Free text.
    Text,
    /// One of these words.
    Word(&'static [&'static str]),
    /// The name of something the user defined; the text says what.
    Name(&'static str),
    /// One block with these keys.
    Block(&'static About),
    /// Blocks with these keys, each under a name of the user's.
    Named(&'static About),
    /// A list of blocks with these keys.
    Listed(&'static About),
    /// A value or a law of this dimension, one of these kinds.
    Law(Dimension, &'static [&'static About]),
    /// A rate constant, one of these kinds; its dimension follows from the order.
    Rate(&'static [&'static About]),
    /// A block of one of these kinds.
    Kinds(&'static [&'static About]),
    /// Something else, in words.
    Other(&'static str),
}

/// The values a quantity may have.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Bound {
    /// Any finite number.
    Any,
    /// Above 0.
    Positive,
    /// 0 or above.
    NotNegative,
    /// From 0 to 1.
    Fraction,
    /// 1 or above.
    AtLeastOne,
}

impl About {
    /// The key of this name.
    #[must_use]
    pub fn key(&self, name: &str) -> Option<&'static Key> {
        self.keys.iter().find(|key| key.name == name)
    }
}
