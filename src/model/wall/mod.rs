//! Walls: what happens to heat at the edge of the duct (model page, §4).

pub mod coolant;
pub mod insulated;
pub mod jacket;
pub mod wall_temperature;

use self::coolant::Coolants;
use self::jacket::Jacket;
use crate::spec::{About, Block, Reported};

/// The kinds of wall.
pub const KINDS: &[&About] = &[&insulated::ABOUT, &wall_temperature::ABOUT, &jacket::ABOUT];

/// The thermal condition of a wall.
#[derive(Clone, Debug, PartialEq)]
pub enum Wall {
    /// No heat passes.
    Insulated,
    /// The wetted surface has this temperature, in K.
    WallTemperature(f64),
    /// A coolant behind a resistance.
    Jacket(Jacket),
}

/// A wall as the balance of the outermost stream tube sees it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Outside {
    /// 1/U, infinite for an insulated wall, in m² K/W.
    pub resistance: f64,
    /// The temperature beyond the resistance, in K.
    pub temperature: f64,
}

impl Wall {
    /// Reads a wall: a block, or the name of one under `walls`.
    ///
    /// # Errors
    /// What is wrong with the block, or no wall has the name.
    pub fn read(block: &Block<'_>, walls: &[(&str, Block<'_>)], coolants: &Coolants) -> Result<Self, Reported> {
        if block.node().text().is_some() {
            let names: Vec<String> = walls.iter().map(|(name, _)| (*name).to_owned()).collect();
            let position = block.choose("wall", &names)?;
            return Self::read_block(&walls[position].1, coolants);
        }
        Self::read_block(block, coolants)
    }

    fn read_block(block: &Block<'_>, coolants: &Coolants) -> Result<Self, Reported> {
        let about = block.kind("wall", KINDS, None)?;
        match about.kind {
            "insulated" => insulated::read(block).map(|()| Self::Insulated),
            "wall_temperature" => wall_temperature::read(block).map(Self::WallTemperature),
            _ => Jacket::read(block, coolants).map(Self::Jacket),
        }
    }

    /// The wall as a resistance in series with the fluid's own.
    #[must_use]
    pub fn outside(&self) -> Outside {
        match self {
            Self::Insulated => Outside { resistance: f64::INFINITY, temperature: 0.0 },
            Self::WallTemperature(temperature) => Outside { resistance: 0.0, temperature: *temperature },
            Self::Jacket(jacket) => {
                Outside { resistance: jacket.coefficient.recip(), temperature: jacket.coolant_temperature }
            }
        }
    }

    /// The coolant's or the wall's temperature, where it has one, in K.
    #[must_use]
    pub fn reference_temperature(&self) -> Option<f64> {
        match self {
            Self::Insulated => None,
            Self::WallTemperature(temperature) => Some(*temperature),
            Self::Jacket(jacket) => Some(jacket.coolant_temperature),
        }
    }
}
