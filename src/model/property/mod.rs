//! Laws of temperature that any property may follow (model page, §5).

pub mod arrhenius;
pub mod constant;
pub mod linear;
pub mod polynomial;
pub mod table;

use self::arrhenius::Arrhenius;
use self::constant::Constant;
use self::linear::Linear;
use self::polynomial::Polynomial;
use self::table::Table;
use super::number::Number;
use crate::spec::{About, Block, Bound, Fields, Key, Need, Reported, SpecError, Takes};
use crate::units::{self, Dimension};

/// The key that names a law's kind.
pub const KIND: Key = Key { name: "kind", takes: Takes::Text, need: Need::Optional, meaning: "which law this is" };

/// The temperature that a law's value belongs to.
pub const AT: Key = Key {
    name: "at",
    takes: Takes::Quantity(Dimension::TEMPERATURE, Bound::NotNegative),
    need: Need::Required("80 degC"),
    meaning: "the temperature that `value` belongs to",
};

/// The range that a law was fitted in.
pub const VALID: Key = Key {
    name: "valid",
    takes: Takes::Block(&RANGE),
    need: Need::Optional,
    meaning: "the range of temperature that the law was fitted in; the report says where a run leaves it",
};

/// The range of temperature that a law was fitted in.
pub const RANGE: About = About {
    kind: "valid",
    summary: "the range of temperature that a law was fitted in",
    equation: "",
    source: "",
    keys: &[
        Key {
            name: "from",
            takes: Takes::Quantity(Dimension::TEMPERATURE, Bound::NotNegative),
            need: Need::Required("20 degC"),
            meaning: "the lowest temperature",
        },
        Key {
            name: "to",
            takes: Takes::Quantity(Dimension::TEMPERATURE, Bound::NotNegative),
            need: Need::Required("180 degC"),
            meaning: "the highest temperature",
        },
    ],
};

/// Temperatures below this are held there before 1/T is taken: no liquid is colder, in K.
const COLDEST: f64 = 20.0;

/// 1/T, finite at every trial state, in 1/K.
#[inline(always)]
pub(in crate::model) fn inverse<N: Number>(temperature: N) -> N {
    temperature.at_least(COLDEST).recip()
}

/// The kinds of law that any property may follow.
pub const KINDS: &[&About] =
    &[&constant::ABOUT, &linear::ABOUT, &polynomial::ABOUT, &table::ABOUT, &arrhenius::ARRHENIUS, &arrhenius::ANDRADE];

/// Least density in kg/m³ and heat capacity in J/(kg K) of any fluid that flows in a tube.
pub(in crate::model) const LEAST: f64 = 1e-3;

/// A law of temperature, with the range it holds in.
#[derive(Clone, Debug, PartialEq)]
pub struct Property {
    form: Form,
    /// The range that was stated, or that a table has, in K.
    range: Option<(f64, f64)>,
}

#[derive(Clone, Debug, PartialEq)]
enum Form {
    Constant(Constant),
    Linear(Linear),
    Polynomial(Polynomial),
    Table(Table),
    Exponential(Arrhenius),
}

impl Property {
    /// A property that is the same at any temperature.
    #[must_use]
    pub fn constant(value: f64) -> Self {
        Self { form: Form::Constant(Constant { value }), range: None }
    }

    /// Reads a value or a law for a property of this dimension.
    ///
    /// # Errors
    /// What the law's own reader finds.
    pub fn read(block: &Block<'_>, what: &'static str, subject: Dimension) -> Result<Self, Reported> {
        let about = block.kind(what, KINDS, Some(&constant::ABOUT))?;
        Self::read_kind(block, about, subject)
    }

    /// Reads a law whose kind is known to be one of [`KINDS`].
    ///
    /// # Errors
    /// What the law's own reader finds.
    pub fn read_kind(block: &Block<'_>, about: &'static About, subject: Dimension) -> Result<Self, Reported> {
        let form = match about.kind {
            "linear" => Form::Linear(Linear::read(block, subject)?),
            "polynomial" => Form::Polynomial(Polynomial::read(block, subject)?),
            "table" => Form::Table(Table::read(block, subject)?),
            "arrhenius" | "andrade" => Form::Exponential(Arrhenius::read(block, about, subject)?),
            _ => Form::Constant(Constant::read(block, subject)?),
        };
        let of_table = match &form {
            Form::Table(table) => Some(table.range()),
            Form::Constant(_) | Form::Linear(_) | Form::Polynomial(_) | Form::Exponential(_) => None,
        };
        block.trace();
        let law = Self { form, range: read_range(block)?.or(of_table) };
        law.check_positive(block, subject)?;
        Ok(law)
    }

    /// A density, heat capacity or viscosity of next to nothing is a slip of the pen.
    fn check_positive(&self, block: &Block<'_>, subject: Dimension) -> Result<(), Reported> {
        let least = match subject {
            _ if [Dimension::DENSITY, Dimension::HEAT_CAPACITY].contains(&subject) => LEAST,
            _ if subject == Dimension::VISCOSITY => f64::MIN_POSITIVE,
            _ => 0.0,
        };
        match &self.form {
            Form::Constant(law) if law.value < least => {
                let (at, key) = (block.place(), block.last_step().to_owned());
                let text = units::write(law.value, subject);
                let bound =
                    if least == LEAST { units::write(LEAST, subject) + " or above" } else { "above 0".to_owned() };
                Err(block.refuse(SpecError::OutOfBounds { at, key, text, bound }))
            }
            _ => Ok(()),
        }
    }

    /// The property in one stream tube.
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | T | `temperature` | K | one stream tube |
    /// | y | returned | the property's | one stream tube |
    #[inline(always)]
    pub fn at<N: Number>(&self, temperature: N) -> N {
        match &self.form {
            Form::Constant(law) => N::constant(law.value),
            Form::Linear(law) => law.at(temperature),
            Form::Polynomial(law) => law.at(temperature),
            Form::Table(law) => law.at(temperature),
            Form::Exponential(law) => law.at(temperature),
        }
    }

    /// ∫ y dT from one temperature to another, in the property's unit times K.
    #[inline(always)]
    pub fn integral<N: Number>(&self, from: f64, to: N) -> N {
        match &self.form {
            Form::Constant(law) => (to - from) * law.value,
            Form::Linear(law) => law.integral(from, to),
            Form::Polynomial(law) => law.integral(from, to),
            Form::Table(law) => law.integral(from, to),
            Form::Exponential(law) => quadrature(|temperature| law.at(temperature), from, to),
        }
    }

    /// Whether the property is the same at any temperature.
    #[must_use]
    pub fn is_constant(&self) -> bool {
        matches!(self.form, Form::Constant(_))
    }

    /// The range that was stated, or that a table has, in K.
    #[must_use]
    pub fn range(&self) -> Option<(f64, f64)> {
        self.range
    }
}

/// Nodes and weights of Gauss and Legendre's rule of five points on −1 … 1; Abramowitz and Stegun (1964),
/// table 25.4 (from memory; the test holds them).
const GAUSS: [(f64, f64); 5] = [
    (-0.906_179_845_938_664, 0.236_926_885_056_189_08),
    (-0.538_469_310_105_683_1, 0.478_628_670_499_366_47),
    (0.0, 0.568_888_888_888_888_9),
    (0.538_469_310_105_683_1, 0.478_628_670_499_366_47),
    (0.906_179_845_938_664, 0.236_926_885_056_189_08),
];

/// ∫ y dT where there is no closed form. Smooth laws over a few hundred kelvin: good to 1e-10.
#[inline(always)]
fn quadrature<N: Number>(law: impl Fn(N) -> N, from: f64, to: N) -> N {
    let half = (to - from) * 0.5;
    let middle = (to + from) * 0.5;
    let add = |sum: N, (x, weight): &(f64, f64)| sum + law(middle + half * *x) * *weight;
    GAUSS.iter().fold(N::constant(0.0), add) * half
}

/// The coefficients (a_k, b_k) of a law in the lists `a` and `b`; `b` is 0 where it is not given.
pub(in crate::model) fn coefficient_pairs(fields: &Fields<'_>) -> Vec<(f64, f64)> {
    let (Some(a), b) = (fields.numbers("a"), fields.numbers("b")) else { return Vec::new() };
    let b = match b {
        None if fields.has("b") => return Vec::new(), // reported
        None => vec![0.0; a.len()],
        Some(b) => b,
    };
    if a.len() != b.len() {
        let (at, key) = (fields.place_of("b"), "b".to_owned());
        fields.problem(SpecError::LengthsDiffer { at, key, found: b.len(), other: "a", wanted: a.len() });
    }
    if a.is_empty() {
        let (at, key) = (fields.place_of("a"), "a".to_owned());
        fields.problem(SpecError::Needs { at, key, needs: "at least one coefficient".to_owned() });
    }
    a.into_iter().zip(b).collect()
}

/// Marks the key `valid` as read: [`Property::read_kind`] reads it for all laws.
pub(in crate::model) fn skip_range(fields: &Fields<'_>) {
    let _ = fields.child("valid");
}

/// The range of a law, if its block states one.
pub(in crate::model) fn read_range(block: &Block<'_>) -> Result<Option<(f64, f64)>, Reported> {
    let Some(range) = block.child_of("valid") else { return Ok(None) };
    let fields = range.open(&RANGE);
    let (from, to) = (fields.quantity("from"), fields.quantity("to"));
    if from >= to {
        let typed = |key| fields.child(key).and_then(|end| end.node().text().map(str::to_owned)).unwrap_or_default();
        let (at, key) = (range.place(), "valid".to_owned());
        fields.problem(SpecError::EmptyRange { at, key, from: typed("from"), to: typed("to") });
    }
    fields.finish(Some((from, to)))
}

#[cfg(test)]
mod tests {
    use super::*;
    use approx::assert_relative_eq;

    #[test]
    fn quadrature_is_exact_for_powers_up_to_nine() {
        let power = |x: f64| x.powi(9);
        assert_relative_eq!(quadrature(power, 1.0, 2.0), 102.3, max_relative = 1e-14);
    }
}
