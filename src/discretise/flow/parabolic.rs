//! Poiseuille's velocity profile at every z (model page, §3, `parabolic`).

use std::f64::consts::PI;

use super::Geometry;
use crate::model::duct::tube::Tube;

/// Areas, velocity and friction of a parabola whose scale follows from the volume flow.
///
/// v = 2ū (1 − r²/R²); r² of the faces from the cumulative volume flow;
/// G = Σ Aᵢ ηᵢ ⟨γ̇²⟩ᵢ / Σ(ṁᵢ/ρᵢ), ⟨γ̇²⟩ᵢ = 16 ū² ⟨r²⟩ᵢ/R⁴ (balance of mechanical energy)
///
/// | symbol | here | unit | shape |
/// | --- | --- | --- | --- |
/// | ṁᵢ/ρᵢ | `volume_flows` | m³/s | per stream tube |
/// | ηᵢ | `viscosities` | Pa·s | per stream tube |
/// | r², A, v, G | `geometry` | m², m², m/s, Pa/m | faces, tubes, faces, whole section |
pub fn solve(tube: &Tube, volume_flows: &[f64], viscosities: &[f64], geometry: &mut Geometry) {
    let n = volume_flows.len();
    let total: f64 = volume_flows.iter().sum();
    let square = tube.radius * tube.radius;
    let mean_velocity = total / tube.area();
    let mut passed = 0.0;
    geometry.velocities[0] = 2.0 * mean_velocity;
    for (i, flow) in volume_flows.iter().enumerate() {
        passed += flow;
        let y = if i + 1 == n { square } else { tube.parabolic_square(passed / total) };
        geometry.squares[i + 1] = y;
        geometry.areas[i] = PI * (y - geometry.squares[i]);
        geometry.velocities[i + 1] = 2.0 * mean_velocity * (1.0 - y / square);
    }
    let dissipated: f64 = (0..n)
        .map(|i| geometry.areas[i] * viscosities[i] * square_rate(tube, mean_velocity, geometry.mean_square(i)))
        .sum();
    geometry.friction_gradient = dissipated / total;
}

/// ⟨γ̇²⟩ of a parabola over a stream tube, 16 ū² ⟨r²⟩/R⁴, in 1/s².
#[must_use]
pub fn square_rate(tube: &Tube, mean_velocity: f64, mean_square: f64) -> f64 {
    let square = tube.radius * tube.radius;
    16.0 * mean_velocity * mean_velocity * mean_square / (square * square)
}
