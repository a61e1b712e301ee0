//! Second order in the tubes' width, held by the slope and by the error itself.

use crate::support::{Case, Checks, Ran, order};

/// A figure with its converged value and the error it may have at N = 160.
struct Figure {
    name: &'static str,
    converged: f64,
    at_160: f64,
}

const fn figure(name: &'static str, converged: f64, at_160: f64) -> Figure {
    Figure { name, converged, at_160 }
}

/// Converged values of case B; errors: 1.2 × a quarter of what stream tubes have at N = 80, and the rounding of
/// the value's last digit.
const CASE_B: [Figure; 6] = [
    figure("outlet.conversion", 0.44994393, 1.03e-6),
    figure("outlet.number_average_molar_mass", 59.558334, 2.14e-4),
    figure("outlet.weight_average_molar_mass", 158.85798, 1.21e-3),
    figure("outlet.dispersity", 2.6672670, 3e-5),
    figure("hot_spot.temperature", 384.25955, 2.7e-5),
    figure("hot_spot.z", 1.7423855, 1.63e-5),
];

/// The same of case C.
const CASE_C: [Figure; 6] = [
    figure("outlet.conversion", 0.22550402, 2.4e-6),
    figure("outlet.number_average_molar_mass", 78.306704, 2.7e-4),
    figure("outlet.weight_average_molar_mass", 211.66708, 2e-3),
    figure("outlet.temperature", 384.78919, 5.2e-4),
    figure("hot_spot.temperature", 406.66815, 2.2e-3),
    figure("pressure_drop.friction", 3162.982, 2.02),
];

/// Slopes of the error from N = 40 to 80 and over N = 80, 160, 320, and the error at N = 160.
fn hold_second_order(case: &Case, figures: &[Figure]) {
    // The integrator's error must stay far below the grid's: 1e-10.
    let runs: [Ran; 4] = [40, 80, 160, 320].map(|n| case.clone().tubes(n).tolerance(1e-10).run());
    let mut checks = Checks::default();
    for figure in figures {
        let name = figure.name;
        let [a, b, c, d] = runs.each_ref().map(|run| run.number(name));
        let first = ((a - figure.converged) / (b - figure.converged)).abs().log2();
        // From 40 tubes on the next term of the expansion still shows: 0.15. From 80 on it does not: 0.1.
        checks.within(&format!("slope of {name} from N = 40 to 80"), first, 2.0, 0.15);
        checks.within(&format!("slope of {name} over N = 80, 160, 320"), order(b, c, d), 2.0, 0.1);
        checks.within(&format!("{name} at N = 160"), c, figure.converged, figure.at_160);
    }
    checks.end();
}

#[test]
fn case_b_is_of_second_order_in_the_width_of_the_tubes() {
    hold_second_order(&Case::file("cases/case_b.yaml"), &CASE_B);
}

#[test]
fn case_c_is_of_second_order_in_the_width_of_the_tubes() {
    hold_second_order(&Case::file("cases/case_c.yaml"), &CASE_C);
}

#[test]
fn every_spacing_of_the_faces_is_of_second_order_and_leads_to_the_same_values() {
    let mut checks = Checks::default();
    for spacing in ["equal_area", "towards_wall", "both_ends"] {
        let case = Case::file("cases/case_b.yaml").set("numerics.spacing", spacing).tolerance(1e-10);
        let runs = [40, 80, 160].map(|n| case.clone().tubes(n).run());
        for figure in CASE_B.iter().filter(|figure| figure.name.starts_with("outlet")) {
            let [a, b, c] = runs.each_ref().map(|run| run.number(figure.name));
            let what = format!("{} with {spacing}", figure.name);
            checks.within(&format!("slope of {what}"), order(a, b, c), 2.0, 0.1);
            // As for the uniform faces of case B: twice what extrapolation reached when the values were made.
            checks.relative(&format!("{what}, extrapolated"), (4.0 * c - b) / 3.0, figure.converged, 2e-6);
        }
    }
    checks.end();
}
