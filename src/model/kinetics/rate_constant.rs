//! Rate constants: the same at any temperature, `arrhenius`, or `exponential` (model page, §6).

use super::exponential::{self, Exponential};
use crate::model::number::Number;
use crate::model::property::arrhenius::{ARRHENIUS, Arrhenius};
use crate::model::property::constant::{self, Constant};
use crate::model::property::read_range;
use crate::spec::{About, Block, Reported};
use crate::units::Dimension;

/// The kinds of rate constant.
pub const KINDS: &[&About] = &[&ARRHENIUS, &exponential::ABOUT, &constant::ABOUT];

/// A rate constant, in mol, m³ and s to the order it stands for.
#[derive(Clone, Debug, PartialEq)]
pub struct RateConstant {
    form: Form,
    range: Option<(f64, f64)>,
}

#[derive(Clone, Debug, PartialEq)]
enum Form {
    Constant(Constant),
    Arrhenius(Arrhenius),
    Exponential(Exponential),
}

impl RateConstant {
    /// Reads a rate constant of this dimension: one value, or a block, by default of the kind `arrhenius`.
    ///
    /// # Errors
    /// What the law's own reader finds.
    pub fn read(block: &Block<'_>, subject: Dimension) -> Result<Self, Reported> {
        let has = |key: &str| block.node().get(key).is_some();
        let shifts = ["at", "prefactor", "activation_energy", "activation_temperature"].into_iter().any(has);
        let plain =
            if shifts || block.node().entries().is_some() && !has("value") { &ARRHENIUS } else { &constant::ABOUT };
        let about = block.kind("rate constant", KINDS, Some(plain))?;
        let form = match about.kind {
            "arrhenius" => Form::Arrhenius(Arrhenius::read(block, about, subject)?),
            "exponential" => Form::Exponential(Exponential::read(block, subject)?),
            _ => Form::Constant(Constant::read(block, subject)?),
        };
        block.trace();
        Ok(Self { form, range: read_range(block)? })
    }

    /// The rate constant in one stream tube.
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | T | `temperature` | K | one stream tube |
    /// | 1/T | `inverse` | 1/K | one stream tube |
    /// | k | returned | (m³/mol)^(order − 1)/s | one stream tube |
    #[inline(always)]
    pub fn at<N: Number>(&self, temperature: N, inverse: N) -> N {
        match &self.form {
            Form::Constant(law) => N::constant(law.value),
            Form::Arrhenius(law) => law.at_inverse(inverse),
            Form::Exponential(law) => law.at(temperature),
        }
    }

    /// The range of temperature that was stated, in K.
    #[must_use]
    pub fn range(&self) -> Option<(f64, f64)> {
        self.range
    }
}
