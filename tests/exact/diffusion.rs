//! Diffusion that closes on mass, where a closed form or a symmetry tells what it must do.

use crate::support::{Case, Checks};

/// The laminar reactor at Da = 1 and D L/(ū R²) = 0.1 of the reactant, every species with a diffusivity of its own.
fn unlike(reactant: f64, others: f64) -> Case {
    let case = Case::file("checks/laminar_reactor.yaml")
        .set("mixture", "{density: 1000 kg/m3, heat_capacity: 2000 J/(kg K), conductivity: 0.2 W/(m K)}")
        .set("reactions.decay.rate_constant", "1e-3 1/s")
        .set("species.reactant.diffusivity", format_args!("{reactant:?} m2/s"));
    ["product", "solvent"]
        .iter()
        .fold(case, |case, name| case.set(&format!("species.{name}.diffusivity"), format_args!("{others:?} m2/s")))
}

#[test]
fn a_trace_diffuses_with_its_own_diffusivity() {
    // Cleland and Wilhelm's problem (1956), AIChE J. 2, 489, by eigenfunctions: 0.403874797 at Da = 1, Z = 0.1; what
    // the solvent does makes no difference, but for the trace's share of mass, 1e-4.
    for (n, tolerance) in [(40, 1e-3), (80, 2.5e-4)] {
        let mut checks = Checks::default();
        for others in [1e-8, 1e-7, 1e-10] {
            let case = unlike(1e-8, others).set("feed.concentrations.reactant", "1 mol/m3").tubes(n);
            let left = 1.0 - case.run().number("outlet.conversion");
            checks.relative(&format!("c/c₀, others {others:e} m²/s, N = {n}"), left, 0.403874797, tolerance);
        }
        checks.end();
    }
}

#[test]
fn alike_diffusivities_given_one_by_one_are_one_diffusivity() {
    let one = Case::file("checks/laminar_reactor.yaml")
        .set("mixture.diffusivity", "1e-8 m2/s")
        .set("reactions.decay.rate_constant", "1e-3 1/s");
    let mut checks = Checks::default();
    // The same arithmetic but for rounding, which the steps see.
    let [one, each] = [one, unlike(1e-8, 1e-8)].map(|case| case.run().number("outlet.conversion"));
    checks.relative("X", each, one, 1e-9);
    checks.end();
}

#[test]
fn a_pair_of_species_diffuses_with_the_mean_of_both() {
    // Σ M J = 0 gives J_A = −ρ ((1 − w_A) D_A + w_A D_B) ∂n_A/∂r: half of each where half is A. A slow reaction, which
    // changes w_A by a thousandth, poses it: local conversions must be those of one diffusivity, the mean.
    let slow = |reactant: f64, others: f64| {
        unlike(reactant, others)
            .set("feed.concentrations", "{reactant: 5000 mol/m3, product: 5000 mol/m3}")
            .set("reactions.decay.rate_constant", "2e-6 1/s")
            .point_at("axis", 1.0, 0.0)
            .point_at("outside", 1.0, 0.9)
            .tolerance(1e-10)
            .run()
    };
    let [pair, mean] = [slow(1.9e-8, 1e-9), slow(1e-8, 1e-8)];
    let mut checks = Checks::default();
    for place in ["axis", "outside"] {
        let name = format!("place.{place}.conversion");
        checks.relative(&name, pair.number(&name), mean.number(&name), 2e-3); // w_A moves the mean by so much
        for one in [1.9e-8, 1e-9] {
            let alone = slow(one, one).number(&name);
            assert!((alone / mean.number(&name) - 1.0).abs() > 0.05, "{one} m²/s alone must be told apart: {alone}");
        }
    }
    checks.within("Σ M n − 1", pair.number("balance.mass"), 0.0, 1e-12);
    checks.end();
}

#[test]
fn a_fluid_in_which_nothing_reacts_stays_mixed() {
    // No gradient, no flux, though diffusivities and heat capacities are unlike and the fluid is heated.
    let run = Case::file("checks/unlike_diffusivities.yaml").set("reactions", "[]").run();
    let mut checks = Checks::default();
    for (name, fraction) in [("acid", 0.40), ("alcohol", 0.55), ("water", 0.05)] {
        let masses = [("acid", 60.052), ("alcohol", 74.1228), ("water", 18.01528)];
        let total = 0.40 * masses[0].1 + 0.55 * masses[1].1 + 0.05 * masses[2].1;
        let mass = masses.iter().find(|(other, _)| *other == name).map_or(f64::NAN, |(_, mass)| *mass);
        let found = run.number(&format!("outlet.mass_fraction.{name}"));
        checks.relative(name, found, fraction * mass / total, 1e-4); // the molar masses typed here, to five digits
    }
    // c_p follows T, so that the balance is not linear in T: its error of 1e-8 of 365 K counts against a rise of 13 K.
    checks.within("energy", run.number("balance.energy"), 0.0, 3e-7);
    assert!(run.number("outlet.temperature") > 360.0, "it is heated");
    checks.end();
}
