//! What is recorded along a run (spec page, §5).

use super::section::Section;
use super::species::SpeciesList;
use crate::spec::{About, Block, Bound, Key, Need, Reported, SpecError, Takes};
use crate::units::{self, Dimension};

/// Fewest and most stations of a profile along z.
const STATIONS: (usize, usize) = (2, 100_000);

pub const ABOUT: About = About {
    kind: "output",
    summary: "what is recorded along a run",
    equation: "",
    source: "",
    keys: &[
        Key {
            name: "stations",
            takes: Takes::Whole(STATIONS.0, STATIONS.1),
            need: Need::Default("200"),
            meaning: "stations of the profiles over the whole length; the ends of sections are added",
        },
        Key {
            name: "places",
            takes: Takes::Named(&PLACE),
            need: Need::Optional,
            meaning: "places whose quantities are reported as `place.NAME.…`",
        },
        Key {
            name: "conversion_of",
            takes: Takes::Name("species"),
            need: Need::Optional,
            meaning: "the reactant that `conversion` means; absent: the monomer, else the first consumed",
        },
    ],
};

/// One place.
pub const PLACE: About = About {
    kind: "place",
    summary: "a place along the reactor; without `position` the mixing cup there",
    equation: "",
    source: "",
    keys: &[
        Key {
            name: "section",
            takes: Takes::Name("section"),
            need: Need::Optional,
            meaning: "the section that z counts from the start of; absent: from the inlet",
        },
        Key {
            name: "z",
            takes: Takes::Quantity(Dimension::LENGTH, Bound::NotNegative),
            need: Need::Required("2 m"),
            meaning: "distance along the flow",
        },
        Key {
            name: "position",
            takes: Takes::Quantity(Dimension::RATIO, Bound::Fraction),
            need: Need::Optional,
            meaning: "r/R: 0 on the axis, 1 at the wall; absent: the mixing cup",
        },
    ],
};

/// A place, SI.
#[derive(Clone, Debug, PartialEq)]
pub struct OutputPlace {
    /// The user's name.
    pub name: String,
    /// z from the inlet, in m.
    pub z: f64,
    /// The section that z was counted in, if one was named.
    pub section: Option<usize>,
    /// r/R, if a local value is asked for.
    pub position: Option<f64>,
}

/// What is recorded.
#[derive(Clone, Debug, PartialEq)]
pub struct Output {
    /// Stations over the whole length.
    pub stations: usize,
    /// Places, in the order typed.
    pub places: Vec<OutputPlace>,
    /// The reactant that `conversion` means, as numbered in the spec.
    pub conversion_of: Option<usize>,
}

impl Output {
    /// Reads the block `output`.
    ///
    /// # Errors
    /// What is wrong with any of its keys; a place lies outside the reactor.
    pub fn read(block: &Block<'_>, species: &SpeciesList, sections: &[Section]) -> Result<Self, Reported> {
        let fields = block.open(&ABOUT);
        let stations = fields.whole("stations");
        let mut places = Vec::new();
        if let Some(child) = fields.child("places") {
            for (name, item) in child.named() {
                if let Some(place) = fields.take(read_place(name, &item, sections)) {
                    places.push(place);
                }
            }
        }
        let conversion_of =
            fields.child("conversion_of").and_then(|child| fields.take(child.choose("species", &species.names)));
        fields.finish(Self { stations, places, conversion_of })
    }
}

fn read_place(name: &str, block: &Block<'_>, sections: &[Section]) -> Result<OutputPlace, Reported> {
    let fields = block.open(&PLACE);
    let names: Vec<String> = sections.iter().map(|section| section.name.clone()).collect();
    let section = fields.child("section").map(|child| fields.take(child.choose("section", &names)));
    let z = fields.quantity("z");
    let position = fields.optional_quantity("position");
    let (start, length, of) = match section {
        Some(Some(s)) => {
            let start = sections[..s].iter().map(|section| section.length).sum();
            (start, sections[s].length, format!("section `{}`", names[s]))
        }
        Some(None) => return fields.finish(Err(Reported)).and_then(|nothing| nothing),
        None => (0.0, sections.iter().map(|section| section.length).sum(), "the reactor".to_owned()),
    };
    if z > length * (1.0 + 1e-12) {
        let show = |value| units::write(value, Dimension::LENGTH);
        let at = fields.place_of("z");
        fields.problem(SpecError::OutsideLength { at, z: show(z), length: show(length), of });
    }
    fields.finish(OutputPlace { name: name.to_owned(), z: start + z.min(length), section: section.flatten(), position })
}
