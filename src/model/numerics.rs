//! Grid and tolerances of a run (spec page, §5).

use crate::spec::{About, Block, Bound, Key, Need, Reported, SpecError, Takes};
use crate::units::Dimension;

/// Fewest stream tubes: a cubic through the tube values needs four.
const FEWEST_TUBES: usize = 4;
/// Most stream tubes: beyond this the memory of a run grows out of hand and the error is rounding.
const MOST_TUBES: usize = 2000;

pub const ABOUT: About = About {
    kind: "numerics",
    summary: "grid and tolerances",
    equation: "faces at the inlet from t uniform in 0 … 1: `uniform` x = t, `equal_area` x = √t, `towards_wall` \
               x = 1 − (1 − t)^g, `both_ends` x = t^g/(t^g + (1 − t)^g)",
    source: "",
    keys: &[
        Key {
            name: "stream_tubes",
            takes: Takes::Whole(FEWEST_TUBES, MOST_TUBES),
            need: Need::Default("40"),
            meaning: "number of stream tubes across the duct",
        },
        Key {
            name: "spacing",
            takes: Takes::Word(&["uniform", "equal_area", "towards_wall", "both_ends"]),
            need: Need::Default(DEFAULT_SPACING),
            meaning: "how the faces between stream tubes are spaced at the inlet",
        },
        Key {
            name: "grading",
            takes: Takes::Quantity(Dimension::RATIO, Bound::AtLeastOne),
            need: Need::Default("1.5"),
            meaning: "g of `towards_wall` and `both_ends`",
        },
        Key {
            name: "relative_tolerance",
            takes: Takes::Quantity(Dimension::RATIO, Bound::Positive),
            need: Need::Default("1e-6"),
            meaning: "relative tolerance of the integration along z",
        },
        Key {
            name: "coolant_tolerance",
            takes: Takes::Quantity(Dimension::TEMPERATURE_DIFFERENCE, Bound::Positive),
            need: Need::Later,
            meaning: "to which a counter-current coolant is closed",
        },
        Key {
            name: "flow_tolerance",
            takes: Takes::Quantity(Dimension::RATIO, Bound::Positive),
            need: Need::Later,
            meaning: "to which a shear-dependent flow is closed",
        },
    ],
};

/// The spacing that holds where none is given; chosen by measurement, see `docs/design/spacing.md`.
const DEFAULT_SPACING: &str = "equal_area";
/// Loosest and tightest relative tolerance that the integrator keeps its promises at.
const TOLERANCES: (f64, f64) = (1e-12, 1e-2);
/// Thinnest outermost tube, as a share of R: thinner ones hold so little flow that no step along z is small enough.
const THINNEST: f64 = 1e-6;
/// Steepest grading: beyond this the innermost tube is all there is.
const STEEPEST: f64 = 3.0;

/// How faces are spaced at the inlet.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Spacing {
    /// x = t.
    Uniform,
    /// Equal areas.
    EqualArea,
    /// x = 1 − (1 − t)^g.
    TowardsWall(f64),
    /// x = t^g/(t^g + (1 − t)^g).
    BothEnds(f64),
}

impl Spacing {
    /// 1 − x of a face at t, with all its digits where the faces crowd at the wall.
    #[must_use]
    pub fn from_wall(self, t: f64) -> f64 {
        match self {
            Self::Uniform => 1.0 - t,
            Self::EqualArea => (1.0 - t) / (1.0 + t.sqrt()),
            Self::TowardsWall(g) => (1.0 - t).powf(g),
            Self::BothEnds(g) => (1.0 - t).powf(g) / (t.powf(g) + (1.0 - t).powf(g)),
        }
    }
}

/// Grid and tolerances.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Numerics {
    /// N.
    pub stream_tubes: usize,
    /// Faces at the inlet.
    pub spacing: Spacing,
    /// Relative tolerance of the integration.
    pub relative_tolerance: f64,
}

impl Numerics {
    /// Reads the block `numerics`.
    ///
    /// # Errors
    /// What is wrong with any of its keys.
    pub fn read(block: &Block<'_>) -> Result<Self, Reported> {
        let fields = block.open(&ABOUT);
        let outside = |key: &'static str, bound: String| {
            let at = fields.place_of(key);
            let text = at.location.text().to_owned();
            fields.problem(SpecError::OutOfBounds { at, key: key.to_owned(), text, bound });
        };
        let stream_tubes = fields.whole("stream_tubes");
        let grading = fields.quantity("grading");
        if grading > STEEPEST {
            outside("grading", format!("at most {STEEPEST}"));
        }
        let spacing_word = fields.word("spacing");
        #[expect(clippy::cast_precision_loss, reason = "tubes are at most a few thousand")]
        let steepest = -THINNEST.ln() / (stream_tubes as f64).ln();
        if ["towards_wall", "both_ends"].contains(&spacing_word) && grading > steepest && fields.has("grading") {
            outside("grading", format!("at most {steepest:.2} with {stream_tubes} stream tubes"));
        }
        let spacing = match spacing_word {
            "uniform" => Spacing::Uniform,
            "towards_wall" => Spacing::TowardsWall(grading),
            "both_ends" => Spacing::BothEnds(grading),
            _ => Spacing::EqualArea,
        };
        if fields.has("grading") && matches!(spacing, Spacing::Uniform | Spacing::EqualArea) {
            let (at, key) = (fields.place_of("grading"), "grading".to_owned());
            let with = "`spacing: uniform` and `equal_area`: only `towards_wall` and `both_ends` are graded".to_owned();
            fields.problem(SpecError::DoesNotGoWith { at, key, with });
        }
        let relative_tolerance = fields.quantity("relative_tolerance");
        if !(TOLERANCES.0..=TOLERANCES.1).contains(&relative_tolerance) && relative_tolerance.is_finite() {
            outside("relative_tolerance", format!("from {:e} to {:e}", TOLERANCES.0, TOLERANCES.1));
        }
        fields.finish(Self { stream_tubes, spacing, relative_tolerance })
    }
}
