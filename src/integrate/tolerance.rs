//! Absolute tolerances: a hundredth of the relative one times the most of each unknown that could be there
//! (`docs/design/integrator.md`).

use crate::discretise::layout::{INTEGRALS, Integral};
use crate::discretise::rhs::System;
use crate::model::kinetics::Scheme;
use crate::model::local::Material;

/// Scale of temperatures, in K.
const TEMPERATURE_SCALE: f64 = 100.0;
/// An amount counts at least as this share of the largest.
const LEAST_SHARE: f64 = 1e-3;
/// Share of the relative tolerance.
const SHARE: f64 = 1e-2;
/// μ₀ and μ₂ against μ₁: chains of a thousand units.
const CHAIN_LENGTH: f64 = 1e3;

/// Absolute tolerances of a section's state.
#[must_use]
pub fn absolute_tolerances(system: &System<'_>, inlet: &[f64]) -> Vec<f64> {
    let relative = system.plant.numerics.relative_tolerance;
    let mut tolerances: Vec<f64> = Vec::with_capacity(inlet.len());
    let scales = tube_scales(system);
    for _ in 0..system.layout.n_tubes {
        tolerances.extend(scales.iter().map(|scale| relative * SHARE * scale));
    }
    let mut slopes = vec![0.0; inlet.len()];
    system.slopes(inlet, &mut slopes);
    let length = system.section.length;
    let heat = system.plant.feed.mass_flow * heat_capacity(system) * TEMPERATURE_SCALE;
    for which in INTEGRALS {
        // An integral begins at 0, so its absolute tolerance alone rules the first steps: the full share.
        let scale = match which {
            Integral::Friction | Integral::Gravity => {
                (slopes[system.layout.integral(which)] * length).abs().max(f64::MIN_POSITIVE)
            }
            Integral::WallHeat | Integral::ReactionHeat | Integral::ViscousHeat | Integral::HeatCapacityGap => heat,
        };
        let scale = if scale < 1e-9 { 1.0 } else { scale };
        tolerances.push(relative * scale);
    }
    tolerances
}

/// The most of each unknown of a stream tube that could be there.
fn tube_scales(system: &System<'_>) -> Vec<f64> {
    let material = system.material();
    let fed = &system.plant.feed.state;
    let n = material.n_species();
    let largest = fed[..n].iter().copied().fold(0.0, f64::max);
    let mut scales: Vec<f64> = (0..n)
        .map(|k| {
            let most = if fed[k] > 0.0 { fed[k] } else { largest.min(material.molar_masses[k].recip()) };
            most.max(LEAST_SHARE * largest)
        })
        .collect();
    if material.has_polymer() {
        let units = monomer_units(material, fed);
        scales.extend([units / CHAIN_LENGTH, units, units * CHAIN_LENGTH]);
    }
    scales.push(TEMPERATURE_SCALE);
    scales
}

/// Monomer and bound units of the feed, n_M + μ₁, in mol/kg.
fn monomer_units(material: &Material, fed: &[f64]) -> f64 {
    match &material.chemistry.scheme {
        Scheme::None => 0.0,
        Scheme::FreeRadical(scheme) => fed[scheme.monomer] + fed[material.n_species() + 1],
    }
}

/// c_p of the feed, in J/(kg K).
fn heat_capacity(system: &System<'_>) -> f64 {
    let mut work = system.material().workspace();
    system.material().evaluate(&system.plant.feed.state, &mut work).heat_capacity
}
