//! What a passing design must show: bounds on quantities of the catalogue (spec page, §2 and §5, `accept`).

use crate::model::plant::Plant;
use crate::results::catalogue::{Slot, slots};
use crate::results::{Figure, Value};
use crate::spec::{About, Block, Bound, Key, Need, Place, Reported, SpecError, Takes, unknown_name};
use crate::units::Dimension;

/// The bounds of one quantity.
pub const ABOUT: About = About {
    kind: "accept",
    summary: "bounds that a passing design must keep",
    equation: "",
    source: "",
    keys: &[
        Key {
            name: "at_least",
            takes: Takes::Subject(0.0, Bound::Any),
            need: Need::Optional,
            meaning: "the least that passes",
        },
        Key {
            name: "at_most",
            takes: Takes::Subject(0.0, Bound::Any),
            need: Need::Optional,
            meaning: "the most that passes",
        },
        Key { name: "is", takes: Takes::Text, need: Need::Optional, meaning: "the word that passes" },
        Key { name: "because", takes: Takes::Text, need: Need::Optional, meaning: "why" },
    ],
};

/// Names that begin like this belong to a later version.
const LATER: [&str; 8] = [
    "runaway.",
    "loss_of_cooling.",
    "residence_time.",
    "groups.",
    "sensitivity.",
    "outlet.branch_points",
    "outlet.copolymer_fraction.",
    "outlet.group_conversion.",
];

/// Number of warnings that were not acknowledged: known only to the judgement.
pub const WARNINGS_COUNT: &str = "warnings.count";

/// A bound on a quantity.
#[derive(Clone, Debug, PartialEq)]
pub struct Limit {
    /// The quantity.
    pub quantity: String,
    /// Its dimension.
    pub dimension: Dimension,
    /// The bound.
    pub bound: Bar,
    /// Why, if the spec says so.
    pub because: Option<String>,
    /// Whether the quantity is final only once the outlet is reached.
    needs_whole_run: bool,
}

/// A bound.
#[derive(Clone, Debug, PartialEq)]
pub enum Bar {
    /// At least this, SI.
    AtLeast(f64),
    /// At most this, SI.
    AtMost(f64),
    /// This word.
    Is(String),
}

/// What became of a bound.
#[derive(Clone, Debug, PartialEq)]
pub enum Verdict {
    /// It holds.
    Holds,
    /// It is broken.
    Broken,
    /// It could not be judged, and so does not pass; the text says why.
    NotJudged(String),
}

/// One bound held against a run.
#[derive(Clone, Debug, PartialEq)]
pub struct Judged {
    /// The bound.
    pub limit: Limit,
    /// What the quantity came to.
    pub value: Value,
    /// What became of the bound.
    pub verdict: Verdict,
}

impl Limit {
    /// Reads the block `accept`: one bound or two a quantity.
    ///
    /// # Errors
    /// A quantity that a run of the plant does not report, a bound of the wrong dimension.
    pub fn read_all(block: &Block<'_>, plant: &Plant) -> Result<Vec<Self>, Reported> {
        let known = slots(plant);
        let mut limits = Vec::new();
        let mut failed = block.node().entries().is_none();
        if failed {
            let _ = block.refuse(block.wrong_shape("accept", "a block of quantities with bounds"));
        }
        for (name, location, item) in block.keyed() {
            let at = Place { location, path: item.path().clone() };
            let found = known.iter().find(|slot| slot.name == name);
            let read = match found {
                Some(slot) => read_one(&item, name, Some(slot)),
                None if name == WARNINGS_COUNT => read_one(&item, name, None),
                None => {
                    let is_later = LATER.iter().any(|later| name.starts_with(later));
                    let error = if is_later {
                        SpecError::NotInThisVersion { at, what: format!("accept.{name}") }
                    } else {
                        unknown_quantity(at, name, &known)
                    };
                    Err(block.refuse(error))
                }
            };
            match read {
                Ok(read) => limits.extend(read),
                Err(Reported) => failed = true,
            }
        }
        if failed { Err(Reported) } else { Ok(limits) }
    }

    /// Holds the bound against the figures of a run; `ended_in` is the section in which a limit ended it.
    #[must_use]
    pub fn judge(&self, figures: &[Figure], ended_in: Option<&str>) -> Judged {
        let is_cut_short = ended_in
            .is_some_and(|section| self.needs_whole_run || self.quantity.starts_with(&format!("section.{section}.")));
        let figure = figures.iter().find(|figure| figure.name == self.quantity);
        let value = figure.map_or_else(|| Value::Missing("it was not computed".to_owned()), |f| f.value.clone());
        let holds = match (&self.bound, &value) {
            (Bar::AtLeast(bound), Value::Number(value)) => Ok(value >= bound),
            (Bar::AtMost(bound), Value::Number(value)) => Ok(value <= bound),
            (Bar::Is(word), Value::Word(value)) => Ok(value == word),
            (_, Value::Missing(reason)) => Err(reason.clone()),
            (Bar::AtLeast(_) | Bar::AtMost(_), Value::Word(_)) | (Bar::Is(_), Value::Number(_)) => {
                Err("a word and a number do not compare".to_owned())
            }
        };
        let verdict = match holds {
            Ok(false) => Verdict::Broken,
            Ok(true) if is_cut_short => Verdict::NotJudged("the run did not reach the outlet".to_owned()),
            Ok(true) => Verdict::Holds,
            Err(reason) => Verdict::NotJudged(reason),
        };
        Judged { limit: self.clone(), value, verdict }
    }
}

/// The mistake that no quantity has this name: one that ends or begins like it is proposed first.
fn unknown_quantity(at: Place, name: &str, known: &[Slot]) -> SpecError {
    let names: Vec<String> = known.iter().map(|slot| slot.name.clone()).collect();
    let alike = names
        .iter()
        .find(|known| known.strip_suffix(name).is_some_and(|before| before.ends_with('.')))
        .or_else(|| names.iter().find(|known| known.strip_prefix(name).is_some_and(|after| after.starts_with('.'))))
        .cloned();
    match (unknown_name(at, "quantity", name, &names), alike) {
        (SpecError::UnknownName { at, what, name, known, .. }, Some(alike)) => {
            SpecError::UnknownName { at, what, name, nearest: Some(alike), known }
        }
        (error, _) => error,
    }
}

fn read_one(block: &Block<'_>, name: &str, slot: Option<&Slot>) -> Result<Vec<Limit>, Reported> {
    let dimension = slot.map_or(Dimension::RATIO, |slot| slot.dimension);
    let fields = block.open_for(&ABOUT, dimension);
    let is_word = slot.is_some_and(Slot::is_word);
    let because = fields.text("because");
    let make = |bound: Bar| Limit {
        quantity: name.to_owned(),
        dimension,
        bound,
        because: because.clone(),
        needs_whole_run: slot.is_none_or(Slot::needs_whole_run),
    };
    for key in ["at_least", "at_most"] {
        let bound = fields.optional_quantity(key).unwrap_or(0.0);
        if slot.is_some_and(Slot::is_fraction) && bound > 1.0 {
            let at = fields.place_of(key);
            let text = at.location.text().to_owned();
            fields.problem(SpecError::FractionAboveOne { at, key: key.to_owned(), text });
        }
    }
    let mut limits = Vec::new();
    limits.extend(fields.optional_quantity("at_least").map(Bar::AtLeast).map(make));
    limits.extend(fields.optional_quantity("at_most").map(Bar::AtMost).map(make));
    limits.extend(fields.text("is").map(Bar::Is).map(make));
    if !fields.has("at_least") && !fields.has("at_most") && !fields.has("is") {
        let (at, block) = (block.place(), block.name());
        fields.problem(SpecError::NoneOf { at, block, keys: vec!["at_least", "at_most", "is"] });
    }
    for key in ["at_least", "at_most"] {
        if is_word && fields.has(key) {
            let with = format!("`{name}`, which is a word: use `is`");
            fields.problem(SpecError::DoesNotGoWith { at: fields.place_of(key), key: key.to_owned(), with });
        }
    }
    if !is_word && fields.has("is") {
        let with = format!("`{name}`, which is a number: use `at_least` or `at_most`");
        fields.problem(SpecError::DoesNotGoWith { at: fields.place_of("is"), key: "is".to_owned(), with });
    }
    fields.finish(limits)
}
