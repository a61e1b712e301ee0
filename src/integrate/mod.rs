//! From a system to a trajectory: the only folder that knows diffsol (`docs/design/integrator.md`).

mod block_thomas;
pub mod chain;
mod equations;
pub mod error;
pub mod march;
mod matrix;
pub mod stop;
mod tolerance;
pub mod work;
