//! Thermal polymerization of styrene in a batch: Hui and Hamielec (1972), J. Appl. Polym. Sci. 16, 749, constants
//! from memory; values computed anew from the equations, with the monomer balance of the model page, §6.

use crate::support::{Case, Checks, Ran, inlet_slopes};

/// °C, rate at the start [%/h].
const AT_START: [[f64; 2]; 4] = [[100.0, 3.297443], [120.0, 12.536564], [140.0, 41.719226], [180.0, 332.335815]];

/// °C, hours, X, and M_n, M_w [g/mol] where they are given.
const BATCH: [(f64, f64, f64, Option<[f64; 2]>); 8] = [
    (100.0, 5.0, 0.1486863, None),
    (100.0, 10.0, 0.2763464, Some([477_271.7, 862_100.1])),
    (120.0, 1.0, 0.1147659, None),
    (120.0, 5.0, 0.4589637, Some([332_437.9, 614_015.2])),
    (140.0, 1.0, 0.3232415, Some([205_271.8, 364_632.1])),
    (140.0, 4.0, 0.7925546, None),
    (180.0, 0.25, 0.5030698, None),
    (180.0, 1.0, 0.8790729, Some([129_053.1, 257_635.1])),
];

/// Relative tolerance of all values: their constants are given to so many digits.
const TOLERANCE: f64 = 1e-5;
const GRAVITY: f64 = 9.80665;
/// Bore of the spec [m²].
const AREA: f64 = std::f64::consts::PI * 1e-4;

fn at(celsius: f64) -> Case {
    Case::file("checks/thermal_styrene.yaml").set("feed.temperature", format_args!("{celsius:?} degC"))
}

/// Time that a fluid element spends in plug flow: ∫ ρA dz/ṁ, from the weight of the column, ∫ ρ g dz [s].
fn residence_time(run: &Ran) -> f64 {
    run.number("pressure_drop.gravity") * AREA / (GRAVITY * run.number("outlet.mass_flow"))
}

/// The run whose residence time is the one wanted [s]: nearly proportional to length, so a few steps find it.
fn after(celsius: f64, time: f64) -> Ran {
    let mut length = time * 1e-3;
    for _ in 0..20 {
        let run = at(celsius).set("sections.tube.length", format_args!("{length:?} m")).run();
        let found = residence_time(&run);
        if (found / time - 1.0).abs() < 1e-9 {
            return run;
        }
        length *= time / found;
    }
    panic!("no length gives {time} s");
}

#[test]
fn styrene_begins_to_polymerize_at_the_rate_of_its_constants() {
    let mut checks = Checks::default();
    for [celsius, percent_an_hour] in AT_START {
        let spec = at(celsius).spec();
        let velocity = 1e-3;
        let per_second = -inlet_slopes(&spec)[0] / spec.plant.feed.state[0] * velocity;
        checks.relative(&format!("%/h at {celsius} °C"), 3.6e5 * per_second, percent_an_hour, TOLERANCE);
    }
    checks.end();
}

#[test]
fn styrene_in_a_batch_reaches_its_conversion_and_its_molar_masses() {
    let mut checks = Checks::default();
    for (celsius, hours, conversion, masses) in BATCH {
        let run = after(celsius, 3600.0 * hours);
        let what = |name: &str| format!("{name} after {hours} h at {celsius} °C");
        checks.relative(&what("X"), run.number("outlet.conversion"), conversion, TOLERANCE);
        if let Some([n, w]) = masses {
            checks.relative(&what("M_n"), 1e3 * run.number("outlet.number_average_molar_mass"), n, TOLERANCE);
            checks.relative(&what("M_w"), 1e3 * run.number("outlet.weight_average_molar_mass"), w, TOLERANCE);
        }
        checks.within(&what("temperature"), run.number("outlet.temperature"), celsius + 273.15, 1e-9); // no heat at all
    }
    checks.end();
}

#[test]
fn lumped_rate_of_styrene_is_the_one_that_was_printed() {
    // Rate at the start without chain starts: k_p √(2 k_th/k_t) [M]^2.5 = 1.963e5 e^(−10040/T) in litres; four digits.
    let mut checks = Checks::default();
    for celsius in [100.0_f64, 120.0, 140.0] {
        let temperature = celsius + 273.15;
        let monomer = (924.0 - 0.918 * celsius) / 104.15; // mol/L
        let lumped = 1.963e5 * (-10_040.0 / temperature).exp() * monomer.powf(1.5);
        let spec = at(celsius).spec();
        let per_second = -inlet_slopes(&spec)[0] / spec.plant.feed.state[0] * 1e-3;
        // Starts and transfer add about 2e-3 of the rate; four digits of the constant 5e-4; the exponent ± 0.5.
        checks.relative(&format!("rate at {celsius} °C"), per_second, lumped, 4e-3);
    }
    checks.end();
}
