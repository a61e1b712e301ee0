//! axirad: laminar tubular reactors whose fluid changes as it reacts and heats up.

pub mod units;
pub mod spec;
pub mod model;
pub mod discretise;
pub mod integrate;
pub mod simulate;
