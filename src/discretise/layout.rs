//! Where each unknown stands in the state vector: the only owner of its offsets.
//!
//! Stream tube by stream tube: the amounts of the species, the moments, the temperature. After the last tube
//! follow the integrals along z, which feed nothing back.

use std::ops::Range;

use crate::model::local::Material;

/// An integral along z that is carried with the state.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Integral {
    /// ∫ G dz, pressure lost to friction, in Pa.
    Friction,
    /// ∫ ρ̄ g sin θ dz, pressure lost to height, in Pa.
    Gravity,
    /// ∫ P_w q_w dz, heat out of the fluid through the wall, in W.
    WallHeat,
    /// ∫ Σ A (−ΔH rate) dz, heat set free by reactions, in W.
    ReactionHeat,
    /// ∫ Σ A Φ dz, heat of shear and pressure work, in W.
    ViscousHeat,
    /// ∫ Σ A Σ_k R_k M_k (h_k(T) − h_k(T_feed)) dz: what a constant ΔH leaves open where heat capacities
    /// are unlike, in W.
    HeatCapacityGap,
}

/// All integrals, in their order in the state.
pub const INTEGRALS: [Integral; 6] = [
    Integral::Friction,
    Integral::Gravity,
    Integral::WallHeat,
    Integral::ReactionHeat,
    Integral::ViscousHeat,
    Integral::HeatCapacityGap,
];

/// Sizes and offsets of the state vector.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Layout {
    /// N.
    pub n_tubes: usize,
    /// Species.
    pub n_species: usize,
    /// Species and moments.
    pub n_amounts: usize,
}

impl Layout {
    /// The layout of a material on N stream tubes.
    #[must_use]
    pub fn new(material: &Material, n_tubes: usize) -> Self {
        Self { n_tubes, n_species: material.n_species(), n_amounts: material.n_amounts() }
    }

    /// Unknowns of a stream tube.
    #[must_use]
    pub fn n_vars(&self) -> usize {
        self.n_amounts + 1
    }

    /// All unknowns.
    #[must_use]
    pub fn n_states(&self) -> usize {
        self.n_tubes * self.n_vars() + INTEGRALS.len()
    }

    /// The unknowns of tube `i`.
    #[must_use]
    pub fn tube(&self, i: usize) -> Range<usize> {
        i * self.n_vars()..(i + 1) * self.n_vars()
    }

    /// The temperature of tube `i`.
    #[must_use]
    pub fn temperature(&self, i: usize) -> usize {
        i * self.n_vars() + self.n_amounts
    }

    /// An amount of tube `i`.
    #[must_use]
    pub fn amount(&self, i: usize, k: usize) -> usize {
        i * self.n_vars() + k
    }

    /// An integral along z.
    #[must_use]
    pub fn integral(&self, which: Integral) -> usize {
        let position = INTEGRALS.iter().position(|integral| *integral == which);
        self.n_tubes * self.n_vars() + position.expect("the list holds every integral")
    }

    /// The state of a uniform inlet: every tube alike, integrals 0.
    #[must_use]
    pub fn uniform(&self, tube: &[f64]) -> Vec<f64> {
        let mut state = Vec::with_capacity(self.n_states());
        for _ in 0..self.n_tubes {
            state.extend_from_slice(tube);
        }
        state.extend([0.0; INTEGRALS.len()]);
        state
    }
}
