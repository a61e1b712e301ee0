//! Conduction between stream tubes: Δ_f(P λ ∂T/∂r) (model page, §2).

use super::Gains;
use crate::discretise::profile::Profile;

/// λ on a face: the harmonic mean 2λᵢλᵢ₊₁/(λᵢ + λᵢ₊₁), resistances in series, in W/(m K).
#[must_use]
pub fn face_conductivity(inner: f64, outer: f64) -> f64 {
    2.0 * inner * outer / (inner + outer)
}

/// Adds the heat conducted through every face between two stream tubes.
///
/// P λ ∂T/∂r ≈ P λ_f s′(r_f) (Tᵢ₊₁ − Tᵢ)/(⟨s⟩ᵢ₊₁ − ⟨s⟩ᵢ), s = r²
///
/// | symbol | here | unit | shape |
/// | --- | --- | --- | --- |
/// | λ, T | `profile` | W/(m K), K | per stream tube |
/// | heat | `gains` | W/m | per stream tube |
pub fn add(profile: &Profile, gains: &mut Gains) {
    for i in 0..profile.n_tubes() - 1 {
        let conductivity = face_conductivity(profile.points[i].conductivity, profile.points[i + 1].conductivity);
        let difference = profile.temperatures[i + 1] - profile.temperatures[i];
        let flow = profile.geometry.face_gradient(i) * conductivity * difference;
        gains.heat[i] += flow;
        gains.heat[i + 1] -= flow;
    }
}
