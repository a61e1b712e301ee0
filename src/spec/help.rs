//! What a message says besides its text: where the mistake stands and what to write instead.

use super::error::SpecError;
use super::place::Place;

impl SpecError {
    /// Where the mistake stands.
    #[must_use]
    pub fn at(&self) -> &Place {
        match self {
            Self::TooLarge { at, .. }
            | Self::NotUtf8 { at, .. }
            | Self::Empty { at, .. }
            | Self::NotYaml { at, .. }
            | Self::TooDeep { at, .. }
            | Self::TooMany { at, .. }
            | Self::SecondDocument { at, .. }
            | Self::Tag { at, .. }
            | Self::MergeKey { at, .. }
            | Self::KeyNotText { at, .. }
            | Self::DuplicateKey { at, .. }
            | Self::NotFinite { at, .. }
            | Self::Ambiguous { at, .. }
            | Self::NoFormat { at, .. }
            | Self::WrongFormat { at, .. }
            | Self::NewerFormat { at, .. }
            | Self::NoPart { at, .. }
            | Self::IncludeCircle { at, .. }
            | Self::GivenTwice { at, .. }
            | Self::NoSuchPath { at, .. }
            | Self::UnknownKey { at, .. }
            | Self::CommaEndedText { at, .. }
            | Self::MissingKey { at, .. }
            | Self::NoneOf { at, .. }
            | Self::BothOf { at, .. }
            | Self::WrongShape { at, .. }
            | Self::UnknownKind { at, .. }
            | Self::UnknownWord { at, .. }
            | Self::NotInThisVersion { at, .. }
            | Self::Unit { at, .. }
            | Self::NotANumber { at, .. }
            | Self::NotWhole { at, .. }
            | Self::OutOfBounds { at, .. }
            | Self::FractionAboveOne { at, .. }
            | Self::NotAFlag { at, .. }
            | Self::BadName { at, .. }
            | Self::ReservedName { at, .. }
            | Self::NameTaken { at, .. }
            | Self::UnknownName { at, .. }
            | Self::LikeCircle { at, .. }
            | Self::SumNotOne { at, .. }
            | Self::TwoRests { at, .. }
            | Self::NoRest { at, .. }
            | Self::MassNotBalanced { at, .. }
            | Self::ElementNotBalanced { at, .. }
            | Self::BadFormula { at, .. }
            | Self::MissingProperty { at, .. }
            | Self::PropertyTwice { at, .. }
            | Self::TooFewPoints { at, .. }
            | Self::PointTwice { at, .. }
            | Self::EmptyRange { at, .. }
            | Self::LengthsDiffer { at, .. }
            | Self::NoSection { at, .. }
            | Self::Needs { at, .. }
            | Self::DoesNotGoWith { at, .. }
            | Self::OutsideLength { at, .. }
            | Self::HeatsDiffer { at, .. } => at,
        }
    }
}
