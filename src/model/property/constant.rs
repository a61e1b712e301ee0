//! A property that is the same at any temperature.

use crate::spec::{About, Block, Bound, Key, Need, Reported, Takes};
use crate::units::Dimension;

use super::{KIND, VALID};

pub const ABOUT: About = About {
    kind: "constant",
    summary: "the same at any temperature; `85 J/(kg K)` is short for `{value: 85 J/(kg K)}`",
    equation: "y = value",
    source: "",
    keys: &[
        KIND,
        Key {
            name: "value",
            takes: Takes::Subject(0.0, Bound::NotNegative),
            need: Need::Required("85 J/(kg K)"),
            meaning: "the value",
        },
        VALID,
    ],
};

/// Parameter of the law, SI.
#[derive(Clone, Debug, PartialEq)]
pub struct Constant {
    /// y, in the property's unit.
    pub value: f64,
}

impl Constant {
    /// Reads the law from the block that names it, or from a single value.
    ///
    /// # Errors
    /// The value is missing, negative or of the wrong dimension.
    pub fn read(block: &Block<'_>, subject: Dimension) -> Result<Self, Reported> {
        let fields = block.open_for(&ABOUT, subject);
        let law = Self { value: fields.quantity("value") };
        super::skip_range(&fields);
        fields.finish(law)
    }
}
