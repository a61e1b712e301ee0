//! Limits that end a run, as a result that says which and where (spec page, §5).

use crate::spec::{About, Block, Bound, Key, Need, Reported, SpecError, Takes};
use crate::units::Dimension;

pub const ABOUT: About = About {
    kind: "limits",
    summary: "a run ends where one of these is left, as a result that says which and where",
    equation: "",
    source: "",
    keys: &[
        Key {
            name: "temperature",
            takes: Takes::Block(&TEMPERATURE),
            need: Need::Optional,
            meaning: "in any stream tube",
        },
        Key {
            name: "pressure",
            takes: Takes::Block(&PRESSURE),
            need: Need::Optional,
            meaning: "of the fluid, where the feed's pressure is given",
        },
        Key {
            name: "viscosity",
            takes: Takes::Block(&VISCOSITY),
            need: Need::Optional,
            meaning: "at zero shear, in any stream tube",
        },
        Key {
            name: "polymer_fraction",
            takes: Takes::Block(&POLYMER_FRACTION),
            need: Need::Optional,
            meaning: "mass fraction, in any stream tube",
        },
        Key {
            name: "dispersity",
            takes: Takes::Block(&DISPERSITY),
            need: Need::Optional,
            meaning: "of the polymer in any stream tube",
        },
    ],
};

macro_rules! bound_block {
    ($name:ident, $kind:literal, $(($key:literal, $dimension:expr, $bound:expr, $need:expr, $meaning:literal)),+) => {
        #[doc = concat!("Limits of ", $kind, ".")]
        pub const $name: About = About {
            kind: $kind,
            summary: concat!("limits of ", $kind),
            equation: "",
            source: "",
            keys: &[$(Key { name: $key, takes: Takes::Quantity($dimension, $bound), need: $need, meaning: $meaning }),+],
        };
    };
}

bound_block!(
    TEMPERATURE,
    "temperature",
    ("lowest", Dimension::TEMPERATURE, Bound::Positive, Need::Default("150 K"), "the run ends below it"),
    ("highest", Dimension::TEMPERATURE, Bound::Positive, Need::Default("1500 K"), "the run ends above it")
);
bound_block!(
    PRESSURE,
    "pressure",
    ("lowest", Dimension::PRESSURE_LEVEL, Bound::NotNegative, Need::Default("0 bar"), "the run ends below it")
);
bound_block!(
    VISCOSITY,
    "viscosity",
    ("highest", Dimension::VISCOSITY, Bound::Positive, Need::Required("5 kPa.s"), "the run ends above it")
);
bound_block!(
    POLYMER_FRACTION,
    "polymer_fraction",
    ("highest", Dimension::RATIO, Bound::Fraction, Need::Required("80 %"), "the run ends above it")
);
bound_block!(
    DISPERSITY,
    "dispersity",
    ("highest", Dimension::RATIO, Bound::AtLeastOne, Need::Required("20"), "the run ends above it")
);

/// Limits of a run, SI. An infinite one is none.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Limits {
    /// Lowest temperature of any stream tube, in K.
    pub lowest_temperature: f64,
    /// Highest temperature of any stream tube, in K.
    pub highest_temperature: f64,
    /// Lowest pressure, if the feed's is given, in Pa.
    pub lowest_pressure: f64,
    /// Highest zero-shear viscosity, in Pa·s.
    pub highest_viscosity: f64,
    /// Highest mass fraction of polymer.
    pub highest_polymer_fraction: f64,
    /// Highest M_w/M_n.
    pub highest_dispersity: f64,
}

impl Limits {
    /// Reads the block `limits`.
    ///
    /// # Errors
    /// What is wrong with any of its keys.
    pub fn read(block: &Block<'_>) -> Result<Self, Reported> {
        let fields = block.open(&ABOUT);
        let temperature = fields.child_or_absent("temperature");
        let open = temperature.open(&TEMPERATURE);
        let (lowest_temperature, highest_temperature) = (open.quantity("lowest"), open.quantity("highest"));
        if lowest_temperature >= highest_temperature {
            let typed = |key| open.child(key).and_then(|end| end.node().text().map(str::to_owned)).unwrap_or_default();
            let (at, key) = (temperature.place(), "limits.temperature".to_owned());
            let (from, to) = (typed("lowest"), typed("highest"));
            open.problem(SpecError::EmptyRange { at, key, from, to });
        }
        fields.take(open.finish(()));
        let pressure = fields.child_or_absent("pressure").open(&PRESSURE);
        let lowest_pressure = pressure.quantity("lowest");
        fields.take(pressure.finish(()));
        let highest = |key: &'static str, about: &'static About| {
            let Some(child) = fields.child(key) else { return f64::INFINITY };
            let open = child.open(about);
            let value = open.quantity("highest");
            fields.take(open.finish(value)).unwrap_or(f64::NAN)
        };
        let limits = Self {
            lowest_temperature,
            highest_temperature,
            lowest_pressure,
            highest_viscosity: highest("viscosity", &VISCOSITY),
            highest_polymer_fraction: highest("polymer_fraction", &POLYMER_FRACTION),
            highest_dispersity: highest("dispersity", &DISPERSITY),
        };
        fields.finish(limits)
    }
}
