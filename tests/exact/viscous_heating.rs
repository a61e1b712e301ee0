//! Viscous heating in a tube: Brinkman (1951), Appl. Sci. Res. A2, 120; Bird (1955); with a viscosity that falls with
//! temperature Kearsley (1962), Trans. Soc. Rheol. 6, 253, and Joseph (1964), Phys. Fluids 7, 1761. Closed forms, and
//! values along the tube computed anew from the series.

use crate::support::{Case, Checks, Ran};

/// Temperature of wall and feed [K], and the unit ηū²/λ [K].
const COLD: f64 = 400.0;
const UNIT: f64 = 10.0;
/// Second order in the tubes' width, on 40 and on 80 tubes.
const SECOND_ORDER: [(usize, f64); 2] = [(40, 1e-3), (80, 2.5e-4)];
const PROFILES: [&str; 2] = ["from_viscosity", "parabolic"];

fn rise(run: &Ran, name: &str) -> f64 {
    (run.number(name) - COLD) / UNIT
}

#[test]
fn developed_viscous_heating_has_brinkmans_profile() {
    for profile in PROFILES {
        for (n, tolerance) in SECOND_ORDER {
            let case = Case::file("checks/viscous_heating.yaml").set("flow.profile", profile).tubes(n);
            let run = case.point_at("axis", 4.0, 0.0).point_at("half", 4.0, 0.5).run();
            let mut checks = Checks::default();
            let what = |name: &str| format!("{name}, {profile}, N = {n}");
            // T − T_w = 1 − x⁴ of the unit, its cup 5/6, and all the heat, G times the volume flow, leaves: Nu = 48/5.
            checks.relative(&what("axis"), rise(&run, "place.axis.temperature"), 1.0, tolerance);
            checks.relative(&what("r/R = 1/2"), rise(&run, "place.half.temperature"), 15.0 / 16.0, tolerance);
            checks.relative(&what("cup"), rise(&run, "outlet.temperature"), 5.0 / 6.0, tolerance);
            let nu = run.number("outlet.wall_heat_flux") * 0.02 / (0.2 * (run.number("outlet.temperature") - COLD));
            checks.relative(&what("Nu"), nu, 9.6, tolerance);
            checks.end();
        }
    }
}

#[test]
fn viscous_heating_develops_as_by_its_series() {
    // x*, cup, axis (or the maximum) in the unit.
    for (n, tolerance) in SECOND_ORDER {
        let case = Case::file("checks/viscous_heating.yaml").tubes(n);
        let places = [("a", 1e-3), ("b", 0.01), ("c", 0.05), ("d", 0.2)];
        let case = places
            .iter()
            .fold(case, |case, (name, x)| case.cup_at(name, 4.0 * x).point_at(&format!("axis_{name}"), 4.0 * x, 0.0));
        let run = case.run();
        let mut checks = Checks::default();
        let mut hold = |name: &str, expected: f64, tolerance: f64| {
            checks.relative(&format!("{name}, N = {n}"), rise(&run, name), expected, tolerance);
        };
        let thin = if n == 40 { 5e-3 } else { 1.5e-3 }; // a layer at the wall, near the inlet
        hold("place.a.temperature", 0.023197212, thin);
        hold("place.a.highest_temperature", 0.07675889, thin);
        hold("place.b.temperature", 0.158338335, tolerance);
        hold("place.b.highest_temperature", 0.26819623, tolerance);
        hold("place.c.temperature", 0.471301487, tolerance);
        hold("place.axis_c.temperature", 0.354484331, tolerance);
        hold("place.d.temperature", 0.793059249, tolerance);
        hold("place.axis_d.temperature", 0.927401203, tolerance);
        // Unit of the flux: ηū²/R = 200 W/m².
        let flux = run.number("place.d.wall_heat_flux") / 200.0;
        checks.relative(&format!("flux at x* = 0.2, N = {n}"), flux, 3.926363, tolerance);
        checks.end();
    }
}

#[test]
fn the_hottest_place_of_viscous_heating_wanders_from_the_wall_inwards() {
    for (x, position) in [(1e-3, 0.8786), (0.01, 0.7564)] {
        for n in [40, 80] {
            let length = format!("{:?} m", 4.0 * x);
            let run = Case::file("checks/viscous_heating.yaml").tubes(n).set("sections.tube.length", length).run();
            let mut checks = Checks::default();
            checks.within(
                &format!("r/R at x* = {x}, N = {n}"),
                run.number("hot_spot.position"),
                position,
                1.0 / n as f64,
            );
            checks.end();
        }
    }
}

#[test]
fn an_insulated_tube_warms_by_the_pressure_it_loses() {
    for profile in ["from_viscosity", "parabolic", "plug"] {
        for (n, tolerance) in SECOND_ORDER {
            let case =
                Case::file("checks/viscous_heating.yaml").set("sections.tube.wall", "{kind: insulated}").tubes(n);
            let run = case.set("flow.profile", profile).point_at("axis", 4.0, 0.0).run();
            let mut checks = Checks::default();
            let what = |name: &str| format!("{name}, {profile}, N = {n}");
            // 8 Z of the unit, = Δp/(ρ c_p): along z only, so the integrator's tolerance alone counts.
            checks.relative(&what("rise of the cup"), rise(&run, "outlet.temperature"), 8.0 * 4.0, 1e-6);
            let by_pressure = run.number("pressure_drop") / (1000.0 * 2000.0) / UNIT;
            checks.relative(&what("rise by pressure"), rise(&run, "outlet.temperature"), by_pressure, 1e-6);
            if profile != "plug" {
                // Far downstream the profile keeps its shape: the wall one unit above the cup, the axis one below.
                let cup = rise(&run, "outlet.temperature");
                checks.relative(&what("wall over cup"), rise(&run, "outlet.wall_temperature") - cup, 1.0, tolerance);
                checks.relative(&what("axis under cup"), cup - rise(&run, "place.axis.temperature"), 1.0, tolerance);
            }
            checks.end();
        }
    }
}

#[test]
fn a_fluid_thinned_by_its_own_heat_settles_to_the_closed_form() {
    // θ = β(T − T_w) = 2 ln((1 + b)/(1 + b x⁴)), b = Na/2, G/G_w = 1/(1 + b): Na, θ on the axis and of the cup, v_max/v̄.
    const BETA: f64 = 100.0;
    for [na, axis, cup, ratio] in [
        [1.0, 0.810930216216, 0.678220012471, 2.30562962705],
        [2.0, 1.38629436112, 1.16359496838, 2.57079632679],
        [10.0, 3.58351893846, 3.06712516431, 4.08647680594],
    ] {
        for (n, tolerance) in SECOND_ORDER {
            let tolerance = match (na > 5.0, n) {
                (false, _) => tolerance,
                (true, 40) => 5e-3, // a steep layer
                (true, _) => 1.5e-3,
            };
            let case = Case::file("checks/viscous_heating_thinning.yaml");
            let case = case.set("mixture.viscosity.value", format_args!("{:?} Pa.s", 2000.0 * na)).tubes(n);
            let run = case.point_at("axis", 4.0, 0.0).run();
            let mut checks = Checks::default();
            let what = |name: &str| format!("{name}, Na = {na}, N = {n}");
            let theta = |name: &str| BETA * (run.number(name) - COLD);
            checks.relative(&what("θ on the axis"), theta("place.axis.temperature"), axis, tolerance);
            checks.relative(&what("θ of the cup"), theta("outlet.temperature"), cup, tolerance);
            checks.relative(&what("v_max/v̄"), run.number("outlet.velocity_ratio"), ratio, tolerance);
            let newtonian = 8.0 * 2000.0 * na * 1e-3 / 1e-4;
            let gradient = run.number("outlet.pressure_gradient") / newtonian;
            checks.relative(&what("G/G_w"), gradient, 1.0 / (1.0 + 0.5 * na), tolerance);
            checks.end();
        }
    }
}
