//! axirad: laminar tubular reactors whose fluid changes as it reacts and heats up.

#![deny(unsafe_code)]

#[cfg(feature = "cli")]
pub mod cli;
pub mod discretise;
#[cfg(feature = "cli")]
pub mod export;
pub mod integrate;
pub mod judge;
pub mod model;
#[cfg(feature = "cli")]
pub mod report;
pub mod results;
pub mod simulate;
pub mod spec;
pub mod units;
