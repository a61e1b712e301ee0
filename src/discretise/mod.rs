//! From the plant to a system of ordinary differential equations in z: stream tubes, terms, Jacobian.
//!
//! [`rhs`] holds the two balances; each of their terms is a file of [`terms`]; velocity and areas are in
//! [`flow`] (model page, §2 and §3).

pub mod blocks;
pub mod cup;
pub mod flow;
pub mod grid;
mod jacobian;
pub mod layout;
pub mod point_values;
pub mod profile;
pub mod rhs;
pub mod spline;
pub mod terms;
pub mod tubes;
