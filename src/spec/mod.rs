//! The spec as typed: located values, parts and edits, and the unit-aware reader that blocks and laws use.
//!
//! Data moves down this list: [`document`] makes a tree from a text, [`mod@include`] joins parts, [`edit`] sets
//! values by path, [`like`] copies what is alike, [`fields`] and [`block`] read keys by the table of
//! [`about`]. No law is known here.

pub mod about;
mod alternatives;
pub mod block;
mod build;
pub mod document;
pub mod edit;
pub mod error;
mod events;
pub mod fields;
mod help;
pub mod include;
mod later;
pub mod like;
pub mod node;
mod not_yaml;
mod paths;
pub mod place;
pub mod reader;
mod second_reader;
pub mod suggest;

pub use about::{About, Bound, Key, Need, Takes};
pub use block::{Block, unknown_name};
pub use error::SpecError;
pub use fields::Fields;
pub use node::{Node, Origin, Value};
pub use place::{KeyPath, Location, Place, SourceText};
pub use reader::{Gathered, Provenance, ReadWarning, Reader, Reported, ResolvedLine};
