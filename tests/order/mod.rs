//! Does the error fall as claimed: with the square of the tubes' width, and with the integrator's tolerance?

mod checks;
mod grid;
mod tolerance;
