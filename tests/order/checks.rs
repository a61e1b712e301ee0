//! Second order of what the published values and closed solutions are held by, on N = 40, 80 and 160 tubes. Their
//! errors on 40 and 80 tubes are held beside the values themselves.

use crate::support::{Case, Checks, order};

/// A spec with values set, and the quantities whose slope is held.
fn hold(checks: &mut Checks, case: &Case, quantities: &[&str]) {
    // The integrator's error stays far below the grid's: 1e-10.
    let runs = [40, 80, 160].map(|n| case.clone().tubes(n).tolerance(1e-10).run());
    for name in quantities {
        let [a, b, c] = runs.each_ref().map(|run| run.number(name));
        checks.within(&format!("slope of {name}"), order(a, b, c), 2.0, 0.1);
    }
}

#[test]
fn heat_transfer_of_the_third_kind_is_of_second_order() {
    let mut checks = Checks::default();
    for bi in [1.0, 2.0, 10.0] {
        let jacket =
            format!("{{kind: jacket, coefficient: {:?} W/(m2 K), coolant: {{temperature: 300 K}}}}", 20.0 * bi);
        let case =
            Case::file("checks/graetz.yaml").set("sections.tube.wall", jacket).set("sections.tube.length", "0.4 m");
        let case = case.cup_at("early", 0.04).cup_at("middle", 0.2);
        let quantities = ["place.early.temperature", "place.early.wall_temperature", "outlet.temperature"];
        hold(&mut checks, &case, &quantities);
    }
    checks.end();
}

#[test]
fn reaction_with_diffusion_across_is_of_second_order() {
    let mut checks = Checks::default();
    for diffusivity in ["1e-9 m2/s", "1e-8 m2/s", "1e-7 m2/s"] {
        let case = Case::file("checks/laminar_reactor.yaml").set("mixture.diffusivity", diffusivity);
        hold(&mut checks, &case.set("reactions.decay.rate_constant", "1e-3 1/s"), &["outlet.conversion"]);
    }
    hold(
        &mut checks,
        &Case::file("checks/unlike_diffusivities.yaml").set("numerics.spacing", "uniform"),
        &["outlet.conversion_of.acid", "outlet.temperature", "outlet.mass_fraction.ester"],
    );
    checks.end();
}

#[test]
fn exothermic_tubes_are_of_second_order() {
    let mut checks = Checks::default();
    for rate in ["1.5e-4 1/s", "3e-4 1/s"] {
        let case = Case::file("checks/exothermic_tube.yaml").set("reactions.decay.rate_constant.value", rate);
        let case = case.cup_at("early", 0.2).cup_at("middle", 1.0).point_at("axis", 1.0, 0.0);
        hold(
            &mut checks,
            &case,
            &[
                "place.early.temperature",
                "place.middle.temperature",
                "place.middle.conversion",
                "place.axis.temperature",
                "outlet.conversion",
                "hot_spot.temperature",
            ],
        );
    }
    checks.end();
}

#[test]
fn viscous_heating_is_of_second_order() {
    let mut checks = Checks::default();
    // On uniform faces the developed profile 1 − x⁴ has no error of second order at all.
    let case = Case::file("checks/viscous_heating.yaml").set("numerics.spacing", "equal_area").cup_at("early", 0.04);
    hold(&mut checks, &case, &["place.early.temperature", "outlet.temperature", "outlet.highest_temperature"]);
    let thinning = Case::file("checks/viscous_heating_thinning.yaml").set("mixture.viscosity.value", "4000 Pa.s");
    hold(&mut checks, &thinning, &["outlet.pressure_gradient", "outlet.velocity_ratio", "pressure_drop.friction"]);
    checks.end();
}

#[test]
fn a_steady_source_is_of_second_order() {
    let mut checks = Checks::default();
    let case = Case::file("cases/case_f.yaml").point_at("half", 3.0, 0.5);
    hold(&mut checks, &case, &["outlet.temperature", "place.half.temperature", "outlet.wall_heat_flux"]);
    checks.end();
}
