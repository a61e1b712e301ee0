//! Flat velocity profile (model page, §3, `plug`).

use std::f64::consts::PI;

use super::Geometry;
use crate::model::duct::tube::Tube;

/// Areas and velocity of a flat profile.
///
/// v = Σ(ṁᵢ/ρᵢ)/A,  Aᵢ = ṁᵢ/(ρᵢ v),  G = 8 η ū/R² with η of the mixing cup
///
/// | symbol | here | unit | shape |
/// | --- | --- | --- | --- |
/// | ṁᵢ/ρᵢ | `volume_flows` | m³/s | per stream tube |
/// | η | `viscosity_cup` | Pa·s | whole section |
/// | r², A, v, G | `geometry` | m², m², m/s, Pa/m | faces, tubes, faces, whole section |
pub fn solve(tube: &Tube, volume_flows: &[f64], viscosity_cup: f64, geometry: &mut Geometry) {
    let total: f64 = volume_flows.iter().sum();
    let area = tube.area();
    let velocity = total / area;
    let mut passed = 0.0;
    for (i, flow) in volume_flows.iter().enumerate() {
        passed += flow;
        geometry.areas[i] = flow / velocity;
        geometry.squares[i + 1] = passed / velocity / PI;
    }
    geometry.squares[volume_flows.len()] = tube.radius * tube.radius;
    geometry.velocities.fill(velocity);
    geometry.friction_gradient = tube.newtonian_gradient(viscosity_cup, velocity);
}
