//! Closed solutions, and limits that must coincide.

mod explosion;
mod limits;
mod modes;
mod viscosity_fields;
mod viscous_heating;
