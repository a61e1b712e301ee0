//! What axirad computes, against what does not come from it: one binary, so that it is compiled once.
//!
//! | module | question |
//! | --- | --- |
//! | `cases` | does it meet the converged values of the cases A, B, C and F? |
//! | `order` | does the error fall as claimed, with the grid and with the tolerance? |
//! | `exact` | does it agree with closed solutions, and do limits coincide that must? |
//! | `published` | does it give the figures of the literature? |
//! | `conservation` | do mass, elements, monomer units and energy balance? |
//! | `robustness` | does every run end at its outlet or at a stated limit? |

mod cases;
mod conservation;
mod exact;
mod order;
mod published;
mod robustness;
mod support;
