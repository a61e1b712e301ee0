//! The velocity that the momentum balance gives with the local viscosity (model page, §3, `from_viscosity`).

use std::f64::consts::PI;

use super::Geometry;
use crate::model::duct::tube::Tube;

/// Areas, velocity and friction in one pass from the wall to the axis.
///
/// With y = r², qᵢ = ṁᵢ/(πρᵢ), ηᵢ constant within a stream tube and u = v/√G:
/// u_{f−1}² = u_f² + qᵢ/(2ηᵢ), u = 0 at the wall,
/// √G = Σ 2qᵢ/(u_f + u_{f−1}) / R²,  Δyᵢ = 2qᵢ/((u_f + u_{f−1}) √G)
///
/// | symbol | here | unit | shape |
/// | --- | --- | --- | --- |
/// | ṁᵢ/ρᵢ | `volume_flows` | m³/s | per stream tube |
/// | ηᵢ | `viscosities` | Pa·s | per stream tube |
/// | r², A, v, G | `geometry` | m², m², m/s, Pa/m | faces, tubes, faces, whole section |
///
/// Constant viscosity gives Poiseuille's profile and Hagen–Poiseuille's gradient on any grid, to rounding.
/// The derivation is in `docs/design/flow.md`.
pub fn solve(tube: &Tube, volume_flows: &[f64], viscosities: &[f64], geometry: &mut Geometry) {
    let n = volume_flows.len();
    let (mut u_square, mut u, mut sum) = (0.0, 0.0, 0.0);
    geometry.velocities[n] = 0.0;
    for i in (0..n).rev() {
        let q = volume_flows[i] / PI;
        u_square += q / (2.0 * viscosities[i]);
        let inner = f64::sqrt(u_square);
        let width = 2.0 * q / (u + inner);
        geometry.areas[i] = width;
        sum += width;
        geometry.velocities[i] = inner;
        u = inner;
    }
    let root_g = sum / (tube.radius * tube.radius);
    let mut y = 0.0;
    for i in 0..n {
        let width = geometry.areas[i] / root_g;
        y += width;
        geometry.areas[i] = PI * width;
        geometry.squares[i + 1] = y;
        geometry.velocities[i] *= root_g;
    }
    geometry.squares[n] = tube.radius * tube.radius;
    geometry.friction_gradient = root_g * root_g;
}

#[cfg(test)]
mod tests {
    use super::*;
    use approx::assert_relative_eq;

    #[test]
    fn thick_film_around_a_thin_core_flows_as_the_two_closed_forms() {
        // Core radius 0.5 R, film ten times as viscous, interface on a face: exact integrals of the momentum
        // balance (own derivation): core 1.0 and film 0.5625 in units of πR⁴G/(8 η_film), v_max/v̄ = 4.16.
        let tube = Tube { radius: 0.01 };
        let unit = PI * tube.radius.powi(4) / 8.0; // G = 1 Pa/m, η_film = 1 Pa·s
        let flows = [1.0 * unit, 0.5625 * unit];
        let mut geometry = Geometry::new(2);
        solve(&tube, &flows, &[0.1, 1.0], &mut geometry);
        assert_relative_eq!(geometry.friction_gradient, 1.0, max_relative = 1e-12);
        assert_relative_eq!(geometry.squares[1], 0.25 * tube.radius.powi(2), max_relative = 1e-12);
        let mean = flows.iter().sum::<f64>() / tube.area();
        assert_relative_eq!(geometry.velocities[0] / mean, 4.16, max_relative = 1e-12);
        assert_relative_eq!(geometry.velocities[1] / mean, 0.96, max_relative = 1e-12);
    }

    #[test]
    fn constant_viscosity_gives_hagen_poiseuille_on_any_grid() {
        let tube = Tube { radius: 5e-3 };
        let total = 1.227_184_630_31e-5; // Hagen–Poiseuille with η = 2 Pa·s, G = 1e5 Pa/m
        for shares in [vec![1.0], vec![0.1, 0.6, 0.3], vec![0.01; 100]] {
            let flows: Vec<f64> = shares.iter().map(|share| share * total).collect();
            let mut geometry = Geometry::new(flows.len());
            solve(&tube, &flows, &vec![2.0; flows.len()], &mut geometry);
            assert_relative_eq!(geometry.friction_gradient, 1e5, max_relative = 1e-10);
        }
    }
}
