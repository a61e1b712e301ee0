//! What a run says of itself: a page for a reader, a document for a program.
//!
//! Everything here returns text; `cli/` decides where it goes. Units an engineer reads come from
//! [`crate::units`], figures from the catalogue of [`crate::results`]; nothing is computed anew.

mod brief;
mod figures;
mod heat;
pub mod json;
mod key_figures;
pub mod outline;
mod page;
mod sources;
pub mod text;
mod verdict;

pub use self::brief::brief;
