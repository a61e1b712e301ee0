//! What must neither appear nor vanish: mass, elements, monomer units, energy; and what sections hand on.

mod closures;
mod sections;
mod viscous_heat;
