//! A property that is linear in temperature.

use crate::model::number::Number;
use crate::spec::{About, Block, Bound, Key, Need, Reported, Takes};
use crate::units::Dimension;

use super::{AT, KIND, VALID};

pub const ABOUT: About = About {
    kind: "linear",
    summary: "linear in temperature",
    equation: "y = value + slope (T − at)",
    source: "",
    keys: &[
        KIND,
        Key {
            name: "value",
            takes: Takes::Subject(0.0, Bound::Positive),
            need: Need::Required("924 kg/m3"),
            meaning: "the value at the temperature `at`",
        },
        AT,
        Key {
            name: "slope",
            takes: Takes::Subject(-1.0, Bound::Any),
            need: Need::Required("-0.918 kg/(m3 K)"),
            meaning: "the change per kelvin",
        },
        VALID,
    ],
};

/// Parameters of the law, SI.
#[derive(Clone, Debug, PartialEq)]
pub struct Linear {
    /// y at `at`, in the property's unit.
    value: f64,
    /// Temperature that the value belongs to, in K.
    at: f64,
    /// dy/dT, in the property's unit per K.
    slope: f64,
}

impl Linear {
    /// Reads the law from the block that names it.
    ///
    /// # Errors
    /// A key that is missing, unknown or of the wrong dimension.
    pub fn read(block: &Block<'_>, subject: Dimension) -> Result<Self, Reported> {
        let fields = block.open_for(&ABOUT, subject);
        let law = Self { value: fields.quantity("value"), at: fields.quantity("at"), slope: fields.quantity("slope") };
        super::skip_range(&fields);
        fields.finish(law)
    }

    /// The property in one stream tube.
    ///
    /// y = value + slope (T − at)
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | T | `temperature` | K | one stream tube |
    /// | y | returned | the property's | one stream tube |
    ///
    /// It may leave the positive numbers far from `at`; the mixture holds it above a floor.
    #[inline(always)]
    pub fn at<N: Number>(&self, temperature: N) -> N {
        (temperature - self.at) * self.slope + self.value
    }

    /// ∫ y dT from one temperature to another.
    #[inline(always)]
    pub fn integral<N: Number>(&self, from: f64, to: N) -> N {
        let middle = (to + from) * 0.5;
        (to - from) * self.at(middle)
    }
}
