//! axirad: laminar tubular reactors whose fluid changes as it reacts and heats up.

pub mod discretise;
pub mod integrate;
pub mod judge;
pub mod model;
pub mod results;
pub mod simulate;
pub mod spec;
pub mod units;
