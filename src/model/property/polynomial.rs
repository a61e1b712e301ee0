//! A property that is a polynomial in temperature.

use crate::model::number::Number;
use crate::spec::{About, Block, Bound, Key, Need, Reported, SpecError, Takes};
use crate::units::Dimension;

use super::{KIND, VALID};

pub const ABOUT: About = About {
    kind: "polynomial",
    summary: "a polynomial in temperature",
    equation: "y = Σ a_k (T − at)^k",
    source: "",
    keys: &[
        KIND,
        Key {
            name: "a",
            takes: Takes::SubjectPolynomial,
            need: Need::Required("[1700 J/(kg K), 2 J/(kg K2)]"),
            meaning: "the coefficients; entry k belongs to the power k",
        },
        Key {
            name: "at",
            takes: Takes::Quantity(Dimension::TEMPERATURE, Bound::NotNegative),
            need: Need::Default("0 K"),
            meaning: "the temperature that the powers count from",
        },
        VALID,
    ],
};

/// Parameters of the law, SI.
#[derive(Clone, Debug, PartialEq)]
pub struct Polynomial {
    /// a_k, in the property's unit per K to the k.
    a: Vec<f64>,
    /// Where the powers count from, in K.
    at: f64,
}

impl Polynomial {
    /// Reads the law from the block that names it.
    ///
    /// # Errors
    /// A key that is missing, unknown or of the wrong dimension; no coefficient.
    pub fn read(block: &Block<'_>, subject: Dimension) -> Result<Self, Reported> {
        let fields = block.open_for(&ABOUT, subject);
        let a = fields.numbers("a");
        if a.as_ref().is_some_and(Vec::is_empty) {
            let (at, key) = (fields.place_of("a"), "a".to_owned());
            fields.problem(SpecError::Needs { at, key, needs: "at least one coefficient".to_owned() });
        }
        let law = Self { a: a.unwrap_or_default(), at: fields.quantity("at") };
        super::skip_range(&fields);
        fields.finish(law)
    }

    /// The property in one stream tube.
    ///
    /// y = Σ a_k (T − at)^k
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | T | `temperature` | K | one stream tube |
    /// | y | returned | the property's | one stream tube |
    ///
    /// It may leave the positive numbers outside its range; the mixture holds it above a floor.
    #[inline(always)]
    pub fn at<N: Number>(&self, temperature: N) -> N {
        let above = temperature - self.at;
        self.a.iter().rev().fold(N::constant(0.0), |sum, a| sum * above + *a)
    }

    /// ∫ y dT from one temperature to another.
    #[inline(always)]
    pub fn integral<N: Number>(&self, from: f64, to: N) -> N {
        let primitive = |above: N| {
            let n = self.a.len();
            #[expect(clippy::cast_precision_loss, reason = "a polynomial has few coefficients")]
            let term = |sum: N, (k, a): (usize, &f64)| sum * above + *a / (n - k) as f64;
            self.a.iter().rev().enumerate().fold(N::constant(0.0), term) * above
        };
        primitive(to - self.at) - primitive(N::constant(from - self.at))
    }
}
