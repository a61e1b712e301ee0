//! Ducts: the cross-section that a fluid flows through (model page, §1).

pub mod tube;

use self::tube::Tube;
use crate::spec::{About, Block, Bound, Fields, Key, Need, Reported, Takes};
use crate::units::Dimension;

/// Keys that a section may give for itself too.
const INNER_DIAMETER: Key = Key {
    name: "inner_diameter",
    takes: Takes::Quantity(Dimension::LENGTH, Bound::Positive),
    need: Need::Required("20 mm"),
    meaning: "inner diameter, of the surface that the fluid touches",
};

pub const ABOUT: About = About {
    kind: "duct",
    summary: "the cross-section that the fluid flows through; all lengths are those that the fluid touches",
    equation: "",
    source: "",
    keys: &[
        Key {
            name: "shape",
            takes: Takes::Word(&["tube"]),
            need: Need::Required("tube"),
            meaning: "shape of the cross-section",
        },
        INNER_DIAMETER,
        Key {
            name: "core_diameter",
            takes: Takes::Quantity(Dimension::LENGTH, Bound::Positive),
            need: Need::Later,
            meaning: "diameter of an annulus's core",
        },
        Key {
            name: "gap",
            takes: Takes::Quantity(Dimension::LENGTH, Bound::Positive),
            need: Need::Later,
            meaning: "gap of a slit",
        },
        Key {
            name: "width",
            takes: Takes::Quantity(Dimension::LENGTH, Bound::Positive),
            need: Need::Later,
            meaning: "width of a slit",
        },
        Key {
            name: "inclination",
            takes: Takes::Quantity(Dimension::ANGLE, Bound::Any),
            need: Need::Default("0 deg"),
            meaning: "angle to the horizontal; positive: upward flow",
        },
        Key {
            name: "coil_diameter",
            takes: Takes::Quantity(Dimension::LENGTH, Bound::Positive),
            need: Need::Later,
            meaning: "diameter of a coil",
        },
    ],
};

/// A duct and how it lies, SI.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Duct {
    /// The cross-section.
    pub tube: Tube,
    /// θ, angle to the horizontal, positive upwards, in rad.
    pub inclination: f64,
}

impl Duct {
    /// Reads the block `duct`.
    ///
    /// # Errors
    /// What is wrong with any of its keys.
    pub fn read(block: &Block<'_>) -> Result<Self, Reported> {
        let fields = block.open(&ABOUT);
        let _ = fields.word("shape");
        let tube = Tube { radius: 0.5 * fields.quantity("inner_diameter") };
        let inclination = fields.quantity("inclination");
        fields.finish(Self { tube, inclination })
    }

    /// The duct of a section, which may give its own bore and inclination.
    #[must_use]
    pub fn of_section(&self, fields: &Fields<'_>) -> Self {
        let radius = fields.optional_quantity("inner_diameter").map_or(self.tube.radius, |diameter| 0.5 * diameter);
        let inclination = fields.optional_quantity("inclination").unwrap_or(self.inclination);
        Self { tube: Tube { radius }, inclination }
    }
}
