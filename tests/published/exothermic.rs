//! Exothermic reactions in two dimensions: 2(1 − x²) θ_Z = ∇²θ + δ f, 2(1 − x²) X_Z = Λ ∇²X + (δ/B) f,
//! f = (1 − X) exp(θ/(1 + εθ)); B = 10, Λ = 0.01, ε = 0.04. Values computed for this project, by expansion in modes
//! and by finite volumes, extrapolated, equal to seven digits.

use super::{SECOND_ORDER, SECOND_ORDER_THIN};
use crate::support::{Case, Checks};

/// One case: δ, Bi (0: the wall at a temperature), hot spot θ and Z, and Z, cup θ, cup X, axis θ along the tube.
struct Exothermic {
    delta: f64,
    bi: f64,
    hot_spot: [f64; 2],
    along: &'static [[f64; 4]],
}

const CASES: [Exothermic; 3] = [
    Exothermic {
        delta: 1.5,
        bi: 0.0,
        hot_spot: [0.445363, 1.095],
        along: &[
            [0.2, 0.1457964, 0.0312770, 0.183655],
            [1.0, 0.2845676, 0.1576438, 0.444071],
            [3.0, 0.2011868, 0.3977611, 0.321871],
        ],
    },
    Exothermic {
        delta: 3.0,
        bi: 0.0,
        hot_spot: [1.225424, 0.989],
        along: &[
            [0.2, 0.3181873, 0.0658280, 0.403954],
            [0.5, 0.5954360, 0.1758139, 0.915611],
            [1.0, 0.7423575, 0.3571090, 1.225279],
            [2.0, 0.4170284, 0.5889766, 0.691039],
        ],
    },
    Exothermic {
        delta: 2.0,
        bi: 10.0,
        hot_spot: [0.830763, 1.157],
        along: &[
            [0.5, 0.4375889, 0.1146500, 0.599424],
            [1.0, 0.5578462, 0.2336824, 0.820371],
            [2.0, 0.4454212, 0.4223686, 0.672896],
        ],
    },
];

/// θ of a temperature: 400 K + 16 K θ.
fn theta(temperature: f64) -> f64 {
    (temperature - 400.0) / 16.0
}

fn spec(case: &Exothermic, n: usize) -> Case {
    let value = format!("{:?} 1/s", case.delta * 1e-4);
    let mut spec = Case::file("checks/exothermic_tube.yaml").tubes(n).set("reactions.decay.rate_constant.value", value);
    if case.bi > 0.0 {
        let jacket =
            format!("{{kind: jacket, coefficient: {:?} W/(m2 K), coolant: {{temperature: 400 K}}}}", 20.0 * case.bi);
        spec = spec.set("sections.tube.wall", jacket);
    }
    case.along.iter().enumerate().fold(spec, |spec, (k, row)| {
        spec.cup_at(&format!("cup_{k}"), row[0]).point_at(&format!("axis_{k}"), row[0], 0.0)
    })
}

#[test]
fn exothermic_tubes_heat_up_and_cool_down_as_by_modes() {
    for ((n, tolerance), (_, thin)) in SECOND_ORDER.into_iter().zip(SECOND_ORDER_THIN) {
        for case in &CASES {
            let run = spec(case, n).run();
            let mut checks = Checks::default();
            let what = |name: &str, z: f64| format!("{name} at Z = {z}, δ = {}, Bi = {}, N = {n}", case.delta, case.bi);
            for (k, [z, cup, conversion, axis]) in case.along.iter().enumerate() {
                let number = |place: &str, quantity: &str| run.number(&format!("place.{place}_{k}.{quantity}"));
                checks.relative(&what("cup θ", *z), theta(number("cup", "temperature")), *cup, tolerance);
                checks.relative(&what("cup X", *z), number("cup", "conversion"), *conversion, tolerance);
                checks.relative(&what("axis θ", *z), theta(number("axis", "temperature")), *axis, tolerance);
            }
            let [hottest, z] = case.hot_spot;
            checks.relative(&what("hot spot", z), theta(run.number("hot_spot.temperature")), hottest, thin);
            checks.relative(&what("place of the hot spot", z), run.number("hot_spot.z"), z, 1e-2); // its printed digits
            checks.within(&what("r/R of the hot spot", z), run.number("hot_spot.position"), 0.0, 1.0 / n as f64);
            checks.end();
        }
    }
}
