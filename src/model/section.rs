//! Sections: lengths of duct in series, each with its own wall (model page, §1).

use super::duct::Duct;
use super::wall::coolant::Coolants;
use super::wall::{self, Wall};
use crate::spec::{About, Block, Bound, Key, Need, Reported, SpecError, Takes};
use crate::units::Dimension;

pub const ABOUT: About = About {
    kind: "section",
    summary: "a length of duct with one wall condition; keys of the duct given here hold for this section only",
    equation: "",
    source: "",
    keys: &[
        Key { name: "name", takes: Takes::Text, need: Need::Required("zone_1"), meaning: "the section's name" },
        Key { name: "junction", takes: Takes::Text, need: Need::Later, meaning: "what joins two sections" },
        Key {
            name: "length",
            takes: Takes::Quantity(Dimension::LENGTH, Bound::Positive),
            need: Need::Required("4 m"),
            meaning: "length along the flow",
        },
        Key {
            name: "inner_diameter",
            takes: Takes::Quantity(Dimension::LENGTH, Bound::Positive),
            need: Need::Optional,
            meaning: "inner diameter of this section; absent: the duct's",
        },
        Key {
            name: "inclination",
            takes: Takes::Quantity(Dimension::ANGLE, Bound::Any),
            need: Need::Optional,
            meaning: "angle to the horizontal of this section; absent: the duct's",
        },
        Key {
            name: "coil_diameter",
            takes: Takes::Quantity(Dimension::LENGTH, Bound::Positive),
            need: Need::Later,
            meaning: "diameter of a coil",
        },
        Key {
            name: "wall",
            takes: Takes::Kinds(wall::KINDS),
            need: Need::Required("{kind: insulated}"),
            meaning: "a name in `walls`, or a block",
        },
    ],
};

/// One section, SI.
#[derive(Clone, Debug, PartialEq)]
pub struct Section {
    /// The user's name.
    pub name: String,
    /// L, in m.
    pub length: f64,
    /// The duct here.
    pub duct: Duct,
    /// The wall here.
    pub wall: Wall,
}

impl Section {
    /// Reads the list `sections`.
    ///
    /// # Errors
    /// What is wrong with any section; none is there; two have one name.
    pub fn read_list(
        block: &Block<'_>,
        duct: &Duct,
        walls: &[(&str, Block<'_>)],
        coolants: &Coolants,
    ) -> Result<Vec<Self>, Reported> {
        if block.node().items().is_none() {
            return Err(block.refuse(block.wrong_shape("sections", "a list, one section an item")));
        }
        let mut sections: Vec<Self> = Vec::new();
        let mut failed = false;
        let items = block.items();
        for (k, item) in items.iter().enumerate() {
            match Self::read(item, duct, walls, coolants) {
                Ok(section) => {
                    if let Some(first) = sections.iter().position(|other| other.name == section.name) {
                        let place = |item: &Block<'_>| item.child_of("name").map_or(item.place(), |name| name.place());
                        let (at, name) = (place(item), section.name.clone());
                        let first = place(&items[first]).location;
                        let _ = block.refuse(SpecError::NameTaken { at, name, first });
                        failed = true;
                    }
                    sections.push(section);
                }
                Err(Reported) => failed = true,
            }
            if failed && sections.len() < k + 1 {
                // keep positions in step with `items`, so that later names are held against the right place
                sections.push(Self { name: String::new(), length: 0.0, duct: *duct, wall: Wall::Insulated });
            }
        }
        if sections.is_empty() {
            return Err(block.refuse(SpecError::NoSection { at: block.place() }));
        }
        if failed { Err(Reported) } else { Ok(sections) }
    }

    fn read(
        block: &Block<'_>,
        duct: &Duct,
        walls: &[(&str, Block<'_>)],
        coolants: &Coolants,
    ) -> Result<Self, Reported> {
        if let Some(junction) = block.child_of("junction") {
            let what = format!("junction: {}", junction.node().text().unwrap_or_default());
            return Err(block.refuse(SpecError::NotInThisVersion { at: junction.place(), what }));
        }
        let fields = block.open(&ABOUT);
        let name = fields.take(block.item_name());
        let _ = fields.text("name");
        let length = fields.quantity("length");
        let duct = duct.of_section(&fields);
        let wall = fields.child("wall").and_then(|child| fields.take(Wall::read(&child, walls, coolants)));
        if let (Some(name), Some(Wall::Jacket(jacket))) = (&name, &wall)
            && jacket.coolant.is_none()
            && coolants.has(name)
        {
            let (at, name) = (fields.place_of("name"), name.clone());
            let first = fields.place_of("wall").location;
            fields.problem(SpecError::NameTaken { at, name, first });
        }
        fields.finish(())?;
        Ok(Self { name: name.ok_or(Reported)?, length, duct, wall: wall.ok_or(Reported)? })
    }
}
