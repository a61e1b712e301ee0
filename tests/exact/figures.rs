//! Figures that a run must report alike however they are asked for.

use crate::support::{Case, Checks};

#[test]
fn a_heated_tube_is_hottest_at_its_wall() {
    let jacket = "{kind: jacket, coefficient: 200 W/(m2 K), coolant: {temperature: 450 K}}";
    let run =
        Case::file("checks/graetz.yaml").set("sections.tube.wall", jacket).set("sections.tube.length", "0.4 m").run();
    let mut checks = Checks::default();
    checks.within("r/R", run.number("hot_spot.position"), 1.0, 1e-12);
    checks.within("z", run.number("hot_spot.z"), 0.4, 1e-12);
    checks.relative("hot spot", run.number("hot_spot.temperature"), run.number("outlet.wall_temperature"), 1e-12);
    checks.relative("highest", run.number("outlet.highest_temperature"), run.number("outlet.wall_temperature"), 1e-12);
    checks.within(
        "below the coolant",
        run.number("hot_spot.rise"),
        run.number("outlet.wall_temperature") - 450.0,
        1e-9,
    );
    checks.relative("wall", run.number("wall.highest_temperature"), run.number("outlet.wall_temperature"), 1e-12);
    // U (T_c − T_wall) goes in.
    let flux = 200.0 * (run.number("outlet.wall_temperature") - 450.0);
    checks.relative("flux", run.number("outlet.wall_heat_flux"), flux, 1e-10);
    checks.end();
    assert!(run.number("wall_heat") < 0.0, "heat out of the fluid is negative where it is heated");
    assert!(run.number("outlet.lowest_temperature") < run.number("outlet.temperature"));
}

#[test]
fn sections_report_what_the_run_reports_of_their_places() {
    let wall = "{kind: wall_temperature, temperature: 314 K}";
    let sections = format!("[{{name: first, length: 1 m, wall: {wall}}}, {{name: second, length: 1 m, wall: {wall}}}]");
    let case = Case::file("cases/case_a.yaml").set("sections", sections).set("mixture.viscosity", "1 mPa.s");
    let case = case.set("output.places.half", "{section: second, z: 0.5 m}").cup_at("alike", 1.5).cup_at("end", 2.0);
    let run = case.run();
    let mut checks = Checks::default();
    let mut alike = |one: &str, other: &str| checks.relative(one, run.number(one), run.number(other), 1e-12);
    alike("section.first.hot_spot.z", "hot_spot.z");
    alike("section.first.hot_spot.temperature", "hot_spot.temperature");
    alike("section.second.outlet.conversion", "outlet.conversion");
    alike("place.end.conversion", "outlet.conversion");
    alike("place.half.temperature", "place.alike.temperature");
    alike("outlet.conversion", "outlet.conversion_of.reactant");
    for name in ["pressure_drop", "wall_heat", "reaction_heat"] {
        let parts = run.number(&format!("section.first.{name}")) + run.number(&format!("section.second.{name}"));
        checks.relative(name, parts, run.number(name), 1e-12);
    }
    // The second section is hottest where it begins.
    checks.within("z of the second section's hot spot", run.number("section.second.hot_spot.z"), 0.0, 1e-9);
    checks.end();
}

#[test]
fn amounts_are_reported_alike_by_mass_by_volume_and_by_conversion() {
    let run = Case::file("cases/case_b.yaml").cup_at("middle", 3.0).run();
    let mut checks = Checks::default();
    for place in ["outlet", "place.middle"] {
        let number = |name: &str| run.number(&format!("{place}.{name}"));
        let concentration = number("density") * number("mass_fraction.styrene") / 0.10415;
        checks.relative("c = ρ w/M", number("concentration.styrene"), concentration, 1e-12);
        let left = 0.998 * (1.0 - number("conversion"));
        checks.relative("w = w_fed (1 − X)", number("mass_fraction.styrene"), left, 1e-12);
        let polymer = 1.0 - number("mass_fraction.styrene") - number("mass_fraction.aibn");
        checks.relative("w_p by difference", number("polymer_mass_fraction"), polymer, 1e-12);
        let flow = number("mass_flow") * polymer;
        checks.relative("flow of polymer", number("polymer_mass_flow"), flow, 1e-12);
        let dispersity = number("weight_average_molar_mass") / number("number_average_molar_mass");
        checks.relative("dispersity", number("dispersity"), dispersity, 1e-12);
        let velocity = number("mass_flow") / number("density") / (std::f64::consts::PI * 1e-4);
        // Volumes of tubes at unlike temperatures against the volume of their cup: second order in the spread.
        checks.relative("mean velocity", number("mean_velocity"), velocity, 1e-3);
    }
    checks.end();
}
