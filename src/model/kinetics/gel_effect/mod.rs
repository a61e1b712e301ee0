//! Gel and glass effects: factors on rate constants as the polymer's content grows (model page, §6).

pub mod conversion_polynomial;

use self::conversion_polynomial::ConversionPolynomial;
use crate::model::number::Number;
use crate::spec::{About, Block, Reported};

/// The kinds of gel effect.
pub const KINDS: &[&About] = &[&conversion_polynomial::ABOUT];

/// What multiplies a rate constant.
#[derive(Clone, Debug, PartialEq)]
pub enum GelEffect {
    /// Nothing: the factor is 1.
    None,
    /// A polynomial in the share of polymer.
    ConversionPolynomial(ConversionPolynomial),
}

impl GelEffect {
    /// Reads the law from the block that names it.
    ///
    /// # Errors
    /// What the law's own reader finds.
    pub fn read(block: &Block<'_>) -> Result<Self, Reported> {
        block.kind("gel effect", KINDS, None)?;
        block.trace();
        Ok(Self::ConversionPolynomial(ConversionPolynomial::read(block)?))
    }

    /// The factor in one stream tube; temperature in K, share of polymer in monomer plus polymer.
    #[inline(always)]
    pub fn factor<N: Number>(&self, temperature: N, share: N) -> N {
        match self {
            Self::None => N::constant(1.0),
            Self::ConversionPolynomial(law) => law.factor(temperature, share),
        }
    }
}
