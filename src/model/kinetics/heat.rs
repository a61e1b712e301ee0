//! Heats of reaction and of polymerization.

use crate::spec::{About, Block, Bound, Key, Need, Reported, Takes};
use crate::units::Dimension;

/// A heat of reaction.
pub const HEAT: About = About {
    kind: "heat",
    summary: "heat per mole, negative for an exothermic reaction",
    equation: "",
    source: "",
    keys: &[
        Key {
            name: "value",
            takes: Takes::Quantity(Dimension::MOLAR_ENERGY, Bound::Any),
            need: Need::Required("-85 kJ/mol"),
            meaning: "the heat",
        },
        Key {
            name: "at",
            takes: Takes::Quantity(Dimension::TEMPERATURE, Bound::NotNegative),
            need: Need::Later,
            meaning: "the temperature it belongs to",
        },
    ],
};

/// Reads a heat of reaction in J/mol: one value or a block.
///
/// # Errors
/// The value is missing or of the wrong dimension.
pub(in crate::model) fn read_heat(block: &Block<'_>) -> Result<f64, Reported> {
    let fields = block.open(&HEAT);
    block.trace();
    let heat = fields.quantity("value");
    fields.finish(heat)
}
