//! Chemistry: reactions, a polymerization scheme, or both (model page, §6).

pub mod exponential;
pub mod free_radical;
pub mod free_radical_spec;
pub mod gel_effect;
pub mod heat;
pub mod rate_constant;
pub mod reaction;

use self::free_radical::{FreeRadical, Local};
use self::reaction::Reaction;
use super::number::Number;
use super::species::SpeciesList;
use crate::spec::{About, Block, Reported};

/// The polymerization schemes.
pub const SCHEMES: &[&About] = &[&free_radical_spec::ABOUT];

/// How a polymer forms.
#[derive(Clone, Debug)]
pub enum Scheme {
    /// It does not.
    None,
    /// Free radicals, quasi-steady.
    FreeRadical(Box<FreeRadical>),
}

impl Scheme {
    /// Reads the block `polymerization`.
    ///
    /// # Errors
    /// What the scheme's own reader finds.
    pub fn read(block: &Block<'_>, species: &SpeciesList) -> Result<Self, Reported> {
        block.kind_by("scheme", "polymerization scheme", SCHEMES, None)?;
        Ok(Self::FreeRadical(Box::new(FreeRadical::read(block, species)?)))
    }

    /// The polymer's position among the species of the spec.
    #[must_use]
    pub fn polymer(&self) -> Option<usize> {
        match self {
            Self::None => None,
            Self::FreeRadical(scheme) => Some(scheme.polymer),
        }
    }

    /// Names of the moments that the scheme transports.
    #[must_use]
    pub fn moments(&self) -> &'static [&'static str] {
        match self {
            Self::None => &[],
            Self::FreeRadical(_) => &["mu_0", "mu_1", "mu_2"],
        }
    }
}

/// All chemistry of a run. Species are numbered as the run has them.
#[derive(Clone, Debug)]
pub struct Chemistry {
    /// Reactions.
    pub reactions: Vec<Reaction>,
    /// Polymerization.
    pub scheme: Scheme,
    /// ε of concentrations to a power that is not whole, in mol/m³.
    pub power_epsilon: f64,
}

impl Chemistry {
    /// Changes of all amounts and the heat set free, in one stream tube.
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | c, T, 1/T, w_p, w_M | `local` | mol/m³, K, 1/K, 1 | one stream tube |
    /// | R_k | `sources`, set | mol/(m³ s) | per amount, one stream tube |
    /// | −Σ ΔH rate | returned | W/m³ | one stream tube |
    #[inline(always)]
    pub fn changes<N: Number>(&self, local: &Local<'_, N>, sources: &mut [N]) -> N {
        sources.fill(N::constant(0.0));
        let mut heat = N::constant(0.0);
        for reaction in &self.reactions {
            let rate = reaction.rate(local.concentrations, local.temperature, local.inverse, self.power_epsilon);
            for (k, amount) in &reaction.stoichiometry {
                sources[*k] = sources[*k] + rate * *amount;
            }
            heat = heat - rate * reaction.heat;
        }
        match &self.scheme {
            Scheme::None => heat,
            Scheme::FreeRadical(scheme) => heat - scheme.changes(local, sources) * scheme.heat,
        }
    }
}
