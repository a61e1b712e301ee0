//! Plug flow that is not isothermal, uniform across: the one-dimensional reactor.

use super::ALONG;
use crate::support::{Case, Checks};

/// X, T [K], t [s] of the adiabatic reactor: closed form by exponential integrals, derived for this project; a
/// quadrature agrees to 14 digits.
const ADIABATIC: [[f64; 3]; 4] = [
    [0.1, 358.0, 78.119289540033],
    [0.5, 390.0, 190.72437917986],
    [0.9, 422.0, 224.30903959315],
    [0.99, 429.2, 240.7103567043],
];

/// A jacketed reactor: U [W/(m² K)], feed [K], then hot spot: t [s], T [K], X; and X, T [K] at 600 s. Two integrators
/// of our own, explicit and implicit, agree to nine digits.
const JACKETED: [[f64; 7]; 3] = [
    [160.0, 350.0, 106.213943897, 362.537003459, 0.3626014574, 0.8517812822, 351.197262],
    [140.0, 350.0, 120.164854805, 367.718454521, 0.4824702239, 0.8893993247, 351.012741],
    [120.0, 350.0, 131.656317411, 383.372814493, 0.7488514610, 0.9657314295, 350.346144],
];

/// Temperature of the jacket [K].
const COOLANT: f64 = 350.0;

/// Tolerance of the two-dimensional program for the uniform reactor: U is in series with a film of R/(4λ), 2e-5 of
/// 1/U, and the hot spot is sensitive to U.
const NEARLY_UNIFORM: f64 = 1e-3;

#[test]
fn adiabatic_plug_flow_reaches_each_conversion_at_its_time() {
    let case = Case::file("checks/adiabatic_plug_flow.yaml");
    let places = ADIABATIC.iter().enumerate();
    let run = places.fold(case, |case, (k, row)| case.cup_at(&format!("p_{k}"), row[2] * 1e-3)).run();
    let mut checks = Checks::default();
    for (k, [conversion, temperature, _]) in ADIABATIC.into_iter().enumerate() {
        let number = |quantity: &str| run.number(&format!("place.p_{k}.{quantity}"));
        checks.relative(&format!("X of the place {k}"), number("conversion"), conversion, ALONG);
        checks.relative(&format!("T at X = {conversion}"), number("temperature"), temperature, ALONG);
        // An energy balance: linear in the unknowns, so it holds to rounding at every tolerance.
        let by_balance = 350.0 + 80.0 * number("conversion");
        checks.relative(&format!("T − T₀ − ΔT_ad X at X = {conversion}"), number("temperature"), by_balance, 1e-12);
    }
    checks.end();
}

#[test]
fn a_jacket_holds_plug_flow_below_its_hot_spot() {
    let mut checks = Checks::default();
    for [u, feed, time, hottest, conversion, at_end, temperature_at_end] in JACKETED {
        let run = Case::file("checks/jacketed_plug_flow.yaml")
            .set("sections.tube.wall.coefficient", format_args!("{u:?} W/(m2 K)"))
            .set("feed.temperature", format_args!("{feed:?} K"))
            .run();
        let what = |name: &str| format!("{name}, U = {u}");
        let rise = NEARLY_UNIFORM * (hottest - COOLANT);
        checks.within(&what("hot spot"), run.number("hot_spot.temperature"), hottest, rise);
        checks.relative(&what("its time"), 1e3 * run.number("hot_spot.z"), time, NEARLY_UNIFORM);
        checks.relative(&what("X there"), run.number("hot_spot.conversion"), conversion, NEARLY_UNIFORM);
        checks.relative(&what("X at 600 s"), run.number("outlet.conversion"), at_end, NEARLY_UNIFORM);
        let rise = NEARLY_UNIFORM * (temperature_at_end - COOLANT);
        checks.within(&what("T at 600 s"), run.number("outlet.temperature"), temperature_at_end, rise);
    }
    checks.end();
}

#[test]
fn a_cold_feed_and_a_second_order_move_the_hot_spot_as_they_should() {
    let case = Case::file("checks/jacketed_plug_flow.yaml");
    let cold = case.clone().set("feed.temperature", "340 K").run();
    let second = case
        .set("sections.tube.wall.coefficient", "120 W/(m2 K)")
        .set("reactions.decay.orders", "{reactant: 2}")
        .set("reactions.decay.rate_constant.value", "2e-6 m3/(mol s)")
        .run();
    let mut checks = Checks::default();
    let expected = [
        ("feed at 340 K", &cold, 135.334026361, 361.140233084, 0.3642831333),
        ("second order", &second, 99.982110226, 363.817039309, 0.3112913747),
    ];
    for (name, run, time, hottest, conversion) in expected {
        let rise = NEARLY_UNIFORM * (hottest - COOLANT);
        checks.within(&format!("hot spot, {name}"), run.number("hot_spot.temperature"), hottest, rise);
        checks.relative(&format!("its time, {name}"), 1e3 * run.number("hot_spot.z"), time, NEARLY_UNIFORM);
        checks.relative(&format!("X there, {name}"), run.number("hot_spot.conversion"), conversion, NEARLY_UNIFORM);
    }
    checks.end();
}
