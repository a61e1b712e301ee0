//! The terms of the two balances, one a file, in the order of the model page, §2.
//!
//! Each adds what it brings to tube `i` per metre of length: amounts to `amounts`, in mol/(s m), heat to `heat`
//! in W/m; `rhs.rs` divides by ṁᵢ and ṁᵢ c_p,i.

pub mod conduction;
pub mod diffusion;
pub mod reaction;
pub mod viscous_heating;
pub mod wall_heat;

/// What the terms bring to all stream tubes, per metre of length.
#[derive(Clone, Debug, Default)]
pub struct Gains {
    /// Amounts, tube by tube, in mol/(s m).
    pub amounts: Vec<f64>,
    /// Heat, per tube, in W/m.
    pub heat: Vec<f64>,
}
