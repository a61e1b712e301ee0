//! Closed solutions, and limits that must coincide.

mod diffusion;
mod explosion;
mod figures;
mod laws;
mod limits;
mod modes;
mod viscosity_fields;
mod viscous_heating;
