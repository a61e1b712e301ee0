//! The mixing cup: the state that a section's flow takes when it is mixed (model page, §1 and §7).

use super::layout::Layout;
use crate::model::local::{ENTHALPY_REFERENCE, Material};

/// Newton steps for the temperature of the cup; it converges in two or three.
const MOST_STEPS: usize = 50;
/// Relative change at which the temperature of the cup is found: rounding.
const CONVERGED: f64 = 1e-15;

/// The mixing cup at one z.
#[derive(Clone, Debug, PartialEq)]
pub struct CupState {
    /// n, μ, T, in mol/kg, K.
    pub state: Vec<f64>,
    /// w of each component, the polymer last.
    pub fractions: Vec<f64>,
}

impl CupState {
    /// T, in K.
    #[must_use]
    pub fn temperature(&self) -> f64 {
        self.state[self.state.len() - 1]
    }

    /// ρ, in kg/m³.
    #[must_use]
    pub fn density(&self, material: &Material) -> f64 {
        material.mixture.density(&self.fractions, self.temperature())
    }

    /// η at zero shear, in Pa·s.
    #[must_use]
    pub fn viscosity(&self, material: &Material) -> f64 {
        material.mixture.viscosity(&material.fluid(&self.state, &self.fractions))
    }
}

/// The mixing cup of a state.
///
/// n̄ = Σ ṁᵢ nᵢ/ṁ,  Σ ṁᵢ h(Tᵢ, nᵢ) = ṁ h(T̄, n̄)
///
/// | symbol | here | unit | shape |
/// | --- | --- | --- | --- |
/// | ṁ | `flows` | kg/s | per stream tube |
/// | n, T | `state` | mol/kg, K | `layout` |
/// | n̄, T̄ | returned | mol/kg, K | whole section |
#[must_use]
pub fn cup_state(material: &Material, layout: &Layout, flows: &[f64], state: &[f64]) -> CupState {
    let total: f64 = flows.iter().sum();
    let mut cup = vec![0.0; layout.n_vars()];
    for (i, flow) in flows.iter().enumerate() {
        for (mean, value) in cup.iter_mut().zip(&state[layout.tube(i)]) {
            *mean += flow / total * value;
        }
    }
    let mut fractions = vec![0.0; material.n_components()];
    if !material.mixture.has_constant_heat_capacity() {
        let h = enthalpy_flow(material, layout, flows, state, ENTHALPY_REFERENCE) / total;
        material.fractions(&cup, &mut fractions);
        cup[layout.n_amounts] = temperature_at(material, &fractions, h, cup[layout.n_amounts]);
    }
    material.fractions(&cup, &mut fractions);
    CupState { state: cup, fractions }
}

/// Σ ṁᵢ h(Tᵢ, nᵢ), counted from a reference, in W.
#[must_use]
pub fn enthalpy_flow(material: &Material, layout: &Layout, flows: &[f64], state: &[f64], reference: f64) -> f64 {
    let mut fractions = vec![0.0; material.n_components()];
    let mut of_tube = |i: usize| {
        let tube = &state[layout.tube(i)];
        material.fractions(tube, &mut fractions);
        material.mixture.enthalpy(&fractions, reference, tube[layout.n_amounts])
    };
    flows.iter().enumerate().map(|(i, flow)| flow * of_tube(i)).sum()
}

/// The temperature at which a composition has an enthalpy, by Newton, in K.
fn temperature_at(material: &Material, fractions: &[f64], enthalpy: f64, first: f64) -> f64 {
    let mut temperature = first;
    for _ in 0..MOST_STEPS {
        let excess = material.mixture.enthalpy(fractions, ENTHALPY_REFERENCE, temperature) - enthalpy;
        let step = excess / material.mixture.heat_capacity(fractions, temperature);
        temperature -= step;
        if step.abs() <= CONVERGED * temperature.abs() {
            break;
        }
    }
    temperature
}
