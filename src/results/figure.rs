//! A figure: the value of a quantity, or why there is none.

use crate::units::Dimension;

/// What a quantity came to.
#[derive(Clone, Debug, PartialEq)]
pub enum Value {
    /// A number, SI.
    Number(f64),
    /// A word.
    Word(String),
    /// It was not computed; the text says why.
    Missing(String),
}

impl Value {
    /// A number, or missing with a reason where there is none or it is not finite.
    #[must_use]
    pub fn number_or(value: Option<f64>, reason: &str) -> Self {
        match value {
            Some(value) if value.is_finite() => Self::Number(value),
            _ => Self::Missing(reason.to_owned()),
        }
    }

    /// The number, if it is one.
    #[must_use]
    pub fn number(&self) -> Option<f64> {
        match self {
            Self::Number(value) => Some(*value),
            Self::Word(_) | Self::Missing(_) => None,
        }
    }
}

/// A named value with its dimension.
#[derive(Clone, Debug, PartialEq)]
pub struct Figure {
    /// The quantity's full name, such as `section.zone_1.outlet.conversion`.
    pub name: String,
    /// Its dimension.
    pub dimension: Dimension,
    /// Its value.
    pub value: Value,
}
