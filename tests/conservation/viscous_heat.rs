//! Heat of shear and pressure work close with what the flow loses.

use axirad::discretise::rhs::System;
use axirad::discretise::terms::viscous_heating::friction_heat;
use axirad::integrate::march::march;
use axirad::integrate::stop::Limit;

use crate::support::{Case, Checks};

#[test]
fn shear_heats_by_the_pressure_gradient_times_the_volume_flow() {
    // At the outlet of cases whose viscosity and density vary across; algebra, so to rounding.
    for (path, profile) in [
        ("cases/case_c.yaml", "from_viscosity"),
        ("cases/case_c.yaml", "parabolic"),
        ("cases/case_c.yaml", "plug"),
        ("checks/viscous_heating_thinning.yaml", "from_viscosity"),
    ] {
        let spec = Case::file(path).set("flow.profile", profile).spec();
        let section = &spec.plant.sections[0];
        let system = System::new(&spec.plant, section);
        let inlet = system.layout.uniform(&spec.plant.feed.state);
        let leg = march(&system, inlet, Limit::of(&system, None), &[0.0, section.length]).expect("the case runs");
        let profile = system.profile(&leg.stations.last().expect("the outlet is recorded").state);
        let shape = spec.plant.flow.profile;
        let heat: f64 = (0..profile.n_tubes()).map(|i| friction_heat(shape, &section.duct.tube, &profile, i)).sum();
        let lost = profile.geometry.friction_gradient * profile.volume_flow();
        let mut checks = Checks::default();
        checks.relative(&format!("heat of shear, {path}, {shape:?}"), heat, lost, 1e-12);
        checks.end();
    }
}

#[test]
fn heat_of_flow_adds_up_to_the_pressure_drop_of_an_incompressible_fluid() {
    let thinning = "{kind: andrade, value: 2e6 Pa.s, at: 400 K, activation_temperature: 8000 K}";
    for profile in ["from_viscosity", "parabolic", "plug"] {
        let case = Case::file("checks/viscous_heating.yaml").set("mixture.viscosity", thinning);
        let run = case.set("flow.profile", profile).run();
        let volume_flow = run.number("outlet.mass_flow") / 1000.0;
        let mut checks = Checks::default();
        // Two integrals of one integrand: ten times the integrator's tolerance of 1e-8.
        let lost = run.number("pressure_drop.friction") * volume_flow;
        checks.relative(profile, run.number("viscous_heat"), lost, 1e-7);
        checks.end();
    }
}

#[test]
fn an_expanding_fluid_warms_less_by_the_work_of_its_pressure() {
    // Level and insulated: ρ c_p dT = (1 − αT) dp, ρ = 900 − 0.6 (T − 400), α = 0.6/ρ: Δp = ∫ ρ c_p/(1 − αT) dT.
    let case = Case::file("checks/viscous_heating.yaml")
        .set("sections.tube.wall", "{kind: insulated}")
        .set("mixture.density", "{kind: linear, value: 900 kg/m3, at: 400 K, slope: -0.6 kg/(m3 K)}");
    let mut checks = Checks::default();
    for (profile, tolerance) in [("plug", 1e-6), ("from_viscosity", 1e-3), ("parabolic", 1e-3)] {
        // Flat: along z only, integrator at 1e-8. Else the balance holds for every tube, and that of the cup but for
        // the spread of temperatures across, (10 K/400 K)² = 6e-4.
        let run = case.clone().set("flow.profile", profile).run();
        let (from, to) = (400.0, run.number("outlet.temperature"));
        let slope = |t: f64| {
            let density = 900.0 - 0.6 * (t - 400.0);
            density * 2000.0 / (1.0 - 0.6 * t / density)
        };
        let n = 1000; // Simpson: rounding only
        let step = (to - from) / f64::from(n);
        let weight = |k: i32| if k == 0 || k == n { 1.0 } else { f64::from(2 + 2 * (k % 2)) };
        let sum: f64 = (0..=n).map(|k| weight(k) * slope(from + step * f64::from(k))).sum();
        assert!(to - from > 50.0, "it warms enough to tell");
        checks.relative(&format!("Δp, {profile}"), run.number("pressure_drop"), sum * step / 3.0, tolerance);
        checks.within(&format!("energy balance, {profile}"), run.number("balance.energy"), 0.0, 1e-7);
    }
    checks.end();
}

#[test]
fn an_upward_flow_cools_by_the_work_against_its_own_weight() {
    // ρ c_p dT/dz = G − αT (G + ρ g): hardly any friction, so the cup cools by αT g L/c_p.
    let case = Case::file("checks/viscous_heating.yaml")
        .set("sections.tube.wall", "{kind: insulated}")
        .set("duct.inclination", "90 deg")
        .set("mixture.density", "{kind: linear, value: 900 kg/m3, at: 400 K, slope: -0.6 kg/(m3 K)}")
        .set("mixture.viscosity", "1e-8 Pa.s");
    for profile in ["from_viscosity", "parabolic", "plug"] {
        let run = case.clone().set("flow.profile", profile).tolerance(1e-10).run();
        let fall = 400.0 - run.number("outlet.temperature");
        let expected = 0.6 / 900.0 * 400.0 * 9.80665 * 4.0 / 2000.0; // 5 mK: constant to 1e-5
        let mut checks = Checks::default();
        // 1e-10 of 400 K is 4e-8 K, 8e-6 of the fall, and so is the change of αT.
        checks.relative(&format!("fall of the cup, {profile}"), fall, expected, 1e-4);
        checks.end();
    }
}
