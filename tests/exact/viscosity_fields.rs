//! Flow through a given field of viscosity: v = (G/2) ∫ r/η dr, Q = (πG/2) ∫ r³/η dr, exact integrals, computed
//! independently at high precision.
//!
//! No feed has a profile, so the test sets the state: each stream tube the temperature at its √⟨r²⟩, sought until the
//! places of the tubes and their temperatures agree.

use axirad::discretise::profile::Profile;
use axirad::discretise::rhs::System;

use crate::support::{Case, Checks};

/// B of the viscosity law A exp(B/T), and A [K, Pa·s].
const B: f64 = 4000.0;
const RADIUS: f64 = 5e-3;
const FLOW: f64 = 1e-5;

const SPEC: &str = "
format: axirad/1
duct: {shape: tube, inner_diameter: 10 mm}
feed: {volume_flow: 1e-5 m3/s, temperature: 425 K, mass_fractions: {fluid: 1}}
flow: {profile: from_viscosity}
sections: [{name: tube, length: 1 m, wall: {kind: insulated}}]
species: {fluid: {}}
mixture:
  density: 1000 kg/m3
  heat_capacity: 2000 J/(kg K)
  conductivity: 0.2 W/(m K)
  viscosity: {kind: andrade, prefactor: 1e-5 Pa.s, activation_temperature: 4000 K}
numerics: {spacing: uniform}
";

/// The flow on N stream tubes whose temperature is a function of r/R.
fn settled(n: usize, temperature: impl Fn(f64) -> f64) -> Profile {
    let spec = Case::text(SPEC).tubes(n).spec();
    let system = System::new(&spec.plant, &spec.plant.sections[0]);
    let mut state = system.layout.uniform(&spec.plant.feed.state);
    let mut profile = system.profile(&state);
    for _ in 0..200 {
        let before = profile.geometry.squares.clone();
        for i in 0..n {
            state[system.layout.temperature(i)] = temperature(profile.geometry.mean_square(i).sqrt() / RADIUS);
        }
        profile = system.profile(&state);
        let moved = before.iter().zip(&profile.geometry.squares).map(|(a, b)| (a - b).abs()).fold(0.0, f64::max);
        if moved < 1e-14 * RADIUS * RADIUS {
            return profile;
        }
    }
    panic!("the faces did not settle");
}

fn ratio(profile: &Profile) -> f64 {
    profile.geometry.velocities[0] / profile.mean_velocity()
}

/// Holds a gradient and a velocity ratio to second order: on 40 and 80 tubes, and by the slope.
fn hold(name: &str, temperature: impl Fn(f64) -> f64, gradient: f64, velocity_ratio: f64) {
    let at = |n: usize| settled(n, &temperature);
    let [a, b, c] = [40, 80, 160].map(at);
    let mut checks = Checks::default();
    for (n, profile, tolerance) in [(40, &a, 1e-3), (80, &b, 2.5e-4), (160, &c, 6.25e-5)] {
        checks.relative(&format!("G, {name}, N = {n}"), profile.geometry.friction_gradient, gradient, tolerance);
        checks.relative(&format!("v_max/v̄, {name}, N = {n}"), ratio(profile), velocity_ratio, tolerance);
    }
    let errors = [&a, &b, &c].map(|profile| profile.geometry.friction_gradient - gradient);
    checks.within(&format!("slope from 40 to 80, {name}"), (errors[0] / errors[1]).log2(), 2.0, 0.1);
    checks.within(&format!("slope from 80 to 160, {name}"), (errors[1] / errors[2]).log2(), 2.0, 0.1);
    checks.end();
}

#[test]
fn a_hot_core_flows_ahead_of_a_cold_wall() {
    hold("axis 450 K, wall 400 K", |x| 450.0 - 50.0 * x, 6923.9551868, 2.37118726838);
}

#[test]
fn a_cold_core_lags_behind_a_hot_wall() {
    hold("axis 400 K, wall 450 K", |x| 400.0 + 50.0 * x, 3577.1922522, 1.76189541853);
}

#[test]
fn a_viscosity_that_grows_or_falls_exponentially_across_flows_as_its_integral() {
    // η = η_axis e^{±3x}: Q/Q(η_axis) and v_max/v̄; with the law exp(B/T), T = B/(B/T_axis ± 3x).
    let axis = 425.0;
    let eta_axis = 1e-5 * (B / axis).exp();
    let newtonian = 8.0 * eta_axis * FLOW / (std::f64::consts::PI * RADIUS.powi(4));
    for (name, sign, share, ratio) in
        [("thick wall", 3.0, 0.104523884805, 3.40528962679), ("thin wall", -3.0, 12.1988366952, 1.5)]
    {
        hold(name, |x| B / (B / axis + sign * x), newtonian / share, ratio);
    }
}
