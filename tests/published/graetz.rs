//! Heat transfer in developed laminar flow: Graetz (1883); Sellars, Tribus and Klein (1956), Trans. ASME 78, 441;
//! Brown (1960), AIChE J. 6, 179; Shah and London, *Laminar Flow Forced Convection in Ducts* (1978); of the third
//! kind Hickman (1974), J. Heat Transfer 96, 354, and Hsu (1968). All values computed anew from the series.

use super::{SECOND_ORDER, SECOND_ORDER_THIN};
use crate::support::{Case, Checks, Ran};

/// Temperature of the wall or the coolant, and what the feed is above it [K].
const COLD: f64 = 300.0;
const RISE: f64 = 100.0;
/// D_h/λ [m² K/W].
const DIAMETER_OVER_CONDUCTIVITY: f64 = 0.02 / 0.2;
/// z = 4 x* in metres, with the numbers of the spec.
const METRES: f64 = 4.0;

/// x*, Θ_m, Nu_x, Θ on the axis.
const WALL_TEMPERATURE: [[f64; 4]; 9] = [
    [1e-4, 0.98656692, 22.27854, 1.0],
    [3e-4, 0.97251220, 15.27730, 1.0],
    [1e-3, 0.940318377, 10.1301925, 1.0],
    [3e-3, 0.880570699, 7.04322006, 1.0],
    [0.01, 0.751105672, 4.91606403, 0.99946959],
    [0.02, 0.628027626, 4.17243318, 0.97269988],
    [0.05, 0.395298782, 3.70998831, 0.70123619],
    [0.1, 0.189710052, 3.65807265, 0.34184382],
    [0.2, 0.0439349850, 3.65679420, 0.07919800],
];

/// Bi, λ₁, Nu∞, then Θ_m and Θ_w at x* = 0.01, 0.05, 0.1.
const THIRD_KIND: [[f64; 9]; 3] = [
    [1.0, 1.64124968, 4.1241699, 0.938280667, 0.700724393, 0.749808128, 0.510355256, 0.572183018, 0.385591397],
    [2.0, 2.0, 4.0, 0.900005232, 0.529893072, 0.640565094, 0.325115045, 0.428539755, 0.214448007],
    [10.0, 2.51675247, 3.76287715, 0.805849112, 0.167215212, 0.462818857, 0.074526866, 0.244911902, 0.038803605],
];

/// Where flow and temperature are developed: modes but the first are below 1e-9 there.
const DEVELOPED: [f64; 2] = [0.4, 0.6];

fn case() -> Case {
    Case::file("checks/graetz.yaml")
}

fn jacketed(bi: f64) -> Case {
    let jacket = format!("{{kind: jacket, coefficient: {:?} W/(m2 K), coolant: {{temperature: 300 K}}}}", 20.0 * bi);
    case().set("sections.tube.wall", jacket)
}

/// The case with the mixing cup at every x*, as places `cup_0`, `cup_1`, …, and with the axis there.
fn at(case: Case, places: &[f64]) -> Case {
    places.iter().enumerate().fold(case, |case, (k, x)| {
        case.cup_at(&format!("cup_{k}"), METRES * x).point_at(&format!("axis_{k}"), METRES * x, 0.0)
    })
}

fn theta(run: &Ran, quantity: &str) -> f64 {
    (run.number(quantity) - COLD) / RISE
}

/// Nu of the fluid's own film, q D_h/(λ (T_m − T_w)).
fn nusselt(run: &Ran, place: &str) -> f64 {
    let number = |quantity: &str| run.number(&format!("place.{place}.{quantity}"));
    number("wall_heat_flux") * DIAMETER_OVER_CONDUCTIVITY / (number("temperature") - number("wall_temperature"))
}

/// λ from the decay e^{−2λ²x*} of the mixing cup between the places `cup_0` and `cup_1`.
fn decay(run: &Ran) -> f64 {
    let [first, second] = [0, 1].map(|k| theta(run, &format!("place.cup_{k}.temperature")));
    ((first / second).ln() / (2.0 * (DEVELOPED[1] - DEVELOPED[0]))).sqrt()
}

#[test]
fn a_wall_at_a_temperature_cools_the_fluid_as_graetz_found() {
    for ((n, tolerance), (_, thin)) in SECOND_ORDER.into_iter().zip(SECOND_ORDER_THIN) {
        let places = WALL_TEMPERATURE.map(|row| row[0]);
        let run = at(case().tubes(n), &places).run();
        let mut checks = Checks::default();
        for (k, [x, cup, nu, axis]) in WALL_TEMPERATURE.into_iter().enumerate() {
            let what = |name: &str| format!("{name} at x* = {x} with N = {n}");
            let tolerance_nu = if x <= 3e-4 { thin } else { tolerance };
            checks.relative(&what("Θ_m"), theta(&run, &format!("place.cup_{k}.temperature")), cup, tolerance);
            checks.relative(&what("Nu"), nusselt(&run, &format!("cup_{k}")), nu, tolerance_nu);
            checks.relative(
                &what("Θ on the axis"),
                theta(&run, &format!("place.axis_{k}.temperature")),
                axis,
                tolerance,
            );
        }
        checks.end();
    }
}

#[test]
fn heat_transfer_is_of_second_order_in_the_width_of_the_tubes() {
    let places = WALL_TEMPERATURE.map(|row| row[0]);
    let runs = [40, 80, 160].map(|n| at(case().tubes(n).tolerance(1e-10), &places).run());
    let mut checks = Checks::default();
    for (k, [x, cup, nu, _]) in WALL_TEMPERATURE.into_iter().enumerate() {
        let errors = runs.each_ref().map(|run| theta(run, &format!("place.cup_{k}.temperature")) - cup);
        let of_nu = runs.each_ref().map(|run| nusselt(run, &format!("cup_{k}")) - nu);
        for (name, [a, b, c], value) in [("Θ_m", errors, cup), ("Nu", of_nu, nu)] {
            let what = format!("{name} at x* = {x}");
            checks.within(&format!("slope from 40 to 80, {what}"), (a / b).log2(), 2.0, 0.1);
            checks.within(&format!("slope from 80 to 160, {what}"), (b / c).log2(), 2.0, 0.1);
            // A quarter of what 80 tubes may be off by; 1e-4 is next to the inlet's jump.
            let tolerance = if x <= 3e-4 { 1.5e-3 } else { 2.5e-4 } / 4.0;
            checks.within(&format!("error at N = 160, {what}"), c, 0.0, tolerance * value);
        }
    }
    checks.end();
}

#[test]
fn developed_heat_transfer_has_its_nusselt_number() {
    // Wall at a temperature 3.65679346 and plug flow 5.78318596 (= 2.404826²).
    for (profile, nu) in [("parabolic", 3.65679346), ("plug", 5.78318596)] {
        for (n, tolerance) in SECOND_ORDER {
            let run = at(case().set("flow.profile", profile).tubes(n), &DEVELOPED).run();
            let mut checks = Checks::default();
            checks.relative(&format!("Nu, {profile}, N = {n}"), nusselt(&run, "cup_1"), nu, tolerance);
            checks.end();
        }
    }
}

#[test]
fn developed_heat_decays_with_the_first_eigenvalue_of_graetz() {
    for (n, tolerance) in SECOND_ORDER {
        let run = at(case().tubes(n), &DEVELOPED).run();
        let mut checks = Checks::default();
        checks.relative(&format!("λ₀, N = {n}"), decay(&run), 2.704364419882532, tolerance);
        checks.end();
    }
}

#[test]
fn a_jacket_cools_the_fluid_through_its_own_film_in_series() {
    for (n, tolerance) in SECOND_ORDER {
        let mut checks = Checks::default();
        for [bi, eigenvalue, nu, at_1 @ ..] in THIRD_KIND {
            let run = at(jacketed(bi).tubes(n), &[0.01, 0.05, 0.1]).run();
            for k in 0..3 {
                let what = |name: &str| format!("{name} at the place {k}, Bi = {bi}, N = {n}");
                let cup = theta(&run, &format!("place.cup_{k}.temperature"));
                let wall = theta(&run, &format!("place.cup_{k}.wall_temperature"));
                checks.relative(&what("Θ_m"), cup, at_1[2 * k], tolerance);
                checks.relative(&what("Θ_w"), wall, at_1[2 * k + 1], tolerance);
            }
            let run = at(jacketed(bi).tubes(n), &DEVELOPED).run();
            checks.relative(&format!("λ₁, Bi = {bi}, N = {n}"), decay(&run), eigenvalue, tolerance);
            checks.relative(&format!("Nu, Bi = {bi}, N = {n}"), nusselt(&run, "cup_1"), nu, tolerance);
        }
        checks.end();
    }
}
