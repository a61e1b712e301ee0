//! Properties that rise (`arrhenius`) or fall (`andrade`) exponentially with temperature.

use crate::model::GAS_CONSTANT;
use crate::model::number::Number;
use crate::spec::{About, Block, Bound, Fields, Key, Need, Reported, SpecError, Takes};
use crate::units::Dimension;

use super::{KIND, VALID, inverse};

/// Exponents beyond this are held: e¹⁰⁰ lies far beyond any property or rate.
const MAX_EXPONENT: f64 = 100.0;

/// Keys of the two laws and of rate constants.
const KEYS: &[Key] = &[
    KIND,
    Key {
        name: "value",
        takes: Takes::Subject(0.0, Bound::NotNegative),
        need: Need::OneOf("size"),
        meaning: "the value at the temperature `at`",
    },
    Key {
        name: "at",
        takes: Takes::Quantity(Dimension::TEMPERATURE, Bound::Positive),
        need: Need::Optional,
        meaning: "the temperature that `value` belongs to",
    },
    Key {
        name: "prefactor",
        takes: Takes::Subject(0.0, Bound::NotNegative),
        need: Need::OneOf("size"),
        meaning: "the value at infinite temperature, in place of `value` and `at`",
    },
    Key {
        name: "activation_energy",
        takes: Takes::Quantity(Dimension::MOLAR_ENERGY, Bound::Any),
        need: Need::OneOf("slope"),
        meaning: "E",
    },
    Key {
        name: "activation_temperature",
        takes: Takes::Quantity(Dimension::TEMPERATURE_DIFFERENCE, Bound::Any),
        need: Need::OneOf("slope"),
        meaning: "E/R_g, in place of `activation_energy`",
    },
    VALID,
];

pub const ARRHENIUS: About = About {
    kind: "arrhenius",
    summary: "rises exponentially with temperature, as rate constants and diffusivities do",
    equation: "y = prefactor · exp(−E/(R_g T)) = value · exp(−(E/R_g)(1/T − 1/at))",
    source: "Arrhenius (1889), Z. Phys. Chem. 4, 226 (from memory)",
    keys: KEYS,
};

pub const ANDRADE: About = About {
    kind: "andrade",
    summary: "falls exponentially with temperature, as viscosities do",
    equation: "y = prefactor · exp(E/(R_g T)) = value · exp((E/R_g)(1/T − 1/at))",
    source: "Andrade (1934), Phil. Mag. 17, 497 (from memory)",
    keys: KEYS,
};

/// Parameters of both laws, SI: y = value · exp(−t (1/T − inverse)).
#[derive(Clone, Debug, PartialEq)]
pub struct Arrhenius {
    /// y at the temperature 1/`inverse`, in the property's unit.
    value: f64,
    /// 1/at, or 0 where `value` is the prefactor, in 1/K.
    inverse: f64,
    /// E/R_g, negative for a law that falls, in K.
    activation_temperature: f64,
}

impl Arrhenius {
    /// Reads one of the two laws from the block that names it.
    ///
    /// # Errors
    /// A key that is missing, unknown or of the wrong dimension; `value` without `at`, or `at` without it.
    pub fn read(block: &Block<'_>, about: &'static About, subject: Dimension) -> Result<Self, Reported> {
        let fields = block.open_for(about, subject);
        let law = Self::from_fields(&fields);
        super::skip_range(&fields);
        fields.finish(law)
    }

    fn from_fields(fields: &Fields<'_>) -> Self {
        let needs = |key: &str, needs: &str| {
            let at = fields.place_of(key);
            fields.problem(SpecError::Needs { at, key: key.to_owned(), needs: needs.to_owned() });
        };
        let at = fields.optional_quantity("at");
        let (value, inverse) = if fields.has("prefactor") {
            if at.is_some() && !fields.has("value") {
                needs("at", "`value`, not `prefactor`");
            }
            (fields.quantity("prefactor"), 0.0)
        } else {
            if fields.has("value") && !fields.has("at") {
                needs("value", "the temperature it belongs to, such as `at: 80 degC`");
            }
            (fields.quantity("value"), at.map_or(f64::NAN, f64::recip))
        };
        let magnitude = match fields.optional_quantity("activation_energy") {
            Some(energy) => energy / GAS_CONSTANT,
            None => fields.quantity("activation_temperature"),
        };
        let sign = if fields.is_about(&ANDRADE) { -1.0 } else { 1.0 };
        Self { value, inverse, activation_temperature: sign * magnitude }
    }

    /// The property in one stream tube.
    ///
    /// y = value · exp(−(E/R_g)(1/T − 1/at)); `andrade` with the other sign
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | T | `temperature` | K | one stream tube |
    /// | y | returned | the property's | one stream tube |
    ///
    /// The temperature is held above the coldest liquid's and the exponent within ±`MAX_EXPONENT`, so that every trial
    /// state gets a finite value.
    #[inline(always)]
    pub fn at<N: Number>(&self, temperature: N) -> N {
        self.at_inverse(inverse(temperature))
    }

    /// The same, with 1/T at hand.
    #[inline(always)]
    pub fn at_inverse<N: Number>(&self, inverse: N) -> N {
        let exponent = (inverse - self.inverse) * -self.activation_temperature;
        exponent.at_least(-MAX_EXPONENT).at_most(MAX_EXPONENT).exp() * self.value
    }
}
