//! Coolants: a temperature that holds along the whole wall.

use crate::spec::{About, Block, Bound, Key, Need, Reported, Takes};
use crate::units::Dimension;

pub const ABOUT: About = About {
    kind: "coolant",
    summary: "what flows in a jacket; a temperature alone holds along the whole wall",
    equation: "T_c = temperature",
    source: "",
    keys: &[
        Key {
            name: "direction",
            takes: Takes::Other("`co_current` or `counter_current`"),
            need: Need::Later,
            meaning: "which way it flows",
        },
        Key {
            name: "mass_flow",
            takes: Takes::Quantity(Dimension::MASS_FLOW, Bound::Positive),
            need: Need::Later,
            meaning: "its flow",
        },
        Key {
            name: "heat_capacity",
            takes: Takes::Quantity(Dimension::HEAT_CAPACITY, Bound::Positive),
            need: Need::Later,
            meaning: "its heat capacity",
        },
        Key {
            name: "temperature",
            takes: Takes::Quantity(Dimension::TEMPERATURE, Bound::Positive),
            need: Need::Required("110 degC"),
            meaning: "temperature where it enters",
        },
    ],
};

/// The coolants that a spec defines once.
#[derive(Clone, Debug, Default)]
pub struct Coolants {
    names: Vec<String>,
    temperatures: Vec<f64>,
}

impl Coolants {
    /// Reads the block `coolants`.
    ///
    /// # Errors
    /// What is wrong with any of them.
    pub fn read(block: &Block<'_>) -> Result<Self, Reported> {
        let mut coolants = Self::default();
        let mut failed = false;
        for (name, item) in block.named() {
            match read_one(&item) {
                Ok(temperature) => {
                    coolants.names.push(name.to_owned());
                    coolants.temperatures.push(temperature);
                }
                Err(Reported) => failed = true,
            }
        }
        if failed { Err(Reported) } else { Ok(coolants) }
    }

    /// Whether a line has this name.
    #[must_use]
    pub fn has(&self, name: &str) -> bool {
        self.names.iter().any(|known| known == name)
    }

    /// The temperature of a wall's coolant: one named, or a block of its own, in K.
    ///
    /// # Errors
    /// No coolant has the name, or the block is wrong.
    pub fn of(&self, block: &Block<'_>) -> Result<f64, Reported> {
        if block.node().entries().is_some() {
            return read_one(block);
        }
        let position = block.choose("coolant", &self.names)?;
        Ok(self.temperatures[position])
    }
}

fn read_one(block: &Block<'_>) -> Result<f64, Reported> {
    let fields = block.open(&ABOUT);
    let temperature = fields.quantity("temperature");
    fields.finish(temperature)
}
