//! The main job: the styrene cases B and C from a resolved spec to the end of the integration.
//!
//! Prints the fastest of many runs, what they cost, and the error against a tight run on the same grid, since
//! a time says nothing without its error. `--smoke` runs once each, for the continuous integration.

use std::time::{Duration, Instant};

use axirad::simulate::{Spec, integrate, read_spec, run};

/// Runs of which the fastest counts.
const REPEATS: usize = 40;

fn main() {
    let smoke = std::env::args().any(|argument| argument == "--smoke");
    let repeats = if smoke { 1 } else { REPEATS };
    println!(
        "{:<6} {:>4} {:>8} {:>7} {:>7} {:>7} {:>10} {:>10} {:>10}",
        "case", "N", "ms", "steps", "rhs", "factor", "err X", "err M_w", "err dp"
    );
    for case in ["case_b", "case_c"] {
        for n in [40, 80] {
            let spec = read(case, n, 1e-6);
            let tight = run(&read(case, n, 1e-11), false).expect("the tight run reaches the outlet");
            let done = run(&spec, false).expect("the run reaches the outlet");
            let fastest = (0..repeats).map(|_| timed(&spec)).min().unwrap_or_default();
            let error = |name: &str| match (done.number(name), tight.number(name)) {
                (Some(value), Some(exact)) => (value / exact - 1.0).abs(),
                _ => f64::NAN,
            };
            println!(
                "{case:<6} {n:>4} {:>8.3} {:>7} {:>7} {:>7} {:>10.1e} {:>10.1e} {:>10.1e}",
                fastest.as_secs_f64() * 1e3,
                done.work.steps,
                done.work.right_hand_sides,
                done.work.factorisations,
                error("outlet.conversion"),
                error("outlet.weight_average_molar_mass"),
                error("pressure_drop"),
            );
        }
    }
}

fn timed(spec: &Spec) -> Duration {
    let start = Instant::now();
    let trajectory = integrate(&spec.plant).expect("the run reaches the outlet");
    let taken = start.elapsed();
    drop(trajectory);
    taken
}

fn read(case: &str, n: usize, tolerance: f64) -> Spec {
    let name = format!("specs/cases/{case}.yaml");
    let bytes = std::fs::read(&name).expect("the case stands in specs/cases");
    let sets = [format!("numerics.stream_tubes={n}"), format!("numerics.relative_tolerance={tolerance:e}")];
    let mut part = |path: &str| std::fs::read(path).map_err(|error| error.to_string());
    read_spec(&name, &bytes, &mut part, &sets).expect("the case is a valid spec")
}
