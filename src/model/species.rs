//! The species of a spec: molar masses, formulas, and the laws that each brings along.

use super::formula::Formula;
use super::property::{self, Property};
use crate::spec::{About, Block, Bound, Key, Need, Place, Reported, SpecError, Takes};
use crate::units::Dimension;

/// What a species says of itself.
pub const ABOUT: About = About {
    kind: "species",
    summary: "a substance, under a name of the user's",
    equation: "",
    source: "",
    keys: &[
        Key {
            name: "formula",
            takes: Takes::Text,
            need: Need::AtMostOneOf("molar mass"),
            meaning: "chemical formula: gives the molar mass and the element balances",
        },
        Key {
            name: "molar_mass",
            takes: Takes::Quantity(Dimension::MOLAR_MASS, Bound::Positive),
            need: Need::AtMostOneOf("molar mass"),
            meaning: "molar mass; needed where the species reacts or is given in moles; never for the polymer",
        },
        Key {
            name: "density",
            takes: Takes::Law(Dimension::DENSITY, property::KINDS),
            need: Need::Optional,
            meaning: "density of the pure species",
        },
        Key {
            name: "heat_capacity",
            takes: Takes::Law(Dimension::HEAT_CAPACITY, property::KINDS),
            need: Need::Optional,
            meaning: "heat capacity by mass",
        },
        Key {
            name: "conductivity",
            takes: Takes::Law(Dimension::CONDUCTIVITY, property::KINDS),
            need: Need::Optional,
            meaning: "thermal conductivity",
        },
        Key {
            name: "diffusivity",
            takes: Takes::Law(Dimension::DIFFUSIVITY, property::KINDS),
            need: Need::Optional,
            meaning: "diffusivity in the mixture",
        },
        Key {
            name: "viscosity",
            takes: Takes::Other("a law"),
            need: Need::Later,
            meaning: "viscosity of the pure species",
        },
        Key {
            name: "free_volume",
            takes: Takes::Other("a block"),
            need: Need::Later,
            meaning: "free volume for gel effects",
        },
    ],
};

/// The four properties that a species or the mixture may give.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Which {
    Density,
    HeatCapacity,
    Conductivity,
    Diffusivity,
}

impl Which {
    /// The property's key.
    #[must_use]
    pub fn key(self) -> &'static str {
        match self {
            Self::Density => "density",
            Self::HeatCapacity => "heat_capacity",
            Self::Conductivity => "conductivity",
            Self::Diffusivity => "diffusivity",
        }
    }

    /// Its dimension.
    #[must_use]
    pub fn dimension(self) -> Dimension {
        match self {
            Self::Density => Dimension::DENSITY,
            Self::HeatCapacity => Dimension::HEAT_CAPACITY,
            Self::Conductivity => Dimension::CONDUCTIVITY,
            Self::Diffusivity => Dimension::DIFFUSIVITY,
        }
    }
}

/// One species as the spec gives it.
#[derive(Clone, Debug)]
pub struct Species {
    /// The user's name.
    pub name: String,
    /// Where it is defined.
    pub place: Place,
    /// Molar mass, in kg/mol, if given.
    pub molar_mass: Option<f64>,
    /// Formula, if given.
    pub formula: Option<Formula>,
    density: Option<Property>,
    heat_capacity: Option<Property>,
    conductivity: Option<Property>,
    diffusivity: Option<Property>,
    law_places: [Place; 4],
}

impl Species {
    /// Where the law for a property stands; the species itself where it gives none.
    #[must_use]
    pub fn law_place(&self, which: Which) -> &Place {
        let [density, heat_capacity, conductivity, diffusivity] = &self.law_places;
        match which {
            Which::Density => density,
            Which::HeatCapacity => heat_capacity,
            Which::Conductivity => conductivity,
            Which::Diffusivity => diffusivity,
        }
    }

    /// The law that the species gives for a property.
    #[must_use]
    pub fn law(&self, which: Which) -> Option<&Property> {
        match which {
            Which::Density => self.density.as_ref(),
            Which::HeatCapacity => self.heat_capacity.as_ref(),
            Which::Conductivity => self.conductivity.as_ref(),
            Which::Diffusivity => self.diffusivity.as_ref(),
        }
    }

    /// A species of which nothing more is said to be missing.
    fn stand_in(name: &str, block: &Block<'_>) -> Self {
        Self {
            name: name.to_owned(),
            place: block.place(),
            molar_mass: Some(f64::NAN),
            formula: None,
            density: None,
            heat_capacity: None,
            conductivity: None,
            diffusivity: None,
            law_places: std::array::from_fn(|_| block.place()),
        }
    }

    fn read(name: &str, block: &Block<'_>) -> Result<Self, Reported> {
        let fields = block.open(&ABOUT);
        let formula = fields.text("formula").and_then(|text| {
            let read = Formula::parse(&text);
            if read.is_none() {
                fields.problem(SpecError::BadFormula { at: fields.place_of("formula"), formula: text });
            }
            read
        });
        let law = |which: Which| {
            let child = fields.child(which.key())?;
            fields.take(Property::read(&child, which.key(), which.dimension()))
        };
        let species = Self {
            name: name.to_owned(),
            place: block.place(),
            molar_mass: fields.optional_quantity("molar_mass").or(formula.as_ref().map(Formula::molar_mass)),
            formula,
            density: law(Which::Density),
            heat_capacity: law(Which::HeatCapacity),
            conductivity: law(Which::Conductivity),
            diffusivity: law(Which::Diffusivity),
            law_places: ["density", "heat_capacity", "conductivity", "diffusivity"].map(|key| fields.place_of(key)),
        };
        fields.finish(species)
    }
}

/// All species of a spec, in the order typed.
#[derive(Clone, Debug)]
pub struct SpeciesList {
    /// The species.
    pub items: Vec<Species>,
    /// Their names.
    pub names: Vec<String>,
}

impl SpeciesList {
    /// Reads the block `species`. A species that is wrong has a stand-in in the list, so that the rest of the spec
    /// can be read on for its own mistakes.
    pub fn read(block: &Block<'_>) -> (Self, Result<(), Reported>) {
        let mut failed = false;
        let mut items = Vec::new();
        for (name, block) in block.named() {
            match Species::read(name, &block) {
                Ok(species) => items.push(species),
                Err(Reported) => {
                    failed = true;
                    items.push(Species::stand_in(name, &block));
                }
            }
        }
        let names = items.iter().map(|species: &Species| species.name.clone()).collect();
        (Self { items, names }, if failed { Err(Reported) } else { Ok(()) })
    }
}
