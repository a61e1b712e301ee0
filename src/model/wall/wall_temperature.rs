//! A wall held at a temperature.

use crate::model::property::KIND;
use crate::spec::{About, Block, Bound, Key, Need, Reported, Takes};
use crate::units::Dimension;

pub const ABOUT: About = About {
    kind: "wall_temperature",
    summary: "the wetted surface of the wall is held at a temperature",
    equation: "q_w = λ g_w (T_N − T_wall)",
    source: "model page, §2 and §4",
    keys: &[
        KIND,
        Key {
            name: "temperature",
            takes: Takes::Quantity(Dimension::TEMPERATURE, Bound::Positive),
            need: Need::Required("120 degC"),
            meaning: "temperature of the wetted surface",
        },
    ],
};

/// Reads the wall's temperature, in K.
///
/// # Errors
/// The temperature is missing or wrong.
pub fn read(block: &Block<'_>) -> Result<f64, Reported> {
    let fields = block.open(&ABOUT);
    let temperature = fields.quantity("temperature");
    fields.finish(temperature)
}
