//! Profiles that keep their shape while they decay: the eigenfunctions of Graetz's problem, and of the third kind with
//! Bi = 2, e^{−r²} with e^{−2Z}. No feed has a profile, so the test sets the state at the inlet.
//!
//! Sellars, Tribus and Klein (1956), Trans. ASME 78, 441; Brown (1960), AIChE J. 6, 179; eigenvalues computed anew.

use axirad::discretise::rhs::System;
use axirad::integrate::march::march;
use axirad::integrate::stop::Limit;

use crate::support::{Case, Checks};

const COLD: f64 = 300.0;
const RISE: f64 = 100.0;
/// Radius of the spec [m].
const RADIUS: f64 = 0.01;

/// Eigenvalues of R″ + R′/x + λ²(1 − x²) R = 0, R′(0) = 0, R(1) = 0.
const EIGENVALUES: [f64; 6] =
    [2.704364419882532, 6.679031449346628, 10.67337953805374, 14.67107846273621, 18.66987186445122, 22.66914335883733];

/// R at x, by its power series in x², with R(0) = 1.
fn eigenfunction(lambda: f64, x: f64) -> f64 {
    let (mut before, mut last) = (0.0, 1.0);
    let mut sum = 1.0;
    for m in 1..200 {
        let next = -lambda * lambda * x * x * (last - x * x * before) / f64::from(4 * m * m);
        (before, last) = (last, next);
        sum += next;
    }
    sum
}

/// The share of a profile that is left over a length: the weighted square of the profile is projected on itself.
fn left(case: &Case, profile: impl Fn(f64) -> f64, length: f64) -> f64 {
    let spec = case.clone().set("sections.tube.length", format_args!("{length:?} m")).spec();
    let system = System::new(&spec.plant, &spec.plant.sections[0]);
    let mut inlet = system.layout.uniform(&spec.plant.feed.state);
    let geometry = system.profile(&inlet).geometry;
    for i in 0..system.layout.n_tubes {
        inlet[system.layout.temperature(i)] = COLD + RISE * profile(geometry.mean_square(i).sqrt() / RADIUS);
    }
    let limits = Limit::of(&system, None);
    let leg = march(&system, inlet.clone(), limits, &[0.0, length]).expect("conduction alone is no trouble");
    let outlet = &leg.stations.last().expect("the outlet is recorded").state;
    let product = |state: &[f64]| -> f64 {
        let theta = |state: &[f64], i: usize| state[system.layout.temperature(i)] - COLD;
        (0..system.layout.n_tubes).map(|i| system.flows[i] * theta(state, i) * theta(&inlet, i)).sum()
    };
    product(outlet) / product(&inlet)
}

#[test]
fn eigenfunctions_of_graetz_decay_with_their_eigenvalues() {
    let mut checks = Checks::default();
    for (k, lambda) in EIGENVALUES.into_iter().enumerate() {
        // Over this length e^{−λ²Z/2} is 1/2; the eigenvalue is found from what is left.
        let length = 2.0 * 2.0_f64.ln() / (lambda * lambda);
        let found = |n: usize| {
            let case = Case::file("checks/graetz.yaml").tubes(n).tolerance(1e-10);
            let left = left(&case, |x| eigenfunction(lambda, x), length);
            (-2.0 * left.ln() / length).sqrt() - lambda
        };
        let [a, b, c] = [40, 80, 160].map(found);
        let what = |name: &str| format!("{name} of λ_{k}");
        checks.within(&what("slope from 40 to 80"), (a / b).log2(), 2.0, 0.1);
        checks.within(&what("slope from 80 to 160"), (b / c).log2(), 2.0, 0.1);
        // The error of second order grows with the square of a mode's waves across a tube: 0.0315 (λ/N)² of λ.
        for (n, error) in [(40.0, a), (80.0, b), (160.0, c)] {
            checks.within(&what(&format!("error at N = {n}")), error / lambda, 0.0, 0.0315 * (lambda / n).powi(2));
        }
        if k == 0 {
            checks.within(&what("error at N = 40"), a / lambda, 0.0, 1e-3);
            checks.within(&what("error at N = 80"), b / lambda, 0.0, 2.5e-4);
        }
        // Extrapolated, what remains is of fourth order.
        checks.within(&what("extrapolated error"), (4.0 * c - b) / 3.0 / lambda, 0.0, 2e-6);
    }
    checks.end();
}

#[test]
fn a_bell_shaped_profile_keeps_its_shape_in_a_jacket_of_its_own() {
    // Bi = 2: T = T_c + e^{−x²} e^{−2Z}, exactly.
    let jacket = "{kind: jacket, coefficient: 40 W/(m2 K), coolant: {temperature: 300 K}}";
    let found = |n: usize| {
        let case = Case::file("checks/graetz.yaml").set("sections.tube.wall", jacket).tubes(n).tolerance(1e-10);
        left(&case, |x| (-x * x).exp(), 0.5) - (-1.0_f64).exp()
    };
    let [a, b, c] = [40, 80, 160].map(found);
    let mut checks = Checks::default();
    checks.within("slope from 40 to 80", (a / b).log2(), 2.0, 0.1);
    checks.within("slope from 80 to 160", (b / c).log2(), 2.0, 0.1);
    checks.relative("what is left at N = 40", a + (-1.0_f64).exp(), (-1.0_f64).exp(), 1e-3);
    checks.relative("what is left at N = 80", b + (-1.0_f64).exp(), (-1.0_f64).exp(), 2.5e-4);
    checks.relative("extrapolated", (4.0 * c - b) / 3.0 + (-1.0_f64).exp(), (-1.0_f64).exp(), 1e-7);
    checks.end();
}
