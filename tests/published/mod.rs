//! Figures of the literature, and values computed anew from its equations; the source stands beside each.
//!
//! Where a formula or a problem is cited, its values were computed independently of this program, at high precision
//! (30 digits, or two methods that agree to more digits than are used). Citations are from memory.

mod exothermic;
mod flow;
mod graetz;
mod laminar_reactor;
mod page;
mod plug_flow;
mod polymers;
mod rate_constants;
mod styrene;

/// Relative tolerance of an integration along z without an error across: the integrator stands at 1e-8 or below.
const ALONG: f64 = 1e-6;
/// Relative tolerance of algebra, which is exact on any grid.
const ALGEBRA: f64 = 1e-10;

/// Relative tolerances of a scheme of second order on 40 and on 80 tubes: a plain uniform grid is off by up to
/// 9e-4 and a quarter of it in a heat-transfer coefficient.
const SECOND_ORDER: [(usize, f64); 2] = [(40, 1e-3), (80, 2.5e-4)];
/// The same beside an inlet's jump, a kink, or for a maximum or a gradient in a thin layer.
const SECOND_ORDER_THIN: [(usize, f64); 2] = [(40, 5e-3), (80, 1.5e-3)];
