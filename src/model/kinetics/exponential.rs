//! A rate that grows by a factor e with every so many kelvin: Frank-Kamenetskii's form.

use crate::model::number::Number;
use crate::model::property::{AT, KIND, VALID, skip_range};
use crate::spec::{About, Block, Bound, Key, Need, Reported, Takes};
use crate::units::Dimension;

/// e¹⁰⁰ lies far beyond any rate.
const MAX_EXPONENT: f64 = 100.0;

pub const ABOUT: About = About {
    kind: "exponential",
    summary: "a rate that grows by a factor e with every so many kelvin",
    equation: "k = value · exp((T − at)/e_fold)",
    source: "Frank-Kamenetskii (1939), Zh. Fiz. Khim. 13, 738 (from memory)",
    keys: &[
        KIND,
        Key {
            name: "value",
            takes: Takes::Subject(0.0, Bound::NotNegative),
            need: Need::Required("1 mol/(m3 s)"),
            meaning: "the rate constant at the temperature `at`",
        },
        AT,
        Key {
            name: "e_fold",
            takes: Takes::Quantity(Dimension::TEMPERATURE_DIFFERENCE, Bound::Positive),
            need: Need::Required("10 K"),
            meaning: "the rise in temperature that multiplies the rate by e",
        },
        VALID,
    ],
};

/// Parameters of the law, SI.
#[derive(Clone, Debug, PartialEq)]
pub struct Exponential {
    /// k at `at`, in the rate constant's unit.
    value: f64,
    /// Temperature that the value belongs to, in K.
    at: f64,
    /// Rise that multiplies k by e, in K.
    e_fold: f64,
}

impl Exponential {
    /// Reads the law from the block that names it.
    ///
    /// # Errors
    /// A key that is missing, unknown or of the wrong dimension.
    pub fn read(block: &Block<'_>, subject: Dimension) -> Result<Self, Reported> {
        let fields = block.open_for(&ABOUT, subject);
        let law =
            Self { value: fields.quantity("value"), at: fields.quantity("at"), e_fold: fields.quantity("e_fold") };
        skip_range(&fields);
        fields.finish(law)
    }

    /// The rate constant in one stream tube.
    ///
    /// k = value · exp((T − at)/e_fold)
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | T | `temperature` | K | one stream tube |
    /// | k | returned | the rate constant's | one stream tube |
    ///
    /// The exponent is held within ±`MAX_EXPONENT`.
    #[inline(always)]
    pub fn at<N: Number>(&self, temperature: N) -> N {
        let exponent = (temperature - self.at) * self.e_fold.recip();
        exponent.at_least(-MAX_EXPONENT).at_most(MAX_EXPONENT).exp() * self.value
    }
}
