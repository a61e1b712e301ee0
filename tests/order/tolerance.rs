//! The error of the integration along z falls with the relative tolerance.

use crate::support::{Case, Checks, Ran};

const FIGURES: [&str; 5] =
    ["outlet.conversion", "outlet.temperature", "hot_spot.temperature", "wall_heat", "reaction_heat"];
const OF_POLYMERS: [&str; 3] =
    ["outlet.number_average_molar_mass", "outlet.weight_average_molar_mass", "pressure_drop.friction"];

/// The worst relative error of the figures of a run.
fn worst(run: &Ran, reference: &Ran, figures: &[&str]) -> f64 {
    let error = |name: &&str| (run.number(name) / reference.number(name) - 1.0).abs();
    figures.iter().map(error).fold(0.0, f64::max)
}

fn hold(case: &str, figures: &[&str]) {
    let run = |relative: f64| Case::file(case).tubes(20).tolerance(relative).run();
    let reference = run(1e-12);
    let tolerances = [1e-5, 1e-6, 1e-7, 1e-8, 1e-9, 1e-10];
    let errors = tolerances.map(|relative| worst(&run(relative), &reference, figures));
    let mut checks = Checks::default();
    for (error, tolerance) in errors.iter().zip(tolerances) {
        // Some hundred steps, each of which may add a share of the tolerance.
        checks.within(&format!("error at a tolerance of {tolerance:e}"), *error, 0.0, 50.0 * tolerance);
    }
    assert!(errors.is_sorted_by(|looser, tighter| looser > tighter), "a tighter tolerance must show: {errors:?}");
    for pair in errors.windows(3) {
        // At order k the error goes with the tolerance to the power k/(k + 1): two decades give more than one.
        checks.within("error at a tolerance 100 times tighter, relative", pair[2] / pair[0], 0.0, 0.1);
    }
    checks.end();
}

#[test]
fn the_error_of_case_a_falls_with_the_tolerance() {
    hold("cases/case_a.yaml", &FIGURES);
}

#[test]
fn the_error_of_case_b_falls_with_the_tolerance() {
    hold("cases/case_b.yaml", &[&FIGURES[..], &OF_POLYMERS].concat());
}

#[test]
fn the_error_of_case_c_falls_with_the_tolerance() {
    hold("cases/case_c.yaml", &[&FIGURES[..], &OF_POLYMERS].concat());
}
