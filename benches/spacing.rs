//! Which spacing of the faces gives the least error at equal time, on cases B and C.
//!
//! Errors are relative to the converged values of two independent solvers; each is scaled to the time of the
//! uniform spacing by its order in N: error · (time/time of uniform)². The table stands in
//! `docs/design/spacing.md`.

use std::time::Instant;

use axirad::simulate::{integrate, read_spec, run};

/// X, M_w [kg/mol], dp [Pa] of a Chebyshev collocation solver of 48 points, confirmed by extrapolated stream
/// tubes to the digits shown; case B has no independent dp, so its own value at N = 640 stands in.
const CONVERGED: [(&str, f64, f64, f64); 2] =
    [("case_b", 0.449_943_93, 158.857_98, f64::NAN), ("case_c", 0.225_504_02, 211.667_08, 3_162.982)];

fn main() {
    let spacings: Vec<String> = ["uniform", "equal_area"]
        .map(str::to_owned)
        .into_iter()
        .chain(
            ["towards_wall", "both_ends"]
                .iter()
                .flat_map(|kind| ["1.25", "1.5", "1.75", "2"].map(|g| format!("{kind} {g}"))),
        )
        .collect();
    for (case, x, m_w, dp) in CONVERGED {
        let dp = if dp.is_nan() { figures(case, "equal_area", 640, 1e-9).0[2] } else { dp };
        println!("{case}\n{:<18} {:>9} {:>9} {:>9} {:>8} {:>12}", "spacing", "X", "M_w", "dp", "ms", "equal time");
        let mut reference = None;
        for spacing in &spacings {
            let (found, milliseconds) = figures(case, spacing, 40, 1e-7);
            let errors = [found[0] / x - 1.0, found[1] / m_w - 1.0, found[2] / dp - 1.0];
            let worst = errors.iter().fold(0.0_f64, |worst, error| worst.max(error.abs()));
            let reference = *reference.get_or_insert(milliseconds);
            let equal_time = worst * (milliseconds / reference).powi(2);
            println!(
                "{spacing:<18} {:>9.1e} {:>9.1e} {:>9.1e} {milliseconds:>8.2} {equal_time:>12.1e}",
                errors[0], errors[1], errors[2]
            );
        }
    }
}

fn figures(case: &str, spacing: &str, n: usize, tolerance: f64) -> ([f64; 3], f64) {
    let name = format!("specs/cases/{case}.yaml");
    let bytes = std::fs::read(&name).expect("the case stands in specs/cases");
    let mut words = spacing.split(' ');
    let mut sets = vec![
        format!("numerics.stream_tubes={n}"),
        format!("numerics.relative_tolerance={tolerance:e}"),
        format!("numerics.spacing={}", words.next().unwrap_or_default()),
    ];
    sets.extend(words.next().map(|grading| format!("numerics.grading={grading}")));
    let mut part = |path: &str| std::fs::read(path).map_err(|error| error.to_string());
    let spec = read_spec(&name, &bytes, &mut part, &sets).expect("the case is a valid spec");
    let done = run(&spec, false).expect("the run reaches the outlet");
    let fastest = (0..15)
        .map(|_| {
            let start = Instant::now();
            let trajectory = integrate(&spec.plant).expect("the run reaches the outlet");
            let taken = start.elapsed().as_secs_f64() * 1e3;
            drop(trajectory);
            taken
        })
        .fold(f64::INFINITY, f64::min);
    let number = |name| done.number(name).unwrap_or(f64::NAN);
    let found = [number("outlet.conversion"), number("outlet.weight_average_molar_mass"), number("pressure_drop")];
    (found, fastest)
}
