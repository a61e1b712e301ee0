//! The cases A, B, C and F against their converged values.
//!
//! The values are our own: each was found with two discretisations that share nothing but the constants
//! (Chebyshev collocation in (r/R)², and stream tubes on up to 320 tubes with Richardson's extrapolation), which
//! agree to the digits given. Beside each stands the error that stream tubes have at N = 40 and N = 80 with the
//! rule for gradients of the model page, §2.
//!
//! Tolerances, and why: the discretisation is the same, so its error has to be the same; 1.2 × leaves room for a
//! grid's details. Local values come from an interpolation that may differ: 3 ×. 1e-6 of the value (1e-4 K for a
//! temperature) covers rounding in the table and the integrator at a relative tolerance of 1e-8. Extrapolated
//! from N = 80 and 160, what remains is fourth order: twice what such a grid reached when the values were made.

mod case_a;
mod case_b;
mod case_c;
mod case_f;
mod table;
