//! Viscosity laws of the mixture (model page, §5).

pub mod polymer_solution;
pub mod vogel_fulcher_tammann;

use self::polymer_solution::PolymerSolution;
use self::vogel_fulcher_tammann::VogelFulcherTammann;
use super::number::Number;
use super::property::{self, Property, read_range};
use crate::spec::{About, Block, Key, Need, Reported, Takes};
use crate::units::Dimension;

/// The key of shear-dependent laws.
pub const SHEAR: Key = Key {
    name: "shear",
    takes: Takes::Other("a law of shear"),
    need: Need::Later,
    meaning: "how shear lowers the viscosity",
};

/// Laws of temperature alone.
pub const PLAIN_KINDS: &[&About] = property::KINDS;

/// The kinds of viscosity law.
pub const KINDS: &[&About] = &[
    &property::constant::ABOUT,
    &property::linear::ABOUT,
    &property::polynomial::ABOUT,
    &property::table::ABOUT,
    &property::arrhenius::ARRHENIUS,
    &property::arrhenius::ANDRADE,
    &vogel_fulcher_tammann::ABOUT,
    &polymer_solution::ABOUT,
];

/// Least viscosity, in Pa s: a law that falls below it far outside its range stays finite there.
const LEAST_VISCOSITY: f64 = 1e-12;

/// What a viscosity law may depend on, in one stream tube.
#[derive(Clone, Copy, Debug)]
pub struct Fluid<N> {
    /// T, in K.
    pub temperature: N,
    /// w_p, the polymer's mass fraction.
    pub polymer_fraction: N,
    /// M_w, the weight-average molar mass in its smooth form, in kg/mol.
    pub molar_mass: N,
}

/// The mixture's viscosity.
#[derive(Clone, Debug, PartialEq)]
pub struct Viscosity {
    form: Form,
    range: Option<(f64, f64)>,
}

#[derive(Clone, Debug, PartialEq)]
enum Form {
    Plain(Property),
    VogelFulcherTammann(VogelFulcherTammann),
    PolymerSolution(PolymerSolution),
}

impl Viscosity {
    /// Reads a value or a law.
    ///
    /// # Errors
    /// What the law's own reader finds.
    pub fn read(block: &Block<'_>) -> Result<Self, Reported> {
        let about = block.kind("viscosity", KINDS, Some(&property::constant::ABOUT))?;
        let form = match about.kind {
            "vogel_fulcher_tammann" => Form::VogelFulcherTammann(VogelFulcherTammann::read(block)?),
            "polymer_solution" => Form::PolymerSolution(PolymerSolution::read(block)?),
            _ => {
                let law = Property::read_kind(block, about, Dimension::VISCOSITY)?;
                return Ok(Self { range: law.range(), form: Form::Plain(law) });
            }
        };
        block.trace();
        Ok(Self { form, range: read_range(block)? })
    }

    /// Whether the law asks for the polymer's content and molar mass.
    #[must_use]
    pub fn needs_polymer(&self) -> bool {
        match self.form {
            Form::PolymerSolution(_) => true,
            Form::Plain(_) | Form::VogelFulcherTammann(_) => false,
        }
    }

    /// Zero-shear viscosity in one stream tube, in Pa·s.
    #[inline(always)]
    pub fn zero_shear<N: Number>(&self, fluid: &Fluid<N>) -> N {
        match &self.form {
            Form::Plain(law) => law.at(fluid.temperature).at_least(LEAST_VISCOSITY),
            Form::VogelFulcherTammann(law) => law.zero_shear(fluid.temperature),
            Form::PolymerSolution(law) => law.zero_shear(fluid),
        }
    }

    /// Ranges of temperature that were stated, or that a table has, by what follows `mixture.viscosity`, in K.
    #[must_use]
    pub fn ranges(&self) -> Vec<(&'static str, (f64, f64))> {
        let solvent = match &self.form {
            Form::PolymerSolution(law) => law.solvent_range(),
            Form::Plain(_) | Form::VogelFulcherTammann(_) => None,
        };
        [("", self.range), (".solvent", solvent)].into_iter().filter_map(|(key, range)| Some((key, range?))).collect()
    }
}
