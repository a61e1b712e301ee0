//! Where along the tube of case F a temperature is first reached.

use super::{Case, Ran};

/// Temperature of wall and feed [K].
pub const T_0: f64 = 400.0;
/// Unit of θ, R_g T_0²/E [K].
pub const UNIT: f64 = 32.0 / 3.0;
/// Z per metre.
pub const Z_PER_METRE: f64 = 4.0;

/// Places that a bracket is cut into, and how often.
const PLACES: usize = 50;
const REFINEMENTS: usize = 4;

/// θ of a temperature.
pub fn theta(temperature: f64) -> f64 {
    (temperature - T_0) / UNIT
}

/// Z at which the axis first reaches each θ.
pub fn passages_of_the_axis(case: &Case, thetas: &[f64], longest: f64) -> Vec<f64> {
    passages(case, thetas, longest, "temperature")
}

/// Z at which the hottest point of the cross-section first reaches each θ.
pub fn passages_of_the_hottest(case: &Case, thetas: &[f64], longest: f64) -> Vec<f64> {
    passages(case, thetas, longest, "highest_temperature")
}

/// By places on the axis, packed ever more closely around the passage.
fn passages(case: &Case, thetas: &[f64], longest: f64, quantity: &str) -> Vec<f64> {
    let place = |(low, high): (f64, f64), k: usize| low + (high - low) * k as f64 / PLACES as f64;
    let mut brackets: Vec<(f64, f64)> = vec![(0.0, longest); thetas.len()];
    let mut found = vec![f64::NAN; thetas.len()];
    for _ in 0..REFINEMENTS {
        let mut dense = case.clone();
        for (m, bracket) in brackets.iter().enumerate() {
            for k in 0..=PLACES {
                dense = dense.point_at(&format!("p_{m}_{k}"), place(*bracket, k) / Z_PER_METRE, 0.0);
            }
        }
        let run = dense.run();
        for (m, target) in thetas.iter().enumerate() {
            let value = |k: usize| value(&run, &format!("place.p_{m}_{k}.{quantity}"));
            let k = (1..=PLACES).find(|k| value(*k) >= *target).expect("every θ of a table is reached");
            let (low, high) = (place(brackets[m], k - 1), place(brackets[m], k));
            let share = (target - value(k - 1)) / (value(k) - value(k - 1));
            found[m] = low + share * (high - low);
            brackets[m] = (low, high);
        }
    }
    found
}

/// θ of a place; beyond the end of the run it is hotter than anything.
fn value(run: &Ran, name: &str) -> f64 {
    run.0.figure(name).expect("the place was asked for").value.number().map_or(f64::INFINITY, theta)
}
