//! The isothermal laminar-flow reactor: Bosworth (1948), Phil. Mag. 39, 847; Denbigh (1951), J. Appl. Chem. 1, 227;
//! the formulas as in Levenspiel, *Chemical Reaction Engineering*. Values from the closed forms and by quadrature,
//! which agree to 25 digits. With diffusion across: Cleland and Wilhelm (1956), AIChE J. 2, 489 (the problem);
//! values by eigenfunctions.

use super::{ALONG, SECOND_ORDER, SECOND_ORDER_THIN};
use crate::support::{Case, Checks, Ran};

/// Da at the places of the spec: 1/16, 1/4, 1/2 and the whole of its length.
const DAMKOEHLER: [f64; 4] = [0.25, 1.0, 2.0, 4.0];
/// X at those without diffusion: order 0, Da − Da²/4; order 1, 1 − 2E₃(Da/2); order 2, Da (1 − (Da/2) ln(1 + 2/Da)).
const ORDER_0: [f64; 4] = [0.234375, 0.75, 1.0, 1.0];
const ORDER_1: [f64; 4] = [0.2024491846, 0.5567912714, 0.7806160656, 0.9397332404];
const ORDER_2: [f64; 4] = [0.181336732, 0.4506938557, 0.6137056389, 0.7562791351];
/// X in plug flow: 1 − e^{−Da} and Da/(1 + Da).
const PLUG_1: [f64; 4] = [0.22119921692859512, 0.6321205588285577, 0.8646647167633873, 0.9816843611112658];
const PLUG_2: [f64; 4] = [0.2, 0.5, 2.0 / 3.0, 0.8];

/// Z = D L/(ū R²), then the cup's c/c₀ in a tube at Da = 1 and at Da = 2.
const WITH_DIFFUSION: [[f64; 3]; 5] = [
    [0.01, 0.431684218, 0.212975241],
    [0.03, 0.420811668, 0.203880139],
    [0.1, 0.403874797, 0.185443954],
    [0.3, 0.387167738, 0.163407785],
    [1.0, 0.374954977, 0.145767975],
];
/// The same without diffusion and in plug flow, the two limits.
const SEGREGATED: [f64; 2] = [0.443208729, 0.219383934];
const PLUG: [f64; 2] = [0.367879441, 0.135335283];

/// The case at an order of reaction, with k c₀^{n−1} = 4e-3 1/s.
fn at_order(order: f64, rate_constant: &str) -> Case {
    let case = Case::file("checks/laminar_reactor.yaml")
        .set("reactions.decay.orders", format_args!("{{reactant: {order:?}}}"))
        .set("reactions.decay.rate_constant", rate_constant);
    let places = DAMKOEHLER.iter().enumerate();
    places.fold(case, |case, (k, da)| case.cup_at(&format!("da_{k}"), da / 4.0))
}

fn order_0() -> Case {
    at_order(0.0, "4 mol/(m3 s)")
}

fn order_1() -> Case {
    at_order(1.0, "4e-3 1/s")
}

fn order_2() -> Case {
    at_order(2.0, "4e-6 m3/(mol s)")
}

fn conversions(run: &Ran) -> [f64; 4] {
    [0, 1, 2, 3].map(|k| run.number(&format!("place.da_{k}.conversion")))
}

#[test]
fn tubes_without_diffusion_convert_as_the_closed_forms() {
    for (n, tolerance) in SECOND_ORDER {
        let mut checks = Checks::default();
        for (name, case, expected) in [("first", order_1(), ORDER_1), ("second", order_2(), ORDER_2)] {
            let found = conversions(&case.tubes(n).run());
            for ((da, found), expected) in DAMKOEHLER.iter().zip(found).zip(expected) {
                // What is left, c/c₀ of the mixing cup, is held.
                checks.relative(&format!("{name} order, Da = {da}, N = {n}"), 1.0 - found, 1.0 - expected, tolerance);
            }
        }
        checks.end();
    }
}

#[test]
fn a_reaction_of_order_zero_stops_where_its_reactant_is_gone() {
    for (n, tolerance) in SECOND_ORDER_THIN {
        // The kink where a tube runs out: 5e-3 at N = 40.
        let found = conversions(&order_0().tubes(n).run());
        let mut checks = Checks::default();
        for ((da, found), expected) in DAMKOEHLER.iter().zip(found).zip(ORDER_0) {
            checks.relative(&format!("order 0, Da = {da}, N = {n}"), found, expected, tolerance);
        }
        checks.end();
    }
}

#[test]
fn broken_orders_convert_as_by_quadrature() {
    let three_halves = at_order(1.5, "1.2649110640673518e-4 m1.5/(mol0.5 s)"); // 4e-3/√1000
    let one_half = at_order(0.5, "0.12649110640673518 mol0.5/(m1.5 s)"); // 4e-3 √1000
    for (n, tolerance) in SECOND_ORDER {
        let mut checks = Checks::default();
        let at_1 = |case: &Case| case.clone().tubes(n).run().number("place.da_1.conversion");
        checks.relative(&format!("order 1.5, Da = 1, N = {n}"), at_1(&three_halves), 0.4964607828, tolerance);
        checks.relative(&format!("order 0.5, Da = 1, N = {n}"), at_1(&one_half), 0.6392132049, tolerance);
        checks.end();
    }
}

#[test]
fn plug_flow_converts_as_a_batch() {
    for (name, case, expected) in [("first", order_1(), PLUG_1), ("second", order_2(), PLUG_2)] {
        let found = conversions(&case.set("flow.profile", "plug").tubes(10).run());
        let mut checks = Checks::default();
        for ((da, found), expected) in DAMKOEHLER.iter().zip(found).zip(expected) {
            checks.relative(&format!("{name} order in plug flow, Da = {da}"), found, expected, ALONG);
        }
        checks.end();
    }
}

#[test]
fn diffusion_across_takes_a_laminar_reactor_towards_plug_flow() {
    for (n, tolerance) in SECOND_ORDER {
        let mut checks = Checks::default();
        for (column, da) in [1.0, 2.0].into_iter().enumerate() {
            let mut before = SEGREGATED[column];
            for row in WITH_DIFFUSION {
                // Over a metre, D = Z ū R²/L and k = Da ū/L.
                let run = Case::file("checks/laminar_reactor.yaml")
                    .set("mixture.diffusivity", format_args!("{:?} m2/s", row[0] * 1e-7))
                    .set("reactions.decay.rate_constant", format_args!("{:?} 1/s", da * 1e-3))
                    .tubes(n)
                    .run();
                let left = 1.0 - run.number("outlet.conversion");
                checks.relative(
                    &format!("c/c₀ at Da = {da}, Z = {}, N = {n}", row[0]),
                    left,
                    row[1 + column],
                    tolerance,
                );
                assert!(left < before && left > PLUG[column], "between segregated and plug flow");
                before = left;
            }
        }
        checks.end();
    }
}

#[test]
fn conversion_without_diffusion_is_of_second_order_in_the_width_of_the_tubes() {
    let mut checks = Checks::default();
    for (name, case, expected) in [("first", order_1(), ORDER_1[1]), ("second", order_2(), ORDER_2[1])] {
        let at = |n| case.clone().tubes(n).tolerance(1e-10).run().number("place.da_1.conversion") - expected;
        let [a, b, c] = [40, 80, 160].map(at);
        checks.within(&format!("slope from 40 to 80, {name} order"), (a / b).log2(), 2.0, 0.1);
        checks.within(&format!("slope from 80 to 160, {name} order"), (b / c).log2(), 2.0, 0.1);
        // A uniform grid is off by 3.5e-5 at N = 80: a quarter of that, and a fifth more.
        checks.within(&format!("error at N = 160, {name} order"), c, 0.0, 1.05e-5);
    }
    checks.end();
}

#[test]
fn conversions_spread_over_a_laminar_flow_as_its_residence_times() {
    // The share s of the flow that is fastest lies inside 1 − x² = √(1 − s), and stays τ/(2(1 − x²)): first order,
    // X = 1 − exp(−Da/(2√(1 − s))), Da = 1. Derived here from the parabola.
    let run =
        Case::file("checks/laminar_reactor.yaml").set("reactions.decay.rate_constant", "1e-3 1/s").tubes(80).run();
    let mut checks = Checks::default();
    for (name, share) in [("percentile_10", 0.1_f64), ("percentile_50", 0.5), ("percentile_90", 0.9)] {
        let expected = 1.0 - (-0.5 / (1.0 - share).sqrt()).exp();
        // Linear between tubes that hold some hundredths of the flow each.
        checks.relative(name, run.number(&format!("outlet.conversion.{name}")), expected, 1e-3);
    }
    checks.end();
}
