//! Limits that must coincide, and ends that can be told in closed form.

use crate::support::{Case, Checks, Ran};

/// Figures of a run that two ways to the same limit must share.
const FIGURES: [&str; 6] =
    ["outlet.conversion", "outlet.temperature", "hot_spot.temperature", "hot_spot.z", "wall_heat", "reaction_heat"];

fn hold_alike(checks: &mut Checks, what: &str, one: &Ran, other: &Ran, tolerance: f64) {
    for name in FIGURES {
        checks.relative(&format!("{name}, {what}"), one.number(name), other.number(name), tolerance);
    }
}

#[test]
fn a_jacket_without_resistance_is_a_wall_at_the_coolants_temperature() {
    let wall = Case::file("cases/case_a.yaml");
    let jacket = "{kind: jacket, coefficient: 1e13 W/(m2 K), coolant: {temperature: 314 K}}";
    let mut checks = Checks::default();
    // λ g_w/U is 1e-9 of the resistance; the place of the hot spot, where its curve is flat, is found to 1e-7.
    hold_alike(&mut checks, "U = 1e13", &wall.clone().set("sections.tube.wall", jacket).run(), &wall.run(), 1e-7);
    checks.end();
}

#[test]
fn a_jacket_without_conductance_is_an_insulated_wall() {
    let insulated = Case::file("cases/case_a.yaml").set("sections.tube.wall", "{kind: insulated}");
    let jacket = "{kind: jacket, coefficient: 1e-9 W/(m2 K), coolant: {temperature: 314 K}}";
    let [one, other] = [insulated.clone(), insulated.set("sections.tube.wall", jacket)].map(|case| case.run());
    let mut checks = Checks::default();
    for name in ["outlet.conversion", "outlet.temperature", "hot_spot.temperature", "reaction_heat"] {
        checks.relative(name, other.number(name), one.number(name), 1e-8);
    }
    assert!(one.number("wall_heat").abs() < f64::MIN_POSITIVE, "an insulated wall passes no heat at all");
    checks.end();
}

#[test]
fn tubes_that_exchange_nothing_are_plug_flows_of_their_own() {
    let reactor = |profile: &str| {
        Case::file("checks/adiabatic_plug_flow.yaml").set("flow.profile", profile).set("mixture.diffusivity", "0 m2/s")
    };
    // So wide and so poor a conductor that heat gets 1e-5 of the way from tube to tube.
    let laminar = reactor("parabolic").set("mixture.conductivity", "1e-6 W/(m K)").set("duct.inner_diameter", "2 m");
    let laminar = laminar.tubes(12);
    let run = laminar.set("sections.tube.length", "0.15 m").run_with_tables();
    let table = run.0.tables.as_ref().map(|tables| &tables.over_z_and_r).expect("tables were asked for");
    let column = |name: &str| table.columns.iter().position(|(column, _)| column == name).expect("the column is there");
    let [z, velocity, temperature, conversion] = ["z", "velocity", "temperature", "conversion"].map(column);
    let outlet: Vec<[f64; 3]> = table
        .rows
        .iter()
        .map(|(_, row)| [z, velocity, temperature, conversion].map(|k| row[k].expect("all of these are computed")))
        .filter(|row| row[0] > 0.15 - 1e-12)
        .map(|[_, velocity, temperature, conversion]| [velocity, temperature, conversion])
        .collect();
    assert_eq!(outlet.len(), 12, "one row a tube");
    // Plug flow runs at 1 mm/s: the place where it is as old as the tube's fluid is at the outlet.
    let plug = outlet.iter().enumerate().fold(reactor("plug"), |case, (i, row)| {
        case.set("sections.tube.length", "3 m").cup_at(&format!("t_{i}"), 0.15 * 1e-3 / row[0])
    });
    let plug = plug.run();
    let mut checks = Checks::default();
    for (i, [_, temperature, conversion]) in outlet.into_iter().enumerate() {
        let number = |name: &str| plug.number(&format!("place.t_{i}.{name}"));
        // Both integrate along z alone, at 1e-9, where the rise is steep.
        checks.relative(&format!("T of tube {i}"), temperature, number("temperature"), 1e-6);
        checks.relative(&format!("X of tube {i}"), conversion, number("conversion"), 1e-6);
        // The heat that is conducted all the same.
        checks.relative(&format!("T − T₀ − ΔT_ad X of tube {i}"), temperature, 350.0 + 80.0 * conversion, 1e-8);
    }
    checks.end();
}

#[test]
fn a_laminar_tube_without_a_cold_wall_warms_by_the_heat_of_what_it_converts() {
    for profile in ["parabolic", "plug"] {
        let case = Case::file("cases/case_a.yaml").set("sections.tube.wall", "{kind: insulated}");
        let run = case.set("flow.profile", profile).run();
        // ΔT_ad = 84 670 · 4000/(1000 · 3900); linear in the unknowns, so to rounding at every tolerance.
        let rise = 84_670.0 * 4.0 / 3900.0 * run.number("outlet.conversion");
        let mut checks = Checks::default();
        checks.relative(profile, run.number("outlet.temperature"), 314.0 + rise, 1e-12);
        checks.relative("heat", run.number("reaction_heat"), 3900.0 * rise * run.number("outlet.mass_flow"), 1e-7);
        checks.end();
    }
}

#[test]
fn without_heat_a_reactor_stays_at_its_temperature() {
    for (case, heat) in
        [("cases/case_a.yaml", "reactions.hydrolysis.heat"), ("cases/case_b.yaml", "polymerization.heat")]
    {
        let mut case = Case::file(case).set(heat, "0 J/mol");
        let feed = 330.0;
        case = case
            .set("feed.temperature", "330 K")
            .set("sections.tube.wall", "{kind: wall_temperature, temperature: 330 K}");
        let run = case.run();
        let mut checks = Checks::default();
        for name in
            ["outlet.temperature", "hot_spot.temperature", "outlet.lowest_temperature", "wall.highest_temperature"]
        {
            checks.relative(name, run.number(name), feed, 1e-12); // rounding
        }
        assert!(run.number("outlet.conversion") > 0.01, "it reacts all the same");
        checks.end();
    }
}

#[test]
fn a_reversible_reaction_ends_at_the_equilibrium_of_its_end_temperature() {
    let run = Case::file("checks/reversible_adiabatic.yaml").run();
    let (x, temperature) = (run.number("outlet.conversion"), run.number("outlet.temperature"));
    // X/(1 − X) = K = 8 exp((144 kJ/mol/R_g)(1/T − 1/330 K)) and T = 330 K + 80 K X, by bisection.
    let excess = |x: f64| {
        let temperature = 330.0 + 80.0 * x;
        let k = 8.0 * (144_000.0 / 8.314462618 * (1.0 / temperature - 1.0 / 330.0)).exp();
        x / (1.0 - x) - k
    };
    let (mut low, mut high) = (0.0, 0.999);
    for _ in 0..60 {
        let middle = 0.5 * (low + high);
        if excess(middle) < 0.0 { low = middle } else { high = middle }
    }
    let mut checks = Checks::default();
    checks.relative("X at equilibrium", x, low, 1e-6); // along z, with the integrator at 1e-9
    checks.relative("T at equilibrium", temperature, 330.0 + 80.0 * low, 1e-6);
    checks.within("elements", run.number("balance.elements"), 0.0, 1e-12);
    checks.end();
}

#[test]
fn an_equilibrium_is_reached_from_either_side() {
    // Isothermal, K = 4 in X/(1 − X) at 330 K whatever the order of what is fed.
    let case = Case::file("checks/reversible_adiabatic.yaml")
        .set("reactions.isomerization.heat", "0 J/mol")
        .set("reactions.isomerization.equilibrium_constant", "{value: 4, at: 330 K}");
    let from_cis = case.clone().run();
    let from_trans = case.set("feed.concentrations", "{cis: 0 mol/m3, trans: 1000 mol/m3, solvent: rest}").run();
    let mut checks = Checks::default();
    for (name, run) in [("cis", &from_cis), ("trans", &from_trans)] {
        let ratio = run.number("outlet.concentration.trans") / run.number("outlet.concentration.cis");
        checks.relative(&format!("[trans]/[cis] from {name}"), ratio, 4.0, 1e-6);
    }
    checks.end();
}

#[test]
fn a_tube_of_parabolic_flow_with_constant_viscosity_is_the_one_that_viscosity_makes() {
    let case = Case::file("cases/case_a.yaml").set("mixture.viscosity", "1 mPa.s");
    let [shape, force] = ["parabolic", "from_viscosity"].map(|profile| case.clone().set("flow.profile", profile).run());
    let mut checks = Checks::default();
    // Rounding, which the steps see; the place of the hot spot, where its curve is flat, is found to 1e-7.
    hold_alike(&mut checks, "shape or balance of forces", &force, &shape, 1e-7);
    checks.relative("pressure drop", force.number("pressure_drop"), shape.number("pressure_drop"), 1e-10);
    checks.end();
}

#[test]
fn one_reaction_written_as_two_halves_is_the_same_reaction() {
    let half = |name: &str| {
        format!(
            "{{name: {name}, consumes: {{reactant: 1}}, makes: {{product: 1}}, heat: -84.67 kJ/mol, \
             rate_constant: {{prefactor: 8.48e12 1/h, activation_energy: 75362 J/mol}}}}"
        )
    };
    let whole = Case::file("cases/case_a.yaml");
    let halves = whole.clone().set("reactions", format_args!("[{}, {}]", half("first"), half("second")));
    let mut checks = Checks::default();
    hold_alike(&mut checks, "two halves", &halves.run(), &whole.run(), 1e-7); // as above
    checks.end();
}
