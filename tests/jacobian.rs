//! The Jacobian against central differences, and the balances it must keep.

use approx::assert_relative_eq;
use axirad::discretise::blocks::Blocks;
use axirad::discretise::rhs::System;
use axirad::simulate::{Spec, read_spec};

fn spec(text: &str) -> Spec {
    let no_part = &mut |_: &str| Err("no parts here".to_owned());
    read_spec("inline", text.as_bytes(), no_part, &[]).unwrap_or_else(|errors| panic!("{errors:#?}"))
}

/// A state that is not uniform, with every amount away from 0.
fn uneven_state(system: &System<'_>) -> Vec<f64> {
    let mut state = system.layout.uniform(&system.plant.feed.state);
    let n_vars = system.layout.n_vars();
    for i in 0..system.layout.n_tubes {
        let x = i as f64 / system.layout.n_tubes as f64;
        for k in 0..n_vars - 1 {
            state[system.layout.amount(i, k)] *= 1.0 - 0.3 * x * (1.0 + k as f64 / n_vars as f64);
            state[system.layout.amount(i, k)] += 1e-3 * x;
        }
        state[system.layout.temperature(i)] += 15.0 * x;
    }
    state
}

const STYRENE_LIKE: &str = "
format: axirad/1
duct: {shape: tube, inner_diameter: 20 mm}
feed:
  mean_velocity: 1 mm/s
  temperature: 100 degC
  mass_fractions: {monomer: rest, initiator: 0.2 %, polymer: 20 %}
  polymer: {number_average_molar_mass: 80 kg/mol, dispersity: 2}
flow: {profile: plug}
sections: [{name: tube, length: 3 m, wall: {kind: jacket, coefficient: 300 W/(m2 K), coolant: {temperature: 110 degC}}}]
species:
  monomer: {molar_mass: 104.15 g/mol}
  initiator: {molar_mass: 164.21 g/mol}
  polymer: {}
mixture:
  density: 850 kg/m3
  heat_capacity: {kind: linear, value: 1880 J/(kg K), at: 100 degC, slope: 3 J/(kg K2)}
  conductivity: 0.126 W/(m K)
  diffusivity: 1e-9 m2/s
polymerization:
  scheme: free_radical
  monomer: monomer
  polymer: polymer
  initiators: {initiator: {efficiency: 60 %, dissociation: {prefactor: 1.58e15 1/s, activation_energy: 128.9 kJ/mol}}}
  thermal_initiation: {order: 3, rate_constant: {prefactor: 0.219 m6/(mol2 s), activation_temperature: 13810 K}}
  propagation: {prefactor: 1.051e4 m3/(mol s), activation_temperature: 3557 K}
  termination:
    by_combination: {prefactor: 1.2e6 m3/(mol s), activation_temperature: 844 K}
    by_disproportionation: {prefactor: 2e5 m3/(mol s), activation_temperature: 900 K}
  transfer: {monomer: {prefactor: 2.31e3 m3/(mol s), activation_temperature: 6377 K}}
  gel_effect: {termination: {kind: conversion_polynomial, a: [0, 2.57, 9.56, -3.03], power: -2}}
  heat: -69.9 kJ/mol
numerics: {stream_tubes: 5}
";

/// Central differences with steps of 1e-6 of the scale: 1e-12 of truncation, 1e-10 of rounding, against blocks
/// whose entries span ten decades.
const DIFFERENCE_ERROR: f64 = 1e-6;

#[test]
fn blocks_are_the_central_differences_where_the_geometry_does_not_move() {
    let spec = spec(STYRENE_LIKE);
    let system = System::new(&spec.plant, &spec.plant.sections[0]);
    let state = uneven_state(&system);
    let n = state.len();
    let mut blocks = Blocks::zeros(system.shape());
    system.jacobian(&state, &mut blocks);
    let (mut above, mut below) = (vec![0.0; n], vec![0.0; n]);
    for column in 0..system.layout.n_tubes * system.layout.n_vars() {
        let step = 1e-6 * state[column].abs().max(1e-6);
        let mut moved = state.clone();
        moved[column] += step;
        system.slopes(&moved, &mut above);
        moved[column] -= 2.0 * step;
        system.slopes(&moved, &mut below);
        let mut unit = vec![0.0; n];
        unit[column] = 1.0;
        let mut exact = vec![0.0; n];
        blocks.multiply(&unit, &mut exact);
        let scale: f64 = exact.iter().fold(0.0, |scale, value| scale.max(value.abs()));
        for row in 0..n {
            let difference = (above[row] - below[row]) / (2.0 * step);
            // the row's own rounding: slopes of size s leave s·1e-16/step
            let rounding = above[row].abs() * 1e-15 / step;
            assert_relative_eq!(
                exact[row],
                difference,
                max_relative = DIFFERENCE_ERROR,
                epsilon = rounding + 1e-9 * scale
            );
        }
    }
}

const UNLIKE: &str = "
format: axirad/1
duct: {shape: tube, inner_diameter: 10 mm}
feed: {mean_velocity: 2 mm/s, temperature: 60 degC, mole_fractions: {acid: 48 %, alcohol: 50 %, water: rest}}
flow: {profile: parabolic}
sections: [{name: tube, length: 2 m, wall: {kind: wall_temperature, temperature: 90 degC}}]
species:
  acid: {formula: C2H4O2, diffusivity: 1e-9 m2/s, density: 1050 kg/m3}
  alcohol: {formula: C4H10O, diffusivity: 2e-9 m2/s, density: 810 kg/m3}
  ester: {formula: C6H12O2, diffusivity: 1.5e-9 m2/s, density: 880 kg/m3}
  water: {formula: H2O, diffusivity: 6e-9 m2/s, density: 990 kg/m3}
mixture: {heat_capacity: 2.5 kJ/(kg K), conductivity: 0.16 W/(m K)}
reactions:
  - name: esterification
    consumes: {acid: 1, alcohol: 1}
    makes: {ester: 1, water: 1}
    rate_constant: {value: 3.1e-8 m3/(mol s), at: 80 degC, activation_energy: 57 kJ/mol}
    heat: -15.5 kJ/mol
numerics: {stream_tubes: 6}
";

#[test]
fn blocks_keep_the_mass_of_every_stream_tube_and_each_species_across_them() {
    let spec = spec(UNLIKE);
    let system = System::new(&spec.plant, &spec.plant.sections[0]);
    let masses = &system.material().molar_masses;
    let mut state = uneven_state(&system);
    for i in 0..system.layout.n_tubes {
        let tube = system.layout.tube(i);
        let total: f64 = state[tube.clone()].iter().zip(masses).map(|(n, mass)| n * mass).sum();
        state[tube].iter_mut().zip(masses).for_each(|(n, _)| *n /= total);
    }
    let mut blocks = Blocks::zeros(system.shape());
    system.jacobian(&state, &mut blocks);
    // a change of composition that leaves Σ M n = 1
    let mut change = vec![0.0; state.len()];
    for i in 0..system.layout.n_tubes {
        let wave = (i as f64).sin();
        change[system.layout.amount(i, 0)] = wave / masses[0];
        change[system.layout.amount(i, 3)] = -wave / masses[3];
        change[system.layout.temperature(i)] = 3.0 * wave;
    }
    let mut product = vec![0.0; state.len()];
    blocks.multiply(&change, &mut product);
    for i in 0..system.layout.n_tubes {
        let tube = &product[system.layout.tube(i)];
        let total: f64 = tube.iter().zip(masses).map(|(n, mass)| n * mass).sum();
        let size: f64 = tube.iter().zip(masses).map(|(n, mass)| (n * mass).abs()).sum();
        assert!(total.abs() <= 1e-13 * size, "tube {i}: {total:e} of {size:e}"); // rounding of five terms
    }
}
