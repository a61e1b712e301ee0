//! Heat of shear and pressure work: AᵢΦᵢ (model page, §2).

use super::Gains;
use crate::discretise::flow::parabolic::square_rate;
use crate::discretise::profile::Profile;
use crate::model::duct::tube::Tube;
use crate::model::flow::Profile as Shape;

/// Heat of shear in tube `i`, without pressure work, in W/m.
///
/// `from_viscosity`: Aᵢ ⟨τ²⟩ᵢ/ηᵢ with ⟨τ²⟩ᵢ = G² ⟨r²⟩ᵢ/4; `parabolic`: Aᵢ ηᵢ ⟨γ̇²⟩ᵢ; `plug`: G ṁᵢ/ρᵢ
#[must_use]
pub fn friction_heat(shape: Shape, tube: &Tube, profile: &Profile, i: usize) -> f64 {
    let geometry = &profile.geometry;
    let gradient = geometry.friction_gradient;
    let viscosity = profile.points[i].viscosity;
    match shape {
        Shape::Plug => gradient * profile.volume_flows[i],
        Shape::Parabolic => {
            let mean_velocity = profile.volume_flow() / tube.area();
            geometry.areas[i] * viscosity * square_rate(tube, mean_velocity, geometry.mean_square(i))
        }
        Shape::FromViscosity => geometry.areas[i] * gradient * gradient * geometry.mean_square(i) / (4.0 * viscosity),
    }
}

/// Adds the heat of shear and the work of the falling pressure.
///
/// AᵢΦᵢ = (heat of shear) − αᵢTᵢ (ṁᵢ/ρᵢ)(−dp/dz)
///
/// | symbol | here | unit | shape |
/// | --- | --- | --- | --- |
/// | α, T, ṁ/ρ | `profile` | 1/K, K, m³/s | per tube |
/// | −dp/dz | `pressure_gradient` | Pa/m | whole section |
/// | AᵢΦᵢ | `profile.viscous_heat`, `gains` | W/m | per tube |
///
/// Source: energy equation ρ c_p DT/Dt = ∇·λ∇T + τγ̇ + αT Dp/Dt, Bird, Stewart and Lightfoot, Transport
/// Phenomena, 2nd ed., §11.2 (from memory).
pub fn add(shape: Shape, tube: &Tube, pressure_gradient: f64, profile: &mut Profile, gains: &mut Gains) {
    for i in 0..profile.n_tubes() {
        let work = profile.expansions[i] * profile.temperatures[i] * profile.volume_flows[i] * pressure_gradient;
        let heat = friction_heat(shape, tube, profile, i) - work;
        profile.viscous_heat[i] = heat;
        gains.heat[i] += heat;
    }
}
