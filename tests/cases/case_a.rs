//! Case A: a first-order exothermic reaction in a tube with an isothermal wall, below runaway.

use super::table::{Row, check_extrapolated, check_grid, rows, with_places};
use crate::support::{Case, Checks, Ran};

/// Figure, converged value, errors at N = 40 and N = 80.
const TABLE: &str = "
X           0.76503132   +2.6e-05 +6.4e-06
Tcup        315.14133    -3.6e-04 -9.1e-05
z_hot       0.37408625   -1.6e-06 -4.1e-07
T_hot       321.29193    +5.4e-04 +1.4e-04
Xcup@0.25   0.18350174   +1.7e-05 +4.1e-06
Tcup@0.25   318.34119    -1.2e-03 -3.0e-04
T@0.25,0    320.73557    +4.3e-04 +1.1e-04
T@0.25,0.5  318.89780    +3.2e-04 +8.1e-05
T@0.25,0.9  315.11211    -4.7e-04 -1.2e-04
X@0.25,0    0.11831018   +4.6e-07 +1.2e-07
X@0.25,0.5  0.14457190   +1.0e-05 +2.5e-06
X@0.25,0.9  0.39536433   -3.1e-04 -7.6e-05
Twall@0.25  314.00000    +0.0e+00 +0.0e+00
qwall@0.25  1120.323     +1.2e-01 +2.8e-02
Xcup@0.5    0.34386871   +2.0e-05 +5.0e-06
Tcup@0.5    318.29025    -1.5e-03 -3.7e-04
T@0.5,0     320.94424    +4.8e-04 +1.2e-04
T@0.5,0.5   318.82373    +8.3e-05 +2.1e-05
T@0.5,0.9   315.01548    -7.5e-04 -1.9e-04
X@0.5,0     0.25157690   +6.7e-06 +1.7e-06
X@0.5,0.5   0.28996378   +3.1e-05 +7.9e-06
X@0.5,0.9   0.58825535   -1.6e-04 -3.9e-05
Twall@0.5   314.00000    +0.0e+00 +0.0e+00
qwall@0.5   1007.5671    +4.6e-04 +1.5e-04
Xcup@2      0.76503132   +2.6e-05 +6.4e-06
Tcup@2      315.14133    -3.6e-04 -9.1e-05
T@2,0       315.90280    +2.2e-04 +5.5e-05
T@2,0.5     315.27985    +9.3e-05 +2.3e-05
T@2,0.9     314.25490    -2.2e-04 -5.6e-05
X@2,0       0.64603436   +2.4e-05 +6.0e-06
X@2,0.5     0.73550453   -6.0e-05 -1.5e-05
X@2,0.9     0.91131905   -7.2e-06 -1.8e-06
Twall@2     314.00000    +0.0e+00 +0.0e+00
qwall@2     251.01048    -9.0e-03 -2.2e-03
";

fn case() -> Case {
    Case::file("cases/case_a.yaml")
}

fn run(rows: &[Row], n: usize) -> Ran {
    with_places(case(), rows).tubes(n).run()
}

#[test]
fn case_a_at_40_tubes_has_no_more_than_its_own_error() {
    let rows = rows(TABLE);
    check_grid(&run(&rows, 40), &rows, 40);
}

#[test]
fn case_a_at_80_tubes_has_no_more_than_its_own_error() {
    let rows = rows(TABLE);
    check_grid(&run(&rows, 80), &rows, 80);
}

#[test]
fn case_a_extrapolated_meets_the_converged_values() {
    let rows = rows(TABLE);
    let [at_80, at_160] = [80, 160].map(|n| with_places(case(), &rows).tubes(n).tolerance(1e-9).run());
    // Twice what was reached when the values were made, 1.1e-6 and 3e-6 K.
    check_extrapolated(&at_80, &at_160, &rows, 2.2e-6, 6e-6);
}

#[test]
fn case_a_has_the_converged_sensitivities_of_its_hot_spot() {
    let hot_spot = |path: &str, value: String| case().tubes(80).set(path, value).run().number("hot_spot.temperature");
    let slope = |path: &str, at: f64, step: f64, unit: &str| {
        let [below, above] = [at - step, at + step].map(|value| hot_spot(path, format!("{value:?} {unit}")));
        (above - below) / (2.0 * step)
    };
    let mut checks = Checks::default();
    // Second order in the tubes' width, N = 80; differences over ±0.1 K leave 1e-5.
    let wall = slope("sections.tube.wall.temperature", 314.0, 0.1, "K");
    checks.relative("∂T_hot/∂T_wall", wall, 1.72236, 2.5e-4);
    let feed = slope("feed.temperature", 314.0, 0.1, "K");
    checks.relative("∂T_hot/∂T_feed", feed, 0.145732, 2.5e-4);
    let fed = slope("feed.concentrations.reactant", 4000.0, 10.0, "mol/m3");
    checks.relative("∂T_hot/∂c_feed", fed, 0.00291095, 2.5e-4);
    checks.end();
}
