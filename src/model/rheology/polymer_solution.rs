//! Viscosity of a polymer in its monomer or solvent, by polymer content and molar mass.

use crate::model::number::Number;
use crate::model::property::{KIND, Property, VALID, coefficient_pairs, inverse, skip_range};
use crate::spec::{About, Block, Bound, Key, Need, Reported, SpecError, Takes};
use crate::units::Dimension;

use super::{Fluid, PLAIN_KINDS, SHEAR};

/// e⁶⁰ Pa·s lies beyond any fluid that flows.
const MAX_EXPONENT: f64 = 60.0;

pub const ABOUT: About = About {
    kind: "polymer_solution",
    summary: "viscosity of a polymer solution, from solvent to melt",
    equation: "ln η = a_0 + b_0/T + (M_w/M_ref)^m Σ_{k≥1} (a_k + b_k/T) w_p^k, or ln η_solvent in place of a_0 + b_0/T",
    source: "form of correlations for polystyrene in styrene used in the literature",
    keys: &[
        KIND,
        Key {
            name: "a",
            takes: Takes::Numbers(Dimension::RATIO),
            need: Need::Required("[-13.04, 3.915, -5.437, 0.623]"),
            meaning: "a_k; entry k belongs to the power k of the polymer's mass fraction (η in Pa·s)",
        },
        Key {
            name: "b",
            takes: Takes::Numbers(Dimension::TEMPERATURE_DIFFERENCE),
            need: Need::Optional,
            meaning: "b_k, as many as `a` has; absent: 0",
        },
        Key {
            name: "solvent",
            takes: Takes::Law(Dimension::VISCOSITY, PLAIN_KINDS),
            need: Need::Optional,
            meaning: "viscosity without polymer, in place of a_0 and b_0, which are then 0",
        },
        Key {
            name: "molar_mass_reference",
            takes: Takes::Quantity(Dimension::MOLAR_MASS, Bound::Positive),
            need: Need::Required("1 g/mol"),
            meaning: "M_ref",
        },
        Key {
            name: "molar_mass_power",
            takes: Takes::Quantity(Dimension::RATIO, Bound::NotNegative),
            need: Need::Required("0.18"),
            meaning: "m",
        },
        SHEAR,
        VALID,
    ],
};

/// Parameters of the law, SI.
#[derive(Clone, Debug, PartialEq)]
pub struct PolymerSolution {
    /// Viscosity without polymer.
    base: Base,
    /// (a_k, b_k) for k from 1, in 1, K.
    terms: Vec<(f64, f64)>,
    /// M_ref, in kg/mol.
    molar_mass_reference: f64,
    /// m.
    molar_mass_power: f64,
}

#[derive(Clone, Debug, PartialEq)]
enum Base {
    /// a_0 + b_0/T.
    Coefficients(f64, f64),
    /// A law of temperature.
    Solvent(Property),
}

impl PolymerSolution {
    /// Reads the law from the block that names it.
    ///
    /// # Errors
    /// A key that is missing, unknown or of the wrong dimension; `a` and `b` of unlike length; a solvent's
    /// law beside coefficients of power 0.
    pub fn read(block: &Block<'_>) -> Result<Self, Reported> {
        let fields = block.open(&ABOUT);
        let mut pairs = coefficient_pairs(&fields);
        let first = if pairs.is_empty() { (0.0, 0.0) } else { pairs.remove(0) };
        let solvent = fields.child("solvent").map(|child| Property::read(&child, "viscosity", Dimension::VISCOSITY));
        let base = match solvent.map(|law| fields.take(law)) {
            None => Base::Coefficients(first.0, first.1),
            Some(law) => {
                if first != (0.0, 0.0) {
                    let (at, key) = (fields.place_of("a"), "a".to_owned());
                    let needs = "0 as its first entry, and `b` too, beside `solvent`".to_owned();
                    fields.problem(SpecError::Needs { at, key, needs });
                }
                law.map_or(Base::Coefficients(0.0, 0.0), Base::Solvent)
            }
        };
        let law = Self {
            base,
            terms: pairs,
            molar_mass_reference: fields.quantity("molar_mass_reference"),
            molar_mass_power: fields.quantity("molar_mass_power"),
        };
        skip_range(&fields);
        fields.finish(law)
    }

    /// The range that the solvent's law was stated for, in K.
    #[must_use]
    pub fn solvent_range(&self) -> Option<(f64, f64)> {
        match &self.base {
            Base::Coefficients(..) => None,
            Base::Solvent(law) => law.range(),
        }
    }

    /// Zero-shear viscosity in one stream tube.
    ///
    /// ln η = a_0 + b_0/T + (M_w/M_ref)^m Σ_{k≥1} (a_k + b_k/T) w_p^k
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | T, w_p, M_w | `fluid` | K, 1, kg/mol | one stream tube |
    /// | η | returned | Pa·s | one stream tube |
    ///
    /// The exponent is held within ±`MAX_EXPONENT`.
    #[inline(always)]
    pub fn zero_shear<N: Number>(&self, fluid: &Fluid<N>) -> N {
        let inverse = inverse(fluid.temperature);
        let base = match &self.base {
            Base::Coefficients(a, b) => inverse * *b + *a,
            Base::Solvent(law) => law.at(fluid.temperature).at_least((-MAX_EXPONENT).exp()).ln(),
        };
        let term = |sum: N, (a, b): &(f64, f64)| (sum + (inverse * *b + *a)) * fluid.polymer_fraction;
        let content = self.terms.iter().rev().fold(N::constant(0.0), term);
        let mass = (fluid.molar_mass * self.molar_mass_reference.recip()).real_power(self.molar_mass_power);
        (base + mass * content).at_least(-MAX_EXPONENT).at_most(MAX_EXPONENT).exp()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use approx::assert_relative_eq;

    #[test]
    fn viscosity_is_that_of_the_printed_form() {
        let law = PolymerSolution {
            base: Base::Coefficients(-13.04, 2013.0),
            terms: vec![(3.915, 0.0), (-5.437, 0.0), (0.623, 1387.0)],
            molar_mass_reference: 1e-3,
            molar_mass_power: 0.18,
        };
        let (t, w, m_w) = (390.0_f64, 0.4_f64, 200_000.0_f64);
        let content = 3.915 * w - 5.437 * w * w + (0.623 + 1387.0 / t) * w * w * w;
        let expected = (-13.04 + 2013.0 / t + m_w.powf(0.18) * content).exp();
        let fluid = Fluid { temperature: t, polymer_fraction: w, molar_mass: m_w * 1e-3 };
        assert_relative_eq!(law.zero_shear(&fluid), expected, max_relative = 1e-13);
    }
}
