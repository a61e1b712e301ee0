//! Sections in series hand on what they carry.

use crate::support::{Case, Checks};

/// A spec's only section, cut in two at a share of its length.
fn cut(case: &Case, share: f64) -> Case {
    let spec = case.spec();
    let length = spec.plant.sections[0].length;
    let wall = match () {
        () if spec.title.as_deref().is_some_and(|title| title.starts_with("Case A")) => {
            "{kind: wall_temperature, temperature: 314 K}"
        }
        () if spec.title.as_deref().is_some_and(|title| title.starts_with("Case B")) => {
            "{kind: jacket, coefficient: 300 W/(m2 K), coolant: {temperature: 358.15 K}}"
        }
        () => "{kind: jacket, coefficient: 300 W/(m2 K), coolant: {temperature: 383.15 K}}",
    };
    let section = |name: &str, length: f64| format!("{{name: {name}, length: {length:?} m, wall: {wall}}}");
    let sections = [section("first", share * length), section("second", (1.0 - share) * length)];
    case.clone().set("sections", format_args!("[{}]", sections.join(", ")))
}

#[test]
fn two_half_sections_are_one_section() {
    let mut checks = Checks::default();
    for (path, with_flow) in [("cases/case_a.yaml", false), ("cases/case_b.yaml", true), ("cases/case_c.yaml", true)] {
        let whole = Case::file(path);
        let [one, two] = [whole.clone(), cut(&whole, 0.5)].map(|case| case.run());
        let mut figures =
            vec!["outlet.conversion", "outlet.temperature", "hot_spot.temperature", "wall_heat", "reaction_heat"];
        if with_flow {
            figures.extend(["outlet.number_average_molar_mass", "outlet.weight_average_molar_mass", "pressure_drop"]);
        }
        for name in figures {
            // The integrator begins anew in the second half: some tens of times its tolerance of 1e-8.
            checks.relative(&format!("{name} of {path}"), two.number(name), one.number(name), 5e-7);
        }
        let parts = two.number("section.first.reaction_heat") + two.number("section.second.reaction_heat");
        checks.relative(&format!("heat by sections of {path}"), parts, two.number("reaction_heat"), 1e-14);
    }
    checks.end();
}

#[test]
fn a_change_of_bore_passes_mass_and_heat() {
    let sections = "[{name: narrow, length: 0.7 m, wall: {kind: insulated}}, \
                     {name: wide, length: 0.5 m, inner_diameter: 30 mm, wall: {kind: insulated}}]";
    let case = Case::file("cases/case_c.yaml")
        .set("sections", sections)
        .cup_at("before", 0.7 - 1e-9)
        .cup_at("after", 0.7 + 1e-9);
    let run = case.run();
    let mut checks = Checks::default();
    for name in
        ["temperature", "conversion", "mass_flow", "density", "number_average_molar_mass", "polymer_mass_fraction"]
    {
        let [before, after] = ["before", "after"].map(|place| run.number(&format!("place.{place}.{name}")));
        checks.relative(&format!("{name} across the change"), after, before, 1e-8); // two nanometres apart
    }
    let velocity = |place: &str| run.number(&format!("place.{place}.mean_velocity"));
    checks.relative("velocity", velocity("after") / velocity("before"), (20.0_f64 / 30.0).powi(2), 1e-8);
    let gradient = |place: &str| run.number(&format!("place.{place}.pressure_gradient"));
    // The viscosity of a syrup magnifies what the integrator's interpolant is off by, 1e-8, tenfold.
    checks.relative("pressure gradient", gradient("after") / gradient("before"), (20.0_f64 / 30.0).powi(4), 1e-6);
    for name in ["balance.mass", "balance.monomer_units"] {
        checks.within(name, run.number(name), 0.0, 1e-12);
    }
    checks.within("balance.energy", run.number("balance.energy"), 0.0, 1e-7);
    checks.end();
}

#[test]
fn a_wide_section_counts_as_the_length_of_narrow_tube_that_it_holds() {
    // Without diffusion every tube keeps its share of flow and of area: only the time spent counts.
    let case = Case::file("checks/laminar_reactor.yaml");
    let one = case.clone().run();
    let sections = "[{name: narrow, length: 0.2 m, wall: {kind: insulated}}, \
                     {name: wide, length: 0.05 m, inner_diameter: 80 mm, wall: {kind: insulated}}]";
    let two = case.set("sections", sections).run();
    let mut checks = Checks::default();
    checks.relative("X", two.number("outlet.conversion"), one.number("outlet.conversion"), 1e-7); // along z, at 1e-8
    checks.end();
}

#[test]
fn a_standing_tube_loses_the_weight_of_its_column() {
    for (degrees, sine) in [(90.0, 1.0), (-90.0, -1.0), (30.0, 0.5), (0.0, 0.0)] {
        let case = Case::file("checks/hagen_poiseuille.yaml").set("duct.inclination", format_args!("{degrees:?} deg"));
        let run = case.set("feed.pressure", "5 bar").run();
        let mut checks = Checks::default();
        let weight = 1000.0 * 9.80665 * 2.0 * sine;
        checks.within("gravity", run.number("pressure_drop.gravity"), weight, 1e-10 * 2e4);
        checks.relative("pressure drop", run.number("pressure_drop"), 2e5 + weight, 1e-10);
        checks.relative("pressure at the outlet", run.number("outlet.pressure"), 5e5 - 2e5 - weight, 1e-10);
        checks.end();
    }
}
