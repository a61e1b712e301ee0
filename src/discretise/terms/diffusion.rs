//! Diffusion between stream tubes, closed on mass, and the enthalpy it carries (model page, §2).

use super::Gains;
use crate::discretise::layout::Layout;
use crate::discretise::profile::Profile;
use crate::model::local::Material;

/// Adds the amounts that diffuse through every face between two stream tubes, and the enthalpy they carry.
///
/// S = −ρ Σ_k (D_k − D_p) M_k ∂n_k/∂r,  J_k = −ρ D_k ∂n_k/∂r − n_k S,
/// −½ Σ_{its faces} P j_h ΔT with j_h = Σ_k M_k c_p,k J_k, polymer included, J_p = −Σ M_k J_k
///
/// | symbol | here | unit | shape |
/// | --- | --- | --- | --- |
/// | n | `state` | mol/kg | per unknown, all tubes |
/// | ρ D | `profile` | kg/(m s) | per component and tube |
/// | amounts, heat | `gains` | mol/(s m), W/m | per tube |
///
/// On a face ρD and n are arithmetic means. One diffusivity for all gives S = 0, equal heat capacities give
/// j_h ΔT = 0: both are then skipped.
pub fn add(material: &Material, layout: &Layout, state: &[f64], profile: &mut Profile, gains: &mut Gains) {
    if !material.mixture.diffuses() {
        return;
    }
    for i in 0..layout.n_tubes - 1 {
        let gradient = profile.geometry.face_gradient(i);
        if material.mixture.has_one_diffusivity() {
            common(layout, state, profile, gradient, i);
        } else {
            closed_on_mass(material, layout, state, profile, gradient, i);
        }
        for (k, flux) in profile.fluxes.iter().enumerate() {
            gains.amounts[i * layout.n_amounts + k] -= flux;
            gains.amounts[(i + 1) * layout.n_amounts + k] += flux;
        }
        if !material.mixture.has_one_heat_capacity() {
            let carried = enthalpy_flow(material, layout, profile, i);
            let half = 0.5 * carried * (profile.temperatures[i + 1] - profile.temperatures[i]);
            gains.heat[i] -= half;
            gains.heat[i + 1] -= half;
        }
    }
}

/// P J of every amount with one diffusivity for all.
fn common(layout: &Layout, state: &[f64], profile: &mut Profile, gradient: f64, i: usize) {
    let conductance = gradient * 0.5 * (profile.transport[i] + profile.transport[i + 1]);
    let (inner, outer) = (&state[layout.tube(i)], &state[layout.tube(i + 1)]);
    for (k, flux) in profile.fluxes.iter_mut().enumerate() {
        *flux = -conductance * (outer[k] - inner[k]);
    }
}

/// P J of every amount with unlike diffusivities.
fn closed_on_mass(material: &Material, layout: &Layout, state: &[f64], profile: &mut Profile, gradient: f64, i: usize) {
    let n = material.n_components();
    let (inner, outer) = (&state[layout.tube(i)], &state[layout.tube(i + 1)]);
    let mobility = |k: usize| 0.5 * (profile.transport[i * n + k] + profile.transport[(i + 1) * n + k]);
    let of_closing = mobility(n - 1); // the polymer; without one any component gives the same S
    let s: f64 = (0..layout.n_species)
        .map(|k| -(mobility(k) - of_closing) * material.molar_masses[k] * (outer[k] - inner[k]))
        .sum();
    for k in 0..layout.n_amounts {
        let mobility = if k < layout.n_species { mobility(k) } else { mobility(n - 1) };
        let mean = 0.5 * (inner[k] + outer[k]);
        profile.fluxes[k] = -gradient * (mobility * (outer[k] - inner[k]) + mean * s);
    }
}

/// P j_h on the face between tubes `i` and `i + 1`, in W/(m K).
fn enthalpy_flow(material: &Material, layout: &Layout, profile: &Profile, i: usize) -> f64 {
    let middle = 0.5 * (profile.temperatures[i] + profile.temperatures[i + 1]);
    let heat_capacity = |component| material.mixture.component_heat_capacity(component, middle);
    let (mut mass, mut carried) = (0.0, 0.0);
    for k in 0..layout.n_species {
        let flux = material.molar_masses[k] * profile.fluxes[k];
        mass += flux;
        carried += flux * heat_capacity(k);
    }
    if material.has_polymer() {
        carried -= mass * heat_capacity(layout.n_species);
    }
    carried
}
