//! A wall that no heat passes.

use crate::model::property::KIND;
use crate::spec::{About, Block, Reported};

pub const ABOUT: About =
    About { kind: "insulated", summary: "no heat passes the wall", equation: "q_w = 0", source: "", keys: &[KIND] };

/// Reads the wall.
///
/// # Errors
/// A key that the kind does not have.
pub fn read(block: &Block<'_>) -> Result<(), Reported> {
    block.open(&ABOUT).finish(())
}
