//! From a trajectory to named figures and tables (model page, §7; spec page, §8).

pub mod axial;
mod balance;
pub mod catalogue;
pub mod figure;
mod hot_spot;
mod run_quantities;
mod spread;
mod state_quantities;
pub mod view;

pub use self::figure::{Figure, Value};
pub use self::hot_spot::{HotSpot, Site};
