//! Vogel–Fulcher–Tammann viscosity: melts cooled towards their glass transition.

use crate::model::number::Number;
use crate::model::property::{KIND, VALID, skip_range};
use crate::spec::{About, Block, Bound, Key, Need, Reported, Takes};
use crate::units::Dimension;

use super::SHEAR;

/// e⁸⁰ lies far beyond any melt.
const MAX_EXPONENT: f64 = 80.0;

pub const ABOUT: About = About {
    kind: "vogel_fulcher_tammann",
    summary: "viscosity of a melt above its glass transition",
    equation: "η = η∞ exp(B / (T − T₀))",
    source: "Vogel (1921), Phys. Z. 22, 645; Fulcher (1925), J. Am. Ceram. Soc. 8, 339 (from memory)",
    keys: &[
        KIND,
        Key {
            name: "eta_inf",
            takes: Takes::Quantity(Dimension::VISCOSITY, Bound::Positive),
            need: Need::Required("2e-4 Pa.s"),
            meaning: "η∞, the limit at high temperature",
        },
        Key {
            name: "b",
            takes: Takes::Quantity(Dimension::TEMPERATURE_DIFFERENCE, Bound::Positive),
            need: Need::Required("1800 K"),
            meaning: "B",
        },
        Key {
            name: "t_0",
            takes: Takes::Quantity(Dimension::TEMPERATURE, Bound::NotNegative),
            need: Need::Required("50 degC"),
            meaning: "T₀, where the law diverges, below the glass transition",
        },
        SHEAR,
        VALID,
    ],
};

/// Parameters of the law, SI.
#[derive(Clone, Debug, PartialEq)]
pub struct VogelFulcherTammann {
    /// η∞, the limit at high temperature, in Pa·s.
    eta_inf: f64,
    /// B, positive, in K.
    b: f64,
    /// T₀, where the law diverges, in K.
    t_0: f64,
}

impl VogelFulcherTammann {
    /// Reads the law from the block that names it.
    ///
    /// # Errors
    /// A key that is missing, unknown or of the wrong dimension; `b` not positive.
    pub fn read(block: &Block<'_>) -> Result<Self, Reported> {
        let fields = block.open(&ABOUT);
        let law = Self { eta_inf: fields.quantity("eta_inf"), b: fields.quantity("b"), t_0: fields.quantity("t_0") };
        skip_range(&fields);
        fields.finish(law)
    }

    /// Zero-shear viscosity in one stream tube.
    ///
    /// η = η∞ exp(B / (T − T₀))
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | T | `temperature` | K | one stream tube |
    /// | η | returned | Pa·s | one stream tube |
    ///
    /// Near and below T₀ the exponent is held at `MAX_EXPONENT`: every trial state gets a finite value.
    #[inline(always)]
    pub fn zero_shear<N: Number>(&self, temperature: N) -> N {
        let above = (temperature - self.t_0).at_least(self.b / MAX_EXPONENT);
        (above.recip() * self.b).exp() * self.eta_inf
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use approx::assert_relative_eq;

    #[test]
    fn viscosity_follows_the_equation_and_stays_finite_below_its_pole() {
        let law = VogelFulcherTammann { eta_inf: 2e-4, b: 1800.0, t_0: 320.0 };
        // 2e-4 e^{1800/100}, by hand
        assert_relative_eq!(law.zero_shear(420.0), 13_131.993_827_466_12, max_relative = 1e-13);
        assert!(law.zero_shear(250.0).is_finite() && law.zero_shear(250.0) > law.zero_shear(350.0));
    }
}
