//! Properties that change with temperature or composition, where a closed form can be had.

use axirad::discretise::terms::conduction::face_conductivity;

use crate::support::{Case, Checks};

#[test]
fn plug_flow_of_changing_density_takes_the_time_that_its_volume_leaves() {
    // k V̇₀-time: k τ = −(1 + ε) ln(1 − X) − ε X, ε = v_B/v_A − 1 (Levenspiel, Chemical Reaction Engineering, ch. 5).
    for product in [500.0, 800.0, 1250.0] {
        let run = Case::file("checks/laminar_reactor.yaml")
            .set("flow.profile", "plug")
            .set("feed.concentrations", "{reactant: 10000 mol/m3}")
            .set("mixture.density", "{kind: volumes_add}")
            .set("species.reactant.density", "1000 kg/m3")
            .set("species.product.density", format_args!("{product:?} kg/m3"))
            .tubes(10)
            .run();
        let x = run.number("outlet.conversion");
        let epsilon = 1000.0 / product - 1.0;
        let mut checks = Checks::default();
        // Along z only, with the integrator at 1e-8; k τ is 4.
        let time = -(1.0 + epsilon) * (1.0 - x).ln() - epsilon * x;
        checks.relative(&format!("k τ, product of {product} kg/m³"), time, 4.0, 1e-6);
        let volume = 1.0 + epsilon * x;
        checks.relative("velocity", run.number("outlet.mean_velocity"), 1e-3 * volume, 1e-12);
        checks.end();
    }
}

#[test]
fn a_heat_capacity_that_grows_with_temperature_takes_up_the_heat_of_reaction_as_its_integral() {
    // ∫ c_p dT = −ΔH X n: 1800 (T − 350) + ½ 6 (T − 350)² = 144 000 X for 1 mol/kg; linear in the unknowns of no
    // Jacobian, so it holds to the integrator's tolerance.
    let law = "{kind: linear, value: 1800 J/(kg K), at: 350 K, slope: 6 J/(kg K2)}";
    let tables = "{kind: polynomial, a: [1800 J/(kg K), 6 J/(kg K2)], at: 350 K}";
    let mut checks = Checks::default();
    for law in [law, tables] {
        let run = Case::file("checks/adiabatic_plug_flow.yaml").set("mixture.heat_capacity", law).run();
        let (x, rise) = (run.number("outlet.conversion"), run.number("outlet.temperature") - 350.0);
        checks.relative(law, 1800.0 * rise + 3.0 * rise * rise, 144_000.0 * x, 1e-7);
        assert!(x > 0.5);
    }
    checks.end();
}

#[test]
fn a_conductivity_that_changes_with_temperature_acts_by_its_integral() {
    // Developed viscous heating: ∫ λ dT = λ_w (1 − x⁴) of the unit 10 K (Kirchhoff's transform).
    for slope in [0.006, -0.006] {
        for (n, tolerance) in [(40, 1e-3), (80, 2.5e-4)] {
            let law = format!("{{kind: linear, value: 0.2 W/(m K), at: 400 K, slope: {slope:?} W/(m K2)}}");
            let case = Case::file("checks/viscous_heating.yaml").tubes(n).set("mixture.conductivity", law);
            let case = case.set("sections.tube.length", "8 m").point_at("axis", 8.0, 0.0).point_at("half", 8.0, 0.5);
            let run = case.run();
            let mut checks = Checks::default();
            for (place, expected) in [("axis", 1.0), ("half", 15.0 / 16.0)] {
                let rise = run.number(&format!("place.{place}.temperature")) - 400.0;
                let integral = (rise + 0.5 * slope / 0.2 * rise * rise) / 10.0;
                checks.relative(&format!("∫λ dT, {place}, {slope}, N = {n}"), integral, expected, tolerance);
            }
            checks.end();
        }
    }
}

#[test]
fn a_viscosity_that_changes_with_temperature_sets_the_pressure_gradient_of_a_uniform_fluid() {
    // 8 η ū/R² whatever law gives η; all of these are 2 Pa·s at 400 K.
    for law in [
        "2 Pa.s",
        "{kind: andrade, value: 1 Pa.s, at: 450 K, activation_temperature: 2495.3298500158033 K}",
        "{kind: linear, value: 3 Pa.s, at: 350 K, slope: -0.02 Pa.s/K}",
        "{kind: polynomial, a: [4 Pa.s, -0.02 Pa.s/K], at: 300 K}",
        "{kind: table, points: {300 K: 5 Pa.s, 400 K: 2 Pa.s, 500 K: 1 Pa.s}}",
        "{kind: vogel_fulcher_tammann, eta_inf: 0.2 Pa.s, b: 230.2585092994046 K, t_0: 300 K}",
    ] {
        let run = Case::file("checks/hagen_poiseuille.yaml").set("mixture.viscosity", law).run();
        let mut checks = Checks::default();
        checks.relative(law, run.number("outlet.pressure_gradient"), 1e5, 1e-10); // algebra
        checks.relative(law, run.number("outlet.viscosity"), 2.0, 1e-10);
        checks.end();
    }
}

#[test]
fn the_mixing_cup_has_the_temperature_of_its_enthalpy() {
    // c_p = 2000 + 10 (T − 400): what the wall took is ṁ ∫ c_p dT down to the cup, though the tubes, of which the
    // outer ones are cold, have other heat capacities than the core. The mean by mass would be off by 2 K.
    let law = "{kind: linear, value: 2000 J/(kg K), at: 400 K, slope: 10 J/(kg K2)}";
    let run =
        Case::file("checks/graetz.yaml").set("mixture.heat_capacity", law).set("sections.tube.length", "0.1 m").run();
    let fall = run.number("outlet.temperature") - 400.0;
    let enthalpy = 2000.0 * fall + 5.0 * fall * fall;
    let mut checks = Checks::default();
    let taken = -run.number("wall_heat") / run.number("outlet.mass_flow");
    // c_p follows T, so the integrator's 1e-8 of 400 K counts against a fall of 20 K.
    checks.relative("heat taken", enthalpy, taken, 1e-6);
    checks.end();
}

#[test]
fn conductivities_of_neighbours_are_resistances_in_series() {
    // Half a tube of each: 1/λ is the mean of both; a layer that conducts nothing lets nothing through.
    let mut checks = Checks::default();
    checks.relative("1 and 3", face_conductivity(1.0, 3.0), 1.5, 1e-15);
    checks.within("1 and 1e-12", face_conductivity(1.0, 1e-12), 0.0, 2e-12);
    checks.end();
}
