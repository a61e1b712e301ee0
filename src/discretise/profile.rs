//! All stream tubes at one z: properties, cross-section, sources, wall.

use super::flow::Geometry;
use super::layout::Layout;
use super::terms::wall_heat::WallState;
use crate::model::local::{Material, Point};

/// What is known of the cross-section at one z.
#[derive(Clone, Debug)]
pub struct Profile {
    /// Properties, per stream tube.
    pub points: Vec<Point<f64>>,
    /// T, per stream tube, in K.
    pub temperatures: Vec<f64>,
    /// R, per amount and tube, tube by tube, in mol/(m³ s).
    pub sources: Vec<f64>,
    /// ṁᵢ/ρᵢ, in m³/s.
    pub volume_flows: Vec<f64>,
    /// Faces, areas, velocities, friction.
    pub geometry: Geometry,
    /// ρD: per tube where all share one diffusivity, else per component and tube, in kg/(m s).
    pub transport: Vec<f64>,
    /// P J of each amount on the face at hand, in mol/(s m).
    pub fluxes: Vec<f64>,
    /// ηᵢ, per stream tube, in Pa·s.
    pub viscosities: Vec<f64>,
    /// αᵢ, per stream tube; 0 without viscous heating, in 1/K.
    pub expansions: Vec<f64>,
    /// AᵢΦᵢ, per stream tube; 0 without viscous heating, in W/m.
    pub viscous_heat: Vec<f64>,
    /// ρ̄ g sin θ, in Pa/m.
    pub gravity_gradient: f64,
    /// The wall.
    pub wall: WallState,
}

impl Profile {
    /// Room for a material on N stream tubes.
    #[must_use]
    pub fn new(material: &Material, layout: &Layout) -> Self {
        let n = layout.n_tubes;
        let nothing = Point { density: 0.0, heat_capacity: 0.0, conductivity: 0.0, viscosity: 0.0, reaction_heat: 0.0 };
        let mobilities = if material.mixture.has_one_diffusivity() { 1 } else { material.n_components() };
        Self {
            points: vec![nothing; n],
            temperatures: vec![0.0; n],
            sources: vec![0.0; n * layout.n_amounts],
            volume_flows: vec![0.0; n],
            geometry: Geometry::new(n),
            transport: vec![0.0; n * mobilities],
            fluxes: vec![0.0; layout.n_amounts],
            viscosities: vec![0.0; n],
            expansions: vec![0.0; n],
            viscous_heat: vec![0.0; n],
            gravity_gradient: 0.0,
            wall: WallState::default(),
        }
    }

    /// N.
    #[must_use]
    pub fn n_tubes(&self) -> usize {
        self.points.len()
    }

    /// Σ ṁᵢ/ρᵢ, in m³/s.
    #[must_use]
    pub fn volume_flow(&self) -> f64 {
        self.volume_flows.iter().sum()
    }

    /// ū, in m/s.
    #[must_use]
    pub fn mean_velocity(&self) -> f64 {
        self.volume_flow() / self.geometry.area()
    }

    /// Largest velocity over the mean; between faces too it is largest on one of them.
    #[must_use]
    pub fn velocity_ratio(&self) -> f64 {
        self.geometry.velocities.iter().copied().fold(0.0, f64::max) / self.mean_velocity()
    }

    /// ρ̄, mean over the cross-section, in kg/m³.
    #[must_use]
    pub fn mean_density(&self) -> f64 {
        let held: f64 = self.points.iter().zip(&self.geometry.areas).map(|(point, area)| point.density * area).sum();
        held / self.geometry.area()
    }
}
