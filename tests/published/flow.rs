//! Flow in a tube: Hagen (1839); Poiseuille (1840); Bird, Stewart and Lightfoot, *Transport Phenomena*, 2nd ed.,
//! section 2.3.

use super::ALGEBRA;
use crate::support::{Case, Checks};

#[test]
fn a_newtonian_fluid_flows_as_hagen_and_poiseuille_found() {
    for profile in ["from_viscosity", "parabolic"] {
        for spacing in ["uniform", "equal_area", "towards_wall", "both_ends"] {
            let case = Case::file("checks/hagen_poiseuille.yaml").set("flow.profile", profile);
            let run = case.set("numerics.spacing", spacing).tubes(7).run();
            let mut checks = Checks::default();
            let mut hold = |name: &str, expected: f64| {
                checks.relative(&format!("{name}, {profile}, {spacing}"), run.number(name), expected, ALGEBRA);
            };
            hold("outlet.pressure_gradient", 1e5);
            hold("outlet.wall_shear_rate", 125.0); // 4Q/(πR³)
            hold("outlet.wall_shear_stress", 250.0); // GR/2
            hold("outlet.velocity_ratio", 2.0);
            hold("outlet.mean_velocity", 0.15625); // Q/(πR²)
            hold("pressure_drop.friction", 2e5); // over 2 m
            checks.end();
        }
    }
}

#[test]
fn a_flat_profile_has_the_newtonian_pressure_gradient_and_no_shear() {
    let run = Case::file("checks/hagen_poiseuille.yaml").set("flow.profile", "plug").run();
    let mut checks = Checks::default();
    checks.relative("pressure gradient", run.number("outlet.pressure_gradient"), 1e5, ALGEBRA);
    checks.relative("v_max/v̄", run.number("outlet.velocity_ratio"), 1.0, ALGEBRA);
    let shear = run.0.figure("outlet.wall_shear_rate").expect("the quantity exists");
    assert_eq!(shear.value.number(), None, "a flat profile has no shear rate");
    checks.end();
}
