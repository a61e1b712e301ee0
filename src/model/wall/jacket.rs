//! A jacketed wall: an overall coefficient from an isothermal coolant to the wetted surface.

use super::coolant::{self, Coolants};
use crate::model::property::KIND;
use crate::spec::{About, Block, Bound, Key, Need, Reported, Takes};
use crate::units::Dimension;

pub const ABOUT: About = About {
    kind: "jacket",
    summary: "a wall cooled or heated by a coolant behind it",
    equation: "q_w = U (T_wall − T_c) = (T_N − T_c)/(1/U + 1/(λ g_w))",
    source: "resistances in series (common practice); model page, §2 and §4",
    keys: &[
        KIND,
        Key {
            name: "coefficient",
            takes: Takes::Quantity(Dimension::HEAT_TRANSFER_COEFFICIENT, Bound::Positive),
            need: Need::Required("300 W/(m2 K)"),
            meaning: "from the coolant to the wetted surface, on its area; the fluid's own film is resolved, not put in here",
        },
        Key {
            name: "layers",
            takes: Takes::Other("a list"),
            need: Need::Later,
            meaning: "layers in place of `coefficient`",
        },
        Key {
            name: "coolant",
            takes: Takes::Block(&coolant::ABOUT),
            need: Need::Required("{temperature: 110 degC}"),
            meaning: "a name in `coolants`, or a block",
        },
    ],
};

/// A jacket, SI.
#[derive(Clone, Debug, PartialEq)]
pub struct Jacket {
    /// U, from the coolant to the wetted surface, in W/(m² K).
    pub coefficient: f64,
    /// T_c, in K.
    pub coolant_temperature: f64,
    /// The line of `coolants`, if it is one.
    pub coolant: Option<String>,
}

impl Jacket {
    /// Reads the jacket.
    ///
    /// # Errors
    /// What is wrong with any of its keys.
    pub fn read(block: &Block<'_>, coolants: &Coolants) -> Result<Self, Reported> {
        let fields = block.open(&ABOUT);
        let coolant = fields.child("coolant").map(|child| fields.take(coolants.of(&child)));
        let jacket = Self {
            coefficient: fields.quantity("coefficient"),
            coolant_temperature: coolant.flatten().unwrap_or(f64::NAN),
            coolant: fields.child("coolant").and_then(|child| child.node().text().map(str::to_owned)),
        };
        fields.finish(jacket)
    }
}
