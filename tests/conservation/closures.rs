//! Balances of every spec: to rounding where they are linear in the unknowns, else to the integrator's tolerance.

use std::path::Path;

use crate::support::{Case, Checks, Ran, specs};

/// Linear balances hold to rounding after any Newton iteration, whatever the tolerance.
const ROUNDING: f64 = 1e-12;
/// The energy balance may be open by this many times the integrator's tolerance.
const TIMES_TOLERANCE: f64 = 10.0;

/// Every spec that runs: files below `specs/` of the format `axirad/1`, the wrong ones left out.
fn all_specs(folder: &Path, prefix: &str, found: &mut Vec<String>) {
    let entries = std::fs::read_dir(folder).expect("the specs can be listed");
    for entry in entries.map(|entry| entry.expect("a folder can be read")) {
        let name = entry.file_name().into_string().expect("specs have plain names");
        let path = format!("{prefix}{name}");
        if entry.path().is_dir() {
            if name != "wrong" {
                all_specs(&entry.path(), &format!("{path}/"), found);
            }
        } else if name.ends_with(".yaml") {
            let text = std::fs::read_to_string(entry.path()).expect("a spec is a text");
            if text.lines().any(|line| line.trim() == "format: axirad/1") {
                found.push(path);
            }
        }
    }
}

fn hold_balances(checks: &mut Checks, what: &str, case: &Case, run: &Ran) {
    let tolerance = case.spec().plant.numerics.relative_tolerance;
    let balances = [
        ("balance.mass", ROUNDING),
        ("balance.elements", ROUNDING),
        ("balance.monomer_units", ROUNDING),
        ("balance.energy", TIMES_TOLERANCE * tolerance),
    ];
    for (name, allowed) in balances {
        let figure = run.0.figure(name).expect("balances are always in the catalogue");
        if let Some(value) = figure.value.number() {
            checks.within(&format!("{name} of {what}"), value, 0.0, allowed);
        }
    }
}

#[test]
fn every_spec_balances() {
    let mut found = Vec::new();
    all_specs(&specs(), "", &mut found);
    assert!(found.len() >= 15, "the specs are there: {found:?}");
    let mut checks = Checks::default();
    for path in &found {
        let case = Case::file(path);
        hold_balances(&mut checks, path, &case, &case.run());
    }
    checks.end();
}

#[test]
fn balances_hold_at_every_tolerance_and_on_every_grid() {
    let mut checks = Checks::default();
    for path in ["cases/case_a.yaml", "cases/case_b.yaml", "cases/case_c.yaml", "checks/unlike_diffusivities.yaml"] {
        for (n, tolerance) in [(5, 1e-3), (10, 1e-4), (40, 1e-5), (80, 1e-6)] {
            let case = Case::file(path).tubes(n).tolerance(tolerance);
            hold_balances(&mut checks, &format!("{path}, N = {n}, {tolerance:e}"), &case, &case.run());
        }
    }
    checks.end();
}

#[test]
fn heat_of_a_shear_that_changes_the_viscosity_is_counted_at_every_tolerance() {
    // The heat of shear depends on temperature by way of the viscosity, in the balance and in its integral alike.
    let mut checks = Checks::default();
    for profile in ["from_viscosity", "parabolic", "plug"] {
        for tolerance in [1e-4, 1e-6, 1e-8, 1e-10] {
            let case =
                Case::file("checks/viscous_heating_thinning.yaml").set("flow.profile", profile).tolerance(tolerance);
            hold_balances(&mut checks, &format!("{profile} at {tolerance:e}"), &case, &case.run());
        }
    }
    checks.end();
}

#[test]
fn unlike_diffusivities_keep_every_element_in_every_tube() {
    // `balance.mass` is the worst tube's |Σ M n − 1|; elements are those of the mixing cup.
    let run = Case::file("checks/unlike_diffusivities.yaml").run();
    let mut checks = Checks::default();
    checks.within("Σ M n − 1", run.number("balance.mass"), 0.0, ROUNDING);
    checks.within("elements", run.number("balance.elements"), 0.0, ROUNDING);
    checks.end();
    assert!(run.number("outlet.conversion_of.acid") > 0.3, "it reacts");
    // The test would say nothing if diffusion did nothing: near the inlet it changes what passes by a percent.
    let near = Case::file("checks/unlike_diffusivities.yaml").cup_at("near", 0.1);
    let still = ["acid", "alcohol", "ester", "water"]
        .iter()
        .fold(near.clone(), |case, name| case.set(&format!("species.{name}.diffusivity"), "0 m2/s"));
    let [with, without] = [near, still].map(|case| case.run().number("place.near.conversion_of.acid"));
    assert!((with / without - 1.0).abs() > 5e-3, "{with} with diffusion, {without} without");
}

#[test]
fn heat_that_diffusing_species_carry_is_counted() {
    // With unlike heat capacities and heat spreading hardly faster than mass (Le = 10) the enthalpy carried by
    // diffusion, left out, would leave the balance open by 5e-3 at most.
    let case = Case::file("checks/unlike_diffusivities.yaml");
    let mut checks = Checks::default();
    for tolerance in [1e-6, 1e-8, 1e-10] {
        let run = case.clone().tolerance(tolerance).run();
        checks.within(&format!("energy at {tolerance:e}"), run.number("balance.energy"), 0.0, 10.0 * tolerance);
    }
    checks.end();
}

#[test]
fn heat_through_the_wall_is_what_the_fluid_has_lost() {
    // No reaction: ṁ c_p times the fall of the cup, and the wall's heat is an integral of its own.
    let run = Case::file("checks/graetz.yaml").run();
    let lost = run.number("outlet.mass_flow") * 2000.0 * (400.0 - run.number("outlet.temperature"));
    let mut checks = Checks::default();
    checks.relative("wall heat", run.number("wall_heat"), lost, 1e-7); // ten times the integrator's tolerance
    checks.end();
}

#[test]
fn chains_bind_what_the_monomer_loses_in_every_tube() {
    // M₀ (n_M + μ₁) of the mixing cup, and of every tube by way of the outlet's spread: no tube parts from the rest.
    for path in ["cases/case_b.yaml", "cases/case_c.yaml", "checks/unlike_polymerization.yaml"] {
        let run = Case::file(path).run();
        let mut checks = Checks::default();
        checks.within(&format!("monomer units of {path}"), run.number("balance.monomer_units"), 0.0, ROUNDING);
        checks.within(&format!("mass of {path}"), run.number("balance.mass"), 0.0, ROUNDING);
        checks.end();
    }
}
