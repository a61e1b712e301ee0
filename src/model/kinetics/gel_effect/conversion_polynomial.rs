//! Gel effect as a polynomial in the share of polymer in monomer plus polymer.

use crate::model::number::Number;
use crate::model::property::{KIND, coefficient_pairs};
use crate::spec::{About, Block, Bound, Key, Need, Reported, Takes};
use crate::units::Dimension;

/// e⁶⁰ lies beyond any gel effect.
const MAX_EXPONENT: f64 = 60.0;

pub const ABOUT: About = About {
    kind: "conversion_polynomial",
    summary: "a rate constant that falls with the share of polymer in monomer plus polymer",
    equation: "factor = exp(power · Σ (a_k + b_k T) x^k), x = w_p/(w_p + w_monomer)",
    source: "Hui and Hamielec (1972), J. Appl. Polym. Sci. 16, 749 (from memory)",
    keys: &[
        KIND,
        Key {
            name: "a",
            takes: Takes::Numbers(Dimension::RATIO),
            need: Need::Required("[0, 2.57, 9.56, -3.03]"),
            meaning: "a_k; entry k belongs to the power k",
        },
        Key {
            name: "b",
            takes: Takes::Numbers(Dimension::PER_TEMPERATURE),
            need: Need::Optional,
            meaning: "b_k, as many as `a` has; absent: 0",
        },
        Key {
            name: "power",
            takes: Takes::Quantity(Dimension::RATIO, Bound::Any),
            need: Need::Required("-2"),
            meaning: "the factor before the sum",
        },
    ],
};

/// Parameters of the law, SI.
#[derive(Clone, Debug, PartialEq)]
pub struct ConversionPolynomial {
    /// (a_k, b_k), in 1, 1/K.
    terms: Vec<(f64, f64)>,
    power: f64,
}

impl ConversionPolynomial {
    /// Reads the law from the block that names it.
    ///
    /// # Errors
    /// A key that is missing, unknown or of the wrong dimension; `a` and `b` of unlike length.
    pub fn read(block: &Block<'_>) -> Result<Self, Reported> {
        let fields = block.open(&ABOUT);
        let law = Self { terms: coefficient_pairs(&fields), power: fields.quantity("power") };
        fields.finish(law)
    }

    /// What the rate constant is multiplied by, in one stream tube.
    ///
    /// factor = exp(power · Σ (a_k + b_k T) x^k)
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | T | `temperature` | K | one stream tube |
    /// | x | `share` | 1 | one stream tube |
    /// | factor | returned | 1 | one stream tube |
    ///
    /// The exponent is held within ±`MAX_EXPONENT`.
    #[inline(always)]
    pub fn factor<N: Number>(&self, temperature: N, share: N) -> N {
        let term = |sum: N, (a, b): &(f64, f64)| sum * share + (temperature * *b + *a);
        let sum = self.terms.iter().rev().fold(N::constant(0.0), term);
        (sum * self.power).at_least(-MAX_EXPONENT).at_most(MAX_EXPONENT).exp()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use approx::assert_relative_eq;

    #[test]
    fn factor_is_that_of_the_printed_form() {
        let law = ConversionPolynomial {
            terms: vec![(0.0, 0.0), (2.57, -5.05e-3), (9.56, -1.76e-2), (-3.03, 7.85e-3)],
            power: -2.0,
        };
        let (t, x) = (393.15_f64, 0.5_f64);
        let g = (2.57 - 5.05e-3 * t) * x + (9.56 - 1.76e-2 * t) * x * x + (-3.03 + 7.85e-3 * t) * x.powi(3);
        assert_relative_eq!(law.factor(t, x), (-2.0 * g).exp(), max_relative = 1e-13);
    }
}
